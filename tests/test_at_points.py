"""Ground at single points: bilinear, the finest grid first, voids, the date line."""

from pathlib import Path

import numpy as np
import pytest
import rasterio
from pyproj import Transformer
from scipy.ndimage import map_coordinates

from profiler.terrain import at_points, open_terrain, windows
from profiler.terrain.at_points import ground_at
from tests import terrain
from tests.looking import opened
from tests.reading import pixels
from tests.terrain import CENTRE

DEGREES = "EPSG:4326"


def by_scipy(file: Path, lat: np.ndarray, lon: np.ndarray) -> np.ndarray:
    """Bilinear ground of one file by PROJ and scipy."""
    with rasterio.open(file) as data:
        posts, transform = data.read(1).astype(float), data.transform
        to_crs = Transformer.from_crs(4326, data.crs.to_wkt(), always_xy=True)
    col, row = pixels(transform, *map(np.asarray, to_crs.transform(lon, lat)))
    ground: np.ndarray = map_coordinates(posts, [row - 0.5, col - 0.5], order=1)
    return ground


def scattered(count: int, spread_deg: float) -> tuple[np.ndarray, np.ndarray]:
    random = np.random.default_rng(5)
    lat = CENTRE[0] + random.uniform(-spread_deg, spread_deg, count)
    lon = CENTRE[1] + random.uniform(-spread_deg, spread_deg, count)
    return lat, lon


def test_scattered_points_get_the_bilinear_ground_of_scipy(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.fractal(3))
    lat, lon = scattered(500, 0.03)
    ours = ground_at(ground, lat, lon)
    assert ours == pytest.approx(by_scipy(tmp_path / "ground0.tif", lat, lon), abs=1e-6)


def test_reading_in_parts_changes_nothing(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    ground = opened(tmp_path, terrain.fractal(4))
    lat, lon = scattered(200, 0.03)
    whole = ground_at(ground, lat, lon)
    monkeypatch.setattr(at_points, "CHUNK_POINTS", 7)
    monkeypatch.setattr(windows, "WINDOW_POSTS", 50)
    assert np.array_equal(ground_at(ground, lat, lon), whole)


def test_outside_and_beside_a_void_there_is_no_ground(tmp_path: Path) -> None:
    made = terrain.one_void()
    ground = opened(tmp_path, made)
    away = [
        made.facts["void_from_m"] - 1.0,
        made.facts["void_from_m"] + 1.0,
        made.facts["void_to_m"] - 1.0,
        made.facts["void_to_m"] + 1.0,
        1e5,
    ]
    lat, lon = np.array([terrain.place(90.0, d) for d in away]).T
    known = np.isfinite(ground_at(ground, lat, lon))
    assert known.tolist() == [True, False, False, True, False]


def test_a_point_on_a_post_needs_no_other_post(tmp_path: Path) -> None:
    made = terrain.one_void()
    ground = opened(tmp_path, made)
    lat, lon = np.array([terrain.place(90.0, made.facts["void_from_m"])]).T
    assert ground_at(ground, lat, lon) == pytest.approx(made.facts["land_m"])


def test_two_tiles_side_by_side_are_one_ground_at_their_seam(tmp_path: Path) -> None:
    whole = terrain.fractal(6, shape=(60, 60))
    cut = 30
    a, b, c, d, e, f = whole.transform
    parts = (
        (whole.posts[:, :cut], whole.transform),
        (whole.posts[:, cut:], (a, b, c + a * cut, d, e, f)),
    )
    folder = tmp_path / "tiles"
    folder.mkdir()
    for k, (posts, transform) in enumerate(parts):
        terrain.write_geotiff(
            folder / f"t{k}.tif", posts, transform, whole.crs, unit="m"
        )
    one = terrain.write_geotiff(tmp_path / "one.tif", *whole[:3], unit="m")
    # across the seam between the last post of one tile and the first of the other
    lat, lon = np.array(
        [
            terrain.place(az, dist)
            for dist in np.linspace(1.0, 400.0, 60)
            for az in (0, 90, 200, 270)
        ]
    ).T
    ours = ground_at(open_terrain(folder), lat, lon)
    assert np.array_equal(ours, ground_at(open_terrain(one), lat, lon))
    assert ours == pytest.approx(by_scipy(one, lat, lon), abs=1e-6)


def test_the_finest_grid_wins_and_the_coarse_one_fills_its_voids(
    tmp_path: Path,
) -> None:
    coarse, fine = terrain.plane(base_m=100.0), terrain.plane(base_m=50.0, cell_m=10.0)
    posts = fine.posts.copy()
    posts[:, : posts.shape[1] // 2] = np.nan
    terrain.write_geotiff(tmp_path / "coarse.tif", *coarse[:3], unit="m")
    terrain.write_geotiff(tmp_path / "fine.tif", posts, *fine[1:3], unit="m")
    lat, lon = np.array([terrain.place(45.0, d) for d in (500.0, 7000.0)]).T
    ours = ground_at(open_terrain(tmp_path), lat, lon)
    assert ours.tolist() == [100.0, 50.0]


def test_a_grid_that_is_not_needed_is_not_read(tmp_path: Path) -> None:
    coarse, fine = terrain.plane(base_m=100.0), terrain.plane(base_m=50.0, cell_m=10.0)
    terrain.write_geotiff(tmp_path / "coarse.tif", *coarse[:3], unit="m")
    terrain.write_geotiff(tmp_path / "fine.tif", *fine[:3], unit="m")
    both = open_terrain(tmp_path)
    (tmp_path / "coarse.tif").unlink()
    lat, lon = np.array([terrain.place(45.0, 500.0)]).T
    assert ground_at(both, lat, lon) == pytest.approx(50.0, abs=1e-9)


@pytest.mark.parametrize("turn", [-360.0, 0.0, 360.0])
def test_a_grid_over_the_antimeridian_is_met_on_either_turn(
    turn: float, tmp_path: Path
) -> None:
    random = np.random.default_rng(8)
    posts = random.uniform(0.0, 500.0, (40, 60))
    file = terrain.write_geotiff(
        tmp_path / "dateline.tif",
        posts,
        (0.01, 0.0, 179.7, 0.0, -0.01, 10.2),
        DEGREES,
        unit="m",
    )
    lat = random.uniform(9.9, 10.15, 50)
    east = random.uniform(179.75, 180.25, 50)
    ours = ground_at(open_terrain(file), lat, east + turn)
    col, row = (east - 179.7) / 0.01 - 0.5, (10.2 - lat) / 0.01 - 0.5
    assert ours == pytest.approx(map_coordinates(posts, [row, col], order=1), abs=1e-6)
