"""A single knife edge."""

import numpy as np
import pytest

from profiler.errors import InputError
from profiler.radio import (
    fresnel_radius_m,
    knife_edge_loss_db,
    knife_edge_loss_exact_db,
    nu_from_angle,
    nu_from_end_angles,
    nu_from_height,
    nu_from_height_and_angle,
    nu_from_share_of_f1,
)

#: Coefficients of Boersma's series as printed in Rec. ITU-R P.526-16 section 2.7,
#: equations (8a) and (8b): a second way to the Fresnel integrals, good to 3e-9.
A = (1.595769140, -0.000001702, -6.808568854, -0.000576361, 6.920691902, -0.016898657,
     -3.050485660, -0.075752419, 0.850663781, -0.025639041, -0.150230960,
     0.034404779)  # fmt: skip
B = (-0.000000033, 4.255387524, -0.000092810, -7.780020400, -0.009520895, 5.075161298,
     -0.138341947, -1.363729124, -0.403349276, 0.702222016, -0.216195929,
     0.019547031)  # fmt: skip
C = (0.0, -0.024933975, 0.000003936, 0.005770956, 0.000689892, -0.009497136,
     0.011948809, -0.006748873, 0.000246420, 0.002102967, -0.001217930,
     0.000233939)  # fmt: skip
D = (0.199471140, 0.000000023, -0.009351341, 0.000023006, 0.004851466, 0.001903218,
     -0.017122914, 0.029064067, -0.027928955, 0.016497308, -0.005598515,
     0.000838386)  # fmt: skip


def boersma(nu: float) -> complex:
    x = np.pi * nu * nu / 2.0
    if x < 4.0:
        near = sum(
            (a - 1j * b) * (x / 4) ** n
            for n, (a, b) in enumerate(zip(A, B, strict=True))
        )
        value = np.exp(1j * x) * np.sqrt(x / 4.0) * near
    else:
        far = sum(
            (c - 1j * d) * (4 / x) ** n
            for n, (c, d) in enumerate(zip(C, D, strict=True))
        )
        value = (1 + 1j) / 2.0 + np.exp(1j * x) * np.sqrt(4.0 / x) * far
    return complex(value if nu >= 0.0 else -value)


@pytest.mark.published
def test_the_exact_loss_follows_boersmas_series() -> None:
    nus = np.arange(-6.0, 6.0, 0.01)
    ours_db = knife_edge_loss_exact_db(nus)
    for nu, db in zip(nus, ours_db, strict=True):
        f = boersma(float(nu))
        field = abs((1.0 - f.real - f.imag) + 1j * (f.real - f.imag)) / 2.0
        # 3e-9 of a field that has fallen to 0.03
        assert db == pytest.approx(-20.0 * np.log10(field), abs=1e-5)


def test_the_approximation_stays_within_its_stated_bounds() -> None:
    nus = np.linspace(-0.78, 10.0, 100_001)[1:]
    gap_db = knife_edge_loss_db(nus) - knife_edge_loss_exact_db(nus)
    assert gap_db.min() == pytest.approx(-0.123, abs=5e-4)
    assert nus[np.argmin(gap_db)] == pytest.approx(4.57, abs=0.01)
    assert gap_db.max() == pytest.approx(0.103, abs=5e-4)


def test_the_exact_loss_at_grazing_is_half_the_field() -> None:
    assert knife_edge_loss_exact_db(0.0) == pytest.approx(20.0 * np.log10(2.0))


def test_the_exact_loss_swings_around_0_below_its_first_zero() -> None:
    assert knife_edge_loss_exact_db(-0.7780) == pytest.approx(0.0, abs=1e-3)
    nus = np.linspace(-3.0, -0.78, 10_001)
    loss_db = knife_edge_loss_exact_db(nus)
    assert loss_db.min() == pytest.approx(-1.369, abs=5e-4)
    assert nus[np.argmin(loss_db)] == pytest.approx(-1.217, abs=1e-3)


