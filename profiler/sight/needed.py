"""What would just clear the line: heights, bending, a shift of all ground.

Every figure is rounded to the safe side and then tried: the case with that figure is
looked at again, and a figure that does not clear is raised until it does.
"""

import math
from collections.abc import Callable
from dataclasses import replace

import numpy as np

from profiler.constants import GRAZING_M
from profiler.earth import kappa_from_ke, kappa_from_kr
from profiler.kernels.circle import ray_height
from profiler.model import Needed, Stretch
from profiler.sight.case import QUARTER_TURN, Case, Look, least_ratio, look_at
from profiler.sight.ground import clip, joined, mirrored
from profiler.sight.view import before, horizon_index, rays

#: Step to which heights are rounded [m]: 1 cm, as the record promises.
HEIGHT_STEP_M = 0.01
#: Step to which ke and kr are rounded [1]: the record's last digit.
RATIO_STEP = 1e-6
#: Decimals that hold a whole number of either step [1].
STEP_DECIMALS = 9
#: Share of a step by which a whole number of steps may miss it [1]; rounding.
WHOLE_STEP = 1e-9
#: Tries to raise a rounded figure before it is given up [1].
MOST_TRIES = 4
#: Steps of the iterations for bending and for both heights [1]; three are enough.
MOST_STEPS = 40
#: Curvature found well enough [1/m]: 1 mm in the middle of 450 km.
KAPPA_ENOUGH = 4e-14
#: Margin of the centimetre beside an end found well enough, over that centimetre [1].
RATIO_ENOUGH = 1e-9
#: Height found well enough [m].
HEIGHT_ENOUGH_M = 1e-6
#: Depth to which ground may rise into a line found clear [m].
BAND_M = GRAZING_M - 2.0 * HEIGHT_ENOUGH_M
#: Height above ground beyond which no mast helps [m]: higher than any ground.
NO_HELP_ABOVE_M = 10_000.0
#: Largest coefficient of refraction worth naming [1]; beyond the measured extremes
#: near the ground (+16, Hirt et al. 2010, JGR 115 D21102).
NO_HELP_ABOVE_KR = 20.0
#: Smallest coefficient of refraction worth naming [1]: no measured air bends a ray up
#: as much (−4, the same source).
NO_HELP_BELOW_KR = -20.0


def needed(
    case: Case,
    now: Look,
    *,
    from_ground_m: float | None,
    to_ground_m: float | None,
    radius_m: float,
    stretches: tuple[Stretch, ...],
) -> Needed:
    """Every single change that would just clear the line.

    Parameters
    ----------
    case, now : Case, Look
        The question and its look; only the margin to spare comes from it.
    from_ground_m, to_ground_m : float or None [m]
        Ground at the ends; None where unknown: no height above it can be named.
    radius_m : float [m]
        Radius of the earth along the path.
    stretches : tuple of Stretch
        Blocked stretches, for naming the one that sets a figure.
    """
    bias, bias_at = now.closest_m, now.closest_at_m
    if now.is_blocked:
        bias = now.lowest_m
        bias_at = float(now.at.dist_m[int(np.argmin(now.at.margin_m))])
    case = _within_band(case)
    look = look_at(case)
    from_agl, from_at = _from_agl(case, look, from_ground_m)
    to_agl, to_at = _to_agl(case, look, to_ground_m)
    least_agl = min(
        case.eye_m - from_ground_m if from_ground_m is not None else math.inf,
        case.top_m - to_ground_m if to_ground_m is not None else math.inf,
    )
    both, both_at = _both_extra(case, look, least_agl)
    kappa = _critical_kappa(case, radius_m)
    ke, kr = _ratios(case, kappa, radius_m)
    return Needed(
        from_agl_m=from_agl,
        to_agl_m=to_agl,
        both_extra_m=both,
        ke=ke,
        kr=kr,
        dem_bias_m=_floor(bias) if math.isfinite(bias) else None,
        dem_bias_at_m=bias_at if math.isfinite(bias) else None,
        from_stretch=_stretch_at(stretches, from_at),
        to_stretch=_stretch_at(stretches, to_at),
        both_stretch=_stretch_at(stretches, both_at),
    )


def _within_band(case: Case) -> Case:
    """The case with the ground before any own hill lower by the grazing band.

    What rises into the line by less than the band does not block, so the least change
    that clears is the one that clears this ground.
    """
    far_m = case.length_m - case.hill_m
    low = clip(case.ground, 0.0, far_m)
    hill = clip(case.ground, far_m, case.length_m)
    low = low._replace(height_m=low.height_m - BAND_M)
    return replace(case, ground=joined(low, hill))


def _floor(value: float) -> float:
    return math.floor(value / HEIGHT_STEP_M) * HEIGHT_STEP_M


def _safe(
    value: float, step: float, clears: Callable[[float], bool], most: float
) -> float | None:
    """``value`` rounded up to a step, raised until it clears; None if it cannot."""
    steps = math.ceil(value / step - WHOLE_STEP)
    for extra in range(MOST_TRIES):
        rounded = (steps + extra) * step
        if rounded <= most and clears(rounded):
            return round(rounded, STEP_DECIMALS)
    return None


def _clears(case: Case) -> bool:
    """Whether a case within the band is clear, but for rounding."""
    return _is_clear(look_at(case))


def _is_clear(look: Look) -> bool:
    return look.lowest_m > -HEIGHT_ENOUGH_M


