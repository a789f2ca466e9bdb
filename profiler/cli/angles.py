"""One angle on the earth, read from degrees, minutes, seconds and a letter."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from profiler.errors import InputError

#: Minutes in a degree, and seconds in a minute [1].
SIXTY: Final = 60.0

_PIECE: Final = re.compile(
    r"\s*(?:(?P<number>[0-9]+(?:\.[0-9]*)?|\.[0-9]+)|(?P<sign>[+-])(?=[0-9.])"
    r"|(?P<mark>[°'\"])|(?P<colon>:)|(?P<word>[A-Za-z]+))"
)
_MARKS: Final = ("°", "'", '"')
_MARK_WORDS: Final = {
    **dict.fromkeys(("d", "deg", "degree", "degrees"), "°"),
    **dict.fromkeys(("m", "min", "minute", "minutes"), "'"),
    **dict.fromkeys(("sec", "second", "seconds"), '"'),
}
_HEMISPHERES: Final = {
    **{letter: letter.upper() for letter in "nsew"},
    **{word: word[0].upper() for word in ("north", "south", "east", "west")},
}
_AXES: Final = {"N": "latitude", "S": "latitude", "E": "longitude", "W": "longitude"}


@dataclass(frozen=True, slots=True)
class Token:
    """A number, sign, mark, hemisphere or colon."""

    kind: str
    """number, sign, mark, hemisphere or colon."""
    text: str
    """As typed; a mark is one of ° ' ", a hemisphere one of N S E W."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Angle:
    """An angle, and which of the two it is if a letter said so."""

    value_deg: float
    """North and east positive [deg]."""
    axis: str
    """latitude, longitude, or empty when no letter was given."""


def tokens_of(plain: str) -> tuple[Token, ...] | None:
    """Pieces of an angle, or of two in a row.

    Parameters
    ----------
    plain : str
        Text from `one_alphabet`, without separating commas.

    Returns
    -------
    tuple of Token, or None
        None if something stands there that no angle contains: it is a name.
    """
    tokens: list[Token] = []
    after_letters = False  # the last mark was the m of 48d12m33.1s: an s may follow
    at, end = 0, len(plain.rstrip())
    while at < end:
        piece = _PIECE.match(plain, at)
        if piece is None or piece.lastgroup is None:
            return None
        at = piece.end()
        kind, text = piece.lastgroup, piece[piece.lastgroup]
        if kind != "word":
            tokens.append(Token(kind, text))
            continue
        follows_number = bool(tokens) and tokens[-1].kind == "number"
        read = _word(text, follows_number=follows_number, after_letters=after_letters)
        if read is None:
            return None
        after_letters = read[-1] == Token("mark", "'")
        tokens.extend(read)
    return tuple(tokens)


def _word(
    text: str, *, follows_number: bool, after_letters: bool
) -> tuple[Token, ...] | None:
    word = text.lower()
    if follows_number and after_letters and text == "s":
        return (Token("mark", '"'),)
    if word in _HEMISPHERES:
        return (Token("hemisphere", _HEMISPHERES[word]),)
    if not follows_number:
        return None
    if word in _MARK_WORDS:
        return (Token("mark", _MARK_WORDS[word]),)
    mark = '"' if word[:-1] == "s" else _MARK_WORDS.get(word[:-1])
    if mark is not None and word[-1] in _HEMISPHERES:
        return Token("mark", mark), Token("hemisphere", _HEMISPHERES[word[-1]])
    return None


def angle_from(tokens: Sequence[Token], *, text: str) -> Angle:
    """Angle made of 1 to 3 numbers with their marks and one letter or sign.

    Parameters
    ----------
    tokens : sequence of Token
        The pieces of this angle.
    text : str
        What the error message repeats.

    Returns
    -------
    Angle
        Not checked for its range.

    Raises
    ------
    InputError
        If the pieces make no angle, minutes or seconds reach 60, a number before
        the last has decimals, or both a sign and a letter are given.
    """
    rest = list(tokens)
    letters = [token.text for token in rest if token.kind == "hemisphere"]
    if rest and rest[0].kind == "hemisphere":
        rest.pop(0)
    elif rest and rest[-1].kind == "hemisphere":
        rest.pop()
    sign = rest.pop(0).text if rest and rest[0].kind == "sign" else ""
    if sign and letters:
        msg = f"{text}: give a sign or a letter N, S, E, W, not both."
        raise InputError(msg)
    size_deg = from_sexagesimal(_numbers(rest, text=text), text=text)
    negative = sign == "-" or letters in (["S"], ["W"])
    return Angle(
        value_deg=-size_deg if negative else size_deg,
        axis=_AXES[letters[0]] if letters else "",
    )


def _numbers(tokens: Sequence[Token], *, text: str) -> list[str]:
    """Texts of the numbers, once every mark and colon stands where it may."""
    numbers: list[str] = []
    last = "colon"  # a number is due
    for token in tokens:
        fits = {
            "number": len(numbers) < len(_MARKS),
            "mark": last == "number" and token.text == _MARKS[len(numbers) - 1],
            "colon": last == "number" and token is not tokens[-1],
        }
        if not fits.get(token.kind, False):
            msg = (
                f"Cannot read {text} as an angle; write degrees, minutes and seconds "
                "as 48 12 33.1 N, or decimal degrees as 48.20919."
            )
            raise InputError(msg)
        if token.kind == "number":
            numbers.append(token.text)
        last = token.kind
    if not numbers or len({token.text for token in tokens} & {":", "°"}) > 1:
        msg = f"Cannot read {text} as an angle; write it as 48.20919 or 48 12 33.1 N."
        raise InputError(msg)
    return numbers


def from_sexagesimal(numbers: Sequence[str], *, text: str) -> float:
    """Size of an angle [deg] from its degrees, minutes and seconds, in this order.

    Parameters
    ----------
    numbers : sequence of 1 to 3 str
        Unsigned decimal numbers; only the last may have decimals.
    text : str
        What the error message repeats.

    Returns
    -------
    float [deg]
        0 or more.

    Raises
    ------
    InputError
        If minutes or seconds reach 60 or a number before the last has decimals.
    """
    if any("." in number for number in numbers[:-1]):
        msg = (
            f"{text}: only the last number of an angle may have decimals; write "
            "48.20919, 48 12.552 or 48 12 33.1."
        )
        raise InputError(msg)
    size_deg = float(numbers[0])
    unit_deg = 1.0
    for name, number in zip(("Minutes", "Seconds"), numbers[1:], strict=False):
        if float(number) >= SIXTY:
            msg = f"{name} {number} in {text} must be below 60."
            raise InputError(msg)
        unit_deg /= SIXTY
        size_deg += float(number) * unit_deg
    return size_deg
