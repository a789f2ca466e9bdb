"""One elevation file: opened, and what its header says.

A post is the centre of a pixel, whatever the file's registration tag: the raster
library has already moved the origin of a point-registered file by half a pixel, so
the same posts give the same ground at both registrations.
"""

import os
import warnings
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import Final, NamedTuple

import numpy as np
import rasterio
from rasterio.enums import ColorInterp, MaskFlags
from rasterio.errors import NotGeoreferencedWarning, RasterioError

from profiler.earth.projection import Projector, crs_from_user, projector
from profiler.errors import DemError
from profiler.model.arrays import FloatArray
from profiler.terrain.units import unit_from_text

#: Memory for decoded blocks of all files [bytes]; our choice: small on any machine.
BLOCK_CACHE_BYTES: Final = 64 * 2**20
#: Posts along a side of the thinned grid whose range a message names [1]; our choice.
THINNED_POSTS: Final = 512


class Affine(NamedTuple):
    """x = x0 + dx_col·col + dx_row·row, y likewise, at post (row, col)."""

    x0: float
    dx_col: float
    dx_row: float
    y0: float
    dy_col: float
    dy_row: float

    def at(self, row: FloatArray, col: FloatArray) -> tuple[FloatArray, FloatArray]:
        """CRS coordinates of posts."""
        return (
            self.x0 + self.dx_col * col + self.dx_row * row,
            self.y0 + self.dy_col * col + self.dy_row * row,
        )

    def posts(self, x: FloatArray, y: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Column and row coordinates, whole numbers at posts, of CRS coordinates."""
        det = self.dx_col * self.dy_row - self.dx_row * self.dy_col
        dx = np.asarray(x) - self.x0
        dy = np.asarray(y) - self.y0
        return (
            (dx * self.dy_row - dy * self.dx_row) / det,
            (dy * self.dx_col - dx * self.dy_col) / det,
        )


@dataclass(frozen=True, slots=True, kw_only=True)
class Raster:
    """The header of one elevation file."""

    path: Path
    rows: int
    cols: int
    affine: Affine
    """Post (row, col) to CRS units."""
    crs: Projector
    nodata: float | None
    scale: float
    offset: float
    has_mask: bool
    """Whether a mask or alpha band hides posts besides the nodata value."""
    unit: str
    """Unit of the heights in use: m, ft or us-ft."""
    unit_stated: str | None
    """Unit that the file states, or None."""
    stamp: tuple[int, int]
    """Size [bytes] and time of change [ns] when the header was read."""


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
    with open_grid(path) as dataset:
        return _header_of(dataset, path, unit=unit, crs_text=crs_text)


@contextmanager
def open_grid(path: Path) -> Iterator["rasterio.DatasetReader"]:
    """One elevation file, open; refused when it is no grid of heights.

    Raises
    ------
    DemError
        If the file is missing, unreadable or no grid of heights that lies somewhere.
    """
    if not path.exists():
        msg = f'No elevation file "{path}". Check its name.'
        raise DemError(msg)
    if path.is_file() and path.stat().st_size == 0:
        msg = f'"{path.name}" is empty (0 bytes). Copy or download it again.'
        raise DemError(msg)
    with warnings.catch_warnings():
        warnings.simplefilter("ignore", NotGeoreferencedWarning)
        try:
            with rasterio.open(path) as dataset:
                refuse_what_is_no_grid(dataset, path.name)
                yield dataset
        except UnicodeEncodeError as error:
            shown = path.name.encode(errors="replace").decode()
            msg = f'The name "{shown}" is not UTF-8. Rename the file.'
            raise DemError(msg) from error
        except RasterioError as error:
            cause = short_cause(error)
            msg = (
                f'"{path.name}" cannot be read as an elevation grid ({cause}). '
                "Give a GeoTIFF, VRT, HGT or ASCII grid."
            )
            raise DemError(msg) from error


def short_cause(error: BaseException) -> str:
    """First sentence of a library's message or its cause, without the file's folder."""
    error = error.__cause__ or error
    text = str(error).strip().splitlines()[0] if str(error).strip() else "damaged"
    return Path(text).name if os.sep in text else text


def _header_of(
    dataset: "rasterio.DatasetReader",
    path: Path,
    *,
    unit: str | None,
    crs_text: str | None,
) -> Raster:
    crs = crs_of(dataset, path.name, crs_text)
    raster = raster_of(dataset, path, crs=crs, unit=unit)
    if unit is None and dataset.units[0] and unit_from_text(dataset.units[0]) is None:
        msg = (
            f'"{path.name}" states heights in "{dataset.units[0]}", which is not read. '
            "Say --dem-unit m, ft or us-ft, or convert them to metres."
        )
        raise DemError(msg)
    map_unit_is_foot = crs.unit_name not in ("degree", "metre")
    if unit is None and raster.unit_stated is None and map_unit_is_foot:
        low, high = (f"{v:,.0f}".replace(",", " ") for v in _height_range(dataset))
        msg = (
            f"Heights run from {low} to {high}, unit not stated, map unit "
            f"{crs.unit_name}. Say --dem-unit us-ft, ft or m."
        )
        raise DemError(msg)
    return raster


def raster_of(
    dataset: "rasterio.DatasetReader", path: Path, *, crs: Projector, unit: str | None
) -> Raster:
    """Header of an open elevation grid whose CRS is known; nothing is refused here.

    Parameters
    ----------
    dataset : DatasetReader
        The open file.
    path : Path
    crs : Projector
    unit : str or None
        Declared unit of heights (m, ft, us-ft), which wins over the file's.
    """
    stated = unit_from_text(dataset.units[0]) or crs.vertical_unit
    return Raster(
        path=path,
        rows=dataset.height,
        cols=dataset.width,
        affine=affine_of(dataset),
        crs=crs,
        nodata=dataset.nodata,
        scale=dataset.scales[0],
        offset=dataset.offsets[0],
        has_mask=hides_posts(dataset),
        unit=unit or stated or "m",
        unit_stated=stated,
        stamp=stamp_of(path),
    )


def stamp_of(path: Path) -> tuple[int, int]:
    """Size [bytes] and time of the last change [ns] of a file."""
    status = path.stat()
    return status.st_size, status.st_mtime_ns


def affine_of(dataset: "rasterio.DatasetReader") -> Affine:
    """Post (row, col) to CRS units: from cell corners to cell centres."""
    t = dataset.transform
    return Affine(t.c + (t.a + t.b) / 2.0, t.a, t.b, t.f + (t.d + t.e) / 2.0, t.d, t.e)


def hides_posts(dataset: "rasterio.DatasetReader") -> bool:
    """Whether a mask or alpha band hides posts besides the nodata value."""
    # a mask of the band alone (as a VRT may have) raises no flag at all
    return dataset.mask_flag_enums[0] not in ([MaskFlags.all_valid], [MaskFlags.nodata])


def refuse_what_is_no_grid(dataset: "rasterio.DatasetReader", name: str) -> None:
    """Raise DemError unless the file is one band of heights that lies somewhere."""
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


def crs_of(
    dataset: "rasterio.DatasetReader", name: str, crs_text: str | None
) -> Projector:
    """CRS of an open file, else the declared one.

    Parameters
    ----------
    dataset : DatasetReader
        The open file.
    name : str
        Its name, for the error message.
    crs_text : str or None
        The declared CRS, such as "EPSG:32627".

    Raises
    ------
    DemError
        If there is none, or the file's is no map.
    InputError
        If the declared one cannot be read.
    """
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
    shape = (min(dataset.height, THINNED_POSTS), min(dataset.width, THINNED_POSTS))
    posts = dataset.read(1, out_shape=shape, masked=True).astype("float64")
    posts = np.ma.masked_invalid(posts)
    if posts.count() == 0:
        return 0.0, 0.0
    return float(posts.min()), float(posts.max())
