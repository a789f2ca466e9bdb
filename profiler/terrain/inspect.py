"""What an elevation file is, what looks wrong in it and what must be declared."""

from dataclasses import dataclass
from pathlib import Path
from typing import Any, Final

import numpy as np
import rasterio

from profiler.earth.projection import Projector
from profiler.errors import DemError
from profiler.model.note import Note
from profiler.model.terrain import DemKind
from profiler.terrain.findings import (
    Declare,
    declarations,
    file_notes,
    kind_of,
    post_notes,
)
from profiler.terrain.lattice import group_rasters, outline_of
from profiler.terrain.raster import (
    Affine,
    Raster,
    affine_of,
    crs_of,
    hides_posts,
    open_grid,
    raster_of,
)
from profiler.terrain.sample import sha256_of
from profiler.terrain.scan import Cell, Found, Progress, Tally, scan
from profiler.terrain.units import unit_from_text

_DATE_TAG: Final = "TIFFTAG_DATETIME"


@dataclass(frozen=True, slots=True, kw_only=True)
class Spot:
    """One post: where it is in the file and on the Earth, and what it holds."""

    row: int
    col: int
    lat_deg: float | None
    """None when the file does not say where it lies."""
    lon_deg: float | None
    value: float
    """Height [m], or the raw value of a filler."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Group:
    """Posts of one kind: how many, and the first."""

    count: int
    first: Spot


@dataclass(frozen=True, slots=True, kw_only=True)
class FileReport:
    """One elevation file, in plain values."""

    name: str
    bytes: int
    sha256: str
    driver: str
    """Format, as the raster library names it."""
    crs: str | None
    """Code or name of the CRS in use; None when there is none."""
    crs_declared: bool
    """Whether that CRS was declared, not stated by the file."""
    crs_problem: str | None
    """Why places cannot be computed; None when they can."""
    map_unit: str | None
    rows: int
    cols: int
    step: tuple[float, float]
    """Distance between posts in CRS units, down a column and along a row."""
    rotated: bool
    """Whether rows do not run along the CRS's axes."""
    cell_m: tuple[float, float] | None
    """The same on the ground at the middle [m]."""
    outline_deg: tuple[float, float, float, float] | None
    """South, west, north, east of the posts [deg]; east may run past 180."""
    outline_crs: tuple[float, float, float, float]
    """Least x, least y, greatest x, greatest y of the posts [CRS units]."""
    registration: str
    """As tagged: "area" or "point"; "untagged" where there is no tag."""
    dtype: str
    scale: float
    offset: float
    unit_text: str | None
    """Unit of heights in the file's own words; None when not stated."""
    unit_stated: str | None
    """The same read as m, ft or us-ft; None when not stated or not known."""
    unit_used: str
    """Unit in which the heights of this report were read."""
    vertical_datum: str | None
    """What heights stand above, as stated; None when not stated."""
    kind_stated: DemKind
    """Bare ground or surface, as description or tags have it."""
    nodata: float | None
    mask: bool
    """Whether a mask or alpha band hides posts."""
    posts: int
    voids: int
    """Posts without ground, untagged fillers included."""
    zeros: int
    """Posts of exactly 0 m."""
    lowest: Spot | None
    """None when every post is void."""
    highest: Spot | None
    fillers: tuple[Group, ...]
    """Untagged filler values: -32768, -9999, 3.4e38 and the like."""
    implausible: Group | None
    """Heights below -500 m or above 9000 m."""
    date: str | None
    """The date tag in the file's own words."""
    description: str
    tiled: bool
    block: tuple[int, int]
    """Rows and columns of a block."""
    compression: str | None
    overviews: tuple[int, ...]
    notes: tuple[Note, ...]
    """What looks wrong, or makes the file slow."""
    to_declare: tuple[Declare, ...]
    """What a person must say before this file can be used fully."""

    @property
    def void_share(self) -> float:
        """Share of posts without ground [1]."""
        return self.voids / self.posts

    @property
    def zero_share(self) -> float:
        """Share of posts of exactly 0 m [1]."""
        return self.zeros / self.posts


@dataclass(frozen=True, slots=True, kw_only=True)
class _Coding:
    """How heights are coded in a file whose CRS is not known."""

    path: Path
    nodata: float | None
    scale: float
    offset: float
    unit: str
    has_mask: bool


def inspect_file(
    path: Path,
    *,
    dem_crs: str | None = None,
    progress: Progress | None = None,
) -> FileReport:
    """Everything that an elevation file says, and what its posts look like.

    Parameters
    ----------
    path : Path
        The file. Every post is read, block by block.
    dem_crs : str or None
        CRS such as "EPSG:32627" for a file that states none.
    progress : callable or None
        Called with windows done and windows in all.

    Raises
    ------
    DemError
        If the file is missing, no grid of heights, or damaged; the message says where.
    InputError
        If ``dem_crs`` cannot be read.
    """
    with open_grid(path) as dataset:
        crs, problem = _crs_or_problem(dataset, path, dem_crs)
        raster = None
        if crs is not None:
            raster = raster_of(dataset, path, crs=crs, unit=None)
        tally = scan(dataset, raster or _coding_of(dataset, path), progress)
        return _report(dataset, path, raster=raster, problem=problem, tally=tally)


