"""Ground along a path is the surface between the posts, and nothing else."""

from pathlib import Path

import numpy as np
import pytest
import rasterio
from pyproj import CRS, Transformer
from rasterio.transform import rowcol

from profiler.errors import InputError
from tests import terrain
from tests.reading import (
    Floats,
    Pair,
    exact,
    geodesic_points,
    ground_at,
    pixels,
    profile,
    step_in,
)
from tests.terrain import CENTRE, CENTRED_CRS, place

#: Bundled ground lies within these latitudes and longitudes, one cell in.
SOUTH, NORTH, WEST, EAST = 36.4472, 36.7321, -84.4129, -84.0787
#: Ground may differ from an independent bilinear reading by this [m].
CLOSE_M = 1e-4


def anywhere(random: np.random.Generator) -> Pair:
    return float(random.uniform(SOUTH, NORTH)), float(random.uniform(WEST, EAST))


def test_real_ground_is_bilinear_between_its_posts(tmp_path: Path) -> None:
    file = terrain.jacksboro(tmp_path)
    random = np.random.default_rng(20)
    for _ in range(25):
        start, end = anywhere(random), anywhere(random)
        found = profile(file, start, end)
        dist = random.uniform(0.0, found.length_m, 2000)
        gap = ground_at(found, dist) - exact(file, start, end, dist)
        assert np.abs(gap).max() < CLOSE_M


@pytest.mark.parametrize(
    ("crs", "middle", "cell"),
    [
        ("EPSG:32633", (47.3, 11.4), 25.0),
        ("EPSG:32661", (82.0, 30.0), 40.0),
        ("EPSG:3035", (60.0, 24.0), 25.0),
        ("EPSG:2264", (35.6, -80.0), 60.0),
        ("EPSG:4258", (47.3, 11.4), 1.0 / 3600.0),
        ("EPSG:4326", (80.2, 20.1), 1.0 / 1800.0),
        ("EPSG:4326", (-54.2, -67.9), 1.0 / 1200.0),
    ],
    ids=lambda v: str(v),
)
@pytest.mark.parametrize("turned_deg", [0.0, 31.0])
def test_every_map_gives_the_ground_of_its_own_posts(
    tmp_path: Path, crs: str, middle: Pair, cell: float, turned_deg: float
) -> None:
    posts = terrain.fractal(7, shape=(160, 200), relief_m=300.0).posts
    to_crs = Transformer.from_crs(4326, crs, always_xy=True)
    x, y = to_crs.transform(middle[1], middle[0])
    cos, sin = (
        cell * np.cos(np.radians(turned_deg)),
        cell * np.sin(np.radians(turned_deg)),
    )
    a, b, d, e = cos, sin, sin, -cos
    box = (a, b, x - 100 * a - 80 * b, d, e, y - 100 * d - 80 * e)
    file = terrain.write_geotiff(tmp_path / "a.tif", posts, box, crs)
    random = np.random.default_rng(3)
    for _ in range(4):
        ends = []
        for row, col in random.uniform(2.0, [157.0, 197.0], (2, 2)):
            at = (a * col + b * row + box[2], d * col + e * row + box[5])
            lon, lat = to_crs.transform(*at, direction="INVERSE")
            ends.append((float(lat), float(lon)))
        found = profile(file, ends[0], ends[1], dem_unit="m")
        dist = random.uniform(0.0, found.length_m, 500)
        gap = ground_at(found, dist) - exact(file, ends[0], ends[1], dist)
        # the datum shift of EPSG:4258 and the polynomial leave under 1e-4 cell
        steepest = np.abs(np.diff(posts)).max()
        assert np.abs(gap).max() < steepest * 1e-4


@pytest.mark.parametrize("cell", [1.0 / 1200.0, 0.0007])
def test_longitudes_of_0_to_360_are_the_same_ground(
    tmp_path: Path, cell: float
) -> None:
    posts = terrain.fractal(8, shape=(100, 120)).posts
    files = [
        terrain.write_geotiff(
            tmp_path / f"{west}.tif",
            posts,
            (cell, 0.0, west, 0.0, -cell, 10.0),
            "EPSG:4326",
        )
        for west in (-84.4, 275.6)
    ]
    ends = ((9.94, -84.39), (9.99, -84.325))
    one, other = (profile(f, *ends) for f in files)
    dist = np.linspace(0.0, one.length_m, 3000)
    assert np.abs(ground_at(one, dist) - ground_at(other, dist)).max() < 1e-6
    assert np.isfinite(one.ground_m).all()


