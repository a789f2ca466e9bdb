"""The figure of antenna heights shows the record's pairs, curve and limits."""

from collections.abc import Callable
from functools import cache
from itertools import combinations, pairwise
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.text import Text

from profiler.errors import InputError
from profiler.output.figure import save_figure
from profiler.output.figures.masts_plan import number_of, pairs_of, runs_of
from profiler.output.masts_figure import draw_masts
from profiler.output.masts_record import masts_record
from profiler.output.masts_words import MASTS_CAUTION
from profiler.radio.criteria import Criterion
from profiler.radio.plan import antenna_heights
from tests.plots.figure_cases import (
    LEAST_LETTER_PX,
    LONG,
    OTHER_AIRS,
    axes_of,
    lightness,
    line_of,
    skarvel_to_quillet,
    texts_of,
    words_of,
    xy_of,
)

Json = dict[str, Any]
Plans = Callable[[str], Json]

#: Two criteria that each govern a part of the trade-off of the sample path.
TWO = (
    Criterion(ke=4.0 / 3.0, f1_fraction=1.0),
    Criterion(ke=0.5, f1_fraction=0.0, extra_m=2.0),
)
ASKED: dict[str, Json] = {
    "given far": {"rule": "p530-temperate", "given_to_agl_m": 45.0},
    "given both": {
        "rule": TWO,
        "given_from_agl_m": 50.0,
        "given_to_agl_m": 45.0,
    },
    "four": {"rule": OTHER_AIRS, "frequency_hz": 4e8},
    "plain": {"rule": "plain-0.6", "frequency_hz": 2e10},
}


@pytest.fixture(scope="module")
def plan_of() -> Plans:
    @cache
    def made(name: str) -> Json:
        _, line = skarvel_to_quillet(20.0, 30.0)
        asked = {"frequency_hz": 7.5e9, **ASKED[name]}
        plan, rule = antenna_heights(line, **asked)
        return masts_record(
            plan, line, rule=rule, frequency_hz=float(asked["frequency_hz"])
        )

    return made


def without_pairs(values: Json) -> Json:
    """The record of a plan whose limits no pair is within."""
    none = ("equal_agl_m", "from_agl_m", "to_agl_m", "governing", "margins_at")
    criteria = [{**c, "margin_m": None} for c in values["criteria"]]
    return {
        **values,
        **dict.fromkeys((*none, "cheapest")),
        "criteria": criteria,
        "curve": [],
    }


def figures(plan_of: Plans) -> dict[str, tuple[Json, str]]:
    long = {**plan_of("plain")}
    long["from"] = {**long["from"], "name": LONG}
    long["to"] = {**long["to"], "name": f"山 {LONG}"}
    return {
        **{name: (plan_of(name), "m") for name in ASKED},
        "feet": (plan_of("given both"), "ft"),
        "nothing": (without_pairs(plan_of("plain")), "m"),
        "long": (long, "m"),
    }


FIGURES = [*ASKED, "feet", "nothing", "long"]


def drawn(plan_of: Plans, name: str) -> tuple[Json, Figure]:
    values, unit = figures(plan_of)[name]
    return values, draw_masts(values, show_in=unit)


@pytest.mark.parametrize("name", FIGURES)
def test_no_text_touches_another_or_leaves_the_page(plan_of: Plans, name: str) -> None:
    _, figure = drawn(plan_of, name)
    canvas = figure.canvas
    assert isinstance(canvas, FigureCanvasAgg)
    for dpi in (150.0, 77.0):
        figure.set_dpi(dpi)
        canvas.draw()  # type: ignore[no-untyped-call]
        renderer = canvas.get_renderer()  # type: ignore[no-untyped-call]
        # an annotation's own extent would count its line too
        boxes = [(t, Text.get_window_extent(t, renderer)) for t in texts_of(figure)]
        for (one, a), (other, b) in combinations(boxes, 2):
            wide = min(a.x1, b.x1) - max(a.x0, b.x0)
            tall = min(a.y1, b.y1) - max(a.y0, b.y0)
            assert min(wide, tall) <= 0.5, (one.get_text(), other.get_text())
        for text, box in boxes:
            assert figure.bbox.x0 <= box.x0, text.get_text()
            assert box.x1 <= figure.bbox.x1, text.get_text()
            assert figure.bbox.y0 <= box.y0, text.get_text()
            assert box.y1 <= figure.bbox.y1, text.get_text()
    least = min(float(t.get_fontsize()) for t in texts_of(figure))
    assert least * 77.0 / 72.0 >= LEAST_LETTER_PX


@pytest.mark.parametrize("name", FIGURES)
def test_both_heights_are_drawn_to_one_scale(plan_of: Plans, name: str) -> None:
    ax = axes_of(drawn(plan_of, name)[1], "masts")
    assert ax.get_xlim() == ax.get_ylim()
    box = ax.get_window_extent()
    assert box.width == pytest.approx(box.height)


