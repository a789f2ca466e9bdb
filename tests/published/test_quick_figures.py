"""Three figures everybody passes on: common practice, no source."""

import pytest

from profiler.earth import apparent_size_deg, horizon_distance_straight_m

RADIUS_M = 6_371_000.0
HALF_LAST_DIGIT_KM = 0.005


@pytest.mark.published
@pytest.mark.parametrize(("eye_m", "horizon_km"), [(2.0, 5.05), (6190.0, 280.91)])
def test_the_geometric_horizon_is_the_figure_passed_on(
    eye_m: float, horizon_km: float
) -> None:
    """The straight tangent sqrt(2Rh + h²), no refraction, radius 6371 km.

    Measured along the ground the second would be 280.73 km.
    """
    ours_m = horizon_distance_straight_m(eye_m, radius_m=RADIUS_M)
    assert ours_m / 1000.0 == pytest.approx(horizon_km, abs=HALF_LAST_DIGIT_KM)


@pytest.mark.published
def test_a_metre_stick_at_a_metre_fills_53_13_degrees() -> None:
    """Its middle straight ahead; 45 degrees if its foot were."""
    assert apparent_size_deg(1.0, 1.0) == pytest.approx(53.13, abs=0.005)
