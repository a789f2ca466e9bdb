"""Antenna heights against dense scanning, and what is refused."""

import math

import numpy as np
import pytest

from profiler.errors import InputError
from profiler.radio.limits import MastLimits
from profiler.radio.masts import plan_masts
from tests.looking import pieces
from tests.mast_cases import ASKS, LIGHT, RADIUS_M, bench_of, scene
from tests.oracle_masts import Ask, Scene, far_needed, left

#: a scan of places misses a lowest one by less than this [m]
SCAN_M = 2e-4
SEEDS = range(50)
#: places beside each end where a long lever hangs on them
CROWD = 8000


@pytest.mark.parametrize("seed", SEEDS)
def test_the_cheapest_pair_is_that_of_all_pairs_of_sections(seed: int) -> None:
    made = scene(seed)
    near = MastLimits(section_m=6.0, most_m=240.0, least_m=4.0)
    far = MastLimits(section_m=2.0, most_m=160.0, cost_per_m=(0.6, 1.0, 1.7)[seed % 3])
    plan = plan_masts(bench_of(made), near=near, far=far)
    price = {}
    for from_agl in np.arange(6.0, 240.1, 6.0):
        needed = far_needed(made, ASKS, float(from_agl))
        for to_agl in np.arange(0.0, 160.1, 2.0):
            if to_agl >= needed - 1e-6:
                price[from_agl, to_agl] = from_agl + far.cost_per_m * to_agl
    if not price:
        assert plan.cheapest is None
        return
    assert plan.cheapest is not None
    assert plan.cheapest.cost == pytest.approx(min(price.values()), abs=1e-6)
    assert (plan.cheapest.from_agl_m, plan.cheapest.to_agl_m) in price


@pytest.mark.parametrize("seed", SEEDS)
def test_equal_heights_do_and_two_centimetres_less_do_not(seed: int) -> None:
    made = scene(seed)
    plan = plan_masts(bench_of(made))
    assert plan.equal is not None
    agl = plan.equal.from_agl_m
    assert plan.equal.to_agl_m == agl
    assert left(made, ASKS, agl, agl) >= -SCAN_M
    assert left(made, ASKS, agl - 0.02, agl - 0.02) < 0.0
    assert min(plan.equal.margins_m) == pytest.approx(
        left(made, ASKS, agl, agl), abs=SCAN_M
    )


@pytest.mark.parametrize("seed", SEEDS)
def test_the_least_height_at_one_end_is_exact_to_a_centimetre(seed: int) -> None:
    made = scene(seed)
    plan = plan_masts(bench_of(made), given_from_agl_m=35.0, given_to_agl_m=35.0)
    mirror = Scene(made.length_m - made.dist_m[::-1], made.height_m[::-1], *made[2:])
    for ground, pair, beyond in (
        (made, plan.for_given_from, plan.to_beyond_agl_m),
        (mirror, plan.for_given_to, plan.from_beyond_agl_m),
    ):
        needed = far_needed(ground, ASKS, 35.0, CROWD)
        assert beyond is None
        if pair is None:
            assert needed > 1000.0 - SCAN_M
            continue
        agl = pair.to_agl_m if ground is made else pair.from_agl_m
        assert left(ground, ASKS, 35.0, agl) >= -SCAN_M
        assert needed - 1e-3 <= agl <= needed + 0.01 + 1e-6
        if agl > 0.02:
            assert left(ground, ASKS, 35.0, agl - 0.02) < 0.0


@pytest.mark.parametrize("seed", range(20))
def test_every_point_of_the_trade_off_does_and_is_the_least(seed: int) -> None:
    made = scene(seed)
    near, far = MastLimits(least_m=1.0), MastLimits(least_m=2.0, most_m=300.0)
    plan = plan_masts(bench_of(made), near=near, far=far)
    assert len(plan.curve) > 10
    assert sorted(plan.curve, key=lambda p: p[0]) == list(plan.curve)
    for from_agl, to_agl, criterion in plan.curve:
        needed = max(far_needed(made, ASKS, from_agl, CROWD), 2.0)
        assert needed - 2e-3 <= to_agl <= needed + 0.01 + 1e-6
        assert from_agl >= 1.0
        assert to_agl <= 300.0
        assert criterion in plan.criteria


@pytest.mark.parametrize("seed", range(10))
def test_the_ends_exchanged_mirror_the_plan(seed: int) -> None:
    made = scene(seed)
    turned = Scene(made.length_m - made.dist_m[::-1], made.height_m[::-1], *made[2:])
    one = plan_masts(bench_of(made), given_from_agl_m=40.0, given_to_agl_m=50.0)
    two = plan_masts(bench_of(turned), given_from_agl_m=50.0, given_to_agl_m=40.0)
    assert one.equal is not None
    assert two.equal is not None
    assert one.equal.from_agl_m == two.equal.from_agl_m
    for first, second in (
        (one.for_given_to, two.for_given_from),
        (one.for_given_from, two.for_given_to),
    ):
        assert (first is None) == (second is None)
        if first is not None and second is not None:
            assert first.from_agl_m == second.to_agl_m
            assert first.to_agl_m == second.from_agl_m


def smooth(length_m: float = 40e3, frequency_hz: float = 6e9) -> Scene:
    dist = np.linspace(0.0, length_m, 401)
    return Scene(dist, np.zeros(dist.size), LIGHT / frequency_hz, RADIUS_M)


