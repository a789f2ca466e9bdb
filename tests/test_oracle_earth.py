"""The oracle's ground and geometry against closed forms and three dimensions."""

from typing import Any

import numpy as np
import pytest
from pyproj import CRS

from tests import terrain
from tests.oracle_earth import (
    WGS84,
    RasterGround,
    chord_margins,
    circle_point,
    elevation,
    euler_radius,
    line_height,
)
from tests.terrain import place

#: the sphere of the closed forms, m
SPHERE_M = 6_371_000.0
#: what distances on the centred plane and the geodesic library leave open, m
ROUNDING_M = 1e-6
#: lengths and errors of the plane-circle model, m: the measured worst case is 0.002 at
#: 100 km and 0.18 at 450 km (design, section 4), the rest is room for other paths
CIRCLE_ERROR_M = [(100e3, 0.005), (450e3, 0.3)]


def random_lines() -> tuple[np.ndarray[Any, Any], ...]:
    random = np.random.default_rng(20)
    n = 4000
    length = random.uniform(100, 450e3, n)
    share = random.uniform(0.001, 0.999, n)
    heights = random.uniform(-100, 6000, (3, n))
    bend = random.uniform(-3, 3, n) / SPHERE_M
    bend[::7] = 0
    bend[::11] *= 1e-9
    return length, share * length, *heights, bend


def c(kappa: float, x: float) -> float:
    return float(np.sin(kappa * x) / (kappa * x)) if kappa else 1.0


def test_the_printed_elevation_formula_is_the_circle() -> None:
    for _, d, eye, _, z, kappa in zip(*random_lines(), strict=True):
        g = (1 + kappa * z) * d
        rise = (z - eye) - g * (kappa * d / 2) * c(kappa, d / 2) ** 2
        printed = rise / (g * c(kappa, d))
        exact = np.tan(elevation(kappa, eye, d, z))
        assert abs(printed - exact) * d < 1e-9


def test_the_printed_sight_line_formula_is_the_circle() -> None:
    for length, d1, h0, h1, _, kappa in zip(*random_lines(), strict=True):
        d2 = length - d1

        def s(x: float, bend: float = kappa) -> float:
            return x * c(bend, x)

        # design: d1 is counted from the eye, d2 from the target
        top = (
            h0 * (s(length) - s(d1))
            + h1 * (s(length) - s(d2))
            + kappa * h0 * h1 * s(length)
            - kappa
            / 2
            * (d1 * d2 * length)
            * (c(kappa, d1 / 2) * c(kappa, d2 / 2) * c(kappa, length / 2))
        )
        printed = top / ((1 + kappa * h0) * s(d1) + (1 + kappa * h1) * s(d2))
        exact = line_height((kappa, h0, h1), length, d1)
        assert abs(printed - float(exact)) < 1e-9


def test_the_circle_goes_smoothly_through_flat() -> None:
    flat = line_height((0.0, 100.0, 300.0), 80e3, 20e3)
    assert float(flat) == pytest.approx(150.0, abs=1e-12)
    for kappa in (1e-20, -1e-20):
        assert abs(line_height((kappa, 100.0, 300.0), 80e3, 20e3) - flat) < 1e-9


def test_a_point_over_the_eye_stays_over_the_eye() -> None:
    for kappa in (1 / SPHERE_M, 0.0, -1 / SPHERE_M):
        x, y = circle_point(kappa, 0.0, 123.0)
        assert (float(x), float(y)) == (0.0, 123.0)


@pytest.mark.parametrize(
    ("distance", "drop"), [(100e3, 784.887), (300e3, 7069.79), (500e3, 19670.63)]
)
def test_a_level_line_leaves_the_sphere_by_the_secant(
    distance: float, drop: float
) -> None:
    # own closed form R(sec(d/R) - 1), R = 6371 km, printed to the digits given
    angle = float(elevation(1 / SPHERE_M, 0.0, distance, drop))
    digit = 0.0005 if distance < 200e3 else 0.005
    assert abs(angle) * distance < digit


