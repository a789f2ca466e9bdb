"""Ground along a path: the finest file that has a value wins, voids stay voids."""

import hashlib
from pathlib import Path
from typing import Final

import numpy as np

from profiler.constants import HASH_BELOW_BYTES, M_PER_KM, SEAM_STEP_M
from profiler.earth.geodesic import points_at
from profiler.model.arrays import BoolArray, FloatArray, IntArray
from profiler.model.note import Note
from profiler.model.terrain import (
    GeodesicPath,
    Interpolation,
    PathProfile,
    SourceFile,
)
from profiler.terrain.dem import Terrain
from profiler.terrain.lattice import Lattice
from profiler.terrain.pieces import Layout, Pieces, lay_out, read_pieces
from profiler.terrain.pixel_path import PixelPath, fit_pixel_path
from profiler.terrain.windows import PostReader

#: Ground that differs by less at a shared crossing is continuous [m]; rounding only.
CONTINUOUS_M: Final = 1e-6
#: Longest gap between the outermost posts of two grids that is bridged, in cells of
#: the coarser [1]; our choice: a path across a cell's diagonal.
BRIDGE_CELLS: Final = 1.5
#: Longest piece of open sea outside every file [m]; over it the sight line leaves
#: its quadratic by less than 1e-9 m.
SEA_PIECE_M: Final = 1000.0

Spans = list[tuple[float, float]]


def sample_path(terrain: Terrain, path: GeodesicPath) -> PathProfile:
    """Ground under a geodesic, exact between its samples.

    Parameters
    ----------
    terrain : Terrain
    path : GeodesicPath

    Raises
    ------
    DemError
        If a file is damaged, or the path has no smooth course in a file's CRS.
    """
    spans: Spans = [(0.0, path.length_m)]
    sea_m = terrain.sea_level_m
    with PostReader() as reader:
        found, spans = _take_all(reader, terrain, path, spans, None)
        bridges, spans = _bridged(terrain, path, found, spans)
        found.append(bridges)
        filled_m = 0.0
        if sea_m is not None:
            filled_m = sum(b - a for a, b in spans)
            shore, spans = _take_all(reader, terrain, path, spans, sea_m)
            found += [*shore, _constant(spans, sea_m, SEA_PIECE_M)]
            spans = []
        notes = (*_notes(terrain, reader), *_bridge_notes(terrain, bridges))
    found.append(_constant(spans, np.nan, np.inf))
    return _assemble(terrain, path, found, notes, filled_m)


def _take_all(
    reader: PostReader,
    terrain: Terrain,
    path: GeodesicPath,
    spans: Spans,
    void_as_m: float | None,
) -> tuple[list[Pieces], Spans]:
    """Known pieces of every lattice, finest first, and the spans left open.

    With the highest of four posts the cell that a station stands in keeps its bilinear
    ground: lifting the station with it would make the cautious way the bolder one, and
    leaving it behind would bury its eye.
    """
    found = []
    for lattice in terrain.lattices:
        if not spans:
            break
        pixel = _pixel_path(lattice, path)
        layout = lay_out(lattice, pixel, spans, terrain.interpolation)
        pieces = read_pieces(reader, lattice, layout, terrain.interpolation, void_as_m)
        if terrain.interpolation is Interpolation.HIGHEST:
            ends = (layout.start_m == 0.0) | (layout.end_m == path.length_m)
            own = Layout(*(part[ends] for part in layout))
            true = read_pieces(reader, lattice, own, Interpolation.BILINEAR, void_as_m)
            pieces.height_m[ends] = true.height_m
        found.append(pieces.chosen(pieces.known))
        spans = _open_spans(pieces, ~pieces.known)
    return found, spans


def _bridged(
    terrain: Terrain, path: GeodesicPath, found: list[Pieces], spans: Spans
) -> tuple[Pieces, Spans]:
    """Straight ground over the gap between the outermost posts of two grids.

    Grids that meet edge to edge without sharing a lattice leave less than a cell
    between their last posts, where no file has four posts around. Within one lattice
    that cell is interpolated; here too, if no grid covers the gap.
    """
    known = _joined(found)
    lattice = np.array(terrain.lattice_numbers)
    kept: Spans = []
    bridges = []
    for a, b in spans:
        before = np.flatnonzero(known.end_m == a)
        after = np.flatnonzero(known.start_m == b)
        if before.size == 0 or after.size == 0:
            kept.append((a, b))
            continue
        left, right = int(before[0]), int(after[0])
        pair = known.source[left], known.source[right]
        cell = max(max(terrain.cell_of(int(n))) for n in pair)
        one_grid = lattice[pair[0]] == lattice[pair[1]]
        if one_grid or b - a > BRIDGE_CELLS * cell or _is_covered(terrain, path, a, b):
            kept.append((a, b))
            continue
        low, high = known.height_m[left, 2], known.height_m[right, 0]
        bridges.append((a, b, [low, (low + high) / 2.0, high], pair[0]))
    return _pieces_of(bridges), kept