def _from_agl(
    case: Case, now: Look, ground_m: float | None
) -> tuple[float | None, float]:
    """Least height of the eye above its ground, and the place that sets it [m]."""
    if ground_m is None or now.known.dist_m.size == 0:
        return None, math.nan
    eye, where = case.eye_m, math.nan
    for _ in range(MOST_STEPS):
        aim = replace(case, eye_m=eye).aim()
        ground = mirrored(now.known, aim.dist_m)
        back = before(rays(ground, aim.height_m, case.kappa_per_m), aim.dist_m)
        best = horizon_index(back)
        if best is None:
            return 0.0, math.nan
        last, tangent = eye, float(back.tangent[best])
        eye = float(ray_height(aim.dist_m, tangent, aim.height_m, case.kappa_per_m))
        eye, where = max(eye, ground_m), aim.dist_m - float(back.dist_m[best])
        # only the aim point of an own hill moves with the eye
        if case.hill_m <= 0.0 or abs(eye - last) <= HEIGHT_ENOUGH_M:
            break

    def clears(agl_m: float) -> bool:
        higher = replace(
            case, eye_m=ground_m + agl_m, eye_on_ground=agl_m <= HEIGHT_ENOUGH_M
        )
        return _clears(higher)

    return _safe(eye - ground_m, HEIGHT_STEP_M, clears, NO_HELP_ABOVE_M), where


def _to_agl(
    case: Case, now: Look, ground_m: float | None
) -> tuple[float | None, float]:
    """Least height of the top above its ground, and the place that sets it [m]."""
    if ground_m is None or now.known.dist_m.size == 0:
        return None, math.nan
    if case.hill_m > 0.0 and _is_clear(now):
        return 0.0, math.nan
    plain = case.plain()
    counted = plain.counted().known
    seen = before(rays(counted, case.eye_m, case.kappa_per_m), case.length_m)
    best = horizon_index(seen)
    if best is None:
        return 0.0, math.nan
    top = ray_height(
        case.length_m, float(seen.tangent[best]), case.eye_m, case.kappa_per_m
    )

    def clears(agl_m: float) -> bool:
        higher = replace(
            plain, top_m=ground_m + agl_m, top_on_ground=agl_m <= HEIGHT_ENOUGH_M
        )
        return _clears(higher)

    agl = _safe(max(top - ground_m, 0.0), HEIGHT_STEP_M, clears, NO_HELP_ABOVE_M)
    return agl, float(seen.dist_m[best])


def _raised(case: Case, extra_m: float) -> Case:
    """The case with both ends higher; a target above its ground has no own hill."""
    if abs(extra_m) <= HEIGHT_ENOUGH_M:
        return case
    return replace(
        case,
        eye_m=case.eye_m + extra_m,
        top_m=case.top_m + extra_m,
        eye_on_ground=False,
        top_on_ground=False,
        hill_m=0.0,
    )


def _both_extra(
    case: Case, now: Look, least_agl_m: float
) -> tuple[float | None, float]:
    """Least height to add at both ends, and the place that sets it [m]."""
    if now.at.margin_m.size == 0:
        return None, math.nan
    if _is_clear(now) and (case.hill_m > 0.0 or least_agl_m <= HEIGHT_ENOUGH_M):
        return 0.0, math.nan
    extra, where = 0.0, math.nan
    for _ in range(MOST_STEPS):
        look = look_at(_raised(case.plain(), extra))
        low = int(np.argmin(look.at.margin_m))
        where = float(look.at.dist_m[low])
        extra -= look.lowest_m
        if abs(look.lowest_m) <= HEIGHT_ENOUGH_M:
            break
    extra = max(extra, -least_agl_m)

    def clears(extra_m: float) -> bool:
        return _clears(_raised(case, extra_m))

    return _safe(extra, HEIGHT_STEP_M, clears, NO_HELP_ABOVE_M), where


def _critical_kappa(case: Case, radius_m: float) -> float | None:
    """Largest effective curvature at which the line is clear [1/m]; None: none near."""
    kappa = case.kappa_per_m
    enough = max(KAPPA_ENOUGH, RATIO_ENOUGH / case.length_m)
    for _ in range(MOST_STEPS):
        ratio = least_ratio(look_at(replace(case, kappa_per_m=kappa)))
        kappa += 2.0 * ratio
        named = NO_HELP_BELOW_KR <= 1.0 - kappa * radius_m <= NO_HELP_ABOVE_KR
        if not named or abs(kappa) * case.length_m >= QUARTER_TURN:
            return None
        if abs(2.0 * ratio) <= enough:
            return kappa
    return None


def _ratios(
    case: Case, kappa: float | None, radius_m: float
) -> tuple[float | None, float | None]:
    """Least ke (None unless positive) and kr at which the line is clear [1]."""
    if kappa is None:
        return None, None

    def clears_kr(kr: float) -> bool:
        return _clears(replace(case, kappa_per_m=kappa_from_kr(kr, radius_m=radius_m)))

    def clears_ke(ke: float) -> bool:
        return _clears(replace(case, kappa_per_m=kappa_from_ke(ke, radius_m=radius_m)))

    kr = _safe(1.0 - kappa * radius_m, RATIO_STEP, clears_kr, NO_HELP_ABOVE_KR)
    if kr is None or kappa <= 0.0:
        return None, kr
    return _safe(1.0 / (kappa * radius_m), RATIO_STEP, clears_ke, math.inf), kr


def _stretch_at(stretches: tuple[Stretch, ...], dist_m: float) -> int | None:
    """Number, from 1, of the blocked stretch that contains a place."""
    for number, stretch in enumerate(stretches, start=1):
        if stretch.start_m <= dist_m <= stretch.end_m:
            return number
    return None
