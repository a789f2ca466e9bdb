"""Beside the drawing of masts: pairs of heights, criteria, rule and what lines mean."""

import textwrap
from collections.abc import Sequence
from typing import Any, Final

from matplotlib.figure import Figure
from matplotlib.lines import Line2D
from matplotlib.patches import Rectangle

from profiler.output.figures import page
from profiler.output.figures.masts_plan import looks_of, number_of, pairs_of
from profiler.output.masts_words import MARKED_FROM_M
from profiler.output.numbers import DOWN, NEAREST, UP, Show, ratio
from profiler.output.radio_words import criterion_text

#: The column of words [in].
AREA: Final = page.Area(7.3, 1.2, 4.09, 5.82)
#: Distance between two lines and before a head [in].
LINE_IN: Final = 0.19
HEAD_GAP_IN: Final = 0.14
#: Columns of the table of pairs from the column's left [in]: heights end at theirs.
MARK_IN: Final = 0.1
LETTER_END_IN: Final = 0.34
WHAT_IN: Final = 0.44
NEAR_END_IN: Final = 2.2
FAR_END_IN: Final = 3.05
GOVERNS_END_IN: Final = 3.85
#: Samples of lines [in] and of marks [pt].
SAMPLE_IN: Final = 0.42
NUMBER_END_IN: Final = 0.6
GAP_IN: Final = 0.1
MARK: Final = 7.5
#: Width of thin lines [pt].
HAIR: Final = 0.8
#: Characters of a line of a rule's source [1].
LINE_MOST: Final = 62

Json = dict[str, Any]


class _Column:
    """Writes line under line."""

    def __init__(self, figure: Figure) -> None:
        """Start at the top of the column."""
        self.figure = figure
        self.y = AREA.top

    def head(self, text: str) -> None:
        self.y -= HEAD_GAP_IN
        self.line(text, color=page.QUIET)

    def line(self, text: str, *, left_in: float = 0.0, color: str = page.EDGE) -> None:
        self.y -= LINE_IN
        x = AREA.left + left_in
        artist = page.write(self.figure, x, self.y, text, size=page.SMALL, color=color)
        page.fit(self.figure, artist, AREA.width - left_in, least_pt=page.FINE)

    def cell(self, text: str, end_in: float, *, color: str = page.EDGE) -> None:
        """A cell of the present line that ends at ``end_in``."""
        look: dict[str, Any] = {"size": page.SMALL, "color": color, "ha": "right"}
        page.write(self.figure, AREA.left + end_in, self.y, text, **look)

    def sample(self, ends_in: Sequence[float], **look: Any) -> None:
        """A sample at the present line."""
        wide, tall = page.PAGE_IN
        middle = (self.y + page.SMALL / page.PT_PER_IN * page.LETTER_MIDDLE) / tall
        xs = [(AREA.left + end) / wide for end in ends_in]
        self.figure.add_artist(Line2D(xs, [middle] * len(xs), **look))

    def patch(self, width_in: float, **look: Any) -> None:
        """A sample of an area at the present line."""
        wide, tall = page.PAGE_IN
        self.figure.add_artist(
            Rectangle(
                (AREA.left / wide, self.y / tall),
                width_in / wide,
                page.PATCH_IN / tall,
                lw=HAIR,
                **look,
            )
        )


def draw_masts_key(figure: Figure, values: Json, show: Show) -> None:
    """The words of a figure of masts.

    Parameters
    ----------
    figure : Figure
    values : dict
        The masts' record.
    show : Show
        Units.
    """
    column = _Column(figure)
    column.y = AREA.top - LINE_IN / 2.0
    page.write(figure, AREA.left, column.y, "heights that meet the rule", bold=True)
    _pairs(column, values, show)
    _criteria(column, values, show)
    column.head("on the drawing")
    _lines(column)


def _pairs(column: _Column, values: Json, show: Show) -> None:
    column.y -= HEAD_GAP_IN
    column.line("", left_in=WHAT_IN)
    heads = ((f"A, {show.unit}", NEAR_END_IN), (f"B, {show.unit}", FAR_END_IN))
    for text, end in (*heads, ("governs", GOVERNS_END_IN)):
        column.cell(text, end, color=page.QUIET)
    for pair in pairs_of(values):
        column.line(pair.what, left_in=WHAT_IN)
        column.cell(pair.letter, LETTER_END_IN)
        column.sample(
            (MARK_IN,),
            marker=pair.shape,
            ms=MARK,
            mfc=page.EDGE if pair.is_solid else page.PAPER,
            mec=page.EDGE,
            mew=page.RULE_WIDTH,
            ls="none",
        )
        ends = (("from", NEAR_END_IN), ("to", FAR_END_IN))
        for height, (role, end) in zip(pair.heights_m, ends, strict=True):
            # a height found is rounded to the safe side, a given one is as given
            way = NEAREST if pair.given == role else UP
            column.cell(show.bare_height(height, rounding=way), end)
        if pair.governing is not None:
            column.cell(str(number_of(values, pair.governing)), GOVERNS_END_IN)
    if not pairs_of(values):
        column.line("none within the limits")
    if values["cheapest"] is not None:
        column.line(f"cost of C: {ratio(values['cheapest']['cost'])}", left_in=WHAT_IN)


def _criteria(column: _Column, values: Json, show: Show) -> None:
    """Each criterion with its number, its line and what it leaves."""
    name, source = values["rule"]["name"], values["rule"]["source"]
    what = "the rule given" if name == "given" else f"rule {name}"
    column.head(f"{what}: all of these hold on the line")
    for number, (one, look) in enumerate(
        zip(values["criteria"], looks_of(values), strict=True), start=1
    ):
        left = one["margin_m"]
        told = "" if left is None else f", leaves {show.height(left, rounding=DOWN)}"
        column.line(f"{criterion_text(one)}{told}", left_in=NUMBER_END_IN + GAP_IN)
        column.cell(str(number), NUMBER_END_IN)
        column.sample((0.0, SAMPLE_IN), color=look.color, lw=page.THICK, ls=look.dashes)
    at = values["margins_at"]
    if at is not None:
        near, far = (show.height(at[k]) for k in ("from_agl_m", "to_agl_m"))
        column.line(f"left over with A at {near} and B at {far}", color=page.QUIET)
    for text in textwrap.wrap("" if name == "given" else source, LINE_MOST):
        column.line(text, color=page.QUIET)


def _lines(column: _Column) -> None:
    """What is on the drawing besides."""
    words = NUMBER_END_IN + GAP_IN
    column.line("a criterion's number: it governs there", left_in=words)
    look: dict[str, Any] = {"mfc": page.PAPER, "mec": page.EDGE, "mew": HAIR}
    middle = SAMPLE_IN / 2.0
    column.sample((middle,), marker="o", ms=MARK, ls="none", **look)
    column.line("too low; above the line the rule is met", left_in=words)
    column.patch(SAMPLE_IN, facecolor=page.PAPER, edgecolor=page.LEVEL, hatch="\\\\\\")
    column.line("equal heights", left_in=words)
    column.sample((0.0, SAMPLE_IN), color=page.LEVEL, lw=HAIR)
    column.line(
        f"{MARKED_FROM_M:.2f} m (200 ft): marking and lighting rules may apply",
        left_in=words,
    )
    column.sample((0.0, SAMPLE_IN), color=page.QUIET, lw=HAIR, ls=page.ZONE_DOTS)
