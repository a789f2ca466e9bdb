"""From a question to the answer: verdicts, voids, surveys, steps, odd paths."""

from pathlib import Path
from typing import Any

import numpy as np
import pytest

from profiler.errors import InputError
from profiler.model import SightLine, Verdict
from profiler.terrain import Terrain as Opened
from profiler.terrain import open_terrain
from tests import terrain
from tests.looking import Pair, from_centre, opened, raster, seen, twin
from tests.terrain import CENTRE, Terrain, place

#: Rounding of distances on the centred plane and of heights [m].
ROUNDING_M = 1e-5


def both_ways(
    ground: Opened, start: Pair, end: Pair, eye: float, top: float, **asked: Any
) -> tuple[SightLine, SightLine]:
    """The answer from either end."""
    return (
        seen(ground, start, end, eye=eye, top=top, **asked),
        seen(ground, end, start, eye=top, top=eye, **asked),
    )


def same(there: SightLine, back: SightLine) -> bool:
    """Whether two answers agree on verdict, margin and decisive place."""
    if there.decisive is None or back.decisive is None:
        return there.decisive is back.decisive and there.verdict == back.verdict
    ends_m = there.decisive.distance_m + back.decisive.distance_m
    return (
        there.verdict == back.verdict
        and there.grazing == back.grazing
        and there.margin_m == pytest.approx(back.margin_m, abs=ROUNDING_M)
        and ends_m == pytest.approx(there.aim_distance_m, abs=1e-3)
    )


# --- grazing and ties ----------------------------------------------------------------


@pytest.mark.parametrize(
    ("height", "verdict", "grazing"),
    [
        (100.0011, "clear", False),
        (100.0009, "clear", True),
        (100.0, "clear", True),
        (99.9991, "clear", True),
        (99.9989, "blocked", False),
    ],
)
def test_the_verdict_turns_1_mm_below_the_crest_from_both_ends(
    tmp_path: Path, height: float, verdict: str, grazing: bool
) -> None:
    ground = opened(tmp_path, terrain.ridge("column", height_m=100.0))
    end = place(90.0, 6000.0)
    there, back = both_ways(ground, CENTRE, end, height, height)
    assert (there.verdict, there.grazing) == (verdict, grazing)
    assert same(there, back)


@pytest.mark.parametrize("height", [5.0, 60.0])
def test_of_two_equal_walls_the_same_one_decides_from_both_ends(
    tmp_path: Path, height: float
) -> None:
    made = terrain.plane(reach_m=3000.0)
    east, _, _ = terrain.offsets(30.0, 3000.0, 3000.0, 300.0)
    for at in (900.0, 2100.0):
        made.posts[np.abs(east - at) < 15.0] = 50.0
    ground = opened(tmp_path, made)
    there, back = both_ways(ground, CENTRE, place(90.0, 3000.0), height, height)
    assert there.decisive is not None
    # along the parallel the longitude decides: the western end is the lower
    low = 900.0 if place(90.0, 3000.0)[0] >= CENTRE[0] else 2100.0
    assert there.decisive.distance_m == pytest.approx(low, abs=0.5)
    assert same(there, back)


def test_the_margin_of_a_blocked_line_is_its_lowest(tmp_path: Path) -> None:
    # the bulge of the sea is flat for 100 m about its top: before it was mended the
    # margin printed there was up to 1 mm too high
    made = Terrain(
        np.zeros((5, 420)),
        (100.0, 0.0, -200.0, 0.0, -100.0, 250.0),
        terrain.CENTRED_CRS,
        {},
    )
    line = from_centre(opened(tmp_path, made), 90.0, 37e3, eye=20, top=19, ke=4 / 3)
    (stretch,) = line.blocked_stretches
    assert line.margin_m == stretch.worst_margin_m
    assert line.decisive is not None
    assert line.decisive.distance_m == stretch.worst_at_m


# --- stations on the ground and below it ---------------------------------------------


def test_between_two_bare_points_on_a_plane_nothing_blocks(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.plane(0.1, 0.05))
    line = from_centre(ground, 60.0, 4000.0, eye=0.0)
    assert (line.verdict, line.target.shown) == ("clear", "whole")
    assert abs(line.margin_m or 0.0) < ROUNDING_M