def test_a_height_above_the_limit_by_less_than_a_step_is_not_offered() -> None:
    free = plan_masts(bench_of(smooth()), given_to_agl_m=45.0)
    assert free.for_given_to is not None
    needs = free.for_given_to.from_agl_m
    limits = MastLimits(most_m=needs - 0.005)
    plan = plan_masts(bench_of(smooth()), near=limits, given_to_agl_m=45.0)
    assert plan.for_given_to is None
    assert plan.from_beyond_agl_m == needs
    assert plan_masts(
        bench_of(smooth()), near=MastLimits(most_m=needs), given_to_agl_m=45.0
    ).for_given_to


def test_a_flat_trade_off_with_centimetre_steps_is_settled() -> None:
    # costs that make many pairs equally cheap over a smooth hull once ran out of trials
    asks: list[Ask] = [(4 / 3, 0.0, 15.0)]
    near = MastLimits(most_m=80.0, cost_per_m=5.0)
    plan = plan_masts(
        bench_of(smooth(), asks), near=near, far=MastLimits(cost_per_m=0.3)
    )
    assert plan.cheapest is not None
    assert min(plan.cheapest.margins_m) >= -1e-6


def test_equal_heights_stand_in_the_sections_of_both_ends() -> None:
    near, far = MastLimits(section_m=5.0), MastLimits(section_m=4.0)
    equal = plan_masts(bench_of(smooth()), near=near, far=far).equal
    assert equal is not None
    assert equal.from_agl_m == equal.to_agl_m == 60.0


def test_an_antenna_below_the_extra_metres_at_its_foot_has_no_partner() -> None:
    asks: list[Ask] = [(4 / 3, 0.6, 3.0)]
    plan = plan_masts(bench_of(smooth(), asks), given_to_agl_m=1.0)
    assert plan.for_given_to is None
    assert plan.from_beyond_agl_m is None


def test_a_sample_beside_the_antenna_does_not_turn_the_ray_round() -> None:
    dist = np.concatenate([[0.0, 0.001], np.linspace(50.0, 20e3, 400)])
    made = Scene(dist, np.zeros(dist.size), 0.05, RADIUS_M)
    asks: list[Ask] = [(4 / 3, 0.6, 3.0)]
    assert bench_of(made, asks).to_agl(1.0).agl_m > 1000.0
    plan = plan_masts(bench_of(made, asks), given_from_agl_m=1.0)
    assert plan.for_given_from is None


def test_no_pair_within_low_limits_is_no_pair() -> None:
    low = MastLimits(most_m=5.0)
    plan = plan_masts(bench_of(smooth()), near=low, far=low)
    assert plan.equal is None
    assert plan.cheapest is None
    assert plan.curve == ()


def test_masts_that_cost_nothing_are_planned_all_the_same() -> None:
    free = MastLimits(cost_per_m=0.0, section_m=3.0, most_m=300.0)
    plan = plan_masts(bench_of(smooth()), near=free, far=free)
    assert plan.cheapest is not None
    assert plan.cheapest.cost == 0.0
    assert plan.cheapest.from_agl_m == plan.cheapest.to_agl_m == 54.0


def test_too_many_pairs_of_one_price_are_refused() -> None:
    free = MastLimits(cost_per_m=0.0, most_m=5000.0)
    with pytest.raises(InputError, match="cost alike; use longer sections"):
        plan_masts(bench_of(smooth()), near=free, far=free)


@pytest.mark.parametrize(
    ("limits", "message"),
    [
        ({"cost_per_m": -1.0}, "must be 0 or more, not -1"),
        ({"least_m": -2.0}, "must be 0 or more, not -2"),
        ({"most_m": math.inf}, "must be 0 or more, not inf"),
        ({"section_m": math.nan}, "must be 0 or more, not nan"),
        ({"section_m": 0.0}, "A mast section of 0 m is below 0.01 m"),
        ({"least_m": 50.0, "most_m": 40.0}, "lowest height allowed, 50 m, is above"),
        (
            {"least_m": 41.0, "most_m": 44.0, "section_m": 10.0},
            "No multiple of 10 m lies between 41 and 44 m",
        ),
    ],
)
def test_limits_that_cannot_be_built_are_refused(
    limits: dict[str, float], message: str
) -> None:
    with pytest.raises(InputError, match=message):
        MastLimits(**limits)


@pytest.mark.parametrize("agl_m", [-1.0, math.nan, math.inf])
def test_a_given_height_must_be_a_height(agl_m: float) -> None:
    with pytest.raises(InputError, match="given height must be 0 m or more"):
        plan_masts(bench_of(smooth()), given_to_agl_m=agl_m)


def test_a_given_height_above_its_own_limit_is_refused() -> None:
    with pytest.raises(InputError, match="45 m is above the highest allowed there, 20"):
        plan_masts(bench_of(smooth()), far=MastLimits(most_m=20.0), given_to_agl_m=45.0)


def test_a_ke_that_turns_the_earth_under_the_path_is_refused() -> None:
    with pytest.raises(InputError, match="turns a quarter circle or more over 40 km"):
        bench_of(smooth(), [(1e-3, 0.6, 0.0)])
    with pytest.raises(InputError, match="no line exists"):
        bench_of(smooth(), [(1e-300, 0.6, 0.0)])


def test_a_path_without_ground_has_no_heights() -> None:
    from profiler.radio.bench import bench_for

    with pytest.raises(InputError, match="no height can be named"):
        bench_for(
            pieces(np.zeros(1), np.zeros(1)),
            length_m=1e3,
            from_ground_m=0.0,
            to_ground_m=0.0,
            criteria=(),
            wavelength_m=0.1,
            radius_m=RADIUS_M,
        )
