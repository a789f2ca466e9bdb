"""Cascaded cylinders: no published example exists, so geometry must speak."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from profiler.errors import InputError
from profiler.model import FloatArray
from profiler.radio import (
    CylinderLoss,
    cylinder_loss,
    knife_edge_loss_db,
    nu_from_height,
    nu_from_share_of_f1,
    rounded_obstacle_loss,
    share_of_f1,
    similar_edges_loss,
    stretched_string,
)

RADIUS_M = 8.5e6
WAVE_M = 0.1
VALLEY_M = -3000.0


def loss_of(
    dist_m: FloatArray,
    height_m: FloatArray,
    agl_m: tuple[float, float] = (20.0, 20.0),
    radius_m: float = RADIUS_M,
) -> CylinderLoss:
    return cylinder_loss(
        dist_m,
        height_m,
        from_agl_m=agl_m[0],
        to_agl_m=agl_m[1],
        wavelength_m=WAVE_M,
        effective_radius_m=radius_m,
    )


def ridges(
    length_m: float, *tops: tuple[float, float]
) -> tuple[FloatArray, FloatArray]:
    """Ground far below the line, but for single samples and the ends at 0 m."""
    dist_m = np.arange(0.0, length_m + 1.0, 100.0)
    height_m = np.full_like(dist_m, VALLEY_M)
    height_m[0] = height_m[-1] = 0.0
    for at_m, top_m in tops:
        height_m[int(at_m // 100.0)] = top_m
    return dist_m, height_m


@st.composite
def profiles(draw: st.DrawFn) -> tuple[FloatArray, FloatArray]:
    size = draw(st.integers(3, 80))
    seed = draw(st.integers(0, 2**32 - 1))
    rng = np.random.default_rng(seed)
    roughness_m = draw(st.sampled_from([1.0, 10.0, 60.0]))
    dist_m = np.concatenate([[0.0], np.cumsum(rng.uniform(40.0, 320.0, size - 1))])
    return dist_m, np.cumsum(rng.normal(0.0, roughness_m, size))


AGL = st.floats(0.5, 150.0)


@settings(max_examples=200, deadline=None)
@given(profiles(), AGL, AGL)
def test_looking_from_the_other_end_changes_nothing(
    profile: tuple[FloatArray, FloatArray], from_m: float, to_m: float
) -> None:
    dist_m, height_m = profile
    there = loss_of(dist_m, height_m, (from_m, to_m))
    back = loss_of(dist_m[-1] - dist_m[::-1], height_m[::-1].copy(), (to_m, from_m))
    assert there.total_db == pytest.approx(back.total_db, abs=1e-6)
    assert len(there.cylinders) == len(back.cylinders)
    assert len(there.between_db) == len(there.cylinders) + 1


@settings(max_examples=200, deadline=None)
@given(profiles(), AGL, AGL)
def test_the_string_touches_and_nothing_stands_above_it(
    profile: tuple[FloatArray, FloatArray], from_m: float, to_m: float
) -> None:
    dist_m, height_m = profile
    height_m = height_m.copy()
    height_m[0] += from_m
    height_m[-1] += to_m
    touched = stretched_string(dist_m, height_m, RADIUS_M)
    at = [0, *touched, dist_m.size - 1]
    bent_m = height_m - dist_m**2 / (2.0 * RADIUS_M)
    string_m = np.interp(dist_m, dist_m[at], bent_m[at])
    assert np.all(bent_m <= string_m + 1e-9)
    slopes = np.diff(bent_m[at]) / np.diff(dist_m[at])
    assert np.all(np.diff(slopes) < 0.0)


@settings(max_examples=100, deadline=None)
@given(profiles(), AGL, AGL)
def test_every_vertex_stands_over_its_own_obstacle(
    profile: tuple[FloatArray, FloatArray], from_m: float, to_m: float
) -> None:
    dist_m, height_m = profile
    for one in loss_of(dist_m, height_m, (from_m, to_m)).cylinders:
        assert dist_m[one.first] - 1e-6 <= one.vertex_m <= dist_m[one.last] + 1e-6
        assert one.height_m >= 0.0
        assert one.radius_m >= 0.0


def test_one_sharp_ridge_is_one_rounded_obstacle() -> None:
    dist_m, height_m = ridges(12e3, (4e3, 150.0))
    loss = loss_of(dist_m, height_m, radius_m=math.inf)
    (one,) = loss.cylinders
    assert (one.first, one.last, one.vertex_m) == (40, 40, 4e3)
    assert one.height_m == pytest.approx(130.0, abs=1e-9)
    nu = nu_from_height(130.0, from_m=4e3, to_m=8e3, wavelength_m=WAVE_M)
    turned = 2.0 * (150.0 - VALLEY_M) / 100.0
    radius_m = 200.0 / turned * (1.0 - math.exp(-4.0 * nu)) ** 3
    assert one.radius_m == pytest.approx(radius_m, rel=1e-12)
    alone = rounded_obstacle_loss(
        130.0, from_m=4e3, to_m=8e3, radius_m=radius_m, wavelength_m=WAVE_M
    )
    assert loss.total_db == pytest.approx(alone.total_db, abs=1e-9)
    assert loss.spreading_db == 0.0
    assert loss.between_db == (0.0, 0.0)


def test_the_bent_earth_raises_a_ridge_by_its_bulge() -> None:
    dist_m, height_m = ridges(12e3, (4e3, 150.0))
    (one,) = loss_of(dist_m, height_m).cylinders
    assert one.height_m == pytest.approx(130.0 + 4e3 * 8e3 / (2.0 * RADIUS_M), abs=1e-9)


def test_two_sharp_ridges_have_the_correction_of_two_similar_edges() -> None:
    dist_m, height_m = ridges(15e3, (5e3, 120.0), (11e3, 120.0))
    loss = loss_of(dist_m, height_m, radius_m=math.inf)
    edges = similar_edges_loss(
        100.0, 100.0, a_m=5e3, b_m=6e3, c_m=4e3, wavelength_m=WAVE_M
    )
    assert loss.spreading_db == pytest.approx(edges.correction_db, abs=1e-12)
    parts_db = [one.loss.knife_edge_db for one in loss.cylinders]
    assert parts_db == pytest.approx([edges.first_db, edges.second_db], abs=1e-9)


def test_three_sharp_ridges_spread_as_printed() -> None:
    """Rec. ITU-R P.526-16 (46) to (48), multiplied out by hand."""
    dist_m, height_m = ridges(20e3, (4e3, 120.0), (9e3, 150.0), (17e3, 120.0))
    loss = loss_of(dist_m, height_m)
    s1, s2 = (4e3, 5e3, 8e3), (5e3, 8e3, 3e3)
    p_a = s1[0] * math.prod(s2) * (s1[0] + sum(s2))
    p_b = s1[0] * s2[-1] * math.prod(a + b for a, b in zip(s1, s2, strict=True))
    spread_db = -20.0 * math.log10(math.sqrt(p_a / p_b))
    assert loss.spreading_db == pytest.approx(spread_db, abs=1e-9)
    own_db = sum(one.loss.total_db for one in loss.cylinders)
    total_db = own_db + sum(loss.between_db) + spread_db
    assert loss.total_db == pytest.approx(total_db, abs=1e-9)


def test_a_table_mountain_is_one_obstacle_with_its_vertex_between_the_edges() -> None:
    dist_m, height_m = ridges(10e3)
    height_m[40:61] = 200.0
    loss = loss_of(dist_m, height_m)
    (one,) = loss.cylinders
    assert (one.first, one.last) == (40, 60)
    assert one.vertex_m == pytest.approx(5e3, abs=1e-6)
    # both tangents rise 180 m over 4 km, less their fall over the bent earth
    slope = 180.0 / 4e3 - 4e3 / (2.0 * RADIUS_M)
    vertex_m = 20.0 + 5e3 * slope + 5e3**2 / (2.0 * RADIUS_M)
    raised_m = vertex_m + 5e3**2 / (2.0 * RADIUS_M) - 20.0
    assert one.height_m == pytest.approx(raised_m, abs=1e-9)


def test_samples_more_than_250_m_apart_stay_two_obstacles() -> None:
    for step_m, obstacles in ((250.0, 1), (251.0, 2)):
        dist_m = np.array([0.0, 2e3, 2e3 + step_m, 4e3 + step_m])
        height_m = np.array([0.0, 100.0, 100.0, 0.0])
        assert len(loss_of(dist_m, height_m).cylinders) == obstacles


def test_a_smooth_bulge_has_no_radius_of_its_own() -> None:
    """The printed t (122) takes the bulge off, so that t <= 0 on level ground."""
    dist_m = np.arange(0.0, 60_001.0, 200.0)
    loss = loss_of(dist_m, np.zeros_like(dist_m))
    (one,) = loss.cylinders
    assert one.radius_m == 0.0
    assert one.loss.rounding_db == 0.0
    assert one.vertex_m == pytest.approx(30e3, abs=1e-3)


def test_a_flat_shelf_turned_by_less_than_its_own_arc_takes_the_middle() -> None:
    # antennas on the ground: the string hugs the bulge from end to end
    dist_m = np.arange(0.0, 20_001.0, 200.0)
    loss = loss_of(dist_m, np.zeros_like(dist_m), (1e-9, 1e-9))
    (one,) = loss.cylinders
    assert one.vertex_m == pytest.approx(10e3, abs=1.0)


def test_ground_below_a_line_in_sight_costs_what_its_narrowest_place_does() -> None:
    dist_m = np.arange(0.0, 10_001.0, 100.0)
    height_m = np.full_like(dist_m, -200.0)
    height_m[[0, -1]] = 0.0
    height_m[30:70] = 15.0
    loss = loss_of(dist_m, height_m, radius_m=math.inf)
    assert loss.cylinders == ()
    share = share_of_f1(
        20.0 - height_m[1:-1], dist_m[1:-1], length_m=10e3, wavelength_m=WAVE_M
    )
    nu = nu_from_share_of_f1(float(np.min(share)))
    assert loss.total_db == pytest.approx(knife_edge_loss_db(nu), abs=1e-12)
    assert loss.total_db > 0.0


def test_ground_that_only_falls_away_from_an_end_costs_nothing() -> None:
    # a slope falling from both ends to one lowest sample: both walks meet there
    dist_m = np.arange(0.0, 2001.0, 100.0)
    height_m = np.abs(dist_m - 1e3) / 50.0
    loss = loss_of(dist_m, height_m)
    assert loss.total_db == 0.0


def test_a_clear_line_loses_exactly_nothing() -> None:
    dist_m = np.linspace(0.0, 10e3, 101)
    loss = loss_of(dist_m, 3.0 * np.sin(dist_m / 300.0), (100.0, 100.0))
    assert loss.total_db == 0.0
    assert loss.spreading_db == 0.0


def test_samples_on_one_flat_line_leave_the_string_untouched() -> None:
    dist_m = np.arange(0.0, 1001.0, 100.0)
    assert stretched_string(dist_m, np.zeros(11), math.inf) == ()


def test_many_ridges_do_not_overflow() -> None:
    tops = [
        (float(at), 300.0 - (at - 60e3) ** 2 / 2e7) for at in range(1000, 120_000, 800)
    ]
    loss = loss_of(*ridges(120e3, *tops))
    assert len(loss.cylinders) > 50
    assert math.isfinite(loss.total_db)


@pytest.mark.parametrize(
    ("bad", "sentence"),
    [
        ({"from_agl_m": -1.0}, "first antenna above ground"),
        ({"to_agl_m": math.nan}, "second antenna above ground"),
        ({"wavelength_m": 300.0}, "outside 1 mm to 30 m"),
        ({"effective_radius_m": -1.0}, "must be above 0"),
    ],
)
def test_a_number_outside_its_range_is_refused(
    bad: dict[str, float], sentence: str
) -> None:
    good = {"from_agl_m": 1.0, "to_agl_m": 1.0, "wavelength_m": WAVE_M}
    good["effective_radius_m"] = RADIUS_M
    with pytest.raises(InputError, match=sentence):
        cylinder_loss(np.array([0.0, 1e3, 2e3]), np.zeros(3), **{**good, **bad})


def test_a_profile_without_a_middle_is_refused() -> None:
    with pytest.raises(InputError, match="none between its ends"):
        loss_of(np.array([0.0, 1e3]), np.zeros(2))
