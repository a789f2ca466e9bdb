"""What people who met the program anew found wrong stays mended."""

import os
import signal
import subprocess
import sys
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from pyproj import Transformer

from profiler.errors import DemError, InputError
from profiler.model import Air, Point, Station
from profiler.output.record import record
from profiler.output.words import words
from profiler.terrain import open_terrain
from tests import terrain
from tests.asking import GIVEN, HIDDEN, PART, ROOT, answer_of, profile, record_of
from tests.looking import from_centre, opened, seen
from tests.reading import Floats, codes, geodesic_points, ground_at, pixels, step_in
from tests.reading import profile as ground_of
from tests.terrain import CENTRE, CENTRED_CRS, place

#: Starts the command, stops while a result is being written and says so.
SLOW_WRITER = """
import sys, time
import profiler.output.files as files

def put(beside, text):
    beside.write_text(text[:10])
    print("writing", file=sys.stderr, flush=True)
    time.sleep(60)

files._put = put
from profiler.cli.main import run
run()
"""


#: Kinds of numbers that are no built-in float.
NUMBERS: list[tuple[Any, float]] = [(np.float64, 1), (np.float32, 0.5), (np.int64, 3)]


@pytest.mark.parametrize("again", [("--from", "Vennick"), ("--from=Vennick",)])
def test_a_point_given_twice_is_refused(again: tuple[str, ...]) -> None:
    ended = profile(*HIDDEN, *again)
    assert ended.status == 2
    assert ended.said == (
        "Error: --from stands twice. Give one; ask again for another."
    )
    assert ended.out == ""


@pytest.mark.parametrize("void_below_m", [np.inf, -np.inf, np.nan])
def test_unknown_ground_has_a_finite_bound(tmp_path: Path, void_below_m: float) -> None:
    ground = opened(tmp_path, terrain.sea())
    with pytest.raises(InputError, match=r"--void-below .* must be a height"):
        from_centre(ground, 90.0, 2000.0, void_below_m=void_below_m)


@pytest.mark.parametrize("value", ["20", True, [1.0], 1j])
def test_what_is_no_number_is_no_height_no_place_and_no_air(value: Any) -> None:
    here = Point(lat_deg=1.0, lon_deg=2.0)
    for make, name in (
        (lambda: Station(point=here, agl_m=value), "station"),
        (lambda: Station(point=here, amsl_m=value), "station"),
        (lambda: Station(point=here, agl_m=1, surveyed_ground_m=value), "station"),
        (lambda: Point(lat_deg=value, lon_deg=2.0), "point"),
        (lambda: Point(lat_deg=1.0, lon_deg=value), "point"),
        (lambda: Air(ke=value), "air"),
        (lambda: Air(kr=value), "air"),
        (lambda: Air(n_gradient_per_km=value), "air"),
    ):
        with pytest.raises(InputError, match=f"{name} needs numbers, not "):
            make()


def test_whole_numbers_and_those_of_numpy_are_numbers() -> None:
    one, half, three = (kind(n) for kind, n in NUMBERS)
    here = Point(lat_deg=one, lon_deg=2)
    assert Station(point=here, agl_m=three).agl_m == 3.0
    assert Air(kr=half).kr == 0.5


def test_a_file_that_changed_after_it_was_opened_is_refused(tmp_path: Path) -> None:
    made = terrain.plane(base_m=10.0)
    ground = opened(tmp_path, made)
    ends = (CENTRE, place(45.0, 2000.0))
    assert seen(ground, *ends).margin_m is not None
    file = ground.rasters[0].path
    terrain.write_geotiff(file, made.posts + 100.0, *made[1:3], unit="m")
    # a copy within the clock's grain has the same time; this one is later
    later = file.stat().st_mtime_ns + 1_000_000_000
    os.utime(file, ns=(later, later))
    with pytest.raises(DemError, match=r'"ground0.tif" has changed since it was open'):
        seen(ground, *ends)
    assert seen(open_terrain(file), *ends).from_.ground_m == 110.0


#: Corner of a file of 3 arc-seconds that lies across the border of two datum shifts.
BORDERS = [
    pytest.param("EPSG:4267", -80.05, 45.1, 20.0, id="NAD27 near 80 W"),
    pytest.param("EPSG:4230", 10.18, 48.1, 2.0, id="ED50 near 10 E"),
]


