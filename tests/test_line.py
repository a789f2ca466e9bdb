"""Margins along a line: spots, blocked stretches and the decisive one."""

import numpy as np
import pytest

from profiler.sight.ground import Ground, clip, mirrored
from profiler.sight.line import (
    Line,
    blocked_runs,
    decisive,
    first_to_touch,
    is_end_run,
    spots,
)
from tests.looking import pieces

#: Rounding of heights and places [m].
ROUNDING_M = 1e-6


def flat_line(length_m: float, height_m: float) -> Line:
    return Line(length_m, height_m, height_m, 0.0)


def walls(*tops: tuple[float, float], length_m: float = 1000.0) -> Ground:
    """Flat ground with walls of 20 m width: place and height of each."""
    dist, height = [0.0], [0.0]
    for at, top in tops:
        dist += [at - 10.0, at, at + 10.0]
        height += [0.0, top, 0.0]
    return pieces(np.array([*dist, length_m]), np.array([*height, 0.0]))


def parabola(top_m: float, at_m: float, curve: float, length_m: float) -> Ground:
    """One smooth hump in two pieces."""
    dist = np.array([[0.0, 0.2, 0.4], [0.4, 0.7, 1.0]]) * length_m
    return Ground(dist, top_m - curve * (dist - at_m) ** 2)


def picked(line: Line, ground: Ground, *, low_end_first: bool = True) -> float:
    """Distance of the decisive spot."""
    at = spots(line, ground)
    blocked = bool(at.margin_m.min() < -0.001)
    index = decisive(line, at, blocked=blocked, low_end_first=low_end_first)
    assert index is not None
    return float(at.dist_m[index])


def test_the_lowest_margin_of_a_smooth_hump_is_at_its_vertex() -> None:
    ground = parabola(50.0, 317.0, 1e-3, 1000.0)
    at = spots(flat_line(1000.0, 45.0), ground)
    low = int(np.argmin(at.margin_m))
    assert at.dist_m[low] == pytest.approx(317.0, abs=ROUNDING_M)
    assert at.margin_m[low] == pytest.approx(-5.0, abs=ROUNDING_M)


def test_no_finer_sampling_finds_a_place_that_touches_earlier() -> None:
    line = Line(1000.0, 60.0, 80.0, 1.2e-7)
    ground = parabola(50.0, 317.0, 1e-3, 1000.0)
    dist = np.linspace(0.5, 999.5, 200_001)
    margin = line.height(dist) - (50.0 - 1e-3 * (dist - 317.0) ** 2)
    scan = np.min(margin / (dist * (1000.0 - dist)))
    found = first_to_touch(line, spots(line, ground)).min()
    assert found <= scan
    assert found == pytest.approx(scan, rel=1e-7)


def test_spots_run_in_order_without_the_ends() -> None:
    at = spots(flat_line(1000.0, 5.0), walls((300.0, 9.0)))
    assert np.all(np.diff(at.dist_m) >= 0.0)
    assert at.dist_m[0] > 0.0
    assert at.dist_m[-1] < 1000.0


def test_no_ground_has_no_decisive_spot() -> None:
    at = spots(flat_line(1000.0, 5.0), clip(walls(), 0.0, 0.0))
    assert decisive(flat_line(1.0, 5.0), at, blocked=False, low_end_first=True) is None


def test_two_walls_are_two_stretches_each_with_its_worst_place() -> None:
    line, ground = flat_line(1000.0, 5.0), walls((300.0, 10.0), (600.0, 20.0))
    at = spots(line, ground)
    runs = blocked_runs(line, ground, at)
    found = [(r.start_m, r.end_m, at.dist_m[r.worst]) for r in runs]
    assert found == [
        pytest.approx((295.0, 305.0, 300.0)),
        pytest.approx((592.5, 607.5, 600.0)),
    ]


def test_stretches_that_touch_are_one() -> None:
    line = flat_line(400.0, 5.0)
    ground = pieces(
        np.array([0.0, 100.0, 200.0, 300.0, 400.0]), np.array([0.0, 20, 5.0, 20, 0.0])
    )
    runs = blocked_runs(line, ground, spots(line, ground))
    assert [(r.start_m, r.end_m) for r in runs] == [(25.0, 375.0)]


def test_ground_into_the_line_by_less_than_the_band_is_no_stretch() -> None:
    line, ground = flat_line(1000.0, 5.0), walls((300.0, 5.0009), (600.0, 6.0))
    runs = blocked_runs(line, ground, spots(line, ground))
    assert [r.start_m for r in runs] == [pytest.approx(600.0 - 10.0 / 6.0)]