def global_file(folder: Path, west: float) -> Path:
    """Whole turn of one degree posts, ground a function of the longitude alone."""
    lon = west + 0.5 + np.arange(360.0)
    posts = np.tile(500.0 + 400.0 * np.sin(np.radians(lon)), (20, 1))
    box = (1.0, 0.0, west, 0.0, -1.0, 10.0)
    return terrain.write_geotiff(folder / f"{west}.tif", posts, box, "EPSG:4326")


@pytest.mark.parametrize(
    ("start", "end"),
    [((1.2, -3.1), (2.3, 4.2)), ((1.2, 176.1), (2.3, -177.2)), ((0.3, 80), (1, 86))],
)
def test_a_grid_right_round_the_world_has_no_edge(
    tmp_path: Path, start: Pair, end: Pair
) -> None:
    files = [global_file(tmp_path, west) for west in (-180.0, 0.0)]
    found = [profile(f, start, end) for f in files]
    dist = np.linspace(0.0, found[0].length_m, 500)
    lat, lon = geodesic_points(start, end, dist)
    assert lat.max() < 10.0
    # chord against sine over one degree: 400·(1°)²/8 = 0.015 m
    sine = 500.0 + 400.0 * np.sin(np.radians(lon))
    for each in found:
        assert np.isfinite(each.ground_m).all()
        assert np.abs(ground_at(each, dist) - sine).max() < 0.016


def test_every_sample_knows_its_distance_and_lies_in_order(tmp_path: Path) -> None:
    file = terrain.jacksboro(tmp_path)
    found = profile(file, (36.5, -84.3), (36.6, -84.2))
    assert found.dist_m[0] == 0.0
    assert found.dist_m[-1] == found.length_m
    assert np.all(np.diff(found.dist_m) >= 0.0)
    assert set(found.source.tolist()) == {0}
    assert (found.files[0].name, len(found.files)) == ("jacksboro.tif", 1)


def test_highest_is_the_highest_of_the_four_posts_of_each_cell(tmp_path: Path) -> None:
    file = terrain.jacksboro(tmp_path)
    start, end = (36.5, -84.3), (36.61, -84.19)
    found = profile(file, start, end, interpolation="highest")
    middle = found.dist_m[found.piece_start + 1]
    lat, lon = geodesic_points(start, end, middle)
    with rasterio.open(file) as data:
        posts = data.read(1).astype(float)
        col, row = pixels(data.transform, lon, lat)
    r, c = np.floor(row - 0.5).astype(int), np.floor(col - 0.5).astype(int)
    four = [posts[r, c], posts[r, c + 1], posts[r + 1, c], posts[r + 1, c + 1]]
    for k in range(3):
        read = found.ground_m[found.piece_start + k]
        assert np.array_equal(read[1:-1], np.max(four, axis=0)[1:-1])
    plain = profile(file, start, end)
    dist = np.linspace(0.0, found.length_m, 5001)
    assert np.all(ground_at(found, dist) >= ground_at(plain, dist) - 1e-9)


def test_nearest_is_the_post_of_the_pixel_that_the_path_is_in(tmp_path: Path) -> None:
    file = terrain.jacksboro(tmp_path)
    start, end = (36.5, -84.3), (36.61, -84.19)
    found = profile(file, start, end, interpolation="nearest")
    middle = found.dist_m[found.piece_start + 1]
    lat, lon = geodesic_points(start, end, middle)
    with rasterio.open(file) as data:
        rows, cols = rowcol(data.transform, lon.tolist(), lat.tolist())
        posts = data.read(1).astype(float)
    at_path = posts[np.asarray(rows), np.asarray(cols)]
    for k in range(3):
        assert np.array_equal(found.ground_m[found.piece_start + k], at_path)


def test_a_void_beside_the_path_changes_nothing(tmp_path: Path) -> None:
    made = terrain.one_void()
    file = terrain.write_geotiff(tmp_path / "a.tif", *made[:3])
    beside = profile(file, place(0.0, 30.0), place(89.5, 2300.0))
    lat, lon = place(0.0, 31.0)
    off = profile(file, (lat, lon), (lat, lon + 0.03))
    assert np.isnan(beside.ground_m).any()
    assert np.isfinite(off.ground_m).all()


