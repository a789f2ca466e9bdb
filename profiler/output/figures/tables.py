"""The words around the drawings: headline, both ends, table of discs."""

from collections.abc import Sequence
from typing import Any, Final

from matplotlib.figure import Figure

from profiler.model import EndReport, SightLine
from profiler.output.figures import page
from profiler.output.figures.marks import Mark
from profiler.output.figures.scale import Scale
from profiler.output.figures.strip import draw_disc
from profiler.output.numbers import latitude, longitude
from profiler.output.rounding import metres

#: Characters of a name before it is cut [1].
NAME_MOST: Final = 40
#: Least distance between the words of both ends [in].
ENDS_GAP_IN: Final = 0.06
#: Diameter of a disc in the table [in] and its ring [pt]: rings of two rows are apart.
TABLE_DISC_IN: Final = 0.122
TABLE_RING: Final = 0.9
#: Left edge of the discs from the table's own [in].
DISC_END_IN: Final = 0.13
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
    area, half = page.ENDS_AREA, page.ENDS_AREA.width / 2.0 - ENDS_GAP_IN
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


#: The table's columns: left or right edge from the table's own [in].
_COLUMNS: Final = (
    (DISTANCE_END_IN, "right"),
    (GROUND_IN, "left"),
    (LATITUDE_END_IN, "right"),
    (LONGITUDE_END_IN, "right"),
    (NOTE_IN, "left"),
)


def _row(figure: Figure, y_in: float, texts: Sequence[str], color: str) -> None:
    area = page.TABLE_AREA
    for text, (x, side) in zip(texts, _COLUMNS, strict=True):
        if text:
            look: dict[str, Any] = {"size": page.SMALL, "color": color, "ha": side}
            artist = page.write(figure, area.left + x, y_in, text, **look)
            if x == NOTE_IN:
                page.fit(figure, artist, area.width - x, least_pt=page.SMALL)


def mark_texts(mark: Mark, scale: Scale) -> tuple[str, str, str, str, str]:
    """One row of the table: distance, ground, latitude, longitude, note."""
    show = scale.show
    side = "above" if mark.margin_m < 0.0 else "below"
    return (
        show.bare_distance(mark.distance_m),
        f"{show.height(abs(metres(mark.margin_m)))} {side} the line",
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
    what = "top of cover" if any(m.is_cover for m in marks) else "ground"
    heads = (scale.distance_unit, f"{what} stands", "latitude", "longitude", "")
    _row(figure, y, heads, page.QUIET)
    for mark in marks:
        y -= ROW_IN
        _row(figure, y, mark_texts(mark, scale), page.EDGE)
        middle = y + page.SMALL / page.PT_PER_IN * page.LETTER_MIDDLE
        x = area.left + DISC_END_IN
        draw_disc(figure, x, middle, mark, size_in=TABLE_DISC_IN, ring=TABLE_RING)
    if left_out:
        y -= ROW_IN
        least = max(m.margin_m for m in marks if m.symbol.isdigit())
        text = f"and {left_out} more, none over {scale.show.height(-least)}"
        page.write(figure, area.left + GROUND_IN, y, text, size=page.SMALL)
