"""A point as a person writes it: degrees, a grid's easting and northing, a name."""

import re
from collections.abc import Collection
from dataclasses import dataclass
from typing import Final

from profiler.cli.angles import Angle
from profiler.cli.characters import LONGEST_TEXT, echo, one_alphabet
from profiler.cli.iso6709 import lat_lon_from_iso_6709
from profiler.cli.pairs import refuse_decimal_commas, refuse_pair, two_angles
from profiler.constants import QUARTER_TURN_DEG, TURN_DEG
from profiler.errors import InputError

#: A number above this is no angle but a distance on a grid [1]; our choice.
GRID_ABOVE: Final = 1000.0
#: The largest easting or northing taken [grid unit]; above the Earth's girth in feet.
MAX_GRID: Final = 2.0e8

_GRID_NUMBER: Final = r"([+-]?[0-9]+(?:\.[0-9]*)?)"
_GRID_PAIR: Final = re.compile(rf"{_GRID_NUMBER}(?: ?[,;] ?| ){_GRID_NUMBER}")
_LETTER_OR_MARK: Final = re.compile(r"[^\W\d_]|[°'\":]")
_NO_NUMBER: Final = re.compile(r"[+-]?(?:nan|inf|infinity)", re.IGNORECASE)
_DIGITS: Final = re.compile(r"[+-]?[0-9.]*")
#: A word, or a letter with a whole number such as E12, is a name, not half a point.
_SHORT_NAME: Final = re.compile(r"[A-Za-z]+ ?[0-9]*")
_LETTER_O: Final = re.compile(r"[0-9°'\"] ?[oO](?![A-Za-z])")


@dataclass(frozen=True, slots=True)
class LatLon:
    """A place in degrees of WGS84."""

    lat_deg: float
    """-90 to 90, north positive."""
    lon_deg: float
    """-360 to 360, east positive."""


@dataclass(frozen=True, slots=True)
class EastingNorthing:
    """A place on the grid of a CRS that is stated elsewhere; easting first."""

    x: float
    """Easting [unit of the CRS]."""
    y: float
    """Northing [unit of the CRS]."""


@dataclass(frozen=True, slots=True)
class SiteName:
    """The name of a place in a file of sites."""

    text: str
    """As typed, without blanks at the ends."""


def parse_point(
    text: str, *, crs_given: bool = False, names: Collection[str] = ()
) -> LatLon | EastingNorthing | SiteName:
    """Place that a text states.

    Parameters
    ----------
    text : str
        ``57.1,-4.2`` (latitude, longitude), ``48 12 33.1 N, 21 30 12.4 W`` and its
        relatives, ISO 6709 ``+481233.1-0213012.4/``, easting and northing, or a name.
    crs_given : bool
        Whether a CRS is stated, so that two plain numbers are easting, northing. A
        text with hemisphere letters or degree signs is a latitude and longitude all
        the same.
    names : collection of str
        Names of known sites; a text that equals one is that name, whatever else it
        could mean.

    Returns
    -------
    LatLon, EastingNorthing or SiteName

    Raises
    ------
    InputError
        If it is none of them; the sentence says how to write it.

    Examples
    --------
    >>> parse_point("21.5W 48.25N")
    LatLon(lat_deg=48.25, lon_deg=-21.5)
    """
    name = SiteName(text.strip())
    plain = one_alphabet(text)
    if name.text in names:
        return name
    _refuse_no_text(plain)
    may_be_iso = plain.endswith("/") or not crs_given
    if may_be_iso and (iso := lat_lon_from_iso_6709(plain)):
        return _in_range(*iso)
    if _SHORT_NAME.fullmatch(plain):
        return name
    if crs_given and not _LETTER_OR_MARK.search(plain):
        return _easting_northing(plain)
    angles = two_angles(plain)
    if angles is None:
        _refuse_meant_as_point(plain)
        return name
    return _lat_lon(*angles, plain=plain, crs_given=crs_given)


def _refuse_no_text(plain: str) -> None:
    if not any(sign.isalnum() for sign in plain):
        shown = f"{echo(plain)} is no point" if plain else "A point is missing"
        msg = f'{shown}: write "latitude,longitude" such as "57.1,-4.2", or a name.'
        raise InputError(msg)
    if len(plain) > LONGEST_TEXT:
        msg = f"{echo(plain)} is too long for a point: {len(plain)} characters."
        raise InputError(msg)
    words = re.split("[ ,;]+", plain)
    others = [word for word in words if not _DIGITS.fullmatch(word)]
    if others and all(_NO_NUMBER.fullmatch(word) for word in others):
        msg = f"{echo(plain)}: a point needs two finite numbers."
        raise InputError(msg)


def _refuse_meant_as_point(plain: str) -> None:
    """Refuse a text that is not read but is no name either."""
    if "°" in plain and _LETTER_O.search(plain):
        msg = f"{echo(plain)}: the letter O is west in some languages; write E or W."
        raise InputError(msg)
    if "°" in plain or not any(sign.isalpha() for sign in plain):
        refuse_pair(plain)


def _easting_northing(plain: str) -> EastingNorthing:
    refuse_decimal_commas(plain)
    pair = _GRID_PAIR.fullmatch(plain)
    if pair is None:
        msg = (
            f"{echo(plain)}: with --crs write easting,northing as two plain numbers, "
            "or latitude and longitude with the letters N, S, E, W."
        )
        raise InputError(msg)
    x, y = float(pair[1]), float(pair[2])
    for value, what in ((x, "Easting"), (y, "Northing")):
        if abs(value) > MAX_GRID:
            msg = f"{what} {value:g} is too large: the limit is {MAX_GRID:g}."
            raise InputError(msg)
    return EastingNorthing(x, y)


def _lat_lon(first: Angle, second: Angle, *, plain: str, crs_given: bool) -> LatLon:
    if max(abs(first.value_deg), abs(second.value_deg)) > GRID_ABOVE:
        msg = (
            "These look like easting, northing. Add --crs EPSG:n, or --crs dem for "
            "the DEM's own."
        )
        if crs_given:
            msg = f"{echo(plain)}: write easting,northing without letters or marks."
        raise InputError(msg)
    if bool(first.axis) != bool(second.axis):
        msg = f"{echo(plain)}: give a letter N, S, E, W to both angles or to neither."
        raise InputError(msg)
    if first.axis and first.axis == second.axis:
        msg = f"{echo(plain)} gives two {first.axis}s; use N or S once, E or W once."
        raise InputError(msg)
    if first.axis == "longitude":
        return _in_range(second.value_deg, first.value_deg, lettered=True)
    return _in_range(first.value_deg, second.value_deg, lettered=bool(first.axis))


def _in_range(lat_deg: float, lon_deg: float, *, lettered: bool = True) -> LatLon:
    if abs(lat_deg) > QUARTER_TURN_DEG:
        msg = f"Latitude {lat_deg:.9g} is outside -90 to 90 degrees."
        if (
            not lettered
            and abs(lon_deg) <= QUARTER_TURN_DEG
            and abs(lat_deg) <= TURN_DEG
        ):
            msg += (
                " With latitude and longitude exchanged the point fits: "
                f'"{lon_deg:.9g},{lat_deg:.9g}".'
            )
        raise InputError(msg)
    if abs(lon_deg) > TURN_DEG:
        msg = f"Longitude {lon_deg:.9g} is outside -360 to 360 degrees."
        raise InputError(msg)
    return LatLon(lat_deg, lon_deg)
