"""The elevation model: one or many files opened as one terrain."""

import glob
from collections.abc import Iterable
from dataclasses import dataclass
from pathlib import Path
from typing import Final, TypeVar

import numpy as np

from profiler.errors import DemError, InputError
from profiler.model.note import Note
from profiler.model.terrain import DemKind, Interpolation
from profiler.terrain.findings import NO_DATUM_SHIFT
from profiler.terrain.lattice import Lattice, group_rasters, outline_of
from profiler.terrain.raster import Raster, read_header
from profiler.terrain.units import checked_unit

Choice = TypeVar("Choice", Interpolation, DemKind)

#: Endings taken from a folder (common practice).
SUFFIXES: Final = (".tif", ".tiff", ".gtiff", ".vrt", ".hgt", ".asc")
#: Characters that make a name a pattern.
PATTERN_CHARS: Final = "*?["


@dataclass(frozen=True, slots=True, kw_only=True)
class Terrain:
    """An elevation model: headers and settings, no open file."""

    rasters: tuple[Raster, ...]
    """Every file, in the order given."""
    lattices: tuple[Lattice, ...]
    """Grids made of them, the finest first."""
    interpolation: Interpolation
    dem_kind: DemKind
    sea_level_m: float | None
    """Height given to voids on request [m]; None leaves them void."""
    hash_all: bool
    """Whether files above 200 MB are hashed too."""
    notes: tuple[Note, ...]

    @property
    def lattice_numbers(self) -> tuple[int, ...]:
        """For each file, the index of its lattice."""
        numbers = [0] * len(self.rasters)
        for k, lattice in enumerate(self.lattices):
            for tile in lattice.tiles:
                numbers[tile.number] = k
        return tuple(numbers)

    def cell_of(self, number: int) -> tuple[float, float]:
        """Ground distance between a file's posts, down a column, along a row [m]."""
        return self.lattices[self.lattice_numbers[number]].cell_m

    def outline_deg(self) -> tuple[float, float, float, float]:
        """South, west, north and east of all files [deg]; east may run past 180."""
        boxes = np.array([outline_of(lattice) for lattice in self.lattices])
        low, high = boxes.min(axis=0), boxes.max(axis=0)
        return float(low[0]), float(low[1]), float(high[2]), float(high[3])


def open_terrain(
    *dem: str | Path,
    interpolation: Interpolation | str = Interpolation.BILINEAR,
    dem_kind: DemKind | str = DemKind.UNKNOWN,
    dem_unit: str | None = None,
    dem_crs: str | None = None,
    sea_level_m: float | None = None,
    hash_all: bool = False,
) -> Terrain:
    """Elevation model made of files, folders and name patterns.

    Parameters
    ----------
    *dem : str or Path
        Files, folders (their elevation files) or patterns such as ``tiles/*.tif``.
        Where files overlap the finest that has a value wins, then the first given.
    interpolation : Interpolation or str
        ``bilinear`` (default), ``highest`` or ``nearest``.
    dem_kind : DemKind or str
        ``bare``, ``surface`` or ``unknown`` (default): what the files show.
    dem_unit : str or None
        Unit of heights (m, ft, us-ft), which wins over what files state.
    dem_crs : str or None
        CRS such as "EPSG:32627" for files that state none.
    sea_level_m : float or None [m]
        Height for voids; None (default) leaves them void.
    hash_all : bool
        Hash files above 200 MB too.

    Raises
    ------
    InputError
        If an option has no such value.
    DemError
        If no file is found or one cannot be used.
    """
    unit = None if dem_unit is None else checked_unit(dem_unit)
    paths = expand(dem)
    rasters = tuple(read_header(p, unit=unit, crs_text=dem_crs) for p in paths)
    lattices = group_rasters(rasters)
    return Terrain(
        rasters=rasters,
        lattices=lattices,
        interpolation=_one_of(Interpolation, interpolation, "interpolation"),
        dem_kind=_one_of(DemKind, dem_kind, "dem kind"),
        sea_level_m=sea_level_m,
        hash_all=hash_all,
        notes=tuple(_header_notes(rasters, lattices, unit)),
    )


def _one_of(kind: type[Choice], value: str, what: str) -> Choice:
    try:
        return kind(value)
    except ValueError:
        names = ", ".join(k.value for k in kind)
        msg = f'{what.capitalize()} "{value}" is not one of {names}.'
        raise InputError(msg) from None


def expand(names: Iterable[str | Path]) -> list[Path]:
    """Files behind names, folders and patterns, each once, in order.

    Raises
    ------
    DemError
        If a name, folder or pattern stands for no file.
    """
    paths: list[Path] = []
    for name in names:
        found = _files_of(Path(name))
        paths += [p for p in found if p not in paths]
    if not paths:
        msg = "No elevation file was named. Give one with --dem."
        raise DemError(msg)
    return paths


def _files_of(path: Path) -> list[Path]:
    if path.is_dir():
        files = sorted(p for p in path.iterdir() if p.suffix.lower() in SUFFIXES)
        if not files:
            kinds = ", ".join(SUFFIXES)
            msg = f'Folder "{path}" holds no elevation file ({kinds}).'
            raise DemError(msg)
        return files
    if path.exists() or not any(c in str(path) for c in PATTERN_CHARS):
        return [path]
    # Path.glob takes no absolute pattern, which is what people type
    files = sorted(Path(p) for p in glob.glob(str(path)))  # noqa: PTH207
    if not files:
        msg = f'No file matches "{path}".'
        raise DemError(msg)
    return files


def _header_notes(
    rasters: tuple[Raster, ...], lattices: tuple[Lattice, ...], unit: str | None
) -> Iterable[Note]:
    """What a reader must know about the files before any post is read."""
    silent = [r.path.name for r in rasters if r.unit_stated is None]
    if unit is None and silent:
        text = (
            f"{first_and_more(silent)}: unit of heights not stated; metres are taken."
        )
        yield Note(code="unit-not-stated", text=text)
    for stated in sorted({r.unit_stated for r in rasters if r.unit_stated}):
        if unit not in (None, stated):
            text = f"Files state heights in {stated}; {unit} was declared and is used."
            yield Note(code="unit-overruled", text=text)
    rough = [
        tile.raster.path.name
        for lattice in lattices
        for tile in lattice.tiles
        if lattice.crs.ballpark
    ]
    if rough:
        text = f"{first_and_more(rough)}: {NO_DATUM_SHIFT}."
        yield Note(code="datum-shift", text=text)


def first_and_more(names: list[str]) -> str:
    """One file's name, or the first and how many more."""
    more = f" and {len(names) - 1} more" if len(names) > 1 else ""
    return f"{names[0]}{more}"
