"""The ground of one lattice under the path, piece by piece.

Between two neighbouring crossings the path stays in one cell, where bilinear ground
is a quadratic in distance; its values at both ends and midway hold all of it. A piece
is known if and only if every post that carries weight in it is known.
"""

from typing import Final, NamedTuple

import numpy as np

from profiler.model.arrays import BoolArray, FloatArray, IntArray
from profiler.model.terrain import Interpolation
from profiler.terrain.lattice import Lattice
from profiler.terrain.pixel_path import (
    ON_POST_CELLS,
    PATH_ERROR_CELLS,
    PixelPath,
)
from profiler.terrain.seams import SEAM_POSTS, note_seams
from profiler.terrain.windows import PostReader, Window, runs_of_cells, tiles_within

#: Pieces read together [1]; our choice.
CHUNK_PIECES: Final = 256


class Pieces(NamedTuple):
    """Runs of the path between neighbouring crossings."""

    start_m: FloatArray
    end_m: FloatArray
    height_m: FloatArray
    """(k, 3) at start, middle and end; NaN where not known."""
    source: IntArray
    """(k,) number of the file; −1 for none."""

    @property
    def known(self) -> BoolArray:
        """(k,) whether there is ground all through the piece."""
        known: BoolArray = np.isfinite(self.height_m[:, 1])
        return known

    def chosen(self, mask: BoolArray) -> "Pieces":
        """The pieces where ``mask`` holds."""
        return Pieces(
            self.start_m[mask], self.end_m[mask], self.height_m[mask], self.source[mask]
        )


class Layout(NamedTuple):
    """Pieces of one lattice before their heights are read."""

    start_m: FloatArray
    end_m: FloatArray
    row: IntArray
    """(k,) first row and column of the cell (of the post, for nearest)."""
    col: IntArray
    inside: BoolArray
    """(k,) whether the lattice reaches here."""
    part_col: FloatArray
    """(k, 3) column and row within the cell, 0 to 1."""
    part_row: FloatArray


def lay_out(
    lattice: Lattice,
    pixel: PixelPath,
    spans: list[tuple[float, float]],
    interpolation: Interpolation,
) -> Layout:
    """Cut spans of the path at a lattice's rows and columns of posts.

    Parameters
    ----------
    lattice : Lattice
    pixel : PixelPath
        The path in the lattice's post coordinates.
    spans : list of (float, float) [m]
        Parts of the path to cut, in order, not touching.
    interpolation : Interpolation
        ``NEAREST`` cuts halfway between posts instead.
    """
    edge = 0.5 if interpolation is Interpolation.NEAREST else 0.0
    cols, rows, whole_turn = _limits(lattice, edge)
    cuts = pixel.crossings(cols, rows, edge)
    # crossings closer than this are one: the snapping would merge them anyway
    same_m = ON_POST_CELLS * min(lattice.cell_m)
    starts, ends = _cut(spans, np.sort(cuts), same_m)
    mid_col, mid_row = pixel.at((starts + ends) / 2.0)
    # the path is known to this; ends printed with 9 decimals stay on the last posts
    near = PATH_ERROR_CELLS
    inside = (mid_row >= rows[0] - near) & (mid_row <= rows[1] + near)
    if not whole_turn:
        inside &= (mid_col >= cols[0] - near) & (mid_col <= cols[1] + near)
    last = 1 if edge else 2
    row = np.floor(mid_row + edge).astype(np.int64)
    row = np.clip(row, lattice.rows[0], lattice.rows[1] - last)
    col = np.floor(mid_col + edge).astype(np.int64)
    if not whole_turn:
        col = np.clip(col, lattice.cols[0], lattice.cols[1] - last)
    part_col = np.empty((starts.size, 3))
    part_row = np.empty((starts.size, 3))
    for k, dist in enumerate((starts, (starts + ends) / 2.0, ends)):
        at_col, at_row = pixel.at(dist)
        part_col[:, k] = np.clip(at_col - col, 0.0, 1.0)
        part_row[:, k] = np.clip(at_row - row, 0.0, 1.0)
    return Layout(starts, ends, row, col, inside, part_col, part_row)


def _limits(
    lattice: Lattice, edge: float
) -> tuple[tuple[float, float], tuple[float, float], bool]:
    """First and last line of columns and rows, and whether columns close a turn."""
    rows = (lattice.rows[0] - edge, lattice.rows[1] - 1 + edge)
    cols = (lattice.cols[0] - edge, lattice.cols[1] - 1 + edge)
    turn = lattice.turn_cols
    if turn is not None and lattice.cols[1] - lattice.cols[0] >= turn:
        return (cols[0] - turn, cols[1] + turn), rows, True
    return cols, rows, False


