"""Two angles in one text: where the first ends, and what is wrong otherwise."""

import re
from collections.abc import Sequence
from typing import Final, NoReturn

from profiler.cli.angles import Angle, Token, angle_from, tokens_of
from profiler.cli.characters import echo
from profiler.errors import InputError

_COMMA_AS_POINT: Final = re.compile(r"(?<=[0-9]),(?=[0-9])")
_FOUR_BY_COMMAS: Final = re.compile(r"([+-]?[0-9]+),([0-9]+),([+-]?[0-9]+),([0-9]+)")
_NUMBER: Final = re.compile(r"[0-9]+(?:\.[0-9]*)?")
_DASH_BETWEEN: Final = re.compile(r"(?<=[0-9])-(?=[0-9])")
_EXPONENT: Final = re.compile(r"[0-9][eE][+-]?[0-9]")
_COUNTS: Final = ("No", "One", "Two", "Three", "Four", "Five", "Six", "Seven", "Eight")
#: A point with a height added has so many numbers [1].
_WITH_HEIGHT: Final = 3


def two_angles(plain: str) -> tuple[Angle, Angle] | None:
    """Both angles of a pair, in the order typed.

    Parameters
    ----------
    plain : str
        Text from `one_alphabet`; a comma, a semicolon, a letter, a sign or a blank
        parts the angles.

    Returns
    -------
    tuple of Angle, or None
        None if something stands there that no angle contains: it is a name.

    Raises
    ------
    InputError
        If the text is made of numbers, marks and letters but is no pair of angles.
    """
    if sum(letter.isalpha() for letter in plain) > 1:
        plain = _DASH_BETWEEN.sub(" ", plain)  # 57-06-00N 004-12-00W, as airmen write
    read = [tokens_of(part) for part in re.split("[,;]", plain)]
    parts = [part for part in read if part is not None]
    if len(parts) < len(read):
        return None
    numbers = [token.text for part in parts for token in part if token.kind == "number"]
    if not numbers:
        return None
    refuse_decimal_commas(plain)
    _refuse_other_counts(plain, numbers, has_comma=len(parts) > 1)
    if len(parts) == 1:
        parts = _split(parts[0], plain)
    if len(parts) != 2 or not all(parts):
        refuse_pair(plain)
    first, second = (angle_from(part, text=echo(plain)) for part in parts)
    return first, second


def refuse_pair(plain: str) -> NoReturn:
    """Refuse a text that was meant as a point, and show the forms that are read.

    Raises
    ------
    InputError
        Always.
    """
    msg = (
        f'Cannot read {echo(plain)} as a point; write "57.1,-4.2" or '
        '"48 12 33.1 N, 21 30 12.4 W".'
    )
    raise InputError(msg)


def refuse_decimal_commas(plain: str) -> None:
    """Refuse a pair of numbers written with decimal commas, showing it with points.

    Raises
    ------
    InputError
        If the numbers have decimal commas.
    """
    numbers = _NUMBER.findall(plain)
    commas = len(_COMMA_AS_POINT.findall(plain))
    if four := _FOUR_BY_COMMAS.fullmatch(plain):
        said = f"{four[1]}.{four[2]},{four[3]}.{four[4]}"
    elif len(numbers) > _WITH_HEIGHT and (
        commas == 2 or (commas == 1 and ";" in plain)
    ):
        said = _COMMA_AS_POINT.sub(".", plain)
    else:
        return
    if any("." in number for number in numbers):
        return
    count = _COUNTS[len(numbers)] if len(numbers) < len(_COUNTS) else "Too many"
    msg = f"{count} numbers: write decimals with points: {said}."
    raise InputError(msg)


def _refuse_other_counts(
    plain: str, numbers: Sequence[str], *, has_comma: bool
) -> None:
    if _EXPONENT.search(plain) and not re.search("[nswNSW]", plain):
        msg = f"{echo(plain)}: write the numbers in plain digits, without an exponent."
        raise InputError(msg)
    if len(numbers) == 1 and has_comma:
        msg = f'One number, {echo(plain)}. Put the pair in quotes: "57.1,-4.2".'
        raise InputError(msg)
    if len(numbers) == 1:
        msg = f'One number, {echo(plain)}. A point has two: "57.1,-4.2".'
        raise InputError(msg)
    if len(numbers) == _WITH_HEIGHT and len(re.split("[,;]", plain)) == _WITH_HEIGHT:
        msg = (
            f"Three numbers, {echo(plain)}: a point is latitude,longitude; give a "
            "height by its own option."
        )
        raise InputError(msg)


def _split(tokens: tuple[Token, ...], plain: str) -> list[tuple[Token, ...]]:
    """Cut a row of tokens where the second angle begins."""
    letters = [i for i, token in enumerate(tokens) if token.kind == "hemisphere"]
    degrees = [i for i, token in enumerate(tokens) if token.text == "°"]
    signs = [i for i, token in enumerate(tokens) if token.kind == "sign" and i > 0]
    numbers = [i for i, token in enumerate(tokens) if token.kind == "number"]
    if len(letters) == 2 and letters[0] > 0:
        cut = letters[0] + 1
    elif len(letters) == 2 and letters[1] < len(tokens) - 1:
        cut = letters[1]
    elif signs and _DASH_BETWEEN.search(plain):
        refuse_pair(plain)  # 57.1-4.2: a minus or a dash?
    elif signs:
        cut = signs[0]
    elif len(degrees) == 2:
        cut = degrees[1] - 1
    else:
        cut = numbers[len(numbers) // 2]
    return [tokens[:cut], tokens[cut:]]
