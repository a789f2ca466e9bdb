"""The words around the drawings: ends, key, table of discs, needed heights, footer."""

from collections.abc import Sequence
from typing import Any, Final, NamedTuple

from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.patches import Rectangle

from profiler.constants import VERSION
from profiler.model import EndReport, SightLine, Verdict
from profiler.output.figures import page
from profiler.output.figures.course import Course
from profiler.output.figures.marks import Mark
from profiler.output.figures.profile import DASH_DOT, SEA_DASHES, THICK, THIN, Limits
from profiler.output.figures.scale import Scale, times_text
from profiler.output.figures.strip import draw_disc
from profiler.output.numbers import DOWN, UP, latitude, longitude, ratio

#: Characters of a name before it is cut, of a file's name, and of its hash [1].
NAME_MOST: Final = 40
FILE_MOST: Final = 48
HASH_SHOWN: Final = 8
#: Length of a sample line in the key, its gap to the words, and between entries [in].
SAMPLE_IN: Final = 0.32
KEY_GAP_IN: Final = 0.06
KEY_APART_IN: Final = 0.24
#: Diameter of a disc in the table [in].
TABLE_DISC_IN: Final = 0.138
#: Middle of small letters above their baseline [1 of their size].
MIDDLE: Final = 0.36
#: Left edges of the table's columns from its own [in]; numbers end at theirs.
DISTANCE_END_IN: Final = 0.78
GROUND_IN: Final = 0.92
LATITUDE_END_IN: Final = 3.32
LONGITUDE_END_IN: Final = 4.42
NOTE_IN: Final = 4.54
#: Distance between the table's lines [in].
ROW_IN: Final = 0.1465
#: Posts this far apart and more are told in whole metres [m].
WHOLE_POSTS_M: Final = 9.5


def short(text: str, most: int) -> str:
    """A text of at most so many characters, the rest an ellipsis."""
    joined = " ".join(text.split())
    return (
        joined if len(joined) <= most else joined[: most - 1].rstrip() + page.ELLIPSIS
    )


def names(line: SightLine) -> tuple[str, str]:
    """What both ends are called, short enough for the page."""
    eye = short(line.from_.name, NAME_MOST) or "the eye"
    return eye, short(line.to.name, NAME_MOST) or "the target"


def draw_head(figure: Figure, headline: tuple[str, str]) -> None:
    """The first line in two short ones."""
    area = page.HEAD_AREA
    first = page.write(
        figure,
        area.left,
        area.top - page.HEAD / page.PT_PER_IN,
        headline[0].strip().rstrip(":;,"),
        size=page.HEAD,
        bold=True,
    )
    page.fit(figure, first, area.width, least_pt=page.HEAD_LEAST)
    text = headline[1].strip()
    second = page.write(
        figure,
        area.left,
        area.bottom + 0.06,
        text[:1].upper() + text[1:],
        size=page.SUBHEAD,
    )
    page.fit(figure, second, area.width, least_pt=page.SIZE)


def end_text(end: EndReport, what: str, scale: Scale) -> str:
    """Ground and height of one end."""
    show = scale.show
    if end.ground_m is None:
        return f"no ground known, {what} {show.height(end.amsl_m)} above sea"
    source = " (surveyed)" if end.ground_from == "surveyed" else ""
    ground = f"ground {show.height(end.ground_m)}{source}"
    if end.agl_m is None or end.agl_m == 0.0:
        return f"{ground}, {what} on it"
    return f"{ground}, {what} {show.height(end.agl_m)} above it"


def draw_ends(figure: Figure, line: SightLine, scale: Scale) -> None:
    """Names of both ends above their side of the profile, heights below the name."""
    area, half = page.ENDS_AREA, page.ENDS_AREA.width / 2.0 - KEY_GAP_IN
    pairs = zip(("A", "B"), names(line), (line.from_, line.to), strict=True)
    for letter, name, end in pairs:
        left = letter == "A"
        side = {"ha": "left" if left else "right"}
        x = area.left if left else area.right
        what = "eye" if left else "top"
        top = area.top - page.SIZE / page.PT_PER_IN
        text = f"{letter}: {name}"
        for text_, y, bold in (
            (text, top, True),
            (end_text(end, what, scale), area.bottom + 0.04, False),
        ):
            artist = page.write(figure, x, y, text_, bold=bold, **side)
            page.fit(figure, artist, half, least_pt=page.SMALL)