@pytest.mark.parametrize(("code", "west_deg", "north_deg", "jump_m"), BORDERS)
def test_one_file_keeps_one_datum_shift(
    tmp_path: Path, code: str, west_deg: float, north_deg: float, jump_m: float
) -> None:
    cell = 1.0 / 1200.0
    box = (cell, 0.0, west_deg, 0.0, -cell, north_deg)
    posts = terrain.fractal(7, shape=(240, 480)).posts
    file = terrain.write_geotiff(tmp_path / "old.tif", posts, box, code, unit="m")
    start = (north_deg - 0.15, west_deg + 0.03)
    end = (north_deg - 0.05, west_deg + 0.36)
    dist = np.linspace(0.0, ground_of(file, start, end).length_m, 4001)
    lat, lon = geodesic_points(start, end, dist)
    free = Transformer.from_crs("EPSG:4326", code, always_xy=True)
    # left to itself the library changes its shift on the way
    x, y = free.transform(lon, lat)
    moved = np.hypot(np.diff(x - lon) * np.cos(np.radians(lat[1:])), np.diff(y - lat))
    assert moved.max() * 111_000.0 > 0.7 * jump_m

    free.transform(west_deg + 240 * cell, north_deg - 120 * cell)
    x, y = free.get_last_used_operation().transform(lon, lat)
    found = ground_of(file, start, end)
    assert np.isfinite(found.ground_m).all()
    assert step_in(found) == 0.0
    expected = bilinear(posts, *pixels(rio(box), np.asarray(x), np.asarray(y)))
    assert np.abs(ground_at(found, dist) - expected).max() < 1e-2


def rio(box: terrain.Transform) -> Any:
    from rasterio.transform import Affine

    return Affine(*box)


def bilinear(posts: Floats, col: Floats, row: Floats) -> Floats:
    from scipy.ndimage import map_coordinates

    ground: Floats = map_coordinates(posts, [row - 0.5, col - 0.5], order=1)
    return ground


def flat(folder: Path, name: str, cell_m: float, height_m: float) -> Path:
    """Level ground 3 km round the centre."""
    count = round(6000.0 / cell_m) + 1
    corner = count / 2.0 * cell_m
    box = (cell_m, 0.0, -corner, 0.0, -cell_m, corner)
    posts = np.full((count, count), height_m)
    return terrain.write_geotiff(folder / name, posts, box, CENTRED_CRS, unit="m")


@pytest.mark.parametrize(
    ("cell_m", "first_wins"), [(30.2, True), (29.8, True), (31.0, True), (29.0, False)]
)
def test_of_nearly_equal_cells_the_file_given_first_is_used(
    tmp_path: Path, cell_m: float, first_wins: bool
) -> None:
    files = [
        flat(tmp_path, "first.tif", 30.0, 100.0),
        flat(tmp_path, "second.tif", cell_m, 110.0),
    ]
    found = ground_of(files, CENTRE, place(50.0, 2000.0))
    wanted = 100.0 if first_wins else 110.0
    assert np.abs(found.ground_m - wanted).max() < 1e-9


def east_of_centre(
    folder: Path, name: str, cell_m: float, from_m: float, to_m: float, height_m: float
) -> Path:
    """Level ground from one easting to another, cell edges there; 600 m either side."""
    cols, rows = round((to_m - from_m) / cell_m), round(1200.0 / cell_m)
    box = (cell_m, 0.0, from_m, 0.0, -cell_m, 600.0)
    posts = np.full((rows, cols), height_m)
    return terrain.write_geotiff(folder / name, posts, box, CENTRED_CRS, unit="m")


def test_grids_that_meet_without_a_shared_lattice_are_bridged(tmp_path: Path) -> None:
    files = [
        east_of_centre(tmp_path, "west.tif", 30.0, -300.0, 1500.0, 100.0),
        east_of_centre(tmp_path, "east.tif", 20.0, 1500.0, 3000.0, 125.0),
    ]
    found = ground_of(files, CENTRE, place(90.0, 2500.0))
    # the outermost posts stand at 1485 and 1510 m
    at = np.array([1400.0, 1485.0, 1490.0, 1500.0, 1510.0, 1600.0])
    expected = [100.0, 100.0, 105.0, 115.0, 125.0, 125.0]
    assert ground_at(found, at) == pytest.approx(expected, abs=1e-3)
    note = next(n for n in found.notes if n.code == "seam-bridged")
    assert note.text.startswith("25 m of path lie between the outermost posts of grids")


@pytest.mark.parametrize("gap_m", [10.0, 60.0])
def test_only_less_than_a_cell_and_a_half_is_bridged(
    tmp_path: Path, gap_m: float
) -> None:
    files = [
        east_of_centre(tmp_path, "west.tif", 30.0, -300.0, 1500.0, 100.0),
        east_of_centre(tmp_path, "east.tif", 20.0, 1500.0 + gap_m, 3000.0, 125.0),
    ]
    found = ground_of(files, CENTRE, place(90.0, 2500.0))
    is_bridged = gap_m < 20.0
    assert ("seam-bridged" in codes(found)) == is_bridged
    assert np.isnan(found.ground_m).any() != is_bridged


def test_a_true_void_beside_a_seam_is_not_bridged(tmp_path: Path) -> None:
    west = east_of_centre(tmp_path, "west.tif", 30.0, -300.0, 1500.0, 100.0)
    posts = np.full((60, 80), 125.0)
    posts[:, 0] = np.nan
    box = (20.0, 0.0, 1480.0, 0.0, -20.0, 600.0)
    east = terrain.write_geotiff(
        tmp_path / "east.tif", posts, box, CENTRED_CRS, unit="m", nodata=-9999.0
    )
    # west ends at its post at 1485 m; the first post of east, at 1490 m, is void
    found = ground_of([west, east], CENTRE, place(90.0, 2500.0))
    assert "seam-bridged" not in codes(found)
    assert np.isnan(found.ground_m).any()


