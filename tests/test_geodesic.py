"""The path between two points: length, bearings, radius and the places along it."""

import math

import numpy as np
import pytest

from profiler.constants import WGS84_A_M
from profiler.earth import (
    destination,
    distances_m,
    euler_radius,
    geodesic_line,
    geodesic_path,
    meridian_radius,
    points_at,
    prime_vertical_radius,
)
from profiler.errors import InputError
from profiler.model import Point

HERE = Point(lat_deg=48.2092, lon_deg=-21.50344)
THERE = Point(lat_deg=48.32758, lon_deg=-21.17892)


def test_a_path_along_the_equator_is_an_arc_of_the_equator() -> None:
    path = geodesic_path(Point(lat_deg=0, lon_deg=10), Point(lat_deg=0, lon_deg=11))
    assert path.length_m == pytest.approx(math.radians(1.0) * WGS84_A_M, abs=1e-6)
    assert path.azimuth_deg == 90.0
    assert path.back_azimuth_deg == 270.0
    assert path.radius_m == pytest.approx(WGS84_A_M, abs=1e-6)


def test_a_path_due_north_uses_the_meridian_radius_at_its_middle() -> None:
    path = geodesic_path(Point(lat_deg=45, lon_deg=10), Point(lat_deg=46, lon_deg=10))
    assert path.azimuth_deg == 0.0
    assert path.back_azimuth_deg == 180.0
    assert path.radius_m == pytest.approx(meridian_radius(45.5), abs=1.0)


def test_the_radius_takes_the_bearing_at_the_middle_not_at_the_start() -> None:
    start, end = Point(lat_deg=70, lon_deg=0), Point(lat_deg=70, lon_deg=30)
    path = geodesic_path(start, end)
    # by symmetry the line runs due east half way
    lat_deg, _ = points_at(path, np.array([path.length_m / 2.0]))
    due_east_m = prime_vertical_radius(float(lat_deg[0]))
    assert path.radius_m == pytest.approx(due_east_m, abs=1e-3)
    at_start_m = euler_radius(float(lat_deg[0]), path.azimuth_deg)
    assert abs(path.radius_m - at_start_m) > 100.0


def test_bearings_run_from_0_to_360() -> None:
    path = geodesic_path(THERE, HERE)
    assert 180.0 < path.azimuth_deg < 270.0
    assert 0.0 < path.back_azimuth_deg < 90.0


def test_a_bearing_a_hair_west_of_north_is_not_360() -> None:
    line = geodesic_line(
        Point(lat_deg=0.0, lon_deg=0.0), Point(lat_deg=80.0, lon_deg=-1e-16)
    )
    assert 0.0 <= line.azimuth_deg < 360.0


def test_the_same_point_twice_is_refused() -> None:
    with pytest.raises(InputError, match=r"^The two points are the same place\."):
        geodesic_path(HERE, HERE)


def test_two_longitudes_of_a_pole_are_the_same_place() -> None:
    with pytest.raises(InputError, match="same place"):
        geodesic_path(Point(lat_deg=90, lon_deg=0), Point(lat_deg=90, lon_deg=77))


def test_the_date_line_from_both_sides_is_the_same_place() -> None:
    with pytest.raises(InputError, match="same place"):
        geodesic_path(Point(lat_deg=5, lon_deg=180), Point(lat_deg=5, lon_deg=-180))


def test_a_path_too_long_names_its_length_the_limit_and_the_remedy() -> None:
    with pytest.raises(InputError, match=r"1669\.8 km apart.*1500 km.*signs"):
        geodesic_path(Point(lat_deg=0, lon_deg=0), Point(lat_deg=0, lon_deg=15))


def test_the_ends_are_given_back_to_the_last_bit() -> None:
    path = geodesic_path(HERE, THERE)
    lat_deg, lon_deg = points_at(path, np.array([path.length_m, 0.0]))
    assert lat_deg.tolist() == [THERE.lat_deg, HERE.lat_deg]
    assert lon_deg.tolist() == [THERE.lon_deg, HERE.lon_deg]


def test_no_distances_give_no_places() -> None:
    lat_deg, lon_deg = points_at(geodesic_path(HERE, THERE), np.array([]))
    assert lat_deg.shape == lon_deg.shape == (0,)


def test_one_place_alone_beyond_the_date_line_is_still_unwrapped() -> None:
    path = geodesic_path(Point(lat_deg=5, lon_deg=179), Point(lat_deg=6, lon_deg=-179))
    _, lon_deg = points_at(path, np.array([path.length_m]))
    assert lon_deg.tolist() == [181.0]
    back = geodesic_path(path.end, path.start)
    _, lon_deg = points_at(back, np.array([back.length_m]))
    assert lon_deg.tolist() == [-181.0]


def test_a_path_over_the_pole_turns_its_longitude_by_half_a_turn() -> None:
    path = geodesic_path(Point(lat_deg=89, lon_deg=20), Point(lat_deg=89, lon_deg=-160))
    dist_m = np.linspace(0.0, path.length_m, 5)
    lat_deg, lon_deg = points_at(path, dist_m)
    assert lat_deg[2] == pytest.approx(90.0, abs=1e-9)
    assert lon_deg[[0, 1]] == pytest.approx([20.0, 20.0], abs=1e-9)
    assert np.abs(lon_deg[[3, 4]] - 20.0) == pytest.approx([180.0, 180.0], abs=1e-9)


def test_a_destination_lies_at_its_distance_and_bearing() -> None:
    end = destination(HERE, 61.3, dist_m=27_412.0)
    line = geodesic_line(HERE, end)
    assert line.length_m == pytest.approx(27_412.0, abs=1e-6)
    assert line.azimuth_deg == pytest.approx(61.3, abs=1e-9)


def test_a_destination_without_a_distance_is_refused() -> None:
    with pytest.raises(InputError, match="finite"):
        destination(HERE, 61.3, dist_m=math.nan)


def test_many_distances_are_those_of_the_single_lines() -> None:
    lat_deg = np.array([HERE.lat_deg, THERE.lat_deg])
    lon_deg = np.array([HERE.lon_deg, THERE.lon_deg])
    ours_m = distances_m(HERE, lat_deg, lon_deg)
    assert ours_m.tolist() == [0.0, geodesic_line(HERE, THERE).length_m]


def test_radii_of_arrays_are_those_of_their_members() -> None:
    lat_deg, azimuth_deg = np.array([0.0, 30.0, 60.0]), np.array([0.0, 45.0, 90.0])
    ours_m = euler_radius(lat_deg, azimuth_deg)
    one_by_one_m = [
        euler_radius(float(lat), float(azimuth))
        for lat, azimuth in zip(lat_deg, azimuth_deg, strict=True)
    ]
    assert ours_m == pytest.approx(one_by_one_m, rel=1e-15)
    assert ours_m[0] == meridian_radius(0.0)
    assert ours_m[2] == pytest.approx(prime_vertical_radius(60.0), rel=1e-15)