def _pieces_of(rows: list[tuple[float, float, list[float], int]]) -> Pieces:
    return Pieces(
        np.array([row[0] for row in rows], dtype=np.float64),
        np.array([row[1] for row in rows], dtype=np.float64),
        np.array([row[2] for row in rows], dtype=np.float64).reshape(-1, 3),
        np.array([row[3] for row in rows], dtype=np.int64),
    )


def _is_covered(terrain: Terrain, path: GeodesicPath, a: float, b: float) -> bool:
    """Whether the middle of a gap lies between posts of any grid: a true void."""
    for lattice in terrain.lattices:
        shift = _turns_to(lattice, path)
        col, row = _to_posts(lattice, path, np.array([(a + b) / 2.0]))
        inside = lattice.cols[0] <= col[0] + shift <= lattice.cols[1] - 1
        if inside and lattice.rows[0] <= row[0] <= lattice.rows[1] - 1:
            return True
    return False


def _bridge_notes(terrain: Terrain, bridges: Pieces) -> tuple[Note, ...]:
    if bridges.start_m.size == 0:
        return ()
    length = float(np.sum(bridges.end_m - bridges.start_m))
    name = terrain.rasters[int(bridges.source[0])].path.name
    text = (
        f"{length:.0f} m of path lie between the outermost posts of grids that do not "
        f"share a lattice (first at {name}); straight ground is taken there."
    )
    return (Note(code="seam-bridged", text=text),)


def _pixel_path(lattice: Lattice, path: GeodesicPath) -> PixelPath:
    shift = _turns_to(lattice, path)

    def to_posts(dist_m: FloatArray) -> tuple[FloatArray, FloatArray]:
        col, row = _to_posts(lattice, path, dist_m)
        return col + shift, row

    return fit_pixel_path(to_posts, path.length_m)


def _turns_to(lattice: Lattice, path: GeodesicPath) -> float:
    """Columns by which the path's image is moved to the turn of the lattice."""
    if not lattice.crs.is_geographic:
        return 0.0
    mid = (lattice.cols[0] + lattice.cols[1]) / 2.0
    turn = lattice.columns_in_turn
    col, _ = _to_posts(lattice, path, np.array([path.length_m / 2.0]))
    return turn * round((mid - float(col[0])) / turn)


def _to_posts(
    lattice: Lattice, path: GeodesicPath, dist_m: FloatArray
) -> tuple[FloatArray, FloatArray]:
    lat, lon = points_at(path, dist_m)
    return lattice.to_posts(*lattice.crs.to_crs(lat, lon))


def _open_spans(pieces: Pieces, void: BoolArray) -> Spans:
    """Runs of void pieces, joined where they touch."""
    spans: Spans = []
    for a, b in zip(pieces.start_m[void], pieces.end_m[void], strict=True):
        if spans and spans[-1][1] == a:
            spans[-1] = (spans[-1][0], float(b))
        else:
            spans.append((float(a), float(b)))
    return spans


def _constant(spans: Spans, height_m: float, longest_m: float) -> Pieces:
    """Pieces of one height over spans, none longer than ``longest_m``."""
    edges = [
        np.linspace(a, b, 1 + max(1, int(np.ceil((b - a) / longest_m))))
        for a, b in spans
    ]
    start = np.concatenate([np.empty(0), *(e[:-1] for e in edges)])
    end = np.concatenate([np.empty(0), *(e[1:] for e in edges)])
    source = np.full(start.size, -1, dtype=np.int64)
    return Pieces(start, end, np.full((start.size, 3), height_m), source)


def _assemble(
    terrain: Terrain,
    path: GeodesicPath,
    found: list[Pieces],
    notes: tuple[Note, ...],
    filled_m: float,
) -> PathProfile:
    pieces = _joined(found)
    split = _splits(pieces)
    dist, ground, owner, first = _samples(pieces, split)
    numbers = [int(n) for n in np.unique(owner) if n >= 0]
    place = np.full(len(terrain.rasters) + 1, -1, dtype=np.int64)
    place[numbers] = np.arange(len(numbers))
    return PathProfile(
        dist_m=dist,
        ground_m=ground,
        piece_start=first,
        source=place[owner],
        length_m=path.length_m,
        files=tuple(_file_of(terrain, n) for n in numbers),
        interpolation=terrain.interpolation,
        dem_kind=terrain.dem_kind,
        vertical_unit=", ".join(sorted({terrain.rasters[n].unit for n in numbers})),
        sea_level_m=terrain.sea_level_m,
        sea_filled_m=filled_m,
        notes=notes + _lattice_steps(terrain, pieces, split),
    )


