"""Where a path crosses the outlines of trees and buildings."""

from collections.abc import Sequence
from typing import Any, Final, NamedTuple

import numpy as np

from profiler.earth import distances_m, points_at
from profiler.earth.projection import Projector
from profiler.model import CoverSpan, FloatArray, GeodesicPath, Point
from profiler.shapes.cover import CoverShape

#: Longest chord of the path between two points on it [m]; the geodesic leaves it by
#: less than 6 µm on a map whose lines bend no more than latitude and longitude at 70°.
CHORD_M: Final = 10.0
#: Chords that are searched and cut together [1]; our choice.
CHORDS_TOGETHER: Final = 64
#: A chord this many times as long on the map as on the ground jumps across it [1];
#: our choice: no map in use stretches so much.
JUMP: Final = 1000.0
#: Crossings nearer than this are one [m]; rounding.
SAME_M: Final = 1e-6
#: Room around a disc for the plane triangle that looks for it [1] and [m]; a plane
#: errs by 1 % at 1 500 km, and rounding by centimetres.
DISC_ROOM: Final = 1.1
DISC_ROOM_M: Final = 1.0

Interval = tuple[float, float]


class _Strings(NamedTuple):
    """The path on one map, as runs of chords."""

    lines: Any
    """(s,) shapely line strings."""
    dist_m: list[FloatArray]
    """For each its vertices' distances along the path."""
    along: list[FloatArray]
    """For each its vertices' distances along the string, in the map's unit."""


def spans_along(
    shapes: Sequence[CoverShape], path: GeodesicPath
) -> tuple[CoverSpan, ...]:
    """Stretches of a path that run through trees and buildings.

    Parameters
    ----------
    shapes : sequence of CoverShape
        From `read_cover`.
    path : GeodesicPath

    Returns
    -------
    tuple of CoverSpan
        One for each run through an outline or a disc, by where it starts; a path
        that only touches one in a point has none. Crossings are exact to 0.01 mm.

    Raises
    ------
    InputError
        If a height is not above 0.
    """
    outlined: dict[int, list[CoverShape]] = {}
    for shape in shapes:
        if shape.centre is None:
            outlined.setdefault(id(shape.crs), []).append(shape)
    found = _through_discs([s for s in shapes if s.centre is not None], path)
    for group in outlined.values():
        found += _through_outlines(group, path)
    spans = [
        CoverSpan(
            start_m=start,
            end_m=end,
            height_m=shape.height_m,
            kind=shape.kind,
            name=shape.name,
        )
        for shape, runs in found
        for start, end in _joined(runs, path.length_m)
    ]
    return tuple(sorted(spans, key=lambda s: (s.start_m, s.end_m, s.kind, s.name)))


def _joined(runs: list[Interval], length_m: float) -> list[Interval]:
    """Runs within the path, those that touch made one, those without length dropped."""
    whole: list[Interval] = []
    for start, end in sorted(runs):
        low, high = max(start, 0.0), min(end, length_m)
        if whole and low <= whole[-1][1] + SAME_M:
            whole[-1] = (whole[-1][0], max(whole[-1][1], high))
        else:
            whole.append((low, high))
    return [(low, high) for low, high in whole if high - low > SAME_M]


def _through_outlines(
    shapes: list[CoverShape], path: GeodesicPath
) -> list[tuple[CoverShape, list[Interval]]]:
    import shapely

    crs = shapes[0].crs
    strings = _strings(path, crs)
    if strings.lines.size == 0:
        return []
    tree = shapely.STRtree([shape.outline for shape in shapes])
    runs: dict[int, list[Interval]] = {}
    turns = (-1, 0, 1) if crs.is_geographic else (0,)
    for turn in turns:
        lines = shapely.transform(
            strings.lines, lambda xy, by=turn * crs.turn: xy + np.array([by, 0.0])
        )
        hits = tree.query(lines, predicate="intersects")
        for k, number in zip(*hits, strict=True):
            inside = shapely.intersection(lines[k], shapes[number].outline)
            runs.setdefault(int(number), []).extend(
                _intervals(inside, lines[k], strings.along[k], strings.dist_m[k])
            )
    return [(shapes[number], found) for number, found in runs.items()]


