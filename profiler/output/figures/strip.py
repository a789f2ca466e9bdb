"""The strip below the profile: the margin along the path, and the discs between."""

from typing import Final

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.patches import Ellipse

from profiler.output.figures import page
from profiler.output.figures.course import Course, Trace, void_runs
from profiler.output.figures.ends import Limits
from profiler.output.figures.marks import Mark, spread
from profiler.output.figures.scale import Scale, nice_ticks, tick_texts
from profiler.output.figures.zone import RULE_LOOK, has_rule, left_over_m
from profiler.output.told import radio_of

#: The strip shows margins up to so many times the lowest one [1]; our choice.
MARGIN_TIMES: Final = 8.0
#: and at least this much on either side of zero [m]; our choice.
LEAST_MARGIN_M: Final = 2.0
#: Room below and above the curve [1 of range].
ROOM: Final = 0.12
#: Most ticks of margins and of distances [1].
MOST_MARGINS: Final = 3
MOST_DISTANCES: Final = 10
#: Widths of lines [pt].
CURVE: Final = 1.1
ZERO: Final = 0.7
LEADER: Final = 0.7
#: Diameter of a disc and least distance between two [in].
DISC_IN: Final = 0.185
DISC_GAP_IN: Final = 0.205
#: Letters in a smaller disc [pt].
SMALL_LETTERS: Final = 7.0
#: Ring of the decisive disc and of the others [pt].
RING_DECIDES: Final = 1.8
RING: Final = 0.6


def margin_limits(course: Course) -> tuple[float, float]:
    """Lowest and highest margin that the strip shows [m]: the tight part."""
    margin = course.line.margin_along_m
    known = margin[np.isfinite(margin)]
    least = course.line.margin_m
    if least is None:
        least = float(known.min()) if known.size else 0.0
    tight = [least]
    radio = radio_of(course.line)
    if radio is not None and has_rule(radio):
        tight.append(radio.result.governing.margin_m)
    low, large = min(*tight, 0.0), max(abs(t) for t in tight)
    high = max(MARGIN_TIMES * min(abs(t) for t in tight), large, LEAST_MARGIN_M)
    if known.size:
        high = min(high, max(float(known.max()), LEAST_MARGIN_M, large))
    room = ROOM * (high - low)
    return low - room, high + room


def draw_strip(ax: Axes, course: Course, trace: Trace, scale: Scale) -> Axes:
    """The margin along the path; below zero it is filled.

    Parameters
    ----------
    ax : Axes
        Where to draw; x in the unit of distances, y in that of heights.
    course : Course
        The answer.
    trace : Trace
        Its ground.
    scale : Scale
        Units.
    """
    u, v = scale.distance_unit_m, scale.height_unit_m
    low, high = margin_limits(course)
    x, y = trace.dist_m / u, trace.margin_m / v
    within = np.where(trace.dist_m <= course.line.aim_distance_m, y, np.nan)
    ax.set_xlim(*scale.x_limits())
    ax.set_ylim(low / v, high / v)
    ax.fill_between(
        x, np.minimum(within, 0.0), 0.0, color=page.DISC, lw=0.0, zorder=page.Z_GROUND
    )
    for start, end in void_runs(course):
        ax.axvspan(
            start / u,
            end / u,
            facecolor=page.PAPER,
            edgecolor=page.HATCHING,
            hatch="xxxx",
            lw=0.0,
            zorder=page.Z_GROUND,
        )
    ax.axhline(0.0, color=page.SIGHT, lw=ZERO, zorder=page.Z_EDGE)
    ax.plot(x, within, color=page.EDGE, lw=CURVE, zorder=page.Z_RAY, label="margin")
    left = left_over_m(course, trace)
    if left is not None:
        ax.plot(x, left / v, zorder=page.Z_RAY, label="left by the rule", **RULE_LOOK)
    ticks = nice_ticks(low / v, high / v, MOST_MARGINS)
    ax.set_yticks(ticks, tick_texts(ticks))
    places = nice_ticks(0.0, scale.length_m / u, MOST_DISTANCES)
    ax.set_xticks(places, tick_texts(places))
    page.style_ticks(ax)
    return ax