class Entry(NamedTuple):
    """One sample of the key."""

    label: str
    line: dict[str, Any] | None
    """Look of a line; None draws a patch of ``hatch``."""
    hatch: str


_ENTRIES: Final = (
    Entry("sight line", {"color": page.SIGHT, "lw": 1.7}, ""),
    Entry("grazing ray", {"color": page.GRAZING, "lw": 1.7, "ls": DASH_DOT}, ""),
    Entry("ground seen", {"color": page.EDGE, "lw": THICK}, ""),
    Entry("not seen", None, "//////"),
    Entry("no ground known", None, "xxxx"),
    Entry("sea level", {"color": page.QUIET, "lw": THIN, "ls": SEA_DASHES}, ""),
    Entry("needed height", {"color": page.EDGE, "lw": 1.7}, "_"),
    Entry("given point", {"color": page.EDGE, "lw": 0.0, "marker": "+"}, ""),
)


def draw_key(figure: Figure, ax: Axes) -> None:
    """Samples of what the profile shows, in one row, only what is there."""
    present = set(ax.get_legend_handles_labels()[1])
    area = page.KEY_AREA
    y = area.bottom + 0.05
    entries = [entry for entry in _ENTRIES if entry.label in present]
    texts = [page.write(figure, 0.0, y, e.label, size=page.SMALL) for e in entries]
    wide = [SAMPLE_IN + KEY_GAP_IN + page.width_in(figure, text) for text in texts]
    free = (area.width - sum(wide)) / max(len(wide) - 1, 1)
    x = area.left
    for entry, text, width in zip(entries, texts, wide, strict=True):
        _sample(figure, entry, x, y)
        text.set_x((x + SAMPLE_IN + KEY_GAP_IN) / page.PAGE_IN[0])
        x += width + min(KEY_APART_IN, free)


def _sample(figure: Figure, entry: Entry, x: float, y: float) -> None:
    wide, tall = page.PAGE_IN
    middle = y + page.SMALL / page.PT_PER_IN * MIDDLE
    if entry.line is None:
        figure.add_artist(
            Rectangle(
                (x / wide, (middle - 0.05) / tall),
                SAMPLE_IN / wide,
                0.1 / tall,
                facecolor=page.PAPER if entry.hatch == "xxxx" else page.GROUND,
                edgecolor=page.HATCHING,
                hatch=entry.hatch,
                lw=THIN,
            )
        )
        return
    inset = SAMPLE_IN / 3.0 if entry.hatch == "_" else 0.0
    figure.add_artist(
        Line2D(
            [(x + inset) / wide, (x + SAMPLE_IN - inset) / wide],
            [middle / tall] * 2,
            **entry.line,
        )
    )


def draw_table(
    figure: Figure, marks: Sequence[Mark], left_out: int, scale: Scale
) -> None:
    """One row for each disc: where it is, how far from the line, coordinates."""
    area, show = page.TABLE_AREA, scale.show
    y = area.top - page.SMALL / page.PT_PER_IN

    def row(texts: Sequence[str], color: str) -> None:
        places = (
            (DISTANCE_END_IN, "right"),
            (GROUND_IN, "left"),
            (LATITUDE_END_IN, "right"),
            (LONGITUDE_END_IN, "right"),
            (NOTE_IN, "left"),
        )
        for text, (x, side) in zip(texts, places, strict=True):
            if text:
                page.write(
                    figure,
                    area.left + x,
                    y,
                    text,
                    size=page.SMALL,
                    ha=side,
                    color=color,
                )

    row((scale.distance_unit, "ground stands", "latitude", "longitude", ""), page.QUIET)
    for mark in marks:
        y -= ROW_IN
        side = "above" if mark.margin_m < 0.0 else "below"
        row(
            (
                show.bare_distance(mark.distance_m),
                f"{show.height(abs(mark.margin_m))} {side} the line",
                latitude(mark.lat_deg),
                longitude(mark.lon_deg),
                mark.note,
            ),
            page.EDGE,
        )
        middle = y + page.SMALL / page.PT_PER_IN * MIDDLE
        draw_disc(figure, area.left + 0.1, middle, mark, size_in=TABLE_DISC_IN)
    if left_out:
        y -= ROW_IN
        least = max(m.margin_m for m in marks if m.symbol.isdigit())
        text = f"and {left_out} more, none over {show.height(-least)}"
        page.write(figure, area.left + GROUND_IN, y, text, size=page.SMALL)


