"""Bilinear ground at any points: beside a path, around a mast."""

from typing import Final

import numpy as np

from profiler.model import BoolArray, FloatArray, IntArray
from profiler.terrain.dem import Terrain
from profiler.terrain.lattice import Lattice, PostReader
from profiler.terrain.pixel_path import ON_POST_CELLS

#: Points read together [1], and the most posts in one window [1]; our choice.
CHUNK_POINTS: Final = 4096
CHUNK_POSTS: Final = 160_000


def ground_at(terrain: Terrain, lat_deg: FloatArray, lon_deg: FloatArray) -> FloatArray:
    """Bilinear ground at points, from the finest grid that has a value.

    Parameters
    ----------
    terrain : Terrain
    lat_deg, lon_deg : (n,) float64 [deg]
        Points; neighbours in the array should be neighbours on the ground, so that
        few blocks are read.

    Returns
    -------
    (n,) float64 [m]
        NaN where no grid has ground.

    Raises
    ------
    DemError
        If a file is damaged.
    """
    height = np.full(lat_deg.shape, np.nan)
    with PostReader() as reader:
        for lattice in terrain.lattices:
            todo = np.flatnonzero(np.isnan(height))
            if todo.size == 0:
                break
            col, row = _post_coordinates(lattice, lat_deg[todo], lon_deg[todo])
            inside = _inside(lattice, col, row)
            index = todo[inside]
            height[index] = _read(reader, lattice, col[inside], row[inside])
    return height


def _post_coordinates(
    lattice: Lattice, lat_deg: FloatArray, lon_deg: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """Column and row of points, on the turn nearest the lattice, snapped to posts."""
    col, row = lattice.to_posts(*lattice.crs.to_crs(lat_deg, lon_deg))
    if lattice.crs.is_geographic:
        turn = lattice.crs.turn / abs(lattice.affine.dx_col)
        middle = (lattice.cols[0] + lattice.cols[1] - 1) / 2.0
        col = col + turn * np.round((middle - col) / turn)
    return _snapped(col), _snapped(row)


def _snapped(value: FloatArray) -> FloatArray:
    whole = np.round(value)
    return np.where(np.abs(value - whole) <= ON_POST_CELLS, whole, value)


def _inside(lattice: Lattice, col: FloatArray, row: FloatArray) -> BoolArray:
    with np.errstate(invalid="ignore"):
        inside = (col >= lattice.cols[0]) & (col <= lattice.cols[1] - 1)
        inside &= (row >= lattice.rows[0]) & (row <= lattice.rows[1] - 1)
    return inside


def _read(
    reader: PostReader, lattice: Lattice, col: FloatArray, row: FloatArray
) -> FloatArray:
    height = np.full(col.shape, np.nan)
    first_col = np.minimum(np.floor(col), lattice.cols[1] - 2).astype(np.int64)
    first_row = np.minimum(np.floor(row), lattice.rows[1] - 2).astype(np.int64)
    at = 0
    while at < col.size:
        size = min(CHUNK_POINTS, col.size - at)
        while size > 1 and _posts(first_row, first_col, at, size) > CHUNK_POSTS:
            size //= 2
        part = slice(at, at + size)
        top, left = int(first_row[part].min()), int(first_col[part].min())
        rows = int(first_row[part].max()) - top + 2
        cols = int(first_col[part].max()) - left + 2
        posts = reader.window(lattice, top, left, rows, cols).height_m
        r, c = first_row[part] - top, first_col[part] - left
        height[part] = _bilinear(
            posts, r, c, row[part] - first_row[part], col[part] - first_col[part]
        )
        at += size
    return height


def _posts(row: IntArray, col: IntArray, at: int, size: int) -> int:
    part = slice(at, at + size)
    return int((np.ptp(row[part]) + 2) * (np.ptp(col[part]) + 2))


def _bilinear(
    posts: FloatArray,
    row: IntArray,
    col: IntArray,
    part_row: FloatArray,
    part_col: FloatArray,
) -> FloatArray:
    """Bilinear value in each cell; posts without weight need not be known."""
    total = np.zeros(part_row.shape)
    for down, weight_row in ((0, 1.0 - part_row), (1, part_row)):
        for along, weight_col in ((0, 1.0 - part_col), (1, part_col)):
            weight = weight_row * weight_col
            post = posts[row + down, col + along]
            total += np.where(weight > 0.0, post, 0.0) * weight
    return total
