"""Beside the table: how the rule stands, what would clear, the DEM's own ground."""

from typing import TYPE_CHECKING, Final

from matplotlib.figure import Figure

from profiler.model import SightLine, Verdict
from profiler.output.figures import page
from profiler.output.figures.scale import Scale
from profiler.output.figures.tables import ROW_IN
from profiler.output.figures.zone import has_rule, spare_text
from profiler.output.first_line import VERDICT_WORDS
from profiler.output.numbers import DOWN, UP, ratio
from profiler.output.told import radio_of

if TYPE_CHECKING:  # a walker's figure need not load the radio room
    from profiler.radio.answer import RadioAnswer

#: Criteria told [1]; all are in the record.
MOST_CRITERIA: Final = 3
#: A head and its lines.
Block = tuple[str, list[str]]


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


def _needed(line: SightLine, scale: Scale) -> Block | None:
    """What would clear; for a radio path, which must meet a rule, only when blocked."""
    lines = needed_lines(line, scale)
    head = _NEEDED_HEADS[line.verdict]
    if radio_of(line) is not None:
        if line.verdict != Verdict.BLOCKED:
            return None
        lines = [t for t in lines if t.startswith(("A at", "B at", "both"))]
        head = "each alone clears the line, not the rule"
    return head, lines or ["nothing short of other stations"]


def criteria_lines(radio: "RadioAnswer", scale: Scale) -> list[str]:
    """Each criterion with what it leaves or lacks; the governing one first."""
    from profiler.output.radio_record import criterion_record  # only for a radio path
    from profiler.output.radio_words import criterion_text

    result = radio.result
    rest = [r for r in result.results if r is not result.governing]
    several, lines = has_rule(radio) and bool(rest), []
    for one in [result.governing, *rest][:MOST_CRITERIA]:
        what = criterion_text(criterion_record(one.criterion))
        governs = ", governs" if several and one is result.governing else ""
        lines.append(f"{what}: {spare_text(one.margin_m, scale.show)}{governs}")
    more = len(result.results) - len(lines)
    return [*lines, f"and {more} more, all in the record"] if more else lines


def _rule(line: SightLine, scale: Scale) -> Block | None:
    radio = radio_of(line)
    if radio is None:
        return None
    name = radio.result.rule.name
    head = f"rule {name}" if name != "given" else "the rule given"
    if not has_rule(radio):
        head = "no rule given; what the trade looks at"
    return head, criteria_lines(radio, scale)


def _other(line: SightLine, scale: Scale) -> Block | None:
    """The same with the DEM's ground where a surveyed one was given."""
    other = line.other_ground
    if other is None:
        return None
    told = VERDICT_WORDS[other.verdict.value]
    if other.margin_m is not None:
        margin = scale.show.height(other.margin_m).replace("-", "−")
        told = f"{told}, margin {margin}"
    return "with the DEM's own ground at the ends", [told]


def draw_needed(figure: Figure, line: SightLine, scale: Scale) -> None:
    """How the rule stands, what would clear the line and the DEM's own ground."""
    area = page.NEEDED_AREA
    blocks = (_rule(line, scale), _needed(line, scale), _other(line, scale))
    y = area.top + ROW_IN - page.SMALL / page.PT_PER_IN
    for head, lines in (block for block in blocks if block is not None):
        for text, color in ((head, page.QUIET), *((t, page.EDGE) for t in lines)):
            y -= ROW_IN
            artist = page.write(
                figure, area.left, y, text, size=page.SMALL, color=color
            )
            page.fit(figure, artist, area.width, least_pt=page.SMALL)
