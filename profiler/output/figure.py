"""The figure of an answer: profile, margins, target and plan on one A4 page."""

from matplotlib.figure import Figure

from profiler.model import SightLine
from profiler.output.figures import page
from profiler.output.figures.course import (
    CURVED_SEA,
    LEVEL_SEA,
    Course,
    course_of,
    trace_of,
    void_runs,
)
from profiler.output.figures.marks import marks_of
from profiler.output.figures.plan import (
    GroundMap,
    draw_plan,
    draw_plan_foot,
    ground_map,
)
from profiler.output.figures.profile import draw_profile, limits_of
from profiler.output.figures.save import PNG_DPI, save_figure
from profiler.output.figures.scale import Scale, scale_of
from profiler.output.figures.strip import draw_lane, draw_strip, is_cut
from profiler.output.figures.tables import (
    draw_ends,
    draw_foot,
    draw_head,
    draw_key,
    draw_needed,
    draw_table,
)
from profiler.output.figures.target import draw_target, target_lines

__all__ = [
    "CURVED_SEA",
    "LEVEL_SEA",
    "PNG_DPI",
    "GroundMap",
    "draw_figure",
    "ground_map",
    "save_figure",
]


def draw_figure(
    line: SightLine,
    *,
    headline: tuple[str, str],
    ground_map: GroundMap | None,
    draw: str = CURVED_SEA,
    show_in: str = "m",
) -> Figure:
    """One A4 page, lying, that tells an answer; no pyplot, no global settings.

    Parameters
    ----------
    line : SightLine
        The answer; every number on the page is its own.
    headline : tuple of two str
        The first line of the words in two short ones.
    ground_map : GroundMap or None
        Ground around the path, from `ground_map`; None leaves the map out.
    draw : str
        "curved-sea": straight sight line over a curved sea; "level-sea": bent line.
    show_in : str
        "m" or "ft" (distances then in miles).

    Returns
    -------
    Figure
        For `save_figure`.

    Raises
    ------
    InputError
        If ``draw`` or ``show_in`` has no such value.
    """
    course = course_of(line, draw)
    scale = scale_of(line, show_in)
    trace = trace_of(course)
    limits = limits_of(course, trace)
    marks, left_out = marks_of(course)
    figure = page.new_page()
    draw_head(figure, headline)
    draw_ends(figure, line, scale)
    profile = page.area_axes(figure, page.PROFILE_AREA, "profile")
    draw_profile(profile, course, trace, limits, scale)
    draw_key(figure, profile)
    strip = page.area_axes(figure, page.STRIP_AREA, "margin")
    draw_strip(strip, course, trace, scale)
    draw_lane(figure, course, marks, limits, scale)
    _axis_words(figure, course, scale)
    _void_words(figure, course, scale)
    draw_table(figure, marks, left_out, scale)
    draw_needed(figure, line, scale)
    _target(figure, course, scale)
    if ground_map is not None:
        plan = page.area_axes(figure, page.MAP_AREA, "plan")
        draw_plan(plan, ground_map, marks, line.path.length_m)
        draw_plan_foot(figure, ground_map, scale)
    draw_foot(figure, course, limits, scale)
    return figure


def _axis_words(figure: Figure, course: Course, scale: Scale) -> None:
    """What the axes count."""
    area, strip = page.PROFILE_AREA, page.STRIP_AREA
    drawn = "with the earth's curve drawn" if course.curved else "the sea drawn level"
    both = ((f"height above sea, {scale.height_unit},", 0.0), (drawn, 1.0))
    for text, k in both:
        page.write(
            figure,
            0.2 + 0.15 * k,
            area.bottom + area.height / 2.0,
            text,
            rotation=90.0,
            ha="center",
            va="center",
            size=page.SMALL,
        )
    cut = (
        "margin,",
        f"{scale.height_unit} (cut)" if is_cut(course) else scale.height_unit,
    )
    for k, text in enumerate(cut):
        page.write(
            figure,
            0.2 + 0.15 * k,
            strip.bottom + strip.height / 2.0,
            text,
            rotation=90.0,
            ha="center",
            va="center",
            size=page.SMALL,
        )
    page.write(
        figure,
        strip.left + strip.width / 2.0,
        strip.bottom - 0.34,
        f"{scale.distance_unit} from A",
        size=page.SMALL,
        ha="center",
    )


def _void_words(figure: Figure, course: Course, scale: Scale) -> None:
    """Where no ground is known, and what ground would block there."""
    runs = void_runs(course)
    if not runs:
        return
    void, show = course.line.void, scale.show
    longest = max(runs, key=lambda run: run[1] - run[0])
    start, end = longest if void is None else (void.start_m, void.end_m)
    words = [
        f"no ground known, {show.bare_distance(start)} to {show.distance(end)}"
        + (f" and {len(runs) - 1} more" if len(runs) > 1 else ""),
    ]
    if void is not None:
        words.append(f"ground above {show.height(void.blocks_above_m)} would block")
    area = page.PROFILE_AREA
    low, high = scale.x_limits()
    middle = (start + end) / 2.0 / scale.distance_unit_m
    wanted = area.left + (middle - low) / (high - low) * area.width
    for k, text in enumerate(words):
        artist = page.write(
            figure,
            wanted,
            area.top - 0.17 - 0.15 * k,
            text,
            size=page.SMALL,
            ha="center",
        )
        half = page.width_in(figure, artist) / 2.0 + 0.05
        x = min(max(wanted, area.left + half), area.right - half)
        artist.set_x(x / page.PAGE_IN[0])


def _target(figure: Figure, course: Course, scale: Scale) -> None:
    """The target to its own scale with its words."""
    area, words = page.TARGET_AREA, page.TARGET_TEXT_AREA
    page.write(
        figure,
        words.left,
        page.ENDS_AREA.top - 0.12,
        f"B to its own scale, {scale.height_unit}",
        bold=True,
    )
    draw_target(page.area_axes(figure, area, "target"), course, scale)
    for k, text in enumerate(target_lines(course, scale)):
        artist = page.write(
            figure, words.left, words.top - 0.13 - 0.15 * k, text, size=page.SMALL
        )
        page.fit(figure, artist, words.width, least_pt=page.SMALL)