def test_a_void_between_keeps_stretches_apart() -> None:
    line = flat_line(300.0, 5.0)
    ground = pieces(np.array([0.0, 100.0, 200.0, 300.0]), np.full(4, 9.0))
    ground.height_m[1] = np.nan
    runs = blocked_runs(line, ground.known, spots(line, ground.known))
    assert [(r.start_m, r.end_m) for r in runs] == [(0.0, 100.0), (200.0, 300.0)]


def test_a_hump_inside_one_piece_is_a_stretch() -> None:
    line, ground = flat_line(1000.0, 49.0), parabola(50.0, 700.0, 1e-3, 1000.0)
    (run,) = blocked_runs(line, ground, spots(line, ground))
    half = np.sqrt(1000.0)
    assert (run.start_m, run.end_m) == pytest.approx((700 - half, 700 + half))


# --- the decisive spot ---------------------------------------------------------------


def test_a_smooth_crest_decides_at_its_top_though_neighbours_are_within_1_mm() -> None:
    # before it was mended the neighbour nearest mid-path was taken: 1 mm too high
    crest = parabola(50.0, 317.0, 1e-8, 1000.0)
    assert picked(flat_line(1000.0, 45.0), crest) == pytest.approx(317.0, abs=0.5)
    clear = picked(flat_line(1000.0, 55.0), parabola(50.0, 317.0, 1e-6, 1000.0))
    dist = np.linspace(1.0, 999.0, 99_801)
    ratio = (5.0 + 1e-6 * (dist - 317.0) ** 2) / (dist * (1000.0 - dist))
    assert clear == pytest.approx(dist[np.argmin(ratio)], abs=0.1)


@pytest.mark.parametrize("height", [5.0, 30.0])
def test_of_equal_walls_the_one_nearest_mid_path_decides(height: float) -> None:
    ground = walls((200.0, 20.0), (450.0, 20.0), (900.0, 20.0))
    assert picked(flat_line(1000.0, height), ground) == pytest.approx(450.0, abs=0.1)


def test_a_wall_within_1_mm_of_the_worst_and_nearer_mid_path_decides() -> None:
    line = flat_line(1000.0, 5.0)
    assert picked(line, walls((200.0, 20.0009), (450.0, 20.0))) == 450.0
    assert picked(line, walls((200.0, 20.0011), (450.0, 20.0))) == 200.0


@pytest.mark.parametrize(("low_end_first", "at"), [(True, 300.0), (False, 700.0)])
def test_walls_equally_far_from_mid_path_go_to_the_lower_end(
    low_end_first: bool, at: float
) -> None:
    ground = walls((300.0, 20.0), (700.0, 20.0))
    for height in (5.0, 30.0):
        found = picked(flat_line(1000.0, height), ground, low_end_first=low_end_first)
        assert found == pytest.approx(at, abs=0.1)


def test_what_does_not_block_cannot_decide_a_blocked_line() -> None:
    # 0.6 mm nearer mid-path ties with the 1.5 mm that blocks, but it does not block
    ground = walls((200.0, 5.0015), (500.0, 5.0006))
    assert picked(flat_line(1000.0, 5.0), ground) == 200.0


@pytest.mark.parametrize("height", [4.0, 9.0, 30.0])
def test_the_decisive_place_is_the_same_from_both_ends(height: float) -> None:
    line, back = Line(1000.0, height, 12.0, 1e-7), Line(1000.0, 12.0, height, 1e-7)
    ground = walls((130.0, 9.0), (400.0, 8.0), (820.0, 10.0))
    there = picked(line, ground)
    assert picked(back, mirrored(ground, 1000.0)) == pytest.approx(1000.0 - there)


def test_on_level_ground_under_a_level_line_mid_path_decides() -> None:
    ground = pieces(np.linspace(0.0, 1000.0, 38), np.zeros(38))
    assert picked(flat_line(1000.0, 3.0), ground) == 500.0


# --- the run beside a station on the ground ------------------------------------------


def test_only_ground_from_which_the_margin_rises_belongs_to_a_station() -> None:
    line = flat_line(400.0, 0.0)
    ground = pieces(
        np.array([0.0, 100.0, 200.0, 300.0, 400.0]), np.array([0.0, -9, -1.0, -9, 0.0])
    )
    at = spots(line, ground)
    run = is_end_run(at, eye_on_ground=True, aim_on_ground=True)
    rest = at.dist_m[~run]
    assert rest.min() == pytest.approx(100.0)
    assert rest.max() == pytest.approx(300.0)
    assert not np.any(is_end_run(at, eye_on_ground=False, aim_on_ground=False))


def test_ground_that_falls_away_all_the_way_belongs_to_its_station() -> None:
    ground = pieces(np.array([0.0, 50.0, 100.0]), np.array([0.0, -5.0, -20.0]))
    at = spots(Line(100.0, 0.0, 0.0, 0.0), ground)
    assert np.all(is_end_run(at, eye_on_ground=True, aim_on_ground=False))
