"""A radio path's zone, rule's line and sheet; trees; what stands beside the drawing."""

from collections.abc import Callable
from itertools import pairwise
from typing import Any

import numpy as np
import pytest
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.lines import Line2D
from matplotlib.patches import Ellipse

from profiler.output.figures import page
from profiler.output.figures.course import course_of, trace_of
from profiler.output.figures.marks import marks_of
from profiler.output.figures.zone import asked_m, left_over_m
from profiler.output.record import record
from profiler.output.told import radio_of
from profiler.output.words import words
from tests.plots.figure_cases import (
    CASES,
    Case,
    axes_of,
    figure_of,
    line_of,
    words_of,
    xy_of,
)

RADIO = [name for name in CASES if name.startswith("radio")]
RULED = [name for name in RADIO if name != "radio without a rule"]
CaseOf = Callable[[str], Case]


def figure_in(case: Case, draw: str) -> Any:
    return axes_of(figure_of(case, draw), "profile")


@pytest.mark.parametrize("draw", ["curved-sea", "level-sea"])
@pytest.mark.parametrize("name", RADIO)
def test_the_zone_is_one_fresnel_radius_above_and_below_the_sight_line(
    case_of: CaseOf, name: str, draw: str
) -> None:
    case = case_of(name)
    zone = line_of(figure_in(case, draw), "first Fresnel zone")
    assert zone.get_color() == "#56B4E9"
    assert zone.get_linestyle() != "-"
    radio = radio_of(case.line)
    assert radio is not None
    x, y = xy_of(zone)
    gap = int(np.flatnonzero(np.isnan(x))[0])
    km, low, high = x[:gap], y[:gap], y[gap + 1 :]
    # Rec. ITU-R P.526-16 equation (3) in km and GHz, 17.3145 sqrt(d1 d2 / (f d))
    length = case.line.path.length_m / 1000.0
    ghz = radio.result.frequency_hz / 1e9
    f1 = 17.3145 * np.sqrt(km * (length - km).clip(0.0) / (ghz * length))
    assert (high - low) / 2.0 == pytest.approx(f1, rel=1e-5, abs=1e-6)
    course = course_of(case.line, draw)
    sight = course.paper_m(km * 1000.0, course.sight_m(km * 1000.0))
    assert (high + low) / 2.0 == pytest.approx(sight, abs=1e-6)


@pytest.mark.parametrize("draw", ["curved-sea", "level-sea"])
@pytest.mark.parametrize("name", RULED)
def test_ground_stands_from_the_rules_line_by_what_the_criterion_leaves(
    case_of: CaseOf, name: str, draw: str
) -> None:
    case = case_of(name)
    radio = radio_of(case.line)
    assert radio is not None
    governing = radio.result.governing
    x, y = xy_of(line_of(figure_in(case, draw), "left by the rule"))
    assert x[0] * 1000.0 == pytest.approx(governing.at.place.distance_m)
    # in every air and over either sea the bar is the record's margin, to scale
    assert y[1] - y[0] == pytest.approx(governing.margin_m, abs=1e-6)
    ground = governing.at.place.ground_m + governing.at.place.cover_m
    course = course_of(case.line, draw)
    assert y[0] == pytest.approx(
        course.paper_at(governing.at.place.distance_m, ground), abs=1e-6
    )


@pytest.mark.parametrize("name", RULED)
def test_the_rules_line_ends_below_the_antennas_by_its_extra_metres(
    case_of: CaseOf, name: str
) -> None:
    line = case_of(name).line
    radio = radio_of(line)
    assert radio is not None
    extra = radio.result.governing.criterion.extra_m
    ends = asked_m(line, radio, np.array([0.0, line.path.length_m]))
    wanted = [line.from_.amsl_m - extra, line.to.amsl_m - extra]
    assert ends == pytest.approx(wanted, abs=1e-6)


@pytest.mark.parametrize("name", RULED)
def test_the_strip_shows_what_the_rule_leaves_down_to_its_least(
    case_of: CaseOf, name: str
) -> None:
    case = case_of(name)
    radio = radio_of(case.line)
    assert radio is not None
    ax = axes_of(figure_of(case), "margin")
    drawn = line_of(ax, "left by the rule")
    plain = line_of(ax, "margin")
    assert drawn.get_linestyle() != plain.get_linestyle()
    assert drawn.get_color() != plain.get_color()
    _, left = xy_of(drawn)
    least = radio.result.governing.margin_m
    # the lowest place may lie between two samples, never below the record's
    assert least - 1e-6 <= np.nanmin(left) < least + 0.5
    assert ax.get_ylim()[0] < least


