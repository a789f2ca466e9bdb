"""Files of many makes give the same ground, or say plainly why they give none."""

import os
import subprocess
import sys
import warnings
from pathlib import Path
from typing import Any

import numpy as np
import pytest
import rasterio
import rasterio.shutil
from rasterio.enums import ColorInterp
from rasterio.errors import NotGeoreferencedWarning

from profiler.constants import FOOT_M, US_SURVEY_FOOT_M
from profiler.errors import DemError, InputError
from profiler.terrain import open_terrain
from tests import terrain
from tests.reading import Floats, codes, ground_at, profile
from tests.terrain import CENTRE, place

#: Slopes and height of the plane that files in this module hold.
EAST, NORTH, BASE_M = 0.05, 0.03, 250.0
#: Bearing and length of the path over it [deg, m].
AZIMUTH, LENGTH_M = 52.0, 1500.0
#: Height on the plane may be wrong by this [m].
CLOSE_M = 0.005


def plane(**settings: Any) -> terrain.Terrain:
    return terrain.plane(EAST, NORTH, base_m=BASE_M, reach_m=1800.0, **settings)


def rise_m() -> float:
    """Rise of the plane per metre along the path."""
    angle = np.radians(AZIMUTH)
    return float(EAST * np.sin(angle) + NORTH * np.cos(angle))


def error_m(file: Path | list[Path], **options: Any) -> float:
    """Largest error of the ground along the path, over known geometry."""
    found = profile(file, CENTRE, place(AZIMUTH, LENGTH_M), **options)
    dist = np.linspace(0.0, found.length_m, 997)
    return float(np.abs(ground_at(found, dist) - (BASE_M + rise_m() * dist)).max())


def written(folder: Path, posts: Floats | None = None, **settings: Any) -> Path:
    made = plane()
    name = folder / "plane.tif"
    heights = made.posts if posts is None else posts
    return terrain.write_geotiff(name, heights, made.transform, made.crs, **settings)


@pytest.mark.parametrize("point", [False, True], ids=["area", "point"])
def test_a_plane_is_read_within_5_mm_at_both_registrations(
    tmp_path: Path, point: bool
) -> None:
    assert error_m(written(tmp_path, point_registration=point)) < CLOSE_M


@pytest.mark.parametrize(
    ("dtype", "step_m"),
    [
        ("int16", 0.01),
        ("uint16", 0.01),
        ("int32", 0.001),
        ("float32", 1.0),
        ("float64", 1.0),
    ],
)
def test_every_number_type_gives_the_same_plane(
    tmp_path: Path, dtype: str, step_m: float
) -> None:
    # whole numbers need a fine scale, which is a test of scale and offset as well
    offset = 0.0 if step_m == 1.0 else 200.0
    file = written(tmp_path, dtype=dtype, scale=step_m, offset=offset)
    rounding = step_m / 2.0 if step_m < 1.0 else 0.0
    assert error_m(file) < CLOSE_M + rounding


@pytest.mark.parametrize(
    "creation",
    [
        {"compress": "deflate"},
        {"compress": "lzw", "predictor": 3},
        {"compress": "zstd"},
        {"tiled": True, "blockxsize": 16, "blockysize": 16},
        {"tiled": True, "blockxsize": 64, "blockysize": 32, "compress": "deflate"},
        {"blockysize": 1},
        {"blockysize": 67},
        {"BIGTIFF": "YES"},
    ],
    ids=str,
)
def test_every_storage_gives_the_same_plane(
    tmp_path: Path, creation: dict[str, Any]
) -> None:
    assert error_m(written(tmp_path, dtype="float64", **creation)) < CLOSE_M


@pytest.mark.parametrize("driver", ["COG", "VRT", "AAIGrid"])
def test_every_format_gives_the_same_plane(tmp_path: Path, driver: str) -> None:
    ending = {"COG": "tiff", "VRT": "vrt", "AAIGrid": "asc"}[driver]
    copy = tmp_path / f"copy.{ending}"
    rasterio.shutil.copy(written(tmp_path), copy, driver=driver)
    assert error_m(copy) < CLOSE_M


def test_an_ascii_grid_without_a_crs_needs_one_declared(tmp_path: Path) -> None:
    grid = tmp_path / "bare.asc"
    rows = "\n".join(" ".join(["7.5"] * 40) for _ in range(30))
    grid.write_text(
        "ncols 40\nnrows 30\nxllcorner 499400\nyllcorner 6261000\ncellsize 30\n" + rows
    )
    with pytest.raises(DemError, match=r"no coordinate reference system.*--dem-crs"):
        open_terrain(grid)
    found = profile(grid, (56.4945, -3.0), (56.499, -3.005), dem_crs="EPSG:32630")
    assert found.files[0].crs == "EPSG:32630"
    assert found.ground_m == pytest.approx(7.5)


