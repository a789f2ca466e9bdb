"""What must hold for every line of sight over made ground."""

from dataclasses import replace
from typing import Any

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from profiler.constants import FOOT_M
from profiler.model import Air, SightLine
from profiler.sight import judge
from profiler.sight.case import Case, look_at
from profiler.sight.ground import Ground, with_ends
from profiler.terrain import Terrain, open_terrain
from tests import terrain
from tests.looking import Pair, opened, seen, station
from tests.terrain import place

#: Rounding of places along a path taken from either end, times slopes [m].
ROUNDING_M = 1e-6
#: The grazing band and the finest margin that the record prints [m].
MILLIMETRE = 1e-3
#: From worse to better.
ORDER = {"blocked": 0, "undetermined": 1, "clear": 2}
#: Amount by which all ground is raised [m].
RAISED_M = 100.0

quick = settings(
    max_examples=25,
    deadline=None,
    derandomize=True,
    suppress_health_check=[HealthCheck.function_scoped_fixture],
)
spots = st.tuples(st.floats(0.0, 360.0), st.floats(0.0, 1600.0))
heights = st.one_of(st.just(0.0), st.floats(0.0, 150.0))
bending = st.sampled_from([-2.0, 0.0, 0.13, 0.25, 1.0, 3.0])


def made() -> terrain.Terrain:
    """Rough ground with a void in it."""
    ground = terrain.fractal(21, shape=(120, 120), relief_m=300.0)
    ground.posts[70, 80] = np.nan
    return ground


@pytest.fixture(scope="module")
def ground(tmp_path_factory: pytest.TempPathFactory) -> Terrain:
    return opened(tmp_path_factory.mktemp("ground"), made())


@pytest.fixture(scope="module")
def variants(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Terrain]:
    """The same ground in feet, and 100 m higher."""
    folder = tmp_path_factory.mktemp("variants")
    posts, transform, crs, _ = made()
    feet, higher = folder / "feet.tif", folder / "higher.tif"
    terrain.write_geotiff(feet, posts / FOOT_M, transform, crs, unit="ft")
    terrain.write_geotiff(higher, posts + RAISED_M, transform, crs, unit="m")
    return {"feet": open_terrain(feet), "higher": open_terrain(higher)}


def far_enough(a: Pair, b: Pair) -> tuple[Pair, Pair] | None:
    """Two places more than 100 m apart, none beside the void; else None."""
    (az_a, r_a), (az_b, r_b) = a, b
    turn = np.radians(az_a - az_b)
    apart = np.sqrt(max(r_a**2 + r_b**2 - 2 * r_a * r_b * np.cos(turn), 0.0))
    for azimuth, r in (a, b):
        east, north = r * np.sin(np.radians(azimuth)), r * np.cos(np.radians(azimuth))
        if np.hypot(east - 600.0, north + 300.0) < 60.0:
            return None
    return (place(*a), place(*b)) if apart > 100.0 else None


def answer(terrain_: Terrain, ends: tuple[Pair, Pair], **asked: Any) -> SightLine:
    return seen(terrain_, *ends, own_hill_m=0.0, **asked)


@quick
@given(a=spots, b=spots, eye=heights, top=heights, kr=bending)
def test_both_ends_get_the_same_verdict_margin_and_place(
    ground: Terrain, a: Pair, b: Pair, eye: float, top: float, kr: float
) -> None:
    if (ends := far_enough(a, b)) is None:
        return
    there = answer(ground, ends, eye=eye, top=top, kr=kr)
    back = answer(ground, ends[::-1], eye=top, top=eye, kr=kr)
    assert (there.verdict, there.grazing) == (back.verdict, back.grazing)
    assert there.decisive is not None
    assert back.decisive is not None
    assert there.margin_m == pytest.approx(back.margin_m, abs=ROUNDING_M)
    both = there.decisive.distance_m + back.decisive.distance_m
    # beside a station on the ground any place within the last centimetre is the end
    assert both == pytest.approx(there.path.length_m, abs=0.011)
    ours = [(s.start_m, s.end_m) for s in there.blocked_stretches]
    length = there.path.length_m
    other = [(length - s.end_m, length - s.start_m) for s in back.blocked_stretches]
    assert np.array(ours) == pytest.approx(np.array(other[::-1]), abs=1e-3)


@quick
@given(a=spots, b=spots, eye=heights, top=heights, kr=bending)
def test_all_ground_higher_moves_no_margin_by_a_millimetre(
    ground: Terrain,
    variants: dict[str, Terrain],
    a: Pair,
    b: Pair,
    eye: float,
    top: float,
    kr: float,
) -> None:
    # exact geometry: on a circle wider by z the bulge is smaller by its share kappa z;
    # at most 3.2 km of path, kappa 4.7e-7 and 100 m that is 3e-5 m
    if (ends := far_enough(a, b)) is None:
        return
    low = answer(ground, ends, eye=eye, top=top, kr=kr)
    high = answer(variants["higher"], ends, eye=eye, top=top, kr=kr)
    both = np.isfinite(low.margin_along_m)
    moved = np.abs(high.margin_along_m[both] - low.margin_along_m[both])
    assert np.max(moved, initial=0.0) < 5e-5