@pytest.mark.regression
@pytest.mark.parametrize(
    ("nu", "exact_db", "approximate_db"),
    [
        (-1.9, 1.0712, 0.0),
        (-2.0, 0.7366, 0.0),
        (-1.2172, -1.3686, 0.0),
        (-1.0, -1.0010, 0.0),
        (-0.5, 1.8586, 1.9592),
        (0.0, 6.0206, 6.0329),
        (0.5, 10.2338, 10.2878),
        (0.7, 11.7723, 11.8408),
        (1.0, 13.8641, 13.9257),
        (1.5, 16.7773, 16.7844),
        (1.9, 18.6682, 18.6298),
        (2.0, 19.0910, 19.0429),
        (2.4, 20.6182, 20.5393),
        (3.0, 22.5218, 22.4160),
        (5.0, 26.9362, 26.8136),
        (10.0, 32.9535, 32.8554),
    ],
)
def test_both_losses_are_as_worked_out_before(
    nu: float, exact_db: float, approximate_db: float
) -> None:
    assert knife_edge_loss_exact_db(nu) == pytest.approx(exact_db, abs=5.1e-5)
    assert knife_edge_loss_db(nu) == pytest.approx(approximate_db, abs=5.1e-5)


def test_the_approximation_is_exactly_0_from_minus_0_78_down() -> None:
    nus = np.array([-0.78, -1.0, -5.0, -1e9, -np.inf])
    assert np.all(knife_edge_loss_db(nus) == 0.0)
    assert knife_edge_loss_db(-0.78) == 0.0
    assert 0.0 < knife_edge_loss_db(-0.7799) < 0.006


def test_the_approximation_never_falls_as_the_edge_rises() -> None:
    loss_db = knife_edge_loss_db(np.linspace(-2.0, 50.0, 5001))
    assert np.all(np.diff(loss_db) >= 0.0)


def test_nan_stays_nan() -> None:
    assert np.isnan(knife_edge_loss_db(np.nan))
    assert np.isnan(knife_edge_loss_exact_db(np.nan))


@pytest.mark.parametrize("height_m", [35.0, 0.0, -12.0])
def test_all_forms_of_nu_agree(height_m: float) -> None:
    near_m, far_m, wave_m = 4e3, 9e3, 0.12
    nu = nu_from_height(height_m, from_m=near_m, to_m=far_m, wavelength_m=wave_m)
    from_rad, to_rad = height_m / near_m, height_m / far_m
    turn_rad = from_rad + to_rad
    others = [
        nu_from_angle(turn_rad, from_m=near_m, to_m=far_m, wavelength_m=wave_m),
        nu_from_height_and_angle(height_m, turn_rad, wavelength_m=wave_m),
        nu_from_end_angles(
            from_rad, to_rad, length_m=near_m + far_m, wavelength_m=wave_m
        ),
    ]
    radius_m = fresnel_radius_m(near_m, length_m=near_m + far_m, wavelength_m=wave_m)
    others.append(nu_from_share_of_f1(-height_m / radius_m))
    assert others == pytest.approx([nu] * 4, rel=1e-12)
    assert np.sign(nu) == np.sign(height_m)


def test_nu_takes_arrays() -> None:
    height_m = np.array([-3.0, 0.0, 3.0])
    nu = nu_from_height(height_m, from_m=1e3, to_m=2e3, wavelength_m=0.3)
    assert nu[1] == 0.0
    assert nu[2] == -nu[0] == pytest.approx(3.0 * np.sqrt(2.0 / 0.3 * 0.0015))


def test_angles_of_two_signs_are_refused() -> None:
    with pytest.raises(InputError, match="Height and angle of one edge"):
        nu_from_height_and_angle(3.0, -0.01, wavelength_m=0.3)
    with pytest.raises(InputError, match="Both angles of one edge"):
        nu_from_end_angles(-0.01, 0.01, length_m=1e3, wavelength_m=0.3)


def test_an_edge_at_an_end_is_refused() -> None:
    with pytest.raises(InputError, match="Distance to the first end"):
        nu_from_height(3.0, from_m=0.0, to_m=1e3, wavelength_m=0.3)
    with pytest.raises(InputError, match="Distance to the second end"):
        nu_from_angle(0.01, from_m=1e3, to_m=-1.0, wavelength_m=0.3)
    with pytest.raises(InputError, match="outside 1 mm to 30 m"):
        nu_from_height(3.0, from_m=1e3, to_m=1e3, wavelength_m=0.0)
    with pytest.raises(InputError, match="Path length"):
        nu_from_end_angles(0.01, 0.01, length_m=0.0, wavelength_m=0.3)
