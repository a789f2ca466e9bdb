"""Ground for a small map: nearest posts, thinned, voids kept."""

import time
from pathlib import Path

import numpy as np
import pytest
import rasterio

from profiler.errors import DemError
from profiler.terrain import open_terrain, overview
from profiler.terrain.overview import MOST_POSTS, ground_grid
from tests.terrain import CENTRE, write_geotiff

CELL_DEG = 0.01


def dem(
    folder: Path,
    name: str,
    posts: object,
    *,
    west: float = 10.0,
    cell: float = CELL_DEG,
) -> Path:
    transform = (cell, 0.0, west, 0.0, -cell, 50.0)
    array = np.asarray(posts, dtype=np.float64)
    return write_geotiff(folder / name, array, transform, "EPSG:4326", nodata=-9999.0)


def posts_of(
    rows: int, cols: int, *, west: float = 10.0
) -> tuple[np.ndarray, np.ndarray]:
    """Latitude and longitude of posts of such a file."""
    lat = 50.0 - (np.arange(rows) + 0.5) * CELL_DEG
    lon = west + (np.arange(cols) + 0.5) * CELL_DEG
    lon_grid, lat_grid = np.meshgrid(lon, lat)
    return lat_grid, lon_grid


def test_a_place_on_a_post_gets_that_post(tmp_path: Path) -> None:
    posts = np.arange(30.0).reshape(5, 6)
    terrain = open_terrain(dem(tmp_path, "a.tif", posts))
    lat, lon = posts_of(5, 6)
    assert np.array_equal(ground_grid(terrain, lat, lon), posts)


def test_a_place_between_posts_gets_the_nearest(tmp_path: Path) -> None:
    posts = np.arange(30.0).reshape(5, 6)
    terrain = open_terrain(dem(tmp_path, "a.tif", posts))
    lat, lon = posts_of(5, 6)
    shifted = ground_grid(terrain, lat - 0.4 * CELL_DEG, lon + 0.4 * CELL_DEG)
    assert np.array_equal(shifted, posts)


def test_voids_and_places_outside_stay_without_ground(tmp_path: Path) -> None:
    posts = np.arange(30.0).reshape(5, 6)
    posts[2, 3] = np.nan
    terrain = open_terrain(dem(tmp_path, "a.tif", posts))
    lat, lon = posts_of(7, 8)
    ground = ground_grid(terrain, lat, lon)
    assert np.array_equal(ground[:5, :6], posts, equal_nan=True)
    assert np.isnan(ground[5:]).all()
    assert np.isnan(ground[:, 6:]).all()


def test_the_finer_grid_wins_and_the_coarser_fills_its_voids(tmp_path: Path) -> None:
    fine = np.full((5, 6), 7.0)
    fine[1, 1] = np.nan
    coarse = dem(tmp_path, "coarse.tif", np.full((5, 6), 3.0), cell=2.0 * CELL_DEG)
    terrain = open_terrain(coarse, dem(tmp_path, "fine.tif", fine))
    lat, lon = posts_of(5, 6)
    ground = ground_grid(terrain, lat, lon)
    assert ground[1, 1] == 3.0
    assert np.count_nonzero(ground == 7.0) == 29


def test_tiles_of_one_grid_join(tmp_path: Path) -> None:
    west = dem(tmp_path, "w.tif", np.full((5, 6), 1.0))
    east = dem(tmp_path, "e.tif", np.full((5, 6), 2.0), west=10.0 + 6 * CELL_DEG)
    lat, lon = posts_of(5, 12)
    ground = ground_grid(open_terrain(west, east), lat, lon)
    assert np.array_equal(ground[:, :6], np.full((5, 6), 1.0))
    assert np.array_equal(ground[:, 6:], np.full((5, 6), 2.0))


def test_tiles_join_across_the_antimeridian(tmp_path: Path) -> None:
    west = dem(tmp_path, "w.tif", np.full((5, 6), 1.0), west=180.0 - 6 * CELL_DEG)
    east = dem(tmp_path, "e.tif", np.full((5, 6), 2.0), west=-180.0)
    lat, lon = posts_of(5, 12, west=180.0 - 6 * CELL_DEG)
    terrain = open_terrain(west, east)
    for turned in (lon, np.where(lon > 180.0, lon - 360.0, lon), lon - 360.0):
        ground = ground_grid(terrain, lat, turned)
        assert np.array_equal(ground[:, :6], np.full((5, 6), 1.0))
        assert np.array_equal(ground[:, 6:], np.full((5, 6), 2.0))


