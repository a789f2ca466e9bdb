"""Posts of one elevation file: raw values read, and turned into metres."""

from pathlib import Path
from typing import Any, Final, NamedTuple, Protocol

import numpy as np
import rasterio
from numpy.typing import NDArray
from rasterio.errors import RasterioError
from rasterio.windows import Window

from profiler.constants import HEIGHT_UNIT_M
from profiler.errors import DemError
from profiler.model.arrays import BoolArray, FloatArray
from profiler.terrain.raster import Raster, short_cause

#: Values that stand for "no data" without saying so (common practice) [raw].
SENTINELS: Final = (-32768.0, -32767.0, -9999.0, -99999.0, -999999.0)
#: Magnitude above which a raw value is a filler such as 3.4e38 [raw].
FILLER_ABOVE: Final = 1e30

RawArray = NDArray[Any]


class Coded(Protocol):
    """How a file codes its heights; `Raster` is one."""

    @property
    def path(self) -> Path:
        """The file."""

    @property
    def nodata(self) -> float | None:
        """Raw value that means void."""

    @property
    def scale(self) -> float:
        """Height = raw·scale + offset, in ``unit``."""

    @property
    def offset(self) -> float:
        """See ``scale``."""

    @property
    def unit(self) -> str:
        """Unit of the heights: m, ft or us-ft."""

    @property
    def has_mask(self) -> bool:
        """Whether a mask hides posts besides the nodata value."""


class Posts(NamedTuple):
    """A window of posts, in metres."""

    height_m: FloatArray
    """(rows, cols); NaN where there is none."""
    filler: BoolArray
    """(rows, cols); posts that held an untagged filler value."""


def read_posts(
    dataset: "rasterio.DatasetReader",
    raster: Raster,
    row: int,
    col: int,
    rows: int,
    cols: int,
) -> Posts:
    """A window of posts in metres, NaN where the file has no ground.

    Parameters
    ----------
    dataset : DatasetReader
        The open file of ``raster``.
    raster : Raster
        Its header.
    row, col, rows, cols : int
        The window; it lies inside the file.

    Raises
    ------
    DemError
        If the blocks cannot be decoded (a truncated or damaged file).
    """
    raw, hidden = read_raw(dataset, raster, Window(col, row, cols, rows))
    return to_metres(raw, raster, hidden)


def read_raw(
    dataset: "rasterio.DatasetReader", coded: Coded, window: Window
) -> tuple[RawArray, BoolArray | None]:
    """A window of raw values, and which of them a mask hides.

    Parameters
    ----------
    dataset : DatasetReader
        The open file.
    coded : Coded
        How it codes heights.
    window : Window
        Lies inside the file.

    Raises
    ------
    DemError
        If the blocks cannot be decoded (a truncated or damaged file).
    """
    try:
        raw = dataset.read(1, window=window)
        hidden = dataset.read_masks(1, window=window) == 0 if coded.has_mask else None
    except RasterioError as error:
        cause = short_cause(error)
        msg = (
            f'"{coded.path.name}" is damaged or cut short near row {window.row_off}, '
            f"column {window.col_off} ({cause}). Copy or download it again."
        )
        raise DemError(msg) from error
    return raw, hidden


def to_metres(raw: RawArray, coded: Coded, hidden: BoolArray | None) -> Posts:
    """Raw values to metres: nodata and fillers to NaN, scale, offset and unit.

    Parameters
    ----------
    raw : (rows, cols) of the file's own type
        Raw values.
    coded : Coded
        How the file codes heights.
    hidden : (rows, cols) bool or None
        Posts that a mask hides; None without a mask.
    """
    height = raw.astype(np.float64)
    with np.errstate(invalid="ignore", over="ignore"):
        void = ~np.isfinite(height)
        if coded.nodata is not None and np.isfinite(coded.nodata):
            void |= height == float(np.asarray(coded.nodata).astype(_wide(raw.dtype)))
        if hidden is not None:
            void |= hidden
        filler = np.abs(height) > FILLER_ABOVE
        for value in SENTINELS:
            filler |= height == value
        filler &= ~void
        height = (height * coded.scale + coded.offset) * HEIGHT_UNIT_M[coded.unit]
    height[void | filler] = np.nan
    return Posts(height, filler)


def _wide(dtype: "np.dtype[np.generic]") -> "np.dtype[np.generic]":
    """Type in which a nodata tag is compared: float32 rounds it, integers do not."""
    return dtype if dtype == np.float32 else np.dtype(np.float64)