def is_cut(course: Course) -> bool:
    """Whether larger margins lie above the strip's edge."""
    margin = course.line.margin_along_m
    known = margin[np.isfinite(margin)]
    return bool(known.size) and float(known.max()) > margin_limits(course)[1]


def draw_lane(
    figure: Figure, course: Course, marks: list[Mark], limits: Limits, scale: Scale
) -> list[Ellipse]:
    """Discs between profile and strip, each with a line to its ground and margin."""
    wanted = leaders_in(marks, scale)
    lane = page.LANE_AREA
    half = DISC_IN / 2.0
    placed = spread(wanted, DISC_GAP_IN, lane.left + half, lane.right - half)
    discs = []
    for mark, there, x in zip(marks, wanted, placed, strict=True):
        y = lane.bottom + lane.height / 2.0
        ground = course.paper_at(mark.distance_m, mark.ground_m)
        area = page.PROFILE_AREA
        share = (ground - limits.low_m) / (limits.high_m - limits.low_m)
        top = area.bottom + share * area.height
        _leader(figure, [(there, top), (there, lane.top), (x, y), (there, lane.bottom)])
        _dot(figure, there, top, small=_is_at_end(course, mark, limits))
        discs.append(draw_disc(figure, x, y, mark))
    return discs


def leaders_in(marks: list[Mark], scale: Scale) -> list[float]:
    """Where the discs' places stand on the page [in]."""
    return [scale.x_in(mark.distance_m, page.LANE_AREA) for mark in marks]


def _leader(figure: Figure, corners: list[tuple[float, float]]) -> None:
    xs, ys = zip(*corners, strict=True)
    figure.add_artist(
        Line2D(
            [x / page.PAGE_IN[0] for x in xs],
            [y / page.PAGE_IN[1] for y in ys],
            color=page.QUIET,
            lw=LEADER,
            zorder=page.Z_RAY,
        )
    )


def _is_at_end(course: Course, mark: Mark, limits: Limits) -> bool:
    """Whether a mark's dot would cover ring A or square B."""
    line, area = course.line, page.PROFILE_AREA
    per_m = area.width / line.path.length_m
    up_m = area.height / (limits.high_m - limits.low_m)
    near_in = page.MARKER / page.PT_PER_IN
    ground = course.paper_at(mark.distance_m, mark.ground_m)
    ends = ((0.0, line.from_.amsl_m), (line.aim_distance_m, line.aim_m))
    return any(
        abs(mark.distance_m - dist) * per_m < near_in
        and abs(ground - course.paper_at(dist, height)) * up_m < near_in
        for dist, height in ends
    )


def _dot(figure: Figure, x_in: float, y_in: float, *, small: bool) -> None:
    figure.add_artist(
        Line2D(
            [x_in / page.PAGE_IN[0]],
            [y_in / page.PAGE_IN[1]],
            marker="o",
            ms=page.DOT / 2.0 if small else page.DOT,
            mfc=page.DISC,
            mec=page.EDGE,
            mew=RING,
            ls="none",
            zorder=page.Z_MARK,
        )
    )


def draw_disc(
    figure: Figure,
    x_in: float,
    y_in: float,
    mark: Mark,
    *,
    size_in: float = DISC_IN,
    ring: float = RING_DECIDES,
) -> Ellipse:
    """A disc with its number; a letter stands in an open one."""
    width, height = page.PAGE_IN
    numbered = mark.symbol.isdigit()
    disc = Ellipse(
        (x_in / width, y_in / height),
        (size_in if len(mark.symbol) == 1 else max(size_in, DISC_IN)) / width,
        size_in / height,
        facecolor=page.DISC if numbered else page.PAPER,
        edgecolor=page.EDGE if numbered else page.DISC,
        lw=ring if mark.decides or not numbered else RING,
        zorder=page.Z_MARK,
        transform=figure.transFigure,
    )
    figure.add_artist(disc)
    page.write(
        figure,
        x_in,
        y_in,
        mark.symbol,
        size=page.SMALL if size_in >= DISC_IN else SMALL_LETTERS,
        bold=True,
        ha="center",
        va="center_baseline",
        zorder=page.Z_MARK + 1,
    )
    return disc
