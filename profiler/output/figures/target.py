"""The target beside the axis, to its own scale: what is visible and what is hidden."""

from typing import Final

import numpy as np
from matplotlib.axes import Axes
from matplotlib.patches import Rectangle

from profiler.model import Shown
from profiler.output.figures import page
from profiler.output.figures.course import Course
from profiler.output.figures.scale import Scale, nice_ticks, tick_texts

#: The drawing holds the grazing ray up to so many target heights [1]; our choice.
RAY_TIMES: Final = 3.0
#: Range of the drawing of a target without height [m]; our choice.
BARE_RANGE_M: Final = 10.0
#: Room above and ground below [1 of range].
ROOM_ABOVE: Final = 0.1
ROOM_BELOW: Final = 0.12
#: Left and right edge of the target on an axis from 0 to 1.
SIDES: Final = (0.36, 0.64)
#: Most heights on the axis [1].
MOST_TICKS: Final = 5
#: Widths of lines [pt].
EDGE_WIDTH: Final = 1.2
RAY_WIDTH: Final = 1.7
DASH_DOT: Final = (0, (6.0, 2.0, 1.2, 2.0))
MARKER: Final = 8.5


def ray_above_foot_m(course: Course) -> float | None:
    """Height of the grazing ray above the target's foot [m]; None without a ray."""
    line = course.line
    foot = line.to.ground_m
    ray = course.grazing_m(np.array([line.path.length_m]))
    if ray is None or foot is None:
        return None
    return float(ray[0]) - foot


def draw_target(ax: Axes, course: Course, scale: Scale) -> Axes:
    """The target alone: visible part solid, hidden part hatched.

    Parameters
    ----------
    ax : Axes
        Where to draw; y in the unit of heights above the target's foot.
    course : Course
        The answer.
    scale : Scale
        Units.
    """
    target, v = course.line.target, scale.height_unit_m
    height = target.height_m
    top = height if height > 0.0 else BARE_RANGE_M
    ray = ray_above_foot_m(course)
    if ray is not None and top < ray <= max(RAY_TIMES * top, BARE_RANGE_M):
        top = ray
    ax.set_xlim(0.0, 1.0)
    ax.set_ylim(-ROOM_BELOW * top / v, (1.0 + ROOM_ABOVE) * top / v)
    ax.axhspan(-ROOM_BELOW * top / v, 0.0, color=page.GROUND, lw=0.0)
    ax.axhline(0.0, color=page.EDGE, lw=EDGE_WIDTH)
    if height > 0.0:
        _bar(ax, 0.0, target.hidden_m / v, solid=False)
        _bar(ax, target.hidden_m / v, height / v, solid=True)
    if ray is not None and 0.0 <= ray <= top:
        ax.axhline(
            ray / v,
            color=page.GRAZING,
            lw=RAY_WIDTH,
            ls=DASH_DOT,
            zorder=page.Z_RAY,
            label="grazing ray",
        )
    if target.aim_moved_m == 0.0:
        ax.plot(
            0.5,
            height / v,
            ls="none",
            marker="s",
            ms=MARKER,
            mfc="none",
            mec=page.EDGE if target.shown == Shown.NONE else page.EDGE,
            mew=RAY_WIDTH,
            zorder=page.Z_MARK,
            label="B",
        )
    ticks = nice_ticks(0.0, (1.0 + ROOM_ABOVE) * top / v, MOST_TICKS)
    ax.set_yticks(ticks, tick_texts(ticks))
    ax.set_xticks([])
    page.style_ticks(ax)
    for side in ("top", "right", "bottom"):
        ax.spines[side].set_visible(False)
    return ax


def _bar(ax: Axes, low: float, high: float, *, solid: bool) -> None:
    if high <= low:
        return
    ax.add_patch(
        Rectangle(
            (SIDES[0], low),
            SIDES[1] - SIDES[0],
            high - low,
            facecolor=page.QUIET if solid else page.PAPER,
            edgecolor=page.EDGE if solid else page.HATCHING,
            hatch=None if solid else "//////",
            lw=EDGE_WIDTH,
            zorder=page.Z_GROUND,
            label="visible" if solid else "hidden",
        )
    )


def target_lines(course: Course, scale: Scale) -> list[str]:
    """What the drawing shows, in words of a narrow column."""
    line, show = course.line, scale.show
    target = line.target
    if target.height_m > 0.0:
        lines = [
            f"visible {show.height(target.visible_m)}",
            f"hidden {show.height(target.hidden_m)}",
        ]
    else:
        seen = "seen" if target.shown != Shown.NONE else "hidden"
        lines = [f"no height, {seen}"]
    ray = ray_above_foot_m(course)
    if ray is not None and target.shown == Shown.NONE and target.aim_moved_m == 0.0:
        over = ray - target.height_m
        lines.append(f"lowest ray {show.height(over)} over it")
    if target.above_crest_m is not None and target.shown != Shown.NONE:
        lines.append(f"{show.height(target.above_crest_m)} above the crest")
    if target.aim_moved_m > 0.0:
        lines.append(f"B is {show.height(target.aim_moved_m)} before it")
    if target.own_hill_m > 0.0:
        lines.append(f"own hill {show.height(target.own_hill_m)} round it")
    return lines
