"""An inspection says what a file is, what looks wrong and what must be declared."""

import hashlib
import json
from pathlib import Path

import numpy as np
import pytest
import rasterio
import rasterio.shutil
from click.testing import CliRunner
from pyproj import Geod

from profiler.cli.inspect import inspect_command
from profiler.constants import FOOT_M
from profiler.errors import DemError, InputError
from profiler.output.inspection import inspection_record, inspection_text
from profiler.terrain import scan
from profiler.terrain.inspect import FileReport, inspect_file
from profiler.terrain.scan import windows_of
from tests import terrain
from tests.terrain import CENTRE

BIG = 3.4028234663852886e38


def codes(report: FileReport) -> list[str]:
    return [n.code for n in report.notes]


def options(report: FileReport) -> list[str]:
    return [d.option.split()[0] for d in report.to_declare]


def test_real_ground_is_told_as_it_is(tmp_path: Path) -> None:
    file = terrain.jacksboro(tmp_path)
    report = inspect_file(file)
    assert (report.rows, report.cols, report.posts) == (344, 403, 344 * 403)
    assert (report.driver, report.dtype, report.crs) == ("GTiff", "int16", "EPSG:4326")
    assert report.lowest is not None
    assert report.highest is not None
    assert (report.lowest.value, report.highest.value) == (236.0, 1076.0)
    assert report.sha256 == hashlib.sha256(file.read_bytes()).hexdigest()
    assert report.bytes == file.stat().st_size
    half = 0.5 / 1200.0
    middle = (36.44625 + 36.732916667) / 2.0
    geod = Geod(ellps="WGS84")
    down = geod.inv(-84.0, middle - half, -84.0, middle + half)[2]
    along = geod.inv(-84.0 - half, middle, -84.0 + half, middle)[2]
    assert report.cell_m == pytest.approx((down, along), abs=0.001)
    assert report.outline_deg == pytest.approx(
        (36.44625 + half, -84.41375 + half, 36.732916667 - half, -84.077916667 - half)
    )
    with rasterio.open(file) as data:
        lon, lat = data.xy(report.highest.row, report.highest.col)
        assert data.read(1)[report.highest.row, report.highest.col] == 1076
    assert (report.highest.lat_deg, report.highest.lon_deg) == pytest.approx((lat, lon))
    assert (report.voids, report.zeros, report.notes) == (0, 0, ())
    assert options(report) == ["--dem-unit", "--dem-kind"]


@pytest.mark.parametrize("point", [False, True], ids=["area", "point"])
def test_both_registrations_lie_in_the_same_place(tmp_path: Path, point: bool) -> None:
    made = terrain.cone()
    file = terrain.write_geotiff(
        tmp_path / "a.tif", *made[:3], point_registration=point
    )
    report = inspect_file(file)
    assert report.registration == ("point" if point else "area")
    assert report.highest is not None
    assert report.highest.value == pytest.approx(200.0)
    assert report.highest.lat_deg == pytest.approx(terrain.place(90.0, 3000.0)[0])
    assert report.highest.lon_deg == pytest.approx(terrain.place(90.0, 3000.0)[1])
    assert "either tag gives the same ground" in inspection_text(report)


def test_feet_are_told_in_metres(tmp_path: Path) -> None:
    made = terrain.plane(base_m=300.0)
    file = terrain.write_geotiff(
        tmp_path / "a.tif", made.posts / FOOT_M, *made[1:3], unit="ft"
    )
    report = inspect_file(file)
    assert report.lowest is not None
    assert report.lowest.value == pytest.approx(300.0, abs=1e-6)
    assert (report.unit_text, report.unit_stated, report.unit_used) == ("ft",) * 3
    assert "--dem-unit" not in options(report)


def test_a_unit_that_is_not_read_must_be_declared(tmp_path: Path) -> None:
    made = terrain.plane()
    file = terrain.write_geotiff(tmp_path / "a.tif", *made[:3], unit="dm")
    report = inspect_file(file)
    assert (report.unit_text, report.unit_stated) == ("dm", None)
    assert '"dm"' in report.to_declare[0].why
    assert '"dm", which is not read' in inspection_text(report)


