"""Heights, lengths and the bending of the air, read from text into SI units."""

import re
from typing import Final

from profiler.cli.characters import LONGEST_TEXT, echo, number_from, one_alphabet
from profiler.constants import (
    FOOT_M,
    M_PER_KM,
    MILE_M,
    NAUTICAL_MILE_M,
    US_SURVEY_FOOT_M,
)
from profiler.errors import InputError

#: Below this a ke is more likely a kr written in the wrong place [1]; our choice: no
#: path has a ke so low, and a kr above it is rare.
KE_LIKE_KR: Final = 0.3

_HEIGHT_UNITS: Final = {
    **dict.fromkeys(("", "m", "metre", "metres", "meter", "meters"), 1.0),
    **dict.fromkeys(("ft", "foot", "feet"), FOOT_M),
    **dict.fromkeys(("us-ft", "us ft", "usft", "us_ft"), US_SURVEY_FOOT_M),
}
_LENGTH_UNITS: Final = {
    **_HEIGHT_UNITS,
    **dict.fromkeys(("km", "kilometre", "kilometres"), M_PER_KM),
    **dict.fromkeys(("mi", "mile", "miles"), MILE_M),
    "nmi": NAUTICAL_MILE_M,
}
_GRADIENT_UNITS: Final = {"": 1.0, "n/km": 1.0, "n-units/km": 1.0}
_NUMBER_THEN_UNIT: Final = re.compile(r"([+-]?[0-9.,]+(?:e[+-]?[0-9]+)?)(.*)", re.I)
_NAMED: Final = re.compile(r"([a-z]+) ?= ?(.*)", re.I)


def parse_height(text: str) -> float:
    """Height of a mast, a tree or the ground: 20m, 65ft, 65 us-ft; alone, metres.

    Parameters
    ----------
    text : str
        A plain decimal number, then m, ft or us-ft or nothing. It may be negative:
        some ground lies below the sea. Above what, the option says.

    Returns
    -------
    float [m]
        Finite.

    Raises
    ------
    InputError
        If the number or the unit cannot be read.
    """
    return _with_unit(text, what="height", units=_HEIGHT_UNITS, named="m, ft or us-ft")


def parse_length(text: str) -> float:
    """Distance along the ground: 50m, 12km, 2mi, 5nmi, 100ft; alone, metres.

    Parameters
    ----------
    text : str
        A plain decimal number, not negative, then a unit or nothing.

    Returns
    -------
    float [m]
        Finite, 0 or more.

    Raises
    ------
    InputError
        If the number or the unit cannot be read, or the length is negative.
    """
    named = "m, km, mi (mile), nmi (nautical mile), ft or us-ft"
    length_m = _with_unit(text, what="length", units=_LENGTH_UNITS, named=named)
    if length_m < 0.0:
        msg = f"Length {echo(text)} is below 0; give 0 or more."
        raise InputError(msg)
    return length_m


def parse_ke(text: str) -> float:
    """Effective earth radius factor: 4/3 or 1.333.

    Parameters
    ----------
    text : str
        A plain decimal number or a fraction of two.

    Returns
    -------
    float [1]
        Finite, > 0. `ke_looks_like_kr` tells whether to warn about it.

    Raises
    ------
    InputError
        If it is no number, is not above 0, or names another quantity.
    """
    if one_alphabet(text).lower() in ("inf", "infinity", "∞"):
        msg = "An infinite ke is a ray as curved as the earth: write --kr 1."
        raise InputError(msg)
    ke = _fraction(text, option="ke")
    if ke <= 0.0:
        msg = (
            f"ke {echo(text)} is not above 0: ke is the effective earth radius "
            "divided by the true one, 4/3 for radio. State a duct by kr or by the "
            "gradient."
        )
        raise InputError(msg)
    return ke


def parse_kr(text: str) -> float:
    """Coefficient of refraction: 0.13, 1/7 or -2.

    Parameters
    ----------
    text : str
        A plain decimal number or a fraction of two.

    Returns
    -------
    float [1]
        Finite; curvature of the ray divided by the earth's.

    Raises
    ------
    InputError
        If it is no number or names another quantity.
    """
    return _fraction(text, option="kr")


def parse_n_gradient(text: str) -> float:
    """Refractivity gradient dN/dh in N-units a kilometre: -39 or -39N/km.

    Parameters
    ----------
    text : str
        A plain decimal number, then N/km or nothing.

    Returns
    -------
    float [N/km]
        Finite; about -39 is normal for radio.

    Raises
    ------
    InputError
        If the number or the unit cannot be read.
    """
    _refuse_named(one_alphabet(text), option="n-gradient")
    return _with_unit(text, what="gradient", units=_GRADIENT_UNITS, named="N/km")


def ke_looks_like_kr(ke: float) -> bool:
    """Whether a ke [1] is so small that a kr was probably meant: 0 < ke < 0.3."""
    return 0.0 < ke < KE_LIKE_KR


def bare_k_message() -> str:
    """Sentence that tells ke and kr apart, for whoever wrote a bare k."""
    return (
        "k alone has two meanings. Write ke for the effective earth radius factor "
        "(radio, 4/3 normal) or kr for the coefficient of refraction (light and "
        "survey, 0.13 normal)."
    )


def _with_unit(text: str, *, what: str, units: dict[str, float], named: str) -> float:
    plain = one_alphabet(text)
    if not plain:
        msg = f"A {what} is missing: give a number in {named}."
        raise InputError(msg)
    parts = _NUMBER_THEN_UNIT.fullmatch(plain) if len(plain) <= LONGEST_TEXT else None
    if parts is None:
        msg = f"{echo(text)} is not a {what}: give a number in {named}."
        raise InputError(msg)
    number, unit = parts[1], parts[2].strip()
    value = number_from(number)
    if unit.lower() not in units:
        msg = f"{number} what? {echo(unit)} is not a unit known here: use {named}."
        raise InputError(msg)
    return value * units[unit.lower()]


def _fraction(text: str, *, option: str) -> float:
    plain = one_alphabet(text)
    _refuse_named(plain, option=option)
    top, stroke, bottom = plain.partition("/")
    if not stroke:
        return number_from(plain)
    divisor = number_from(bottom)
    if divisor == 0.0:
        msg = f"{echo(text)} divides by 0; write {option} as a number or a fraction."
        raise InputError(msg)
    ratio = number_from(top) / divisor
    if ratio in (float("inf"), float("-inf")):
        msg = f"{echo(text)} is too large."
        raise InputError(msg)
    return ratio


def _refuse_named(plain: str, *, option: str) -> None:
    named = _NAMED.fullmatch(plain)
    if named is None:
        return
    if named[1].lower() == "k":
        raise InputError(bare_k_message())
    msg = f"{echo(plain)}: give --{option} the number alone: --{option} {named[2]}."
    if named[1].lower() in ("ke", "kr") and named[1].lower() != option:
        msg = f"{echo(plain)} is not a {option}: use --{named[1].lower()} {named[2]}."
    raise InputError(msg)
