"""A bare summit does not hide itself; what stands behind it stays hidden."""

from pathlib import Path
from typing import Any

import numpy as np
import pytest

from profiler.model import SightLine
from profiler.terrain import Terrain
from tests import terrain
from tests.looking import from_centre, opened
from tests.terrain import Posts

#: The summit: 600 m above the eye's plain, 15 km away, round at its top.
AWAY_M, TOP_M, CELL_M = 15_000.0, 600.0, 30.0
#: Radius of its round top; below, flanks of 1 in 3.
ROUND_M, FLANK = 400.0, 1.0 / 3.0


def heights(r: Posts) -> Posts:
    """A round top that runs smoothly into straight flanks."""
    edge = FLANK * ROUND_M
    top = TOP_M - r**2 * FLANK / (2.0 * ROUND_M)
    flank = TOP_M - edge / 2.0 - FLANK * (r - ROUND_M)
    return np.maximum(np.where(r < ROUND_M, top, flank), 0.0)


@pytest.fixture(scope="module")
def mountain(tmp_path_factory: pytest.TempPathFactory) -> Terrain:
    east, north, transform = terrain.offsets(CELL_M, AWAY_M + 1500.0, 900.0, 900.0)
    # the top lies a third of a cell off its post, as tops do
    posts = heights(np.hypot(east - AWAY_M - 10.0, north - 7.0))
    made = terrain.Terrain(posts, transform, terrain.CENTRED_CRS, {})
    return opened(tmp_path_factory.mktemp("mountain"), made)


def look(ground: Terrain, past_m: float, **asked: Any) -> SightLine:
    return from_centre(ground, 90.0, AWAY_M + past_m, kr=0.13, **asked)


@pytest.mark.parametrize("past_m", [0.0, 10.0, CELL_M, -CELL_M])
def test_a_round_summit_is_seen_from_far_below(
    mountain: Terrain, past_m: float
) -> None:
    line = look(mountain, past_m)
    assert line.verdict == "clear"
    assert line.target.shown == "whole"
    assert line.target.own_hill_m == 100.0
    assert line.decisive is not None
    assert line.decisive.distance_m <= AWAY_M + past_m - 99.999


@pytest.mark.parametrize("past_m", [10.0, CELL_M])
def test_the_record_keeps_that_the_summit_hides_its_own_point(
    mountain: Terrain, past_m: float
) -> None:
    line = look(mountain, past_m)
    assert line.target.point_shown == "none"
    assert 0.0 < line.target.aim_moved_m < 100.0
    moved = pytest.approx(AWAY_M + past_m - line.target.aim_moved_m)
    assert line.aim_distance_m == moved
    assert look(mountain, past_m, own_hill_m=0.0).verdict == "blocked"


def test_beyond_the_aim_point_there_is_no_line(mountain: Terrain) -> None:
    line = look(mountain, CELL_M)
    beyond = line.profile.dist_m > line.aim_distance_m
    assert np.all(np.isnan(line.sight_m[beyond]))
    assert np.all(np.isfinite(line.sight_m[~beyond]))


def test_a_hut_behind_the_top_stays_hidden(mountain: Terrain) -> None:
    for past_m in (150.0, 300.0):
        line = look(mountain, past_m)
        assert (line.verdict, line.target.own_hill_m) == ("blocked", 0.0)
        assert line.target.aim_moved_m == 0.0


def test_a_hut_before_the_top_is_seen_without_a_hill(mountain: Terrain) -> None:
    line = look(mountain, -300.0)
    assert (line.verdict, line.target.own_hill_m) == ("clear", 0.0)


def test_another_mountain_in_front_still_hides_the_summit(tmp_path: Path) -> None:
    east, north, transform = terrain.offsets(CELL_M, AWAY_M + 1500.0, 900.0, 900.0)
    posts = heights(np.hypot(east - AWAY_M, north))
    posts = np.maximum(posts, 400.0 - np.abs(east - 6000.0))
    made = terrain.Terrain(posts, transform, terrain.CENTRED_CRS, {})
    line = from_centre(opened(tmp_path, made), 90.0, AWAY_M, kr=0.13)
    assert (line.verdict, line.target.own_hill_m) == ("blocked", 100.0)
    assert line.decisive is not None
    assert line.decisive.distance_m == pytest.approx(6000.0, abs=CELL_M)


@pytest.mark.parametrize("slope", [0.0, 0.02, -0.02])
def test_plains_slopes_and_the_sea_get_no_hill(tmp_path: Path, slope: float) -> None:
    ground = opened(tmp_path, terrain.plane(slope, base_m=0.0))
    assert from_centre(ground, 90.0, 5000.0, kr=0.13).target.own_hill_m == 0.0


def test_a_plateau_gets_no_hill(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.step(low_m=0.0, high_m=100.0))
    for away_m in (1700.0, 2000.0, 2800.0):
        assert from_centre(ground, 90.0, away_m).target.own_hill_m == 0.0
