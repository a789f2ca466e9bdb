"""Trees and buildings in the answer: what they take from the margin and are called."""

from pathlib import Path
from typing import Any

import numpy as np
import pytest
import shapely

from profiler.model import (
    CoverKind,
    CoverSpan,
    FloatArray,
    GeodesicPath,
    PathCover,
    Point,
    SightLine,
    Station,
)
from profiler.output.answer import look
from profiler.output.standing import standing
from profiler.radio.growth import first_failing_year
from profiler.shapes import read_cover
from profiler.sight import judge
from profiler.sight.cover_sources import CoverAlong, aged, cover_along
from profiler.terrain import Terrain, open_terrain
from tests import terrain
from tests.looking import from_centre, opened, seen
from tests.terrain import CENTRE, CENTRED_CRS, place
from tests.test_cover_shapes import on_map

#: Rounding of heights below 1000 m [m].
ROUNDING_M = 1e-9
#: Length of the paths here [m].
LENGTH_M = 3000.0
HIGH = {"eye": 200.0, "top": 200.0}


def along(*spans: CoverSpan) -> CoverAlong:
    return lambda _: PathCover(spans=spans)


def trees(
    start_m: float,
    end_m: float,
    height_m: float = 15.0,
    *,
    name: str = "polygon 12",
    kind: CoverKind = CoverKind.TREES,
) -> CoverSpan:
    return CoverSpan(
        start_m=start_m, end_m=end_m, height_m=height_m, kind=kind, name=name
    )


def shared(bare: SightLine, wood: SightLine) -> tuple[FloatArray, FloatArray]:
    """Distances that both lines sample, with the margins over bare ground."""
    both = np.isin(bare.profile.dist_m, wood.profile.dist_m)
    # the middle of a piece moves when the piece is cut
    assert both.sum() >= both.size - 10
    return bare.profile.dist_m[both], bare.margin_along_m[both]


@pytest.fixture(scope="module")
def rough(tmp_path_factory: pytest.TempPathFactory) -> Terrain:
    made = terrain.fractal(7, shape=(240, 240), relief_m=300.0)
    return opened(tmp_path_factory.mktemp("rough"), made)


@pytest.fixture(scope="module")
def flat(tmp_path_factory: pytest.TempPathFactory) -> Terrain:
    return opened(tmp_path_factory.mktemp("flat"), terrain.plane(base_m=100.0))


def ask(ground: Terrain, **asked: Any) -> SightLine:
    return from_centre(ground, 90.0, LENGTH_M, **{**HIGH, **asked})


