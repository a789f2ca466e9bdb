"""Frequencies and clearance criteria, read from text."""

import re
from typing import Final

from profiler.cli.characters import LONGEST_TEXT, echo, number_from, one_alphabet
from profiler.cli.quantities import parse_height, parse_ke
from profiler.errors import InputError
from profiler.radio.criteria import Criterion
from profiler.radio.waves import HIGHEST_FREQUENCY_HZ, LOWEST_FREQUENCY_HZ

#: Hertz in the units a frequency is written in.
_FREQUENCY_UNITS: Final = {"hz": 1.0, "khz": 1e3, "mhz": 1e6, "ghz": 1e9}
_NUMBER_THEN_UNIT: Final = re.compile(r"([+-]?[0-9.,]+) ?([a-z]*)", re.I)


def parse_frequency(text: str) -> float:
    """Frequency with its unit: 6GHz, 868 MHz.

    Parameters
    ----------
    text : str
        A plain decimal number and Hz, kHz, MHz or GHz.

    Returns
    -------
    float [Hz]
        10 MHz to 300 GHz.

    Raises
    ------
    InputError
        If it is no number, has no unit or lies outside that band.
    """
    plain = one_alphabet(text)
    parts = _NUMBER_THEN_UNIT.fullmatch(plain) if len(plain) <= LONGEST_TEXT else None
    if parts is None:
        msg = f"{echo(text)} is no frequency. Write 7.5GHz or 868MHz."
        raise InputError(msg)
    number, unit = parts[1], parts[2].lower()
    value = number_from(number)
    if not unit:
        msg = f"{number} what? Write {number}GHz or {number}MHz."
        raise InputError(msg)
    if unit not in _FREQUENCY_UNITS:
        msg = f"{number} what? {echo(parts[2])} is no unit: write {number}GHz."
        raise InputError(msg)
    frequency = value * _FREQUENCY_UNITS[unit]
    if not LOWEST_FREQUENCY_HZ <= frequency <= HIGHEST_FREQUENCY_HZ:
        msg = f"{echo(text)} is outside 10 MHz to 300 GHz."
        raise InputError(msg)
    return frequency


def parse_criterion(text: str) -> Criterion:
    """A clearance criterion: "ke=4/3 f1=0.6 extra=3m", in any order.

    Parameters
    ----------
    text : str
        ke and f1 are needed, extra (a height) is not; each with its key.

    Raises
    ------
    InputError
        If a key is missing, unknown or given twice, or a value cannot be used.
    """
    plain = one_alphabet(text)
    if not plain or len(plain) > LONGEST_TEXT:
        msg = 'Write a criterion as "ke=4/3 f1=0.6 extra=3m".'
        raise InputError(msg)
    values: dict[str, str] = {}
    for word in re.sub(r" ?= ?", "=", plain).replace(",", " ").split():
        key, equals, value = word.partition("=")
        key = key.lower()
        if not equals or key not in ("ke", "f1", "extra"):
            msg = f'{echo(word)} in a criterion: write "ke=4/3 f1=0.6 extra=3m".'
            raise InputError(msg)
        if key in values:
            msg = f"{key} stands twice in the criterion {echo(text)}."
            raise InputError(msg)
        values[key] = value
    for key in ("ke", "f1"):
        if key not in values:
            msg = f'{key} is missing in {echo(text)}: write "ke=4/3 f1=0.6 extra=3m".'
            raise InputError(msg)
    return Criterion(
        ke=parse_ke(values["ke"]),
        f1_fraction=number_from(values["f1"]),
        extra_m=parse_height(values.get("extra", "0m")),
    )
