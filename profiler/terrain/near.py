"""Posts around one point, to tell whether it is a top or stands on trees."""

from typing import Final, NamedTuple

import numpy as np

from profiler.earth.geodesic import distances_m, within_half_turn
from profiler.model import FloatArray, Point
from profiler.terrain.dem import Terrain
from profiler.terrain.lattice import Lattice
from profiler.terrain.windows import PostReader

#: Radius of the ring around a station, at least [m] and in cells [1]; our choice: a
#: clump of trees or a roof is seldom wider, and a clearing seldom further.
RING_M: Final = 60.0
RING_CELLS: Final = 2.5
#: Fewest posts that tell a slope from a clump [1]; our choice: a plane takes three.
RING_POSTS: Final = 6


class NearPosts(NamedTuple):
    """Posts within a circle around a point, from the finest grid that covers it."""

    dist_m: FloatArray
    """(n,) distance from the point."""
    height_m: FloatArray
    """(n,) elevation; NaN where there is none."""
    cell_m: float
    """The longer side of the grid's cell [m]."""
    lat_deg: FloatArray
    """(n,) where the posts are."""
    lon_deg: FloatArray


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
    return NearPosts(
        dist[near], height_m.ravel()[near], max(lattice.cell_m), lat[near], lon[near]
    )


def rise_over_ring(terrain: Terrain, point: Point, ground_m: float) -> float | None:
    """How far ground stands above the lowest post around it, slope taken out.

    Parameters
    ----------
    terrain : Terrain
    point : Point
    ground_m : float [m]
        Ground at the point.

    Returns
    -------
    float or None [m]
        0 or more; None with fewer than `RING_POSTS` known posts around.

    Raises
    ------
    DemError
        If a file is damaged.

    Notes
    -----
    The slope is the plane that fits the posts within `RING_M` (2.5 cells of a coarser
    grid) best; without taking it out every hillside would look like a clump of trees.
    """
    lattice = finest_at(terrain, point)
    if lattice is None:
        return None
    radius = max(RING_M, RING_CELLS * max(lattice.cell_m))
    near = posts_near(terrain, point, radius)
    if near is None:
        return None
    known = np.isfinite(near.height_m)
    if np.count_nonzero(known) < RING_POSTS:
        return None
    height = near.height_m[known]
    north = near.lat_deg[known] - point.lat_deg
    east = within_half_turn(near.lon_deg[known] - point.lon_deg)
    sides = np.column_stack([np.ones_like(height), east, north])
    # a column of one size keeps the fit sound wherever on earth it is
    sides /= np.maximum(np.abs(sides).max(axis=0), np.finfo(float).tiny)
    plane, *_ = np.linalg.lstsq(sides, height, rcond=None)
    lowest = float(np.min(height - sides[:, 1:] @ plane[1:]))
    return max(ground_m - lowest, 0.0)


def _post_of(lattice: Lattice, point: Point) -> tuple[float, float] | None:
    """Column and row of a point on a lattice, None outside its outline."""
    cols, rows = lattice.posts_at(np.array([point.lat_deg]), np.array([point.lon_deg]))
    col, row = float(cols[0]), float(rows[0])
    if not (np.isfinite(col) and np.isfinite(row)):
        return None
    first, last = lattice.cols[0], lattice.cols[1] - 1
    inside = first - 0.5 <= col <= last + 0.5
    inside &= lattice.rows[0] - 0.5 <= row <= lattice.rows[1] - 0.5
    return (col, row) if inside else None
