"""What the eye sees of the ground: horizon, seen stretches, front crest."""

import numpy as np
import pytest

from profiler.sight.ground import Ground, clip
from profiler.sight.view import (
    Rays,
    before,
    front_crest_index,
    horizon_index,
    is_seen,
    rays,
)
from tests.looking import pieces


def valley(*heights: float) -> Rays:
    """Rays to ground with a post each kilometre, from an eye at 0, flat."""
    dist = np.linspace(0.0, 1000.0 * (len(heights) - 1), len(heights))
    return rays(pieces(dist, np.array(heights)), 0.0, 0.0)


def crest(seen: Rays) -> float | None:
    index = front_crest_index(seen, 0.0, 0.0)
    return None if index is None else float(seen.dist_m[index])


def horizon(seen: Rays) -> float:
    index = horizon_index(seen)
    assert index is not None
    return float(seen.dist_m[index])


def test_the_horizon_is_the_largest_angle_not_the_highest_ground() -> None:
    assert horizon(valley(-2.0, 30.0, 0.0, 50.0, 0.0)) == 1000.0


def test_of_equal_angles_the_nearest_is_the_horizon() -> None:
    assert horizon(valley(-2.0, 30.0, 0.0, 90.0, 0.0)) == 1000.0


def test_the_horizon_inside_a_piece_is_the_tangent_point() -> None:
    # z = −(d − 1000)²/1000 from 10 m below the eye: tangent where d² = 1000² + 1e4
    dist = np.array([[500.0, 1000.0, 1500.0]])
    ground = Ground(dist, -((dist - 1000.0) ** 2) / 1000.0)
    seen = rays(ground, 10.0, 0.0)
    assert horizon(seen) == pytest.approx(np.sqrt(1000.0**2 + 1e4), abs=1e-6)


@pytest.mark.parametrize("kappa", [1.2e-7, -1.2e-7])
def test_the_curved_tangent_point_beats_every_sample(kappa: float) -> None:
    dist = np.array([[500.0, 1000.0, 1500.0]])
    ground = Ground(dist, -((dist - 1000.0) ** 2) / 1000.0)
    seen = rays(ground, 10.0, kappa)
    at = np.linspace(500.0, 1500.0, 4001)
    fine = Ground(
        np.column_stack([at[:-2:2], at[1::2], at[2::2]]),
        -((np.column_stack([at[:-2:2], at[1::2], at[2::2]]) - 1000.0) ** 2) / 1000.0,
    )
    assert seen.tangent.max() == pytest.approx(
        rays(fine, 10.0, kappa).tangent.max(), abs=1e-13
    )


def test_no_ground_has_no_horizon() -> None:
    nothing = rays(clip(pieces(np.array([0.0, 1.0]), np.zeros(2)), 0.0, 0.0), 1.0, 0.0)
    assert horizon_index(nothing) is None


def test_only_ground_nearer_than_the_limit_stays() -> None:
    near = before(valley(0.0, 5.0, 0.0, 9.0), 2000.0)
    assert near.dist_m.max() < 2000.0


def test_ground_behind_a_ridge_is_seen_again_where_it_rises_above_the_ray() -> None:
    seen = valley(-2.0, 100.0, 0.0, 400.0)
    visible = is_seen(seen)
    hidden = seen.dist_m[~visible]
    assert hidden.min() > 1000.0
    assert hidden.max() < 3000.0
    assert visible[-1]


def test_a_plane_through_the_eye_is_seen_in_spite_of_rounding() -> None:
    dist = np.linspace(0.0, 9000.0, 301)
    height = 1234.567 + 0.137 * dist
    assert np.all(is_seen(rays(pieces(dist, height), 1234.567, 0.0)))


def test_the_front_crest_stands_before_the_last_deep_valley() -> None:
    assert crest(valley(-2.0, 100.0, 50.0, 400.0, 300.0, 900.0)) == 3000.0


def test_a_dimple_of_less_than_10_m_makes_no_front_crest() -> None:
    # the ray over 100 m at 1 km stands at 200 m at 2 km
    assert crest(valley(-2.0, 100.0, 190.5, 400.0)) is None
    assert crest(valley(-2.0, 100.0, 189.5, 400.0)) == 1000.0


def test_a_dimple_after_a_valley_leaves_the_front_crest_before_the_valley() -> None:
    assert crest(valley(-2.0, 100.0, 50.0, 400.0, 530.0, 900.0)) == 1000.0


def test_rising_ground_has_no_front_crest() -> None:
    assert crest(valley(-2.0, 10.0, 40.0, 90.0)) is None
