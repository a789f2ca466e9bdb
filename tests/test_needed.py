"""What would just clear the line, tried again with the printed figures."""

from pathlib import Path
from typing import Any

import numpy as np
import pytest

from profiler.model import SightLine
from profiler.terrain import Terrain
from tests import terrain
from tests.looking import from_centre, opened, seen, twin
from tests.terrain import place

Pair = tuple[float, float]
#: Less than this is asked in vain [m] and [1 of the figure], for heights.
LESS_M, LESS = 0.02, 0.002
#: The same for kr and ke [1]: the record's last digit and the bending of 1e-4 m more.
LESS_RATIO = 3e-5
#: A figure is rounded up by 1 cm; 1 mm less ground leaves 5 mm of leverage [m].
ROUNDED_M = 0.015


def tried(ask: Any, line: SightLine, eye: float, top: float) -> list[str]:
    """What fails when each printed figure is asked again; `ask` gives a verdict."""
    need, wrong = line.needed, []

    def check(name: str, figure: float | None, less: float, again: Any) -> None:
        if figure is None:
            return
        if again(figure) != "clear":
            wrong.append(f"{name} {figure} is not clear")
        if again(figure - less) == "clear":
            wrong.append(f"{name} {figure} is not the least")

    now = line.verdict == "blocked"
    for name, figure, key in (
        ("from", need.from_agl_m, "eye"),
        ("to", need.to_agl_m, "top"),
    ):
        if figure is None and now:
            wrong.append(f"{name} says that nothing helps")
        if figure:
            less = min(max(LESS_M, LESS * figure), figure)
            check(name, figure, less, lambda h, key=key: ask(**{key: h}))
    if now and need.both_extra_m is None:
        wrong.append("both says that nothing helps")
    if need.both_extra_m and eye + need.both_extra_m > LESS_M < top + need.both_extra_m:
        check(
            "both",
            need.both_extra_m,
            LESS_M,
            lambda h: ask(eye=eye + h, top=top + h),
        )
    check("kr", need.kr, LESS_RATIO + LESS * abs((need.kr or 0.0) - 1.0), kr_of(ask))
    if need.ke is not None and kr_of(ask)(1.0 - 1.0 / need.ke) != "clear":
        wrong.append(f"ke {need.ke} is not clear")
    return wrong


def kr_of(ask: Any) -> Any:
    return lambda kr: ask(kr=kr)


def fractal(folder: Path) -> Terrain:
    return opened(folder, terrain.fractal(3, shape=(200, 200), relief_m=500.0))


@pytest.mark.parametrize("seed", range(24))
def test_printed_figures_clear_and_less_does_not(tmp_path: Path, seed: int) -> None:
    random = np.random.default_rng(seed)
    ground = fractal(tmp_path)
    ends = [place(*random.uniform((0, 0), (360, 2700))) for _ in (0, 1)]
    eye = float(random.choice([0.0, 1.7, 20.0]))
    top = float(random.choice([0.0, 0.0, 15.0]))
    kr = float(random.choice([0.13, 1.0, 2.0]))

    def ask(**changes: float) -> str:
        settings: dict[str, Any] = {"eye": eye, "top": top, "kr": kr, **changes}
        return seen(ground, *ends, own_hill_m=0.0, **settings).verdict

    line = seen(ground, *ends, eye=eye, top=top, kr=kr, own_hill_m=0.0)
    assert tried(ask, line, eye, top) == []


@pytest.mark.parametrize("seed", range(6))
def test_figures_for_a_summit_with_its_own_hill_clear_too(
    tmp_path: Path, seed: int
) -> None:
    random = np.random.default_rng(seed)
    start = place(90.0 + random.uniform(-8.0, 8.0), random.uniform(0.0, 500.0))
    # the eye must rise far above the wall, and the aim point moves with it
    wall = float(random.uniform(62.0, 120.0))
    made = terrain.cap(radius_m=300.0, top_m=60.0, cell_m=30.0)
    posts = made.posts.copy()
    posts[:, int(1500.0 / 30.0 - made.transform[2] / 30.0 - 0.5)] = wall
    ground = opened(tmp_path, made._replace(posts=posts))

    def ask(**changes: float) -> str:
        settings: dict[str, Any] = {"eye": 1.7, "top": 0.0, "kr": 0.13, **changes}
        return seen(ground, start, place(90.0, 2000.0), **settings).verdict

    line = seen(ground, start, place(90.0, 2000.0), kr=0.13)
    assert line.target.own_hill_m == 100.0
    assert tried(ask, line, 1.7, 0.0) == []


@pytest.mark.parametrize("seed", range(5))
def test_a_bare_point_behind_its_own_slope_is_told_the_least_height(
    tmp_path: Path, seed: int
) -> None:
    # before the ground beside the ends was looked at these answers were "nothing
    # helps" or up to 1 % too low, for the worst slope lies within the last half cell
    made = terrain.fractal(3, shape=(200, 200), relief_m=500.0)
    random = np.random.default_rng(100 + seed)
    ends = [place(*random.uniform((0, 0), (360, 2700))) for _ in (0, 1)]
    line = seen(opened(tmp_path, made), *ends, eye=0.0, own_hill_m=0.0)
    exact = twin(made, *ends, from_agl=0.0, to_agl=0.0, kappa=0.0)
    for ours, least in (
        (line.needed.from_agl_m, exact.least_from_agl_m()),
        (line.needed.to_agl_m, exact.least_to_agl_m()),
        (line.needed.both_extra_m, exact.least_both_extra_m()),
    ):
        assert ours is not None
        assert least is not None
        assert least - 1e-6 <= ours <= least + ROUNDED_M