def test_eulers_radius_at_45_degrees_north_east_is_the_published_one() -> None:
    # 1/R = cos^2/M + sin^2/N with M 6367381.8156195 and N 6388838.2901211, values
    # quoted in public geodesy test suites
    assert euler_radius(45.0, 45.0) == pytest.approx(6378092.008, abs=0.001)
    assert euler_radius(45.0, 0.0) == pytest.approx(6367381.8156195, abs=0.001)
    assert euler_radius(45.0, -90.0) == pytest.approx(6388838.2901211, abs=0.001)


@pytest.mark.parametrize(("length", "error"), CIRCLE_ERROR_M)
def test_the_circle_meets_the_straight_chord_in_three_dimensions(
    length: float, error: float
) -> None:
    random = np.random.default_rng(3)
    worst, worst_sphere = 0.0, 0.0
    for _ in range(300):
        lat, lon = random.uniform(-80, 80), random.uniform(-180, 180)
        lon1, lat1, _ = WGS84.fwd(lon, lat, random.uniform(0, 360), length)
        h0, h1 = random.uniform(0, 3000, 2)
        at = np.linspace(0.02, 0.98, 25) * length
        ground = random.uniform(0, 3000, at.size)
        exact = chord_margins((lat, lon, h0), (lat1, lon1, h1), at, ground)
        azimuth, _, _ = WGS84.inv(lon, lat, lon1, lat1)
        _, middle, back = WGS84.fwd(lon, lat, azimuth, length / 2)
        kappa = 1 / euler_radius(middle, back + 180)
        circle = line_height((kappa, h0, h1), length, at) - ground
        sphere = line_height((1 / SPHERE_M, h0, h1), length, at) - ground
        worst = max(worst, float(np.max(np.abs(circle - exact))))
        worst_sphere = max(worst_sphere, float(np.max(np.abs(sphere - exact))))
    assert worst < error
    assert worst_sphere > 50 * worst


# --- ground -----------------------------------------------------------------------


def corner_ground(interpolation: str = "bilinear") -> RasterGround:
    posts = np.array([[10.0, 20.0, np.nan], [30.0, 60.0, 90.0]])
    transform = (0.5, 0.0, 9.75, 0.0, -0.5, 50.25)
    return RasterGround(posts, transform, CRS.from_epsg(4326), interpolation)


def test_ground_between_four_posts_is_bilinear() -> None:
    height = corner_ground().height([49.75, 49.9, 50.0], [10.25, 10.0, 10.5])
    assert height == pytest.approx([30.0, 14.0, 20.0], abs=1e-6)


def test_a_void_post_without_weight_does_not_matter() -> None:
    height = corner_ground().height([49.75, 49.5, 49.6], [10.5, 11.0, 10.75])
    assert height[:2] == pytest.approx([40.0, 90.0])
    assert np.isnan(height[2])


def test_outside_the_outermost_posts_there_is_no_bilinear_ground() -> None:
    assert np.isnan(corner_ground().height([50.01, 49.6], [10.0, 9.99])).all()


def test_longitudes_count_in_any_turn() -> None:
    height = corner_ground().height([49.9] * 3, [10.0, 370.0, -350.0])
    assert height == pytest.approx([14.0] * 3, abs=1e-6)


def test_highest_and_nearest_take_posts_as_they_are() -> None:
    assert corner_ground("highest").height([49.9], [10.1]) == pytest.approx([60.0])
    nearest = corner_ground("nearest").height([49.9, 49.6], [10.1, 10.4])
    assert nearest == pytest.approx([10.0, 60.0])


def test_a_rotated_raster_gives_the_same_plane() -> None:
    made = terrain.plane(0.1, -0.05, cell_m=50.0, reach_m=3000.0, back_m=3000.0)
    turn = np.radians(30.0)
    a, b = 50 * np.cos(turn), 50 * np.sin(turn)
    row, col = np.mgrid[-20:21, -20:21]
    east, north = a * col + b * row, b * col - a * row
    corner = -20.5
    transform = (a, b, (a + b) * corner, b, -a, (b - a) * corner)
    crs = CRS.from_user_input(made.crs)
    turned = RasterGround(0.1 * east - 0.05 * north, transform, crs)
    lat, lon = np.transpose([place(azimuth, 700.0) for azimuth in range(0, 360, 17)])
    straight = RasterGround(*made[:2], crs).height(lat, lon)
    assert turned.height(lat, lon) == pytest.approx(straight, abs=ROUNDING_M)
