"""Ground on a coarse grid for a small map: posts thinned as they are read."""

import warnings
from typing import Final

import numpy as np
import rasterio
from rasterio.enums import Resampling
from rasterio.errors import NotGeoreferencedWarning, RasterioError
from rasterio.windows import Window

from profiler.errors import DemError
from profiler.model.arrays import BoolArray, FloatArray
from profiler.terrain.dem import Terrain
from profiler.terrain.lattice import Lattice, Tile
from profiler.terrain.posts import to_metres
from profiler.terrain.raster import BLOCK_CACHE_BYTES

#: Most posts read along either side of a grid [1]; our choice: two for each cell of a
#: small map.
MOST_POSTS: Final = 520


def ground_grid(
    terrain: Terrain, lat_deg: FloatArray, lon_deg: FloatArray
) -> FloatArray:
    """Ground at places, from the nearest of thinned posts: for a picture only.

    Parameters
    ----------
    terrain : Terrain
        The elevation model; its finest grid with ground wins.
    lat_deg, lon_deg : (n, m) float64 [deg]
        The places; longitude may have run past ±180.

    Returns
    -------
    (n, m) float64 [m]
        Elevation; NaN where there is none. Sea filled on request stays NaN.

    Raises
    ------
    DemError
        If a file is damaged.

    Notes
    -----
    Of each grid at most 520 x 520 posts are read, every k-th one where the window
    is larger, so a map of a whole country costs no more than one of a valley.
    """
    ground = np.full(np.shape(lat_deg), np.nan)
    with rasterio.Env(GDAL_CACHEMAX=BLOCK_CACHE_BYTES), warnings.catch_warnings():
        warnings.simplefilter("ignore", NotGeoreferencedWarning)
        for lattice in terrain.lattices:
            open_ = np.isnan(ground)
            if not open_.any():
                break
            ground[open_] = _from_lattice(lattice, lat_deg[open_], lon_deg[open_])
    return ground


def _from_lattice(
    lattice: Lattice, lat_deg: FloatArray, lon_deg: FloatArray
) -> FloatArray:
    """Heights at (k,) places from one grid, NaN outside it."""
    col, row = lattice.posts_at(lat_deg, lon_deg)
    found = np.full(np.shape(lat_deg), np.nan)
    inside = _inside(lattice.rows, row) & _inside(lattice.cols, col)
    if not inside.any():
        return found
    rows, cols = (np.round(v[inside]).astype(np.int64) for v in (row, col))
    top, left = int(rows.min()), int(cols.min())
    size = (int(rows.max()) - top + 1, int(cols.max()) - left + 1)
    step = max(1, -(-max(size) // MOST_POSTS))
    grid = _thinned(lattice, (top, left), size, step)
    found[inside] = grid[(rows - top) // step, (cols - left) // step]
    return found


def _inside(limits: tuple[int, int], coordinate: FloatArray) -> BoolArray:
    """Whether the nearest posts are among the grid's; not where infinite."""
    nearest = np.round(coordinate)
    inside: BoolArray = (nearest >= limits[0]) & (nearest < limits[1])
    return inside


def _thinned(
    lattice: Lattice, corner: tuple[int, int], size: tuple[int, int], step: int
) -> FloatArray:
    """Every ``step``-th post of a window of a grid; NaN where no tile has one."""
    shape = (-(-size[0] // step), -(-size[1] // step))
    grid = np.full(shape, np.nan)
    for tile in lattice.tiles:
        rows = _share(corner[0], shape[0], step, tile.row, tile.raster.rows)
        cols = _share(corner[1], shape[1], step, tile.col, tile.raster.cols)
        if len(rows) == 0 or len(cols) == 0:
            continue
        part = grid[rows.start : rows.stop, cols.start : cols.stop]
        if not np.isnan(part).any():
            continue
        first = (
            corner[0] + rows.start * step - tile.row,
            corner[1] + cols.start * step - tile.col,
        )
        heights = _read(tile, first, part.shape, step)
        np.copyto(part, heights, where=np.isnan(part))
    return grid


def _share(corner: int, count: int, step: int, first: int, size: int) -> range:
    """Which of ``count`` cells of ``step`` posts have their first post in a tile."""
    start = max(0, -(-(first - corner) // step))
    stop = min(count, -(-(first + size - corner) // step))
    return range(start, max(start, stop))


def _read(
    tile: Tile, first: tuple[int, int], shape: tuple[int, ...], step: int
) -> FloatArray:
    """Heights of a tile thinned while reading, by the file's overviews if it has any.

    The window may reach past the tile by less than a step: it is cut there.
    """
    raster = tile.raster
    rows = min(shape[0] * step, raster.rows - first[0])
    cols = min(shape[1] * step, raster.cols - first[1])
    window = Window(first[1], first[0], cols, rows)
    out = (shape[0], shape[1])
    try:
        with rasterio.open(raster.path) as dataset:
            raw = dataset.read(
                1, window=window, out_shape=out, resampling=Resampling.nearest
            )
            hidden = None
            if raster.has_mask:
                masks = dataset.read_masks(1, window=window, out_shape=out)
                hidden = masks == 0
    except RasterioError as error:
        msg = (
            f'"{raster.path.name}" is damaged or cut short. Copy or download it again.'
        )
        raise DemError(msg) from error
    return to_metres(raw, raster, hidden).height_m
