"""Missing ground never counts as clear."""

from pathlib import Path

import numpy as np
import pytest

from profiler.errors import OutsideDemError
from profiler.model import Verdict
from tests import terrain
from tests.looking import from_centre, opened, seen
from tests.terrain import place


def test_a_void_on_the_path_leaves_a_clear_line_open(tmp_path: Path) -> None:
    made = terrain.one_void(land_m=40.0)
    line = from_centre(opened(tmp_path, made), 90.0, 2400.0, eye=10.0, top=20.0)
    assert line.verdict is Verdict.UNDETERMINED
    assert line.void is not None
    facts = made.facts
    assert line.void.start_m == pytest.approx(facts["void_from_m"], abs=1e-4)
    assert line.void.end_m == pytest.approx(facts["void_to_m"], abs=1e-4)
    # the line rises by 10 m in 2400: lowest where the void begins
    low = 50.0 + 10.0 * facts["void_from_m"] / 2400.0
    assert line.void.blocks_above_m == pytest.approx(low, abs=1e-4)


def test_known_ground_that_blocks_decides_in_spite_of_a_void(tmp_path: Path) -> None:
    made = terrain.one_void(land_m=40.0)
    posts = made.posts.copy()
    posts[:, posts.shape[1] // 4] = 90.0
    ground = opened(tmp_path, made._replace(posts=posts))
    line = from_centre(ground, 90.0, 2400.0, eye=10.0, top=20.0)
    assert line.verdict is Verdict.BLOCKED
    assert line.void is not None


@pytest.mark.parametrize(
    ("below", "verdict"), [(55.0, "undetermined"), (54.0, "clear"), (40.0, "clear")]
)
def test_a_void_that_only_higher_ground_could_block_is_clear(
    tmp_path: Path, below: float, verdict: str
) -> None:
    ground = opened(tmp_path, terrain.one_void(land_m=40.0))
    line = from_centre(ground, 90.0, 2400.0, eye=10.0, top=20.0, void_below_m=below)
    assert line.verdict == verdict


def test_a_void_beside_the_path_does_not_count(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.one_void(land_m=40.0))
    # along the next row of posts the void post carries no weight
    start = place(0.0, 30.0)
    end = place(float(np.degrees(np.arctan2(2400.0, 30.0))), float(np.hypot(2400, 30)))
    asked = {"eye": 10.0, "top": 20.0}
    assert seen(ground, start, end, **asked).verdict == "clear"
    inside = place(0.0, 29.0)
    assert seen(ground, inside, end, **asked).verdict == "undetermined"


def test_of_several_voids_the_lowest_under_the_line_is_named(tmp_path: Path) -> None:
    made = terrain.one_void(land_m=40.0)
    posts = made.posts.copy()
    posts[:, 20] = np.nan
    ground = opened(tmp_path, made._replace(posts=posts))
    line = from_centre(ground, 90.0, 2400.0, eye=20.0, top=10.0)
    assert line.void is not None
    assert line.void.start_m == pytest.approx(made.facts["void_from_m"], abs=1e-4)


def test_only_voids_give_no_margin_and_no_verdict(tmp_path: Path) -> None:
    made = terrain.sea()
    posts = np.full_like(made.posts, np.nan)
    ground = opened(tmp_path, made._replace(posts=posts))
    ends = {"amsl_m": 50.0}
    line = from_centre(ground, 90.0, 2500.0, eye=ends, top=ends)
    assert (line.verdict, line.margin_m, line.decisive) == ("undetermined", None, None)
    assert (line.horizon, line.first_block, line.grazing) == (None, None, False)
    need = line.needed
    assert (need.from_agl_m, need.both_extra_m, need.kr, need.dem_bias_m) == (None,) * 4
    assert not np.any(line.ground_seen)


def test_a_station_on_a_void_needs_its_own_height(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.sea())
    with pytest.raises(OutsideDemError, match="no ground is known"):
        from_centre(ground, 90.0, 2500.0, eye=2.0, top=5.0)
    line = from_centre(ground, 90.0, 2500.0, eye=2.0, top={"amsl_m": 90.0})
    assert line.verdict is Verdict.UNDETERMINED
    assert line.void is not None
    assert line.void.end_m == pytest.approx(2500.0, abs=1e-3)


def test_a_sea_level_makes_water_of_voids(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.sea(), sea_level_m=0.0)
    line = from_centre(ground, 90.0, 2500.0, eye=2.0, top=5.0)
    # from 42 m to 5 m over the shore of 40 m at 1500 m
    assert (line.verdict, line.void, line.to.ground_m) == ("blocked", None, 0.0)
    assert line.margin_m == pytest.approx(42.0 - 37.0 * 0.6 - 40.0, abs=1e-3)
    assert [n.code for n in line.warnings] == ["sea-filled"]
