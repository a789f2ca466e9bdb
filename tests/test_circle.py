"""The circle's formulas against plane coordinates in long double."""

import numpy as np
import pytest

from profiler.kernels.circle import (
    arc_ratio,
    elevation_tangent,
    ray_height,
    sight_height,
)
from tests.oracle_earth import elevation, line_height

#: Curvatures per metre: strong ducts, the earth at several ke, and a small ball.
KAPPAS = [-2.4e-6, -1e-7, -1e-9, 1e-9, 1.1e-7, 1.57e-7, 3e-7, 1e-6]
#: Rounding of heights up to 9 km over paths up to 450 km in double precision [m].
ROUNDING_M = 1e-10
#: Rounding of tangents up to 200 [1]; a few times the last bit, relative.
ROUNDING = 1e-13


def ends(seed: int) -> tuple[float, float, float, np.ndarray]:
    random = np.random.default_rng(seed)
    length = 10 ** random.uniform(1.5, 5.65)
    eye, aim = random.uniform(-400.0, 9000.0, 2)
    share = np.concatenate([[0.0, 1.0, 1e-6, 1 - 1e-6], random.uniform(0, 1, 40)])
    return float(length), float(eye), float(aim), share * length


@pytest.mark.parametrize("kappa", KAPPAS)
@pytest.mark.parametrize("seed", range(6))
def test_the_line_is_straight_in_plane_coordinates(kappa: float, seed: int) -> None:
    length, eye, aim, at = ends(seed)
    exact = line_height((kappa, eye, aim), length, at)
    ours = sight_height(at, length, eye, aim, kappa)
    assert np.max(np.abs(ours - exact)) < ROUNDING_M


@pytest.mark.parametrize("kappa", KAPPAS)
@pytest.mark.parametrize("seed", range(6))
def test_the_angle_is_that_of_plane_coordinates(kappa: float, seed: int) -> None:
    length, eye, _, at = ends(seed)
    at = at[at > 1.0]
    height = np.random.default_rng(seed + 90).uniform(-400.0, 9000.0, at.size)
    exact = np.tan(elevation(kappa, eye, at, height))
    ours = elevation_tangent(at, height, eye, kappa)
    assert length > 1.0
    assert np.max(np.abs(ours - exact) / (1.0 + np.abs(exact))) < ROUNDING


@pytest.mark.parametrize("kappa", [0.0, *KAPPAS])
def test_a_ray_passes_through_the_point_whose_angle_it_has(kappa: float) -> None:
    at = np.array([1.0, 40.0, 3e3, 6e4, 4e5])
    height = np.array([2.0, -30.0, 8000.0, 500.0, 4000.0])
    tangent = elevation_tangent(at, height, 1234.5, kappa)
    back = ray_height(at, tangent, 1234.5, kappa)
    assert np.max(np.abs(back - height)) < ROUNDING_M


@pytest.mark.parametrize("kappa", [0.0, *KAPPAS])
def test_the_ray_to_the_aim_point_is_the_sight_line(kappa: float) -> None:
    length, eye, aim, at = ends(3)
    tangent = float(elevation_tangent(length, aim, eye, kappa))
    ray = ray_height(at, np.full(at.shape, tangent), eye, kappa)
    line = sight_height(at, length, eye, aim, kappa)
    assert np.max(np.abs(ray - line)) < ROUNDING_M


@pytest.mark.parametrize("kappa", [0.0, *KAPPAS])
def test_the_line_is_the_same_number_from_both_ends(kappa: float) -> None:
    length = 65536.0
    at = np.arange(0.0, length + 1.0, 1024.0)
    there = sight_height(at, length, 31.0, 640.0, kappa)
    back = sight_height(length - at, length, 640.0, 31.0, kappa)
    assert np.array_equal(there, back)


def test_nothing_jumps_at_flat_ground() -> None:
    at = np.linspace(10.0, 49_990.0, 50)
    flat = sight_height(at, 50_000.0, 100.0, 300.0, 0.0)
    assert np.allclose(flat, 100.0 + at / 250.0, rtol=0, atol=ROUNDING_M)
    # half of kappa d1 d2 is the whole bulge to first order
    bulge = at * (50_000.0 - at) / 2.0
    for kappa in (1e-15, -1e-15, 1e-17, -1e-17):
        line = sight_height(at, 50_000.0, 100.0, 300.0, kappa)
        assert np.max(np.abs(line - (flat - kappa * bulge))) < ROUNDING_M


def test_sine_over_arc_is_one_at_the_eye_and_even_in_the_curvature() -> None:
    assert float(arc_ratio(0.0, 1e-7)) == 1.0
    assert float(arc_ratio(5.0, 0.0)) == 1.0
    assert float(arc_ratio(2e5, -3e-6)) == float(arc_ratio(2e5, 3e-6))
    assert float(arc_ratio(1e6, 1e-6)) == pytest.approx(np.sin(1.0), rel=ROUNDING)


def test_a_number_and_an_array_get_the_same_answer() -> None:
    one = sight_height(700.0, 2000.0, 5.0, 50.0, 1.3e-7)
    many = sight_height(np.array([700.0]), 2000.0, 5.0, 50.0, 1.3e-7)
    assert float(one) == float(many[0])