def test_a_summit_on_a_round_hill_can_be_cleared_from_the_eye(tmp_path: Path) -> None:
    # a hut 200 m behind a dome's top, the eye on its other side
    east, north, transform = terrain.offsets(30.0, 3000.0, 3000.0, 300.0)
    dome = 200.0 * np.exp(-((east - 2500.0) ** 2 + north**2) / 600.0**2)
    made = terrain.Terrain(dome, transform, terrain.CENTRED_CRS, {})
    ground = opened(tmp_path, made)
    start, end = place(85.0, 300.0), place(80.0, 2410.0)
    line = seen(ground, start, end, own_hill_m=0.0)
    height = line.needed.from_agl_m
    assert height is not None
    assert seen(ground, start, end, eye=height, own_hill_m=0.0).verdict == "clear"
    assert seen(ground, start, end, eye=height - 0.2).verdict == "blocked"


# --- closed forms --------------------------------------------------------------------


def over_wall(folder: Path, **asked: Any) -> SightLine:
    """Wall of 100 m half way along 6 km of flat ground, flat air."""
    ground = opened(folder, terrain.ridge("column", height_m=100.0))
    return from_centre(ground, 90.0, 6000.0, **asked)


def test_needed_heights_over_a_wall_follow_from_similar_triangles(
    tmp_path: Path,
) -> None:
    need = over_wall(tmp_path, eye=10.0, top=20.0).needed
    assert need.from_agl_m == pytest.approx(180.0, abs=0.011)
    assert need.to_agl_m == pytest.approx(190.0, abs=0.011)
    assert need.both_extra_m == pytest.approx(85.0, abs=0.011)
    assert need.dem_bias_m == pytest.approx(-85.0, abs=0.011)
    assert (need.from_stretch, need.to_stretch, need.both_stretch) == (1, 1, 1)
    # half of kappa d1 d2 must lift the line by 85 m at mid-path
    kappa = -85.0 / (3000.0 * 3000.0 / 2.0)
    assert need.kr is None
    assert 1.0 - kappa * 6.4e6 > 20.0


def test_the_bending_that_just_clears_follows_from_the_bulge(tmp_path: Path) -> None:
    line = over_wall(tmp_path, eye=99.0, top=99.0, kr=0.0)
    radius = line.earth.radius_m
    kappa = -1.0 / (3000.0 * 3000.0 / 2.0)
    assert line.needed.ke is None
    assert line.needed.kr == pytest.approx(1.0 - kappa * radius, rel=2e-3)


def test_a_clear_line_says_what_is_to_spare(tmp_path: Path) -> None:
    need = over_wall(tmp_path, eye=110.0, top=110.0).needed
    assert need.from_agl_m == pytest.approx(90.0, abs=0.011)
    assert need.to_agl_m == pytest.approx(90.0, abs=0.011)
    assert need.both_extra_m == pytest.approx(-10.0, abs=0.011)
    assert need.dem_bias_m == pytest.approx(10.0, abs=0.011)
    assert (need.from_stretch, need.to_stretch, need.both_stretch) == (None,) * 3


def test_a_grazing_line_is_not_asked_for_more_height(tmp_path: Path) -> None:
    line = over_wall(tmp_path, eye=99.9995, top=99.9995)
    assert (line.verdict, line.grazing) == ("clear", True)
    assert line.needed.from_agl_m is not None
    assert line.needed.from_agl_m <= 100.0
    assert line.needed.both_extra_m == 0.0


def test_nothing_is_spared_below_the_ground_of_either_end(tmp_path: Path) -> None:
    need = over_wall(tmp_path, eye=250.0, top=1.0).needed
    assert need.both_extra_m == pytest.approx(-1.0, abs=1e-9)
    assert over_wall(tmp_path, eye=250.0, top=0.0).needed.both_extra_m == 0.0


def test_a_wall_at_the_foot_is_beyond_help_from_the_far_end(tmp_path: Path) -> None:
    made = terrain.step(low_m=0.0, high_m=100.0, cells_away=50)
    ground = opened(tmp_path, made)
    start, end = place(90.0, 1469.0), place(90.0, 2900.0)
    need = seen(ground, start, end, eye=1.0, top=1.0).needed
    assert need.to_agl_m is not None
    assert need.to_agl_m > 1000.0
    assert need.from_agl_m == pytest.approx(100.0, abs=1.0)


def test_no_height_above_an_unknown_ground_is_named(tmp_path: Path) -> None:
    ground = opened(tmp_path, terrain.sea())
    line = from_centre(ground, 90.0, 2500.0, eye=5.0, top={"amsl_m": 30.0})
    assert line.verdict == "blocked"
    assert line.needed.to_agl_m is None
    assert line.needed.from_agl_m is not None


def test_each_figure_names_the_stretch_that_sets_it(tmp_path: Path) -> None:
    made = terrain.ridge("column", height_m=50.0, cells_away=40)
    east, _, _ = terrain.offsets(30.0, 2400.0, 2400.0, 300.0)
    posts = np.where(np.abs(east - 1800.0) < 15.0, 60.0, made.posts)
    ground = opened(tmp_path, made._replace(posts=posts))
    need = from_centre(ground, 90.0, 2400.0, eye=0.5, top=0.5).needed
    # from the eye the nearer wall of 50 m at 1200 m is steeper than 60 m at 1800 m
    assert (need.to_stretch, need.from_stretch, need.both_stretch) == (1, 2, 2)


@pytest.mark.parametrize("height", [0.5, 40.0, 800.0])
def test_huge_spare_gives_no_false_bending(tmp_path: Path, height: float) -> None:
    ground = opened(tmp_path, terrain.plane())
    line = from_centre(ground, 90.0, 400.0, eye=height, top=height)
    # half of kappa d1 d2 at mid-path is the height: far beyond any air
    assert (line.needed.ke, line.needed.kr) == (None, None)