def test_a_map_in_feet_is_inspected_though_it_cannot_be_opened(tmp_path: Path) -> None:
    box = (100.0, 0.0, 2_000_000.0, 0.0, -100.0, 600_000.0)
    posts = np.linspace(212.0, 1480.0, 400).reshape(20, 20)
    file = terrain.write_geotiff(tmp_path / "a.tif", posts, box, "EPSG:2264")
    report = inspect_file(file)
    assert report.map_unit == "US survey foot"
    assert "US survey foot" in report.to_declare[0].why
    assert report.cell_m == pytest.approx((30.48, 30.48), abs=0.01)


def test_a_file_without_a_crs_says_what_is_missing(tmp_path: Path) -> None:
    grid = tmp_path / "bare.asc"
    head = "ncols 3\nnrows 2\nxllcorner 499400\nyllcorner 6261000\ncellsize 30\n"
    grid.write_text(head + "1 2 3\n4 5 6\n")
    report = inspect_file(grid)
    assert (report.crs, report.cell_m, report.outline_deg) == (None, None, None)
    assert options(report) == ["--dem-crs", "--dem-unit", "--dem-kind"]
    assert report.outline_crs == (499415.0, 6261015.0, 499475.0, 6261045.0)
    assert report.highest is not None
    assert (report.highest.value, report.highest.lat_deg) == (6.0, None)
    text = inspection_text(report)
    assert "cannot be used as it is" in text
    assert "row 1, column 2" in text
    declared = inspect_file(grid, dem_crs="EPSG:32630")
    assert (declared.crs, declared.crs_declared) == ("EPSG:32630", True)
    assert "--dem-crs" not in options(declared)
    with pytest.raises(InputError, match="EPSG:n"):
        inspect_file(grid, dem_crs="Airy")


def test_an_ascii_grid_with_its_projection_file_needs_no_crs(tmp_path: Path) -> None:
    source = terrain.write_geotiff(
        tmp_path / "a.tif",
        np.ones((5, 5)),
        (30.0, 0.0, 500_000.0, 0.0, -30.0, 6_000_000.0),
        "EPSG:32630",
    )
    grid = tmp_path / "a.asc"
    rasterio.shutil.copy(source, grid, driver="AAIGrid")
    assert grid.with_suffix(".prj").exists()
    assert inspect_file(grid).crs == "EPSG:32630"


def test_voids_are_counted_however_they_are_stated(tmp_path: Path) -> None:
    made = terrain.one_void()
    rest = made[1:3]
    tagged = terrain.write_geotiff(
        tmp_path / "t.tif", made.posts, *rest, nodata=-9999, dtype="int16"
    )
    nan = terrain.write_geotiff(tmp_path / "n.tif", made.posts, *rest)
    big = terrain.write_geotiff(
        tmp_path / "b.tif", made.posts, *rest, nodata=BIG, dtype="float32"
    )
    for file, nodata in ((tagged, -9999.0), (nan, None), (big, BIG)):
        report = inspect_file(file)
        assert (report.voids, report.fillers, report.nodata) == (1, (), nodata)
        assert report.void_share == 1.0 / report.posts


@pytest.mark.parametrize("value", [-32768.0, -9999.0, BIG])
def test_untagged_fillers_are_counted_with_the_first_place(
    tmp_path: Path, value: float
) -> None:
    made = terrain.plane()
    posts = made.posts.copy()
    posts[7, 9] = posts[8, 2] = posts[100, 100] = value
    file = terrain.write_geotiff(
        tmp_path / "a.tif", posts, *made[1:3], dtype="float32", blockysize=3
    )
    report = inspect_file(file)
    (group,) = report.fillers
    assert group.count == 3
    assert group.first.value == pytest.approx(value)
    assert (group.first.row, group.first.col) == (7, 9)
    assert codes(report)[0] == "untagged-void"
    assert report.voids == 3
    assert report.implausible is None


