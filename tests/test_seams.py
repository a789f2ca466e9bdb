"""Where files meet there is no gap; where they overlap the finer one is used."""

from pathlib import Path
from typing import Any

import numpy as np
import pytest
import rasterio
from pyproj import Geod

from profiler.terrain import open_terrain
from tests import terrain
from tests.reading import (
    Floats,
    Pair,
    codes,
    exact,
    geodesic_points,
    ground_at,
    profile,
    step_in,
)
from tests.terrain import CENTRE, CENTRED_CRS, place

Box = tuple[float, float, float, float, float, float]


def cut(
    folder: Path, posts: Floats, box: Box, crs: str, col: int, *, raised_m: float = 0.0
) -> list[Path]:
    """The same ground as a western and an eastern file; the eastern one raised."""
    a, b, c, d, e, f = box
    west = terrain.write_geotiff(folder / "west.tif", posts[:, :col], box, crs)
    east = terrain.write_geotiff(
        folder / "east.tif",
        posts[:, col:] + raised_m,
        (a, b, c + a * col, d, e, f + d * col),
        crs,
    )
    return [west, east]


def real(folder: Path) -> tuple[Floats, Box, str]:
    with rasterio.open(terrain.jacksboro(folder)) as file:
        t = file.transform
        return file.read(1).astype(float), (t.a, t.b, t.c, t.d, t.e, t.f), "EPSG:4326"


def crossing(random: np.random.Generator) -> tuple[Pair, Pair]:
    """A path over the seam at column 200 of the bundled ground (84.247 W)."""
    lat = random.uniform(36.45, 36.73, 2)
    return (
        (float(lat[0]), float(random.uniform(-84.41, -84.26))),
        (float(lat[1]), float(random.uniform(-84.24, -84.08))),
    )


def test_ground_over_a_seam_is_the_ground_of_the_whole_file(tmp_path: Path) -> None:
    posts, box, crs = real(tmp_path)
    files = cut(tmp_path, posts, box, crs, 200)
    random = np.random.default_rng(2)
    for _ in range(20):
        start, end = crossing(random)
        whole = profile(tmp_path / "jacksboro.tif", start, end)
        parts = profile(files, start, end)
        dist = np.linspace(0.0, whole.length_m, 4001)
        gap = ground_at(parts, dist) - ground_at(whole, dist)
        assert np.abs(gap).max() < 1e-4
        assert step_in(parts) == 0.0
        assert [f.name for f in parts.files] == ["west.tif", "east.tif"]


def test_a_path_along_the_seam_has_ground(tmp_path: Path) -> None:
    made = terrain.fractal(3, shape=(101, 101))
    files = cut(tmp_path, *made[:3], 50)
    # post 50 is the centre's, the seam lies half a cell to its west
    lat, lon = place(270.0, 15.0)
    found = profile(files, (lat - 0.01, lon), (lat + 0.01, lon))
    assert np.isfinite(found.ground_m).all()
    assert step_in(found) == 0.0


@pytest.mark.parametrize("azimuth", [90.0, 80.0, 97.0, 45.0])
def test_a_step_of_3_m_at_a_seam_is_noted(tmp_path: Path, azimuth: float) -> None:
    made = terrain.fractal(3, shape=(201, 201), relief_m=300.0)
    files = cut(tmp_path, *made[:3], 120, raised_m=3.0)
    found = profile(files, CENTRE, place(azimuth, 2500.0))
    assert codes(found).count("seam-step") == 1
    text = next(n.text for n in found.notes if n.code == "seam-step")
    assert "west.tif and east.tif" in text
    step_m = float(text.split("steps by ")[1].split(" m")[0])
    assert step_m == pytest.approx(3.0, abs=0.5)


@pytest.mark.parametrize("azimuth", [90.0, 80.0, 97.0, 45.0])
def test_no_step_is_noted_where_files_agree(tmp_path: Path, azimuth: float) -> None:
    made = terrain.fractal(3, shape=(201, 201), relief_m=300.0)
    files = cut(tmp_path, *made[:3], 120)
    found = profile(files, CENTRE, place(azimuth, 2500.0))
    assert "seam-step" not in codes(found)


def test_roughness_is_never_called_a_step(tmp_path: Path) -> None:
    # neighbouring posts of this ground scatter by 6 m about an even slope
    files = cut(tmp_path, *real(tmp_path), 200)
    random = np.random.default_rng(12)
    opened = [profile(files, *crossing(random)) for _ in range(100)]
    assert sum("seam-step" in codes(found) for found in opened) == 0


def test_a_step_of_3_m_is_found_in_rough_ground_nearly_always(tmp_path: Path) -> None:
    files = cut(tmp_path, *real(tmp_path), 200, raised_m=3.0)
    random = np.random.default_rng(13)
    opened = [profile(files, *crossing(random)) for _ in range(100)]
    assert sum("seam-step" in codes(found) for found in opened) >= 90