def test_a_declared_crs_does_not_override_the_file(tmp_path: Path) -> None:
    assert error_m(written(tmp_path), dem_crs="EPSG:32630") < CLOSE_M


def hgt(folder: Path, name: str) -> Path:
    """1201 x 1201 big-endian whole metres: 100 + 400·(lat - south) + 200·(lon - west).

    Format as in the SRTM topography documentation: rows from the north, shared edges,
    void -32768 (common practice).
    """
    steps = np.arange(1201) / 1200.0
    posts = 100.0 + 400.0 * steps[::-1, None] + 200.0 * steps[None, :]
    file = folder / name
    np.round(posts).astype(">i2").tofile(file)
    return file


def test_an_hgt_tile_gives_ground_at_its_posts_and_edges(tmp_path: Path) -> None:
    file = hgt(tmp_path, "N10E020.hgt")
    found = profile(file, (10.0, 20.0), (11.0, 21.0))
    assert not np.isnan(found.ground_m).any()
    assert found.ground_m[[0, -1]] == pytest.approx([100.0, 700.0], abs=1e-6)
    assert found.vertical_unit == "m"


def test_hgt_tiles_on_both_sides_of_the_antimeridian_are_one_grid(
    tmp_path: Path,
) -> None:
    west = hgt(tmp_path, "N10E179.hgt")
    east = hgt(tmp_path, "N10W180.hgt")
    opened = open_terrain(west, east)
    assert len(opened.lattices) == 1
    assert opened.outline_deg() == pytest.approx((10.0, 179.0, 11.0, 181.0))


@pytest.mark.parametrize(
    ("unit", "unit_m"), [("ft", FOOT_M), ("US survey foot", US_SURVEY_FOOT_M)]
)
def test_feet_stated_by_the_band_are_metres_to_1_mm(
    tmp_path: Path, unit: str, unit_m: float
) -> None:
    assert error_m(written(tmp_path, plane().posts / unit_m, unit=unit)) < 0.001


@pytest.mark.parametrize(
    ("vertical", "unit_m"), [("6360", US_SURVEY_FOOT_M), ("8228", FOOT_M)]
)
def test_feet_stated_by_a_compound_crs_are_metres_to_1_mm(
    tmp_path: Path, vertical: str, unit_m: float
) -> None:
    # EPSG 6360: NAVD88 height (ftUS); 8228: NAVD88 height (ft)
    rng = np.random.default_rng(5)
    posts = rng.uniform(100.0, 900.0, (40, 60))
    box = (30.0, 0.0, 500_000.0, 0.0, -30.0, 4_400_000.0)
    metres = terrain.write_geotiff(tmp_path / "m.tif", posts, box, "EPSG:32615")
    feet = terrain.write_geotiff(
        tmp_path / "ft.tif", posts / unit_m, box, f"EPSG:32615+{vertical}"
    )
    ends = ((39.7405, -92.999), (39.746, -92.981))
    one, other = profile(metres, *ends), profile(feet, *ends)
    assert np.isfinite(one.ground_m).all()
    assert other.vertical_unit == {"6360": "us-ft", "8228": "ft"}[vertical]
    assert np.abs(one.ground_m - other.ground_m).max() < 0.001


def test_declared_feet_are_metres_to_1_mm(tmp_path: Path) -> None:
    file = written(tmp_path, plane().posts / FOOT_M)
    assert error_m(file, dem_unit="ft") < 0.001


def test_a_declared_unit_that_contradicts_the_file_is_used_and_noted(
    tmp_path: Path,
) -> None:
    file = written(tmp_path, plane().posts / FOOT_M, unit="m")
    assert error_m(file, dem_unit="ft") < 0.001
    assert "unit-overruled" in [n.code for n in open_terrain(file, dem_unit="ft").notes]


def test_a_unit_that_nobody_stated_is_noted(tmp_path: Path) -> None:
    file = written(tmp_path)
    assert [n.code for n in open_terrain(file).notes] == ["unit-not-stated"]
    assert not open_terrain(file, dem_unit="m").notes


def test_a_unit_that_is_not_read_is_never_taken_as_metres(tmp_path: Path) -> None:
    file = written(tmp_path, plane().posts * 10.0, unit="dm")
    with pytest.raises(DemError, match=r'heights in "dm".*--dem-unit'):
        open_terrain(file)
    assert open_terrain(file, dem_unit="m").rasters[0].unit == "m"


