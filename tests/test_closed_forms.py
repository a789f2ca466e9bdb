"""Closed forms of the round earth against plain plane geometry."""

import math

import numpy as np
import pytest

from profiler.earth import (
    apparent_size_deg,
    dip_short_of_horizon_deg,
    distance_by_vertical_angle_m,
    drop_m,
    drop_parabola_m,
    hidden_by_curvature_m,
    hidden_by_ridge_m,
    horizon_dip_deg,
    horizon_distance_m,
    horizon_distance_straight_m,
)
from profiler.errors import InputError

RADIUS_M = 6_371_000.0
HEIGHTS_M = np.array([0.0, 1.7, 10.0, 100.0, 3000.0, 9000.0])


def crossing_height_m(
    first: tuple[float, float], second: tuple[float, float], angle: float
) -> float:
    """Height at which a straight line meets the plumb line at an angle at the centre.

    The two points are (x, y) from the earth's centre, y towards the eye.
    """
    (x0, y0), (x1, y1) = first, second
    matrix = np.array([[x1 - x0, -math.sin(angle)], [y1 - y0, -math.cos(angle)]])
    _, from_centre_m = np.linalg.solve(matrix, np.array([-x0, -y0]))
    return float(from_centre_m) - RADIUS_M


def test_the_tangent_touches_the_circle_at_the_horizon() -> None:
    angle = horizon_distance_m(HEIGHTS_M, radius_m=RADIUS_M) / RADIUS_M
    straight_m = horizon_distance_straight_m(HEIGHTS_M, radius_m=RADIUS_M)
    assert np.tan(angle) * RADIUS_M == pytest.approx(straight_m, abs=1e-8)
    assert straight_m**2 + RADIUS_M**2 == pytest.approx((RADIUS_M + HEIGHTS_M) ** 2)


def test_the_horizon_is_the_arc_whose_cosine_the_docstring_names() -> None:
    arc_m = RADIUS_M * math.acos(RADIUS_M / (RADIUS_M + 6190.0))
    # the arc cosine itself is good to a centimetre here
    ours_m = horizon_distance_m(6190.0, radius_m=RADIUS_M)
    assert ours_m == pytest.approx(arc_m, abs=0.01)


def test_a_millimetre_of_height_still_has_its_horizon() -> None:
    parabola_m = math.sqrt(2.0 * RADIUS_M * 0.001)
    ours_m = horizon_distance_m(0.001, radius_m=RADIUS_M)
    assert ours_m == pytest.approx(parabola_m, rel=1e-9)


def test_dip_is_the_angle_of_the_horizon_at_the_centre() -> None:
    dip_deg = horizon_dip_deg(10.0, radius_m=RADIUS_M)
    # acos(R/(R + h)), worked out apart from this code
    assert 60.0 * dip_deg == pytest.approx(6.0909, abs=1e-4)
    arc_m = math.radians(dip_deg) * RADIUS_M
    assert horizon_distance_m(10.0, radius_m=RADIUS_M) == pytest.approx(arc_m)


def test_an_eye_on_the_ground_has_its_horizon_at_its_feet() -> None:
    assert horizon_distance_m(0.0, radius_m=RADIUS_M) == 0.0
    assert horizon_distance_straight_m(0.0, radius_m=RADIUS_M) == 0.0
    assert horizon_dip_deg(0.0, radius_m=RADIUS_M) == 0.0


def test_dip_short_of_the_horizon_is_the_dip_at_the_horizon() -> None:
    horizon_m = horizon_distance_m(50.0, radius_m=RADIUS_M)
    short_deg = dip_short_of_horizon_deg(horizon_m, height_m=50.0, radius_m=RADIUS_M)
    assert short_deg == pytest.approx(
        horizon_dip_deg(50.0, radius_m=RADIUS_M), rel=1e-5
    )


def test_a_top_stands_at_the_distance_its_angle_tells() -> None:
    dist_m = distance_by_vertical_angle_m(400.0, elevation_deg=0.4, radius_m=RADIUS_M)
    slope = math.tan(math.radians(0.4))
    rise_m = dist_m * slope + drop_parabola_m(dist_m, radius_m=RADIUS_M)
    assert rise_m == pytest.approx(400.0, abs=1e-9)


