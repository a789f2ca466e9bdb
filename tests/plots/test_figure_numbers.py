"""Every number in the figure is the record's, at the rounding shown."""

from collections.abc import Callable

import numpy as np
import pytest
from matplotlib.patches import Rectangle

from profiler.constants import VERSION
from profiler.output.figure import draw_figure
from profiler.output.figures.course import course_of
from profiler.output.figures.marks import marks_of
from profiler.output.figures.needs import needed_lines
from profiler.output.figures.scale import scale_of
from profiler.output.figures.target import ray_above_foot_m
from tests.plots.figure_cases import (
    CASES,
    HALF_DECIMETRE,
    LONG,
    Case,
    axes_of,
    figure_of,
    line_of,
    words_of,
    xy_of,
)


def test_the_table_gives_the_records_numbers(case_of: Callable[[str], Case]) -> None:
    line = case_of("main").line
    words = words_of(figure_of(case_of("main")))
    assert line.decisive is not None
    assert line.first_block is not None
    for place_ in (line.decisive, line.first_block):
        assert f"{place_.distance_m / 1000.0:.2f}" in words
        assert f"{place_.lat_deg:.5f} N" in words
        assert f"{-place_.lon_deg:.5f} W" in words
    assert f"{-line.decisive.margin_m:.1f} m above the line" in words
    second = line.blocked_stretches[1]
    assert f"{-second.worst_margin_m:.1f} m above the line" in words
    assert f"{second.worst_at_m / 1000.0:.2f}" in words
    assert words.count("decides") == 1
    assert words.count("first block") == 1
    assert f"ground {line.from_.ground_m:.1f} m, eye 20 m above it" in words
    assert f"ground {line.to.ground_m:.1f} m, top 30 m above it" in words


def test_feet_and_miles_are_shown_and_said(case_of: Callable[[str], Case]) -> None:
    line = case_of("main").line
    words = words_of(figure_of(case_of("main"), show_in="ft"))
    assert line.decisive is not None
    assert f"{-line.decisive.margin_m / 0.3048:.1f} ft above the line" in words
    assert f"{line.decisive.distance_m / 1609.344:.2f}" in words
    assert "mi from A" in words
    assert "height above sea, ft," in words
    assert not any(" m above" in w for w in words)


def test_needed_heights_are_rounded_to_the_safe_side(
    case_of: Callable[[str], Case],
) -> None:
    for name in CASES:
        line = case_of(name).line
        for unit, size in (("m", 1.0), ("ft", 0.3048)):
            texts = needed_lines(line, scale_of(line, unit))
            pairs = zip(
                "AB", (line.needed.from_agl_m, line.needed.to_agl_m), strict=True
            )
            for letter, needed in pairs:
                told = [t for t in texts if t.startswith(f"{letter} at ")]
                assert bool(told) == (needed is not None)
                if needed is not None:
                    assert float(told[0].split()[2]) * size >= needed - 1e-6


def test_the_target_is_drawn_in_its_visible_and_hidden_parts(
    case_of: Callable[[str], Case],
) -> None:
    line = case_of("part").line
    bars = {
        p.get_label(): p
        for p in axes_of(figure_of(case_of("part")), "target").patches
        if isinstance(p, Rectangle) and p.get_label() in ("visible", "hidden")
    }
    assert bars["hidden"].get_height() == pytest.approx(line.target.hidden_m)
    assert bars["visible"].get_height() == pytest.approx(line.target.visible_m)
    assert bars["hidden"].get_hatch()
    assert not bars["visible"].get_hatch()
    words = words_of(figure_of(case_of("part")))
    assert f"visible {line.target.visible_m:.1f} m" in words
    assert f"hidden {line.target.hidden_m:.1f} m" in words


def test_the_grazing_ray_passes_the_target_where_the_record_says(
    case_of: Callable[[str], Case],
) -> None:
    hidden = case_of("main").line
    ray = ray_above_foot_m(course_of(hidden, "curved-sea"))
    assert hidden.target.above_crest_m is not None
    assert ray == pytest.approx(30.0 - hidden.target.above_crest_m, abs=1e-6)
    part = case_of("part").line
    ray = ray_above_foot_m(course_of(part, "curved-sea"))
    assert ray == pytest.approx(part.target.hidden_m, abs=1e-6)


def test_a_clear_line_has_one_numbered_disc(case_of: Callable[[str], Case]) -> None:
    marks, left_out = marks_of(course_of(case_of("part").line, "curved-sea"))
    assert [m.symbol for m in marks if m.symbol.isdigit()] == ["1"]
    assert left_out == 0


