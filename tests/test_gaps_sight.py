"""What a Python user is told when a question cannot be answered as it was asked."""

from pathlib import Path

import numpy as np
import pytest
from shapely import MultiPolygon, Polygon
from shapely import Point as Dot

from profiler.earth.geodesic import geodesic_path
from profiler.earth.projection import crs_from_user
from profiler.errors import InputError, OutsideDemError
from profiler.model import Point, SightLine
from profiler.radio.answer import rule_for
from profiler.radio.criteria import Criterion, RuleSet
from profiler.radio.rule_sets import named_rule_set
from profiler.shapes.outline import outline_of
from profiler.sight.outside import check_inside, fits_exchanged, has_ground
from profiler.sight.own_hill import own_hill_radius
from profiler.terrain import Terrain, open_terrain
from tests import terrain
from tests.looking import from_centre, opened, seen, station
from tests.terrain import CENTRE, place

Pair = tuple[float, float]
DEGREES = crs_from_user("EPSG:4326")
FREQUENCY_HZ = 6e9


@pytest.fixture
def box(tmp_path: Path) -> Terrain:
    """Level ground from 10 to 11 N and 20 to 21 E."""
    transform = (0.01, 0.0, 20.0, 0.0, -0.01, 11.0)
    posts = np.full((100, 100), 100.0)
    file = terrain.write_geotiff(
        tmp_path / "box.tif", posts, transform, "EPSG:4326", unit="m"
    )
    return open_terrain(file)


@pytest.fixture
def line(tmp_path: Path) -> SightLine:
    return from_centre(opened(tmp_path, terrain.plane()), 90.0, 3000.0, eye=30, top=30)


def refusal(ground: Terrain, at: Pair, role: str = "to", name: str = "") -> str:
    where = station(at, agl_m=2.0, name=name or None)
    with pytest.raises(OutsideDemError) as refused:
        check_inside(ground, where, role=role)
    return str(refused.value)


def test_a_point_inside_passes(box: Terrain) -> None:
    inside = station((10.5, 20.5), agl_m=2.0)
    assert has_ground(box, inside)
    check_inside(box, inside, role="from")


def test_a_point_outside_is_told_what_the_model_covers(box: Terrain) -> None:
    # the outermost posts are half a cell, 0.005 degrees, inside the edges
    assert refusal(box, (12.5, 20.5)) == (
        "--to: 12.50000, 20.50000 lies outside the DEM, which covers 10.005 N to "
        "10.995 N, 20.005 E to 20.995 E. Check sign and order, or add files."
    )


def test_a_named_point_outside_is_told_by_its_name(box: Terrain) -> None:
    said = refusal(box, (12.5, 20.5), "from", "Harrow Stone")
    assert said.startswith("--from: Harrow Stone (12.50000, 20.50000) lies outside")


def test_exchanged_numbers_are_given_the_right_way_round(box: Terrain) -> None:
    assert refusal(box, (20.25, 10.75), "from") == (
        "--from: 20.25, 10.75 lies outside the DEM. With latitude and longitude "
        'exchanged the point fits: --from "10.75,20.25".'
    )


def test_a_longitude_that_is_no_latitude_cannot_be_exchanged(box: Terrain) -> None:
    far = Point(lat_deg=20.5, lon_deg=120.5)
    assert not fits_exchanged(box, far)
    assert "Check sign and order" in refusal(box, (20.5, 120.5))


@pytest.mark.parametrize(
    "heights", [{"amsl_m": 300.0}, {"agl_m": 2.0, "surveyed_ground_m": 90.0}], ids=str
)
def test_a_point_outside_whose_height_is_stated_passes(
    box: Terrain, heights: dict[str, float]
) -> None:
    outside = station((12.5, 20.5), **heights)
    assert has_ground(box, outside)
    check_inside(box, outside, role="to")