def _cut(
    spans: list[tuple[float, float]], cuts: FloatArray, same_m: float
) -> tuple[FloatArray, FloatArray]:
    starts, ends = [], []
    for a, b in spans:
        inner = cuts[(cuts > a + same_m) & (cuts < b - same_m)]
        if inner.size:
            inner = inner[np.diff(inner, prepend=-np.inf) > same_m]
        edges = np.concatenate([[a], inner, [b]])
        starts.append(edges[:-1])
        ends.append(edges[1:])
    return np.concatenate(starts), np.concatenate(ends)


def read_pieces(
    reader: PostReader,
    lattice: Lattice,
    layout: Layout,
    interpolation: Interpolation,
    void_as_m: float | None,
) -> Pieces:
    """Heights of laid-out pieces.

    Parameters
    ----------
    reader : PostReader
    lattice : Lattice
    layout : Layout
    interpolation : Interpolation
    void_as_m : float or None [m]
        Height of posts without ground, or None to leave them void.

    Raises
    ------
    DemError
        If a file is damaged.
    """
    height = np.full((layout.start_m.size, 3), np.nan)
    source = np.full(layout.start_m.size, -1, dtype=np.int64)
    todo = np.flatnonzero(layout.inside)
    for run in runs_of_cells(layout.row[todo], layout.col[todo], most=CHUNK_PIECES):
        chunk = todo[run]
        row, col = layout.row[chunk], layout.col[chunk]
        top, left = int(row.min()), int(col.min())
        rows, cols = int(row.max()) - top + 2, int(col.max()) - left + 2
        window = _window_with_seams(reader, lattice, (top, left), (rows, cols))
        if void_as_m is not None:
            window = Window(
                np.where(np.isnan(window.height_m), void_as_m, window.height_m),
                window.owner,
            )
        parts = (layout.part_row[chunk], layout.part_col[chunk])
        height[chunk], source[chunk] = _heights(
            window, row - top, col - left, parts, interpolation
        )
    return Pieces(layout.start_m, layout.end_m, height, source)


def _window_with_seams(
    reader: PostReader, lattice: Lattice, corner: tuple[int, int], size: tuple[int, int]
) -> Window:
    """A window; where files meet in it, their step is judged on more of the seam."""
    rows, cols = size
    if tiles_within(lattice, *corner, rows, cols) < 2:
        return reader.window(lattice, *corner, rows, cols)
    far = SEAM_POSTS
    wide = reader.window(
        lattice, corner[0] - far, corner[1] - far, rows + 2 * far, cols + 2 * far
    )
    note_seams(reader.steps, wide)
    part = (slice(far, far + rows), slice(far, far + cols))
    return Window(wide.height_m[part], wide.owner[part])


def _heights(
    window: Window,
    row: IntArray,
    col: IntArray,
    parts: tuple[FloatArray, FloatArray],
    interpolation: Interpolation,
) -> tuple[FloatArray, IntArray]:
    """(k, 3) heights and (k,) files of pieces in one window."""
    posts, owner = window.height_m, window.owner
    if interpolation is Interpolation.NEAREST:
        height = np.repeat(posts[row, col][:, None], 3, axis=1)
        return height, owner[row, col]
    corners = np.stack(
        [
            posts[row, col],
            posts[row, col + 1],
            posts[row + 1, col],
            posts[row + 1, col + 1],
        ],
        axis=1,
    )
    near_row = row + (parts[0][:, 1] > 0.5)
    near_col = col + (parts[1][:, 1] > 0.5)
    source = owner[near_row, near_col]
    weight = _weights(*parts)
    used = np.any(weight > 0.0, axis=1)
    known = np.all(np.isfinite(corners) | ~used, axis=1)
    safe = np.where(used, corners, 0.0)
    if interpolation is Interpolation.HIGHEST:
        top = np.max(np.where(used, corners, -np.inf), axis=1)
        height = np.repeat(top[:, None], 3, axis=1)
    else:
        height = np.einsum("ksc,kc->ks", weight, np.where(known[:, None], safe, 0.0))
    return np.where(known[:, None], height, np.nan), source


def _weights(part_row: FloatArray, part_col: FloatArray) -> FloatArray:
    """(k, 3, 4) bilinear weight of a cell's four posts at three places of a piece."""
    row, col = part_row[:, :, None], part_col[:, :, None]
    return np.concatenate(
        [
            (1.0 - row) * (1.0 - col),
            (1.0 - row) * col,
            row * (1.0 - col),
            row * col,
        ],
        axis=2,
    )