@pytest.mark.parametrize(
    ("off_m", "told"),
    [
        (41.0, "41 m above the DEM's"),
        (-41.0, "41 m below the DEM's"),
        (39.0, None),
        (-39.0, None),
    ],
)
def test_a_survey_far_off_the_dem_is_questioned(
    tmp_path: Path, off_m: float, told: str | None
) -> None:
    ground = opened(tmp_path, terrain.plane(base_m=200.0))
    survey = {"agl_m": 5.0, "surveyed_ground_m": 200.0 + off_m}
    answer = from_centre(ground, 90.0, 2000.0, eye=10.0, top=survey)
    texts = [note.text for note in answer.warnings if note.code == "survey-gap"]
    wanted = f"The surveyed ground at the to end lies {told}. Feet for metres, or "
    assert texts == ([] if told is None else [f"{wanted}another height datum?"])


def test_a_run_that_is_asked_to_end_leaves_no_file(tmp_path: Path) -> None:
    file = str(tmp_path / "a.json")
    with subprocess.Popen(
        [sys.executable, "-c", SLOW_WRITER, "profile", *GIVEN, *HIDDEN, "--json", file],
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        cwd=ROOT,
    ) as process:
        assert process.stderr is not None
        assert process.stderr.readline() == b"writing\n"
        assert len(list(tmp_path.iterdir())) == 1
        process.send_signal(signal.SIGTERM)
        _, said = process.communicate(timeout=30)
    assert process.returncode == 143
    assert said == b""
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize(("eye_m", "top_m"), [(1.7, 0.0), (1.7, 1.7), (0.0, 0.0)])
def test_the_highest_posts_are_never_the_bolder_choice(
    tmp_path: Path, eye_m: float, top_m: float
) -> None:
    file = terrain.jacksboro(tmp_path)
    plain = open_terrain(file, dem_unit="m")
    cautious = open_terrain(file, dem_unit="m", interpolation="highest")
    random = np.random.default_rng(60)
    for _ in range(60):
        lat, lon = random.uniform(36.45, 36.73, 2), random.uniform(-84.41, -84.08, 2)
        ends = ((lat[0], lon[0]), (lat[1], lon[1]))
        # the point itself: a top's own hill is another one on other ground
        asked: dict[str, Any] = {"eye": eye_m, "top": top_m, "own_hill_m": 0.0}
        low, high = (seen(t, *ends, kr=0.13, **asked) for t in (cautious, plain))
        assert low.from_.ground_m == high.from_.ground_m
        assert low.to.ground_m == high.to.ground_m
        assert low.margin_m is not None
        assert high.margin_m is not None
        assert low.margin_m <= high.margin_m + 1e-6


def test_the_length_without_ground_is_that_of_the_voids(tmp_path: Path) -> None:
    made = terrain.one_void()
    answer = from_centre(opened(tmp_path, made), 90.0, 2000.0, eye=50.0, top=50.0)
    lost = made.facts["void_to_m"] - made.facts["void_from_m"]
    assert record(answer)["path"]["void_m"] == pytest.approx(lost, abs=0.01)
    assert f"samples, {lost:.0f} m without ground" in words(answer)
    level = from_centre(opened(tmp_path, terrain.plane()), 90.0, 2000.0, eye=50.0)
    assert record(level)["path"]["void_m"] == 0.0


def test_the_ground_that_may_rise_least_is_named(tmp_path: Path) -> None:
    made = terrain.ridge("column", height_m=12.0, cells_away=70)
    answer = from_centre(opened(tmp_path, made), 90.0, 3600.0, eye=40.0, top=40.0)
    needed = record(answer)["needed"]
    assert needed["dem_bias_m"] == pytest.approx(28.0, abs=0.02)
    assert needed["dem_bias_at_m"] == pytest.approx(made.facts["crest_at_m"], abs=0.01)
    assert "would close  ground at 2.10 km more than " in words(answer)


def test_the_dems_own_margin_is_told_with_its_place() -> None:
    plain = record_of(*HIDDEN)["decisive"]
    values = record_of(*HIDDEN, "--to-ground", "470m")
    assert values["other_ground"]["at_m"] == plain["distance_m"]
    assert values["other_ground"]["margin_m"] == plain["margin_m"]


def test_a_ray_as_curved_as_the_earth_is_never_offered() -> None:
    question = ("--from", "Skarvel", "--to", "Quillet Mast")
    assert record_of(*question)["needed"]["kr"] > 1.0
    assert "or kr" not in profile(*question).out
    assert "; or kr 0.54, more than you may count on" in profile(*HIDDEN).out


def test_minutes_of_arc_beside_feet_are_not_the_sign_of_a_foot() -> None:
    answer = answer_of(*PART)
    assert "(4.1′)" in answer.words()
    assert "(4.1 arcmin)" in answer.words(show_in="ft")
    assert "′" not in answer.words(show_in="ft")
