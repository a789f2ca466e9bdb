"""The path sheet: ray length, mirror, the range of air."""

import math
from pathlib import Path

import numpy as np
import pytest
from pyproj import Transformer

from profiler.model import SightLine
from profiler.radio.assess import assess
from profiler.radio.sheet import (
    KE_RANGE,
    PathSheet,
    loss_of,
    path_sheet,
    raw_profile,
    ray_length_m,
)
from profiler.radio.waves import wavelength_m
from profiler.terrain import open_terrain
from tests import terrain
from tests.looking import from_centre, opened
from tests.terrain import CENTRED_CRS, Terrain, offsets

GHZ = 6e9


def flat(reach_m: float, *, cell_m: float = 100.0, base_m: float = 0.0) -> Terrain:
    east, _, transform = offsets(cell_m, reach_m, 5 * cell_m, 5 * cell_m)
    return Terrain(np.full(east.shape, base_m), transform, CENTRED_CRS, {})


def line_over(
    folder: Path,
    made: Terrain,
    *,
    reach_m: float,
    eye_m: float = 30.0,
    top_m: float = 30.0,
    ke: float = 4 / 3,
) -> SightLine:
    ground = opened(folder, made)
    return from_centre(ground, 90.0, reach_m, eye=eye_m, top=top_m, ke=ke)


def sheet_of(line: SightLine) -> PathSheet:
    radio = assess(line, frequency_hz=GHZ)
    assert radio is not None
    return path_sheet(line, radio)


def chord_m(line: SightLine) -> float:
    """Straight distance of the antennas in Cartesian coordinates of WGS84, by PROJ."""
    to_xyz = Transformer.from_crs("EPSG:4979", "EPSG:4978", always_xy=True)
    ends = [
        np.array(to_xyz.transform(e.lon_deg, e.lat_deg, e.amsl_m))
        for e in (line.from_, line.to)
    ]
    return float(np.linalg.norm(ends[1] - ends[0]))


@pytest.mark.parametrize(
    ("reach_m", "base_m", "eye_m", "top_m"),
    [(500.0, 0.0, 2.0, 400.0), (20e3, 900.0, 30.0, 300.0), (60e3, 0.0, 900.0, 900.0)],
)
def test_the_ray_is_the_straight_distance_in_space(
    reach_m: float, base_m: float, eye_m: float, top_m: float, tmp_path: Path
) -> None:
    made = flat(reach_m, base_m=base_m, cell_m=500.0 if reach_m > 20e3 else 100.0)
    line = line_over(tmp_path, made, reach_m=reach_m, eye_m=eye_m, top_m=top_m)
    # one radius stands for the ellipsoid: a part in a million of the height's share
    assert ray_length_m(line) == pytest.approx(chord_m(line), rel=1e-6, abs=1e-3)


def test_equal_antennas_over_flat_ground_have_their_mirror_midway(
    tmp_path: Path,
) -> None:
    sheet = sheet_of(line_over(tmp_path, flat(8000.0), reach_m=8000.0))
    assert sheet.reflection is not None
    assert sheet.reflection.place.distance_m == pytest.approx(4000.0, abs=0.5)


def test_the_mirror_sees_both_antennas_under_one_angle(tmp_path: Path) -> None:
    line = line_over(tmp_path, flat(8000.0), reach_m=8000.0, eye_m=20.0, top_m=60.0)
    mirror = sheet_of(line).reflection
    assert mirror is not None
    radius = line.earth.effective_radius_m
    assert radius is not None
    d1 = mirror.place.distance_m
    angles = [
        math.atan2((h - d * d / (2.0 * radius)), d)
        for h, d in ((20.0, d1), (60.0, 8000.0 - d1))
    ]
    assert angles[0] == pytest.approx(angles[1], abs=1e-6)
    assert d1 < 4000.0


def test_there_is_no_mirror_beyond_the_horizon_or_over_a_void(tmp_path: Path) -> None:
    low = line_over(tmp_path, flat(20e3), reach_m=20e3, eye_m=2.0, top_m=2.0, ke=4 / 3)
    assert sheet_of(low).reflection is None
    ground = opened(tmp_path, terrain.one_void())
    line = from_centre(ground, 90.0, 2000.0, eye=30.0, top=30.0, ke=4 / 3)
    assert raw_profile(line) is None
    assert sheet_of(line).reflection is None


def test_clearance_is_told_for_each_air_of_the_range(tmp_path: Path) -> None:
    line = line_over(tmp_path, flat(8000.0), reach_m=8000.0, eye_m=40.0, top_m=40.0)
    sheet = sheet_of(line)
    assert [r.criterion.ke for r in sheet.by_ke] == list(KE_RANGE)
    zone = math.sqrt(wavelength_m(GHZ) * 4000.0 * 4000.0 / 8000.0)
    for result in sheet.by_ke:
        radius = result.criterion.ke * line.path.radius_m
        bulge = 4000.0 * 4000.0 / (2.0 * radius)
        assert result.margin_m == pytest.approx(40.0 - bulge, abs=0.01)
        assert result.at.share == pytest.approx((40.0 - bulge) / zone, abs=0.01)
        assert result.at.place.distance_m == pytest.approx(4000.0, abs=1.0)


def test_the_range_rises_with_ke(tmp_path: Path) -> None:
    line = line_over(tmp_path, flat(20e3), reach_m=20e3, eye_m=40.0, top_m=50.0)
    clear = [r.margin_m for r in sheet_of(line).by_ke]
    assert clear == sorted(clear)
    assert list(KE_RANGE) == sorted(KE_RANGE)


def test_pointing_is_the_geodesics_and_the_rays(tmp_path: Path) -> None:
    line = line_over(tmp_path, flat(8000.0), reach_m=8000.0, eye_m=20.0, top_m=60.0)
    sheet = sheet_of(line)
    assert sheet.azimuth_deg == pytest.approx(90.0, abs=1e-6)
    assert sheet.back_azimuth_deg == line.path.back_azimuth_deg
    assert sheet.from_tilt_deg > 0.0 > sheet.to_tilt_deg
    # both tilts fall short of a straight line's by the angle of the effective earth
    radius = line.earth.effective_radius_m
    assert radius is not None
    turn = math.degrees(8000.0 / radius)
    assert sheet.from_tilt_deg + sheet.to_tilt_deg == pytest.approx(-turn, abs=1e-6)


def test_a_profile_for_the_loss_rises_in_distance_and_keeps_the_higher_side(
    tmp_path: Path,
) -> None:
    west, east = terrain.step_tiles(low_m=10.0, high_m=60.0)
    for name, made in (("west", west), ("east", east)):
        terrain.write_geotiff(tmp_path / f"{name}.tif", *made[:3], unit="m")
    ground = open_terrain(tmp_path, interpolation="nearest")
    line = from_centre(ground, 90.0, 2500.0, eye=30.0, top=30.0, ke=4 / 3)
    assert np.any(np.diff(line.profile.dist_m) == 0.0)
    raw = raw_profile(line)
    assert raw is not None
    dist, height = raw
    assert np.all(np.diff(dist) > 0.0)
    for k in range(1, dist.size - 1):
        same = line.profile.dist_m == dist[k]
        assert height[k] == line.profile.ground_m[same].max()


def test_a_duct_has_no_loss_and_the_note_says_why(tmp_path: Path) -> None:
    ground = opened(tmp_path, flat(8000.0))
    line = from_centre(ground, 90.0, 8000.0, eye=30.0, top=30.0, kr=1.1)
    loss, note = loss_of(line, GHZ)
    assert loss is None
    assert "bends rays" in note
    assert sheet_of(line).reflection is None
