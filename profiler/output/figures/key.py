"""The key above the profile: samples of what it shows."""

from typing import Any, Final, NamedTuple

from matplotlib.axes import Axes
from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.patches import Rectangle
from matplotlib.text import Text

from profiler.output.figures import page
from profiler.output.figures.zone import RULE_LOOK

#: Length of a sample line, its gap to the words, and least and most distance between
#: two entries [in].
SAMPLE_IN: Final = 0.3
GAP_IN: Final = 0.06
APART_LEAST_IN: Final = 0.08
APART_MOST_IN: Final = 0.24
#: Distance between two rows [in].
ROW_IN: Final = 0.16
#: Letters are hinted to whole pixels and run widest in a small picture [1/in].
SMALL_DPI: Final = 77.0


class Entry(NamedTuple):
    """One sample of the key."""

    label: str
    line: dict[str, Any] | None
    """Look of a line; None draws a patch."""
    patch: tuple[str, str, str] = ("", "", "")
    """Its face, edge and hatch."""
    is_short: bool = False
    """Whether the line is a short tick."""


_ENTRIES: Final = (
    Entry("sight line", {"color": page.SIGHT, "lw": page.RAY_WIDTH}),
    Entry(
        "grazing ray",
        {"color": page.GRAZING, "lw": page.RAY_WIDTH, "ls": page.DASH_DOT},
    ),
    Entry(
        "first Fresnel zone",
        {"color": page.ZONE, "lw": page.ZONE_WIDTH, "ls": page.ZONE_DOTS},
    ),
    Entry("rule's line", RULE_LOOK),
    Entry("ground seen", {"color": page.EDGE, "lw": page.THICK}),
    Entry("not seen", None, (page.GROUND, page.HATCHING, "//////")),
    Entry("trees, buildings", None, (page.PAPER, page.COVER, page.STIPPLE)),
    Entry("no ground", None, (page.PAPER, page.HATCHING, "xxxx")),
    Entry("sea level", {"color": page.QUIET, "lw": page.THIN, "ls": page.SEA_DASHES}),
    Entry("needed height", {"color": page.EDGE, "lw": page.RAY_WIDTH}, is_short=True),
    Entry(
        "given point",
        {"color": page.EDGE, "lw": 0.0, "marker": "+", "mew": page.RAY_WIDTH},
    ),
)


class _Sized(NamedTuple):
    entry: Entry
    text: Text
    width_in: float


def draw_key(figure: Figure, ax: Axes) -> None:
    """Samples of what the profile shows, only what is there, in one row or two."""
    present = set(ax.get_legend_handles_labels()[1])
    area = page.KEY_AREA
    entries = [e for e in _ENTRIES if e.label in present]
    texts = [page.write(figure, 0.0, 0.0, e.label, size=page.SMALL) for e in entries]
    words = page.widths_in(texts, SMALL_DPI)
    sized = [
        _Sized(entry, text, SAMPLE_IN + GAP_IN + width)
        for entry, text, width in zip(entries, texts, words, strict=True)
    ]
    rows = _rows(sized, area.width)
    step = ROW_IN if len(rows) > 1 else 0.0
    top = area.bottom + page.BASELINE_IN + ROW_IN / 2.0 + step / 2.0
    for k, row in enumerate(rows):
        free = (area.width - sum(s.width_in for s in row)) / max(len(row) - 1, 1)
        x, y = area.left, top - k * ROW_IN
        for item in row:
            _sample(figure, item.entry, x, y)
            item.text.set_position(
                ((x + SAMPLE_IN + GAP_IN) / page.PAGE_IN[0], y / page.PAGE_IN[1])
            )
            x += item.width_in + min(APART_MOST_IN, free)


def _rows(sized: list[_Sized], width: float) -> list[list[_Sized]]:
    """One row if all fit, else rows filled one after another."""
    rows: list[list[_Sized]] = [[]]
    for item in sized:
        wide = sum(s.width_in + APART_LEAST_IN for s in rows[-1]) + item.width_in
        if rows[-1] and wide > width:
            rows.append([])
        rows[-1].append(item)
    return rows


def _sample(figure: Figure, entry: Entry, x: float, y: float) -> None:
    wide, tall = page.PAGE_IN
    middle = y + page.SMALL / page.PT_PER_IN * page.LETTER_MIDDLE
    if entry.line is None:
        face, edge, hatch = entry.patch
        figure.add_artist(
            Rectangle(
                (x / wide, (middle - page.PATCH_IN / 2.0) / tall),
                SAMPLE_IN / wide,
                page.PATCH_IN / tall,
                facecolor=face,
                edgecolor=edge,
                hatch=hatch,
                lw=page.THIN,
            )
        )
        return
    ends = (x, x + SAMPLE_IN)
    if entry.is_short:
        ends = (x + SAMPLE_IN / 3.0, x + 2.0 * SAMPLE_IN / 3.0)
    if "marker" in entry.line:
        ends = (x + SAMPLE_IN / 2.0,) * 2
    xs = [end / wide for end in ends]
    figure.add_artist(Line2D(xs, [middle / tall] * 2, **entry.line))
