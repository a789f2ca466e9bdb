"""One named place, and what its columns are called in the files people have."""

import math
import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Final

from profiler.constants import FOOT_M, LOWEST_GROUND_M, VOID_BELOW_M
from profiler.errors import InputError
from profiler.model import Note, Point

#: Headings of the name, the most telling first.
NAME_HEADINGS: Final = ("name", "site", "site_name", "station", "label", "title", "id")
#: Headings of a remark.
NOTE_HEADINGS: Final = ("note", "notes", "remark", "desc", "description", "comment")
#: Headings of the surveyed ground and the metres in their unit.
GROUND_HEADINGS: Final[Mapping[str, float]] = {
    **dict.fromkeys(("ground_m", "surveyed_ground_m", "ele_m", "elevation_m"), 1.0),
    **dict.fromkeys(("ground", "ele", "elev", "elevation"), 1.0),
    **dict.fromkeys(("ground_ft", "ele_ft", "elev_ft", "elevation_ft"), FOOT_M),
}
_NUMBER: Final = re.compile(r"[+-]?(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?")


@dataclass(frozen=True, slots=True, kw_only=True)
class Site:
    """A named place from a file."""

    name: str
    """As the file has it, without blanks at the ends; not empty."""
    point: Point
    """Where it is."""
    surveyed_ground_m: float | None = None
    """Elevation of the ground that the file states [m]; None when it states none."""
    note: str = ""
    """Remark that the file makes on it."""


@dataclass(frozen=True, slots=True, kw_only=True)
class SiteFile:
    """The sites of a file, and what was left out of them."""

    sites: tuple[Site, ...]
    """In the order of the file."""
    notes: tuple[Note, ...] = ()
    """What was skipped, and how much of it."""


def plain_heading(heading: str) -> str:
    """Heading in small letters, with one underscore for whatever parts its words."""
    return re.sub(r"[^a-z0-9]+", "_", heading.casefold()).strip("_")


def column_of(headings: Sequence[str], wanted: Sequence[str]) -> int | None:
    """Index of the column whose heading stands first among the wanted ones."""
    plain = [plain_heading(heading) for heading in headings]
    for heading in wanted:
        if heading in plain:
            return plain.index(heading)
    return None


def ground_from(value: object, *, heading: str, where: str) -> float | None:
    """Surveyed ground in a cell, in metres.

    Parameters
    ----------
    value : str, number or None
        The cell; in feet if its heading says so.
    heading : str
        Heading of the column.
    where : str
        Row or site, for the error message.

    Returns
    -------
    float [m], or None
        None for an empty cell.

    Raises
    ------
    InputError
        If the cell holds no number, or one that no ground has.
    """
    if value is None or (isinstance(value, float) and math.isnan(value)):
        return None
    text = str(value).strip()
    if not text:
        return None
    ground_m = decimal_from(text, what="ground", where=where)
    ground_m *= GROUND_HEADINGS[plain_heading(heading)]
    if not LOWEST_GROUND_M <= ground_m <= VOID_BELOW_M:
        msg = (
            f"{where}: ground {text} under {heading} is outside "
            f"{LOWEST_GROUND_M:g} to {VOID_BELOW_M:g} m; leave it empty if unknown."
        )
        raise InputError(msg)
    return ground_m


def decimal_from(text: str, *, what: str, where: str) -> float:
    """Number in a cell of a file, in any unit.

    Parameters
    ----------
    text : str
        The cell without blanks at its ends.
    what, where : str
        Quantity and row, for the error message.

    Returns
    -------
    float
        Finite, or infinite if the exponent is too large.

    Raises
    ------
    InputError
        If it is no decimal number.
    """
    plain = text.replace("−", "-")
    if _NUMBER.fullmatch(plain):
        return float(plain)
    if plain.count(",") == 1 and _NUMBER.fullmatch(plain.replace(",", ".")):
        fixed = plain.replace(",", ".")
        msg = f'{where}: {what} "{text}": write decimals with a point, {fixed}.'
        raise InputError(msg)
    msg = f'{where}: {what} "{text}" is not a decimal number.'
    raise InputError(msg)