def test_a_field_of_zeros_and_impossible_heights_are_told(tmp_path: Path) -> None:
    made = terrain.plane(base_m=50.0)
    posts = made.posts.copy()
    posts[:10, :20] = 0.0
    posts[50, 60] = 9500.0
    posts[51, 61] = -600.0
    file = terrain.write_geotiff(tmp_path / "a.tif", posts, *made[1:3])
    report = inspect_file(file)
    assert (report.zeros, report.zero_share) == (200, 200 / posts.size)
    assert report.implausible is not None
    assert report.implausible.count == 2
    assert report.implausible.first.value == 9500.0
    assert codes(report) == ["zeros", "implausible-height"]


def test_a_file_with_no_ground_at_all_says_so(tmp_path: Path) -> None:
    made = terrain.plane()
    file = terrain.write_geotiff(
        tmp_path / "a.tif", np.full(made.posts.shape, np.nan), *made[1:3]
    )
    report = inspect_file(file)
    assert (report.lowest, report.highest) == (None, None)
    assert codes(report) == ["all-void"]
    assert "holds no ground at all" in inspection_text(report)


def test_date_kind_scale_and_datum_are_read_where_stated(tmp_path: Path) -> None:
    file = terrain.write_geotiff(
        tmp_path / "a.tif",
        np.full((70, 70), 321.5),
        (30.0, 0.0, 500_000.0, 0.0, -30.0, 4_400_000.0),
        "EPSG:32615+5773",
        dtype="int16",
        scale=0.5,
        offset=100.0,
        tiled=True,
        blockxsize=32,
        blockysize=16,
        compress="lzw",
    )
    with rasterio.open(file, "r+") as data:
        data.update_tags(TIFFTAG_DATETIME="2019:03:01 00:00:00")
        data.set_band_description(1, "Digital surface model, first return")
        data.build_overviews([2, 4])
    report = inspect_file(file)
    assert report.date == "2019:03:01 00:00:00"
    assert report.kind_stated == "surface"
    assert report.to_declare == ()
    assert report.vertical_datum == "EGM96 geoid"
    assert report.lowest is not None
    assert report.lowest.value == 321.5
    assert (report.tiled, report.block, report.compression) == (True, (16, 32), "LZW")
    assert report.overviews == (2, 4)


@pytest.mark.parametrize(
    ("words", "kind"), [("DTM 2 m", "bare"), ("DSM/DTM", "unknown")]
)
def test_the_kind_is_believed_only_when_it_is_one(
    tmp_path: Path, words: str, kind: str
) -> None:
    made = terrain.plane()
    file = terrain.write_geotiff(tmp_path / "a.tif", *made[:3])
    with rasterio.open(file, "r+") as data:
        data.update_tags(TIFFTAG_IMAGEDESCRIPTION=words)
    assert inspect_file(file).kind_stated == kind


def test_files_stored_badly_are_noted(tmp_path: Path) -> None:
    box = (0.001, 0.0, 10.0, 0.0, -0.001, 50.0)
    file = tmp_path / "a.tif"
    with rasterio.open(
        file,
        "w",
        driver="GTiff",
        width=3000,
        height=3000,
        count=1,
        dtype="float32",
        crs="EPSG:4326",
        transform=box,
        SPARSE_OK=True,
        blockysize=3000,
        compress="deflate",
    ):
        pass
    report = inspect_file(file)
    assert "huge-blocks" in codes(report)
    assert report.zeros == 9_000_000