@quick
@given(a=spots, b=spots, eye=heights, top=heights, more=st.floats(0.001, 80.0))
def test_a_higher_mast_never_loses_clearance(
    ground: Terrain, a: Pair, b: Pair, eye: float, top: float, more: float
) -> None:
    if (ends := far_enough(a, b)) is None:
        return
    low = answer(ground, ends, eye=eye, top=top, kr=0.13)
    for raised in ({"eye": eye + more, "top": top}, {"eye": eye, "top": top + more}):
        high = answer(ground, ends, kr=0.13, **raised)
        gain = high.margin_along_m - low.margin_along_m
        assert np.nanmin(gain) >= -ROUNDING_M
        assert ORDER[high.verdict] >= ORDER[low.verdict]
        if raised["top"] == top:
            assert high.target.hidden_m <= low.target.hidden_m + ROUNDING_M


@quick
@given(a=spots, b=spots, eye=heights, top=heights, less=st.floats(0.01, 2.0))
def test_more_bending_never_loses_clearance(
    ground: Terrain, a: Pair, b: Pair, eye: float, top: float, less: float
) -> None:
    if (ends := far_enough(a, b)) is None:
        return
    low = answer(ground, ends, eye=eye, top=top, kr=0.13)
    high = answer(ground, ends, eye=eye, top=top, kr=0.13 + less)
    assert np.nanmin(high.margin_along_m - low.margin_along_m) >= -ROUNDING_M
    assert ORDER[high.verdict] >= ORDER[low.verdict]


@quick
@given(a=spots, b=spots, eye=heights, top=heights)
def test_the_same_ground_in_feet_gives_the_same_answer(
    ground: Terrain,
    variants: dict[str, Terrain],
    a: Pair,
    b: Pair,
    eye: float,
    top: float,
) -> None:
    if (ends := far_enough(a, b)) is None:
        return
    metres = answer(ground, ends, eye=eye, top=top, kr=0.13)
    feet = answer(variants["feet"], ends, eye=eye, top=top, kr=0.13)
    assert feet.verdict == metres.verdict
    assert feet.margin_m == pytest.approx(metres.margin_m, abs=ROUNDING_M)
    assert feet.target.hidden_m == pytest.approx(metres.target.hidden_m, abs=1e-4)


@quick
@given(a=spots, b=spots, eye=heights, top=heights, sign=st.sampled_from([1.0, -1.0]))
def test_an_endless_radius_is_flat(
    ground: Terrain, a: Pair, b: Pair, eye: float, top: float, sign: float
) -> None:
    if (ends := far_enough(a, b)) is None:
        return
    flat = answer(ground, ends, eye=eye, top=top, kr=1.0)
    nearly = answer(ground, ends, eye=eye, top=top, kr=1.0 + sign * 1e-9)
    assert flat.earth.kappa_per_m == 0.0
    gap = np.abs(nearly.margin_along_m - flat.margin_along_m)
    # half of kappa d1 d2 with kappa 1.6e-16 and 3.2 km: 2e-10 m
    assert np.nanmax(gap) < 1e-9
    air = Air(ke=1e9)
    end, top_end = station(ends[0], agl_m=eye), station(ends[1], agl_m=top)
    by_ke = judge(ground, end, top_end, air=air, own_hill_m=0.0)
    assert by_ke.verdict == flat.verdict


def finer(pieces: Ground, times: int) -> Ground:
    """The same ground cut into more pieces."""
    u = np.arange(times)[:, None] / times + np.array([0.0, 0.5, 1.0]) / times
    a, mid, b = (pieces.height_m[:, k, None, None] for k in range(3))
    dist = pieces.dist_m[:, 0, None, None]
    step = pieces.dist_m[:, 2, None, None] - dist
    bend = 2.0 * (a - 2.0 * mid + b)
    height = a + u * ((b - a - bend) + u * bend)
    return Ground((dist + u * step).reshape(-1, 3), height.reshape(-1, 3))


@quick
@given(
    seed=st.integers(0, 10_000),
    eye=heights,
    top=heights,
    kappa=st.sampled_from([-3e-7, 0.0, 1.37e-7]),
    times=st.integers(2, 9),
)
def test_extra_samples_move_no_margin_by_a_millimetre(
    seed: int, eye: float, top: float, kappa: float, times: int
) -> None:
    random = np.random.default_rng(seed)
    edge = np.cumsum(random.uniform(5.0, 30.0, 80))
    edge -= edge[0]
    at = np.column_stack([edge[:-1], (edge[:-1] + edge[1:]) / 2, edge[1:]])
    walk = np.cumsum(random.normal(0.0, 4.0, 80))
    mid = (walk[:-1] + walk[1:]) / 2 + random.normal(0.0, 1.0, 79)
    rough = Ground(at, np.column_stack([walk[:-1], mid, walk[1:]]))
    case = Case(
        ground=with_ends(rough, float(edge[-1])),
        length_m=float(edge[-1]),
        eye_m=float(walk[0] + eye),
        top_m=float(walk[-1] + top),
        eye_on_ground=False,
        top_on_ground=False,
        near_m=0.0,
        hill_m=0.0,
        kappa_per_m=kappa,
    )
    few, many = look_at(case), look_at(replace(case, ground=finer(case.ground, times)))
    assert few.lowest_m == pytest.approx(many.lowest_m, abs=MILLIMETRE)
    if eye > MILLIMETRE:
        tangents = few.seen.tangent.max(), many.seen.tangent.max()
        hidden_m = (tangents[0] - tangents[1]) * case.length_m
        assert hidden_m == pytest.approx(0.0, abs=MILLIMETRE)
