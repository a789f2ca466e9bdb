"""Both ends on the profile: masts, ring A, square B, needed heights."""

from typing import Any, Final, Literal, NamedTuple

import numpy as np
from matplotlib.axes import Axes

from profiler.model import Verdict
from profiler.output.figures import page
from profiler.output.figures.course import Course
from profiler.output.figures.scale import Scale
from profiler.output.told import radio_of

#: Letters A and B stand so far from their mark [pt].
LETTER_OFF: Final = 10.0
#: Width of a needed height [pt]: it ends before the letter begins.
NEEDED_WIDE: Final = 13.5


class Limits(NamedTuple):
    """Lowest and highest height on paper [m]; whether the sea is within them."""

    low_m: float
    high_m: float
    has_sea: bool


def needed_heights(course: Course) -> list[tuple[float, float]]:
    """Distance and height above sea level of the needed height at each end [m]."""
    line, found = course.line, []
    if radio_of(line) is not None and line.verdict is not Verdict.BLOCKED:
        return []  # a radio path's heights must meet its rule, not merely see
    ends = (
        (0.0, line.from_.ground_m, line.needed.from_agl_m),
        (line.path.length_m, line.to.ground_m, line.needed.to_agl_m),
    )
    for dist, ground, agl in ends:
        if ground is not None and agl is not None:
            found.append((dist, ground + agl))
    return found


def draw_ends(ax: Axes, course: Course, limits: Limits, scale: Scale) -> None:
    """Masts, the eye's ring A, the aim point's square B and needed heights.

    Parameters
    ----------
    ax : Axes
        The profile's.
    course : Course
        The answer over the chosen sea.
    limits : Limits
        Heights on paper; needed heights outside them stand in the table only.
    scale : Scale
        Units.
    """
    line, u, v = course.line, scale.distance_unit_m, scale.height_unit_m
    length = line.path.length_m
    for dist, end in ((0.0, line.from_), (length, line.to)):
        if end.ground_m is not None:
            heights = np.array([end.ground_m, end.amsl_m])
            pair = course.paper_m(np.array([dist, dist]), heights) / v
            look: dict[str, Any] = {"color": page.EDGE, "lw": page.RAY_WIDTH}
            ax.plot([dist / u] * 2, pair, zorder=page.Z_EDGE, **look)
    for dist, height in needed_heights(course):
        paper = course.paper_at(dist, height)
        if limits.low_m <= paper <= limits.high_m:
            at = (dist / u, paper / v)
            page.spot(ax, at, "_", label="needed height", ms=NEEDED_WIDE)
    for letter, shape, dist, height in (
        ("A", "o", 0.0, line.from_.amsl_m),
        ("B", "s", line.aim_distance_m, line.aim_m),
    ):
        side: Literal["left", "right"] = "right" if letter == "A" else "left"
        off = -LETTER_OFF if letter == "A" else LETTER_OFF
        at = (dist / u, course.paper_at(dist, height) / v)
        page.spot(ax, at, shape, label=letter)
        page.letter_beside(ax, letter, at, (off, 0.0), ha=side)
    if line.target.aim_moved_m > 0.0:
        at = (length / u, course.paper_at(length, line.to.amsl_m) / v)
        page.spot(ax, at, "+", label="given point")