def test_light_has_no_zone_and_no_rule(case_of: CaseOf) -> None:
    figure = figure_of(case_of("main"))
    labels = {k.get_label() for ax in figure.axes for k in ax.lines}
    assert not labels & {"first Fresnel zone", "rule's line", "left by the rule"}
    course = course_of(case_of("main").line, "curved-sea")
    assert left_over_m(course, trace_of(course)) is None


def test_without_a_rule_there_is_a_zone_but_nothing_to_meet(case_of: CaseOf) -> None:
    figure = figure_of(case_of("radio without a rule"))
    labels = {k.get_label() for k in axes_of(figure, "profile").lines}
    assert "first Fresnel zone" in labels
    assert "rule's line" not in labels
    told = words_of(figure)
    assert "no rule given; what the trade looks at" in told
    assert not any(t.startswith("rule: ") or t.endswith("governs") for t in told)


@pytest.mark.parametrize("name", RADIO)
def test_criteria_pointing_and_loss_are_those_of_the_words(
    case_of: CaseOf, name: str
) -> None:
    line = case_of(name).line
    told, plain = words_of(figure_of(case_of(name))), words(line)
    radio = record(line)["radio"]
    listed = [t for t in told if " short" in t or " to spare" in t]
    assert listed
    for text in listed:
        spare = text.split(": ")[1].removesuffix(", governs")
        assert spare in plain, text
    for tilt in ("from_tilt_deg", "to_tilt_deg"):
        assert any(f"{abs(radio['pointing'][tilt]):.2f}°" in t for t in told)
    assert f"free space {radio['loss']['free_space_db']:.1f} dB" in told
    assert f"diffraction {radio['loss']['diffraction_db']:.1f} dB" in told
    for air in radio["by_ke"]:
        clear = f"{air['clearance_m']:.1f}".replace("-", "−")
        assert clear in told
    assert not any(ax.get_label() == "target" for ax in figure_of(case_of(name)).axes)


def test_of_more_than_three_criteria_the_rest_are_counted(case_of: CaseOf) -> None:
    told = words_of(figure_of(case_of("radio low")))
    assert "and 1 more, all in the record" in told
    assert sum(t.endswith(", governs") for t in told) == 1


@pytest.mark.parametrize("name", RULED)
def test_the_place_where_the_rule_leaves_least_has_one_disc(
    case_of: CaseOf, name: str
) -> None:
    line = case_of(name).line
    radio = radio_of(line)
    assert radio is not None
    marks, _ = marks_of(course_of(line, "curved-sea"))
    ruled = [m for m in marks if "rule" in m.note]
    assert len(ruled) == 1
    place = radio.result.governing.at.place
    assert ruled[0].distance_m == pytest.approx(place.distance_m, abs=0.001)
    # discs tell the margin in the stated air, whatever the criterion's
    sight = course_of(line, "curved-sea").sight_m(np.array([place.distance_m]))
    margin = float(sight[0]) - place.ground_m - place.cover_m
    assert ruled[0].margin_m == pytest.approx(margin, abs=1e-6)


def test_heights_that_merely_see_are_not_offered_to_a_clear_radio_path(
    case_of: CaseOf,
) -> None:
    for name in RADIO:
        figure = figure_of(case_of(name))
        labels = {k.get_label() for k in axes_of(figure, "profile").lines}
        blocked = case_of(name).line.verdict == "blocked"
        assert ("needed height" in labels) == blocked
        assert any(t.startswith("A at ") for t in words_of(figure)) == blocked


@pytest.mark.parametrize("name", ["trees", "radio over trees"])
def test_trees_are_a_stippled_band_of_their_own_from_ground_to_top(
    case_of: CaseOf, name: str
) -> None:
    line = case_of(name).line
    figure = figure_of(case_of(name))
    ax = axes_of(figure, "profile")
    bands = [c for c in ax.collections if c.get_label() == "trees, buildings"]
    assert len(bands) == 1
    assert "." in str(bands[0].get_hatch())
    assert "/" not in str(bands[0].get_hatch())
    course = course_of(line, "curved-sea")
    dist = line.profile.dist_m
    paper = course.paper_m(dist, line.profile.top_m)
    covered = line.profile.cover_m > 0.0
    corners = np.vstack([np.asarray(p.vertices) for p in bands[0].get_paths()])
    assert corners[:, 1].max() == pytest.approx(paper[covered].max(), abs=1e-6)
    span = {s.start_m for s in line.profile.cover_spans}
    starts = {float(np.asarray(p.vertices)[:, 0].min()) for p in bands[0].get_paths()}
    for start in span:
        assert min(abs(s * 1000.0 - start) for s in starts) < 50.0
    assert "trees, buildings" in words_of(figure)
    assert any(t.endswith(", trees") for t in words_of(figure))
    assert "trees, buildings" not in words_of(figure_of(case_of("main")))


