"""Places, blocked stretches and voids with their coordinates."""

import math

import numpy as np

from profiler.earth import points_at, within_half_turn
from profiler.kernels.circle import elevation_tangent
from profiler.model import (
    FloatArray,
    GeodesicPath,
    PathProfile,
    Place,
    Stretch,
    VoidStretch,
)
from profiler.sight.cover import Height, cover_at, split_height
from profiler.sight.ground import Ground
from profiler.sight.line import TOUCH_M, Blocked, Line, Spots

#: Places at which the line's height over a void is compared [1]; the line is flat
#: near its lowest place, where 1/4096 of 450 km misses less than 0.3 mm.
VOID_STEPS = 4097


def coordinates(path: GeodesicPath, dist_m: float) -> tuple[float, float]:
    """Latitude and longitude, within ±180, of a place on the path [deg]."""
    lat, lon = points_at(path, np.array([dist_m]))
    return float(lat[0]), within_half_turn(float(lon[0]))


def place_at(
    path: GeodesicPath,
    line: Line,
    dist_m: float,
    height_m: float,
    *,
    profile: PathProfile | None = None,
) -> Place:
    """One place on the ground, or on its cover, with the line above it.

    Parameters
    ----------
    path : GeodesicPath
    line : Line
    dist_m : float [m]
        Distance from the eye's end.
    height_m : float [m]
        Ground and cover there.
    profile : PathProfile or None
        Tells ground from cover; None: all is ground.
    """
    here = Height(height_m, 0.0, None)
    if profile is not None:
        here = split_height(profile, dist_m, height_m)
    lat, lon = coordinates(path, dist_m)
    sight = float(line.height(np.array([dist_m]))[0])
    tangent = elevation_tangent(dist_m, height_m, line.eye_m, line.kappa_per_m)
    return Place(
        distance_m=dist_m,
        lat_deg=lat,
        lon_deg=lon,
        ground_m=here.ground_m,
        cover_m=here.cover_m,
        sight_m=sight,
        margin_m=sight - height_m,
        elevation_deg=math.degrees(math.atan(tangent)),
        cover_name="" if here.span is None else here.span.name,
        cover_kind=None if here.span is None else here.span.kind,
    )


def stretch_of(
    path: GeodesicPath, at: Spots, run: Blocked, *, profile: PathProfile | None = None
) -> Stretch:
    """One blocked stretch with its worst place, and what stands there.

    Parameters
    ----------
    path : GeodesicPath
    at : Spots
    run : Blocked
        Its worst place is an index into ``at``.
    profile : PathProfile or None
        Tells ground from cover; None: all is ground.
    """
    worst_at = float(at.dist_m[run.worst])
    span = None
    if profile is not None:
        span = split_height(profile, worst_at, float(at.ground_m[run.worst])).span
    lat, lon = coordinates(path, worst_at)
    return Stretch(
        start_m=run.start_m,
        end_m=run.end_m,
        worst_margin_m=float(at.margin_m[run.worst]),
        worst_at_m=worst_at,
        lat_deg=lat,
        lon_deg=lon,
        cover_name="" if span is None else span.name,
        cover_kind=None if span is None else span.kind,
    )


def void_stretches(
    path: GeodesicPath, line: Line, void: Ground, *, profile: PathProfile | None = None
) -> tuple[VoidStretch, ...]:
    """Runs without ground, each with the ground that would block there.

    Parameters
    ----------
    path : GeodesicPath
    line : Line
    void : Ground
        Pieces without ground, in order, none beyond the aim point.
    profile : PathProfile or None
        Tells what cover stands on the unknown ground; None: none.
    """
    runs: list[list[float]] = []
    for start, end in zip(void.dist_m[:, 0], void.dist_m[:, 2], strict=True):
        if runs and start <= runs[-1][1] + TOUCH_M:
            runs[-1][1] = float(end)
        else:
            runs.append([float(start), float(end)])
    found = []
    for start, end in runs:
        dist = np.linspace(start, min(end, line.length_m), VOID_STEPS)
        cover = np.zeros(dist.size)
        if profile is not None and profile.cover_spans:
            dist, cover = _under_cover(dist, void, profile)
        height = line.height(dist) - cover
        low = int(np.argmin(height))
        lat, lon = coordinates(path, float(dist[low]))
        found.append(
            VoidStretch(
                start_m=start,
                end_m=end,
                lat_deg=lat,
                lon_deg=lon,
                blocks_above_m=float(height[low]),
            )
        )
    return tuple(found)


def _under_cover(
    dist_m: FloatArray, void: Ground, profile: PathProfile
) -> tuple[FloatArray, FloatArray]:
    """Places in a void and the ends of its pieces there, with the cover of each [m]."""
    low, high = float(dist_m[0]), float(dist_m[-1])
    inside = (void.dist_m[:, 2] > low) & (void.dist_m[:, 0] < high)
    first, middle, last = void.dist_m[inside].T
    cover = cover_at(profile, middle)
    owner = np.searchsorted(first, dist_m, side="right") - 1
    places = np.concatenate([dist_m, first, np.minimum(last, high)])
    return places, np.concatenate([cover[np.maximum(owner, 0)], cover, cover])
