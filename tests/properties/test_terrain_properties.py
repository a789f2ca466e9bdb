"""What holds for the ground of every grid and every path."""

import tempfile
from pathlib import Path
from typing import Any

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st
from pyproj import Geod

from tests import terrain
from tests.reading import Floats, ground_at, profile
from tests.terrain import CENTRED_CRS, place

#: Half the side of the grids here [m].
HALF_M = 600.0
BOX = (30.0, 0.0, -615.0, 0.0, -30.0, 615.0)
SHAPE = (41, 41)

#: A place on the grid by bearing and distance from its centre post.
places = st.builds(place, st.floats(0.0, 360.0), st.floats(1.0, 595.0))
grids = st.integers(0, 2**32 - 1).map(
    lambda seed: np.random.default_rng(seed).uniform(0.0, 800.0, SHAPE)
)
ends = st.tuples(places, places).filter(lambda p: _metres(*p) > 5.0)


def _metres(one: Any, other: Any) -> float:
    return float(Geod(ellps="WGS84").inv(one[1], one[0], other[1], other[0])[2])


def _read(posts: Floats, pair: Any, **options: Any) -> Any:
    with tempfile.TemporaryDirectory() as folder:
        file = terrain.write_geotiff(Path(folder) / "a.tif", posts, BOX, CENTRED_CRS)
        return profile(file, *pair, **options)


@settings(max_examples=40, deadline=None)
@given(grids, ends)
def test_the_way_back_has_the_same_ground(posts: Floats, pair: Any) -> None:
    there, back = _read(posts, pair), _read(posts, pair[::-1])
    dist = np.linspace(0.0, there.length_m, 400)
    gap = ground_at(there, dist) - ground_at(back, there.length_m - dist)
    # the path is known to 1e-4 cell, where ground may rise by 800 m a cell
    assert np.abs(gap).max() < 800.0 * 2e-4


@settings(max_examples=40, deadline=None)
@given(grids, ends, st.floats(-300.0, 3000.0))
def test_ground_raised_everywhere_is_raised_along_the_path(
    posts: Floats, pair: Any, up_m: float
) -> None:
    low, high = _read(posts, pair), _read(posts + up_m, pair)
    assert np.array_equal(low.dist_m, high.dist_m)
    assert np.allclose(low.ground_m + up_m, high.ground_m, rtol=0.0, atol=1e-9)


@settings(max_examples=40, deadline=None)
@given(grids, ends)
def test_bilinear_ground_lies_between_the_posts_and_below_the_highest(
    posts: Floats, pair: Any
) -> None:
    plain = _read(posts, pair)
    top = _read(posts, pair, interpolation="highest")
    dist = np.linspace(0.0, plain.length_m, 700)
    ground = ground_at(plain, dist)
    assert ground.min() >= posts.min() - 1e-6
    assert ground.max() <= posts.max() + 1e-6
    middle = plain.dist_m[plain.piece_start + 1]
    assert np.all(ground_at(top, middle) >= ground_at(plain, middle) - 1e-6)


@settings(max_examples=40, deadline=None)
@given(grids, ends)
def test_pieces_cover_the_path_once_and_meet(posts: Floats, pair: Any) -> None:
    found = _read(posts, pair)
    start = found.dist_m[found.piece_start]
    end = found.dist_m[found.piece_start + 2]
    middle = found.dist_m[found.piece_start + 1]
    assert (start[0], end[-1]) == (0.0, found.length_m)
    assert np.array_equal(end[:-1], start[1:])
    assert np.all(start < middle)
    assert np.allclose(middle, (start + end) / 2.0, rtol=0.0, atol=1e-9)
    assert np.isfinite(found.ground_m).all()


@settings(max_examples=40, deadline=None)
@given(grids, ends, st.integers(0, 2**32 - 1))
def test_a_void_never_becomes_ground_and_hides_no_more_than_its_cells(
    posts: Floats, pair: Any, seed: int
) -> None:
    holes = np.random.default_rng(seed).uniform(size=SHAPE) < 0.1
    whole = _read(posts, pair)
    holed = _read(np.where(holes, np.nan, posts), pair)
    dist = whole.dist_m[whole.piece_start + 1]
    ground, sure = ground_at(holed, dist), ground_at(whole, dist)
    known = np.isfinite(ground)
    assert np.allclose(ground[known], sure[known], rtol=0.0, atol=1e-6)
    none = _read(np.full(SHAPE, np.nan), pair)
    assert np.isnan(none.ground_m).all()
    filled = _read(np.where(holes, np.nan, posts), pair, sea_level_m=-5.0)
    assert np.isfinite(filled.ground_m).all()
    assert np.allclose(ground_at(filled, dist)[known], ground[known], atol=1e-6)


@settings(max_examples=25, deadline=None)
@given(grids, ends, st.integers(2, 39), st.integers(2, 39))
def test_cutting_a_grid_into_tiles_changes_nothing(
    posts: Floats, pair: Any, row: int, col: int
) -> None:
    whole = _read(posts, pair)
    with tempfile.TemporaryDirectory() as name:
        for r0, r1 in ((0, row), (row, SHAPE[0])):
            for c0, c1 in ((0, col), (col, SHAPE[1])):
                box = (30.0, 0.0, BOX[2] + 30 * c0, 0.0, -30.0, BOX[5] - 30 * r0)
                terrain.write_geotiff(
                    Path(name) / f"{r0}_{c0}.tif",
                    posts[r0:r1, c0:c1],
                    box,
                    CENTRED_CRS,
                )
        parts = profile(Path(name), *pair)
    assert np.isfinite(parts.ground_m).all()
    dist = np.linspace(0.0, whole.length_m, 500)
    gap = ground_at(parts, dist) - ground_at(whole, dist)
    assert np.abs(gap).max() < 800.0 * 2e-4