def test_a_step_of_3_m_inside_one_file_is_ground(tmp_path: Path) -> None:
    made = terrain.step(high_m=3.0)
    file = terrain.write_geotiff(tmp_path / "a.tif", *made[:3])
    assert "seam-step" not in codes(profile(file, CENTRE, place(85.0, 2900.0)))


def test_overlapping_files_of_other_heights_are_noted(tmp_path: Path) -> None:
    made = terrain.fractal(3, shape=(101, 101))
    one = terrain.write_geotiff(tmp_path / "one.tif", *made[:3])
    two = terrain.write_geotiff(tmp_path / "two.tif", made.posts + 3.0, *made[1:3])
    ends = (CENTRE, place(70.0, 1200.0))
    assert "seam-step" in codes(profile([one, two], *ends))
    # of two files of one fineness the first given is used
    for files, plus_m in (([one, two], 0.0), ([two, one], 3.0)):
        found = profile(files, *ends)
        dist = np.linspace(0.0, found.length_m, 500)
        expected = exact(one, *ends, dist) + plus_m
        assert np.abs(ground_at(found, dist) - expected).max() < 1e-3


def fine_on_coarse(folder: Path, **fine: Any) -> tuple[Path, Path]:
    """Coarse 60 m ground at 100 m, and 20 m ground at 130 m from 600 to 1200 m east."""
    coarse = terrain.write_geotiff(
        folder / "coarse.tif",
        np.full((101, 101), 100.0),
        (60.0, 0.0, -3030.0, 0.0, -60.0, 3030.0),
        CENTRED_CRS,
    )
    posts = np.full((31, 31), 130.0)
    posts[:, 10:16] = fine.get("hole_m", 130.0)
    name = folder / "fine.tif"
    box = (20.0, 0.0, 590.0, 0.0, -20.0, 310.0)
    return coarse, terrain.write_geotiff(name, posts, box, CENTRED_CRS)


@pytest.mark.parametrize("order", [1, -1])
def test_the_finer_file_wins_in_whatever_order_they_are_given(
    tmp_path: Path, order: int
) -> None:
    files = list(fine_on_coarse(tmp_path))[::order]
    found = profile(files, CENTRE, place(90.0, 2000.0))
    at = np.array([300.0, 599.9, 600.1, 900.0, 1199.9, 1200.1, 1800.0])
    assert ground_at(found, at) == pytest.approx([100, 100, 130, 130, 130, 100, 100])
    names = [found.files[k].name for k in found.source]
    inside = (found.dist_m > 600.1) & (found.dist_m < 1199.9)
    assert {n for n, i in zip(names, inside, strict=True) if i} == {"fine.tif"}
    outside = (found.dist_m < 599.9) | (found.dist_m > 1200.1)
    assert {n for n, o in zip(names, outside, strict=True) if o} == {"coarse.tif"}
    note = next(n.text for n in found.notes if n.code == "seam-step")
    assert "30.0 m" in note


def test_the_coarser_file_fills_the_voids_of_the_finer(tmp_path: Path) -> None:
    coarse, fine = fine_on_coarse(tmp_path, hole_m=np.nan)
    found = profile([coarse, fine], CENTRE, place(90.0, 2000.0))
    assert np.isfinite(found.ground_m).all()
    # columns 10 to 15 are void: no fine ground between 780 and 920 m
    at = np.array([779.9, 780.1, 850.0, 919.9, 920.1])
    assert ground_at(found, at) == pytest.approx([130, 100, 100, 100, 130])
    names = {found.files[k].name for k in found.source[np.abs(found.dist_m - 850) < 60]}
    assert names == {"coarse.tif"}


def test_ground_in_another_map_joins_in_the_right_place(tmp_path: Path) -> None:
    # the same plane in metres about the centre and in longitude and latitude
    made = terrain.plane(0.05, 0.0, base_m=100.0, reach_m=1500.0, back_m=300.0)
    west = terrain.write_geotiff(tmp_path / "west.tif", *made[:3])
    far = place(90.0, 3000.0)
    cell = 1.0 / 3600.0
    cols, rows = np.arange(120), np.arange(60)
    lon = CENTRE[1] + 0.0230 + cell * cols
    lat = CENTRE[0] + 30 * cell - cell * rows
    east_m = Geod(ellps="WGS84").inv(
        np.full(lon.shape, CENTRE[1]),
        np.full(lon.shape, CENTRE[0]),
        lon,
        lon * 0 + 56.5,
    )[2]
    posts = np.tile(100.0 + 0.05 * np.asarray(east_m), (lat.size, 1))
    box = (cell, 0.0, lon[0] - cell / 2, 0.0, -cell, lat[0] + cell / 2)
    east = terrain.write_geotiff(tmp_path / "east.tif", posts, box, "EPSG:4326")
    found = profile([west, east], CENTRE, place(90.0, 2900.0))
    assert np.isfinite(found.ground_m).all()
    dist = np.linspace(0.0, found.length_m, 1000)
    assert np.abs(ground_at(found, dist) - (100.0 + 0.05 * dist)).max() < 0.02
    assert "seam-step" not in codes(found)
    assert far[1] > CENTRE[1]