def test_a_large_window_is_thinned_to_a_nearby_post(tmp_path: Path) -> None:
    rows, cols = 60, 2 * MOST_POSTS + 500
    column = np.tile(np.arange(cols, dtype=np.float64), (rows, 1))
    terrain = open_terrain(dem(tmp_path, "wide.tif", column))
    lat, lon = posts_of(rows, cols)
    ground = ground_grid(terrain, lat, lon)
    step = 3
    assert np.unique(ground).size <= MOST_POSTS
    assert np.abs(ground - column).max() <= step


def test_thinned_tiles_leave_no_gap_between_them(tmp_path: Path) -> None:
    cols = MOST_POSTS + 7
    west = dem(tmp_path, "w.tif", np.full((9, cols), 1.0))
    east = dem(tmp_path, "e.tif", np.full((9, cols), 2.0), west=10.0 + cols * CELL_DEG)
    lat, lon = posts_of(9, 2 * cols)
    ground = ground_grid(open_terrain(west, east), lat, lon)
    assert np.isfinite(ground).all()
    assert np.array_equal(np.unique(ground), [1.0, 2.0])


def test_no_read_returns_more_posts_than_the_limit(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    sizes: list[tuple[int, ...]] = []
    true_read = overview._read

    def counted(*args: object) -> np.ndarray:
        heights = true_read(*args)  # type: ignore[arg-type]
        sizes.append(heights.shape)
        return heights

    monkeypatch.setattr(overview, "_read", counted)
    terrain = open_terrain(dem(tmp_path, "big.tif", np.zeros((1500, 3100))))
    lat, lon = posts_of(1500, 3100)
    ground_grid(terrain, lat[::50, ::50], lon[::50, ::50])
    assert sizes
    assert max(max(size) for size in sizes) <= MOST_POSTS


def test_heights_in_feet_come_out_in_metres(tmp_path: Path) -> None:
    path = dem(tmp_path, "ft.tif", np.full((5, 6), 100.0))
    lat, lon = posts_of(5, 6)
    ground = ground_grid(open_terrain(path, dem_unit="ft"), lat, lon)
    # international foot, exact by definition (1959 agreement)
    assert ground == pytest.approx(np.full((5, 6), 30.48), abs=1e-12)


def test_places_where_a_projection_has_no_value_have_no_ground(tmp_path: Path) -> None:
    crs = f"+proj=gnom +lat_0={CENTRE[0]} +lon_0={CENTRE[1]} +datum=WGS84 +units=m"
    transform = (30.0, 0.0, -90.0, 0.0, -30.0, 90.0)
    path = write_geotiff(tmp_path / "g.tif", np.full((6, 6), 5.0), transform, crs)
    lat = np.array([[CENTRE[0], -CENTRE[0]]])
    lon = np.array([[CENTRE[1], CENTRE[1] + 180.0]])
    ground = ground_grid(open_terrain(path), lat, lon)
    assert ground[0, 0] == 5.0
    assert np.isnan(ground[0, 1])


def test_a_file_cut_short_is_named(tmp_path: Path) -> None:
    rng = np.random.default_rng(1)
    path = dem(tmp_path, "cut.tif", rng.normal(size=(300, 300)))
    terrain = open_terrain(path)
    path.write_bytes(path.read_bytes()[:200_000])
    lat, lon = posts_of(300, 300)
    with pytest.raises(DemError, match=r"cut\.tif"):
        ground_grid(terrain, lat, lon)


def test_a_mask_hides_posts(tmp_path: Path) -> None:
    path = dem(tmp_path, "m.tif", np.full((5, 6), 4.0))
    with rasterio.Env(GDAL_TIFF_INTERNAL_MASK=True), rasterio.open(path, "r+") as file:
        file.nodata = None
        mask = np.full((5, 6), 255, dtype=np.uint8)
        mask[0, 0] = 0
        file.write_mask(mask)
    lat, lon = posts_of(5, 6)
    ground = ground_grid(open_terrain(path), lat, lon)
    assert np.isnan(ground[0, 0])
    assert np.count_nonzero(ground == 4.0) == 29


def test_a_map_of_the_sample_upland_is_read_in_a_moment() -> None:
    sample = Path(__file__).resolve().parents[1] / "sample_dem" / "upland.tif"
    terrain = open_terrain(sample)
    lon, lat = np.meshgrid(np.linspace(-21.6, -21.1, 300), np.linspace(48.4, 48.2, 300))
    begun = time.perf_counter()
    ground = ground_grid(terrain, lat, lon)
    most_s = 2.0  # our bar, with room for a busy machine
    assert time.perf_counter() - begun < most_s
    assert np.isfinite(ground).mean() > 0.5
