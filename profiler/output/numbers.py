"""Numbers as people read them, in metres and kilometres or feet and miles."""

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final

from profiler.constants import FOOT_M, HALF_TURN_DEG, M_PER_KM, MILE_M
from profiler.earth import within_half_turn
from profiler.errors import InputError

#: Paths shorter than this are told in metres or feet [m]; our choice.
SHORT_PATH_M: Final = 2000.0
#: Heights below these are told with two and three decimals instead of one [m].
TWO_DECIMALS_BELOW: Final = 0.95
THREE_DECIMALS_BELOW: Final = 0.0095

#: Decimals of a latitude or longitude in the words [1]; about a metre.
DEG_DECIMALS: Final = 5

#: Below these an angle would be told as 0.0′ [′] and a share as 0% [1].
HALF_TENTH: Final = 0.05
HALF_PERCENT: Final = 0.005

#: Ways of rounding.
NEAREST: Final = "nearest"
UP: Final = "up"
DOWN: Final = "down"
#: Digits after the last shown one that still count when rounding up or down [1].
RECORD_DIGITS: Final = 6

#: Files whose cells differ by less have the same posts [1]; our choice.
SAME_POSTS: Final = 1.05
#: Sides of cells from this on are told in whole metres [m]; our choice.
WHOLE_METRES_FROM: Final = 9.5


@dataclass(frozen=True, slots=True, kw_only=True)
class Show:
    """How lengths are shown in one telling."""

    unit: str = "m"
    """m or ft."""
    path_m: float = math.inf
    """Length of the path, which settles whether distances are in km or m."""

    def __post_init__(self) -> None:
        """Refuse other units."""
        if self.unit not in ("m", "ft"):
            msg = f'Heights can be shown in m or ft, not "{self.unit}".'
            raise InputError(msg)

    @property
    def _height_unit_m(self) -> float:
        return 1.0 if self.unit == "m" else FOOT_M

    def bare_height(self, value_m: float, *, rounding: str = NEAREST) -> str:
        """A height without its unit: one decimal, more when it is small.

        Parameters
        ----------
        value_m : float [m]
        rounding : str
            `NEAREST`; `UP` for what must suffice; `DOWN` for what must not be passed.
        """
        value = value_m / self._height_unit_m
        return rounded_text(value, _decimals(abs(value)), rounding=rounding)

    def height(self, value_m: float, *, rounding: str = NEAREST) -> str:
        """A height with its unit."""
        return f"{self.bare_height(value_m, rounding=rounding)} {self.unit}"

    def given(self, value_m: float) -> str:
        """A height that a person gave, without a decimal it does not need."""
        return f"{self.bare_height(value_m).removesuffix('.0')} {self.unit}"

    def run(self, value_m: float) -> str:
        """A length of part of the path: short ones in metres or feet."""
        if value_m < (M_PER_KM if self.unit == "m" else MILE_M):
            return f"{value_m / self._height_unit_m:.0f} {self.unit}"
        return self.distance(value_m)

    def arcmin(self, value: float) -> str:
        """A small angle in minutes of arc; beside feet the sign ′ would be a foot's."""
        sign = "′" if self.unit == "m" else " arcmin"
        if value < HALF_TENTH:
            return f"under 0.1{sign}"
        return f"{value:.1f}{sign}"

    @property
    def distance_unit(self) -> str:
        """Unit of distances along the path."""
        if self.path_m < SHORT_PATH_M:
            return self.unit
        return "km" if self.unit == "m" else "mi"

    def bare_distance(self, value_m: float) -> str:
        """A distance along the path without its unit."""
        unit = self.distance_unit
        if unit in ("m", "ft"):
            return f"{value_m / self._height_unit_m:.0f}"
        return f"{value_m / (M_PER_KM if unit == 'km' else MILE_M):.2f}"

    def distance(self, value_m: float) -> str:
        """A distance along the path with its unit."""
        return f"{self.bare_distance(value_m)} {self.distance_unit}"

    def length(self, value_m: float) -> str:
        """A length of the whole path: one decimal more than places on it."""
        unit = self.distance_unit
        if unit in ("m", "ft"):
            return f"{value_m / self._height_unit_m:.1f} {unit}"
        return f"{value_m / (M_PER_KM if unit == 'km' else MILE_M):.3f} {unit}"