def test_judging_refuses_the_end_that_lies_outside(box: Terrain) -> None:
    with pytest.raises(OutsideDemError, match=r"^--from: 9\.90000, 20\.50000 lies"):
        seen(box, (9.9, 20.5), (10.5, 20.5))
    with pytest.raises(OutsideDemError, match=r"^--to: 9\.90000, 20\.50000 lies"):
        seen(box, (10.5, 20.5), (9.9, 20.5))


def test_judging_takes_an_end_outside_whose_height_above_the_sea_is_given(
    box: Terrain,
) -> None:
    out = seen(box, (9.99, 20.5), (10.1, 20.5), eye={"amsl_m": 300.0}, top=30.0)
    assert out.needed.from_agl_m is None


def test_a_path_without_known_ground_names_no_change_that_clears(
    box: Terrain,
) -> None:
    ends = {"agl_m": 2.0, "surveyed_ground_m": 90.0}
    out = seen(box, (12.0, 20.5), (12.02, 20.5), eye=ends, top=ends)
    need = out.needed
    assert out.verdict == "undetermined"
    assert (need.from_agl_m, need.to_agl_m, need.both_extra_m) == (None, None, None)
    assert (need.ke, need.kr, need.dem_bias_m) == (None, None, None)


def test_a_void_in_the_finest_grid_makes_the_hill_as_wide_as_the_coarser_needs(
    tmp_path: Path,
) -> None:
    steps = np.arange(-40, 41)
    east, north = np.meshgrid(steps, steps[::-1])
    away = np.hypot(east, north)

    def ground(name: str, cell_m: float, void_cells: float) -> Path:
        corner = 40.5 * cell_m
        transform = (cell_m, 0.0, -corner, 0.0, -cell_m, corner)
        posts = np.where(away <= void_cells, np.nan, 500.0 - away * cell_m / 10.0)
        file = tmp_path / f"{name}.tif"
        return terrain.write_geotiff(
            file, posts, transform, terrain.CENTRED_CRS, unit="m"
        )

    both = open_terrain(ground("fine", 10.0, 5.0), ground("coarse", 60.0, -1.0))
    lat, lon = place(90.0, 2000.0)
    path = geodesic_path(
        Point(lat_deg=lat, lon_deg=lon), Point(lat_deg=CENTRE[0], lon_deg=CENTRE[1])
    )
    # three cells of 60 m are wider than the 100 m that fine ground takes
    assert own_hill_radius(both, path, None) == pytest.approx(180.0, rel=1e-3)
    assert own_hill_radius(both, path, 150.0) == 150.0


def test_an_outline_without_a_number_is_refused() -> None:
    torn = Polygon([(0.0, 0.0), (1.0, np.inf), (1.0, 1.0), (0.0, 0.0)])
    with pytest.raises(InputError, match=r"^wood 3: its outline has coordinates that"):
        outline_of(torn, DEGREES, where="wood 3")


def test_an_outline_around_a_pole_is_refused() -> None:
    ring = [(x, 80.0) for x in (-180.0, -90.0, 0.0, 90.0, 180.0)]
    shape = Polygon([*ring[:-1], (179.0, 80.0), (-180.0, 80.0)])
    whole = Polygon(ring)
    with pytest.raises(InputError, match="runs around a pole"):
        outline_of(whole, DEGREES, where="wood 3")
    with pytest.raises(InputError, match="runs around a pole"):
        outline_of(shape, DEGREES, where="wood 3")


def test_a_hole_follows_its_outline_over_the_date_line() -> None:
    shell = [(179.0, 0.0), (-179.0, 0.0), (-179.0, 2.0), (179.0, 2.0)]
    hole = [(-179.8, 0.5), (-179.2, 0.5), (-179.2, 1.5), (-179.8, 1.5)]
    area = outline_of(Polygon(shell, [hole]), DEGREES, where="wood 3")
    assert area.is_valid
    assert area.area == pytest.approx(2.0 * 2.0 - 0.6 * 1.0)
    turned = area.bounds[0] > 0.0
    assert area.contains(Dot(179.5 if turned else -180.5, 1.0))
    assert not area.contains(Dot(180.5 if turned else -179.5, 1.0))


