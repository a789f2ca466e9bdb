"""Whether a target is a top with a hill of its own."""

from pathlib import Path

import numpy as np
import pytest

from profiler.earth import geodesic_path
from profiler.model import Point
from profiler.sight.own_hill import own_hill_radius
from profiler.terrain import Terrain
from tests import terrain
from tests.looking import from_centre, opened
from tests.terrain import CENTRE, place


def radius(
    ground: Terrain, azimuth: float, distance: float, asked: float | None = None
) -> float:
    start, end = CENTRE, place(azimuth, distance)
    path = geodesic_path(
        Point(lat_deg=start[0], lon_deg=start[1]), Point(lat_deg=end[0], lon_deg=end[1])
    )
    return own_hill_radius(ground, path, asked)


def dome(folder: Path, cell_m: float = 30.0) -> Terrain:
    """A round top of 80 m, 2 km east of the centre."""
    return opened(folder, terrain.cap(cell_m=cell_m))


def test_a_top_on_30_m_posts_has_a_hill_of_100_m(tmp_path: Path) -> None:
    assert radius(dome(tmp_path), 90.0, 2000.0) == 100.0


def test_a_waypoint_one_cell_off_is_still_the_top(tmp_path: Path) -> None:
    for azimuth, distance in ((90.0, 2030.0), (90.0, 1970.0), (89.15, 2000.2)):
        assert radius(dome(tmp_path), azimuth, distance) == 100.0


def test_on_coarse_posts_the_hill_is_three_cells(tmp_path: Path) -> None:
    made = terrain.cap(radius_m=4000.0, cell_m=90.0, away_m=1980.0)
    found = radius(opened(tmp_path, made), 90.0, 1980.0)
    assert found == pytest.approx(270.0, rel=1e-3)


def test_a_point_down_the_slope_is_no_top(tmp_path: Path) -> None:
    for distance in (1850.0, 1900.0, 2100.0, 2150.0):
        assert radius(dome(tmp_path), 90.0, distance) == 0.0


@pytest.mark.parametrize(("east", "north"), [(0.0, 0.0), (0.2, 0.0), (-0.01, 0.03)])
def test_level_ground_and_slopes_have_no_hill(
    tmp_path: Path, east: float, north: float
) -> None:
    assert radius(opened(tmp_path, terrain.plane(east, north)), 60.0, 2500.0) == 0.0


def test_a_plateau_has_no_hill(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.step(low_m=0.0, high_m=100.0))
    assert radius(ground, 90.0, 2000.0) == 0.0


def test_no_hill_reaches_half_the_path(tmp_path: Path) -> None:
    made = terrain.cap(radius_m=300.0, top_m=40.0, away_m=180.0, cell_m=10.0)
    ground = opened(tmp_path, made)
    assert radius(ground, 90.0, 180.0) == 0.0
    assert radius(ground, 90.0, 180.0, asked=80.0) == 80.0


def test_a_radius_that_is_asked_for_is_used(tmp_path: Path) -> None:
    ground = dome(tmp_path)
    assert radius(ground, 90.0, 2000.0, asked=250.0) == 250.0
    assert radius(ground, 90.0, 2000.0, asked=0.0) == 0.0
    # a smaller circle than a cell holds no post that lies a cell inside it
    assert radius(ground, 90.0, 2000.0, asked=20.0) == 0.0


def test_a_circle_with_a_void_proves_nothing(tmp_path: Path) -> None:
    made = terrain.cap(cell_m=30.0)
    posts = made.posts.copy()
    row, col = np.unravel_index(int(np.argmax(posts)), posts.shape)
    posts[row + 2, col] = np.nan
    assert radius(opened(tmp_path, made._replace(posts=posts)), 90.0, 1980.0) == 0.0


def test_a_target_outside_the_model_has_no_hill(tmp_path: Path) -> None:
    assert radius(dome(tmp_path), 270.0, 5000.0) == 0.0


def test_only_a_bare_target_gets_a_hill(tmp_path: Path) -> None:
    ground = dome(tmp_path)
    assert from_centre(ground, 90.0, 2000.0).target.own_hill_m == 100.0
    assert from_centre(ground, 90.0, 2000.0, top=0.01).target.own_hill_m == 0.0
