"""A question made ready: counted ground, the aim point and its look."""

import numpy as np
import pytest

from profiler.sight.case import Case, least_ratio, look_at
from profiler.sight.ground import Ground, with_ends
from tests.looking import pieces


def case(ground: Ground, **changes: float | bool) -> Case:
    """A flat question over 3 km, both ends 5 m high."""
    settings: dict[str, float | bool] = {
        "length_m": 3000.0,
        "eye_m": 5.0,
        "top_m": 5.0,
        "eye_on_ground": False,
        "top_on_ground": False,
        "near_m": 0.0,
        "hill_m": 0.0,
        "kappa_per_m": 0.0,
        **changes,
    }
    return Case(ground=ground, **settings)  # type: ignore[arg-type]


def flat() -> Ground:
    return pieces(np.linspace(0.0, 3000.0, 101), np.zeros(101))


def summit() -> Ground:
    """A round top of 100 m at the target's end, sampled on posts 30 m apart."""
    dist = np.linspace(0.0, 3000.0, 101)
    return pieces(dist, np.maximum(100.0 - (dist - 3000.0) ** 2 / 500.0, 0.0))


def test_level_ground_is_cleared_by_the_height_of_the_line() -> None:
    look = look_at(case(flat()))
    assert (look.lowest_m, look.closest_m, look.is_blocked) == (5.0, 5.0, False)
    assert least_ratio(look) == pytest.approx(5.0 / 1500.0**2)


def test_ground_near_the_ends_is_not_counted() -> None:
    counted = case(flat(), near_m=100.0).counted()
    assert (counted.dist_m[0, 0], counted.dist_m[-1, 2]) == (100.0, 2900.0)


def test_the_own_hill_is_not_counted() -> None:
    counted = case(flat(), near_m=50.0, hill_m=200.0).counted()
    assert (counted.dist_m[0, 0], counted.dist_m[-1, 2]) == (50.0, 2800.0)
    assert case(flat(), hill_m=200.0).plain().counted().dist_m[-1, 2] == 3000.0


def test_the_aim_point_of_a_hill_is_what_stands_highest_in_the_view() -> None:
    asked = case(summit(), top_m=100.0, hill_m=300.0, eye_m=-500.0)
    aim = asked.aim()
    ground = summit()
    angle = (ground.height_m + 500.0) / np.maximum(ground.dist_m, 1.0)
    angle[ground.dist_m < 2700.0] = 0.0
    best = np.unravel_index(np.argmax(angle), angle.shape)
    assert tuple(aim) == (ground.dist_m[best], ground.height_m[best])
    assert aim.dist_m < 3000.0
    assert look_at(asked).line.length_m == aim.dist_m


def test_a_hill_below_the_line_leaves_the_aim_at_its_end() -> None:
    asked = case(summit(), top_m=100.0, hill_m=300.0, eye_m=900.0)
    assert asked.aim() == (3000.0, 100.0)


def test_without_a_hill_the_aim_is_the_top() -> None:
    assert case(summit(), top_m=100.0, eye_m=-500.0).aim() == (3000.0, 100.0)


def test_a_station_on_the_ground_grazes_nothing_beside_itself() -> None:
    ground = pieces(
        np.linspace(0.0, 3000.0, 5), np.array([0.0, -90.0, -40.0, -90.0, 0.0])
    )
    look = look_at(
        case(
            with_ends(ground, 3000.0),
            eye_m=0.0,
            top_m=0.0,
            eye_on_ground=True,
            top_on_ground=True,
        )
    )
    assert look.lowest_m < 0.001
    assert look.closest_m == pytest.approx(40.0)
    assert not look.is_blocked


def test_without_known_ground_nothing_is_low() -> None:
    ground = flat()
    ground.height_m[:] = np.nan
    look = look_at(case(ground))
    assert (look.lowest_m, look.closest_m) == (np.inf, np.inf)
    assert least_ratio(look) == np.inf
    assert look.void.dist_m.shape == (100, 3)


@pytest.mark.parametrize(("depth_m", "blocked"), [(0.0009, False), (0.0011, True)])
def test_a_line_is_blocked_from_1_mm_on(depth_m: float, blocked: bool) -> None:
    ground = pieces(
        np.array([0.0, 1000.0, 1500.0, 3000.0]), np.array([0.0, 0.0, 5 + depth_m, 0.0])
    )
    assert look_at(case(ground)).is_blocked is blocked
