"""The figure of an answer: profile, margins, target and plan on one A4 page."""

from typing import Final

from matplotlib.figure import Figure

from profiler.constants import QUARTER_TURN_DEG
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
from profiler.output.figures.foot import caution_lines, draw_foot, footer_lines
from profiler.output.figures.key import draw_key
from profiler.output.figures.marks import Mark, marks_of
from profiler.output.figures.needs import draw_needed
from profiler.output.figures.plan import (
    GroundMap,
    draw_plan,
    draw_plan_foot,
    ground_map,
)
from profiler.output.figures.profile import draw_profile, limits_of
from profiler.output.figures.save import save_figure
from profiler.output.figures.scale import Scale, scale_of
from profiler.output.figures.sheet import draw_sheet
from profiler.output.figures.strip import draw_lane, draw_strip, is_cut, leaders_in
from profiler.output.figures.tables import draw_ends, draw_head, draw_table
from profiler.output.figures.target import draw_target, has_drawing, target_lines
from profiler.output.figures.view import draw_view
from profiler.output.figures.zone import (
    draw_zone,
    draw_zone_words,
    has_rule,
    zone_of,
)
from profiler.output.numbers import DOWN
from profiler.output.told import radio_of

__all__ = [
    "CURVED_SEA",
    "LEVEL_SEA",
    "GroundMap",
    "draw_figure",
    "ground_map",
    "save_figure",
]


#: Words beside the axes stand so far from the page's edge [in].
AXIS_WORDS_IN: Final = 0.15
#: Words under the distances stand so far below them [in].
DISTANCE_WORDS_IN: Final = 0.34


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
    zone = zone_of(course)
    limits = limits_of(course, trace, zone)
    marks, left_out = marks_of(course)
    figure = page.new_page()
    draw_head(figure, headline)
    draw_ends(figure, line, scale)
    profile = page.area_axes(figure, page.PROFILE_AREA, "profile")
    draw_profile(profile, course, trace, limits, scale)
    if zone is not None:
        draw_zone(profile, course, zone, scale)
        draw_zone_words(figure, zone, scale, leaders_in(marks, scale))
    draw_key(figure, profile)
    strip = page.area_axes(figure, page.STRIP_AREA, "margin")
    draw_strip(strip, course, trace, scale)
    draw_lane(figure, course, marks, limits, scale)
    _axis_words(figure, course, scale)
    _void_words(figure, course, scale)
    draw_table(figure, marks, left_out, scale)
    draw_needed(figure, line, scale)
    if zone is not None:
        draw_sheet(figure, zone.radio, scale)
    elif has_drawing(course):
        _target(figure, course, scale)
    else:
        draw_view(figure, course, trace, limits, scale)
    if ground_map is not None:
        _plan(figure, ground_map, marks, scale)
    draw_foot(figure, footer_lines(course, limits, scale), caution_lines(line))
    return figure


def _plan(
    figure: Figure, ground_map: GroundMap, marks: list[Mark], scale: Scale
) -> None:
    """The path on a small map, with what its shading means."""
    ax = page.area_axes(figure, page.MAP_AREA, "plan")
    draw_plan(ax, ground_map, marks, scale.length_m)
    draw_plan_foot(figure, ground_map, scale)


def _axis_words(figure: Figure, course: Course, scale: Scale) -> None:
    """What the axes count."""
    unit, strip = scale.height_unit, page.STRIP_AREA
    drawn = "with the earth's curve drawn" if course.curved else "the sea drawn level"
    for area, words in (
        (page.PROFILE_AREA, (f"height above sea, {unit},", drawn)),
        (strip, (f"margin, {unit}", "cut above" if is_cut(course) else "")),
    ):
        for k, text in enumerate(words):
            page.write(
                figure,
                AXIS_WORDS_IN + page.SMALL_LINE_IN * k,
                area.bottom + area.height / 2.0,
                text,
                rotation=QUARTER_TURN_DEG,
                ha="center",
                va="center",
                size=page.SMALL,
            )
    y = strip.bottom - DISTANCE_WORDS_IN
    text, middle = f"{scale.distance_unit} from A", strip.left + strip.width / 2.0
    page.write(figure, middle, y, text, size=page.SMALL, ha="center")
    radio = radio_of(course.line)
    if radio is not None and has_rule(radio):
        asked = radio.result.governing.criterion.text
        text = f"dashed: what {asked} leaves"
        page.write(figure, strip.right, y, text, size=page.SMALL, ha="right")


def void_words(course: Course, scale: Scale) -> tuple[list[str], float]:
    """Where no ground is known and what would block there; middle of the void [m]."""
    runs, void, show = void_runs(course), course.line.void, scale.show
    start, end = max(runs, key=lambda run: run[1] - run[0])
    if void is not None:
        start, end = void.start_m, void.end_m
    more = f" and {len(runs) - 1} more" if len(runs) > 1 else ""
    where = f"{show.bare_distance(start)} to {show.distance(end)}"
    words = [f"no ground known, {where}{more}"]
    if void is not None:
        above = show.height(void.blocks_above_m, rounding=DOWN)
        words.append(f"ground above {above} would block")
    return words, (start + end) / 2.0


def _void_words(figure: Figure, course: Course, scale: Scale) -> None:
    """The void's words in the room above the profile, over the void if they fit."""
    if not void_runs(course):
        return
    words, middle_m = void_words(course, scale)
    area = page.PROFILE_AREA
    low, high = scale.x_limits()
    middle = middle_m / scale.distance_unit_m
    wanted = area.left + (middle - low) / (high - low) * area.width
    for k, text in enumerate(words):
        artist = page.write(
            figure,
            wanted,
            area.top - page.SMALL_LINE_IN * (k + 1) - page.BASELINE_IN / 2.0,
            text,
            size=page.SMALL,
            ha="center",
            bbox={"boxstyle": "square,pad=0.05", "fc": page.PAPER, "ec": "none"},
        )
        half = page.width_in(figure, artist) / 2.0 + page.BASELINE_IN
        x = min(max(wanted, area.left + half), area.right - half)
        artist.set_x(x / page.PAGE_IN[0])


def _target(figure: Figure, course: Course, scale: Scale) -> None:
    """The target to its own scale with its words."""
    words = page.TARGET_TEXT_AREA
    head = page.ENDS_AREA.top - page.SIZE / page.PT_PER_IN
    title = f"B to its own scale, {scale.height_unit}"
    page.write(figure, words.left, head, title, bold=True)
    draw_target(page.area_axes(figure, page.TARGET_AREA, "target"), course, scale)
    for k, text in enumerate(target_lines(course, scale)):
        y = words.top - page.SMALL_LINE_IN * (k + 1)
        artist = page.write(figure, words.left, y, text, size=page.SMALL)
        page.fit(figure, artist, words.width, least_pt=page.SMALL)
