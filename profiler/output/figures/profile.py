"""The profile: ground, sight line, grazing ray, both ends, voids and levels."""

from typing import Final, NamedTuple

import numpy as np
from matplotlib.axes import Axes

from profiler.model import BoolArray, FloatArray
from profiler.output.figures import page
from profiler.output.figures.course import Course, Trace, void_runs
from profiler.output.figures.scale import Scale, nice_ticks, tick_texts

#: The drawing may grow by this share of its range to hold the sea [1]; our choice.
SEA_SHARE: Final = 0.8
#: The same for a grazing ray or a needed height above everything else [1].
RAY_SHARE: Final = 0.5
#: Room above and below the drawing, and above it for a void's words [1 of range].
ROOM_ABOVE: Final = 0.09
ROOM_BELOW: Final = 0.09
ROOM_FOR_WORDS: Final = 0.3
#: Least range of heights on the drawing [m]; a flat field stays flat.
LEAST_RANGE_M: Final = 8.0
#: Depth of the hatching under unseen ground [1 of range].
HATCH_SHARE: Final = 0.08
#: Widths of lines [pt].
THICK: Final = 2.4
THIN: Final = 0.7
RAY_WIDTH: Final = 1.7
LEVEL_WIDTH: Final = 0.5
MARKER: Final = 8.5
#: Dash-dot of the grazing ray and dashes of the sea [pt].
DASH_DOT: Final = (0, (6.0, 2.0, 1.2, 2.0))
SEA_DASHES: Final = (0, (9.0, 3.0))
#: Most heights on the axis [1].
MOST_TICKS: Final = 6
#: Letters A and B stand so far from their mark [pt].
LETTER_OFF: Final = 10.0
#: Name of the needed-height marks, for the key.
NEEDED_LABEL: Final = "needed height"


class Limits(NamedTuple):
    """Lowest and highest height on paper [m]; whether the sea is within them."""

    low_m: float
    high_m: float
    has_sea: bool


def needed_heights(course: Course) -> list[tuple[float, float]]:
    """Distance and height above sea level of the needed height at each end [m]."""
    line, found = course.line, []
    ends = (
        (0.0, line.from_.ground_m, line.needed.from_agl_m),
        (line.path.length_m, line.to.ground_m, line.needed.to_agl_m),
    )
    for dist, ground, agl in ends:
        if ground is not None and agl is not None:
            found.append((dist, ground + agl))
    return found


