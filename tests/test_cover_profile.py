"""Cover laid on a path's ground: where it is cut, what stays, what it adds."""

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from profiler.earth import geodesic_path
from profiler.errors import InputError
from profiler.model import CoverKind, CoverSpan, FloatArray, PathProfile, Point
from profiler.sight.cover import called, canopy, cover_at, covered, grown, split_height
from profiler.sight.cover_sources import cover_along, raster_cover
from profiler.sight.ground import ground_of, quadratic
from profiler.terrain import open_terrain, sample_path
from tests import terrain
from tests.looking import opened
from tests.terrain import CENTRE, CENTRED_CRS, place

#: Rounding of heights below 1000 m [m].
ROUNDING_M = 1e-9


def span(
    start_m: float,
    end_m: float,
    height_m: float = 15.0,
    *,
    kind: CoverKind = CoverKind.TREES,
    name: str = "polygon 1",
) -> CoverSpan:
    return CoverSpan(
        start_m=start_m, end_m=end_m, height_m=height_m, kind=kind, name=name
    )


def eastward(length_m: float = 3000.0) -> tuple[Point, Point]:
    end = place(90.0, length_m)
    return (
        Point(lat_deg=CENTRE[0], lon_deg=CENTRE[1]),
        Point(lat_deg=end[0], lon_deg=end[1]),
    )


@pytest.fixture(scope="module")
def bare(tmp_path_factory: pytest.TempPathFactory) -> PathProfile:
    """Rough ground with a void from 1500 m on for one cell."""
    made = terrain.fractal(7, shape=(200, 200), relief_m=300.0)
    made.posts[100, 150] = np.nan
    folder = tmp_path_factory.mktemp("rough")
    path = geodesic_path(*eastward())
    return sample_path(opened(folder, made), path)


def ground_between(profile: PathProfile, dist_m: float) -> float:
    """Ground of the piece around a place, read off its quadratic."""
    pieces = ground_of(replace(profile, cover_m=np.zeros(profile.dist_m.size)))
    k = int(np.searchsorted(pieces.dist_m[:, 0], dist_m, side="right")) - 1
    start, end = pieces.dist_m[k, 0], pieces.dist_m[k, 2]
    part = np.array([(dist_m - start) / (end - start)])
    return float(quadratic(pieces.height_m[k : k + 1]).at(part)[0])


def test_a_profile_made_without_cover_has_none_anywhere(bare: PathProfile) -> None:
    assert bare.cover_m.shape == bare.cover_index.shape == bare.dist_m.shape
    assert not bare.cover_m.any()
    assert np.all(bare.cover_index == -1)
    assert bare.cover_spans == ()
    assert np.array_equal(bare.top_m, bare.ground_m, equal_nan=True)


def test_without_spans_the_profile_is_the_same(bare: PathProfile) -> None:
    assert covered(bare, ()) is bare


def test_the_ground_under_cover_is_the_same_ground(bare: PathProfile) -> None:
    made = covered(bare, [span(333.3, 777.7), span(1490.0, 1600.0), span(2000, 2001)])
    for dist in np.random.default_rng(3).uniform(0.0, bare.length_m, 500):
        there = ground_between(made, float(dist))
        before = ground_between(bare, float(dist))
        assert there == pytest.approx(before, abs=ROUNDING_M, nan_ok=True)


def test_every_sample_of_the_bare_path_stays_as_it_was(bare: PathProfile) -> None:
    made = covered(bare, [span(333.3, 777.7), span(1490.0, 1600.0)])
    ends = bare.piece_start, bare.piece_start + 2
    for samples in ends:
        at = np.searchsorted(made.dist_m, bare.dist_m[samples])
        same = bare.ground_m[samples]
        assert np.array_equal(made.ground_m[at], same, equal_nan=True)


def test_an_edge_of_cover_has_a_sample_on_either_side(bare: PathProfile) -> None:
    made = covered(bare, [span(333.3, 777.7)])
    for edge, heights in ((333.3, [0.0, 15.0]), (777.7, [15.0, 0.0])):
        at = np.flatnonzero(made.dist_m == edge)
        assert made.cover_m[at].tolist() == heights
        assert made.ground_m[at[0]] == made.ground_m[at[1]]


def test_pieces_have_their_middles_midway_and_share_their_ends(
    bare: PathProfile,
) -> None:
    made = covered(bare, [span(100.1, 100.2), span(2222.2, 2999.0)])
    pieces = ground_of(made)
    assert np.array_equal(pieces.dist_m[1:, 0], pieces.dist_m[:-1, 2])
    middle = (pieces.dist_m[:, 0] + pieces.dist_m[:, 2]) / 2.0
    assert pieces.dist_m[:, 1] == pytest.approx(middle, abs=ROUNDING_M)
    assert pieces.dist_m.shape[0] == bare.piece_start.size + 4


def test_cover_is_one_height_on_each_piece(bare: PathProfile) -> None:
    made = covered(bare, [span(100.0, 900.0), span(500.0, 1200.0, 20.0)])
    index = made.piece_start[:, None] + np.arange(3)
    for values in (made.cover_m[index], made.cover_index[index]):
        assert np.array_equal(values[:, 0], values[:, 1])
        assert np.array_equal(values[:, 1], values[:, 2])