def test_a_map_in_feet_with_heights_of_no_unit_is_refused(tmp_path: Path) -> None:
    posts = np.linspace(212.0, 1480.0, 400).reshape(20, 20)
    box = (100.0, 0.0, 2_000_000.0, 0.0, -100.0, 600_000.0)
    file = terrain.write_geotiff(tmp_path / "a.tif", posts, box, "EPSG:2264")
    message = "Heights run from 212 to 1 480, unit not stated, map unit US survey foot"
    with pytest.raises(DemError, match=message):
        open_terrain(file)
    assert open_terrain(file, dem_unit="us-ft").rasters[0].unit == "us-ft"


def void_files(folder: Path) -> dict[str, Path]:
    """Four ways to say that one post is void, and two that say nothing."""
    made = terrain.one_void()
    filled = np.where(np.isnan(made.posts), 40.0, made.posts)
    rest = (made.transform, made.crs)
    big = 3.4028234663852886e38
    files = {
        "tag": terrain.write_geotiff(
            folder / "tag.tif", made.posts, *rest, nodata=-9999, dtype="int16"
        ),
        "nan": terrain.write_geotiff(
            folder / "nan.tif", made.posts, *rest, dtype="float32"
        ),
        "float32": terrain.write_geotiff(
            folder / "big.tif", made.posts, *rest, nodata=big, dtype="float32"
        ),
        "untagged": folder / "untagged.tif",
        "untagged-int": folder / "untagged16.tif",
        "mask": folder / "mask.tif",
    }
    hole = np.where(np.isnan(made.posts), big, made.posts)
    terrain.write_geotiff(files["untagged"], hole, *rest, dtype="float32")
    hole = np.where(np.isnan(made.posts), -32768.0, made.posts)
    terrain.write_geotiff(files["untagged-int"], hole, *rest, dtype="int16")
    with rasterio.Env(GDAL_TIFF_INTERNAL_MASK=True):
        terrain.write_geotiff(files["mask"], filled, *rest)
        with rasterio.open(files["mask"], "r+") as file:
            file.write_mask(~np.isnan(made.posts))
    files["alpha"] = with_alpha(folder / "alpha.tif", filled, ~np.isnan(made.posts))
    files["band mask"] = with_band_mask(folder / "masked.vrt", files["mask"])
    return files


def with_alpha(name: Path, posts: Floats, seen: Any) -> Path:
    made = terrain.one_void()
    with rasterio.open(
        name,
        "w",
        driver="GTiff",
        width=posts.shape[1],
        height=posts.shape[0],
        count=2,
        dtype="uint16",
        crs=made.crs,
        transform=rasterio.Affine(*made.transform),
        alpha="yes",
    ) as file:
        file.colorinterp = (ColorInterp.gray, ColorInterp.alpha)
        file.write(posts.astype("uint16"), 1)
        file.write(np.where(seen, 65535, 0).astype("uint16"), 2)
    return name


def with_band_mask(name: Path, file: Path) -> Path:
    """A VRT whose mask belongs to its band, a kind that raises no flag."""
    rasterio.shutil.copy(file, name, driver="VRT")
    text = name.read_text()
    start, end = text.index("<MaskBand>"), text.index("</MaskBand>") + 11
    mask = text[start:end]
    text = text.replace(mask, "").replace("</VRTRasterBand>", f"{mask}</VRTRasterBand>")
    name.write_text(text)
    return name


@pytest.mark.parametrize(
    "kind",
    ["tag", "nan", "float32", "untagged", "untagged-int", "mask", "alpha", "band mask"],
)
def test_a_void_post_is_void_however_the_file_says_so(
    tmp_path: Path, kind: str
) -> None:
    file = void_files(tmp_path)[kind]
    facts = terrain.one_void().facts
    found = profile(file, CENTRE, place(90.0, 2300.0))
    first = found.piece_start[np.isnan(found.ground_m[found.piece_start + 1])]
    assert found.dist_m[first[0]] == pytest.approx(facts["void_from_m"], abs=1e-4)
    assert found.dist_m[first[-1] + 2] == pytest.approx(facts["void_to_m"], abs=1e-4)
    known = found.ground_m[np.isfinite(found.ground_m)]
    assert known == pytest.approx(40.0)
    assert ("untagged-void" in codes(found)) == kind.startswith("untagged")