def test_voids_become_sea_only_on_request_and_outside_the_file_too(
    tmp_path: Path,
) -> None:
    made = terrain.sea()
    file = terrain.write_geotiff(tmp_path / "a.tif", *made[:3])
    away = place(90.0, made.facts["reach_m"] + 5000.0)
    dry = profile(file, CENTRE, away)
    assert np.isnan(dry.ground_m).any()
    assert dry.sea_filled_m == 0.0
    wet = profile(file, CENTRE, away, sea_level_m=2.0)
    shore = made.facts["void_from_m"]
    assert np.isfinite(wet.ground_m).all()
    assert wet.sea_filled_m == pytest.approx(wet.length_m - shore, abs=1e-3)
    past = wet.dist_m >= shore + 30.01
    assert np.array_equal(wet.ground_m[past], np.full(past.sum(), 2.0))
    assert ground_at(wet, np.array([shore, shore + 15.0])) == pytest.approx(
        [40.0, 21.0], abs=1e-3
    )
    assert wet.source[-1] == -1


def test_a_path_wholly_outside_has_no_ground(tmp_path: Path) -> None:
    file = terrain.jacksboro(tmp_path)
    found = profile(file, (40.0, 10.0), (40.1, 10.1))
    assert np.isnan(found.ground_m).all()
    assert (found.files, found.length_m) == ((), found.dist_m[-1])


def wall_file(folder: Path, kind: str) -> tuple[Path, Floats]:
    """A 200 x 200 grid of 30 m cells, flat but for a wall one post wide."""
    posts = np.zeros((200, 200))
    k = np.arange(200)
    if kind == "row":
        posts[117, :] = 100.0
    elif kind == "column":
        posts[:, 93] = 100.0
    elif kind == "diagonal":
        posts[k, 199 - k] = 100.0
    else:
        posts[104, 88] = 100.0
    box = (30.0, 0.0, -3000.0, 0.0, -30.0, 3000.0)
    return terrain.write_geotiff(folder / f"{kind}.tif", posts, box, CENTRED_CRS), posts


def across(kind: str, random: np.random.Generator) -> tuple[Pair, Pair]:
    """Ends (row, col) of a random path that meets the wall."""
    u = random.uniform(2.0, 197.0, 4)
    if kind == "row":
        return (random.uniform(2.0, 115.0), u[0]), (random.uniform(119.0, 197.0), u[1])
    if kind == "column":
        return (u[0], random.uniform(2.0, 91.0)), (u[1], random.uniform(95.0, 197.0))
    if kind == "diagonal":
        a, b = random.uniform(2.0, 98.0, 2), random.uniform(102.0, 197.0, 2)
        return (float(a[0]), float(a[1])), (float(b[0]), float(b[1]))
    angle = random.uniform(0.0, 2.0 * np.pi)
    near = np.array([104.0, 88.0]) + random.uniform(-0.5, 0.5, 2)
    way = np.array([np.sin(angle), np.cos(angle)])
    a, b = near - 80.0 * way, near + 80.0 * way
    return (float(a[0]), float(a[1])), (float(b[0]), float(b[1]))


@pytest.mark.parametrize("kind", ["row", "column", "diagonal", "post"])
def test_one_cell_walls_are_found_1000_times_in_1000(tmp_path: Path, kind: str) -> None:
    file, _ = wall_file(tmp_path, kind)
    random = np.random.default_rng(11)
    to_crs = Transformer.from_crs(4326, CRS(CENTRED_CRS), always_xy=True)
    for _ in range(250):
        ends = []
        for row, col in across(kind, random):
            x, y = -3000.0 + 30.0 * (col + 0.5), 3000.0 - 30.0 * (row + 0.5)
            lon, lat = to_crs.transform(x, y, direction="INVERSE")
            ends.append((float(lat), float(lon)))
        found = profile(file, ends[0], ends[1])
        first = found.piece_start
        three = found.ground_m[first[:, None] + np.arange(3)]
        scanned = scanned_top(file, ends[0], ends[1], found.length_m)
        assert scanned > 20.0
        assert top_of(three) == pytest.approx(scanned, abs=0.01)


def scanned_top(file: Path, start: Pair, end: Pair, length_m: float) -> float:
    """Highest ground by brute force: every 3 m, then closer about the best place."""
    dist = np.linspace(0.0, length_m, int(length_m / 3.0))
    for reach, steps in ((30.0, 401), (0.3, 601)):
        best = dist[np.argmax(exact(file, start, end, dist))]
        dist = np.clip(best + np.linspace(-reach, reach, steps), 0.0, length_m)
    return float(exact(file, start, end, dist).max())


