"""How much of the target is seen."""

import math

from profiler.constants import ARCMIN_PER_DEG, GRAZING_M
from profiler.kernels.circle import elevation_tangent, ray_height
from profiler.model import Shown, Target
from profiler.sight.case import Case, Look, look_at
from profiler.sight.view import horizon_index


def shown_target(
    case: Case, look: Look, *, height_m: float, crest_tangent: float | None
) -> Target:
    """Visible and hidden part of the target, above ground and above the crest.

    Parameters
    ----------
    case, look : Case, Look
        The question and its look.
    height_m : float [m]
        Top above ground; 0 makes the target a bare point.
    crest_tangent : float or None [1]
        Elevation tangent of the front crest from the eye.
    """
    line = look.line
    hidden = _hidden(look, height_m)
    shown = _shown(look, height_m, hidden)
    visible = 0.0 if shown is Shown.NONE else height_m - hidden
    above = None
    if crest_tangent is not None:
        ray = ray_height(line.length_m, crest_tangent, line.eye_m, line.kappa_per_m)
        above = float(line.aim_m - ray)
    moved = case.length_m - line.length_m
    point = shown if case.hill_m <= 0.0 else _point_shown(case)
    return Target(
        height_m=height_m,
        shown=shown,
        visible_m=visible,
        hidden_m=height_m - visible,
        visible_fraction=visible / height_m if height_m > 0.0 else None,
        visible_arcmin=_visible_arcmin(look, visible),
        above_crest_m=above,
        own_hill_m=case.hill_m,
        aim_moved_m=moved,
        point_shown=point,
    )


def _hidden(look: Look, height_m: float) -> float:
    """Part of the plumb line at the target below the grazing ray [m]."""
    best = horizon_index(look.seen)
    if best is None:
        return 0.0
    line = look.line
    ray = ray_height(
        line.length_m, float(look.seen.tangent[best]), line.eye_m, line.kappa_per_m
    )
    return min(max(float(ray) - (line.aim_m - height_m), 0.0), height_m)


def _shown(look: Look, height_m: float, hidden_m: float) -> Shown:
    if look.is_blocked:
        return Shown.NONE
    if height_m <= 0.0 or hidden_m <= GRAZING_M:
        return Shown.WHOLE
    return Shown.PART


def _point_shown(case: Case) -> Shown:
    return Shown.NONE if look_at(case.plain()).is_blocked else Shown.WHOLE


def _visible_arcmin(look: Look, visible_m: float) -> float:
    """Angle at the eye that the visible part fills [′]."""
    line = look.line
    top, foot = (
        math.degrees(
            math.atan(elevation_tangent(line.length_m, z, line.eye_m, line.kappa_per_m))
        )
        for z in (line.aim_m, line.aim_m - visible_m)
    )
    return (top - foot) * ARCMIN_PER_DEG
