"""Where a path is tight, against a dense scan, and which obstacles are distinct."""

import numpy as np
import pytest

from profiler.model.arrays import FloatArray
from profiler.radio.criteria import Criterion
from profiler.radio.obstruction import find_obstruction
from profiler.radio.tight import obstacles, tight_places, tightest_place
from profiler.sight.ground import Ground
from profiler.sight.line import Line
from tests.looking import pieces
from tests.mast_cases import LIGHT, RADIUS_M
from tests.oracle_earth import line_height

KAPPA = 3.0 / (4.0 * RADIUS_M)


def scanned(line: Line, ground: Ground, ask: Criterion, wave_m: float) -> float:
    """The least that is left over a dense scan of quadratic pieces."""
    least = np.inf
    crowded = np.concatenate([np.linspace(0, 1, 2001), np.geomspace(1e-9, 0.1, 2000)])
    for dist, height in zip(ground.dist_m, ground.height_m, strict=True):
        for u in (crowded, 1 - crowded):
            at = dist[0] + u * (dist[2] - dist[0])
            # Lagrange through the three samples
            z = (
                height[0] * (1 - u) * (1 - 2 * u)
                + height[1] * 4 * u * (1 - u)
                + height[2] * u * (2 * u - 1)
            )
            rest = line.length_m - at
            zone = np.sqrt(np.maximum(wave_m * at * rest / line.length_m, 0.0))
            ray = line_height(
                (line.kappa_per_m, line.eye_m, line.aim_m), line.length_m, at
            )
            left = ray - z - ask.f1_fraction * zone - ask.extra_m
            least = min(least, float(np.min(left)))
    return least


@pytest.mark.parametrize("frequency_hz", [10e6, 160e6, 6e9, 80e9])
@pytest.mark.parametrize("seed", range(6))
def test_the_lowest_place_is_that_of_a_dense_scan_of_coarse_cells(
    frequency_hz: float, seed: int
) -> None:
    rng = np.random.default_rng(seed)
    count = int(rng.integers(2, 40))
    dist = np.linspace(0.0, 90.0 * count, count + 1)
    ground = pieces(dist, rng.normal(0.0, rng.choice([0.5, 6.0]), dist.size))
    ground.height_m[:, 1] += rng.normal(0.0, 2.0, count)
    ends = ground.height_m[0, 0], ground.height_m[-1, 2]
    ask = Criterion(ke=4 / 3, f1_fraction=float(rng.choice([0.3, 1.0, 2.5])))
    agl = rng.uniform(0.5, 60.0, 2)
    line = Line(dist[-1], ends[0] + agl[0], ends[1] + agl[1], KAPPA)
    wave = LIGHT / frequency_hz
    truth = scanned(line, ground, ask, wave)
    every = tight_places(line, ground, ask, wave)
    assert every.left_m.min() == pytest.approx(truth, abs=1e-3)
    one = tightest_place(line, ground, ask, wave)
    assert one.left_m[0] == pytest.approx(every.left_m.min(), abs=1e-6)
    assert 0.0 < one.dist_m[0] < dist[-1]


def tight_over(
    heights: FloatArray, cell_m: float = 50.0
) -> tuple[list[int], FloatArray]:
    dist = np.linspace(0.0, cell_m * (heights.size - 1), heights.size)
    line = Line(float(dist[-1]), 60.0, 60.0, KAPPA)
    bare = Criterion(ke=4 / 3, f1_fraction=0.0)
    at = tight_places(line, pieces(dist, heights), bare, 0.05)
    return obstacles(at), at.dist_m


def bump(heights: FloatArray, post: int, top_m: float, wide: int = 6) -> FloatArray:
    raised = top_m * (1 - np.abs(np.arange(heights.size) - post) / wide)
    return np.maximum(heights, raised)


def test_neighbouring_posts_of_one_ridge_are_one_obstacle() -> None:
    found, dist = tight_over(bump(np.zeros(201), 80, 50.0))
    assert len([k for k in found if 3700.0 < dist[k] < 4300.0]) == 1


def test_two_ridges_are_two_obstacles_the_tighter_first() -> None:
    ground = bump(bump(np.zeros(201), 60, 50.0), 140, 52.0)
    found, dist = tight_over(ground)
    assert [round(float(dist[k])) for k in found[:2]] == [7000, 3000]


def test_a_saddle_as_high_as_its_ridges_parts_nothing() -> None:
    ground = np.zeros(201)
    ground[60:141] = 49.5
    ground[60] = ground[140] = 50.0
    found, dist = tight_over(ground)
    assert len([k for k in found if 2800.0 < dist[k] < 7200.0]) == 1


def test_a_path_without_ground_has_no_obstacles() -> None:
    none = pieces(np.zeros(1), np.zeros(1))
    line = Line(1e3, 10.0, 10.0, KAPPA)
    at = tight_places(line, none, Criterion(ke=1.0, f1_fraction=1.0), 0.1)
    assert obstacles(at) == []
    assert find_obstruction(none, line, 0.1) is None


def obstruction(heights: FloatArray) -> tuple[bool, int]:
    dist = np.linspace(0.0, 20e3, heights.size)
    line = Line(20e3, 500.0, 500.0, KAPPA)
    found = find_obstruction(pieces(dist, heights), line, 0.05)
    assert found is not None
    assert 0.0 < found.start_m <= found.end_m < 20e3
    return found.is_isolated, found.runs


def test_one_ridge_is_isolated_and_two_or_a_plateau_are_not() -> None:
    flat = np.zeros(401)
    assert obstruction(bump(flat, 200, 120.0)) == (True, 1)
    assert obstruction(bump(bump(flat, 120, 120.0), 280, 120.0)) == (False, 2)
    plateau = flat.copy()
    plateau[150:251] = 120.0
    assert obstruction(plateau) == (False, 1)


@pytest.mark.parametrize("seed", range(40))
def test_a_valley_is_obstructed_at_its_rims(seed: int) -> None:
    # the grazing line touches beside an antenna, where the zone has no width
    rng = np.random.default_rng(seed)
    sides = rng.uniform(20.0, 600.0, 2)
    share = np.linspace(-1.0, 1.0, 201)
    heights = np.where(share < 0.0, sides[0], sides[1]) * np.abs(share) ** 0.7
    is_isolated, runs = obstruction(heights)
    assert runs in (1, 2)
    assert is_isolated == (runs == 1)
