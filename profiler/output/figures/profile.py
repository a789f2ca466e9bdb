"""The profile: ground, sight line, grazing ray, both ends, voids and levels."""

from typing import Any, Final

import numpy as np
from matplotlib.axes import Axes

from profiler.kernels.runs import runs_of_true
from profiler.model import BoolArray, FloatArray
from profiler.output.figures import page
from profiler.output.figures.course import Course, Trace, void_runs
from profiler.output.figures.cover import draw_cover
from profiler.output.figures.ends import Limits, draw_ends, needed_heights
from profiler.output.figures.scale import Scale, nice_ticks, tick_texts
from profiler.output.figures.zone import Zone

#: The drawing may grow by this share of its range to hold the sea [1]; our choice.
SEA_SHARE: Final = 0.8
#: The same for a grazing ray or a needed height above everything else [1].
RAY_SHARE: Final = 0.5
#: Room above and below the drawing, and above it for a void's words [1 of range].
ROOM_ABOVE: Final = 0.09
ROOM_BELOW: Final = 0.09
ROOM_FOR_WORDS: Final = 0.3
#: Room below the drawing for the words of a radio path's rule [1 of range].
ROOM_FOR_RULE: Final = 0.12
#: Least range of heights on the drawing [m]; a flat field stays flat.
LEAST_RANGE_M: Final = 8.0
#: Depth of the hatching under unseen ground [1 of range].
HATCH_SHARE: Final = 0.08
#: Width of lines of equal height [pt].
LEVEL_WIDTH: Final = 0.5
#: Most heights on the axis [1].
MOST_TICKS: Final = 6


def limits_of(course: Course, trace: Trace, zone: Zone | None) -> Limits:
    """What the drawing must hold, and what it holds if that costs little."""
    line = course.line
    must = [
        *_finite(trace.paper_m),
        *_finite(trace.paper_top_m),
        *([] if zone is None else _zone_heights(course, zone)),
        line.from_.amsl_m,
        course.paper_at(line.aim_distance_m, line.aim_m),
        course.paper_at(line.path.length_m, line.to.amsl_m),
        *course.paper_m(course.smooth_m(), course.sight_m(course.smooth_m())),
    ]
    low, high = float(min(must)), float(max(must))
    if high - low < LEAST_RANGE_M:
        high = low + LEAST_RANGE_M
    span = high - low
    smooth = course.smooth_m()
    sea = course.paper_m(smooth, np.zeros_like(smooth))
    has_sea = (
        low - span * SEA_SHARE <= sea.min() and sea.max() <= high + span * SEA_SHARE
    )
    if has_sea:
        low, high = min(low, float(sea.min())), max(high, float(sea.max()))
    wishes = [course.paper_at(d, z) for d, z in needed_heights(course)]
    ray = course.grazing_m(smooth)
    if ray is not None:
        wishes.append(float(course.paper_m(smooth, ray)[-1]))
    top = high + span * RAY_SHARE
    high = max([high, *(w for w in wishes if w <= top)])
    room = ROOM_FOR_WORDS if void_runs(course) else ROOM_ABOVE
    below = ROOM_BELOW if zone is None else ROOM_FOR_RULE
    span = high - low
    return Limits(low - below * span, high + room * span, has_sea)


def _zone_heights(course: Course, zone: Zone) -> list[float]:
    """Lowest and highest height on paper of the zone and of the rule's line."""
    heights = [zone.low_m, zone.high_m]
    if zone.rule_m is not None:
        heights.append(zone.rule_m)
    return [k for z in heights for k in _finite(course.paper_m(zone.dist_m, z))]


def _finite(values: FloatArray) -> list[float]:
    known = values[np.isfinite(values)]
    return [float(known.min()), float(known.max())] if known.size else []


def draw_profile(
    ax: Axes,
    course: Course,
    trace: Trace,
    limits: Limits,
    scale: Scale,
    *,
    ends: bool = True,
) -> Axes:
    """The profile of the answer.

    Parameters
    ----------
    ax : Axes
        Where to draw; x in the unit of distances, y on paper in that of heights.
    course : Course
        The answer over the chosen sea.
    trace : Trace
        Its ground.
    limits : Limits
        Heights on paper.
    scale : Scale
        Units.
    ends : bool
        Whether masts, ring A, square B and needed heights are drawn.
    """
    v = scale.height_unit_m
    ax.set_xlim(*scale.x_limits())
    ax.set_ylim(limits.low_m / v, limits.high_m / v)
    _levels(ax, course, limits, scale)
    _ground(ax, trace, limits, scale)
    draw_cover(ax, trace, scale)
    for start, end in void_runs(course):
        _void(ax, course, limits, scale, (start, end))
    _rays(ax, course, limits, scale)
    if ends:
        draw_ends(ax, course, limits, scale)
    ax.set_xticks([])
    page.style_ticks(ax)
    return ax