def test_nothing_is_hidden_before_the_horizon() -> None:
    horizon_m = horizon_distance_m(20.0, radius_m=RADIUS_M)
    dist_m = np.array([0.0, horizon_m / 2.0, horizon_m])
    hidden_m = hidden_by_curvature_m(dist_m, eye_m=20.0, radius_m=RADIUS_M)
    assert hidden_m.tolist() == [0.0, 0.0, 0.0]


def test_the_hidden_part_ends_where_the_tangent_meets_the_plumb_line() -> None:
    eye_m, dist_m = 1000.0, 300_000.0
    dip = math.acos(RADIUS_M / (RADIUS_M + eye_m))
    touch = (RADIUS_M * math.sin(dip), RADIUS_M * math.cos(dip))
    expected_m = crossing_height_m((0.0, RADIUS_M + eye_m), touch, dist_m / RADIUS_M)
    ours_m = hidden_by_curvature_m(dist_m, eye_m=eye_m, radius_m=RADIUS_M)
    assert ours_m == pytest.approx(expected_m, abs=1e-4)


def test_what_stands_behind_a_ridge_is_met_by_the_straight_line_over_it() -> None:
    ridge = 10_000.0 / RADIUS_M
    top = (
        (RADIUS_M + 100.0) * math.sin(ridge),
        (RADIUS_M + 100.0) * math.cos(ridge),
    )
    expected_m = crossing_height_m((0.0, RADIUS_M + 2.0), top, 20_000.0 / RADIUS_M)
    ours_m = hidden_by_ridge_m(
        100.0,
        eye_m=2.0,
        ridge_dist_m=10_000.0,
        target_dist_m=20_000.0,
        radius_m=RADIUS_M,
    )
    assert ours_m == pytest.approx(expected_m, abs=1e-6)


def test_drop_is_met_by_the_horizontal_line_of_the_start() -> None:
    expected_m = crossing_height_m((0.0, RADIUS_M), (1e6, RADIUS_M), 0.05)
    ours_m = drop_m(0.05 * RADIUS_M, radius_m=RADIUS_M)
    assert ours_m == pytest.approx(expected_m, abs=1e-6)


def test_parabola_misses_the_drop_by_what_its_docstring_says() -> None:
    for dist_m, short_m, within_m in ((1e5, 0.08, 0.005), (5e5, 50.0, 1.0)):
        exact_m = drop_m(dist_m, radius_m=RADIUS_M)
        short = exact_m - drop_parabola_m(dist_m, radius_m=RADIUS_M)
        assert short == pytest.approx(short_m, abs=within_m)


def test_apparent_size_of_arrays_is_that_of_their_members() -> None:
    size_m, dist_m = np.array([1.0, 2.0]), np.array([1.0, 50.0])
    both_deg = apparent_size_deg(size_m, dist_m)
    assert both_deg.tolist() == [
        apparent_size_deg(1.0, 1.0),
        apparent_size_deg(2.0, 50.0),
    ]


@pytest.mark.parametrize("radius_m", [0.0, -RADIUS_M, math.inf, math.nan])
def test_an_effective_radius_that_is_none_is_refused(radius_m: float) -> None:
    with pytest.raises(InputError, match="effective radius"):
        horizon_distance_m(2.0, radius_m=radius_m)


@pytest.mark.parametrize("height_m", [-1.0, math.nan, math.inf])
def test_a_height_that_is_none_is_refused(height_m: float) -> None:
    with pytest.raises(InputError, match="0 m or more"):
        horizon_dip_deg(height_m, radius_m=RADIUS_M)


def test_a_distance_of_nothing_has_no_angle() -> None:
    with pytest.raises(InputError, match="above 0 m"):
        apparent_size_deg(1.0, 0.0)
    with pytest.raises(InputError, match="above 0 m"):
        dip_short_of_horizon_deg(0.0, height_m=2.0, radius_m=RADIUS_M)


def test_a_quarter_of_the_earth_has_no_drop() -> None:
    with pytest.raises(InputError, match="quarter"):
        drop_m(1.6 * RADIUS_M, radius_m=RADIUS_M)


def test_a_vertical_look_tells_no_distance() -> None:
    with pytest.raises(InputError, match="not between"):
        distance_by_vertical_angle_m(5.0, elevation_deg=90.0, radius_m=RADIUS_M)


def test_a_ridge_behind_the_target_is_refused() -> None:
    with pytest.raises(InputError, match="between the eye and the target"):
        hidden_by_ridge_m(
            5.0, eye_m=2.0, ridge_dist_m=20.0, target_dist_m=10.0, radius_m=RADIUS_M
        )
