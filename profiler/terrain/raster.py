"""One elevation file: what its header says, and its posts in metres.

A post is the centre of a pixel, whatever the file's registration tag: the raster
library has already moved the origin of a point-registered file by half a pixel, so
the same posts give the same ground at both registrations.
"""

import os
import warnings
from dataclasses import dataclass
from pathlib import Path
from typing import Final, NamedTuple

import numpy as np
import rasterio
from rasterio.enums import ColorInterp, MaskFlags
from rasterio.errors import NotGeoreferencedWarning, RasterioError
from rasterio.windows import Window

from profiler.earth.projection import Projector, crs_from_user, projector
from profiler.errors import DemError
from profiler.model.arrays import BoolArray, FloatArray
from profiler.terrain.units import UNIT_M, unit_from_text

#: Values that stand for "no data" without saying so (common practice) [raw].
SENTINELS: Final = (-32768.0, -32767.0, -9999.0, -99999.0, -999999.0)
#: Magnitude above which a raw value is a filler such as 3.4e38 [raw].
FILLER_ABOVE: Final = 1e30
#: Memory for decoded blocks of all files [bytes]; our choice, far below the bar.
BLOCK_CACHE_BYTES: Final = 64 * 2**20


class Affine(NamedTuple):
    """x = x0 + dx_col·col + dx_row·row, y likewise, at post (row, col)."""

    x0: float
    dx_col: float
    dx_row: float
    y0: float
    dy_col: float
    dy_row: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Raster:
    """The header of one elevation file."""

    path: Path
    rows: int
    cols: int
    affine: Affine
    """Post (row, col) to CRS units."""
    crs: Projector
    dtype: str
    nodata: float | None
    scale: float
    offset: float
    has_mask: bool
    """Whether a mask or alpha band hides posts besides the nodata value."""
    unit: str
    """Unit of the heights in use: m, ft or us-ft."""
    unit_stated: str | None
    """Unit that the file states, or None."""
    point_registered: bool
    description: str


def read_header(path: Path, *, unit: str | None, crs_text: str | None) -> Raster:
    """Header of an elevation file, refused when no ground can come from it.

    Parameters
    ----------
    path : Path
        The file.
    unit : str or None
        Declared unit of heights (m, ft, us-ft), which wins over the file's.
    crs_text : str or None
        Declared CRS for a file that states none.

    Raises
    ------
    DemError
        If the file is missing, unreadable, has no CRS or place, or is no grid of
        heights; the message says what to do.
    """
    if not path.exists():
        msg = f'No elevation file "{path}". Check the name after --dem.'
        raise DemError(msg)
    if path.is_file() and path.stat().st_size == 0:
        msg = f'"{path.name}" is empty (0 bytes). Copy or download it again.'
        raise DemError(msg)
    with warnings.catch_warnings():
        warnings.simplefilter("ignore", NotGeoreferencedWarning)
        try:
            with rasterio.open(path) as dataset:
                return _header_of(dataset, path, unit=unit, crs_text=crs_text)
        except RasterioError as error:
            msg = (
                f'"{path.name}" cannot be read as an elevation grid ({_short(error)}). '
                "Give a GeoTIFF, VRT, HGT or ASCII grid."
            )
            raise DemError(msg) from error


def _short(error: Exception) -> str:
    """First sentence of a library's message, without the file's folder."""
    text = str(error).strip().splitlines()[0] if str(error).strip() else "damaged"
    return Path(text).name if os.sep in text else text


def _header_of(
    dataset: "rasterio.DatasetReader",
    path: Path,
    *,
    unit: str | None,
    crs_text: str | None,
) -> Raster:
    _refuse_what_is_no_grid(dataset, path.name)
    crs = _crs_of(dataset, path.name, crs_text)
    t = dataset.transform
    stated = unit_from_text(dataset.units[0]) or crs.vertical_unit
    if unit is None and stated is None and crs.unit_name not in ("degree", "metre"):
        low, high = (f"{v:,.0f}".replace(",", " ") for v in _height_range(dataset))
        msg = (
            f"Heights run from {low} to {high}, unit not stated, map unit "
            f"{crs.unit_name}. Say --dem-unit us-ft, ft or m."
        )
        raise DemError(msg)
    flags = dataset.mask_flag_enums[0]
    return Raster(
        path=path,
        rows=dataset.height,
        cols=dataset.width,
        affine=Affine(
            t.c + (t.a + t.b) / 2.0, t.a, t.b, t.f + (t.d + t.e) / 2.0, t.d, t.e
        ),
        crs=crs,
        dtype=dataset.dtypes[0],
        nodata=dataset.nodata,
        scale=dataset.scales[0],
        offset=dataset.offsets[0],
        has_mask=MaskFlags.per_dataset in flags or MaskFlags.alpha in flags,
        unit=unit or stated or "m",
        unit_stated=stated,
        point_registered=dataset.tags().get("AREA_OR_POINT") == "Point",
        description=dataset.descriptions[0] or "",
    )


