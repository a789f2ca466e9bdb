"""How the record rounds: metres to 3 decimals, degrees to 9, ratios to 6, dB to 3."""

import math
from typing import Final, overload

#: Decimals of metres, degrees, ratios and decibels in every record.
M_DECIMALS: Final = 3
DEG_DECIMALS: Final = 9
RATIO_DECIMALS: Final = 6
DB_DECIMALS: Final = 3


@overload
def metres(value: float) -> float: ...
@overload
def metres(value: None) -> None: ...
@overload
def metres(value: float | None) -> float | None: ...
def metres(value: float | None) -> float | None:
    """Metres (or minutes of arc) as the record writes them."""
    return _rounded(value, M_DECIMALS)


@overload
def metres_up(value: float) -> float: ...
@overload
def metres_up(value: None) -> None: ...
@overload
def metres_up(value: float | None) -> float | None: ...
def metres_up(value: float | None) -> float | None:
    """Metres that must suffice, rounded up; what rounding left over is no reason to."""
    if value is None:
        return None
    steps = round(value * 10**M_DECIMALS, M_DECIMALS)
    return math.ceil(steps) / 10**M_DECIMALS


def metres_down(value: float) -> float:
    """Metres that must not be passed, rounded down."""
    return math.floor(value * 10**M_DECIMALS) / 10**M_DECIMALS


def deg(value: float) -> float:
    """Degrees as the record writes them."""
    return round(float(value), DEG_DECIMALS) + 0.0


def ratio(value: float | None) -> float | None:
    """A ratio as the record writes it."""
    return _rounded(value, RATIO_DECIMALS)


def db(value: float) -> float:
    """Decibels as the record writes them."""
    return round(float(value), DB_DECIMALS) + 0.0


def _rounded(value: float | None, decimals: int) -> float | None:
    # adding 0.0 turns -0.0, which a reader would take for a sign, into 0.0
    return None if value is None else round(float(value), decimals) + 0.0
