"""The sample terrain can be made again and is what its README says."""

import csv
import hashlib
import subprocess
import sys
from pathlib import Path
from xml.etree import ElementTree

import numpy as np
import pytest
import rasterio
import rasterio.warp
from numpy.typing import NDArray

SAMPLE = Path(__file__).resolve().parents[1] / "sample_dem"
MADE = ("upland.tif", "combe_fine.tif", "sites.csv", "tops.gpx")
GPX = "{http://www.topografix.com/GPX/1/1}"
LOCH_M = 252.0


def read(name: str) -> NDArray[np.float64]:
    with rasterio.open(SAMPLE / name) as src:
        band: NDArray[np.float64] = src.read(1, masked=True).filled(np.nan)
    return band.astype(np.float64)


def sites() -> dict[str, tuple[float, float]]:
    with (SAMPLE / "sites.csv").open(encoding="utf-8", newline="") as lines:
        return {
            r["name"]: (float(r["lat"]), float(r["lon"])) for r in csv.DictReader(lines)
        }


def tops() -> dict[str, tuple[float, float, float]]:
    found = {}
    for point in ElementTree.parse(SAMPLE / "tops.gpx").getroot().iter(f"{GPX}wpt"):
        name, ele = point.findtext(f"{GPX}name"), point.findtext(f"{GPX}ele")
        assert name is not None
        assert ele is not None
        found[name] = (
            float(point.attrib["lat"]),
            float(point.attrib["lon"]),
            float(ele),
        )
    return found


def post(lat: float, lon: float) -> float:
    """Height of the post nearest to a place, NaN at sea."""
    with rasterio.open(SAMPLE / "upland.tif") as src:
        row, col = src.index(lon, lat)
    return float(read("upland.tif")[row, col])


@pytest.fixture(scope="module")
def again(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Folder into which the script has just written; any warning ends the script."""
    folder = tmp_path_factory.mktemp("again")
    script = [sys.executable, "-W", "error", str(SAMPLE / "make_sample_dem.py")]
    run = subprocess.run([*script, str(folder)], capture_output=True, text=True)
    assert (run.returncode, run.stdout, run.stderr) == (0, "", "")
    return folder


def test_the_script_finds_the_same_heights_again(again: Path) -> None:
    for name in MADE[:2]:
        with rasterio.open(again / name) as src, rasterio.open(SAMPLE / name) as kept:
            assert src.profile == kept.profile
            np.testing.assert_array_equal(src.read(1), kept.read(1))


def test_the_script_makes_the_committed_files_again_byte_for_byte(again: Path) -> None:
    assert sorted(p.name for p in again.iterdir()) == sorted(MADE)
    for name in MADE:
        made, kept = (
            hashlib.sha256((folder / name).read_bytes()).hexdigest()
            for folder in (again, SAMPLE)
        )
        assert made == kept, name


@pytest.mark.parametrize(
    ("name", "most"), [("upland.tif", 3_000_000), ("combe_fine.tif", 1_500_000)]
)
def test_a_tile_is_small_and_states_unit_and_kind_of_post(name: str, most: int) -> None:
    assert (SAMPLE / name).stat().st_size < most
    with rasterio.open(SAMPLE / name) as src:
        assert src.units == ("metre",)
        assert src.tags()["AREA_OR_POINT"] == "Area"
        assert src.nodata == -9999.0
        assert src.dtypes == ("float32",)
        assert src.descriptions[0]


def test_the_upland_has_arc_second_posts_between_the_stated_edges() -> None:
    with rasterio.open(SAMPLE / "upland.tif") as src:
        assert src.crs.to_epsg() == 4326
        assert src.shape == (972, 2052)
        assert tuple(src.bounds) == pytest.approx((-21.62, 48.15, -21.05, 48.42))


def test_the_sea_lies_in_the_west_and_has_no_ground() -> None:
    ground = read("upland.tif")
    assert np.isnan(ground[:600, 0]).all()
    assert np.isfinite(ground[:, -1]).all()
    assert 0.05 < np.isnan(ground).mean() < 0.3
    assert np.nanmin(ground) > 0.0
    assert 900.0 < np.nanmax(ground) < 1100.0


def test_the_loch_is_level() -> None:
    lat, lon = sites()["Lirr Jetty"]
    assert post(lat, lon) == LOCH_M
    water = read("upland.tif") == LOCH_M
    assert water.sum() > 3000
    solid = water[1:-1, 1:-1] & water[2:, 1:-1] & water[:-2, 1:-1] & water[1:-1, 2:]
    assert solid.sum() > 0.8 * water.sum()


def test_every_place_stands_on_ground() -> None:
    assert len(sites()) >= 12
    for name, (lat, lon) in sites().items():
        assert post(lat, lon) > 0.0, name


def test_the_harbour_stands_beside_the_sea() -> None:
    lat, lon = sites()["Ostrey Haven"]
    around = [post(lat + a / 3600, lon + b / 3600) for a in (-1, 0, 1) for b in (-1, 1)]
    assert np.isnan(around).any()


def test_a_top_in_the_list_is_the_highest_post_around() -> None:
    ground = read("upland.tif")
    with rasterio.open(SAMPLE / "upland.tif") as src:
        for name in tops():
            lat, lon = sites()[name]
            row, col = src.index(lon, lat)
            near = ground[row - 4 : row + 5, col - 4 : col + 5]
            assert ground[row, col] == near.max(), name


def test_posts_miss_metres_of_the_sharp_top_and_little_of_the_rounded_one() -> None:
    missed = {n: ele - post(*sites()[n]) for n, (_, _, ele) in tops().items()}
    assert 4 <= len(missed) <= 6
    assert 6.0 < missed["Thrane Pike"] < 12.0
    assert -0.06 < missed["Cobbin Round"] < 1.0
    assert min(missed.values()) > -0.06


def test_the_step_from_the_fine_tile_to_the_upland_is_small() -> None:
    with rasterio.open(SAMPLE / "combe_fine.tif") as src:
        assert src.crs.to_epsg() == 32627
        assert src.res == (5.0, 5.0)
        fine = src.read(1).astype(np.float64)
        rows, cols = np.mgrid[0:600:7, 0:600:7]
        x, y = src.xy(rows.ravel(), cols.ravel())
        lon, lat = rasterio.warp.transform(src.crs, "EPSG:4326", x, y)
    coarse = read("upland.tif")
    down = (48.42 - np.array(lat)) * 3600 - 0.5
    over = (np.array(lon) + 21.62) * 3600 - 0.5
    i, j = np.floor(down).astype(int), np.floor(over).astype(int)
    a, b = down - i, over - j
    upper = coarse[i, j] * (1 - b) + coarse[i, j + 1] * b
    lower = coarse[i + 1, j] * (1 - b) + coarse[i + 1, j + 1] * b
    step = fine[rows.ravel(), cols.ravel()] - (upper * (1 - a) + lower * a)
    assert np.median(np.abs(step)) < 1.0