def _joined(found: list[Pieces]) -> Pieces:
    """All pieces in the order of the path."""
    start = np.concatenate([p.start_m for p in found])
    order = np.argsort(start, kind="stable")
    return Pieces(
        start[order],
        np.concatenate([p.end_m for p in found])[order],
        np.concatenate([p.height_m for p in found])[order],
        np.concatenate([p.source for p in found])[order],
    )


def _splits(pieces: Pieces) -> BoolArray:
    """(k−1,) whether the ground steps between a piece and the next."""
    left, right = pieces.height_m[:-1, 2], pieces.height_m[1:, 0]
    with np.errstate(invalid="ignore"):
        split: BoolArray = np.abs(left - right) > CONTINUOUS_M
    return split


def _samples(
    pieces: Pieces, split: BoolArray
) -> tuple[FloatArray, FloatArray, IntArray, IntArray]:
    """Sample distances, heights, files and each piece's first sample."""
    k = pieces.start_m.size
    first = np.zeros(k, dtype=np.int64)
    first[1:] = np.cumsum(2 + split)
    n = int(first[-1]) + 3
    dist, ground = np.empty(n), np.empty(n)
    owner = np.empty(n, dtype=np.int64)
    mid = (pieces.start_m + pieces.end_m) / 2.0
    # ends first, then starts: a shared sample keeps whichever side knows its ground
    dist[first + 2], dist[first], dist[first + 1] = pieces.end_m, pieces.start_m, mid
    ground[first + 2] = pieces.height_m[:, 2]
    start = pieces.height_m[:, 0].copy()
    shared = np.flatnonzero(~split) + 1
    unknown = shared[np.isnan(start[shared])]
    start[unknown] = pieces.height_m[unknown - 1, 2]
    ground[first] = start
    ground[first + 1] = pieces.height_m[:, 1]
    for k_sample in (2, 0, 1):
        owner[first + k_sample] = pieces.source
    owner[np.isnan(ground)] = -1
    return dist, ground, owner, first


def _file_of(terrain: Terrain, number: int) -> SourceFile:
    raster = terrain.rasters[number]
    size = raster.path.stat().st_size
    hashed = terrain.hash_all or size <= HASH_BELOW_BYTES
    return SourceFile(
        name=raster.path.name,
        bytes=size,
        sha256=sha256_of(raster.path) if hashed else None,
        crs=raster.crs.crs_name,
        cell_m=terrain.cell_of(number),
    )


def sha256_of(path: Path) -> str:
    """SHA-256 of a file's bytes, in hexadecimal."""
    with path.open("rb") as file:
        return hashlib.file_digest(file, "sha256").hexdigest()


def _notes(terrain: Terrain, reader: PostReader) -> tuple[Note, ...]:
    notes = list(terrain.notes)
    for number, (count, row, col) in sorted(reader.fillers.items()):
        name = terrain.rasters[number].path.name
        text = (
            f"{name}: {count} posts near the path hold a filler value that the file "
            f"does not declare as nodata (first at row {row}, column {col}). They are "
            "taken as void, not as ground."
        )
        notes.append(Note(code="untagged-void", text=text))
    for (a, b), step in sorted(reader.steps.items()):
        names = f"{terrain.rasters[a].path.name} and {terrain.rasters[b].path.name}"
        text = (
            f"The ground steps by {abs(step):.1f} m where {names} meet. Check that "
            "both use the same height datum and unit."
        )
        notes.append(Note(code="seam-step", text=text))
    return tuple(notes)


def _lattice_steps(
    terrain: Terrain, pieces: Pieces, split: BoolArray
) -> tuple[Note, ...]:
    """A note on the largest step where the path changes from one grid to another."""
    lattice = np.array([*terrain.lattice_numbers, -1])[pieces.source]
    changes = (lattice[:-1] != lattice[1:]) & (lattice[:-1] >= 0) & (lattice[1:] >= 0)
    steps = np.where(
        changes & split, pieces.height_m[1:, 0] - pieces.height_m[:-1, 2], 0.0
    )
    if steps.size == 0 or np.max(np.abs(steps)) <= SEAM_STEP_M:
        return ()
    at = int(np.argmax(np.abs(steps)))
    names = " and ".join(
        terrain.rasters[int(n)].path.name for n in pieces.source[at : at + 2]
    )
    text = (
        f"The ground steps by {abs(steps[at]):.1f} m at "
        f"{pieces.end_m[at] / M_PER_KM:.2f} km, where {names} meet. Check that both "
        "use the same height datum and unit."
    )
    return (Note(code="seam-step", text=text),)
