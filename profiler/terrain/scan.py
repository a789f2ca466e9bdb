"""One pass over every post of an elevation file, block by block, in bounded memory."""

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from typing import Final, NamedTuple

import numpy as np
import rasterio
from rasterio.windows import Window

from profiler.constants import LOWEST_GROUND_M, VOID_BELOW_M
from profiler.model.arrays import BoolArray, FloatArray
from profiler.terrain.posts import Coded, RawArray, read_raw, to_metres

#: Posts held at once, unless one block of the file is larger [1]; our choice: with
#: their copies about 50 MB.
SCAN_POSTS: Final = 2**20

Progress = Callable[[int, int], None]


class Cell(NamedTuple):
    """A post by its row and column, with its height or raw value."""

    row: int
    col: int
    value: float


class Found(NamedTuple):
    """How many posts are of one kind, and the first of them."""

    total: int
    first: Cell


@dataclass(slots=True)
class Tally:
    """What is counted during the pass; not a value object."""

    posts: int = 0
    voids: int = 0
    zeros: int = 0
    lowest: Cell | None = None
    highest: Cell | None = None
    outside: Found | None = None
    """Posts below -500 m or above 9000 m."""
    fillers: dict[float, Found] = field(default_factory=dict)
    """By raw value: posts of an untagged filler."""

    def add(
        self, raw: RawArray, height_m: FloatArray, filler: BoolArray, at: Window
    ) -> None:
        """Count one window: raw values, heights (NaN: void) and untagged fillers.

        Parameters
        ----------
        raw : (rows, cols) of the file's own type
            Raw values.
        height_m : (rows, cols) float64 [m]
            NaN where void.
        filler : (rows, cols) bool
            Posts that held an untagged filler.
        at : Window
            Where the window lies in the file.
        """
        corner = (int(at.row_off), int(at.col_off))
        void = np.isnan(height_m)
        self.posts += height_m.size
        self.voids += int(np.count_nonzero(void))
        self.zeros += int(np.count_nonzero(height_m == 0.0))
        for value in np.unique(raw[filler]):
            now = _found(raw == value, raw, corner)
            self.fillers[float(value)] = _joined(self.fillers.get(float(value)), now)
        if void.all():
            return
        low = _cell(int(np.nanargmin(height_m)), height_m, corner)
        high = _cell(int(np.nanargmax(height_m)), height_m, corner)
        if self.lowest is None or low.value < self.lowest.value:
            self.lowest = low
        if self.highest is None or high.value > self.highest.value:
            self.highest = high
        if low.value < LOWEST_GROUND_M or high.value > VOID_BELOW_M:
            odd = (height_m < LOWEST_GROUND_M) | (height_m > VOID_BELOW_M)
            self.outside = _joined(self.outside, _found(odd, height_m, corner))


def _cell(at: int, values: RawArray, corner: tuple[int, int]) -> Cell:
    row, col = divmod(at, values.shape[1])
    return Cell(row + corner[0], col + corner[1], float(values[row, col]))


def _found(mask: BoolArray, values: RawArray, corner: tuple[int, int]) -> Found:
    first = _cell(int(np.argmax(mask)), values, corner)
    return Found(int(np.count_nonzero(mask)), first)


def _joined(before: Found | None, now: Found) -> Found:
    return now if before is None else Found(before.total + now.total, before.first)


def scan(
    dataset: "rasterio.DatasetReader", coded: Coded, progress: Progress | None
) -> Tally:
    """Count the posts of a file.

    Parameters
    ----------
    dataset : DatasetReader
        The open file.
    coded : Coded
        How it codes heights.
    progress : callable or None
        Called with windows done and windows in all.

    Raises
    ------
    DemError
        If a block cannot be decoded; the message says where.
    """
    tally = Tally()
    windows = list(windows_of(dataset.shape, dataset.block_shapes[0]))
    for done, window in enumerate(windows, start=1):
        raw, hidden = read_raw(dataset, coded, window)
        posts = to_metres(raw, coded, hidden)
        tally.add(raw, posts.height_m, posts.filler, window)
        if progress is not None:
            progress(done, len(windows))
    return tally


def windows_of(shape: tuple[int, int], block: tuple[int, int]) -> Iterator[Window]:
    """Windows of whole blocks that cover a raster once, row by row.

    Parameters
    ----------
    shape : (int, int)
        Rows and columns of the raster.
    block : (int, int)
        Rows and columns of its blocks.
    """
    # a block row is read in one piece when it is short, else along the row
    width = min(shape[1], block[1] * max(1, SCAN_POSTS // (block[0] * block[1])))
    height = block[0] * max(1, SCAN_POSTS // (width * block[0]))
    for row in range(0, shape[0], height):
        for col in range(0, shape[1], width):
            yield Window(
                col, row, min(width, shape[1] - col), min(height, shape[0] - row)
            )
