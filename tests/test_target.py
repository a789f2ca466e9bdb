"""How much of the target is seen."""

from pathlib import Path

import numpy as np
import pytest

from profiler.model import Shown
from profiler.terrain import Terrain
from tests import terrain
from tests.looking import from_centre, opened, seen
from tests.terrain import CENTRE, place

#: Rounding of distances on the centred plane and of heights [m].
ROUNDING_M = 1e-5


def wall(folder: Path, height_m: float = 100.0) -> Terrain:
    return opened(folder, terrain.ridge("column", height_m=height_m))


def test_a_wall_hides_what_similar_triangles_say(tmp_path: Path) -> None:
    # wall of 100 m half way: from 10 m the ray over it stands at 190 m
    line = from_centre(wall(tmp_path), 90.0, 6000.0, eye=10.0, top=250.0)
    assert line.target.hidden_m == pytest.approx(190.0, abs=ROUNDING_M)
    assert line.target.visible_m == pytest.approx(60.0, abs=ROUNDING_M)
    assert line.target.visible_fraction == pytest.approx(60.0 / 250.0)
    assert line.target.shown is Shown.PART
    top, foot = np.degrees(np.arctan(np.array([240.0, 180.0]) / 6000.0)) * 60.0
    assert line.target.visible_arcmin == pytest.approx(top - foot, abs=1e-4)
    assert line.target.above_crest_m == pytest.approx(60.0, abs=ROUNDING_M)


def test_a_few_metres_below_the_ray_are_a_hidden_part(tmp_path: Path) -> None:
    line = from_centre(wall(tmp_path), 90.0, 6000.0, eye=195.0, top=250.0)
    assert line.target.shown is Shown.PART
    assert line.target.hidden_m == pytest.approx(5.0, abs=ROUNDING_M)


def test_a_wall_above_the_top_hides_all_of_it(tmp_path: Path) -> None:
    line = from_centre(wall(tmp_path), 90.0, 6000.0, eye=10.0, top=180.0)
    assert line.target.shown is Shown.NONE
    assert (line.target.visible_m, line.target.hidden_m) == (0.0, 180.0)
    assert line.target.visible_arcmin == 0.0
    assert line.target.above_crest_m == pytest.approx(-10.0, abs=ROUNDING_M)
    assert line.front_crest == line.horizon


def test_level_ground_hides_nothing(tmp_path: Path) -> None:
    line = from_centre(opened(tmp_path, terrain.plane()), 90.0, 5000.0, eye=2, top=9)
    assert line.target.shown is Shown.WHOLE
    assert (line.target.visible_m, line.target.visible_fraction) == (9.0, 1.0)
    assert line.target.above_crest_m is None


@pytest.mark.parametrize(("eye", "shown"), [(300.0, "whole"), (10.0, "none")])
def test_a_bare_point_is_seen_whole_or_not_at_all(
    tmp_path: Path, eye: float, shown: str
) -> None:
    line = from_centre(wall(tmp_path), 90.0, 6000.0, eye=eye)
    assert line.target.shown == shown
    assert line.target.point_shown == shown
    assert (line.target.visible_m, line.target.hidden_m) == (0.0, 0.0)
    assert line.target.visible_fraction is None


def test_the_horizon_of_an_open_slope_is_the_target_itself(tmp_path: Path) -> None:
    # before the end was counted among the samples it lay half a cell short
    line = from_centre(opened(tmp_path, terrain.plane(0.1)), 90.0, 5000.0, eye=2.0)
    assert line.horizon is not None
    assert line.horizon.distance_m == pytest.approx(5000.0, abs=1e-6)


def test_visible_and_hidden_are_the_target(tmp_path: Path) -> None:
    ground = wall(tmp_path)
    for top in (0.0, 100.0, 189.0, 191.0, 300.0):
        target = from_centre(ground, 90.0, 6000.0, eye=10.0, top=top).target
        assert target.visible_m + target.hidden_m == top


def test_a_top_seen_past_a_wall_from_behind_is_the_same_top(tmp_path: Path) -> None:
    ground = wall(tmp_path)
    back = seen(ground, place(90.0, 6000.0), CENTRE, eye=10.0, top=250.0)
    assert back.target.hidden_m == pytest.approx(190.0, abs=ROUNDING_M)


def test_a_target_on_a_void_has_no_height_above_ground(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.sea())
    line = from_centre(ground, 90.0, 2500.0, eye=5.0, top={"amsl_m": 60.0})
    assert (line.to.agl_m, line.target.height_m) == (None, 0.0)
    assert line.target.shown is Shown.WHOLE
