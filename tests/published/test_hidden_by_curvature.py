"""Closed forms of checks on a smooth sphere; worked out for this project, not printed.

The numbers were computed apart from this code, from the closed forms that the
docstrings give, with a radius of 6371 km.
"""

import pytest

from profiler.earth import (
    drop_m,
    drop_parabola_m,
    hidden_by_curvature_m,
    hidden_by_ridge_m,
    ke_from_kr,
)

RADIUS_M = 6_371_000.0
HALF_MM = 0.0005  # the numbers were written down with three decimals


def effective_radius_m(kr: float) -> float:
    ke = ke_from_kr(kr)
    assert ke is not None
    return ke * RADIUS_M


@pytest.mark.parametrize(
    ("eye_m", "dist_m", "kr", "hidden_m"),
    [
        (2.0, 19_000.0, 0.0, 15.277),
        (2.0, 19_000.0, 0.13, 12.606),
        (2.0, 19_000.0, 1.0 / 7.0, 12.346),
        (1.7, 20_000.0, 0.0, 18.482),
        (1.7, 20_000.0, 0.13, 15.383),
        (10.0, 50_000.0, 0.0, 117.614),
        (10.0, 50_000.0, 0.13, 98.066),
        (100.0, 100_000.0, 0.0, 324.534),
        (100.0, 100_000.0, 0.13, 260.189),
    ],
)
def test_a_smooth_sphere_hides_what_its_closed_form_says(
    eye_m: float, dist_m: float, kr: float, hidden_m: float
) -> None:
    ours_m = hidden_by_curvature_m(dist_m, eye_m=eye_m, radius_m=effective_radius_m(kr))
    assert ours_m == pytest.approx(hidden_m, abs=HALF_MM)


@pytest.mark.parametrize(("kr", "lowest_m"), [(0.0, 213.700), (0.13, 211.659)])
def test_a_thin_ridge_on_a_sphere_hides_what_its_closed_form_says(
    kr: float, lowest_m: float
) -> None:
    ours_m = hidden_by_ridge_m(
        100.0,
        eye_m=2.0,
        ridge_dist_m=10_000.0,
        target_dist_m=20_000.0,
        radius_m=effective_radius_m(kr),
    )
    assert ours_m == pytest.approx(lowest_m, abs=HALF_MM)


@pytest.mark.parametrize(
    ("dist_m", "parabola_m", "exact_m", "within_m"),
    [
        (100_000.0, 784.806, 784.887, HALF_MM),
        (300_000.0, 7063.26, 7069.79, 0.005),
        (500_000.0, 19_620.15, 19_670.63, 0.005),
    ],
)
def test_the_parabola_falls_short_of_the_exact_drop(
    dist_m: float, parabola_m: float, exact_m: float, within_m: float
) -> None:
    ours_m = drop_parabola_m(dist_m, radius_m=RADIUS_M)
    assert ours_m == pytest.approx(parabola_m, abs=within_m)
    assert drop_m(dist_m, radius_m=RADIUS_M) == pytest.approx(exact_m, abs=within_m)
