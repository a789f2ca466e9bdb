"""The figure is legible, on one page, in the looks of the design."""

from collections.abc import Callable
from itertools import combinations, pairwise

import numpy as np
import pytest
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.colors import to_rgb
from matplotlib.patches import Ellipse

from profiler.output.figures import page
from profiler.output.figures.course import course_of
from tests.plots.figure_cases import (
    CASES,
    HALF_DECIMETRE,
    LEAST_LETTER_PX,
    LEAST_LIGHTNESS,
    LOOKS,
    Case,
    axes_of,
    figure_of,
    lightness,
    line_of,
    texts_of,
    xy_of,
)


@pytest.mark.parametrize("look", LOOKS, ids=lambda look: look[0])
@pytest.mark.parametrize("name", CASES)
def test_no_text_touches_another_or_leaves_the_page(
    case_of: Callable[[str], Case], name: str, look: tuple[str, str]
) -> None:
    figure = figure_of(case_of(name), *look)
    canvas = figure.canvas
    assert isinstance(canvas, FigureCanvasAgg)
    for dpi in (150.0, 77.0):
        figure.set_dpi(dpi)
        canvas.draw()  # type: ignore[no-untyped-call]
        renderer = canvas.get_renderer()  # type: ignore[no-untyped-call]
        texts = texts_of(figure)
        boxes = [t.get_window_extent(renderer) for t in texts]
        for (one, a), (other, b) in combinations(zip(texts, boxes, strict=True), 2):
            wide = min(a.x1, b.x1) - max(a.x0, b.x0)
            tall = min(a.y1, b.y1) - max(a.y0, b.y0)
            # half a pixel is the rounding of a box
            assert min(wide, tall) <= 0.5, (one.get_text(), other.get_text())
        for text, box in zip(texts, boxes, strict=True):
            inside = figure.bbox.x0 <= box.x0 and box.x1 <= figure.bbox.x1
            assert inside, text.get_text()
            assert figure.bbox.y0 <= box.y0, text.get_text()
            assert box.y1 <= figure.bbox.y1, text.get_text()


@pytest.mark.parametrize("name", CASES)
def test_no_text_of_the_margins_runs_into_a_drawing(
    case_of: Callable[[str], Case], name: str
) -> None:
    figure = figure_of(case_of(name))
    renderer = page.renderer_of(figure)
    frames = [ax.get_window_extent() for ax in figure.axes]
    for text in figure.texts:
        if text.get_text().startswith(("no ground known,", "ground above", "rule: ")):
            continue  # stands in the room kept for it
        box = text.get_window_extent(renderer)
        for frame in frames:
            wide = min(box.x1, frame.x1) - max(box.x0, frame.x0)
            tall = min(box.y1, frame.y1) - max(box.y0, frame.y0)
            assert min(wide, tall) <= 0.5, text.get_text()


@pytest.mark.parametrize("name", CASES)
def test_letters_are_large_enough_at_900_pixels(
    case_of: Callable[[str], Case], name: str
) -> None:
    least_pt = min(float(t.get_fontsize()) for t in texts_of(figure_of(case_of(name))))
    assert least_pt * 77.0 / 72.0 >= LEAST_LETTER_PX


@pytest.mark.parametrize("name", CASES)
def test_discs_stand_apart_inside_their_lane(
    case_of: Callable[[str], Case], name: str
) -> None:
    figure = figure_of(case_of(name))
    lane = page.LANE_AREA
    discs = [a for a in figure.get_children() if isinstance(a, Ellipse)]
    at = [(np.asarray(d.get_center(), float) * page.PAGE_IN, d) for d in discs]
    at = [(xy, d) for xy, d in at if xy[1] > lane.bottom]
    xs = sorted(float(xy[0]) for xy, _ in at)
    radius = max((d.width for _, d in at), default=0.0) * page.PAGE_IN[0] / 2.0
    assert all(b - a >= 2.0 * radius for a, b in pairwise(xs))
    assert all(lane.left + radius <= x + 1e-9 for x in xs)
    assert all(x - 1e-9 <= lane.right - radius for x in xs)