def test_a_bare_target_is_reached_across_a_valley_from_both_ends(
    tmp_path: Path,
) -> None:
    made = terrain.plane(reach_m=3000.0)
    east, _, _ = terrain.offsets(30.0, 3000.0, 3000.0, 300.0)
    made.posts[:] = (east - 1500.0) ** 2 / 5000.0
    ground = opened(tmp_path, made)
    there, back = both_ways(ground, CENTRE, place(90.0, 3000.0), 1.7, 0.0, own_hill_m=0)
    assert (there.verdict, there.grazing) == ("clear", False)
    assert same(there, back)
    assert there.decisive is not None
    # it touches first at the target itself, wherever samples happen to stand
    assert there.decisive.distance_m == pytest.approx(3000.0, abs=0.011)
    assert there.margin_m == pytest.approx(0.0, abs=0.01)


def test_a_station_surveyed_below_the_model_is_behind_its_edge(tmp_path: Path) -> None:
    # before the ground beside the ends was looked at, ground falling by 1 in 1 hid it
    # from the samples half a cell away and the line was called clear
    ground = opened(tmp_path, terrain.plane(-1.0, base_m=100.0))
    eye = {"agl_m": 2.0, "surveyed_ground_m": 95.0}
    line = from_centre(ground, 90.0, 3000.0, eye=eye, top=1500.0)
    assert line.verdict == "blocked"
    assert line.margin_m == pytest.approx(-3.0, abs=0.02)
    assert line.needed.from_agl_m == pytest.approx(5.0, abs=0.011)
    assert (line.needed.to_agl_m, line.needed.kr) == (None, None)
    assert line.other_ground is not None
    assert line.other_ground.verdict == "clear"
    end = place(90.0, 3000.0)
    assert seen(ground, end, CENTRE, eye=1500.0, top=eye).verdict == "blocked"


def test_a_survey_answers_for_both_grounds(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.ridge("column", height_m=100.0))
    top = {"agl_m": 90.0, "surveyed_ground_m": 120.0}
    line = from_centre(ground, 90.0, 6000.0, eye=10.0, top=top)
    assert line.verdict == "clear"
    assert line.margin_m == pytest.approx(10.0, abs=1e-4)
    other = line.other_ground
    assert other is not None
    assert other.verdict is Verdict.BLOCKED
    assert other.margin_m == pytest.approx(-50.0, abs=1e-4)
    assert (other.from_ground_m, other.to_ground_m) == (0.0, 0.0)
    assert other.shown == "none"


def test_a_survey_close_to_the_model_gives_one_answer(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.plane(base_m=100.0))
    eye = {"agl_m": 2.0, "surveyed_ground_m": 104.0, "survey_gap_m": 5.0}
    assert from_centre(ground, 90.0, 3000.0, eye=eye, top=9.0).other_ground is None


def test_a_height_above_its_survey_but_under_the_model_is_answered(
    tmp_path: Path,
) -> None:
    ground = opened(tmp_path, terrain.plane(base_m=100.0))
    eye = {"amsl_m": 97.0, "surveyed_ground_m": 95.0}
    line = from_centre(ground, 90.0, 3000.0, eye=eye, top=30.0)
    assert line.from_.agl_m == 2.0
    assert line.other_ground is not None
    assert line.other_ground.verdict is Verdict.BLOCKED


def test_a_survey_on_a_void_stays_when_the_other_is_left_out(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.sea(land_m=40.0))
    ends = {"agl_m": 2.0, "surveyed_ground_m": 50.0}
    line = from_centre(ground, 90.0, 2500.0, eye=ends, top=ends)
    assert line.verdict is Verdict.UNDETERMINED
    assert line.other_ground is not None
    other = line.other_ground
    assert (other.from_ground_m, other.to_ground_m) == (40.0, 50.0)


def test_heights_above_sea_level_and_above_ground_agree(tmp_path: Path) -> None:
    made = terrain.fractal(5, shape=(120, 120), relief_m=300.0)
    ground = opened(tmp_path, made)
    end = place(70.0, 1500.0)
    agl = seen(ground, CENTRE, end, eye=12.0, top=30.0)
    eye, top = {"amsl_m": agl.from_.amsl_m}, {"amsl_m": agl.to.amsl_m}
    assert seen(ground, CENTRE, end, eye=eye, top=top).margin_m == agl.margin_m


# --- steps, other ground between posts, overlapping files ----------------------------