def _crs_or_problem(
    dataset: "rasterio.DatasetReader", path: Path, dem_crs: str | None
) -> tuple[Projector | None, str | None]:
    """CRS in use and why none; a CRS in which the file has no place is none."""
    try:
        crs = crs_of(dataset, path.name, dem_crs)
        group_rasters([raster_of(dataset, path, crs=crs, unit=None)])
    except DemError as error:
        return None, str(error)
    return crs, None


def _coding_of(dataset: "rasterio.DatasetReader", path: Path) -> _Coding:
    return _Coding(
        path=path,
        nodata=dataset.nodata,
        scale=dataset.scales[0],
        offset=dataset.offsets[0],
        unit=unit_from_text(dataset.units[0]) or "m",
        has_mask=hides_posts(dataset),
    )


def _report(
    dataset: "rasterio.DatasetReader",
    path: Path,
    *,
    raster: Raster | None,
    problem: str | None,
    tally: Tally,
) -> FileReport:
    crs = None if raster is None else raster.crs
    stated = unit_from_text(dataset.units[0]) or (crs.vertical_unit if crs else None)
    kind = kind_of(dataset)
    return FileReport(
        name=path.name,
        bytes=path.stat().st_size,
        sha256=sha256_of(path),
        crs_problem=problem,
        **_place_of(dataset, raster),
        unit_text=dataset.units[0] or (crs.vertical_unit if crs else None) or None,
        unit_stated=stated,
        unit_used=(raster or _coding_of(dataset, path)).unit,
        vertical_datum=crs.vertical_datum if crs else None,
        kind_stated=kind,
        **_posts_of(tally, affine_of(dataset), crs),
        **_storage_of(dataset),
        notes=(*post_notes(tally), *file_notes(dataset, crs)),
        to_declare=tuple(declarations(crs, problem, dataset.units[0], stated, kind)),
    )


def _place_of(
    dataset: "rasterio.DatasetReader", raster: Raster | None
) -> dict[str, Any]:
    """Fields of the report that tell where the posts lie."""
    crs = None if raster is None else raster.crs
    lattice = None if raster is None else group_rasters([raster])[0]
    affine = affine_of(dataset)
    return {
        "crs": crs.crs_name if crs else None,
        "crs_declared": crs is not None and not dataset.crs,
        "map_unit": crs.unit_name if crs else None,
        "rows": dataset.height,
        "cols": dataset.width,
        "step": (
            float(np.hypot(affine.dx_row, affine.dy_row)),
            float(np.hypot(affine.dx_col, affine.dy_col)),
        ),
        "rotated": affine.dx_row != 0.0 or affine.dy_col != 0.0,
        "cell_m": lattice.cell_m if lattice else None,
        "outline_deg": outline_of(lattice) if lattice else None,
        "outline_crs": _outline_crs(affine, dataset.shape),
        "registration": dataset.tags().get("AREA_OR_POINT", "untagged").lower(),
    }


def _posts_of(tally: Tally, affine: Affine, crs: Projector | None) -> dict[str, Any]:
    """Fields of the report that tell what the posts hold."""
    return {
        "posts": tally.posts,
        "voids": tally.voids,
        "zeros": tally.zeros,
        "lowest": _spot(tally.lowest, affine, crs) if tally.lowest else None,
        "highest": _spot(tally.highest, affine, crs) if tally.highest else None,
        "fillers": tuple(_group(f, affine, crs) for f in tally.fillers.values()),
        "implausible": _group(tally.outside, affine, crs) if tally.outside else None,
    }


def _storage_of(dataset: "rasterio.DatasetReader") -> dict[str, Any]:
    """Fields of the report that tell how the file keeps its posts."""
    return {
        "driver": dataset.driver,
        "dtype": dataset.dtypes[0],
        "scale": dataset.scales[0],
        "offset": dataset.offsets[0],
        "nodata": dataset.nodata,
        "mask": hides_posts(dataset),
        "date": dataset.tags().get(_DATE_TAG),
        "description": dataset.descriptions[0] or "",
        "tiled": bool(dataset.profile.get("tiled", False)),
        "block": dataset.block_shapes[0],
        "compression": dataset.compression.value if dataset.compression else None,
        "overviews": tuple(dataset.overviews(1)),
    }


def _outline_crs(
    affine: Affine, shape: tuple[int, int]
) -> tuple[float, float, float, float]:
    rows = np.array([0.0, 0.0, shape[0] - 1.0, shape[0] - 1.0])
    cols = np.array([0.0, shape[1] - 1.0, 0.0, shape[1] - 1.0])
    x, y = affine.at(rows, cols)
    return float(x.min()), float(y.min()), float(x.max()), float(y.max())


def _spot(cell: Cell, affine: Affine, crs: Projector | None) -> Spot:
    lat = lon = None
    if crs is not None:
        x, y = affine.at(np.array([float(cell.row)]), np.array([float(cell.col)]))
        lats, lons = crs.to_wgs84(x, y)
        lat, lon = float(lats[0]), float(lons[0])
    return Spot(row=cell.row, col=cell.col, lat_deg=lat, lon_deg=lon, value=cell.value)


def _group(found: Found, affine: Affine, crs: Projector | None) -> Group:
    return Group(count=found.total, first=_spot(found.first, affine, crs))