def test_a_truncated_file_says_where(tmp_path: Path) -> None:
    made = terrain.fractal(1)
    source = terrain.write_geotiff(tmp_path / "a.tif", *made[:3])
    cog = tmp_path / "cog.tif"
    rasterio.shutil.copy(source, cog, driver="COG", blocksize=128)
    whole = cog.read_bytes()
    cog.write_bytes(whole[: len(whole) // 2])
    with pytest.raises(DemError, match=r"cut short near row \d+, column \d+"):
        inspect_file(cog)


@pytest.mark.parametrize(
    ("shape", "block"),
    [((7, 9), (7, 9)), ((40, 30), (16, 16)), ((5, 4000), (1, 4000)), ((1, 1), (8, 8))],
)
@pytest.mark.parametrize("limit", [1, 100, 10**6])
def test_windows_cover_every_post_once(
    monkeypatch: pytest.MonkeyPatch,
    shape: tuple[int, int],
    block: tuple[int, int],
    limit: int,
) -> None:
    monkeypatch.setattr(scan, "SCAN_POSTS", limit)
    seen = np.zeros(shape, dtype=int)
    for window in windows_of(shape, block):
        assert window.row_off % block[0] == 0
        assert window.col_off % block[1] == 0
        assert window.width * window.height <= max(limit, block[0] * block[1])
        seen[window.toslices()] += 1
    assert np.all(seen == 1)


def test_progress_counts_to_the_end(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(scan, "SCAN_POSTS", 5000)
    told: list[tuple[int, int]] = []
    inspect_file(terrain.jacksboro(tmp_path), progress=lambda *done: told.append(done))
    total = told[0][1]
    assert total > 10
    assert told == [(k, total) for k in range(1, total + 1)]


def test_the_sheet_is_aligned_and_names_the_options(tmp_path: Path) -> None:
    lines = inspection_text(inspect_file(terrain.jacksboro(tmp_path))).splitlines()
    assert lines[0] == "jacksboro.tif can be used."
    assert lines[1] == ""
    assert all(line[:8].strip().islower() or line[:8] == " " * 8 for line in lines[2:])
    assert all(line[8:10] == "  " and line[10] != " " for line in lines[2:])
    assert any(line.startswith("declare   --dem-unit m, ft or us-ft") for line in lines)
    assert any("344 rows x 403 columns" in line for line in lines)


def test_the_record_has_no_nan_and_tells_the_same(tmp_path: Path) -> None:
    made = terrain.one_void()
    file = terrain.write_geotiff(
        tmp_path / "a.tif", *made[:3], nodata=float("nan"), dtype="float32"
    )
    record = inspection_record(inspect_file(file))
    assert json.loads(json.dumps(record, allow_nan=False)) == record
    assert (record["nodata"], record["voids"]) == ("nan", 1)
    assert record["lowest"]["height_m"] == 40.0
    assert record["lowest"]["lat_deg"] == pytest.approx(CENTRE[0], abs=0.01)


def test_the_command_prints_sheets_of_files_folders_and_patterns(
    tmp_path: Path,
) -> None:
    terrain.jacksboro(tmp_path)
    run = CliRunner().invoke(inspect_command, [str(tmp_path)])
    assert (run.exit_code, run.stderr) == (0, "")
    assert run.stdout.startswith("jacksboro.tif can be used.\n\nfile ")
    pattern = CliRunner().invoke(inspect_command, [str(tmp_path / "*.tif")])
    assert pattern.stdout == run.stdout


def test_the_command_writes_json_beside_the_sheets_or_alone(tmp_path: Path) -> None:
    made = terrain.plane(base_m=0.0)
    file = terrain.write_geotiff(tmp_path / "zero.tif", *made[:3])
    alone = CliRunner().invoke(inspect_command, [str(file), "--json", "-"])
    record = json.loads(alone.stdout)
    assert record["schema"] == "overbrow/inspect/1"
    assert record["files"][0]["name"] == "zero.tif"
    assert "zero.tif: " in alone.stderr
    out = tmp_path / "out.json"
    both = CliRunner().invoke(inspect_command, [str(file), "--json", str(out)])
    assert out.read_text() == alone.stdout
    assert both.stdout.startswith("zero.tif can be used, with care")
    assert both.stderr == f"Written: {out}\n"


def test_progress_never_reaches_stdout(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    file = str(terrain.jacksboro(tmp_path))
    quick = CliRunner().invoke(inspect_command, [file])
    monkeypatch.setattr("profiler.cli.inspect.QUIET_S", 0.0)
    monkeypatch.setattr(scan, "SCAN_POSTS", 5000)
    slow = CliRunner().invoke(inspect_command, [file])
    assert slow.exception is None
    assert slow.stdout == quick.stdout
    assert quick.stderr == ""


def test_the_command_lets_the_refusal_through(tmp_path: Path) -> None:
    run = CliRunner().invoke(inspect_command, [str(tmp_path / "none.tif")])
    assert isinstance(run.exception, DemError)
    assert CliRunner().invoke(inspect_command, []).exit_code == 2
