"""Fresnel zones, wavelengths and free space."""

import math

import numpy as np
import pytest

from profiler.errors import InputError
from profiler.radio import (
    SPEED_OF_LIGHT,
    check_wavelength,
    free_space_loss_db,
    fresnel_radius_m,
    share_of_f1,
    wavelength_m,
)


def test_a_point_on_the_zone_makes_the_way_half_a_wavelength_longer() -> None:
    length_m, wave_m = 10e3, 0.05
    for order in (1, 2, 5):
        radius_m = fresnel_radius_m(
            3e3, length_m=length_m, wavelength_m=wave_m, order=order
        )
        way_m = math.hypot(3e3, radius_m) + math.hypot(7e3, radius_m)
        # the formula is the first term of the way's series
        assert way_m - length_m == pytest.approx(order * wave_m / 2.0, rel=1e-4)


def test_the_zone_has_no_width_at_the_ends_and_is_the_same_both_ways() -> None:
    dist_m = np.linspace(0.0, 8e3, 17)
    radius_m = fresnel_radius_m(dist_m, length_m=8e3, wavelength_m=0.1)
    assert radius_m[0] == radius_m[-1] == 0.0
    np.testing.assert_allclose(radius_m, radius_m[::-1], rtol=1e-15)
    assert np.argmax(radius_m) == 8


def test_the_share_is_the_margin_over_the_radius() -> None:
    dist_m = np.array([0.0, 2e3, 4e3, 8e3])
    margin_m = np.array([10.0, -5.0, np.nan, -1.0])
    share = share_of_f1(margin_m, dist_m, length_m=8e3, wavelength_m=0.1)
    radius_m = fresnel_radius_m(2e3, length_m=8e3, wavelength_m=0.1)
    assert share[1] == -5.0 / radius_m
    assert np.isnan(share[2])
    assert share[0] == np.inf
    assert share[3] == -np.inf


def test_an_end_without_ground_has_no_share() -> None:
    share = share_of_f1(
        np.array([np.nan, 1.0]),
        np.array([0.0, 1e3]),
        length_m=2e3,
        wavelength_m=0.1,
    )
    assert np.isnan(share[0])
    assert np.isfinite(share[1])


def test_wavelength_times_frequency_is_the_speed_of_light() -> None:
    assert SPEED_OF_LIGHT == 299_792_458.0
    assert wavelength_m(6e9) * 6e9 == pytest.approx(SPEED_OF_LIGHT, rel=1e-15)
    assert wavelength_m(1e9, speed_of_light_m_s=3e8) == 0.3


def test_free_space_grows_by_20_db_a_decade() -> None:
    loss_db = free_space_loss_db(np.array([1e3, 1e4]), frequency_hz=1e9)
    assert loss_db[1] - loss_db[0] == pytest.approx(20.0, abs=1e-12)
    more_db = free_space_loss_db(1e3, frequency_hz=1e10)
    assert more_db - loss_db[0] == pytest.approx(20.0, abs=1e-12)


def test_both_ends_of_the_band_are_answered() -> None:
    assert wavelength_m(10e6) == pytest.approx(29.98, abs=0.01)
    assert wavelength_m(300e9) == pytest.approx(0.001, abs=1e-5)
    check_wavelength(30.0)
    check_wavelength(wavelength_m(300e9))


@pytest.mark.parametrize("frequency_hz", [6.0, 9.99e6, 301e9, 0.0, -1e9, math.nan])
def test_a_frequency_outside_the_band_is_refused(frequency_hz: float) -> None:
    with pytest.raises(InputError, match="outside 10 MHz to 300 GHz"):
        wavelength_m(frequency_hz)


@pytest.mark.parametrize("wave_m", [0.0, 5e-4, 31.0, 300.0, math.nan])
def test_a_wavelength_outside_the_band_is_refused(wave_m: float) -> None:
    with pytest.raises(InputError, match="outside 1 mm to 30 m"):
        check_wavelength(wave_m)


def test_another_speed_of_light_is_refused() -> None:
    with pytest.raises(InputError, match="not the speed of light"):
        wavelength_m(1e9, speed_of_light_m_s=3e5)


@pytest.mark.parametrize("dist_m", [0.0, -1.0, math.inf, math.nan])
def test_free_space_without_a_distance_is_refused(dist_m: float) -> None:
    with pytest.raises(InputError, match="Distance must be above 0 m"):
        free_space_loss_db(dist_m, frequency_hz=1e9)


@pytest.mark.parametrize("dist_m", [-1.0, 8001.0, math.nan])
def test_a_zone_off_the_path_is_refused(dist_m: float) -> None:
    with pytest.raises(InputError, match="on the path, from 0 to 8000 m"):
        fresnel_radius_m(dist_m, length_m=8e3, wavelength_m=0.1)


def test_a_zone_of_order_0_and_a_path_without_length_are_refused() -> None:
    with pytest.raises(InputError, match="order of a Fresnel zone"):
        fresnel_radius_m(1.0, length_m=8e3, wavelength_m=0.1, order=0)
    with pytest.raises(InputError, match="Path length"):
        fresnel_radius_m(0.0, length_m=0.0, wavelength_m=0.1)
