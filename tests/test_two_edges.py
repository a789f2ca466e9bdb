"""Two isolated edges, and which method fits a path."""

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from profiler import radio
from profiler.errors import InputError
from profiler.radio import (
    METHOD_FOR_PROFILES,
    choose_method,
    dominant_edge_loss,
    knife_edge_loss_db,
    nu_from_height,
    similar_edges_loss,
)


def edge_db(height_m: float, near_m: float, far_m: float, wave_m: float) -> float:
    nu = nu_from_height(height_m, from_m=near_m, to_m=far_m, wavelength_m=wave_m)
    return knife_edge_loss_db(nu)


@pytest.mark.regression
def test_similar_edges_lose_what_was_worked_out_before() -> None:
    """DE1 and DE2."""
    one = similar_edges_loss(50.0, 50.0, a_m=5e3, b_m=5e3, c_m=5e3, wavelength_m=0.1)
    assert one.first_db == one.second_db == pytest.approx(19.95387, abs=6e-6)
    assert one.correction_db == pytest.approx(1.24939, abs=6e-6)
    assert one.total_db == pytest.approx(41.15712, abs=6e-6)
    two = similar_edges_loss(100.0, 80.0, a_m=5e3, b_m=10e3, c_m=5e3, wavelength_m=0.15)
    assert two.total_db == pytest.approx(48.95048, abs=6e-6)
    assert one.correction_holds
    assert two.correction_holds


@pytest.mark.regression
def test_a_dominant_edge_loses_what_was_worked_out_before() -> None:
    """DE3."""
    loss = dominant_edge_loss(20.0, 12.0, a_m=4e3, b_m=6e3, c_m=10e3, wavelength_m=0.1)
    assert loss.first_db == pytest.approx(17.18631, abs=6e-6)
    assert loss.second_db == pytest.approx(5.71790, abs=6e-6)
    assert loss.correction_db == pytest.approx(-0.24127, abs=6e-6)
    assert loss.total_db == pytest.approx(22.66294, abs=6e-6)
    assert loss.correction_holds


HEIGHTS = st.floats(-100.0, 200.0)
SIDES = st.floats(100.0, 30e3)


@settings(max_examples=100, deadline=None)
@given(HEIGHTS, HEIGHTS, SIDES, SIDES, SIDES)
def test_looking_from_the_other_end_changes_nothing(
    first_m: float, second_m: float, a_m: float, b_m: float, c_m: float
) -> None:
    for method in (similar_edges_loss, dominant_edge_loss):
        there = method(first_m, second_m, a_m=a_m, b_m=b_m, c_m=c_m, wavelength_m=0.1)
        back = method(second_m, first_m, a_m=c_m, b_m=b_m, c_m=a_m, wavelength_m=0.1)
        assert there.total_db == pytest.approx(back.total_db, abs=1e-9)
        assert there.total_db >= 0.0


def test_edges_far_below_the_line_lose_exactly_nothing() -> None:
    for method in (similar_edges_loss, dominant_edge_loss):
        loss = method(-300.0, -200.0, a_m=5e3, b_m=5e3, c_m=5e3, wavelength_m=0.1)
        assert loss.total_db == 0.0
        assert not loss.correction_holds


def test_an_edge_without_loss_leaves_the_other_alone() -> None:
    loss = similar_edges_loss(50.0, -200.0, a_m=5e3, b_m=5e3, c_m=5e3, wavelength_m=0.1)
    assert loss.second_db == loss.correction_db == 0.0
    assert loss.total_db == loss.first_db
    below = dominant_edge_loss(50.0, -10.0, a_m=5e3, b_m=5e3, c_m=5e3, wavelength_m=0.1)
    assert below.correction_db == 0.0
    assert below.total_db == edge_db(50.0, 5e3, 10e3, 0.1) + below.second_db


def test_weak_edges_keep_the_correction_but_say_it_does_not_hold() -> None:
    loss = similar_edges_loss(5.0, 5.0, a_m=5e3, b_m=5e3, c_m=5e3, wavelength_m=0.1)
    assert loss.correction_db == pytest.approx(10.0 * math.log10(4.0 / 3.0))
    assert not loss.correction_holds


def test_the_edge_of_larger_share_dominates_not_the_higher_one() -> None:
    # 30 m near the end fill more of the zone than 40 m in the middle
    loss = dominant_edge_loss(
        40.0, 30.0, a_m=10e3, b_m=9.5e3, c_m=500.0, wavelength_m=0.1
    )
    assert loss.second_db == edge_db(30.0, 500.0, 19.5e3, 0.1)


@pytest.mark.parametrize(
    ("name", "bad"),
    [("a_m", 0.0), ("b_m", -1.0), ("c_m", math.inf), ("wavelength_m", 0.0)],
)
def test_distances_that_are_none_are_refused(name: str, bad: float) -> None:
    sides = {"a_m": 5e3, "b_m": 5e3, "c_m": 5e3, "wavelength_m": 0.1, name: bad}
    for method in (similar_edges_loss, dominant_edge_loss):
        with pytest.raises(InputError):
            method(1.0, 1.0, **sides)


def test_a_height_that_is_none_is_refused() -> None:
    with pytest.raises(InputError, match="Height of edge 2"):
        similar_edges_loss(1.0, math.nan, a_m=5e3, b_m=5e3, c_m=5e3, wavelength_m=0.1)


@pytest.mark.published
@pytest.mark.parametrize(
    ("smooth", "in_sight", "obstacles", "radius_known", "section"),
    [
        (True, False, 0, False, "3.1.1"),
        (True, True, 0, False, "3.2"),
        (False, True, 1, True, "4.2"),
        (False, False, 2, True, "4.4"),
        (False, False, 5, True, "4.4"),
        (False, False, 1, False, "4.1"),
        (False, True, 2, False, "4.3"),
        (False, False, 3, False, "4.5.2"),
        (False, True, 0, False, "4.5.2"),
    ],
)
def test_the_method_is_the_one_of_the_decision_tree(
    smooth: bool, in_sight: bool, obstacles: int, radius_known: bool, section: str
) -> None:
    """Rec. ITU-R P.526-16 figure 19, read as words."""
    choice = choose_method(
        smooth=smooth,
        in_sight=in_sight,
        obstacles=obstacles,
        radius_known=radius_known,
    )
    assert choice.section == f"Rec. ITU-R P.526-16 section {section}"
    assert choice.why
    assert choice.limits
    for name in choice.function.split(" or "):
        assert callable(getattr(radio, name))


def test_a_profile_from_an_elevation_model_goes_to_delta_bullington() -> None:
    assert METHOD_FOR_PROFILES.function == "diffraction_loss"


def test_fewer_than_no_obstacles_are_refused() -> None:
    with pytest.raises(InputError, match="0 or more, not -1"):
        choose_method(obstacles=-1, in_sight=True)