def test_looks_are_those_of_the_design(case_of: Callable[[str], Case]) -> None:
    figure = figure_of(case_of("main"))
    ax = axes_of(figure, "profile")
    assert line_of(ax, "sight line").get_color() == "#0072B2"
    assert line_of(ax, "sight line").get_linestyle() == "-"
    assert line_of(ax, "grazing ray").get_color() == "#E69F00"
    assert line_of(ax, "grazing ray").get_linestyle() != "-"
    assert line_of(ax, "A").get_marker() == "o"
    assert line_of(ax, "B").get_marker() == "s"
    for letter in "AB":
        assert line_of(ax, letter).get_markerfacecolor() == "none"
    seen = line_of(ax, "ground seen")
    thin = [k for k in ax.lines if k.get_color() == "#000000" and k is not seen]
    assert seen.get_color() == "#000000"
    assert seen.get_linewidth() > 2.0 * min(k.get_linewidth() for k in thin)
    hatched = [c for c in ax.collections if c.get_label() == "not seen"]
    assert [bool(c.get_hatch()) for c in hatched] == [True]
    numbered = [
        d
        for d in figure.get_children()
        if isinstance(d, Ellipse) and to_rgb(d.get_facecolor()) == to_rgb("#CC79A7")
    ]
    assert len(numbered) == 2 * len(case_of("main").line.blocked_stretches)


def test_lines_and_ground_are_told_apart_without_colour() -> None:
    greys = {name: lightness(getattr(page, name)) for name in ("SIGHT", "GRAZING")}
    for name, grey in greys.items():
        for ground in (page.GROUND, page.PAPER):
            assert abs(grey - lightness(ground)) > LEAST_LIGHTNESS, name
    assert abs(greys["SIGHT"] - greys["GRAZING"]) > LEAST_LIGHTNESS
    assert lightness(page.GROUND) - lightness(page.EDGE) > LEAST_LIGHTNESS
    assert lightness(page.DISC) - lightness(page.EDGE) > LEAST_LIGHTNESS


@pytest.mark.parametrize("name", CASES)
def test_the_sight_line_is_straight_over_a_curved_sea(
    case_of: Callable[[str], Case], name: str
) -> None:
    ax = axes_of(figure_of(case_of(name)), "profile")
    x, y = xy_of(line_of(ax, "sight line"))
    pixels = ax.transData.transform(np.column_stack([x, y]))
    chord = np.interp(pixels[:, 0], pixels[[0, -1], 0], pixels[[0, -1], 1])
    assert np.abs(pixels[:, 1] - chord).max() < 1.0


def test_the_sea_bulges_by_the_curvature_and_lies_flat_on_request(
    case_of: Callable[[str], Case],
) -> None:
    case = case_of("main")
    line = case.line
    curved = axes_of(figure_of(case), "profile")
    _, sea = xy_of(line_of(curved, "sea level"))
    # the parabola kappa D^2/8 is within centimetres of the circle at 27 km
    bulge = line.earth.kappa_per_m * line.path.length_m**2 / 8.0
    assert sea[0] == pytest.approx(0.0, abs=1e-9)
    assert sea[-1] == pytest.approx(0.0, abs=1e-9)
    assert sea[sea.size // 2] == pytest.approx(bulge, abs=HALF_DECIMETRE)
    level = axes_of(figure_of(case, "level-sea"), "profile")
    _, flat = xy_of(line_of(level, "sea level"))
    assert np.all(flat == 0.0)
    _, bent = xy_of(line_of(level, "sight line"))
    mean = (bent[0] + bent[-1]) / 2.0
    assert mean - bent[bent.size // 2] == pytest.approx(bulge, abs=HALF_DECIMETRE)


@pytest.mark.parametrize("draw", ["curved-sea", "level-sea"])
@pytest.mark.parametrize("name", ["main", "450 km", "own hill", "duct"])
def test_the_drawn_distance_of_ground_and_line_is_the_margin(
    case_of: Callable[[str], Case], name: str, draw: str
) -> None:
    line = case_of(name).line
    course = course_of(line, draw)
    dist = line.profile.dist_m
    within = dist <= line.aim_distance_m
    ray = course.paper_m(dist, course.sight_m(dist))
    ground = course.paper_m(dist, line.profile.ground_m)
    drawn = (ray - ground)[within]
    assert drawn == pytest.approx(line.margin_along_m[within], abs=1e-8)
