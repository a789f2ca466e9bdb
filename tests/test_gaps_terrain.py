"""What the terrain room does at its edges: voids, poles, many files, odd files."""

from pathlib import Path

import numpy as np
import pytest
import rasterio
import rasterio.shutil
from numpy.typing import NDArray
from rasterio.transform import Affine

from profiler.errors import DemError
from profiler.model import Point
from profiler.terrain import Terrain, open_terrain
from profiler.terrain.findings import file_notes
from profiler.terrain.near import finest_at, is_inside, posts_near, rise_over_ring
from profiler.terrain.pixel_path import MOST_HALVINGS, PATH_ERROR_CELLS, fit_pixel_path
from profiler.terrain.windows import MOST_OPEN, PostReader
from tests import terrain
from tests.looking import opened
from tests.reading import profile
from tests.terrain import CENTRE, place

Floats = NDArray[np.float64]
#: Height of the level ground that files in this module hold [m].
LAND_M = 40.0
MIDDLE = Point(lat_deg=CENTRE[0], lon_deg=CENTRE[1])


def square(
    cell_m: float, cells: int, height_m: float, void_cells: int = -1
) -> terrain.Terrain:
    """Level ground around the centre, void up to some cells from it."""
    steps = np.arange(-cells, cells + 1)
    east, north = np.meshgrid(steps, steps[::-1])
    hole = np.maximum(np.abs(east), np.abs(north)) <= void_cells
    corner = (cells + 0.5) * cell_m
    transform = (cell_m, 0.0, -corner, 0.0, -cell_m, corner)
    posts = np.where(hole, np.nan, height_m)
    return terrain.Terrain(posts, transform, terrain.CENTRED_CRS, {})


def written(folder: Path, name: str, made: terrain.Terrain) -> Path:
    return terrain.write_geotiff(folder / f"{name}.tif", *made[:3], unit="m")


def degrees(
    folder: Path, crs: str | None, corner: tuple[float, float], cell: float
) -> Path:
    """Twenty by twenty level posts whose upper left corner is at x, y of a map."""
    transform = (cell, 0.0, corner[0], 0.0, -cell, corner[1])
    posts = np.full((20, 20), LAND_M)
    return terrain.write_geotiff(folder / "file.tif", posts, transform, crs, unit="m")


def test_a_coarser_grid_gives_the_posts_where_the_finest_has_a_void(
    tmp_path: Path,
) -> None:
    ground = open_terrain(
        written(tmp_path, "fine", square(10.0, 30, LAND_M, void_cells=3)),
        written(tmp_path, "coarse", square(50.0, 20, LAND_M + 7.0)),
    )
    finest = finest_at(ground, MIDDLE)
    assert finest is not None
    assert max(finest.cell_m) == pytest.approx(10.0, rel=1e-3)
    near = posts_near(ground, MIDDLE, 120.0)
    assert near is not None
    assert near.cell_m == pytest.approx(50.0, rel=1e-3)
    # posts of a 50 m grid within 120 m of one of them: 3 x 3, 2 steps out along the
    # axes, and 1 beside that, which is sqrt(100^2 + 50^2) = 111.8 m away
    assert near.height_m.size == 9 + 4 + 8
    assert np.all(near.height_m == LAND_M + 7.0)


def test_a_point_over_a_void_has_no_posts_and_no_ring(tmp_path: Path) -> None:
    ground = opened(tmp_path, square(10.0, 30, LAND_M, void_cells=3))
    assert is_inside(ground, MIDDLE)
    assert posts_near(ground, MIDDLE, 120.0) is None
    assert rise_over_ring(ground, MIDDLE, LAND_M) is None


def test_a_point_beyond_every_grid_has_no_ring(tmp_path: Path) -> None:
    ground = opened(tmp_path, square(10.0, 30, LAND_M))
    lat, lon = place(90.0, 1000.0)
    assert rise_over_ring(ground, Point(lat_deg=lat, lon_deg=lon), LAND_M) is None


def test_five_posts_are_too_few_to_tell_a_slope_from_a_clump(tmp_path: Path) -> None:
    made = square(30.0, 10, np.nan)
    rows, cols = np.indices(made.posts.shape) - 10
    heights = np.where(np.abs(rows) + np.abs(cols) <= 1, LAND_M, np.nan)
    five = opened(tmp_path, made._replace(posts=heights))
    assert rise_over_ring(five, MIDDLE, LAND_M) is None
    heights[11, 11] = LAND_M
    six = opened(tmp_path, made._replace(posts=heights))
    assert rise_over_ring(six, MIDDLE, LAND_M + 9.0) == pytest.approx(9.0, abs=1e-9)