def test_of_many_stretches_the_worst_are_listed_and_the_rest_counted(
    case_of: Callable[[str], Case],
) -> None:
    line = case_of("many walls").line
    every = line.blocked_stretches
    marks, left_out = marks_of(course_of(line, "curved-sea"))
    numbers = [int(m.symbol) for m in marks if m.symbol.isdigit()]
    assert len(every) > 8
    assert numbers == sorted(numbers)
    assert left_out == len(every) - len(numbers)
    listed = max(every[n - 1].worst_margin_m for n in numbers)
    rest = [s for n, s in enumerate(every, start=1) if n not in numbers]
    assert all(s.worst_margin_m >= listed for s in rest)
    words = words_of(figure_of(case_of("many walls")))
    assert any(w.startswith(f"and {left_out} more, none over") for w in words)


def test_a_void_is_a_crossed_gap_with_the_height_that_would_block(
    case_of: Callable[[str], Case],
) -> None:
    line = case_of("void").line
    assert line.void is not None
    figure = figure_of(case_of("void"))
    ax = axes_of(figure, "profile")
    gaps = [c for c in ax.collections if c.get_label() == "no ground"]
    assert len(gaps) == 1
    assert "x" in str(gaps[0].get_hatch())
    across = np.asarray(gaps[0].get_paths()[0].vertices, float)[:, 0] * 1000.0
    assert across.min() == pytest.approx(line.void.start_m, abs=0.5)
    assert across.max() == pytest.approx(line.void.end_m, abs=0.5)
    words = words_of(figure)
    assert any(w.startswith("no ground known, ") for w in words)
    told = next(w for w in words if w.startswith("ground above"))
    # rounded down: no ground that would block is told to be low enough
    below = line.void.blocks_above_m - float(told.split()[2])
    assert 0.0 <= below < 2.0 * HALF_DECIMETRE


def test_the_margin_strip_has_no_line_across_a_void(
    case_of: Callable[[str], Case],
) -> None:
    line = case_of("wide void").line
    assert line.void is not None
    x, y = xy_of(line_of(axes_of(figure_of(case_of("wide void")), "margin"), "margin"))
    inside = (x > line.void.start_m / 1000.0) & (x < line.void.end_m / 1000.0)
    assert inside.any()
    assert np.isnan(y[inside]).all()


def test_own_hill_shows_the_aim_point_and_the_given_one(
    case_of: Callable[[str], Case],
) -> None:
    line = case_of("own hill").line
    assert line.target.aim_moved_m > 0.0
    figure = figure_of(case_of("own hill"))
    ax = axes_of(figure, "profile")
    at, _ = xy_of(line_of(ax, "B"))
    given, _ = xy_of(line_of(ax, "given point"))
    assert at[0] * 1000.0 == pytest.approx(line.aim_distance_m)
    assert given[0] * 1000.0 == pytest.approx(line.path.length_m)
    assert f"B {line.target.aim_moved_m:.1f} m before the given point" in words_of(
        figure
    )


def test_the_footer_names_ground_air_drawing_and_caution(
    case_of: Callable[[str], Case],
) -> None:
    line = case_of("main").line
    figure = figure_of(case_of("main"))
    foot = " ".join(words_of(figure))
    digest = line.profile.files[0].sha256
    assert digest is not None
    assert f"upland.tif {digest[:8]}, posts 31 x 21 m, bilinear" in foot
    assert "kr 0.13 = ke 1.149 (default)" in foot
    assert "curved sea, straight line" in foot
    assert f"overbrow {VERSION}, terrain line-of-sight profiler" in foot
    assert line.cautions[0].text in words_of(figure)
    ax = axes_of(figure, "profile")
    origin, right, up = ax.transData.transform([(0, 0), (1, 0), (0, 1000)])
    times = (up[1] - origin[1]) / (right[0] - origin[0])
    assert f"heights drawn {times:.0f} times" in foot
    assert "level sea, bent line" in " ".join(
        words_of(figure_of(case_of("main"), "level-sea"))
    )


def test_dollar_signs_stay_and_unknown_letters_become_question_marks(
    case_of: Callable[[str], Case],
) -> None:
    case = case_of("main")
    head = ("SEEN. $a_1$ sees 山 and\ttabs", "costs $5 to $6")
    figure = draw_figure(case.line, headline=head, ground_map=None)
    words = words_of(figure)
    assert "SEEN. $a_1$ sees ? and tabs" in words
    assert "Costs $5 to $6" in words
    assert not any(t.get_parse_math() for t in figure.texts)


def test_a_long_headline_is_broken_not_cut(case_of: Callable[[str], Case]) -> None:
    first = f"HIDDEN. {LONG[:40]} does not see the top of {LONG[:40]}"
    figure = draw_figure(case_of("main").line, headline=(first, "x"), ground_map=None)
    words = words_of(figure)
    halves = [w for w in words if w.startswith("HIDDEN") or w in first]
    assert " ".join(h for h in halves if len(h) > 30) == first


def test_names_over_forty_letters_end_in_an_ellipsis(
    case_of: Callable[[str], Case],
) -> None:
    words = words_of(figure_of(case_of("many walls")))
    name = next(w for w in words if w.startswith("A: "))
    assert name.endswith("…")
    assert len(name) <= 43
