"""The two ends: which ground they stand on and how high they reach."""

from typing import Any

import pytest

from profiler.errors import InputError, OutsideDemError
from profiler.model import EndReport
from profiler.sight.ends import end_report
from tests.looking import station


def end(ground: float | None, survey: bool = True, **heights: Any) -> EndReport:
    return end_report(
        station((56.5, -4.25), **heights), ground, role="to", survey=survey
    )


def test_a_height_above_ground_is_added_to_the_ground() -> None:
    made = end(100.0, agl_m=20.0)
    assert (made.ground_m, made.agl_m, made.amsl_m) == (100.0, 20.0, 120.0)
    assert (made.dem_ground_m, made.ground_from) == (100.0, "dem")


def test_a_height_above_sea_level_gives_the_height_above_ground() -> None:
    made = end(100.0, amsl_m=120.0)
    assert (made.ground_m, made.agl_m, made.amsl_m) == (100.0, 20.0, 120.0)


def test_surveyed_ground_wins_over_the_model() -> None:
    made = end(100.0, agl_m=20.0, surveyed_ground_m=95.0)
    assert (made.ground_m, made.amsl_m, made.dem_ground_m) == (95.0, 115.0, 100.0)
    assert made.ground_from == "surveyed"


def test_the_model_wins_when_the_survey_is_left_out() -> None:
    made = end(100.0, survey=False, agl_m=20.0, surveyed_ground_m=95.0)
    assert (made.ground_m, made.amsl_m, made.ground_from) == (100.0, 120.0, "dem")


def test_a_void_takes_a_height_above_sea_level() -> None:
    made = end(None, amsl_m=120.0)
    assert (made.ground_m, made.agl_m, made.amsl_m) == (None, None, 120.0)
    assert made.ground_from == "none"


def test_a_void_takes_surveyed_ground() -> None:
    made = end(None, agl_m=2.0, surveyed_ground_m=95.0)
    assert (made.ground_m, made.amsl_m, made.dem_ground_m) == (95.0, 97.0, None)


def test_a_void_refuses_a_height_above_ground() -> None:
    with pytest.raises(OutsideDemError, match=r"no ground is known .*--to-amsl"):
        end(None, agl_m=2.0)


def test_a_height_above_sea_level_under_the_ground_is_refused() -> None:
    with pytest.raises(InputError, match=r"3\.0 m under its ground of 100\.0 m"):
        end(100.0, amsl_m=97.0)


def test_a_height_above_sea_level_rounded_below_its_ground_stands_on_it() -> None:
    made = end(100.0004, amsl_m=100.0)
    assert (made.agl_m, made.amsl_m) == (0.0, 100.0004)


def test_above_its_survey_a_station_may_stand_under_the_ground_of_the_model() -> None:
    assert end(100.0, amsl_m=97.0, surveyed_ground_m=95.0).agl_m == 2.0
    other = end(100.0, survey=False, amsl_m=97.0, surveyed_ground_m=95.0)
    assert (other.ground_m, other.amsl_m) == (100.0, 97.0)