@pytest.mark.parametrize("name", CASES)
def test_the_key_ends_inside_the_profiles_frame_at_900_pixels(
    case_of: CaseOf, name: str
) -> None:
    figure = figure_of(case_of(name))
    figure.set_dpi(77.0)
    canvas = figure.canvas
    assert isinstance(canvas, FigureCanvasAgg)
    canvas.draw()  # type: ignore[no-untyped-call]
    renderer = canvas.get_renderer()  # type: ignore[no-untyped-call]
    area = page.KEY_AREA
    inside = [
        t
        for t in figure.texts
        if area.bottom <= t.get_position()[1] * page.PAGE_IN[1] <= area.top
        and t.get_position()[0] * page.PAGE_IN[0] < area.right
    ]
    assert len(inside) >= 4
    most = max(t.get_window_extent(renderer).x1 for t in inside)
    assert most <= area.right * 77.0


@pytest.mark.parametrize("name", CASES)
def test_discs_in_the_table_stand_apart(case_of: CaseOf, name: str) -> None:
    figure = figure_of(case_of(name))
    area = page.TABLE_AREA
    discs = [a for a in figure.get_children() if isinstance(a, Ellipse)]
    centres = [float(np.asarray(d.get_center())[1]) * page.PAGE_IN[1] for d in discs]
    pairs = [(y, d) for y, d in zip(centres, discs, strict=True) if y < area.top]
    rows = sorted(pairs, key=lambda pair: pair[0])
    for (low, one), (high, other) in pairwise(rows):
        rings = (one.get_linewidth() + other.get_linewidth()) / 2.0 / page.PT_PER_IN
        radii = (one.height + other.height) / 2.0 * page.PAGE_IN[1]
        assert high - low > radii + rings


def test_a_bare_target_that_is_seen_gets_the_view_and_an_enlargement(
    case_of: CaseOf,
) -> None:
    for name in ("own hill", "bare and clear"):
        line = case_of(name).line
        figure = figure_of(case_of(name))
        told = words_of(figure)
        assert "view from A to B" in told
        up = line.from_elevation_deg
        assert any(t.endswith(f", {abs(up):.2f}° above level") for t in told)
        ax = axes_of(figure, "view")
        assert line.decisive is not None
        low, high = ax.get_xlim()
        assert low <= line.decisive.distance_m / 1000.0 <= high
        assert high - low == pytest.approx(0.12 * line.path.length_m / 1000.0)
        origin, right, top = ax.transData.transform([(0, 0), (1, 0), (0, 1000)])
        times = (top[1] - origin[1]) / (right[0] - origin[0])
        told_times = next(t for t in told if t.startswith("round 1, heights drawn"))
        assert float(told_times.split()[4]) == pytest.approx(times, rel=0.05)


def test_the_dems_own_ground_is_told_beside_a_surveyed_one(case_of: CaseOf) -> None:
    line = case_of("surveyed").line
    assert line.other_ground is not None
    told = words_of(figure_of(case_of("surveyed")))
    assert "with the DEM's own ground at the ends" in told
    margin = f"{line.other_ground.margin_m:.1f}".replace("-", "−")
    assert f"HIDDEN, margin {margin} m" in told
    assert not any("own ground" in t for t in words_of(figure_of(case_of("main"))))


def test_warnings_are_counted_and_the_first_is_told(case_of: CaseOf) -> None:
    line = case_of("radio blocked").line
    assert len(line.warnings) > 1
    told = words_of(figure_of(case_of("radio blocked")))
    first = line.warnings[0].text
    assert f"{len(line.warnings)} warnings, the first: {first}" in told
    alone = case_of("bank at A").line.warnings
    assert len(alone) == 1
    assert f"Warning: {alone[0].text}" in words_of(figure_of(case_of("bank at A")))


def test_a_radio_paths_own_caution_stands_whole_in_the_footer(case_of: CaseOf) -> None:
    line = case_of("radio met").line
    told = " ".join(words_of(figure_of(case_of("radio met"))))
    for note in line.cautions:
        if note.code.startswith("radio"):
            assert note.text in told
            break
    else:
        pytest.fail("a radio path has a caution of its own")


def test_a_dot_on_ring_a_leaves_the_ring_in_sight(case_of: CaseOf) -> None:
    figure = figure_of(case_of("bank at A"))
    dots = [
        k
        for k in figure.get_children()
        if isinstance(k, Line2D) and k.get_marker() == "o"
    ]
    sizes = sorted(float(k.get_markersize()) for k in dots)
    assert sizes[0] < page.MARKER / 2.0
    assert len(dots) == 2