@pytest.mark.parametrize("kind", ["highest", "nearest", "bilinear"])
@pytest.mark.parametrize("seed", range(4))
def test_every_kind_of_ground_agrees_with_the_oracle(
    tmp_path: Path, kind: str, seed: int
) -> None:
    made = terrain.fractal(seed, shape=(90, 90), relief_m=200.0)
    ground = opened(tmp_path, made, interpolation=kind)
    random = np.random.default_rng(seed)
    ends = [place(*random.uniform((0, 0), (360, 1200))) for _ in (0, 1)]
    feet = raster(made, kind).height(*np.transpose(ends))
    eye, top = (float(z) for z in feet + random.uniform(1.0, 80.0, 2))
    there = seen(ground, *ends, eye={"amsl_m": eye}, top={"amsl_m": top})
    back = seen(ground, *ends[::-1], eye={"amsl_m": top}, top={"amsl_m": eye})
    exact = twin(raster(made, kind), *ends, from_amsl=eye, to_amsl=top, kappa=0.0)
    assert there.verdict == exact.verdict
    if there.verdict is Verdict.BLOCKED:
        # the oracle looks every half per cent of a cell, where this ground steps
        near = 0.2 if kind != "bilinear" else 1e-4
        assert there.margin_m == pytest.approx(exact.lowest_margin_m, abs=near)
        assert (there.margin_m or 0.0) <= exact.lowest_margin_m + 1e-6
    assert same(there, back)


def test_both_sides_of_a_step_have_their_own_flag(tmp_path: Path) -> None:
    # before it was mended both took the flag of the nearer side
    ground = opened(tmp_path, terrain.step(), interpolation="nearest")
    down = seen(ground, place(90.0, 2900.0), CENTRE, eye=10.0, top=5.0)
    at = down.profile
    k = int(np.argmax(np.abs(np.diff(at.ground_m))))
    assert at.dist_m[k] == at.dist_m[k + 1]
    assert down.ground_seen[k : k + 2].tolist() == [True, False]
    up = from_centre(ground, 90.0, 2900.0, eye=10.0, top=5.0)
    k = int(np.argmax(np.abs(np.diff(up.profile.ground_m))))
    assert up.ground_seen[k : k + 2].tolist() == [True, True]
    assert not up.ground_seen[k + 2]


def test_where_two_files_step_the_line_meets_the_higher_edge(tmp_path: Path) -> None:
    fine = terrain.plane(base_m=50.0, cell_m=10.0, reach_m=1000.0, back_m=100.0)
    coarse = terrain.plane(base_m=0.0, cell_m=30.0, reach_m=3000.0)
    names = [
        terrain.write_geotiff(tmp_path / f"{n}.tif", *m[:3], unit="m")
        for n, m in (("fine", fine), ("coarse", coarse))
    ]
    ground = open_terrain(*names)
    end = place(90.0, 2000.0)
    there, back = both_ways(ground, CENTRE, end, 10.0, 5.0)
    # from 60 m to 5 m over the edge of the upper ground at 1000 m
    assert there.verdict is Verdict.BLOCKED
    assert there.margin_m == pytest.approx(32.5 - 50.0, abs=1e-3)
    assert there.decisive is not None
    assert there.decisive.distance_m == pytest.approx(1000.0, abs=1e-3)
    assert same(there, back)
    assert "seam-step" in [n.code for n in there.warnings]


# --- short, tall, straight along the posts, odd air ----------------------------------


def test_a_path_of_two_cells_is_answered(tmp_path: Path) -> None:
    made = terrain.pillar(height_m=50.0, cells_away=1)
    line = from_centre(opened(tmp_path, made), 90.0, 60.0, eye=10.0, top=10.0)
    assert line.verdict == "blocked"
    assert line.margin_m == pytest.approx(-40.0)
    (stretch,) = line.blocked_stretches
    assert (stretch.start_m, stretch.end_m) == pytest.approx((6.0, 54.0), abs=1e-4)


def test_a_path_shorter_than_a_cell_is_refused(tmp_path: Path) -> None:
    with pytest.raises(InputError, match="less than one cell"):
        from_centre(opened(tmp_path, terrain.plane()), 90.0, 25.0)


def test_a_path_within_one_cell_diagonally_is_answered(tmp_path: Path) -> None:
    line = from_centre(opened(tmp_path, terrain.plane()), 45.0, 35.0, eye=2.0, top=2.0)
    assert line.verdict == "clear"
    assert line.margin_m == pytest.approx(2.0)


