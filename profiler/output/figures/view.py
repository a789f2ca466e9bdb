"""Beside the profile when there is no target to draw: the view from A, enlarged."""

from typing import Final

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure

from profiler.output.figures import page
from profiler.output.figures.course import Course, Trace
from profiler.output.figures.ends import Limits
from profiler.output.figures.profile import draw_profile
from profiler.output.figures.scale import Scale, nice_ticks, tick_texts, times_text
from profiler.output.figures.target import target_lines

#: Half the path shown round the tightest place [1 of its length]; our choice.
HALF_SHARE: Final = 0.06
#: Room above and below what is shown [1 of range].
ROOM: Final = 0.12
#: Most ticks of heights and of distances [1].
MOST_HEIGHTS: Final = 4
MOST_DISTANCES: Final = 2
#: Distance from the words to the drawing's head [in].
HEAD_GAP_IN: Final = 0.25
#: Ground is shown so far below the line [1 of the line's own range and margin].
DEPTH_TIMES: Final = 2.0
#: Least depth below the line [m].
LEAST_DEPTH_M: Final = 2.0


def view_lines(course: Course, scale: Scale) -> list[str]:
    """Where B stands in the view from A, and what is told of a bare target."""
    line = course.line
    up = line.from_elevation_deg
    way = "above" if up >= 0.0 else "below"
    lines = [
        f"bearing {line.path.azimuth_deg:.1f}°, {abs(up):.2f}° {way} level",
        *target_lines(course, scale),
    ]
    crest = line.front_crest
    if crest is not None:
        lines.append(f"crest in front at {scale.show.distance(crest.distance_m)}")
    return lines


def draw_view(
    figure: Figure, course: Course, trace: Trace, limits: Limits, scale: Scale
) -> None:
    """Words of the view, and below them the ground round the tightest place.

    Parameters
    ----------
    figure : Figure
    course : Course
        The answer over the chosen sea.
    trace : Trace
        Its ground.
    limits : Limits
        Heights on the profile.
    scale : Scale
        Units.
    """
    side, top = page.SIDE_AREA, page.SIDE_AREA.top - page.SIZE / page.PT_PER_IN
    page.write(figure, side.left, top, "view from A to B", bold=True)
    y = top - page.BASELINE_IN
    for text in view_lines(course, scale):
        y -= page.SMALL_LINE_IN
        artist = page.write(figure, side.left, y, text, size=page.SMALL)
        page.fit(figure, artist, side.width, least_pt=page.FINE)
    if course.line.decisive is None:
        return
    area = page.VIEW_AREA
    head_y = y - HEAD_GAP_IN
    area = area._replace(height=head_y - page.BASELINE_IN - area.bottom)
    axes = page.area_axes(figure, area, "view")
    low, high = draw_enlarged(axes, course, trace, limits, scale)
    across_m = np.ptp(axes.get_xlim()) * scale.distance_unit_m / area.width
    times = times_text(float(across_m * area.height / (high - low)))
    head = f"round 1, heights drawn {times} times"
    page.write(figure, side.left, head_y, head, size=page.SMALL, color=page.QUIET)


def draw_enlarged(
    ax: Axes, course: Course, trace: Trace, limits: Limits, scale: Scale
) -> tuple[float, float]:
    """The profile round the decisive point; lowest and highest height shown [m]."""
    start, end = _window(course)
    u, v = scale.distance_unit_m, scale.height_unit_m
    dist = np.union1d(np.linspace(start, min(end, course.line.aim_distance_m)), [start])
    within = (trace.dist_m >= start) & (trace.dist_m <= end)
    sight = course.paper_m(dist, course.sight_m(dist))
    ground = trace.paper_top_m[within]
    shown = np.concatenate([sight, ground[np.isfinite(ground)]])
    low, high = float(shown.min()), float(shown.max())
    depth = DEPTH_TIMES * (
        float(np.ptp(sight)) / 2.0 + abs(course.line.margin_m or 0.0)
    )
    low = max(low, float(sight.min()) - max(depth, LEAST_DEPTH_M))
    room = ROOM * max(high - low, 1.0)
    low, high = low - room, high + room
    near = Limits(low, high, limits.has_sea)
    draw_profile(ax, course, trace, near, scale, ends=False)
    ax.set_xlim(start / u, end / u)
    heights = nice_ticks(low / v, high / v, MOST_HEIGHTS)
    ax.set_yticks(heights, tick_texts(heights))
    places = nice_ticks(start / u, end / u, MOST_DISTANCES)
    ax.set_xticks(places, tick_texts(places))
    page.style_ticks(ax)
    at = course.line.decisive
    if at is not None:
        paper = course.paper_at(at.distance_m, at.ground_m + at.cover_m) / v
        look = {"ms": page.DOT, "mfc": page.DISC, "mew": page.FRAME_WIDTH}
        page.spot(ax, (at.distance_m / u, paper), "o", label="1", **look)
    return low, high


def _window(course: Course) -> tuple[float, float]:
    """Start and end of the path shown [m]: round the decisive point, on the path."""
    line = course.line
    length = line.path.length_m
    middle = length if line.decisive is None else line.decisive.distance_m
    half = HALF_SHARE * length
    start = min(max(middle - half, 0.0), length - 2.0 * half)
    return start, start + 2.0 * half
