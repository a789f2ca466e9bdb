"""What holds for every path, the date line and the poles included."""

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from profiler.earth import (
    crs_from_user,
    destination,
    geodesic_line,
    geodesic_path,
    points_at,
)
from profiler.model import GeodesicPath, Point

#: PROJ's geodesics close to about 15 nm; a hundred times that.
CLOSES_M = 2e-6


def somewhere(
    lat: st.SearchStrategy[float], lon: st.SearchStrategy[float]
) -> st.SearchStrategy[Point]:
    return st.builds(lambda a, b: Point(lat_deg=a, lon_deg=b), lat, lon)


ANYWHERE = somewhere(st.floats(-90.0, 90.0), st.floats(-180.0, 180.0))
NEAR_DATE_LINE = somewhere(
    st.floats(-80.0, 80.0), st.floats(179.0, 180.0) | st.floats(-180.0, -179.0)
)
NEAR_POLE = somewhere(
    st.floats(88.0, 89.99) | st.floats(-89.99, -88.0), st.floats(-180.0, 180.0)
)


@st.composite
def paths(draw: st.DrawFn, starts: st.SearchStrategy[Point] = ANYWHERE) -> GeodesicPath:
    start = draw(starts)
    azimuth_deg = draw(st.floats(0.0, 360.0))
    end = destination(start, azimuth_deg, dist_m=draw(st.floats(1.0, 1_400_000.0)))
    return geodesic_path(start, end)


ALL_PATHS = paths() | paths(NEAR_DATE_LINE) | paths(NEAR_POLE)


def apart_m(first: Point, lat_deg: float, lon_deg: float) -> float:
    turned_deg = (lon_deg + 180.0) % 360.0 - 180.0
    return geodesic_line(first, Point(lat_deg=lat_deg, lon_deg=turned_deg)).length_m


@settings(max_examples=100, deadline=None)
@given(ALL_PATHS)
def test_longitude_never_jumps_and_never_turns_back(path: GeodesicPath) -> None:
    _, lon_deg = points_at(path, np.linspace(0.0, path.length_m, 60))
    east = 1.0 if path.azimuth_deg <= 180.0 else -1.0
    steps_deg = east * np.diff(lon_deg)
    assert lon_deg[0] == path.start.lon_deg
    # rounding along a meridian, largest beside a pole, may step back a hair
    assert steps_deg.min() > -1e-6
    assert steps_deg.sum() < 180.0 + 1e-6


@settings(max_examples=100, deadline=None)
@given(ALL_PATHS)
def test_both_ends_come_back_exactly_but_for_whole_turns(path: GeodesicPath) -> None:
    lat_deg, lon_deg = points_at(path, np.array([0.0, path.length_m]))
    assert lat_deg.tolist() == [path.start.lat_deg, path.end.lat_deg]
    assert lon_deg[0] == path.start.lon_deg
    turns = (lon_deg[1] - path.end.lon_deg) / 360.0
    assert turns == pytest.approx(round(turns), abs=1e-15)


@settings(max_examples=100, deadline=None)
@given(ALL_PATHS, st.permutations(range(7)))
def test_the_order_of_distances_does_not_matter(
    path: GeodesicPath, order: list[int]
) -> None:
    dist_m = np.linspace(0.0, path.length_m, 7)
    lat_deg, lon_deg = points_at(path, dist_m)
    mixed_lat_deg, mixed_lon_deg = points_at(path, dist_m[order])
    assert mixed_lat_deg.tolist() == lat_deg[order].tolist()
    assert mixed_lon_deg.tolist() == lon_deg[order].tolist()


@settings(max_examples=100, deadline=None)
@given(ALL_PATHS, st.floats(0.0, 1.0))
def test_a_place_lies_at_its_distance_from_both_ends(
    path: GeodesicPath, share: float
) -> None:
    dist_m = share * path.length_m
    lat_deg, lon_deg = points_at(path, np.array([dist_m]))
    from_start_m = apart_m(path.start, float(lat_deg[0]), float(lon_deg[0]))
    from_end_m = apart_m(path.end, float(lat_deg[0]), float(lon_deg[0]))
    assert from_start_m == pytest.approx(dist_m, abs=CLOSES_M)
    assert from_end_m == pytest.approx(path.length_m - dist_m, abs=CLOSES_M)


@settings(max_examples=100, deadline=None)
@given(ALL_PATHS)
def test_swapped_ends_give_the_same_path(path: GeodesicPath) -> None:
    back = geodesic_path(path.end, path.start)
    assert back.length_m == pytest.approx(path.length_m, abs=CLOSES_M)
    # below a kilometre the bearing is only as good as the coordinates' last bit
    assume(path.length_m > 1000.0)
    assert back.radius_m == pytest.approx(path.radius_m, abs=0.001)
    away = abs(back.azimuth_deg - path.back_azimuth_deg)
    assert min(away, 360.0 - away) < 1e-6


@settings(max_examples=100, deadline=None)
@given(ALL_PATHS)
def test_bearings_and_radius_stay_in_their_ranges(path: GeodesicPath) -> None:
    assert 0.0 <= path.azimuth_deg < 360.0
    assert 0.0 <= path.back_azimuth_deg < 360.0
    # M at the equator and the polar radius of curvature bound every other
    assert 6_335_439.0 < path.radius_m < 6_399_594.0


@settings(max_examples=50, deadline=None)
@given(paths(NEAR_DATE_LINE))
def test_longitude_in_another_datum_does_not_jump_either(path: GeodesicPath) -> None:
    lat_deg, lon_deg = points_at(path, np.linspace(0.0, path.length_m, 20))
    x, _ = crs_from_user("EPSG:4258").to_crs(lat_deg, lon_deg)
    assert np.abs(x - lon_deg).max() < 1e-3
