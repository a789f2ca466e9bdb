"""The path sheet: pointing, ground under the path, loss."""

import math
from dataclasses import dataclass
from typing import Final

import numpy as np

from profiler.constants import KE_RADIO
from profiler.model import FloatArray, SightLine
from profiler.radio.assess import (
    CriterionResult,
    RadioResult,
    TightPlace,
    counted_ground,
    line_at,
)
from profiler.radio.criteria import Criterion
from profiler.radio.delta_bullington import (
    DiffractionLoss,
    diffraction_loss,
    effective_heights_m,
)
from profiler.radio.first_term import Polarization
from profiler.radio.spherical import horizon_reach_m, smooth_clearance
from profiler.radio.tight import tight_places
from profiler.radio.waves import free_space_loss_db
from profiler.sight.line import Line
from profiler.sight.places import place_at

#: States of the air for which the sheet tells the clearance [1]: sub-refraction,
#: straight rays, the median (Rec. ITU-R P.530-19), strong bending (common practice).
KE_RANGE: Final = (2.0 / 3.0, 1.0, KE_RADIO, 3.0)


@dataclass(frozen=True, slots=True, kw_only=True)
class PathSheet:
    """Everything a planner hands over about one radio path."""

    azimuth_deg: float
    back_azimuth_deg: float
    from_tilt_deg: float
    """Elevation angle of the far antenna from the near one [deg]."""
    to_tilt_deg: float
    length_m: float
    """Along the geodesic [m]."""
    ray_m: float
    """Straight between the antennas [m]."""
    by_ke: tuple[CriterionResult, ...]
    """Clearance of the bare line (0 F1) at each factor of `KE_RANGE`."""
    reflection: TightPlace | None
    """Ground where a smooth surface would reflect; None without a known one."""
    free_space_db: float
    loss: DiffractionLoss | None
    """None where the method has no meaning; ``loss_note`` says why."""
    loss_note: str


def path_sheet(
    line: SightLine,
    radio: RadioResult,
    *,
    sea_fraction: float = 0.0,
    polarization: Polarization = "horizontal",
) -> PathSheet:
    """The path sheet of an answer held against its rule.

    Parameters
    ----------
    line : SightLine
    radio : RadioResult
        From `assess`, for the frequency.
    sea_fraction : float [1]
        Share of the path over sea, 0 to 1.
    polarization : str
        "horizontal" or "vertical".

    Raises
    ------
    InputError
        If share or polarization is impossible.
    """
    ray = ray_length_m(line)
    loss, note = loss_of(
        line,
        radio.frequency_hz,
        sea_fraction=sea_fraction,
        polarization=polarization,
    )
    return PathSheet(
        azimuth_deg=line.path.azimuth_deg,
        back_azimuth_deg=line.path.back_azimuth_deg,
        from_tilt_deg=line.from_elevation_deg,
        to_tilt_deg=line.to_elevation_deg,
        length_m=line.path.length_m,
        ray_m=ray,
        by_ke=tuple(_at_ke(line, ke, radio.wavelength_m) for ke in KE_RANGE),
        reflection=_reflection(line, radio.wavelength_m),
        free_space_db=float(free_space_loss_db(ray, frequency_hz=radio.frequency_hz)),
        loss=loss,
        loss_note=note,
    )


def ray_length_m(line: SightLine) -> float:
    """Straight distance between the two antennas [m]."""
    radius = line.path.radius_m
    low, high = sorted((line.from_.amsl_m, line.to.amsl_m))
    half = math.sin(line.path.length_m / radius / 2.0)
    chord = 2.0 * math.sqrt((radius + low) * (radius + high)) * half
    return math.hypot(chord, high - low)


def raw_profile(line: SightLine) -> tuple[FloatArray, FloatArray] | None:
    """Rising distances and heights of ground and cover; None with a void on the path.

    Where the ground steps the higher side is kept. The ends are ground in use.
    """
    dist, height = line.profile.dist_m, line.profile.top_m
    ends = line.from_.ground_m, line.to.ground_m
    if np.any(np.isnan(height)) or ends[0] is None or ends[1] is None:
        return None
    starts = np.flatnonzero(np.diff(dist, prepend=-1.0) > 0.0)
    top = np.maximum.reduceat(height, starts)
    top[0], top[-1] = ends
    return dist[starts], top


def loss_of(
    line: SightLine,
    frequency_hz: float,
    *,
    sea_fraction: float = 0.0,
    polarization: Polarization = "horizontal",
) -> tuple[DiffractionLoss | None, str]:
    """Diffraction loss of an answer's path in its stated air, or why there is none.

    Parameters
    ----------
    line : SightLine
    frequency_hz : float [Hz]
    sea_fraction : float [1]
    polarization : str

    Raises
    ------
    InputError
        If a number is outside its range.
    """
    radius = line.earth.effective_radius_m
    if radius is None or radius <= 0.0:
        return None, "the air bends rays as much as the earth or more: no method holds"
    raw = raw_profile(line)
    if raw is None:
        return None, "part of the path has no known ground"
    found = diffraction_loss(
        *raw,
        from_agl_m=line.from_.amsl_m - float(raw[1][0]),
        to_agl_m=line.to.amsl_m - float(raw[1][-1]),
        frequency_hz=frequency_hz,
        effective_radius_m=radius,
        sea_fraction=sea_fraction,
        polarization=polarization,
    )
    return found, "Rec. ITU-R P.526-16 section 4.5.2, complete delta-Bullington"


def _at_ke(line: SightLine, ke: float, wave_m: float) -> CriterionResult:
    there = line_at(line, ke)
    bare = Criterion(ke=ke, f1_fraction=0.0)
    at = tight_places(there, counted_ground(line), bare, wave_m)
    low = int(np.argmin(at.share))
    return CriterionResult(
        criterion=bare,
        margin_m=float(at.clear_m[low]),
        at=_tight(line, there, float(at.dist_m[low]), float(at.ground_m[low]), wave_m),
    )


def _tight(
    line: SightLine, there: Line, dist_m: float, ground_m: float, wave_m: float
) -> TightPlace:
    place = place_at(line.path, there, dist_m, ground_m, profile=line.profile)
    length = line.path.length_m
    f1 = math.sqrt(wave_m * dist_m * (length - dist_m) / length)
    return TightPlace(place=place, f1_m=f1, share=place.margin_m / f1)


def _reflection(line: SightLine, wave_m: float) -> TightPlace | None:
    """Where a smooth surface through the profile would reflect the wave."""
    raw, radius = raw_profile(line), line.earth.effective_radius_m
    if raw is None or radius is None or radius <= 0.0:
        return None
    heights = effective_heights_m(
        *raw, from_amsl_m=line.from_.amsl_m, to_amsl_m=line.to.amsl_m
    )
    reach = horizon_reach_m(
        from_height_m=max(heights[0], 0.0),
        to_height_m=max(heights[1], 0.0),
        effective_radius_m=radius,
    )
    if min(heights) <= 0.0 or line.path.length_m >= reach:
        return None
    dist = smooth_clearance(
        line.path.length_m,
        from_height_m=heights[0],
        to_height_m=heights[1],
        effective_radius_m=radius,
        wavelength_m=wave_m,
    ).from_m
    there = Line(
        line.path.length_m, line.from_.amsl_m, line.to.amsl_m, line.earth.kappa_per_m
    )
    return _tight(line, there, dist, float(np.interp(dist, *raw)), wave_m)