def _decimals(value: float) -> int:
    if value < THREE_DECIMALS_BELOW and value > 0.0:
        return 3
    return 2 if 0.0 < value < TWO_DECIMALS_BELOW else 1


def rounded_text(value: float, decimals: int, *, rounding: str = NEAREST) -> str:
    """A number with so many decimals, rounded to the nearest, up or down; no "-0".

    Parameters
    ----------
    value : float
        In any unit.
    decimals : int
    rounding : str
        `NEAREST`, `UP` or `DOWN`.
    """
    scale = 10.0**decimals
    # digits past the record's own are no reason to go a whole step further
    steps = round(value * scale, RECORD_DIGITS)
    if rounding == UP:
        steps = math.ceil(steps)
    elif rounding == DOWN:
        steps = math.floor(steps)
    return f"{round(steps / scale, decimals) + 0.0:.{decimals}f}"


def latitude(value_deg: float, decimals: int = DEG_DECIMALS) -> str:
    """A latitude with its letter; five decimals are about a metre."""
    text = f"{abs(value_deg):.{decimals}f}"
    return f"{text} {'N' if value_deg >= 0.0 else 'S'}"


def longitude(value_deg: float, decimals: int = DEG_DECIMALS) -> str:
    """A longitude with its letter."""
    text = f"{abs(value_deg):.{decimals}f}"
    return f"{text} {'E' if value_deg >= 0.0 else 'W'}"


def box(south: float, west: float, north: float, east: float, *, decimals: int) -> str:
    """A box of latitude and longitude [deg]; east may run past 180.

    Parameters
    ----------
    south, west, north, east : float [deg]
    decimals : int
        Of every latitude and longitude.
    """
    west, east = (
        lon if abs(lon) <= HALF_TURN_DEG else within_half_turn(lon)
        for lon in (west, east)
    )
    lats = _span(latitude(south, decimals), latitude(north, decimals))
    return f"{lats}, {_span(longitude(west, decimals), longitude(east, decimals))}"


def _span(first: str, last: str) -> str:
    same_letter = first[-1] == last[-1]
    return f"{first[:-2] if same_letter else first} to {last}"


def place(lat_deg: float, lon_deg: float) -> str:
    """A place in latitude and longitude."""
    return f"{latitude(lat_deg)} {longitude(lon_deg)}"


def percent(share: float) -> str:
    """A share in whole per cent; neither 0 nor 100 unless it is exactly that."""
    if 0.0 < share < HALF_PERCENT:
        return "under 1%"
    if 1.0 - HALF_PERCENT < share < 1.0:
        return "over 99%"
    return f"{share:.0%}"


def count(value: int) -> str:
    """A whole number with its thousands set apart."""
    return f"{value:,}".replace(",", " ")


def ratio(value: float, decimals: int = 3, *, rounding: str = NEAREST) -> str:
    """A ratio with at most so many decimals, no trailing zeros.

    Parameters
    ----------
    value : float [1]
    decimals : int
    rounding : str
        `NEAREST`, `UP` or `DOWN`.
    """
    text = rounded_text(value, decimals, rounding=rounding)
    return text.rstrip("0").rstrip(".") if "." in text else text


def posts_text(cells_m: Sequence[Sequence[float]]) -> str:
    """How far apart posts stand: "posts 5 x 5 to 31 x 21 m".

    Parameters
    ----------
    cells_m : sequence of two float [m]
        Of each file, down a column and along a row; at least one file.
    """
    cells = sorted(cells_m, key=max)
    told = cells[:1]
    if max(cells[-1]) > SAME_POSTS * max(cells[0]):
        told.append(cells[-1])
    sides = " to ".join(" x ".join(_side(side) for side in cell) for cell in told)
    return f"posts {sides} m"


def _side(side_m: float) -> str:
    return f"{side_m:.0f}" if side_m >= WHOLE_METRES_FROM else ratio(side_m, 1)
