"""What a person asks: points, stations and the state of the air."""

import math
from dataclasses import dataclass
from numbers import Real

from profiler.constants import HALF_TURN_DEG, KR_LIGHT, QUARTER_TURN_DEG, TURN_DEG
from profiler.errors import InputError


def _check_numbers(what: str, *values: object) -> None:
    """Refuse text and truth values where a number is needed."""
    for value in values:
        if value is not None and (
            isinstance(value, bool) or not isinstance(value, Real)
        ):
            msg = f"{what} needs numbers, not {value!r}."
            raise InputError(msg)


@dataclass(frozen=True, slots=True, kw_only=True)
class Point:
    """A place on the WGS84 ellipsoid."""

    lat_deg: float
    """Latitude, −90 to 90, north positive."""
    lon_deg: float
    """Longitude, east positive; any turn is accepted and kept within ±180."""

    def __post_init__(self) -> None:
        """Refuse what is no place and bring the longitude into ±180."""
        _check_numbers("A point", self.lat_deg, self.lon_deg)
        if not (math.isfinite(self.lat_deg) and math.isfinite(self.lon_deg)):
            msg = (
                f"A point needs two finite numbers, not {self.lat_deg}, {self.lon_deg}."
            )
            raise InputError(msg)
        if abs(self.lat_deg) > QUARTER_TURN_DEG:
            msg = f"Latitude {self.lat_deg:g} is outside -90 to 90 degrees."
            raise InputError(msg)
        if abs(self.lon_deg) > TURN_DEG:
            msg = f"Longitude {self.lon_deg:g} is outside -360 to 360 degrees."
            raise InputError(msg)
        if abs(self.lon_deg) > HALF_TURN_DEG:
            turned = self.lon_deg - math.copysign(TURN_DEG, self.lon_deg)
            object.__setattr__(self, "lon_deg", turned)


@dataclass(frozen=True, slots=True, kw_only=True)
class Station:
    """An end of the path: a place and how high its eye or top stands."""

    point: Point
    """Where it stands."""
    name: str = ""
    """What it is called in the answer; empty: its role is named instead."""
    agl_m: float | None = None
    """Height above ground [m], not negative; None when ``amsl_m`` is given."""
    amsl_m: float | None = None
    """Height above the DEM's vertical datum [m]; None when ``agl_m`` is given."""
    surveyed_ground_m: float | None = None
    """Surveyed elevation of the ground [m], used instead of the DEM's; or None."""
    survey_gap_m: float = 0.0
    """Both answers are given when survey and DEM differ by more than this [m]."""

    def __post_init__(self) -> None:
        """Refuse two heights, none, or one that is no height."""
        if (self.agl_m is None) == (self.amsl_m is None):
            msg = (
                "A station needs one height: above ground (agl_m) or above sea level "
                "(amsl_m), not both and not neither."
            )
            raise InputError(msg)
        heights = (self.agl_m, self.amsl_m, self.surveyed_ground_m)
        _check_numbers("A station", *heights)
        for value in heights:
            if value is not None and not math.isfinite(value):
                msg = f"A height must be a finite number of metres, not {value}."
                raise InputError(msg)
        if self.agl_m is not None and self.agl_m < 0.0:
            msg = f"Height above ground {self.agl_m:g} m is below 0; use 0 or more."
            raise InputError(msg)


@dataclass(frozen=True, slots=True, kw_only=True)
class Air:
    """How the air bends the ray, in one of the trade's three forms.

    Give at most one of the three; none of them means light with kr 0.13. A bare
    "k" does not exist here: ke is the radio trade's effective earth radius factor
    (4/3 normal), kr the surveyor's coefficient of refraction (0.13 normal).
    """

    ke: float | None = None
    """Effective earth radius divided by the true radius [1], > 0."""
    kr: float | None = None
    """Curvature of the ray divided by the earth's [1]; 0 is a straight ray."""
    n_gradient_per_km: float | None = None
    """Refractivity gradient dN/dh [N/km]; about −39 is normal for radio."""
    assumed: bool = False
    """Whether the value is a default that nobody stated."""

    def __post_init__(self) -> None:
        """Refuse two statements of one thing, and numbers that are none."""
        _check_numbers("The air", self.ke, self.kr, self.n_gradient_per_km)
        given = [v for v in (self.ke, self.kr, self.n_gradient_per_km) if v is not None]
        if len(given) > 1:
            msg = "Give one of ke, kr and the refractivity gradient, not several."
            raise InputError(msg)
        if any(not math.isfinite(v) for v in given):
            msg = f"The bending of the air must be a finite number, not {given[0]}."
            raise InputError(msg)
        if self.ke is not None and self.ke <= 0.0:
            msg = (
                f"ke {self.ke:g} is not above 0. State a duct by kr or by the gradient."
            )
            raise InputError(msg)

    @property
    def is_default(self) -> bool:
        """Whether nobody stated the bending: kr 0.13 for light, ke 4/3 for radio."""
        nothing = self.ke is None and self.kr is None and self.n_gradient_per_km is None
        return self.assumed or nothing

    @property
    def kr_or_default(self) -> float:
        """Coefficient of refraction [1]: the given one, else that of light."""
        return KR_LIGHT if self.kr is None else self.kr
