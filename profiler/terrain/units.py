"""Units of heights: what a band or a CRS may call each of them."""

from typing import Final

from profiler.errors import InputError

#: Spellings met in band units and CRS axes (common practice), lower case.
_SPELLINGS: Final = {
    "m": "m",
    "metre": "m",
    "metres": "m",
    "meter": "m",
    "meters": "m",
    "ft": "ft",
    "foot": "ft",
    "feet": "ft",
    "international foot": "ft",
    "us-ft": "us-ft",
    "us_ft": "us-ft",
    "ftus": "us-ft",
    "us survey foot": "us-ft",
    "us survey feet": "us-ft",
    "foot_us": "us-ft",
    "us foot": "us-ft",
}


def unit_from_text(text: str | None) -> str | None:
    """Name of a height unit as stated in a file: m, ft, us-ft; None if unknown."""
    return None if text is None else _SPELLINGS.get(text.strip().lower())


def checked_unit(text: str) -> str:
    """Name of a height unit that a person declared.

    Raises
    ------
    InputError
        If it is none of m, ft, us-ft.
    """
    unit = unit_from_text(text)
    if unit is None:
        msg = f'Height unit "{text}" is not known. Say m, ft or us-ft.'
        raise InputError(msg)
    return unit