def test_the_curve_is_the_records_and_changes_its_look_with_the_criterion(
    plan_of: Plans,
) -> None:
    values, figure = drawn(plan_of, "given both")
    ax = axes_of(figure, "masts")
    runs = [k for k in ax.lines if str(k.get_label()).startswith("criterion")]
    points = np.vstack([np.column_stack(xy_of(run)) for run in runs])
    for at in values["curve"]:
        there = np.array([at["from_agl_m"], at["to_agl_m"]])
        assert np.abs(points - there).max(axis=1).min() < 1e-9
    governing = {number_of(values, p["governing"]) for p in values["curve"]}
    assert governing == {1, 2}
    looks = {
        (r.get_label(), r.get_color(), r.get_linestyle(), str(vars(r)["_dash_pattern"]))
        for r in runs
    }
    assert len({look[0] for look in looks}) == 2
    assert len({look[3] for look in looks}) == 2
    for number in governing:
        disc = line_of(ax, f"number {number}")
        x, y = xy_of(disc)
        mine = [r for r in runs if r.get_label() == f"criterion {number}"]
        apart = [np.hypot(*(np.array(xy_of(r)) - [x, y])).min() for r in mine]
        assert min(apart) < 1e-9


def test_every_point_of_the_curve_is_in_some_run(plan_of: Plans) -> None:
    for name in ASKED:
        values = plan_of(name)
        runs = runs_of(values)
        sizes = sum(near.size for _, near, _ in runs)
        assert sizes == len(values["curve"]) + len(runs) - 1
        for (_, near, _), (_, after, _) in pairwise(runs):
            assert near[-1] == after[0]


@pytest.mark.parametrize("name", [*ASKED, "feet"])
def test_pairs_stand_where_the_record_says_and_in_the_table_rounded_up(
    plan_of: Plans, name: str
) -> None:
    values, figure = drawn(plan_of, name)
    unit = 0.3048 if name == "feet" else 1.0
    ax, told = axes_of(figure, "masts"), words_of(figure)
    pairs = pairs_of(values)
    assert {p.letter for p in pairs} >= {"E", "C"}
    for pair in pairs:
        x, y = xy_of(line_of(ax, pair.what))
        assert (x[0] * unit, y[0] * unit) == pytest.approx(pair.heights_m)
        assert told.count(pair.letter) == 2
    equal = [float(t) for t in told if t.replace(".", "").isdigit() and "." in t]
    assert any(0.0 <= e * unit - values["equal_agl_m"] < 0.11 * unit for e in equal)


def test_given_heights_are_kept_and_tied_to_their_axis(plan_of: Plans) -> None:
    values = plan_of("given both")
    pairs = {p.letter: p for p in pairs_of(values)}
    assert pairs["G"].heights_m == (values["from_agl_m"], 45.0)
    assert pairs["H"].given == "from"
    assert pairs["H"].heights_m[1] == values["to_agl_m"]
    only = {p.letter: p for p in pairs_of(plan_of("given far"))}
    assert only["G"].heights_m[1] == 45.0
    assert "H" not in only


def test_two_hundred_feet_are_thin_lines_with_the_words_may_apply(
    plan_of: Plans,
) -> None:
    for name, at, label in (
        ("given far", 60.96, "60.96 m"),
        ("feet", 200.0, "200 ft"),
    ):
        _, figure = drawn(plan_of, name)
        ax = axes_of(figure, "masts")
        lines = [k for k in ax.lines if k.get_label() == "marked from"]
        assert len(lines) == 2
        assert np.ptp(xy_of(lines[0])[0]) == 0.0
        assert xy_of(lines[0])[0][0] == pytest.approx(at)
        assert xy_of(lines[1])[1][0] == pytest.approx(at)
        assert max(k.get_linewidth() for k in lines) < 1.0
        assert words_of(figure).count(label) == 2
        told = " ".join(words_of(figure))
        assert "marking and lighting rules may apply" in told


def test_the_page_names_path_frequency_rule_ground_and_cautions(
    plan_of: Plans,
) -> None:
    values, figure = drawn(plan_of, "given far")
    told = words_of(figure)
    assert any("7.5 GHz" in t for t in told)
    assert "27.453 km from Skarvel to Quillet Mast" in told
    assert any(values["rule"]["name"] in t for t in told)
    assert any(t.startswith("Ground: upland.tif") for t in told)
    assert MASTS_CAUTION in told
    assert values["cautions"][0]["text"] in told


def test_looks_of_neighbouring_criteria_differ_without_colour(plan_of: Plans) -> None:
    _, figure = drawn(plan_of, "four")
    samples = [
        k
        for k in figure.get_children()
        if isinstance(k, Line2D)
        and k.get_linewidth() > 2.0
        and len(np.asarray(k.get_xdata())) == 2
    ]
    assert len(samples) == 4
    assert len({str(vars(k)["_dash_pattern"]) for k in samples}) == 4
    for sample in samples:
        assert 100.0 - lightness(sample.get_color()) > 15.0


def test_limits_that_nothing_meets_are_said_not_drawn(plan_of: Plans) -> None:
    _, figure = drawn(plan_of, "nothing")
    assert "none within the limits" in words_of(figure)
    assert "no pair of heights meets the rule" in words_of(figure)
    labels = {str(k.get_label()) for k in axes_of(figure, "masts").lines}
    assert not any(label.startswith("criterion") for label in labels)
    assert any(t.startswith("No equal heights") for t in words_of(figure))


def test_other_units_are_refused(plan_of: Plans) -> None:
    with pytest.raises(InputError):
        draw_masts(plan_of("plain"), show_in="yd")


def test_the_same_plan_gives_the_same_bytes(plan_of: Plans, tmp_path: Path) -> None:
    for ending in ("png", "svg", "pdf"):
        files = [tmp_path / f"{k}.{ending}" for k in range(2)]
        for file in files:
            save_figure(draw_masts(plan_of("given far")), file)
        assert files[0].read_bytes() == files[1].read_bytes()