def _intervals(
    inside: Any, line: Any, along: FloatArray, dist_m: FloatArray
) -> list[Interval]:
    """Distances between which a string lies inside an outline."""
    import shapely

    found = []
    for part in _line_parts(inside):
        coordinates = shapely.get_coordinates(part)
        ends = shapely.line_locate_point(line, shapely.points(coordinates[[0, -1]]))
        low, high = np.sort(np.interp(ends, along, dist_m))
        found.append((float(low), float(high)))
    return found


def _line_parts(shape: Any) -> list[Any]:
    """The lines in a geometry; points where it only touches are none."""
    import shapely

    parts = [shape]
    while any(hasattr(part, "geoms") for part in parts):
        parts = [p for part in parts for p in shapely.get_parts(part)]
    return [p for p in parts if p.geom_type == "LineString" and not p.is_empty]


def _strings(path: GeodesicPath, crs: Projector) -> _Strings:
    """The path in a map's coordinates; left out where the map has none."""
    import shapely

    count = max(int(np.ceil(path.length_m / CHORD_M)), 1)
    dist = np.linspace(0.0, path.length_m, count + 1)
    x, y = crs.to_crs(*points_at(path, dist))
    with np.errstate(invalid="ignore"):
        step = np.hypot(np.diff(x), np.diff(y))
    longest = JUMP * CHORD_M / crs.metres_per_unit
    if crs.is_geographic:
        longest = crs.turn / 2.0
    sound = np.isfinite(step) & (step < longest)
    lines, at, along = [], [], []
    for first in range(0, count, CHORDS_TOGETHER):
        chords = np.arange(first, min(first + CHORDS_TOGETHER, count))
        for run in np.split(chords, np.flatnonzero(~sound[chords])):
            kept = run[sound[run]]
            if kept.size == 0:
                continue
            vertices = np.append(kept, kept[-1] + 1)
            lines.append(np.column_stack([x[vertices], y[vertices]]))
            at.append(dist[vertices])
            along.append(np.append(0.0, np.cumsum(step[kept])))
    strings = np.array([shapely.linestrings(line) for line in lines], dtype=object)
    return _Strings(strings, at, along)


def _through_discs(
    discs: list[CoverShape], path: GeodesicPath
) -> list[tuple[CoverShape, list[Interval]]]:
    """Where a path runs through discs around points.

    Notes
    -----
    Along a geodesic the square of the distance to a point is a quadratic but for the
    earth's own curvature, 1e-7 m at 1 km: three distances give it.
    """
    if not discs:
        return []
    centres = [shape.centre for shape in discs if shape.centre is not None]
    lat = np.array([centre.lat_deg for centre in centres])
    lon = np.array([centre.lon_deg for centre in centres])
    radius = np.array([shape.radius_m for shape in discs])
    first, last = distances_m(path.start, lat, lon), distances_m(path.end, lat, lon)
    along = (first**2 - last**2 + path.length_m**2) / (2.0 * path.length_m)
    reach = DISC_ROOM * radius + DISC_ROOM_M
    near = np.maximum(first**2 - along**2, 0.0) <= reach**2
    near &= (along >= -reach) & (along <= path.length_m + reach)
    found = []
    for k in np.flatnonzero(near):
        run = _chord(centres[k], float(radius[k]), float(along[k]), path)
        if run is not None:
            found.append((discs[k], [run]))
    return found


def _chord(
    centre: Point, radius_m: float, near_m: float, path: GeodesicPath
) -> Interval | None:
    """The stretch of path within a disc; None when it passes outside."""
    dist = near_m + radius_m * np.array([-1.0, 0.0, 1.0])
    low, mid, high = distances_m(centre, *points_at(path, dist)) ** 2
    bend = (low - 2.0 * mid + high) / 2.0
    tilt = (high - low) / 2.0
    foot = -tilt / (2.0 * bend)
    square = (radius_m**2 - mid + bend * foot**2) / bend
    if square <= 0.0:
        return None
    half = float(np.sqrt(square))
    return (
        near_m + radius_m * (float(foot) - half),
        near_m + radius_m * (float(foot) + half),
    )