def needed_lines(line: SightLine, scale: Scale) -> list[str]:
    """What would just clear the line, one thing a line, rounded to the safe side."""
    show, needed = scale.show, line.needed
    blocked = line.verdict == Verdict.BLOCKED
    lines = []
    for letter, agl, end in (
        ("A", needed.from_agl_m, line.from_),
        ("B", needed.to_agl_m, line.to),
    ):
        if agl is not None:
            now = "" if end.agl_m is None else f" (now {show.height(end.agl_m)})"
            lines.append(f"{letter} at {show.height(agl, rounding=UP)}{now}")
    if blocked and needed.both_extra_m is not None:
        lines.append(f"both {show.height(needed.both_extra_m, rounding=UP)} higher")
    if needed.dem_bias_m is not None:
        lower = needed.dem_bias_m < 0.0
        size = show.height(abs(needed.dem_bias_m), rounding=UP if lower else DOWN)
        way = "lower" if lower else "higher, at most"
        lines.append(f"all ground between {size} {way}")
    if needed.kr is not None and needed.ke is not None:
        least = "" if blocked else "at least "
        kr, ke = (ratio(v, rounding=UP) for v in (needed.kr, needed.ke))
        lines.append(f"air of {least}kr {kr} = ke {ke}")
    return lines


def draw_needed(figure: Figure, line: SightLine, scale: Scale) -> None:
    """Needed heights at both ends and what else would do."""
    area = page.NEEDED_AREA
    lines = needed_lines(line, scale)
    if not lines:
        lines = ["nothing short of other stations"]
    blocked = line.verdict == Verdict.BLOCKED
    head = "one of these clears the line" if blocked else "each of these still clears"
    y = area.top - page.SMALL / page.PT_PER_IN
    page.write(figure, area.left, y, head, size=page.SMALL, color=page.QUIET)
    for text in lines:
        y -= ROW_IN
        artist = page.write(figure, area.left, y, text, size=page.SMALL)
        page.fit(figure, artist, area.width, least_pt=page.SMALL)


def footer_lines(course: Course, limits: Limits, scale: Scale) -> list[str]:
    """Ground, air and drawing, and the caution."""
    line = course.line
    profile, earth = line.profile, line.earth
    ground = "no file gives ground"
    if profile.files:
        file = profile.files[0]
        more = f" and {len(profile.files) - 1} more" if len(profile.files) > 1 else ""
        digest = f" {file.sha256[:HASH_SHOWN]}" if file.sha256 else ""
        posts = " x ".join(_side(side) for side in file.cell_m)
        name = short(file.name, FILE_MOST)
        ground = f"{name}{digest}{more}, posts {posts} m"
    both = f"kr {ratio(earth.kr)} = " + (
        "flat earth" if earth.ke is None else f"ke {ratio(earth.ke)}"
    )
    how = "default" if earth.is_default else f"given as {earth.stated}"
    sea = "curved sea, straight line" if course.curved else "level sea, bent line"
    if not limits.has_sea:
        sea += " (the sea itself lies off the drawing)"
    times = times_text(scale.exaggeration(limits.low_m, limits.high_m))
    return [
        f"Ground: {ground}, {profile.interpolation.value}.  Air: {both} ({how}).",
        f"Drawn: {sea}, heights drawn {times} times.  overbrow {VERSION}, terrain "
        "line-of-sight profiler.",
        line.cautions[0].text,
    ]


def _side(side_m: float) -> str:
    return f"{side_m:.0f}" if side_m >= WHOLE_POSTS_M else ratio(side_m, 1)


def draw_foot(figure: Figure, course: Course, limits: Limits, scale: Scale) -> None:
    """The footer of the page."""
    area = page.FOOT_AREA
    lines = footer_lines(course, limits, scale)
    step = page.SMALL * page.LINE_SPACING / page.PT_PER_IN
    for k, text in enumerate(reversed(lines)):
        artist = page.write(
            figure,
            area.left,
            area.bottom + 0.02 + k * step,
            text,
            size=page.SMALL,
            color=page.QUIET if k else page.EDGE,
        )
        page.fit(figure, artist, area.width, least_pt=page.SMALL)
