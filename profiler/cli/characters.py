"""What people type and paste, brought into one alphabet before it is parsed."""

import re
import unicodedata
from typing import Final

from profiler.errors import InputError

#: The longest text that is read as a number, a height or a point [characters]; our
#: choice: the longest sensible point, in degrees, minutes and seconds, has about 60.
LONGEST_TEXT: Final = 200
#: How much of a text an error message repeats [characters]; our choice.
ECHO_CHARACTERS: Final = 60

#: Signs that keyboards, maps and word processors use for one thing (Unicode names:
#: degree, ordinal, ring, prime, quotation marks, dashes, full-width forms).
_ALIKE: Final = {
    "°": "\u00ba\u02da\u2218\u2070\u1d52",
    "'": "\u2032\u2018\u2019\u201a\u201b\u02b9\u02bc\u02ca\u00b4\u0060\u2035\uff07",
    '"': "\u2033\u201c\u201d\u201e\u201f\u02ba\u02dd\u2036\u3003\uff02",
    "-": "\u2212\u2010\u2011\u2012\u2013\u2014\u2015\u207b\ufe63\uff0d",
    "+": "\ufe62\uff0b",
    ",": "\uff0c\u3001\u060c",
    ".": "\uff0e\u066b",
    ";": "\uff1b",
    ":": "\uff1a\u2236",
    "/": "\u2044\u2215\uff0f",
}
#: Marks without width that are pasted along with a text.
_INVISIBLE: Final = "\u200b\u200c\u200d\u200e\u200f\u2060\ufeff\u202a\u202c\u2066\u2069"
_TABLE: Final = str.maketrans(
    {sign: plain for plain, signs in _ALIKE.items() for sign in signs}
    | dict.fromkeys(_INVISIBLE, "")
)
_NUMBER: Final = re.compile(r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)")
_DECIMAL_COMMA: Final = re.compile(r"([+-]?[0-9]+),([0-9]+)")
_THOUSANDS: Final = re.compile(r"[+-]?[1-9][0-9]{0,2}(?:,[0-9]{3})+")
_EXPONENT: Final = re.compile(r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)e[+-]?[0-9]+", re.I)


def one_alphabet(text: str) -> str:
    """Printable text with ASCII digits and signs, single blanks and none at the ends.

    Digits of any script become 0 to 9 by their Unicode decimal value; degree,
    minute and second signs become ``°``, ``'`` and ``"``. Letters stay as they are.

    Parameters
    ----------
    text : str
        Anything.

    Returns
    -------
    str
        Never longer than ``text``, but for a doubled minute sign read as seconds.
    """
    plain = text.translate(_TABLE).replace("''", '"')
    signs = (
        str(unicodedata.decimal(sign)) if sign.isdecimal() else sign for sign in plain
    )
    return " ".join("".join(s if s.isprintable() else " " for s in signs).split())


def echo(text: str) -> str:
    """Text as an error message repeats it: on one line, printable, in quotes, short."""
    shown = "".join(sign if sign.isprintable() else " " for sign in text).strip()
    if len(shown) > ECHO_CHARACTERS:
        shown = shown[:ECHO_CHARACTERS].rstrip() + "…"
    return f'"{shown}"'


def number_from(text: str) -> float:
    """Finite number written in plain decimals, such as 12, -0.5 or .5.

    Parameters
    ----------
    text : str
        The number alone, in any unit; digits of any script, no exponent.

    Returns
    -------
    float
        Finite.

    Raises
    ------
    InputError
        If the text is not such a number: the sentence says how to write it.
    """
    plain = one_alphabet(text)
    if not plain:
        msg = "A number is missing."
        raise InputError(msg)
    if _THOUSANDS.fullmatch(plain):
        msg = (
            f"{echo(plain)} can be read in two ways: write {plain.replace(',', '')} "
            f"or {plain.replace(',', '.', 1).replace(',', '')}."
        )
        raise InputError(msg)
    if comma := _DECIMAL_COMMA.fullmatch(plain):
        msg = f"{echo(plain)}: write decimals with a point: {comma[1]}.{comma[2]}."
        raise InputError(msg)
    if _EXPONENT.fullmatch(plain):
        msg = f"{echo(plain)}: write the number in plain digits, without an exponent."
        raise InputError(msg)
    if len(plain) > LONGEST_TEXT or not _NUMBER.fullmatch(plain):
        msg = f"{echo(plain)} is not a number."
        raise InputError(msg)
    return float(plain)  # finite: LONGEST_TEXT is below the 309 digits of overflow
