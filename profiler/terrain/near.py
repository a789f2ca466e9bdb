"""Posts around one point, to tell whether it is a top."""

from typing import NamedTuple

import numpy as np

from profiler.earth.geodesic import distances_m
from profiler.model import FloatArray, Point
from profiler.terrain.dem import Terrain
from profiler.terrain.lattice import Lattice, PostReader


class NearPosts(NamedTuple):
    """Posts within a circle around a point, from the finest grid that covers it."""

    dist_m: FloatArray
    """(n,) distance from the point."""
    height_m: FloatArray
    """(n,) elevation; NaN where there is none."""
    cell_m: float
    """The longer side of the grid's cell [m]."""


def is_inside(terrain: Terrain, point: Point) -> bool:
    """Whether a point lies within the outline of any grid of a terrain."""
    return any(_post_of(lattice, point) is not None for lattice in terrain.lattices)


def finest_at(terrain: Terrain, point: Point) -> Lattice | None:
    """The finest grid whose outline contains a point."""
    for lattice in terrain.lattices:
        if _post_of(lattice, point) is not None:
            return lattice
    return None


def posts_near(terrain: Terrain, point: Point, radius_m: float) -> NearPosts | None:
    """Posts of the finest grid with ground at a point, within a circle around it.

    Parameters
    ----------
    terrain : Terrain
    point : Point
    radius_m : float [m]
        Radius of the circle.

    Returns
    -------
    NearPosts or None
        None where no grid has ground at the point.

    Raises
    ------
    DemError
        If a file is damaged.
    """
    with PostReader() as reader:
        for lattice in terrain.lattices:
            post = _post_of(lattice, point)
            if post is None:
                continue
            reach = np.ceil(radius_m / np.array(lattice.cell_m)).astype(int) + 2
            row, col = round(post[1]), round(post[0])
            top, left = row - int(reach[0]), col - int(reach[1])
            window = reader.window(
                lattice, top, left, 2 * int(reach[0]) + 1, 2 * int(reach[1]) + 1
            )
            if np.isnan(window.height_m[reach[0], reach[1]]):
                continue
            return _within(lattice, window.height_m, (top, left), point, radius_m)
    return None


def _within(
    lattice: Lattice,
    height_m: FloatArray,
    corner: tuple[int, int],
    point: Point,
    radius_m: float,
) -> NearPosts:
    rows, cols = np.indices(height_m.shape)
    x, y = lattice.to_crs(
        (cols + corner[1]).ravel().astype(float),
        (rows + corner[0]).ravel().astype(float),
    )
    lat, lon = lattice.crs.to_wgs84(x, y)
    dist = distances_m(point, lat, lon)
    near = dist <= radius_m
    return NearPosts(dist[near], height_m.ravel()[near], max(lattice.cell_m))


def _post_of(lattice: Lattice, point: Point) -> tuple[float, float] | None:
    """Column and row of a point on a lattice, None outside its outline."""
    x, y = lattice.crs.to_crs(np.array([point.lat_deg]), np.array([point.lon_deg]))
    cols, rows = lattice.to_posts(x, y)
    col, row = float(cols[0]), float(rows[0])
    if not (np.isfinite(col) and np.isfinite(row)):
        return None
    first, last = lattice.cols[0], lattice.cols[1] - 1
    if lattice.crs.is_geographic:
        turn = lattice.crs.turn / abs(lattice.affine.dx_col)
        col += turn * np.round(((first + last) / 2.0 - col) / turn)
    inside = first - 0.5 <= col <= last + 0.5
    inside &= lattice.rows[0] - 0.5 <= row <= lattice.rows[1] - 0.5
    return (col, row) if inside else None
