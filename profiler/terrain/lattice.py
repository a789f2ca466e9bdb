"""Files whose posts lie on one lattice, read as one grid.

Tiles with the same CRS, cell and alignment are one grid, so that ground between the
last post of one tile and the first of the next is interpolated like any other. On a
geographic lattice columns repeat after 360 degrees: a tile east of the antimeridian
joins one west of it.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Final, NamedTuple

import numpy as np
import rasterio
from rasterio.errors import RasterioError

from profiler.constants import SEAM_STEP_M
from profiler.earth.geodesic import geodesic_line
from profiler.earth.projection import Projector
from profiler.errors import DemError, InputError
from profiler.model.arrays import FloatArray, IntArray
from profiler.model.question import Point
from profiler.terrain.raster import (
    BLOCK_CACHE_BYTES,
    Affine,
    Raster,
    read_posts,
    stamp_of,
)

#: Tiles whose posts lie this close to the lattice are on it [cells]; our choice.
ALIGNED_CELLS: Final = 1e-3
#: Cells whose sizes differ by less are equally fine [1]; our choice: the scale of a
#: projection changes more across one zone.
SAME_SIZE: Final = 1.01
#: Degrees in a turn.
TURN_DEG: Final = 360.0
#: Places along each side of a file from which its outline is told [1]; our choice.
OUTLINE_STEPS: Final = 17
#: Files kept open at once; our choice, below any system's limit.
MOST_OPEN: Final = 64


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
        t = self.affine
        det = t.dx_col * t.dy_row - t.dx_row * t.dy_col
        dx = np.asarray(x) - t.x0
        dy = np.asarray(y) - t.y0
        col = (dx * t.dy_row - dy * t.dx_row) / det
        row = (dy * t.dx_col - dx * t.dy_col) / det
        return col, row

    def to_crs(self, col: FloatArray, row: FloatArray) -> tuple[FloatArray, FloatArray]:
        """CRS coordinates of column and row coordinates."""
        t = self.affine
        col, row = np.asarray(col), np.asarray(row)
        return (
            t.x0 + t.dx_col * col + t.dx_row * row,
            t.y0 + t.dy_col * col + t.dy_row * row,
        )


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
    det = a.dx_col * a.dy_row - a.dx_row * a.dy_col
    dx, dy = b.x0 - a.x0, b.y0 - a.y0
    col = (dx * a.dy_row - dy * a.dx_row) / det
    row = (dy * a.dx_col - dx * a.dy_col) / det
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
    t = raster.affine
    row, col = raster.rows / 2.0 - 0.5, raster.cols / 2.0 - 0.5
    cols = np.array([col, col, col + 1.0])
    rows = np.array([row, row + 1.0, row])
    x = t.x0 + t.dx_col * cols + t.dx_row * rows
    y = t.y0 + t.dy_col * cols + t.dy_row * rows
    lat, lon = raster.crs.to_wgs84(x, y)
    if not (np.all(np.isfinite(lat)) and np.all(np.abs(lat) <= 90.0)):
        msg = (
            f'"{raster.path.name}" lies outside its own coordinate system '
            f"({raster.crs.crs_name}). Check its CRS and its place."
        )
        raise DemError(msg)
    try:
        here, down, along = (
            Point(lat_deg=float(a), lon_deg=(float(b) + 180.0) % TURN_DEG - 180.0)
            for a, b in zip(lat, lon, strict=True)
        )
        cell = (geodesic_line(here, down).length_m, geodesic_line(here, along).length_m)
    except InputError as error:
        msg = f'"{raster.path.name}" has cells of no size on the ground; check its CRS.'
        raise DemError(msg) from error
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

    def _note_fillers(self, tile: Tile, filler: np.ndarray, row: int, col: int) -> None:
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
    """How many tiles (a tile met again after a turn counts twice) reach a window."""
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
