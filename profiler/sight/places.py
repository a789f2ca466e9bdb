"""Places, blocked stretches and voids with their coordinates."""

import math

import numpy as np

from profiler.earth import points_at
from profiler.kernels.circle import elevation_tangent
from profiler.model import GeodesicPath, Place, Stretch, VoidStretch
from profiler.sight.ground import Ground
from profiler.sight.line import TOUCH_M, Blocked, Line, Spots

#: Places at which the line's height over a void is compared [1]; the line is flat
#: near its lowest place, where 1/4096 of 450 km misses less than 0.3 mm.
VOID_STEPS = 4097


def coordinates(path: GeodesicPath, dist_m: float) -> tuple[float, float]:
    """Latitude and longitude, within ±180, of a place on the path [deg]."""
    lat, lon = points_at(path, np.array([dist_m]))
    return float(lat[0]), (float(lon[0]) + 180.0) % 360.0 - 180.0


def place_at(path: GeodesicPath, line: Line, dist_m: float, ground_m: float) -> Place:
    """One place of the ground with the line above it."""
    lat, lon = coordinates(path, dist_m)
    sight = float(line.height(np.array([dist_m]))[0])
    tangent = elevation_tangent(dist_m, ground_m, line.eye_m, line.kappa_per_m)
    return Place(
        distance_m=dist_m,
        lat_deg=lat,
        lon_deg=lon,
        ground_m=ground_m,
        cover_m=0.0,
        sight_m=sight,
        margin_m=sight - ground_m,
        elevation_deg=math.degrees(math.atan(tangent)),
    )


def stretch_of(path: GeodesicPath, at: Spots, run: Blocked) -> Stretch:
    """One blocked stretch with its worst place."""
    worst_at = float(at.dist_m[run.worst])
    lat, lon = coordinates(path, worst_at)
    return Stretch(
        start_m=run.start_m,
        end_m=run.end_m,
        worst_margin_m=float(at.margin_m[run.worst]),
        worst_at_m=worst_at,
        lat_deg=lat,
        lon_deg=lon,
    )


def void_stretches(
    path: GeodesicPath, line: Line, void: Ground
) -> tuple[VoidStretch, ...]:
    """Runs without ground, each with the ground that would block there.

    Parameters
    ----------
    path : GeodesicPath
    line : Line
    void : Ground
        Pieces without ground, in order, none beyond the aim point.
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
        height = line.height(dist)
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