def test_a_point_that_the_map_cannot_show_is_outside(tmp_path: Path) -> None:
    # a gnomonic map shows less than the hemisphere around its middle
    crs = f"+proj=gnom +lat_0={CENTRE[0]} +lon_0={CENTRE[1]} +datum=WGS84 +units=m"
    ground = opened(tmp_path, square(30.0, 10, LAND_M)._replace(crs=crs))
    assert is_inside(ground, MIDDLE)
    opposite = Point(lat_deg=-CENTRE[0], lon_deg=CENTRE[1] + 180.0)
    assert not is_inside(ground, opposite)
    assert finest_at(ground, opposite) is None


def test_a_path_too_crooked_for_one_polynomial_is_halved() -> None:
    def wave(dist_m: Floats) -> tuple[Floats, Floats]:
        return 10.0 * np.sin(dist_m / 20.0), dist_m / 30.0

    path = fit_pixel_path(wave, 1000.0)
    halves = np.log2(1000.0 / np.diff(path.knot_m))
    assert len(path.col) == len(path.row) == path.knot_m.size - 1 > 1
    assert (path.knot_m[0], path.knot_m[-1]) == (0.0, 1000.0)
    np.testing.assert_array_equal(halves, np.round(halves))
    dist = np.linspace(0.0, 1000.0, 1733)
    for found, true in zip(path.at(dist), wave(dist), strict=True):
        # between the places that are checked the miss is a little larger
        assert np.abs(found - true).max() < 2.0 * PATH_ERROR_CELLS


def test_crossings_of_a_halved_path_are_where_the_wave_meets_the_lines() -> None:
    def wave(dist_m: Floats) -> tuple[Floats, Floats]:
        return 1.5 * np.sin(dist_m / 20.0), np.full_like(dist_m, 0.25)

    path = fit_pixel_path(wave, 1000.0)
    assert len(path.col) > 1
    found = np.unique(np.round(path.crossings((1.0, 1.0), (0.0, 0.0), 0.0), 3))
    turns = 2.0 * np.pi * np.arange(9)
    angles = np.concatenate([turns + np.arcsin(1 / 1.5), turns + np.pi])
    angles[9:] -= np.arcsin(1 / 1.5)
    true = np.sort(20.0 * angles)
    true = true[true <= 1000.0]
    np.testing.assert_allclose(found, true, atol=0.01)


def test_a_jump_is_refused_after_the_last_halving() -> None:
    calls = []

    def jump(dist_m: Floats) -> tuple[Floats, Floats]:
        calls.append(dist_m)
        return np.where(dist_m < 333.3, 0.0, 1000.0), dist_m

    with pytest.raises(DemError, match=r"no smooth course .* may cross a pole"):
        fit_pixel_path(jump, 1000.0)
    narrowest = min(float(np.ptp(dist)) for dist in calls)
    assert narrowest == pytest.approx(1000.0 / 2**MOST_HALVINGS)


def test_a_place_without_an_image_is_refused_like_a_pole() -> None:
    def torn(dist_m: Floats) -> tuple[Floats, Floats]:
        return np.where(dist_m == 0.0, np.inf, dist_m), dist_m

    with pytest.raises(DemError, match="Use a DEM in a polar projection"):
        fit_pixel_path(torn, 1000.0)


def test_a_path_over_the_pole_is_refused_on_a_map_of_degrees(tmp_path: Path) -> None:
    # one degree of latitude up to the pole, all the way round
    cell = 0.25
    posts = np.full((4, 1440), LAND_M)
    transform = (cell, 0.0, -180.0, 0.0, -cell, 90.0)
    file = terrain.write_geotiff(
        tmp_path / "cap.tif", posts, transform, "EPSG:4326", unit="m"
    )
    with pytest.raises(DemError, match="may cross a pole"):
        profile(file, (89.5, 10.0), (89.5, -170.0))


def strips(folder: Path, count: int) -> Terrain:
    """Level tiles of two columns side by side, each at its number in metres."""
    files = []
    for number in range(count):
        transform = (30.0, 0.0, 60.0 * number, 0.0, -30.0, 90.0)
        posts = np.full((3, 2), float(number))
        name = folder / f"strip{number:03}.tif"
        files.append(
            terrain.write_geotiff(name, posts, transform, "EPSG:32630", unit="m")
        )
    return open_terrain(*files)


def test_files_beyond_those_kept_open_are_read_like_the_others(tmp_path: Path) -> None:
    count = MOST_OPEN + 6
    ground = strips(tmp_path, count)
    (lattice,) = ground.lattices
    with PostReader() as reader:
        for _ in (0, 1):
            window = reader.window(lattice, 0, 0, 3, 2 * count)
            owner = np.repeat(np.arange(count), 2)
            np.testing.assert_array_equal(window.height_m, np.tile(owner, (3, 1)))
            np.testing.assert_array_equal(window.owner, np.tile(owner, (3, 1)))
            assert len(reader._open) == MOST_OPEN