def test_a_ring_that_crosses_itself_becomes_its_areas() -> None:
    bow = Polygon([(0.0, 0.0), (2.0, 2.0), (2.0, 0.0), (0.0, 2.0)])
    area = outline_of(bow, DEGREES, where="wood 3")
    # two triangles of base 2 and height 1
    assert area.area == pytest.approx(2.0)
    apart = Polygon([(5.0, 0.0), (6.0, 0.0), (6.0, 1.0), (5.0, 1.0)])
    both = outline_of(MultiPolygon([bow, apart]), DEGREES, where="wood 3")
    assert both.area == pytest.approx(3.0)


def test_a_rule_set_is_taken_as_it_is(line: SightLine) -> None:
    made = RuleSet(
        name="own", source="ours", criteria=(Criterion(ke=1, f1_fraction=1),)
    )
    assert rule_for(made, line, FREQUENCY_HZ) is made


def test_criteria_become_a_rule_set_as_given(line: SightLine) -> None:
    only = Criterion(ke=4 / 3, f1_fraction=0.6)
    made = rule_for([only], line, FREQUENCY_HZ)
    assert (made.name, made.source, made.criteria) == ("given", "as given", (only,))


@pytest.mark.parametrize("wrong", [[0.6], ["plain-0.6"], [None], {"ke": 1.3}], ids=str)
def test_a_list_of_anything_but_criteria_is_refused(
    line: SightLine, wrong: object
) -> None:
    with pytest.raises(InputError, match=r"^A rule is a name, a file ending in \.toml"):
        rule_for(wrong, line, FREQUENCY_HZ)  # type: ignore[arg-type]


def test_an_empty_list_of_criteria_is_refused(line: SightLine) -> None:
    with pytest.raises(InputError):
        rule_for([], line, FREQUENCY_HZ)


def test_a_name_ending_in_toml_is_read_as_a_file(
    line: SightLine, tmp_path: Path
) -> None:
    file = tmp_path / "Own.TOML"
    file.write_text("[[criterion]]\nke = 1.0\nf1 = 0.3\n", encoding="utf-8")
    for named in (file, str(file)):
        made = rule_for(named, line, FREQUENCY_HZ)
        assert made.criteria == (Criterion(ke=1.0, f1_fraction=0.3),)


@pytest.mark.parametrize("name", ["p530-temperate", "p530-tropical"])
def test_a_path_shorter_than_the_drawn_curve_is_told_to_take_care(name: str) -> None:
    short = named_rule_set(name, length_m=10e3, isolated=False)
    # 157/(144 + 2670/10): ITU-R P.530-19 (09/2025) section 2.2.2.1, equation (4)
    (care,) = (n for n in short.notes if n.code == "short-path-ke")
    assert "from 20 km on" in care.text
    assert f"gives {157 / (144 + 267):.3f} for" in care.text
    drawn = named_rule_set(name, length_m=20e3, isolated=False)
    assert [n.code for n in drawn.notes] == ["obstruction"]


def test_a_long_tropical_path_asks_0_6_whatever_the_obstruction() -> None:
    # ITU-R P.530-19 (09/2025) section 2.2.2.1: 0.6 F1 for paths above about 30 km
    for isolated in (True, False):
        long = named_rule_set("p530-tropical", length_m=31e3, isolated=isolated)
        assert long.criteria[1].f1_fraction == 0.6
        assert long.notes == ()


def test_a_model_in_the_south_west_is_told_with_letters(tmp_path: Path) -> None:
    transform = (0.01, 0.0, -72.0, 0.0, -0.01, -10.0)
    file = terrain.write_geotiff(
        tmp_path / "south.tif", np.full((100, 100), 5.0), transform, "EPSG:4326"
    )
    with pytest.raises(OutsideDemError, match=r"10\.995 S to 10\.005 S, 71\.995 W to"):
        check_inside(open_terrain(file), station((0.0, 0.0), agl_m=2.0), role="from")
