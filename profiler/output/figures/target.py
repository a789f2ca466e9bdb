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
#: Least range of a drawing [m]; our choice.
LEAST_RANGE_M: Final = 1.0
#: A ray this little above a bare target is the target's own [m]; the record's digit.
LEAST_RAY_M: Final = 0.001
#: Room above and ground below [1 of range].
ROOM_ABOVE: Final = 0.1
ROOM_BELOW: Final = 0.12
#: Middle, and left and right edge of the target, on an axis from 0 to 1.
MIDDLE: Final = 0.5
SIDES: Final = (0.36, 0.64)
#: Most heights on the axis [1].
MOST_TICKS: Final = 5
#: Widths of lines [pt].
EDGE_WIDTH: Final = 1.2


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
    height, top = target.height_m, range_m(course)
    ray = ray_above_foot_m(course)
    ax.set_xlim(0.0, 1.0)
    ax.set_ylim(-ROOM_BELOW * top / v, (1.0 + ROOM_ABOVE) * top / v)
    ax.axhspan(-ROOM_BELOW * top / v, 0.0, color=page.GROUND, lw=0.0)
    ax.axhline(0.0, color=page.EDGE, lw=EDGE_WIDTH)
    _bar(ax, 0.0, target.hidden_m / v, solid=False)
    _bar(ax, target.hidden_m / v, height / v, solid=True)
    if ray is not None:
        _ray(ax, ray / v, top / v)
    if target.aim_moved_m == 0.0:
        page.spot(ax, (MIDDLE, height / v), "s", label="B")
    ticks = nice_ticks(0.0, (1.0 + ROOM_ABOVE) * top / v, MOST_TICKS)
    ax.set_yticks(ticks, tick_texts(ticks))
    ax.set_xticks([])
    page.style_ticks(ax)
    for side in ("top", "right", "bottom"):
        ax.spines[side].set_visible(False)
    return ax


def has_drawing(course: Course) -> bool:
    """Whether there is a height to draw: the target's or the ray's over it."""
    ray = ray_above_foot_m(course)
    return course.line.target.height_m > 0.0 or (ray is not None and ray > LEAST_RAY_M)


def range_m(course: Course) -> float:
    """Height of the drawing above the target's foot [m]: target and near rays."""
    height, ray = course.line.target.height_m, ray_above_foot_m(course)
    if ray is None or ray <= height:
        return height
    if height == 0.0:
        return max(ray, LEAST_RANGE_M)
    return ray if ray <= RAY_TIMES * height else height


def _ray(ax: Axes, ray: float, top: float) -> None:
    """The grazing ray where it passes the target, or which way it lies."""
    if 0.0 <= ray <= top:
        ax.axhline(
            ray,
            color=page.GRAZING,
            lw=page.RAY_WIDTH,
            ls=page.DASH_DOT,
            zorder=page.Z_RAY,
            label="grazing ray",
        )
    elif ray > top:
        look = {"mfc": page.GRAZING, "mew": page.THIN, "transform": ax.transAxes}
        label = "grazing ray above"
        page.spot(ax, (MIDDLE, 1.0), "^", label=label, clip_on=False, **look)


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
            f"height {show.given(target.height_m)}",
            f"visible {show.height(target.visible_m)}",
            f"hidden {show.height(target.hidden_m)}",
        ]
    else:
        seen = "seen" if target.shown != Shown.NONE else "hidden"
        what = "a point above a void" if line.to.ground_m is None else "bare ground"
        lines = [f"{what}, {seen}"]
    ray = ray_above_foot_m(course)
    if ray is not None and target.shown == Shown.NONE and target.aim_moved_m == 0.0:
        over = ray - target.height_m
        lines.append(f"lowest ray {show.height(over)} over it")
    if target.above_crest_m is not None and target.shown != Shown.NONE:
        lines.append(f"{show.height(target.above_crest_m)} above the crest")
    if target.aim_moved_m > 0.0:
        lines.append(f"B {show.height(target.aim_moved_m)} before the given point")
    if target.own_hill_m > 0.0:
        lines.append(f"own hill: {show.given(target.own_hill_m)} round it")
    return lines
