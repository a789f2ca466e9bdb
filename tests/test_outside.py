"""A point beyond the elevation model is told with what would mend it."""

from pathlib import Path

import numpy as np
import pytest

from profiler import OutsideDemError, Point, Station, Terrain, open_terrain
from profiler.cli.outside import check_ends
from tests import terrain

Pair = tuple[float, float]


def station(at: Pair, amsl_m: float | None = None) -> Station:
    point = Point(lat_deg=at[0], lon_deg=at[1])
    return Station(point=point, amsl_m=amsl_m, agl_m=2.0 if amsl_m is None else None)


def flat(
    folder: Path, name: str, south: float, west: float, size: Pair = (1.0, 1.0)
) -> Path:
    """Flat ground over a box of degrees."""
    cell = 0.002
    rows, cols = (round(side / cell) for side in size)
    transform = (cell, 0.0, west, 0.0, -cell, south + size[0])
    posts = np.full((rows, cols), 100.0)
    return terrain.write_geotiff(
        folder / f"{name}.tif", posts, transform, "EPSG:4326", unit="m"
    )


def refusal(ground: Terrain, start: Station, end: Station) -> str:
    with pytest.raises(OutsideDemError) as refused:
        check_ends(ground, start, end)
    return str(refused.value)


def test_points_inside_are_not_refused(tmp_path: Path) -> None:
    ground = open_terrain(flat(tmp_path, "a", 10.0, 20.0))
    check_ends(ground, station((10.2, 20.2)), station((10.8, 20.8)))


@pytest.mark.parametrize(
    ("south", "west", "size", "typed", "said"),
    [
        (10.0, 20.0, (1.0, 1.0), (20.5, 10.5), "Longitude 10.5"),
        (10.0, 8.0, (1.0, 5.0), (12.5, 10.5), "Latitude 12.5"),
    ],
)
def test_the_number_that_misses_is_named_when_the_exchanged_pair_fits(
    tmp_path: Path, south: float, west: float, size: Pair, typed: Pair, said: str
) -> None:
    ground = open_terrain(flat(tmp_path, "a", south, west, size))
    inside = station((south + 0.5, west + 0.5))
    assert refusal(ground, inside, station(typed)) == (
        f"{said} lies outside the DEM. With latitude and longitude exchanged the point "
        f'fits: --to "{typed[1]},{typed[0]}".'
    )


def test_both_numbers_are_named_when_the_point_is_between_grids(
    tmp_path: Path,
) -> None:
    files = (
        flat(tmp_path, "a", 10.0, 20.0),
        flat(tmp_path, "b", 20.0007, 10.0007, (1.0, 0.2)),
    )
    said = refusal(open_terrain(*files), station((20.5, 10.5)), station((10.5, 20.5)))
    assert said.startswith("20.5, 10.5 lies outside the DEM. With latitude and")


@pytest.mark.parametrize(
    ("start", "end", "ends_at"),
    [
        ((10.5, 20.5), (10.5, 21.5), "21.00 E"),
        ((10.5, 20.5), (10.5, 19.5), "20.00 E"),
        ((10.5, 20.5), (11.5, 20.5), "11.00 N"),
        ((10.5, 20.5), (9.5, 20.5), "10.00 N"),
        ((9.5, 20.5), (10.5, 20.5), "10.00 N"),
    ],
)
def test_the_side_that_the_path_leaves_by_is_named(
    tmp_path: Path, start: Pair, end: Pair, ends_at: str
) -> None:
    ground = open_terrain(flat(tmp_path, "a", 10.0, 20.0))
    said = refusal(ground, station(start), station(end))
    assert f"; this DEM ends at {ends_at}. " in said
    assert said.startswith("No ground from ")


def test_a_side_beyond_the_180th_meridian_has_its_own_letter(tmp_path: Path) -> None:
    ground = open_terrain(flat(tmp_path, "a", 10.0, 179.5))
    said = refusal(ground, station((10.5, 179.8)), station((10.5, -179.0)))
    assert "; this DEM ends at 179.50 W. " in said


def test_an_end_whose_height_is_stated_may_lie_outside(tmp_path: Path) -> None:
    ground = open_terrain(flat(tmp_path, "a", 10.0, 20.0))
    check_ends(ground, station((9.9, 20.5), amsl_m=300.0), station((10.5, 20.5)))


def test_the_end_that_lacks_ground_is_named_beside_one_that_needs_none(
    tmp_path: Path,
) -> None:
    ground = open_terrain(flat(tmp_path, "a", 10.0, 20.0))
    said = refusal(ground, station((9.9, 20.5), amsl_m=300.0), station((11.5, 20.5)))
    first, last = (float(word) for word in said.split()[3:6:2])
    assert first == pytest.approx(121.7, abs=0.11)
    assert last == pytest.approx(177.0, abs=0.11)


def test_ends_too_far_apart_for_a_path_are_told_by_the_box(tmp_path: Path) -> None:
    ground = open_terrain(flat(tmp_path, "a", 10.0, 20.0))
    assert refusal(ground, station((10.5, 20.5)), station((60.0, 20.5))) == (
        "--to: 60.00000 N 20.50000 E lies outside the DEM, which covers 10.00 to 11.00 "
        "N, 20.00 to 21.00 E. Check sign and order, or add files."
    )


def test_a_path_that_meets_no_file_is_told_by_the_box(tmp_path: Path) -> None:
    ground = open_terrain(flat(tmp_path, "a", 10.0, 20.0))
    said = refusal(ground, station((9.9, 20.5), amsl_m=300.0), station((9.8, 20.5)))
    assert said.startswith("--to: 9.80000 N 20.50000 E lies outside the DEM, which")
