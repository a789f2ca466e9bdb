"""First Fresnel radii printed or passed on."""

import pytest

from profiler.constants import FOOT_M, MILE_M
from profiler.radio import fresnel_radius_m, wavelength_m


@pytest.mark.published
def test_16_and_24_km_at_4_ghz_make_a_zone_of_27_m() -> None:
    """US Army course SS0121A, "First Fresnel zone exercise": 17.5·1.55 = 27 m.

    The factor 17.5 is 1.1 % high, so 0.35 m are allowed. The page also prints 112 ft,
    which is wrong (the constant of miles put on kilometres; true 88.0 ft).
    """
    radius_m = fresnel_radius_m(16e3, length_m=40e3, wavelength_m=wavelength_m(4e9))
    assert radius_m == pytest.approx(27.0, abs=0.35)
    assert radius_m == pytest.approx(26.8235, abs=5e-5)
    assert radius_m / FOOT_M == pytest.approx(88.0, abs=0.05)


@pytest.mark.published
def test_the_constant_of_feet_miles_and_gigahertz_is_72_1() -> None:
    """The same course: F1 = 72.1·sqrt(d1·d2/(f·D)) ft."""
    wave_m = wavelength_m(1e9)
    radius_m = fresnel_radius_m(
        2.0 * MILE_M, length_m=4.0 * MILE_M, wavelength_m=wave_m
    )
    assert radius_m / FOOT_M == pytest.approx(72.1, abs=0.05)


@pytest.mark.parametrize(
    ("frequency_hz", "length_m", "passed_on_m"),
    [(868e6, 10e3, 29.4), (80e9, 5e3, 2.2)],
)
def test_mid_path_zones_are_the_figures_passed_on(
    frequency_hz: float, length_m: float, passed_on_m: float
) -> None:
    """Common practice, no source."""
    wave_m = wavelength_m(frequency_hz)
    radius_m = fresnel_radius_m(length_m / 2.0, length_m=length_m, wavelength_m=wave_m)
    assert radius_m == pytest.approx(passed_on_m, abs=0.05)
