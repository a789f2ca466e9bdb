"""Radii of curvature of WGS84, as quoted in public geodesy test suites.

Seen quoted there, not in an original text; printed to a millimetre.
"""

import pytest

from profiler.earth import euler_radius, meridian_radius, prime_vertical_radius

MILLIMETRE_M = 0.001


@pytest.mark.published
@pytest.mark.parametrize(
    ("lat_deg", "meridian_m", "prime_vertical_m"),
    [
        pytest.param(0.0, 6_335_439.327, 6_378_137.0, id="equator"),
        pytest.param(45.0, 6_367_381.816, 6_388_838.290, id="latitude 45"),
        pytest.param(90.0, 6_399_593.626, 6_399_593.626, id="pole"),
        pytest.param(-45.0, 6_367_381.816, 6_388_838.290, id="latitude -45"),
    ],
)
def test_both_principal_radii_are_as_quoted(
    lat_deg: float, meridian_m: float, prime_vertical_m: float
) -> None:
    assert meridian_radius(lat_deg) == pytest.approx(meridian_m, abs=MILLIMETRE_M)
    across_m = prime_vertical_radius(lat_deg)
    assert across_m == pytest.approx(prime_vertical_m, abs=MILLIMETRE_M)


@pytest.mark.published
def test_eulers_radius_at_latitude_and_azimuth_45_is_as_quoted() -> None:
    assert euler_radius(45.0, 45.0) == pytest.approx(6_378_092.008, abs=MILLIMETRE_M)