def test_a_vrt_with_a_missing_tile_says_which_file_is_hurt(tmp_path: Path) -> None:
    source = written(tmp_path)
    mosaic = tmp_path / "mosaic.vrt"
    rasterio.shutil.copy(source, mosaic, driver="VRT")
    source.unlink()
    with pytest.raises(DemError, match=r"mosaic\.vrt") as caught:
        error_m(mosaic)
    assert "plane.tif" in str(caught.value)


def test_a_truncated_file_says_where(tmp_path: Path) -> None:
    file = written(tmp_path, blockysize=1)
    cog = tmp_path / "cog.tif"
    rasterio.shutil.copy(file, cog, driver="COG", compress="NONE", blocksize=128)
    whole = cog.read_bytes()
    cog.write_bytes(whole[: len(whole) // 8])
    with pytest.raises(DemError, match=r"cog\.tif.* damaged or cut short near row \d+"):
        error_m(cog)


@pytest.mark.parametrize(
    ("make", "message"),
    [
        (lambda p: p.exists(), "No elevation file"),
        (lambda p: p.write_bytes(b""), "empty"),
        (lambda p: p.write_bytes(b"no raster at all" * 99), "cannot be read"),
        (lambda p: p.mkdir(), "holds no elevation file"),
    ],
    ids=["missing", "empty", "nonsense", "folder"],
)
def test_what_is_no_file_of_heights_is_refused(
    tmp_path: Path, make: Any, message: str
) -> None:
    file = tmp_path / "a.tif"
    make(file)
    with pytest.raises(DemError, match=message):
        open_terrain(file)


def test_a_picture_of_three_bands_is_refused(tmp_path: Path) -> None:
    made = plane()
    size = {"width": 20, "height": 20, "count": 3, "dtype": "uint8"}
    box = rasterio.Affine(*made.transform)
    file = tmp_path / "rgb.tif"
    with rasterio.open(
        file, "w", driver="GTiff", crs=made.crs, transform=box, **size
    ) as picture:
        picture.write(np.zeros((3, 20, 20), "uint8"))
    with pytest.raises(DemError, match="3 bands"):
        open_terrain(file)


def test_a_grid_without_a_place_is_refused(tmp_path: Path) -> None:
    file = tmp_path / "nowhere.tif"
    made = plane()
    terrain.write_geotiff(file, np.ones((9, 9)), made.transform, made.crs)
    with rasterio.open(file, "r+") as data, warnings.catch_warnings():
        warnings.simplefilter("ignore", NotGeoreferencedWarning)
        data.transform = rasterio.Affine.identity()
    with pytest.raises(DemError, match="where it lies"):
        open_terrain(file)


def test_folders_and_patterns_stand_for_their_files_once(tmp_path: Path) -> None:
    file = written(tmp_path)
    (tmp_path / "read.me").write_text("no raster")
    opened = open_terrain(tmp_path, tmp_path / "*.tif", file)
    assert [r.path for r in opened.rasters] == [file]
    with pytest.raises(DemError, match="No file matches"):
        open_terrain(tmp_path / "*.hgt")
    with pytest.raises(DemError, match="No elevation file was named"):
        open_terrain()


def test_options_that_do_not_exist_are_refused_with_those_that_do(
    tmp_path: Path,
) -> None:
    file = written(tmp_path)
    with pytest.raises(InputError, match="bilinear, highest, nearest"):
        open_terrain(file, interpolation="cubic")
    with pytest.raises(InputError, match="bare, surface, unknown"):
        open_terrain(file, dem_kind="trees")
    with pytest.raises(InputError, match="m, ft or us-ft"):
        open_terrain(file, dem_unit="fathom")


@pytest.mark.parametrize("name", ["PROJ_LIB", "PROJ_DATA"])
def test_a_foreign_projection_folder_works_or_is_named(
    tmp_path: Path, name: str
) -> None:
    box = (30.0, 0.0, 500_000.0, 0.0, -30.0, 4_400_000.0)
    file = terrain.write_geotiff(
        tmp_path / "utm.tif", np.full((20, 20), 9.0), box, "EPSG:32615"
    )
    empty = tmp_path / "elsewhere"
    empty.mkdir()
    code = (
        "import sys\n"
        "from profiler.errors import DemError\n"
        "from profiler.terrain import open_terrain\n"
        "try:\n"
        "    print('works', open_terrain(sys.argv[1]).rasters[0].crs.crs_name)\n"
        "except DemError as error:\n"
        "    print(error)\n"
    )
    run = subprocess.run(
        [sys.executable, "-c", code, str(file)],
        env={**os.environ, name: str(empty)},
        capture_output=True,
        text=True,
        check=False,
    )
    assert run.returncode == 0, run.stderr
    assert run.stdout.strip() == "works EPSG:32615" or name in run.stdout