@pytest.mark.parametrize("kr", [-3.0, 0.0, 1.0, 1.2, 4.0])
def test_tall_ground_in_odd_air_agrees_with_the_oracle(
    tmp_path: Path, kr: float
) -> None:
    made = terrain.fractal(8, shape=(200, 200), relief_m=8000.0, cell_m=400.0)
    ground = opened(tmp_path, made)
    start, end = place(200.0, 33e3), place(40.0, 30e3)
    there, back = both_ways(ground, start, end, 900.0, 20.0, kr=kr)
    exact = twin(
        made, start, end, from_agl=900.0, to_agl=20.0, kr=kr, points_per_cell=60
    )
    assert there.verdict == exact.verdict
    assert same(there, back)
    ours = there.decisive
    assert ours is not None
    assert there.margin_m == pytest.approx(exact.decisive[1], abs=2e-3)
    assert there.target.hidden_m == pytest.approx(exact.hidden_m, abs=1e-3)


def test_air_in_which_no_line_exists_is_refused(tmp_path: Path) -> None:
    made = terrain.fractal(8, shape=(60, 60), cell_m=1000.0)
    with pytest.raises(InputError, match="turns a quarter circle"):
        from_centre(opened(tmp_path, made), 90.0, 25e3, ke=0.002)


def test_a_wall_near_the_eye_can_be_left_out(tmp_path: Path) -> None:
    made = terrain.ridge("column", height_m=100.0, cells_away=2)
    posts = np.pad(made.posts, ((0, 0), (0, 60)))
    ground = opened(tmp_path, made._replace(posts=posts))
    asked = {"eye": 5.0, "top": 5.0}
    assert from_centre(ground, 90.0, 1500.0, **asked).verdict == "blocked"
    line = from_centre(ground, 90.0, 1500.0, ignore_near_m=95.0, **asked)
    assert (line.verdict, line.ignore_near_m) == ("clear", 95.0)
    # 85 m from the eye the wall's far foot still stands 16.7 m high
    line = from_centre(ground, 90.0, 1500.0, ignore_near_m=85.0, **asked)
    assert line.margin_m == pytest.approx(5.0 - 100.0 / 6.0, abs=1e-4)


@pytest.mark.parametrize("near", [-1.0, float("nan"), 750.0])
def test_an_impossible_distance_to_leave_out_is_refused(
    tmp_path: Path, near: float
) -> None:
    ground = opened(tmp_path, terrain.plane())
    with pytest.raises(InputError, match="--ignore-near"):
        from_centre(ground, 90.0, 1500.0, ignore_near_m=near)


def test_the_first_block_is_the_first_and_the_worst_decides(tmp_path: Path) -> None:
    made = terrain.plane(reach_m=3000.0)
    east, _, _ = terrain.offsets(30.0, 3000.0, 3000.0, 300.0)
    for at, top in ((600.0, 20.0), (1800.0, 51.0)):
        made.posts[np.abs(east - at) < 15.0] = top
    line = from_centre(opened(tmp_path, made), 90.0, 3000.0, eye=5.0, top=5.0)
    assert line.first_block is not None
    assert line.first_block.distance_m == pytest.approx(585.0, abs=15.0)
    assert [s.worst_at_m for s in line.blocked_stretches] == pytest.approx(
        [600.0, 1800.0], abs=1e-3
    )
    assert line.decisive is not None
    assert line.decisive.distance_m == pytest.approx(1800.0, abs=1e-3)
    assert line.first_block.margin_m < -0.001
    assert line.horizon is not None
    assert line.horizon.distance_m == pytest.approx(1800.0, abs=1e-3)


def test_a_clear_line_has_neither_block_nor_stretch(tmp_path: Path) -> None:
    line = from_centre(opened(tmp_path, terrain.plane()), 90.0, 3000.0, eye=5, top=5)
    assert (line.first_block, line.blocked_stretches) == (None, ())


def test_ground_behind_a_wall_is_not_seen(tmp_path: Path) -> None:
    made = terrain.ridge("column", height_m=100.0)
    line = from_centre(opened(tmp_path, made), 90.0, 6000.0, eye=10.0, top=300.0)
    at = line.profile.dist_m
    assert np.all(line.ground_seen[at <= 3000.0])
    assert not np.any(line.ground_seen[at > 3000.001])