def margins_at(line: SightLine, dist_m: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Margins just before and just after places that are samples of a line."""
    low = np.searchsorted(line.profile.dist_m, dist_m)
    high = np.searchsorted(line.profile.dist_m, dist_m, side="right") - 1
    return line.margin_along_m[low], line.margin_along_m[high]


def test_trees_take_their_grown_height_inside_their_outline_and_nothing_elsewhere(
    rough: Terrain, tmp_path: Path
) -> None:
    ring = shapely.Polygon([(700.0, -80.0), (1504.2, -40.0), (1300.0, 60.0), (802, 9)])
    file = on_map(tmp_path / "wood.gpkg", [ring], height_m=[15.0])
    bare = ask(rough)
    wood = ask(
        rough,
        cover=cover_along(shapes=read_cover(file), metres_per_year=0.4, years=10),
    )
    (span,) = wood.profile.cover_spans
    dist, was = shared(bare, wood)
    before, after = margins_at(wood, dist)
    lost = was - np.minimum(before, after)
    inside = (dist >= span.start_m) & (dist <= span.end_m)
    assert inside.sum() > 20
    assert lost[inside] == pytest.approx(np.full(inside.sum(), 19.0), abs=ROUNDING_M)
    assert lost[~inside] == pytest.approx(np.zeros((~inside).sum()), abs=ROUNDING_M)


def test_the_edge_of_a_wood_has_both_margins(flat: Terrain) -> None:
    line = ask(flat, cover=along(trees(1000.3, 1200.7, 19.0)))
    before, after = margins_at(line, np.array([1000.3, 1200.7]))
    assert (before - after).tolist() == pytest.approx([19.0, -19.0], abs=ROUNDING_M)


def test_canopy_everywhere_lowers_the_margin_everywhere_by_its_height(
    rough: Terrain,
) -> None:
    bare, wood = ask(rough), ask(rough, cover=cover_along(canopy_m=15.0))
    lost = bare.margin_along_m - wood.margin_along_m
    assert lost == pytest.approx(np.full(lost.size, 15.0), abs=ROUNDING_M)
    assert wood.decisive is not None
    assert wood.decisive.cover_name == "canopy"


def test_a_wood_that_blocks_is_named_in_every_place(flat: Terrain) -> None:
    line = ask(flat, eye=10.0, top=10.0, cover=along(trees(1000.0, 1400.0)))
    assert line.verdict == "blocked"
    for at in (line.decisive, line.first_block, line.horizon, line.front_crest):
        assert at is not None
        assert (at.cover_name, at.cover_kind) == ("polygon 12", "trees")
        assert at.cover_m == 15.0
        assert at.ground_m == pytest.approx(100.0, abs=ROUNDING_M)
        assert at.sight_m - at.ground_m - at.cover_m == pytest.approx(
            at.margin_m, abs=ROUNDING_M
        )
    (stretch,) = line.blocked_stretches
    assert (stretch.start_m, stretch.end_m) == pytest.approx((1000.0, 1400.0))
    assert (stretch.cover_name, stretch.cover_kind) == ("polygon 12", "trees")
    assert line.first_block is not None
    assert line.first_block.distance_m == pytest.approx(1000.0)


def test_bare_ground_beside_a_wood_is_called_nothing(flat: Terrain) -> None:
    line = ask(flat, eye=200.0, top=20.0, cover=along(trees(100.0, 200.0)))
    assert line.decisive is not None
    assert (line.decisive.cover_m, line.decisive.cover_name) == (0.0, "")
    assert line.decisive.cover_kind is None


def test_the_record_and_the_first_line_name_what_blocks(flat: Terrain) -> None:
    end = place(90.0, LENGTH_M)
    eye = Station(
        point=Point(lat_deg=CENTRE[0], lon_deg=CENTRE[1]), name="Skarvel", agl_m=10.0
    )
    top = Station(
        point=Point(lat_deg=end[0], lon_deg=end[1]), name="Quillet", agl_m=10.0
    )
    mill = trees(2000.0, 2012.5, 8.0, kind=CoverKind.BUILDING, name="Old Mill")
    answer = look(flat, eye, top, cover=along(trees(1000.0, 1400.0), mill))
    values = answer.record()
    assert values["decisive"]["cover_m"] == 15.0
    assert values["decisive"]["cover_name"] == "polygon 12"
    assert values["decisive"]["cover_kind"] == "trees"
    assert values["cover"] == [
        {
            "start_m": 1000.0,
            "end_m": 1400.0,
            "height_m": 15.0,
            "least_height_m": 15.0,
            "kind": "trees",
            "name": "polygon 12",
        },
        {
            "start_m": 2000.0,
            "end_m": 2012.5,
            "height_m": 8.0,
            "least_height_m": 8.0,
            "kind": "building",
            "name": "Old Mill",
        },
    ]
    told = answer.words()
    assert "trees of polygon 12 at 1.40 km stand 5." in told.splitlines()[0]
    assert "trees of polygon 12" in told.split("in the way")[1].splitlines()[0]
    assert standing(values["decisive"]).name == "trees of polygon 12"


def test_a_building_of_10_m_is_found_wherever_it_stands(flat: Terrain) -> None:
    rng = np.random.default_rng(20)
    found = 0
    for start in rng.uniform(30.0, LENGTH_M - 40.0, 1000):
        house = trees(float(start), float(start) + 10.0, 12.0, kind=CoverKind.BUILDING)
        line = ask(flat, eye=10.0, top=10.0, cover=along(house))
        (stretch,) = line.blocked_stretches
        found += stretch.cover_kind == "building"
        assert stretch.end_m - stretch.start_m == pytest.approx(10.0, abs=1e-6)
        assert stretch.worst_margin_m == pytest.approx(-2.0, abs=ROUNDING_M)
    assert found == 1000


def test_a_height_that_would_open_a_wood_opens_it(rough: Terrain) -> None:
    cover = along(trees(2200.0, 2600.0, 30.0))
    line = ask(rough, eye=10.0, top=10.0, cover=cover)
    assert ask(rough, eye=10.0, top=10.0).verdict == "clear"
    assert line.verdict == "blocked"
    assert line.needed.from_agl_m is not None
    assert line.needed.both_extra_m is not None
    raised = ask(rough, eye=line.needed.from_agl_m, top=10.0, cover=cover)
    assert raised.verdict == "clear"
    both = 10.0 + line.needed.both_extra_m
    assert ask(rough, eye=both, top=both, cover=cover).verdict == "clear"


def test_trees_over_a_void_lower_the_ground_that_would_block(tmp_path: Path) -> None:
    made = terrain.plane(base_m=100.0)
    made.posts[:, 60:70] = np.nan
    ground = opened(tmp_path, made)
    bare = ask(ground, eye=20.0, top=20.0)
    wood = ask(ground, eye=20.0, top=20.0, cover=cover_along(canopy_m=15.0))
    part = ask(ground, eye=20.0, top=20.0, cover=along(trees(1550.0, 1555.5, 15.0)))
    assert bare.void is not None
    assert wood.void is not None
    assert part.void is not None
    assert bare.void.blocks_above_m - wood.void.blocks_above_m == pytest.approx(15.0)
    assert bare.void.blocks_above_m - part.void.blocks_above_m == pytest.approx(15.0)
    assert (wood.verdict, part.verdict) == ("undetermined", "undetermined")


def test_swapped_ends_give_the_same_margin_at_the_same_tree(rough: Terrain) -> None:
    spans = trees(800.3, 1177.1, 25.0, name="Long Wood"), trees(1900.0, 1912.0, 25.0)

    def there(path: GeodesicPath) -> PathCover:
        if path.start.lon_deg == CENTRE[1]:
            return PathCover(spans=spans)
        turned = tuple(
            trees(
                path.length_m - s.end_m,
                path.length_m - s.start_m,
                s.height_m,
                name=s.name,
            )
            for s in spans
        )
        return PathCover(spans=turned)

    end = place(90.0, LENGTH_M)
    one = seen(rough, CENTRE, end, eye=12.0, top=30.0, kr=0.13, cover=there)
    two = seen(rough, end, CENTRE, eye=30.0, top=12.0, kr=0.13, cover=there)
    assert one.decisive is not None
    assert two.decisive is not None
    assert one.margin_m == pytest.approx(two.margin_m, abs=1e-6)
    assert one.decisive.cover_name == two.decisive.cover_name
    assert one.decisive.distance_m == pytest.approx(
        one.path.length_m - two.decisive.distance_m, abs=1e-3
    )


def test_a_station_under_trees_is_blocked_and_told_how_to_leave_them_out(
    flat: Terrain,
) -> None:
    cover = along(trees(0.0, 40.0, 15.0))
    under = ask(flat, eye=1.7, top=30.0, cover=cover)
    assert under.verdict == "blocked"
    (note,) = [n for n in under.warnings if n.code == "under-cover"]
    assert note.text.startswith("The from end, 1.7 m above")
    assert "trees of polygon 12 of 15.0 m" in note.text
    assert "--ignore-near 50m" in note.text
    outside = ask(flat, eye=1.7, top=30.0, cover=cover, ignore_near_m=50.0)
    assert outside.verdict == "clear"
    assert "under-cover" not in [n.code for n in outside.warnings]


def test_a_mast_above_the_trees_over_its_foot_is_not_warned_of(flat: Terrain) -> None:
    line = ask(flat, eye=30.0, top=30.0, cover=along(trees(0.0, 40.0, 15.0)))
    assert line.verdict == "clear"
    assert "under-cover" not in [n.code for n in line.warnings]
    assert line.from_.amsl_m == pytest.approx(130.0)


def test_a_wooded_summit_has_no_own_hill(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.cone())
    start, summit = place(90.0, 1000.0), place(90.0, 3000.0)
    asked: dict[str, Any] = {"eye": 2.0, "kr": 0.13, "own_hill_m": 100.0}
    bare = seen(ground, start, summit, **asked)
    wood = cover_along(canopy_m=5.0)
    wooded = seen(ground, start, summit, **asked, cover=wood)
    assert bare.target.own_hill_m == 100.0
    assert wooded.target.own_hill_m == 0.0
    assert wooded.margin_m is not None
    assert bare.margin_m is not None
    assert wooded.margin_m < bare.margin_m


def test_cover_on_a_surface_model_is_said_to_count_twice(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.plane(base_m=100.0), dem_kind="surface")
    codes = [n.code for n in ask(ground, cover=cover_along(canopy_m=5.0)).warnings]
    assert codes == ["cover-on-surface"]
    assert ask(ground).warnings == ()


def clump(folder: Path, kind: str, slope: float = 0.1) -> Terrain:
    """A slope with 18 m of trees on the centre's post."""
    made = terrain.plane(slope, slope / 2.0, base_m=300.0)
    middle = np.argwhere(np.isclose(made.posts, 300.0))
    for row, col in middle:
        if abs(row - 200) <= 1 and abs(col - 10) <= 1:
            made.posts[row, col] += 18.0
    return opened(folder, made, dem_kind=kind)


def test_trees_under_a_mast_on_a_surface_model_are_pointed_out(tmp_path: Path) -> None:
    line = ask(clump(tmp_path, "surface"), eye=30.0, top=30.0)
    (note,) = [n for n in line.warnings if n.code == "canopy-under-mast"]
    assert "from end's ground of 318.0 m stands 18.0 m above" in note.text
    assert note.text.endswith("--from-ground 300.0m.")


@pytest.mark.parametrize("kind", ["bare", "unknown"])
def test_on_other_ground_nothing_is_under_the_mast(tmp_path: Path, kind: str) -> None:
    line = ask(clump(tmp_path, kind), eye=30.0, top=30.0)
    assert "canopy-under-mast" not in [n.code for n in line.warnings]


@pytest.mark.parametrize("eye", [{"amsl_m": 350.0}, None])
def test_a_stated_ground_or_height_above_the_sea_settles_what_is_under_the_mast(
    tmp_path: Path, eye: dict[str, float] | None
) -> None:
    eye = eye or {"agl_m": 30.0, "surveyed_ground_m": 300.0}
    line = ask(clump(tmp_path, "surface"), eye=eye, top=30.0)
    assert "canopy-under-mast" not in [n.code for n in line.warnings]


def test_a_steep_slope_alone_is_no_clump_of_trees(tmp_path: Path) -> None:
    ground = opened(
        tmp_path, terrain.plane(0.6, -0.3, base_m=900.0), dem_kind="surface"
    )
    assert ask(ground).warnings == ()


def test_with_cover_the_caution_no_longer_says_ground_only(flat: Terrain) -> None:
    bare, wood = ask(flat), ask(flat, cover=cover_along(canopy_m=5.0))
    assert bare.cautions[0].text.startswith("Ground only")
    assert wood.cautions[0].text.startswith("Ground, and the trees and buildings given")


def test_what_a_raster_does_not_know_is_a_warning_of_the_answer(
    flat: Terrain, tmp_path: Path
) -> None:
    file = tmp_path / "heights.tif"
    corner = (30.0, 0.0, -315.0, 0.0, -30.0, 315.0)
    heights = np.full((21, 60), 9.0)
    terrain.write_geotiff(file, heights, corner, CENTRED_CRS, unit="m")
    raster = open_terrain(file, interpolation="nearest")
    line = ask(flat, cover=cover_along(rasters=[raster]))
    assert [n.code for n in line.warnings] == ["cover-void"]
    assert line.profile.cover_m[0] == 9.0
    assert line.profile.cover_m[-1] == 0.0


def test_the_year_in_which_a_wood_first_blocks_is_found(flat: Terrain) -> None:
    wood = along(trees(1000.0, 1400.0, 15.0))

    def lowest(year: int) -> float:
        older = aged(wood, metres_per_year=0.4, years=year)
        line = ask(flat, eye=18.1, top=18.1, cover=older)
        return float(np.nanmin(line.margin_along_m))

    assert lowest(7) == pytest.approx(0.3, abs=ROUNDING_M)
    assert first_failing_year(lowest, years=20) == 8


def test_cover_that_misses_the_path_changes_nothing(rough: Terrain) -> None:
    assert ask(rough, cover=along()).margin_m == ask(rough).margin_m


def test_judge_takes_cover_by_keyword() -> None:
    assert (judge.__kwdefaults__ or {})["cover"] is None
