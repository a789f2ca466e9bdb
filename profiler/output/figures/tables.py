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
from profiler.output.figures.ends import Limits
from profiler.output.figures.marks import Mark
from profiler.output.figures.scale import Scale, times_text
from profiler.output.figures.strip import draw_disc
from profiler.output.numbers import DOWN, UP, latitude, longitude, ratio

#: Characters of a name before it is cut, of a file's name, and of its hash [1].
NAME_MOST: Final = 40
FILE_MOST: Final = 48
HASH_SHOWN: Final = 8
#: Length of a sample line in the key, its gap to the words, and between entries [in].
SAMPLE_IN: Final = 0.3
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
#: Distance between the lines of a broken headline [1 of its size].
HEAD_STEP: Final = 1.25
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
    """The first line in two short ones; a long first one is broken near its middle."""
    area = page.HEAD_AREA
    text = headline[0].strip().rstrip(":;,")
    size = page.HEAD / page.PT_PER_IN
    first = page.write(
        figure, area.left, area.top - HEAD_STEP * size, text, size=page.HEAD, bold=True
    )
    page.fit(figure, first, area.width, least_pt=page.HEAD_LEAST, cut=False)
    if page.width_in(figure, first) > area.width:
        first.remove()
        for k, part in enumerate(halves(text)):
            y = area.top - (k + 1) * page.HEAD_LEAST * HEAD_STEP / page.PT_PER_IN
            artist = page.write(
                figure, area.left, y, part, size=page.HEAD_LEAST, bold=True
            )
            page.fit(figure, artist, area.width, least_pt=page.SIZE)
    text = headline[1].strip()
    text = text[:1].upper() + text[1:]
    y = area.bottom + page.BASELINE_IN
    second = page.write(figure, area.left, y, text, size=page.SUBHEAD)
    page.fit(figure, second, area.width, least_pt=page.SIZE)


def halves(text: str) -> tuple[str, str]:
    """A text broken at the space nearest its middle."""
    middle = len(text) // 2
    spaces = [k for k, c in enumerate(text) if c == " "] or [middle]
    at = min(spaces, key=lambda k: abs(k - middle))
    return text[:at].rstrip(), text[at:].lstrip()


def end_text(end: EndReport, what: str, scale: Scale) -> str:
    """Ground and height of one end."""
    show = scale.show
    if end.ground_m is None:
        return f"no ground known, {what} {show.height(end.amsl_m)} above sea"
    source = " (surveyed)" if end.ground_from == "surveyed" else ""
    ground = f"ground {show.height(end.ground_m)}{source}"
    if end.agl_m is None or end.agl_m == 0.0:
        return f"{ground}, {what} on it"
    return f"{ground}, {what} {show.given(end.agl_m)} above it"


def draw_ends(figure: Figure, line: SightLine, scale: Scale) -> None:
    """Names of both ends above their side of the profile, heights below the name."""
    area, half = page.ENDS_AREA, page.ENDS_AREA.width / 2.0 - KEY_GAP_IN
    pairs = zip(("A", "B"), names(line), (line.from_, line.to), strict=True)
    for letter, name, end in pairs:
        left = letter == "A"
        side = "left" if left else "right"
        x = area.left if left else area.right
        what = "eye" if left else "top"
        top = area.top - page.SIZE / page.PT_PER_IN
        text = f"{letter}: {name}"
        for text_, y, bold in (
            (text, top, True),
            (end_text(end, what, scale), area.bottom + 0.04, False),
        ):
            artist = page.write(figure, x, y, text_, bold=bold, ha=side)
            page.fit(figure, artist, half, least_pt=page.SMALL)


class Entry(NamedTuple):
    """One sample of the key."""

    label: str
    line: dict[str, Any] | None
    """Look of a line; None draws a patch of ``hatch``."""
    hatch: str


