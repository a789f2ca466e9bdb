"""What must hold for every cover on every line over made ground."""

from typing import Any

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from profiler.model import CoverKind, CoverSpan, PathCover, SightLine
from profiler.sight.cover_sources import CoverAlong
from profiler.terrain import Terrain
from tests import terrain
from tests.looking import from_centre, opened

#: Rounding of heights below 1000 m [m].
ROUNDING_M = 1e-9
#: From worse to better.
ORDER = {"blocked": 0, "undetermined": 1, "clear": 2}

quick = settings(
    max_examples=40,
    deadline=None,
    derandomize=True,
    suppress_health_check=[HealthCheck.function_scoped_fixture],
)


@st.composite
def spans(draw: st.DrawFn) -> tuple[CoverSpan, ...]:
    made = []
    for k in range(draw(st.integers(1, 5))):
        start = draw(st.floats(-50.0, 2000.0))
        made.append(
            CoverSpan(
                start_m=start,
                end_m=start + draw(st.floats(0.0, 900.0)),
                height_m=draw(st.floats(0.1, 60.0)),
                kind=draw(st.sampled_from(CoverKind)),
                name=f"polygon {k + 1}",
            )
        )
    return tuple(made)


@pytest.fixture(scope="module")
def ground(tmp_path_factory: pytest.TempPathFactory) -> Terrain:
    made = terrain.fractal(21, shape=(140, 140), relief_m=300.0)
    made.posts[70, 80] = np.nan
    return opened(tmp_path_factory.mktemp("ground"), made)


def ask(
    ground: Terrain, cover: tuple[CoverSpan, ...] | None, **asked: Any
) -> SightLine:
    source: CoverAlong | None = None
    if cover is not None:
        found = PathCover(spans=cover)

        def source(_: object) -> PathCover:
            return found

    return from_centre(ground, 100.0, 1900.0, cover=source, **asked)


heights = st.floats(1.0, 150.0)


@quick
@given(cover=spans(), eye=heights, top=heights)
def test_cover_never_raises_a_margin_nor_betters_a_verdict(
    ground: Terrain, cover: tuple[CoverSpan, ...], eye: float, top: float
) -> None:
    bare = ask(ground, None, eye=eye, top=top)
    wood = ask(ground, cover, eye=eye, top=top)
    low = float(np.nanmin(bare.margin_along_m))
    assert float(np.nanmin(wood.margin_along_m)) <= low + ROUNDING_M
    if bare.verdict == "blocked":
        assert wood.verdict == "blocked"
    if wood.verdict == "clear":
        assert bare.verdict == "clear"
    assert wood.target.visible_m <= bare.target.visible_m + 1e-6


@quick
@given(cover=spans(), eye=heights, top=heights)
def test_outside_all_cover_the_margins_are_those_of_bare_ground(
    ground: Terrain, cover: tuple[CoverSpan, ...], eye: float, top: float
) -> None:
    bare = ask(ground, None, eye=eye, top=top)
    wood = ask(ground, cover, eye=eye, top=top)
    dist = bare.profile.dist_m
    # the middle of a piece moves when the piece is cut
    outside = np.isin(dist, wood.profile.dist_m)
    for span in cover:
        outside &= (dist < span.start_m - 1e-3) | (dist > span.end_m + 1e-3)
    at = np.searchsorted(wood.profile.dist_m, dist[outside])
    assert wood.margin_along_m[at] == pytest.approx(
        bare.margin_along_m[outside], abs=ROUNDING_M, nan_ok=True
    )


@quick
@given(cover=spans())
def test_the_order_in_which_cover_is_given_does_not_matter(
    ground: Terrain, cover: tuple[CoverSpan, ...]
) -> None:
    one, two = ask(ground, cover).profile, ask(ground, cover[::-1]).profile
    assert np.array_equal(one.dist_m, two.dist_m)
    assert np.array_equal(one.cover_m, two.cover_m)


@quick
@given(cover=spans(), eye=heights, more=st.floats(0.0, 20.0))
def test_higher_cover_never_raises_the_margin(
    ground: Terrain, cover: tuple[CoverSpan, ...], eye: float, more: float
) -> None:
    from profiler.sight.cover import grown

    taller = grown(cover, metres_per_year=more, years=1)
    one, two = ask(ground, cover, eye=eye), ask(ground, taller, eye=eye)
    assert np.all(
        (two.margin_along_m <= one.margin_along_m + ROUNDING_M)
        | np.isnan(one.margin_along_m)
    )
    assert ORDER[two.verdict] <= ORDER[one.verdict]


@quick
@given(cover=spans(), eye=heights, top=heights)
def test_ground_and_cover_of_every_named_place_add_up(
    ground: Terrain, cover: tuple[CoverSpan, ...], eye: float, top: float
) -> None:
    line = ask(ground, cover, eye=eye, top=top)
    names = {span.name: span for span in cover}
    for at in (line.decisive, line.first_block, line.horizon, line.front_crest):
        if at is None:
            continue
        total = at.sight_m - at.margin_m
        assert at.ground_m + at.cover_m == pytest.approx(total, abs=ROUNDING_M)
        if at.cover_name:
            span = names[at.cover_name]
            assert at.cover_m == span.height_m
            inside = span.start_m - 1e-3 <= at.distance_m <= span.end_m + 1e-3
            assert inside
        else:
            assert at.cover_m == 0.0
