"""Ground as quadratic pieces: cut, turned round, joined, and its roots."""

from pathlib import Path

import numpy as np
import pytest

from profiler.sight.ground import (
    BESIDE_M,
    Ground,
    clip,
    ground_of,
    inner_roots,
    joined,
    mirrored,
    quadratic,
    with_ends,
)
from tests import terrain
from tests.looking import from_centre, opened, pieces

#: Rounding of heights below 1000 m [m].
ROUNDING_M = 1e-9


def bowl() -> Ground:
    """Two pieces of one parabola, z = (d − 30)²/10, then a void."""
    dist = np.array([[0.0, 10.0, 20.0], [20.0, 35.0, 50.0], [50.0, 55.0, 60.0]])
    height = (dist - 30.0) ** 2 / 10.0
    height[2] = np.nan
    return Ground(dist, height)


def test_a_quadratic_goes_through_its_three_values() -> None:
    fit = quadratic(np.array([[3.0, -1.0, 7.0]]))
    values = [float(fit.at(np.array([u]))[0]) for u in (0.0, 0.5, 1.0)]
    assert values == pytest.approx([3.0, -1.0, 7.0], abs=ROUNDING_M)


def test_a_piece_without_a_middle_is_void() -> None:
    assert bowl().known.dist_m.shape == (2, 3)
    assert bowl().void.dist_m[:, 0].tolist() == [50.0]


def test_cut_ground_is_the_same_ground() -> None:
    cut = clip(bowl(), 7.0, 41.0).known
    assert (cut.dist_m[0, 0], cut.dist_m[-1, 2]) == (7.0, 41.0)
    assert cut.height_m == pytest.approx((cut.dist_m - 30.0) ** 2 / 10.0, abs=1e-12)


def test_a_cut_inside_one_piece_leaves_one_piece() -> None:
    cut = clip(bowl(), 22.0, 24.0)
    assert cut.dist_m.tolist() == [[22.0, 23.0, 24.0]]
    assert cut.height_m == pytest.approx(np.array([[6.4, 4.9, 3.6]]))


@pytest.mark.parametrize("limits", [(5.0, 5.0), (9.0, 3.0), (70.0, 80.0)])
def test_an_empty_range_leaves_nothing(limits: tuple[float, float]) -> None:
    assert clip(bowl(), *limits).dist_m.shape == (0, 3)


def test_a_cut_void_stays_void() -> None:
    cut = clip(bowl(), 52.0, 58.0)
    assert cut.dist_m.tolist() == [[52.0, 55.0, 58.0]]
    assert cut.void.dist_m.shape == (1, 3)


def test_cutting_leaves_the_original_alone() -> None:
    whole = bowl()
    clip(whole, 7.0, 41.0)
    assert np.array_equal(whole.dist_m, bowl().dist_m)


def test_turned_round_twice_is_the_same() -> None:
    twice = mirrored(mirrored(bowl(), 60.0), 60.0)
    assert np.array_equal(twice.dist_m, bowl().dist_m)
    assert np.array_equal(twice.height_m, bowl().height_m, equal_nan=True)


def test_the_ends_become_pieces_of_a_centimetre_on_the_same_ground() -> None:
    made = with_ends(bowl().known, 50.0)
    assert made.dist_m[0].tolist() == [0.0, BESIDE_M / 2, BESIDE_M]
    assert made.dist_m[-1, 0] == pytest.approx(50.0 - BESIDE_M, abs=1e-12)
    assert np.all(made.dist_m[1:, 0] == made.dist_m[:-1, 2])
    assert made.height_m == pytest.approx((made.dist_m - 30.0) ** 2 / 10.0)


def test_joined_ground_has_the_pieces_of_both() -> None:
    both = joined(bowl().known, bowl().void)
    assert both.dist_m.tolist() == bowl().dist_m.tolist()


@pytest.mark.parametrize(
    ("poly", "roots"),
    [
        pytest.param((0.06, -0.5, 1.0), [0.2, 0.3], id="two"),
        pytest.param((-0.25, 1.0, 0.0), [0.25], id="a line"),
        pytest.param((-0.25, 1.0, 1e-18), [0.25], id="nearly a line"),
        pytest.param((1.0, 0.0, 1.0), [], id="none is real"),
        pytest.param((0.0, 0.0, 0.0), [], id="zero everywhere"),
        pytest.param((0.0, -0.5, 1.0), [0.5], id="one at the start does not count"),
        pytest.param((0.5, -1.5, 1.0), [0.5], id="one at the end does not count"),
        pytest.param((-1e-12, 1.0, 1.0), [1e-12], id="a tiny one keeps its digits"),
    ],
)
def test_roots_inside_a_piece_are_found(
    poly: tuple[float, float, float], roots: list[float]
) -> None:
    found = inner_roots(*(np.array([v]) for v in poly))[0]
    found = np.sort(found[np.isfinite(found)])
    assert found.tolist() == pytest.approx(roots, rel=1e-9, abs=0.0)


def test_a_profile_becomes_pieces_that_share_their_ends(tmp_path: Path) -> None:
    line = from_centre(opened(tmp_path, terrain.plane(0.1)), 90.0, 2000.0)
    ground = ground_of(line.profile)
    assert np.array_equal(ground.dist_m[1:, 0], ground.dist_m[:-1, 2])
    assert (ground.dist_m[0, 0], ground.dist_m[-1, 2]) == (0.0, line.profile.length_m)


def test_straight_ground_between_posts_lies_midway() -> None:
    ground = pieces(np.array([0.0, 10.0]), np.array([4.0, 8.0]))
    assert ground.height_m.tolist() == [[4.0, 6.0, 8.0]]
