"""Windows of posts of one lattice, read from the files it is made of."""

from collections.abc import Iterator
from typing import Final, NamedTuple

import numpy as np
import rasterio
from rasterio.errors import RasterioError

from profiler.constants import SEAM_STEP_M
from profiler.errors import DemError
from profiler.model.arrays import BoolArray, FloatArray, IntArray
from profiler.terrain.lattice import Lattice, Tile
from profiler.terrain.posts import read_posts
from profiler.terrain.raster import BLOCK_CACHE_BYTES, Raster, stamp_of

#: Files kept open at once; our choice, below any system's limit.
MOST_OPEN: Final = 64
#: Most posts in one window [1]; our choice: a window of a straight run of 256 cells
#: stays below half a megabyte.
WINDOW_POSTS: Final = 160_000


class Window(NamedTuple):
    """Posts of a lattice in metres."""

    height_m: FloatArray
    """(rows, cols); NaN where no tile has ground."""
    owner: IntArray
    """(rows, cols); number of the file each post came from, −1 where void."""


def _opened(raster: Raster) -> "rasterio.DatasetReader":
    """A file opened for its posts, refused when it is no longer the one it was."""
    name = raster.path.name
    try:
        changed = stamp_of(raster.path) != raster.stamp
        dataset = rasterio.open(raster.path)
    except (RasterioError, OSError) as error:
        msg = f'"{name}" can no longer be opened.'
        raise DemError(msg) from error
    if changed:
        dataset.close()
        msg = f'"{name}" has changed since it was opened. Open the terrain again.'
        raise DemError(msg)
    return dataset


class PostReader:
    """Reads windows of posts; keeps files open while it is in use.

    Notes
    -----
    Not a value object: use it in a ``with`` block and in one thread.
    """

    def __init__(self) -> None:
        self._open: dict[int, rasterio.DatasetReader] = {}
        self._env = rasterio.Env(GDAL_CACHEMAX=BLOCK_CACHE_BYTES)
        self.fillers: dict[int, tuple[int, int, int]] = {}
        """By file: count of untagged fillers read, row and column of the first."""
        self.steps: dict[tuple[int, int], float] = {}
        """By pair of overlapping files: largest median step seen [m]."""

    def __enter__(self) -> "PostReader":
        """Take the settings under which files are read."""
        self._env.__enter__()
        return self

    def __exit__(self, *exc: object) -> None:
        """Close every file."""
        for dataset in self._open.values():
            dataset.close()
        self._open.clear()
        self._env.__exit__(*exc)

    def _dataset(self, tile: Tile) -> "rasterio.DatasetReader":
        dataset = self._open.pop(tile.number, None)
        if dataset is None:
            if len(self._open) >= MOST_OPEN:
                self._open.pop(next(iter(self._open))).close()
            dataset = _opened(tile.raster)
        self._open[tile.number] = dataset
        return dataset

    def window(
        self, lattice: Lattice, row: int, col: int, rows: int, cols: int
    ) -> Window:
        """Posts row … row+rows−1, col … col+cols−1 of the lattice, void outside.

        Parameters
        ----------
        lattice : Lattice
        row, col, rows, cols : int
            First row and column of the window on the lattice, and how many of each.

        Raises
        ------
        DemError
            If a file is damaged.
        """
        height = np.full((rows, cols), np.nan)
        owner = np.full((rows, cols), -1, dtype=np.int64)
        for tile in lattice.tiles:
            for turn in _turns(lattice, tile, col, cols):
                self._fill(tile, turn, (row, col), height, owner)
        return Window(height, owner)

    def _fill(
        self,
        tile: Tile,
        turn: int,
        corner: tuple[int, int],
        height: FloatArray,
        owner: IntArray,
    ) -> None:
        """Put one tile's posts, shifted by a turn, where nothing is yet."""
        row, col = corner
        top, left = tile.row, tile.col + turn
        r0, r1 = max(row, top), min(row + height.shape[0], top + tile.raster.rows)
        c0, c1 = max(col, left), min(col + height.shape[1], left + tile.raster.cols)
        if r0 >= r1 or c0 >= c1:
            return
        part = (slice(r0 - row, r1 - row), slice(c0 - col, c1 - col))
        taken = owner[part] >= 0
        posts = read_posts(
            self._dataset(tile), tile.raster, r0 - top, c0 - left, r1 - r0, c1 - c0
        )
        self._note_fillers(tile, posts.filler, r0 - top, c0 - left)
        known = np.isfinite(posts.height_m)
        self._note_overlap(tile, height[part], posts.height_m, owner[part])
        put = known & ~taken
        height[part][put] = posts.height_m[put]
        owner[part][put] = tile.number

    def _note_fillers(self, tile: Tile, filler: BoolArray, row: int, col: int) -> None:
        found = int(np.count_nonzero(filler))
        if found:
            r, c = np.argwhere(filler)[0]
            before = self.fillers.get(tile.number, (0, row + int(r), col + int(c)))
            self.fillers[tile.number] = (before[0] + found, before[1], before[2])

    def _note_overlap(
        self, tile: Tile, old: FloatArray, new: FloatArray, owner: IntArray
    ) -> None:
        for other in np.unique(owner[owner >= 0]):
            gap = (new - old)[(owner == other) & np.isfinite(new)]
            if gap.size == 0:
                continue
            step = float(np.median(gap))
            pair = (int(other), tile.number)
            if abs(step) > max(SEAM_STEP_M, abs(self.steps.get(pair, 0.0))):
                self.steps[pair] = step


def tiles_within(lattice: Lattice, row: int, col: int, rows: int, cols: int) -> int:
    """How many tiles (a tile met again after a turn counts twice) reach a window.

    Parameters
    ----------
    lattice : Lattice
    row, col, rows, cols : int
        First row and column of the window on the lattice, and how many of each.
    """
    reached = 0
    for tile in lattice.tiles:
        if tile.row < row + rows and row < tile.row + tile.raster.rows:
            for turn in _turns(lattice, tile, col, cols):
                left = tile.col + turn
                reached += left < col + cols and col < left + tile.raster.cols
    return reached


def _turns(lattice: Lattice, tile: Tile, col: int, cols: int) -> range:
    """Shifts by whole turns [columns] that may bring a tile into a window."""
    if lattice.turn_cols is None:
        return range(1)
    turn = lattice.turn_cols
    first = -((tile.col + tile.raster.cols - 1 - col) // turn)
    last = (col + cols - 1 - tile.col) // turn
    return range(first * turn, last * turn + 1, turn)


def runs_of_cells(row: IntArray, col: IntArray, *, most: int) -> Iterator[slice]:
    """Runs of cells, in the order given, that share a window of bearable size.

    Parameters
    ----------
    row, col : (n,) int64 [cells]
        First row and column of each cell, which reaches to the next of both.
    most : int
        Most cells in a run; it is shorter where the window would pass `WINDOW_POSTS`.
    """
    at = 0
    while at < row.size:
        size = min(most, row.size - at)
        while size > 1 and _posts_around(row, col, slice(at, at + size)) > WINDOW_POSTS:
            size //= 2
        yield slice(at, at + size)
        at += size


def _posts_around(row: IntArray, col: IntArray, run: slice) -> int:
    return int((np.ptp(row[run]) + 2) * (np.ptp(col[run]) + 2))
