"""Ground beside the path: what the centre line misses inside the first zone."""

from pathlib import Path

import numpy as np
import pytest
from pyproj import Geod

from profiler.model import SightLine
from profiler.radio.side import side_terrain
from profiler.radio.waves import wavelength_m
from profiler.terrain import Terrain as Opened
from tests import terrain
from tests.looking import opened, seen
from tests.terrain import CENTRE, CENTRED_CRS, Terrain, offsets, place

REACH_M = 8000.0
WAVE_M = wavelength_m(1e9)
#: Radius of the first zone in the middle of 8 km at 1 GHz: sqrt(0.2998·4·4/8) in km.
F1_MIDDLE_M = float(np.sqrt(WAVE_M * 4000.0 * 4000.0 / 8000.0))
CELL_M = 4.0


def crag(offset_m: float, *, height_m: float = 60.0, at_m: float = 4000.0) -> Terrain:
    """Flat ground and a square crag 12 m wide, north of the path by an offset."""
    east, north, transform = offsets(CELL_M, REACH_M, 60.0, 60.0)
    top = (np.abs(east - at_m) < 6.5) & (np.abs(north - offset_m) < 6.5)
    return Terrain(np.where(top, height_m, 0.0), transform, CENTRED_CRS, {})


def line_over(ground: Opened, *, agl_m: float = 60.0, back: bool = False) -> SightLine:
    ends = (place(90.0, REACH_M), CENTRE) if back else (CENTRE, place(90.0, REACH_M))
    return seen(ground, *ends, eye=agl_m, top=agl_m, ke=4 / 3)


@pytest.mark.parametrize(("offset_m", "side"), [(20.0, "left"), (-20.0, "right")])
def test_a_crag_beside_the_path_is_found_where_it_stands(
    offset_m: float, side: str, tmp_path: Path
) -> None:
    ground = opened(tmp_path, crag(offset_m))
    line = line_over(ground)
    # the centre line runs over flat ground and knows nothing of it
    assert line.profile.ground_m.max() == 0.0
    found = side_terrain(ground, line, wavelength_m=WAVE_M)
    assert found is not None
    assert found.side == side
    # places stand a sixth of the zone apart
    assert found.offset_m == pytest.approx(20.0, abs=6.0 + F1_MIDDLE_M / 6.0)
    assert found.distance_m == pytest.approx(4000.0, abs=10.0)
    assert found.ground_m > 30.0
    assert found.share < found.centre_share
    azimuth, _, away = Geod(ellps="WGS84").inv(
        CENTRE[1], CENTRE[0], found.lon_deg, found.lat_deg
    )
    north = away * np.cos(np.radians(azimuth))
    assert north == pytest.approx(
        found.offset_m if side == "left" else -found.offset_m, abs=0.01
    )


def test_its_share_is_its_distance_from_the_ray_over_f1(tmp_path: Path) -> None:
    ground = opened(tmp_path, crag(20.0, height_m=50.0))
    line = line_over(ground)
    found = side_terrain(ground, line, wavelength_m=WAVE_M)
    assert found is not None
    ray = np.interp(found.distance_m, line.profile.dist_m, line.sight_m)
    apart = np.hypot(found.offset_m, ray - found.ground_m)
    d1, d2 = found.distance_m, REACH_M - found.distance_m
    f1 = np.sqrt(WAVE_M * d1 * d2 / REACH_M)
    assert found.share == pytest.approx(apart / f1, abs=1e-4)


def test_a_wall_counts_by_what_of_it_is_nearest_to_the_ray(tmp_path: Path) -> None:
    ground = opened(tmp_path, crag(20.0, height_m=90.0))
    line = line_over(ground)
    found = side_terrain(ground, line, wavelength_m=WAVE_M)
    assert found is not None
    ray_m = np.interp(found.distance_m, line.profile.dist_m, line.sight_m)
    below = max(ray_m - found.ground_m, 0.0)
    d1, d2 = found.distance_m, REACH_M - found.distance_m
    f1 = np.sqrt(WAVE_M * d1 * d2 / REACH_M)
    assert found.share == pytest.approx(np.hypot(found.offset_m, below) / f1, abs=1e-6)
    # the crag begins 14 m beside the path and is 90 m high over a ray of 60 m
    assert found.offset_m < 16.0


def test_level_ground_is_tightest_under_the_path(tmp_path: Path) -> None:
    ground = opened(tmp_path, crag(20.0, height_m=0.0))
    for agl_m in (5.0, 20.0, 60.0):
        line = line_over(ground, agl_m=agl_m)
        assert side_terrain(ground, line, wavelength_m=WAVE_M) is None


def test_a_crag_outside_the_zone_is_no_matter(tmp_path: Path) -> None:
    ground = opened(tmp_path, crag(50.0))
    # the zone is 24.5 m wide at most, the crag begins 44 m away
    assert F1_MIDDLE_M < 25.0
    assert side_terrain(ground, line_over(ground), wavelength_m=WAVE_M) is None


def test_swapping_the_ends_swaps_the_sides(tmp_path: Path) -> None:
    ground = opened(tmp_path, crag(20.0))
    there = side_terrain(ground, line_over(ground), wavelength_m=WAVE_M)
    back = side_terrain(ground, line_over(ground, back=True), wavelength_m=WAVE_M)
    assert there is not None
    assert back is not None
    assert (there.side, back.side) == ("left", "right")
    assert back.offset_m == pytest.approx(there.offset_m, abs=1e-6)
    assert back.share == pytest.approx(there.share, abs=1e-3)
    # of a flat top every place counts alike; either end may name another of them
    assert back.distance_m == pytest.approx(REACH_M - there.distance_m, abs=13.0)


def test_unknown_ground_beside_the_path_is_no_crag(tmp_path: Path) -> None:
    made = crag(20.0)
    posts = np.where(made.posts > 0.0, np.nan, made.posts)
    ground = opened(tmp_path, made._replace(posts=posts))
    assert side_terrain(ground, line_over(ground), wavelength_m=WAVE_M) is None


def test_a_slope_across_the_path_is_tightest_on_its_upper_side(tmp_path: Path) -> None:
    made = terrain.plane(0.0, 0.5, cell_m=20.0, reach_m=REACH_M, back_m=300.0)
    ground = opened(tmp_path, made)
    # uphill is north, to the left of a path due east
    found = side_terrain(ground, line_over(ground, agl_m=20.0), wavelength_m=WAVE_M)
    assert found is not None
    assert found.side == "left"