def test_a_file_that_went_away_is_told_by_its_name(tmp_path: Path) -> None:
    ground = strips(tmp_path, 1)
    (tmp_path / "strip000.tif").unlink()
    with (
        PostReader() as reader,
        pytest.raises(DemError, match=r'^"strip000.tif" can no longer be opened\.$'),
    ):
        reader.window(ground.lattices[0], 0, 0, 3, 2)


def test_overlapping_files_step_only_where_both_have_ground(tmp_path: Path) -> None:
    def tile(name: str, height_m: float, void_cols: int) -> Path:
        posts = np.full((6, 6), height_m)
        posts[:, :void_cols] = np.nan
        transform = (30.0, 0.0, 0.0, 0.0, -30.0, 180.0)
        file = tmp_path / f"{name}.tif"
        return terrain.write_geotiff(file, posts, transform, "EPSG:32630", unit="m")

    def steps(*files: Path) -> dict[tuple[int, int], float]:
        (lattice,) = open_terrain(*files).lattices
        with PostReader() as reader:
            reader.window(lattice, 0, 0, 6, 6)
            return reader.steps

    low = tile("low", LAND_M, 0)
    assert steps(low, tile("half", LAND_M + 30.0, 3)) == {(0, 1): 30.0}
    assert steps(low, tile("void", LAND_M + 30.0, 6)) == {}


def test_a_void_file_on_a_map_of_feet_still_asks_for_its_unit(tmp_path: Path) -> None:
    posts = np.full((20, 20), np.nan)
    transform = (30.0, 0.0, 980_000.0, 0.0, -30.0, 200_000.0)
    file = terrain.write_geotiff(tmp_path / "feet.tif", posts, transform, "EPSG:2263")
    with pytest.raises(DemError, match=r"Say --dem-unit us-ft, ft or m\.$"):
        open_terrain(file)
    assert open_terrain(file, dem_unit="us-ft").rasters[0].unit == "us-ft"


def test_a_file_off_its_own_map_is_refused(tmp_path: Path) -> None:
    file = degrees(tmp_path, "EPSG:4326", (10.0, 140.0), 0.01)
    with pytest.raises(DemError, match=r'^"file.tif" lies outside its own coordinate'):
        open_terrain(file)


def test_a_file_with_cells_of_no_size_is_refused(tmp_path: Path) -> None:
    file = degrees(tmp_path, "EPSG:4326", (10.0, 14.0), 1e-14)
    with pytest.raises(DemError, match="has cells of no size on the ground"):
        open_terrain(file)


@pytest.mark.parametrize("variable", ["PROJ_DATA", "PROJ_LIB"])
def test_a_file_without_a_crs_names_the_setting_that_may_hide_it(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, variable: str
) -> None:
    file = degrees(tmp_path, None, (10.0, 14.0), 0.01)
    for name in ("PROJ_DATA", "PROJ_LIB"):
        monkeypatch.delenv(name, raising=False)
    with pytest.raises(DemError, match=r"Say --dem-crs EPSG:n\.$"):
        open_terrain(file)
    monkeypatch.setenv(variable, str(tmp_path))
    with pytest.raises(DemError, match=rf"\(The environment sets {variable}, which"):
        open_terrain(file)


def notes(file: Path) -> dict[str, str]:
    with rasterio.open(file) as dataset:
        return {note.code: note.text for note in file_notes(dataset, None)}


def bare(folder: Path, side: int, **creation: object) -> Path:
    """A file of 64-bit posts, none of which is stored."""
    file = folder / "bare.tif"
    with rasterio.open(
        file,
        "w",
        driver="GTiff",
        width=side,
        height=side,
        count=1,
        dtype="float64",
        crs="EPSG:32630",
        transform=Affine(30.0, 0.0, 0.0, 0.0, -30.0, 0.0),
        SPARSE_OK=True,
        **creation,
    ):
        pass
    return file


def test_a_large_file_in_whole_rows_is_told_to_be_slow(tmp_path: Path) -> None:
    # 8192 x 8192 posts of 8 bytes are 512 MB
    said = notes(bare(tmp_path, 8192, blockysize=1))
    assert said["huge-blocks"].startswith("rows are stored whole, so a north-south")
    assert "up to 512 MB" in said["huge-blocks"]
    tiled = bare(tmp_path, 8192, tiled=True, blockxsize=256, blockysize=256)
    assert notes(tiled) == {}


def test_the_hash_of_a_virtual_file_is_told_to_be_of_the_list(tmp_path: Path) -> None:
    plain = degrees(tmp_path, "EPSG:4326", (10.0, 14.0), 0.01)
    rasterio.shutil.copy(plain, tmp_path / "list.vrt", driver="VRT")
    assert notes(plain) == {}
    assert list(notes(tmp_path / "list.vrt")) == ["hash-of-list"]
