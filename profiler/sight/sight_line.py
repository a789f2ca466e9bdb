"""The answer to a question made ready: its verdict and every other field."""

import math
from typing import NamedTuple

import numpy as np

from profiler.constants import GRAZING_M
from profiler.kernels.circle import elevation_tangent
from profiler.model import (
    Bending,
    BoolArray,
    EndReport,
    GeodesicPath,
    Needed,
    OtherGround,
    PathProfile,
    Place,
    SightLine,
    Stretch,
    Target,
    Verdict,
    VoidStretch,
)
from profiler.sight.case import Case, Look
from profiler.sight.ground import ground_of, joined
from profiler.sight.line import blocked_runs, decisive
from profiler.sight.needed import needed
from profiler.sight.notes import cautions_for, warnings_for
from profiler.sight.places import place_at, stretch_of
from profiler.sight.target import shown_target
from profiler.sight.view import front_crest_index, horizon_index, is_seen, rays


class Ready(NamedTuple):
    """A question with everything that it stands on."""

    path: GeodesicPath
    profile: PathProfile
    earth: Bending
    ends: tuple[EndReport, EndReport]
    case: Case
    look: Look
    void: VoidStretch | None
    """The void that the lowest ground would block in; None where none could."""
    void_below_m: float
    """Voids that only higher ground could block are left out [m]."""


def sight_line_of(ready: Ready, *, other: OtherGround | None) -> SightLine:
    """Every field of the answer to a question made ready.

    Parameters
    ----------
    ready : Ready
    other : OtherGround or None
        The answer on the DEM's own ground, where a survey differs from it.
    """
    look, line = ready.look, ready.look.line
    stretches = _stretches(ready)
    place = _spot(ready, decisive_index(ready))
    along = np.where(
        ready.profile.dist_m <= line.length_m, line.height(ready.profile.dist_m), np.nan
    )
    return SightLine(
        verdict=verdict_of(ready),
        grazing=not look.is_blocked and look.closest_m <= GRAZING_M,
        margin_m=None if place is None else place.margin_m,
        decisive=place,
        first_block=_spot(ready, _first_block(ready)),
        horizon=_seen_place(ready, horizon_index(look.seen)),
        front_crest=_seen_place(ready, _crest_index(ready)),
        blocked_stretches=stretches,
        target=_target(ready),
        needed=_needed(ready, stretches),
        path=ready.path,
        from_elevation_deg=_elevation_deg(look, line.eye_m, line.aim_m),
        to_elevation_deg=_elevation_deg(look, line.aim_m, line.eye_m),
        earth=ready.earth,
        from_=ready.ends[0],
        to=ready.ends[1],
        void=ready.void,
        cautions=cautions_for(ready.profile, ready.path, ready.earth),
        warnings=warnings_for(ready.profile, ready.ends),
        other_ground=other,
        profile=ready.profile,
        sight_m=along,
        margin_along_m=along - ready.profile.top_m,
        ground_seen=_ground_seen(ready),
        aim_distance_m=line.length_m,
        aim_m=line.aim_m,
        ignore_near_m=ready.case.near_m,
        void_below_m=ready.void_below_m,
    )


def _target(ready: Ready) -> Target:
    crest = _crest_index(ready)
    return shown_target(
        ready.case,
        ready.look,
        height_m=ready.ends[1].agl_m or 0.0,
        crest_tangent=None if crest is None else float(ready.look.seen.tangent[crest]),
    )


def _needed(ready: Ready, stretches: tuple[Stretch, ...]) -> Needed:
    return needed(
        ready.case,
        ready.look,
        from_ground_m=ready.ends[0].ground_m,
        to_ground_m=ready.ends[1].ground_m,
        radius_m=ready.path.radius_m,
        stretches=stretches,
    )


def verdict_of(ready: Ready) -> Verdict:
    """Clear, blocked, or undetermined where a void could block."""
    if ready.look.is_blocked:
        return Verdict.BLOCKED
    return Verdict.CLEAR if ready.void is None else Verdict.UNDETERMINED


def decisive_index(ready: Ready) -> int | None:
    """Index of the decisive point among the spots of the look; None without any."""
    eye, target = ready.path.start, ready.path.end
    low_end_first = (eye.lat_deg, eye.lon_deg) <= (target.lat_deg, target.lon_deg)
    return decisive(
        ready.look.line,
        ready.look.at,
        blocked=ready.look.is_blocked,
        low_end_first=low_end_first,
    )


def _spot(ready: Ready, index: int | None) -> Place | None:
    if index is None:
        return None
    at = ready.look.at
    dist, ground = float(at.dist_m[index]), float(at.ground_m[index])
    return place_at(ready.path, ready.look.line, dist, ground, profile=ready.profile)


def _seen_place(ready: Ready, index: int | None) -> Place | None:
    if index is None:
        return None
    seen = ready.look.seen
    dist, ground = float(seen.dist_m[index]), float(seen.ground_m[index])
    return place_at(ready.path, ready.look.line, dist, ground, profile=ready.profile)


def _stretches(ready: Ready) -> tuple[Stretch, ...]:
    if not ready.look.is_blocked:
        return ()
    runs = blocked_runs(ready.look.line, ready.look.known, ready.look.at)
    return tuple(
        stretch_of(ready.path, ready.look.at, run, profile=ready.profile)
        for run in runs
    )


def _first_block(ready: Ready) -> int | None:
    above = np.flatnonzero(ready.look.at.margin_m < -GRAZING_M)
    return int(above[0]) if above.size else None


def _crest_index(ready: Ready) -> int | None:
    seen, case = ready.look.seen, ready.case
    if ready.look.is_blocked:
        return horizon_index(seen)
    return front_crest_index(seen, case.eye_m, case.kappa_per_m)


def _elevation_deg(look: Look, eye_m: float, aim_m: float) -> float:
    line = look.line
    tangent = elevation_tangent(line.length_m, aim_m, eye_m, line.kappa_per_m)
    return math.degrees(math.atan(tangent))


def _ground_seen(ready: Ready) -> BoolArray:
    """(n,) whether the ground at each sample of the profile is seen from the eye."""
    case, dist = ready.case, ready.profile.dist_m
    ground = joined(case.ground.known, ground_of(ready.profile).known)
    all_rays = rays(ground, case.eye_m, case.kappa_per_m)
    seen = dist == 0.0
    if all_rays.dist_m.size:
        # where the ground steps two samples share a distance, the nearer side first
        second = np.diff(dist, prepend=-1.0) == 0.0
        low = np.searchsorted(all_rays.dist_m, dist)
        high = np.searchsorted(all_rays.dist_m, dist, side="right") - 1
        there = np.minimum(np.where(second, high, low), all_rays.dist_m.size - 1)
        seen |= is_seen(all_rays)[there] & (all_rays.dist_m[there] == dist)
    known: BoolArray = seen & np.isfinite(ready.profile.ground_m)
    return known