@pytest.mark.parametrize("lat", [10.0, 72.0, -45.0])
def test_files_either_side_of_the_antimeridian_are_the_shifted_copy_to_1_mm(
    tmp_path: Path, lat: float
) -> None:
    posts = terrain.fractal(6, shape=(120, 240), relief_m=400.0).posts
    cell = 1.0 / 1200.0

    def half(name: str, part: Floats, west: float) -> Path:
        box = (cell, 0.0, west, 0.0, -cell, lat + 0.1)
        return terrain.write_geotiff(tmp_path / name, part, box, "EPSG:4326")

    over = [half("w.tif", posts[:, :120], 179.9), half("e.tif", posts[:, 120:], -180.0)]
    copy = half("copy.tif", posts, 19.9)
    random = np.random.default_rng(9)
    for _ in range(10):
        lats = random.uniform(lat + 0.005, lat + 0.095, 2)
        lon_0, lon_1 = random.uniform(0.005, 0.09), random.uniform(0.11, 0.195)
        here = profile(
            over,
            (float(lats[0]), 179.9 + lon_0),
            (float(lats[1]), 179.9 + lon_1 - 360.0),
        )
        there = profile(copy, (lats[0], 19.9 + lon_0), (lats[1], 19.9 + lon_1))
        assert np.isfinite(here.ground_m).all()
        assert here.length_m == pytest.approx(there.length_m, abs=1e-6)
        dist = np.linspace(0.0, there.length_m, 3000)[:-1]
        gap = ground_at(here, dist) - ground_at(there, dist)
        assert np.abs(gap).max() < 0.001
        assert step_in(here) == 0.0
        # and back again, from east to west
        back = profile(
            over[::-1],
            (float(lats[1]), 179.9 + lon_1 - 360.0),
            (float(lats[0]), 179.9 + lon_0),
        )
        again = ground_at(back, back.length_m - dist[1:])
        assert np.abs(again - ground_at(here, dist[1:])).max() < 0.001


def test_four_tiles_with_shared_edges_are_one_grid_without_gaps(tmp_path: Path) -> None:
    posts = terrain.fractal(6, shape=(201, 201), relief_m=400.0).posts
    box = (30.0, 0.0, -3015.0, 0.0, -30.0, 3015.0)
    whole = terrain.write_geotiff(tmp_path / "whole.tif", posts, box, CENTRED_CRS)
    folder = tmp_path / "tiles"
    folder.mkdir()
    for r in (0, 100):
        for c in (0, 100):
            at = (30.0, 0.0, -3015.0 + 30 * c, 0.0, -30.0, 3015.0 - 30 * r)
            part = posts[r : r + 101, c : c + 101]
            terrain.write_geotiff(folder / f"{r}_{c}.tif", part, at, CENTRED_CRS)
    assert len(open_terrain(folder).lattices) == 1
    random = np.random.default_rng(1)
    for azimuth in random.uniform(0.0, 360.0, 20):
        ends = (place(float(azimuth), 2900.0), place(float(azimuth) + 175.0, 2900.0))
        one, parts = profile(whole, *ends), profile(folder, *ends)
        assert np.array_equal(one.ground_m, parts.ground_m)
        assert "seam-step" not in codes(parts)


def test_a_grid_off_the_lattice_by_a_third_of_a_cell_is_another_grid(
    tmp_path: Path,
) -> None:
    made = terrain.fractal(3, shape=(101, 101))
    a, b, c, d, e, f = made.transform
    one = terrain.write_geotiff(tmp_path / "one.tif", *made[:3])
    box = (a, b, c + 101 * a + a / 3.0, d, e, f)
    two = terrain.write_geotiff(tmp_path / "two.tif", made.posts, box, made.crs)
    assert len(open_terrain(one, two).lattices) == 2


def test_more_files_than_may_be_open_at_once_are_read(tmp_path: Path) -> None:
    posts = np.arange(150.0)[None, :].repeat(20, axis=0)
    for k in range(75):
        box = (30.0, 0.0, -15.0 + 60.0 * k, 0.0, -30.0, 315.0)
        part = posts[:, 2 * k : 2 * k + 2]
        terrain.write_geotiff(tmp_path / f"{k:02}.tif", part, box, CENTRED_CRS)
    found = profile(tmp_path, CENTRE, place(90.0, 149 * 30.0))
    assert len(found.files) == 75
    dist = np.linspace(0.0, found.length_m, 999)
    assert ground_at(found, dist) == pytest.approx(dist / 30.0, abs=1e-5)
    lat, _ = geodesic_points(CENTRE, place(90.0, 4470.0), dist)
    assert np.ptp(lat) > 0.0
