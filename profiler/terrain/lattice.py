"""Files whose posts lie on one lattice: one grid.

Tiles with the same CRS, cell and alignment are one grid, so that ground between the
last post of one tile and the first of the next is interpolated like any other. On a
geographic lattice columns repeat after 360 degrees: a tile east of the antimeridian
joins one west of it.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final, NamedTuple

import numpy as np

from profiler.constants import QUARTER_TURN_DEG
from profiler.earth.geodesic import geodesic_line, within_half_turn
from profiler.earth.projection import Projector
from profiler.errors import DemError
from profiler.model.arrays import FloatArray
from profiler.model.question import Point
from profiler.terrain.raster import Affine, Raster

#: The smallest cell taken for one on the ground [m]; our choice: finer than any
#: survey, far above the rounding of coordinates.
LEAST_CELL_M: Final = 1e-3
#: Tiles whose posts lie this close to the lattice are on it [cells]; our choice.
ALIGNED_CELLS: Final = 1e-3
#: Cells whose sizes differ by less are equally fine [1]; our choice: the scale of a
#: projection changes more across one zone.
SAME_SIZE: Final = 1.01
#: Places along each side of a file from which its outline is told [1]; our choice.
OUTLINE_STEPS: Final = 17


class Tile(NamedTuple):
    """One file and where its first post lies on the lattice."""

    raster: Raster
    row: int
    col: int
    number: int
    """Index of the file among all files of the terrain."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Lattice:
    """One grid of posts made of one or more tiles."""

    tiles: tuple[Tile, ...]
    """In order of precedence where they overlap."""
    affine: Affine
    """Post (row, col) of the lattice to CRS units; of the first tile."""
    crs: Projector
    rows: tuple[int, int]
    """First row and one past the last."""
    cols: tuple[int, int]
    """First column and one past the last."""
    turn_cols: int | None
    """Columns in 360 degrees, when they are a whole number."""
    cell_m: tuple[float, float]
    """Ground distance between posts at the middle, down a column, along a row [m]."""

    @property
    def size_m(self) -> float:
        """Side of a square with the cell's area [m]: what "finer" compares."""
        return float(np.sqrt(self.cell_m[0] * self.cell_m[1]))

    def to_posts(self, x: FloatArray, y: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Column and row coordinates, whole numbers at posts, of CRS coordinates."""
        return self.affine.posts(x, y)

    def to_crs(self, col: FloatArray, row: FloatArray) -> tuple[FloatArray, FloatArray]:
        """CRS coordinates of column and row coordinates."""
        return self.affine.at(np.asarray(row), np.asarray(col))

    def posts_at(
        self, lat_deg: FloatArray, lon_deg: FloatArray
    ) -> tuple[FloatArray, FloatArray]:
        """Column and row coordinates of places, on the turn nearest the lattice.

        Parameters
        ----------
        lat_deg, lon_deg : (n,) float64 [deg]

        Returns
        -------
        col, row : (n,) float64 [cells]
            Infinite or NaN where the projection has no value.
        """
        with np.errstate(invalid="ignore"):
            col, row = self.to_posts(*self.crs.to_crs(lat_deg, lon_deg))
            if self.crs.is_geographic:
                turn = self.columns_in_turn
                middle = (self.cols[0] + self.cols[1] - 1) / 2.0
                col = col + turn * np.round((middle - col) / turn)
        return col, row

    @property
    def columns_in_turn(self) -> float:
        """Columns in 360 degrees of a geographic lattice, whole or not [1]."""
        return self.crs.turn / abs(self.affine.dx_col)


def group_rasters(rasters: Sequence[Raster]) -> tuple[Lattice, ...]:
    """Lattices of files, the finest first; files of one lattice keep their order."""
    groups: list[list[Tile]] = []
    for number, raster in enumerate(rasters):
        for group in groups:
            offset = _offset_on(group[0].raster, raster)
            if offset is not None:
                group.append(Tile(raster, *offset, number))
                break
        else:
            groups.append([Tile(raster, 0, 0, number)])
    return _finest_first([_lattice_of(group) for group in groups])


def _finest_first(lattices: list[Lattice]) -> tuple[Lattice, ...]:
    """Lattices by size of cell; of nearly equal ones the first given comes first."""
    order: list[list[Lattice]] = []
    for lattice in sorted(lattices, key=lambda one: one.size_m):
        if order and lattice.size_m <= SAME_SIZE * order[-1][0].size_m:
            order[-1].append(lattice)
        else:
            order.append([lattice])
    return tuple(
        lattice
        for equals in order
        for lattice in sorted(equals, key=lambda one: one.tiles[0].number)
    )


def _offset_on(first: Raster, other: Raster) -> tuple[int, int] | None:
    """Row and column of ``other``'s first post on ``first``'s lattice, or None."""
    if first.crs is not other.crs and not _same_code(first.crs, other.crs):
        return None
    a, b = first.affine, other.affine
    cell = np.hypot([a.dx_col, a.dx_row], [a.dy_col, a.dy_row]).min()
    drift = np.abs(np.subtract(b, a))[[1, 2, 4, 5]].max() * max(other.rows, other.cols)
    if drift > ALIGNED_CELLS * cell:
        return None
    at_col, at_row = a.posts(np.array(b.x0), np.array(b.y0))
    col, row = float(at_col), float(at_row)
    if max(abs(col - round(col)), abs(row - round(row))) > ALIGNED_CELLS:
        return None
    return round(row), round(col)


def _same_code(one: Projector, other: Projector) -> bool:
    """Whether two CRS texts carry the same authority code."""
    return ":" in one.crs_name and one.crs_name == other.crs_name


def _lattice_of(tiles: list[Tile]) -> Lattice:
    first = tiles[0].raster
    t = first.affine
    turn = None
    if first.crs.is_geographic and t.dx_row == 0.0 and t.dx_col != 0.0:
        cols = first.crs.turn / abs(t.dx_col)
        if abs(cols - round(cols)) <= ALIGNED_CELLS:
            turn = round(cols)
    if turn is not None:
        tiles = _on_near_turns(tiles, turn)
    rows = (min(k.row for k in tiles), max(k.row + k.raster.rows for k in tiles))
    cols_ = (min(k.col for k in tiles), max(k.col + k.raster.cols for k in tiles))
    return Lattice(
        tiles=tuple(tiles),
        affine=t,
        crs=_settled(first),
        rows=rows,
        cols=cols_,
        turn_cols=turn,
        cell_m=_cell_of(first),
    )


def _settled(raster: Raster) -> Projector:
    """A file's way to WGS84 with the one datum shift that serves its middle."""
    x, y = raster.affine.at(np.array(raster.rows / 2.0), np.array(raster.cols / 2.0))
    return raster.crs.settled_at(float(x), float(y))


def _on_near_turns(tiles: list[Tile], turn: int) -> list[Tile]:
    """Tiles moved by whole turns next to the first: 179 E and 179 W are neighbours."""
    half = turn // 2
    return [k._replace(col=(k.col + half) % turn - half) if k.col else k for k in tiles]


def _cell_of(raster: Raster) -> tuple[float, float]:
    """Ground distances between neighbouring posts at the middle of a file [m]."""
    row, col = raster.rows / 2.0 - 0.5, raster.cols / 2.0 - 0.5
    cols = np.array([col, col, col + 1.0])
    rows = np.array([row, row + 1.0, row])
    lat, lon = raster.crs.to_wgs84(*raster.affine.at(rows, cols))
    if not (np.all(np.isfinite(lat)) and np.all(np.abs(lat) <= QUARTER_TURN_DEG)):
        msg = (
            f'"{raster.path.name}" lies outside its own coordinate system '
            f"({raster.crs.crs_name}). Check its CRS and its place."
        )
        raise DemError(msg)
    here, down, along = (
        Point(lat_deg=float(a), lon_deg=within_half_turn(float(b)))
        for a, b in zip(lat, lon, strict=True)
    )
    cell = (geodesic_line(here, down).length_m, geodesic_line(here, along).length_m)
    if min(cell) < LEAST_CELL_M:
        msg = f'"{raster.path.name}" has cells of no size on the ground; check its CRS.'
        raise DemError(msg)
    return cell


def outline_of(lattice: Lattice) -> tuple[float, float, float, float]:
    """South, west, north and east of a lattice's outline [deg]."""
    unit = np.linspace(0.0, 1.0, OUTLINE_STEPS)
    c0, c1 = lattice.cols[0], lattice.cols[1] - 1
    r0, r1 = lattice.rows[0], lattice.rows[1] - 1
    across, down = c0 + unit * (c1 - c0), r0 + unit * (r1 - r0)
    cols = np.concatenate(
        [across, across, np.full_like(unit, c0), np.full_like(unit, c1)]
    )
    rows = np.concatenate([np.full_like(unit, r0), np.full_like(unit, r1), down, down])
    lat, lon = lattice.crs.to_wgs84(*lattice.to_crs(cols, rows))
    return float(lat.min()), float(lon.min()), float(lat.max()), float(lon.max())