def test_where_two_overlap_the_highest_counts(bare: PathProfile) -> None:
    low, high = span(100, 900, 10.0, name="low"), span(500, 1200, 20.0, name="high")
    for order in ((low, high), (high, low)):
        made = covered(bare, order)
        heights = cover_at(made, np.array([50.0, 300.0, 700.0, 1000.0, 1300.0]))
        assert heights.tolist() == [0.0, 10.0, 20.0, 20.0, 0.0]


def test_of_equally_high_cover_the_building_is_named(bare: PathProfile) -> None:
    wood = span(100, 900, name="A wood")
    mill = span(100, 900, kind=CoverKind.BUILDING, name="Mill")
    for order in ((wood, mill), (mill, wood)):
        made = covered(bare, order)
        assert {made.cover_spans[k].name for k in made.cover_index if k >= 0} == {
            "Mill"
        }


def test_cover_over_the_whole_path_adds_its_height_everywhere(
    bare: PathProfile,
) -> None:
    made = covered(bare, [canopy(15.0, bare.length_m)])
    assert np.array_equal(made.dist_m, bare.dist_m)
    assert np.array_equal(made.top_m, bare.ground_m + 15.0, equal_nan=True)


def test_what_reaches_past_the_ends_is_cut_off(bare: PathProfile) -> None:
    made = covered(bare, [span(-50.0, 20.0), span(2900.0, 9999.0)])
    (first, last) = made.cover_spans
    assert (first.start_m, last.end_m) == (0.0, bare.length_m)
    assert (made.cover_m[0], made.cover_m[-1]) == (15.0, 15.0)


def test_cover_past_the_ends_is_none(bare: PathProfile) -> None:
    assert covered(bare, [span(-50.0, -20.0), span(3100.0, 3200.0)]) is bare


def test_an_edge_within_a_micrometre_of_a_post_line_lies_on_it(
    bare: PathProfile,
) -> None:
    line = float(bare.dist_m[bare.piece_start[10]])
    made = covered(bare, [span(line - 5e-7, line + 100.0)])
    assert made.cover_spans[0].start_m == line


def test_cover_thinner_than_a_micrometre_is_none(bare: PathProfile) -> None:
    assert covered(bare, [span(400.1234, 400.1234 + 5e-7)]) is bare


def test_a_void_under_cover_stays_a_void(bare: PathProfile) -> None:
    made = covered(bare, [span(1490.0, 1511.0)])
    before = ground_of(bare).void
    after = ground_of(made).void
    assert after.dist_m[0, 0] == before.dist_m[0, 0]
    assert after.dist_m[-1, 2] == before.dist_m[-1, 2]


def test_ground_that_steps_still_steps_under_cover(tmp_path: Path) -> None:
    folder = opened(tmp_path, terrain.step(), interpolation="nearest")
    stepped = sample_path(folder, geodesic_path(*eastward()))
    made = covered(stepped, [canopy(5.0, stepped.length_m)])
    assert np.array_equal(made.dist_m, stepped.dist_m)
    assert np.array_equal(made.ground_m, stepped.ground_m)
    part = covered(stepped, [span(700.0, 2000.0)])
    index = part.piece_start[:, None] + np.arange(3)
    assert np.ptp(part.ground_m[index], axis=1).max() == 0.0


def test_files_stay_with_their_samples(bare: PathProfile) -> None:
    made = covered(bare, [span(333.3, 777.7)])
    at = np.searchsorted(made.dist_m, bare.dist_m)
    assert np.array_equal(made.source[at], bare.source)
    assert np.all(made.source[np.isnan(made.ground_m)] == -1)


def test_covered_twice_is_covered_by_both(bare: PathProfile) -> None:
    first, second = span(100, 900), span(500, 1200, 20.0)
    once = covered(bare, [first, second])
    twice = covered(covered(bare, [first]), [second])
    assert np.array_equal(once.dist_m, twice.dist_m)
    assert np.array_equal(once.cover_m, twice.cover_m)


def test_a_height_is_taken_apart_on_the_right_side_of_an_edge(
    bare: PathProfile,
) -> None:
    made = covered(bare, [span(333.3, 777.7, name="Wood")])
    ground = ground_between(bare, 333.3)
    below = split_height(made, 333.3, ground)
    above = split_height(made, 333.3, ground + 15.0)
    assert (below.cover_m, below.span) == (0.0, None)
    assert above.cover_m == 15.0
    assert above.ground_m == pytest.approx(ground, abs=ROUNDING_M)
    assert above.span is not None
    assert above.span.name == "Wood"


def test_a_height_past_the_path_is_all_ground(bare: PathProfile) -> None:
    assert split_height(bare, 9999.0, 12.0) == (12.0, 0.0, None)


def test_trees_grow_and_buildings_do_not() -> None:
    wood, mill = span(0, 1), span(2, 3, 8.0, kind=CoverKind.BUILDING)
    later = grown([wood, mill], metres_per_year=0.4, years=10)
    assert [s.height_m for s in later] == [19.0, 8.0]
    assert grown([wood, mill], metres_per_year=0.4, years=0) == (wood, mill)