def limits_of(course: Course, trace: Trace) -> Limits:
    """What the drawing must hold, and what it holds if that costs little."""
    line = course.line
    must = [
        *_finite(trace.paper_m),
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
    span = high - low
    return Limits(low - ROOM_BELOW * span, high + room * span, has_sea)


def _finite(values: FloatArray) -> list[float]:
    known = values[np.isfinite(values)]
    return [float(known.min()), float(known.max())] if known.size else []


def draw_profile(
    ax: Axes, course: Course, trace: Trace, limits: Limits, scale: Scale
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
    """
    u, v = scale.distance_unit_m, scale.height_unit_m
    ax.set_xlim(*scale.x_limits())
    ax.set_ylim(limits.low_m / v, limits.high_m / v)
    _levels(ax, course, limits, scale)
    _ground(ax, trace, limits, scale)
    for start, end in void_runs(course):
        _void(ax, course, limits, scale, (start, end))
    smooth = course.smooth_m()
    if limits.has_sea:
        sea = course.paper_m(smooth, np.zeros_like(smooth))
        ax.plot(
            smooth / u,
            sea / v,
            color=page.QUIET,
            lw=THIN,
            ls=SEA_DASHES,
            zorder=page.Z_EDGE,
            label="sea level",
        )
    ray = course.grazing_m(smooth)
    if ray is not None:
        ax.plot(
            smooth / u,
            course.paper_m(smooth, ray) / v,
            color=page.GRAZING,
            lw=RAY_WIDTH,
            ls=DASH_DOT,
            zorder=page.Z_RAY,
            label="grazing ray",
        )
    reach = smooth * (course.line.aim_distance_m / course.line.path.length_m)
    ax.plot(
        reach / u,
        course.paper_m(reach, course.sight_m(reach)) / v,
        color=page.SIGHT,
        lw=RAY_WIDTH,
        zorder=page.Z_RAY,
        label="sight line",
    )
    _ends(ax, course, limits, scale)
    ax.set_xticks([])
    page.style_ticks(ax)
    return ax


def _levels(ax: Axes, course: Course, limits: Limits, scale: Scale) -> None:
    """Lines of equal height, labelled where they meet the left edge."""
    v, u = scale.height_unit_m, scale.distance_unit_m
    left, right = (x * u for x in scale.x_limits())
    dist = np.linspace(left, right, course.smooth_m().size)
    shift = course.paper_at(left, 0.0)
    ticks = nice_ticks(
        (limits.low_m - shift) / v, (limits.high_m - shift) / v, MOST_TICKS
    )
    for tick in ticks:
        paper = course.paper_m(dist, np.full_like(dist, tick * v))
        ax.plot(
            dist / u,
            paper / v,
            color=page.LEVEL,
            lw=LEVEL_WIDTH,
            zorder=page.Z_GROUND + 1,
        )
    ax.set_yticks([t + shift / v for t in ticks], tick_texts(ticks))


def edge_runs(seen: BoolArray, known: BoolArray, *, want: bool) -> list[slice]:
    """Runs of samples whose joining edge is seen throughout, or not."""
    both = seen[:-1] & seen[1:]
    pick = (both if want else ~both) & known[:-1] & known[1:]
    edges = np.flatnonzero(
        np.diff(np.concatenate([[False], pick, [False]]).astype(int))
    )
    return [
        slice(int(a), int(b) + 1) for a, b in zip(edges[::2], edges[1::2], strict=True)
    ]


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
    ax.plot(hx, hy, color=page.EDGE, lw=THIN, zorder=page.Z_EDGE)
    ax.plot(
        _joined(x, lit),
        _joined(y, lit),
        color=page.EDGE,
        lw=THICK,
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
        lw=THIN,
        zorder=page.Z_GROUND,
        label="no ground known",
    )


def _ends(ax: Axes, course: Course, limits: Limits, scale: Scale) -> None:
    """Masts, the eye's ring A, the aim point's square B, and needed heights."""
    line, u, v = course.line, scale.distance_unit_m, scale.height_unit_m
    length = line.path.length_m
    for dist, end in ((0.0, line.from_), (length, line.to)):
        if end.ground_m is not None:
            foot, top = end.ground_m, end.amsl_m
            pair = course.paper_m(np.array([dist, dist]), np.array([foot, top])) / v
            ax.plot(
                [dist / u] * 2, pair, color=page.EDGE, lw=RAY_WIDTH, zorder=page.Z_EDGE
            )
    inside = [
        (d / u, course.paper_at(d, z) / v)
        for d, z in needed_heights(course)
        if limits.low_m <= course.paper_at(d, z) <= limits.high_m
    ]
    if inside:
        xs, ys = zip(*inside, strict=True)
        ax.plot(
            xs,
            ys,
            ls="none",
            marker="_",
            ms=2.0 * MARKER,
            mew=RAY_WIDTH,
            color=page.EDGE,
            zorder=page.Z_MARK,
            label=NEEDED_LABEL,
        )
    spots = (
        ("A", "o", 0.0, line.from_.amsl_m, "right", -1.0),
        ("B", "s", line.aim_distance_m, line.aim_m, "left", 1.0),
    )
    for letter, shape, dist, height, side, way in spots:
        at = (dist / u, course.paper_at(dist, height) / v)
        ax.plot(
            *at,
            ls="none",
            marker=shape,
            ms=MARKER,
            mfc="none",
            mec=page.EDGE,
            mew=RAY_WIDTH,
            zorder=page.Z_MARK,
            label=letter,
        )
        ax.annotate(
            letter,
            at,
            xytext=(way * LETTER_OFF, 0.0),
            textcoords="offset points",
            ha=side,
            va="center",
            fontproperties=page.letters(page.SIZE, bold=True),
            zorder=page.Z_MARK,
        )
    if line.target.aim_moved_m > 0.0:
        given = course.paper_at(length, line.to.amsl_m) / v
        ax.plot(
            length / u,
            given,
            ls="none",
            marker="+",
            ms=MARKER,
            color=page.EDGE,
            mew=RAY_WIDTH,
            zorder=page.Z_MARK,
            label="given point",
        )