def top_of(three: Floats) -> float:
    """Highest ground of pieces, their vertices included."""
    z0, z1, z2 = three.T
    bend, tilt = (z0 + z2) / 2.0 - z1, (z2 - z0) / 2.0
    with np.errstate(divide="ignore", invalid="ignore"):
        t = np.clip(np.where(bend < 0.0, -tilt / (2.0 * bend), 0.0), -1.0, 1.0)
    return float(max(three.max(), (z1 + t * tilt + t * t * bend).max()))


@pytest.mark.parametrize("lies", ["row", "column", "diagonal"])
def test_a_path_along_the_posts_of_a_crest_reads_all_of_it(
    tmp_path: Path, lies: str
) -> None:
    posts = np.zeros((81, 81))
    k = np.arange(81)
    full = np.full(81, 40)
    wall = {"row": (full, k), "column": (k, full), "diagonal": (k, 80 - k)}[lies]
    posts[wall] = 100.0
    box = (30.0, 0.0, -1215.0, 0.0, -30.0, 1215.0)
    file = terrain.write_geotiff(tmp_path / "a.tif", posts, box, CENTRED_CRS)
    azimuth = {"row": 90.0, "column": 0.0, "diagonal": 45.0}[lies]
    found = profile(file, place(azimuth + 180.0, 1100.0), place(azimuth, 1100.0))
    if lies == "diagonal":
        # between two posts of the diagonal the bilinear surface sags to the half
        assert found.ground_m.max() == pytest.approx(100.0, abs=1e-3)
        assert found.ground_m.min() == pytest.approx(50.0, abs=1e-3)
    else:
        assert found.ground_m == pytest.approx(np.full(found.dist_m.size, 100.0))


@pytest.mark.parametrize("decimals", [15, 9])
@pytest.mark.parametrize("side", ["first row", "last row", "first column", "last col"])
def test_a_path_along_the_outermost_posts_has_ground(
    tmp_path: Path, side: str, decimals: int
) -> None:
    # with 9 decimals of a degree, as records print them, ends miss by 0.1 mm
    box = {
        "first row": (30.0, 0.0, -15.0, 0.0, -30.0, 15.0),
        "last row": (30.0, 0.0, -15.0, 0.0, -30.0, 1500.0 + 15.0),
        "first column": (30.0, 0.0, -15.0, 0.0, -30.0, 1500.0 + 15.0),
        "last col": (30.0, 0.0, -1515.0, 0.0, -30.0, 1500.0 + 15.0),
    }[side]
    file = terrain.write_geotiff(
        tmp_path / "a.tif", np.full((51, 51), 7.0), box, CENTRED_CRS
    )
    far = place(90.0 if side.endswith("row") else 0.0, 1500.0)
    ends = [(round(a, decimals), round(b, decimals)) for a, b in (CENTRE, far)]
    found = profile(file, ends[0], ends[1])
    assert found.ground_m == pytest.approx(np.full(found.dist_m.size, 7.0))


def test_a_path_off_the_edge_by_a_hundredth_of_a_cell_has_no_ground(
    tmp_path: Path,
) -> None:
    box = (30.0, 0.0, -15.0, 0.0, -30.0, 15.0 - 0.3)
    file = terrain.write_geotiff(
        tmp_path / "a.tif", np.full((51, 51), 7.0), box, CENTRED_CRS
    )
    found = profile(file, CENTRE, place(90.0, 1000.0))
    assert np.isnan(found.ground_m).all()


def test_a_step_is_never_made_of_continuous_ground(tmp_path: Path) -> None:
    file = terrain.jacksboro(tmp_path)
    random = np.random.default_rng(4)
    for _ in range(30):
        assert step_in(profile(file, anywhere(random), anywhere(random))) == 0.0


def test_the_same_question_gives_the_same_bytes(tmp_path: Path) -> None:
    file = terrain.jacksboro(tmp_path)
    one, other = (profile(file, (36.5, -84.3), (36.6, -84.2)) for _ in range(2))
    assert one.ground_m.tobytes() == other.ground_m.tobytes()
    assert one.dist_m.tobytes() == other.dist_m.tobytes()


def test_the_same_place_twice_is_no_path(tmp_path: Path) -> None:
    file = terrain.jacksboro(tmp_path)
    with pytest.raises(InputError, match="same place"):
        profile(file, (36.5, -84.3), (36.5, -84.3))