@pytest.mark.parametrize(
    ("rate", "years"), [(-0.1, 1.0), (0.1, -1.0), (float("nan"), 1.0)]
)
def test_growth_backwards_is_refused(rate: float, years: float) -> None:
    with pytest.raises(InputError, match="must be 0 or more"):
        grown((), metres_per_year=rate, years=years)


@pytest.mark.parametrize(
    ("numbers", "part"),
    [
        ((0.0, 1.0, 0.0), "above 0"),
        ((0.0, 1.0, -2.0), "above 0"),
        ((2.0, 1.0, 5.0), "before it starts"),
        ((0.0, float("inf"), 5.0), "finite"),
    ],
)
def test_a_span_that_cannot_be_is_refused(
    numbers: tuple[float, float, float], part: str
) -> None:
    with pytest.raises(InputError, match=part):
        span(*numbers)


@pytest.mark.parametrize(
    ("kind", "name", "said"),
    [
        (None, "", "ground"),
        (CoverKind.TREES, "polygon 12", "trees of polygon 12"),
        (CoverKind.TREES, "canopy", "canopy"),
        (CoverKind.BUILDING, "Old Mill", "building Old Mill"),
    ],
)
def test_what_stands_there_is_called_by_kind_and_name(
    kind: CoverKind | None, name: str, said: str
) -> None:
    assert called(kind, name) == said


def heights_raster(folder: Path, posts: FloatArray) -> Path:
    """Cells of 30 m, the first column's middle 300 m west of the centre."""
    file = folder / "heights.tif"
    corner = (30.0, 0.0, -315.0, 0.0, -30.0, 315.0)
    terrain.write_geotiff(file, posts, corner, CENTRED_CRS, unit="m", nodata=-9999.0)
    return file


def test_a_raster_gives_one_span_for_each_run_of_equal_cells(tmp_path: Path) -> None:
    posts = np.zeros((21, 150))
    posts[:, 20:22], posts[:, 22], posts[:, 60] = 12.0, 18.5, 7.0
    raster = open_terrain(heights_raster(tmp_path, posts), interpolation="nearest")
    found = raster_cover(raster, geodesic_path(*eastward()))
    assert [(s.height_m, s.kind, s.name) for s in found.spans] == [
        (12.0, "trees", "cover raster heights.tif"),
        (18.5, "trees", "cover raster heights.tif"),
        (7.0, "trees", "cover raster heights.tif"),
    ]
    edges = np.array([(s.start_m, s.end_m) for s in found.spans])
    cells = np.array([(20, 22), (22, 23), (60, 61)]) * 30.0 - 315.0
    assert edges == pytest.approx(cells, abs=0.003)
    assert found.notes == ()


def test_cells_without_a_value_are_named_not_taken_for_bare(tmp_path: Path) -> None:
    posts = np.zeros((21, 150))
    posts[:, 40:44] = np.nan
    raster = open_terrain(heights_raster(tmp_path, posts), interpolation="nearest")
    (note,) = raster_cover(raster, geodesic_path(*eastward())).notes
    assert note.code == "cover-void"
    assert note.text.startswith("0.12 km of path lie outside cover raster heights.tif")


def test_path_past_a_raster_is_named_too(tmp_path: Path) -> None:
    raster = open_terrain(
        heights_raster(tmp_path, np.zeros((21, 80))), interpolation="nearest"
    )
    (note,) = raster_cover(raster, geodesic_path(*eastward())).notes
    assert note.text.startswith("0.92 km")


def test_elevations_given_as_heights_are_found_out(tmp_path: Path) -> None:
    high = np.full((21, 150), 431.0)
    path = geodesic_path(*eastward())
    raster = open_terrain(heights_raster(tmp_path, high), interpolation="nearest")
    (note,) = raster_cover(raster, path).notes
    assert note.code == "cover-tall"
    raster = open_terrain(heights_raster(tmp_path, high * 4), interpolation="nearest")
    with pytest.raises(InputError, match="above ground; give elevations with --dem"):
        raster_cover(raster, path)


def test_a_raster_that_would_be_interpolated_is_refused(tmp_path: Path) -> None:
    raster = open_terrain(heights_raster(tmp_path, np.zeros((21, 80))))
    with pytest.raises(InputError, match='interpolation="nearest"'):
        cover_along(rasters=[raster])


def test_sources_together_give_all_their_cover_grown(tmp_path: Path) -> None:
    posts = np.zeros((21, 150))
    posts[:, 30] = 12.0
    raster = open_terrain(heights_raster(tmp_path, posts), interpolation="nearest")
    along = cover_along(canopy_m=5.0, rasters=[raster], metres_per_year=0.5, years=2)
    path = geodesic_path(*eastward())
    found = sorted(s.height_m for s in along(path).spans)
    assert found == [6.0, 13.0]


def test_a_canopy_of_no_height_is_refused_before_any_path() -> None:
    with pytest.raises(InputError, match="above 0"):
        cover_along(canopy_m=0.0)