def _rays(ax: Axes, course: Course, limits: Limits, scale: Scale) -> None:
    """Sea, grazing ray and, to the aim point only, the sight line."""
    line, smooth = course.line, course.smooth_m()
    reach = smooth * (line.aim_distance_m / line.path.length_m)
    lines: list[tuple[FloatArray, FloatArray, dict[str, Any]]] = []
    if limits.has_sea:
        look = {"color": page.QUIET, "lw": page.THIN, "ls": page.SEA_DASHES}
        lines.append((smooth, np.zeros_like(smooth), {**look, "label": "sea level"}))
    ray = course.grazing_m(smooth)
    if ray is not None:
        look = {"color": page.GRAZING, "lw": page.RAY_WIDTH, "ls": page.DASH_DOT}
        lines.append((smooth, ray, {**look, "label": "grazing ray"}))
    look = {"color": page.SIGHT, "lw": page.RAY_WIDTH, "label": "sight line"}
    lines.append((reach, course.sight_m(reach), look))
    for dist, height, looks in lines:
        x, y = dist / scale.distance_unit_m, course.paper_m(dist, height)
        ax.plot(x, y / scale.height_unit_m, zorder=page.Z_RAY, **looks)


def _levels(ax: Axes, course: Course, limits: Limits, scale: Scale) -> None:
    """Lines of equal height, labelled at the ends, where they stand at themselves."""
    v, u = scale.height_unit_m, scale.distance_unit_m
    left, right = scale.x_limits()
    smooth = course.smooth_m()
    bulge = course.paper_m(smooth, np.zeros_like(smooth))
    ticks = nice_ticks(limits.low_m / v, limits.high_m / v, MOST_TICKS)
    ax.set_yticks(ticks, tick_texts(ticks))
    step = ticks[1] - ticks[0] if len(ticks) > 1 else 1.0
    lowest = np.floor((limits.low_m - bulge.max()) / v / step)
    highest = np.ceil((limits.high_m - bulge.min()) / v / step)
    x = np.concatenate([[left], smooth / u, [right]])
    for level in np.arange(lowest, highest + 1.0) * (step * v):
        paper = course.paper_m(smooth, np.full_like(smooth, level)) / v
        ax.plot(
            x,
            np.concatenate([paper[:1], paper, paper[-1:]]),
            color=page.LEVEL,
            lw=LEVEL_WIDTH,
            zorder=page.Z_GROUND + 1,
        )


def edge_runs(seen: BoolArray, known: BoolArray, *, want: bool) -> list[slice]:
    """Runs of samples whose joining edge is seen throughout, or not."""
    both = seen[:-1] & seen[1:]
    pick = (both if want else ~both) & known[:-1] & known[1:]
    return [slice(int(a), int(b) + 1) for a, b in zip(*runs_of_true(pick), strict=True)]


def _joined(values: FloatArray, runs: list[slice]) -> FloatArray:
    """Runs one after another with a gap between them."""
    parts = [np.append(values[run], np.nan) for run in runs]
    return np.concatenate(parts) if parts else np.zeros(0)


def _ground(ax: Axes, trace: Trace, limits: Limits, scale: Scale) -> None:
    x, y = trace.dist_m / scale.distance_unit_m, trace.paper_m / scale.height_unit_m
    known = np.isfinite(y)
    low = limits.low_m / scale.height_unit_m
    ax.fill_between(x, y, low, color=page.GROUND, lw=0.0, zorder=page.Z_GROUND)
    hidden = edge_runs(trace.seen, known, want=False)
    lit = edge_runs(trace.seen, known, want=True)
    depth = HATCH_SHARE * (limits.high_m - limits.low_m) / scale.height_unit_m
    hx, hy = _joined(x, hidden), _joined(y, hidden)
    ax.fill_between(
        hx,
        hy,
        np.maximum(hy - depth, low),
        facecolor="none",
        edgecolor=page.HATCHING,
        hatch="//////",
        lw=0.0,
        zorder=page.Z_GROUND + 1,
        label="not seen",
    )
    ax.plot(hx, hy, color=page.EDGE, lw=page.THIN, zorder=page.Z_EDGE)
    ax.plot(
        _joined(x, lit),
        _joined(y, lit),
        color=page.EDGE,
        lw=page.THICK,
        zorder=page.Z_EDGE,
        solid_capstyle="butt",
        label="ground seen",
    )


def _void(
    ax: Axes, course: Course, limits: Limits, scale: Scale, run: tuple[float, float]
) -> None:
    """A gap up to the sight line: ground that reaches it would block."""
    dist = np.linspace(run[0], min(run[1], course.line.aim_distance_m))
    top = course.paper_m(dist, course.sight_m(dist))
    ax.fill_between(
        dist / scale.distance_unit_m,
        np.maximum(top, limits.low_m) / scale.height_unit_m,
        limits.low_m / scale.height_unit_m,
        facecolor=page.PAPER,
        edgecolor=page.HATCHING,
        hatch="xxxx",
        lw=page.THIN,
        zorder=page.Z_GROUND,
        label="no ground",
    )