def _refuse_what_is_no_grid(dataset: "rasterio.DatasetReader", name: str) -> None:
    heights = [c for c in dataset.colorinterp if c != ColorInterp.alpha]
    if dataset.count == 0 or len(heights) != 1:
        msg = f'"{name}" has {len(heights)} bands; an elevation file has one.'
        raise DemError(msg)
    if "complex" in dataset.dtypes[0]:
        msg = f'"{name}" holds complex numbers ({dataset.dtypes[0]}), not heights.'
        raise DemError(msg)
    if min(dataset.width, dataset.height) < 2:
        msg = (
            f'"{name}" has {dataset.height} x {dataset.width} posts; ground between '
            "posts needs at least 2 x 2."
        )
        raise DemError(msg)
    t = dataset.transform
    if t.is_identity or t.determinant == 0.0 or not np.all(np.isfinite(t)):
        msg = (
            f'"{name}" does not say where it lies (no geotransform). Georeference it, '
            "or use the file with its world file or .aux.xml beside it."
        )
        raise DemError(msg)


def _crs_of(
    dataset: "rasterio.DatasetReader", name: str, crs_text: str | None
) -> Projector:
    if dataset.crs is not None and dataset.crs.to_wkt():
        return projector(dataset.crs.to_wkt())
    if crs_text is not None:
        return crs_from_user(crs_text)
    msg = f'"{name}" states no coordinate reference system. Say --dem-crs EPSG:n.'
    foreign = [v for v in ("PROJ_DATA", "PROJ_LIB") if v in os.environ]
    if foreign:
        msg += f" (The environment sets {foreign[0]}, which can hide the file's own.)"
    raise DemError(msg)


def _height_range(dataset: "rasterio.DatasetReader") -> tuple[float, float]:
    """Lowest and highest raw value, from a thinned read."""
    shape = (min(dataset.height, 512), min(dataset.width, 512))
    posts = dataset.read(1, out_shape=shape, masked=True).astype("float64")
    posts = np.ma.masked_invalid(posts)
    if posts.count() == 0:
        return 0.0, 0.0
    return float(posts.min()), float(posts.max())


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
    window = Window(col, row, cols, rows)
    try:
        raw = dataset.read(1, window=window)
        hidden = dataset.read_masks(1, window=window) == 0 if raster.has_mask else None
    except RasterioError as error:
        msg = (
            f'"{raster.path.name}" is damaged or cut short near row {row}, column '
            f"{col} ({_short(error)}). Copy or download it again."
        )
        raise DemError(msg) from error
    return to_metres(raw, raster, hidden)


def to_metres(raw: FloatArray, raster: Raster, hidden: BoolArray | None) -> Posts:
    """Raw values to metres: nodata and fillers to NaN, scale, offset and unit."""
    height = raw.astype(np.float64)
    with np.errstate(invalid="ignore", over="ignore"):
        void = ~np.isfinite(height)
        if raster.nodata is not None and np.isfinite(raster.nodata):
            void |= height == float(np.asarray(raster.nodata).astype(_wide(raw.dtype)))
        if hidden is not None:
            void |= hidden
        filler = np.abs(height) > FILLER_ABOVE
        for value in SENTINELS:
            filler |= height == value
        filler &= ~void
        height = (height * raster.scale + raster.offset) * UNIT_M[raster.unit]
    height[void | filler] = np.nan
    return Posts(height, filler)


def _wide(dtype: "np.dtype[np.generic]") -> "np.dtype[np.generic]":
    """Type in which a nodata tag is compared: float32 rounds it, integers do not."""
    return dtype if dtype == np.float32 else np.dtype(np.float64)