_ENTRIES: Final = (
    Entry("sight line", {"color": page.SIGHT, "lw": page.RAY_WIDTH}, ""),
    Entry(
        "grazing ray",
        {"color": page.GRAZING, "lw": page.RAY_WIDTH, "ls": page.DASH_DOT},
        "",
    ),
    Entry("ground seen", {"color": page.EDGE, "lw": page.THICK}, ""),
    Entry("not seen", None, "//////"),
    Entry("no ground", None, "xxxx"),
    Entry(
        "sea level", {"color": page.QUIET, "lw": page.THIN, "ls": page.SEA_DASHES}, ""
    ),
    Entry("needed height", {"color": page.EDGE, "lw": page.RAY_WIDTH}, "_"),
    Entry(
        "given point",
        {"color": page.EDGE, "lw": 0.0, "marker": "+", "mew": page.RAY_WIDTH},
        "",
    ),
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
                TABLE_DISC_IN * MIDDLE * 2.0 / tall,
                facecolor=page.PAPER if entry.hatch == "xxxx" else page.GROUND,
                edgecolor=page.HATCHING,
                hatch=entry.hatch,
                lw=page.THIN,
            )
        )
        return
    ends = (x, x + SAMPLE_IN)
    if entry.hatch == "_":
        ends = (x + SAMPLE_IN / 3.0, x + 2.0 * SAMPLE_IN / 3.0)
    if "marker" in entry.line:
        ends = (x + SAMPLE_IN / 2.0,) * 2
    xs = [end / wide for end in ends]
    figure.add_artist(Line2D(xs, [middle / tall] * 2, **entry.line))


#: The table's columns: left or right edge from the table's own [in].
_COLUMNS: Final = (
    (DISTANCE_END_IN, "right"),
    (GROUND_IN, "left"),
    (LATITUDE_END_IN, "right"),
    (LONGITUDE_END_IN, "right"),
    (NOTE_IN, "left"),
)


def _row(figure: Figure, y_in: float, texts: Sequence[str], color: str) -> None:
    for text, (x, side) in zip(texts, _COLUMNS, strict=True):
        if text:
            at = page.TABLE_AREA.left + x
            page.write(figure, at, y_in, text, size=page.SMALL, ha=side, color=color)


def mark_texts(mark: Mark, scale: Scale) -> tuple[str, str, str, str, str]:
    """One row of the table: distance, ground, latitude, longitude, note."""
    show = scale.show
    side = "above" if mark.margin_m < 0.0 else "below"
    return (
        show.bare_distance(mark.distance_m),
        f"{show.height(abs(mark.margin_m))} {side} the line",
        latitude(mark.lat_deg),
        longitude(mark.lon_deg),
        mark.note,
    )


def draw_table(
    figure: Figure, marks: Sequence[Mark], left_out: int, scale: Scale
) -> None:
    """One row for each disc: where it is, how far from the line, coordinates."""
    area = page.TABLE_AREA
    y = area.top - page.SMALL / page.PT_PER_IN
    heads = (scale.distance_unit, "ground stands", "latitude", "longitude", "")
    _row(figure, y, heads, page.QUIET)
    for mark in marks:
        y -= ROW_IN
        _row(figure, y, mark_texts(mark, scale), page.EDGE)
        middle = y + page.SMALL / page.PT_PER_IN * MIDDLE
        x = area.left + TABLE_DISC_IN
        draw_disc(figure, x, middle, mark, size_in=TABLE_DISC_IN)
    if left_out:
        y -= ROW_IN
        least = max(m.margin_m for m in marks if m.symbol.isdigit())
        text = f"and {left_out} more, none over {scale.show.height(-least)}"
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
            now = "" if end.agl_m is None else f" (now {show.given(end.agl_m)})"
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
        lines.append(f"air of {least}kr {kr} = ke {ke}".replace("-", "−"))
    return lines


_NEEDED_HEADS: Final = {
    Verdict.BLOCKED: "each of these alone clears the line",
    Verdict.CLEAR: "each of these alone still clears",
    Verdict.UNDETERMINED: "each still clears the known ground",
}


def draw_needed(figure: Figure, line: SightLine, scale: Scale) -> None:
    """Needed heights at both ends and what else would do."""
    area = page.NEEDED_AREA
    lines = needed_lines(line, scale)
    if not lines:
        lines = ["nothing short of other stations"]
    head = _NEEDED_HEADS[line.verdict]
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
    both = both.replace("-", "−")
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
