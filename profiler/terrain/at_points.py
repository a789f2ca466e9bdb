"""Bilinear ground at any points: beside a path, around a mast."""

from typing import Final

import numpy as np

from profiler.model import BoolArray, FloatArray, IntArray
from profiler.terrain.dem import Terrain
from profiler.terrain.lattice import Lattice
from profiler.terrain.pixel_path import snapped
from profiler.terrain.windows import PostReader, runs_of_cells

#: Points read together [1]; our choice.
CHUNK_POINTS: Final = 4096


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
            places = lattice.posts_at(lat_deg[todo], lon_deg[todo])
            col, row = (snapped(value) for value in places)
            inside = _inside(lattice, col, row)
            index = todo[inside]
            height[index] = _read(reader, lattice, col[inside], row[inside])
    return height


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
    for part in runs_of_cells(first_row, first_col, most=CHUNK_POINTS):
        top, left = int(first_row[part].min()), int(first_col[part].min())
        rows = int(first_row[part].max()) - top + 2
        cols = int(first_col[part].max()) - left + 2
        posts = reader.window(lattice, top, left, rows, cols).height_m
        r, c = first_row[part] - top, first_col[part] - left
        height[part] = _bilinear(
            posts, r, c, row[part] - first_row[part], col[part] - first_col[part]
        )
    return height


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
