"""The figure of antenna heights: one against the other, on one A4 page."""

import textwrap
from typing import Any, Final, NamedTuple

import numpy as np
from matplotlib.axes import Axes
from matplotlib.figure import Figure

from profiler.constants import FOOT_M, QUARTER_TURN_DEG
from profiler.model import FloatArray
from profiler.output.figures import page
from profiler.output.figures.foot import (
    HASH_SHOWN,
    LINE_MOST,
    WHO,
    draw_foot,
)
from profiler.output.figures.marks import spread
from profiler.output.figures.masts_key import HAIR, draw_masts_key
from profiler.output.figures.masts_plan import Pair, looks_of, pairs_of, runs_of
from profiler.output.figures.scale import nice_ticks, tick_texts
from profiler.output.figures.tables import NAME_MOST, draw_head, short
from profiler.output.masts_words import MARKED_FROM_M, MASTS_CAUTION, first_masts_line
from profiler.output.naming import capital, names_of
from profiler.output.numbers import Show, posts_text

__all__ = ["draw_masts"]

#: The drawing: a square, so that a metre of either mast is as long [in].
AREA: Final = page.Area(1.05, 1.62, 5.4, 5.4)
#: Heights are shown up to so many times the tallest pair named [1]; our choice.
BEYOND: Final = 1.6
#: Least range [m].
LEAST_RANGE_M: Final = 5.0
#: Most ticks on an axis [1].
MOST_TICKS: Final = 7
#: Words beside and below the drawing stand so far from it [in].
BESIDE_IN: Final = 0.6
BELOW_IN: Final = 0.42
#: Size of a number's disc on the curve and of the marks [pt].
DISC: Final = 12.0
MARK: Final = 9.0
#: Letters stand so far right of and above their mark, and so far apart [pt].
LETTER_OFF: Final = 13.0
LETTER_GAP: Final = 15.0
#: Half the root of two [1]: along the curve's own direction.
HALF_ROOT: Final = 0.5**0.5
#: Characters of a line of cautions [1]; the page holds about 190.
CAUTION_MOST: Final = 185

Json = dict[str, Any]
Spots = list[tuple[float, float]]


class Frame(NamedTuple):
    """Units and range of the drawing."""

    show: Show
    unit_m: float
    """Unit of heights [m]."""
    top: float
    """Largest height on both axes, in that unit."""


def draw_masts(values: Json, *, show_in: str = "m") -> Figure:
    """One A4 page, lying: which pairs of antenna heights meet the rule.

    Parameters
    ----------
    values : dict
        From `masts_record`; every number on the page is its own.
    show_in : str
        "m" or "ft".

    Returns
    -------
    Figure
        For `save_figure`.

    Raises
    ------
    InputError
        If ``show_in`` is no such unit.
    """
    show = Show(unit=show_in, path_m=values["path"]["distance_m"])
    frame = _frame(values, show)
    figure = page.new_page()
    eye, name = (short(n, NAME_MOST) for n in names_of(values))
    length = show.length(values["path"]["distance_m"])
    head = (first_masts_line(values, show), f"{length} from {eye} to {name}")
    draw_head(figure, head)
    ax = page.area_axes(figure, AREA, "masts")
    draw_trade_off(ax, values, frame)
    _axis_words(figure, frame, (capital(eye), capital(name)))
    _marked(figure, ax, frame)
    if not values["curve"]:
        x, y = AREA.left + AREA.width / 2.0, AREA.top - BELOW_IN
        page.write(figure, x, y, "no pair of heights meets the rule", ha="center")
    draw_masts_key(figure, values, show)
    draw_foot(figure, _quiet(values), _cautions(values))
    return figure


def _frame(values: Json, show: Show) -> Frame:
    unit_m = FOOT_M if show.unit == "ft" else 1.0
    named = [h for pair in pairs_of(values) for h in pair.heights_m]
    curve = [p[k] for p in values["curve"] for k in ("from_agl_m", "to_agl_m")]
    top = BEYOND * max(named, default=max(curve, default=LEAST_RANGE_M) / BEYOND)
    return Frame(show, unit_m, max(top, LEAST_RANGE_M) / unit_m)


def draw_trade_off(ax: Axes, values: Json, frame: Frame) -> Axes:
    """The curve of least heights by governing criterion, and the pairs named.

    Parameters
    ----------
    ax : Axes
        A square; both axes in the unit of heights.
    values : dict
        The masts' record.
    frame : Frame
        Units and range.
    """
    ax.set_xlim(0.0, frame.top)
    ax.set_ylim(0.0, frame.top)
    _too_low(ax, values, frame)
    pairs = pairs_of(values)
    spots: Spots = [
        (p.heights_m[0] / frame.unit_m, p.heights_m[1] / frame.unit_m) for p in pairs
    ]
    taken, looks = list(spots), looks_of(values)
    for number, near, far in runs_of(values):
        run, look = np.array([near, far]) / frame.unit_m, looks[number - 1]
        ax.plot(
            *run,
            color=look.color,
            lw=page.THICK,
            ls=look.dashes,
            zorder=page.Z_RAY,
            label=f"criterion {number}",
        )
        _number(ax, number, run, frame, taken)
    ax.plot([0.0, frame.top], [0.0, frame.top], color=page.LEVEL, lw=HAIR, zorder=0)
    for pair, at in zip(pairs, spots, strict=True):
        _mark(ax, pair, at)
    _letters(ax, pairs, spots, frame)
    ticks = nice_ticks(0.0, frame.top, MOST_TICKS)
    ax.set_xticks(ticks, tick_texts(ticks))
    ax.set_yticks(ticks, tick_texts(ticks))
    page.style_ticks(ax)
    return ax


def _too_low(ax: Axes, values: Json, frame: Frame) -> None:
    """Pairs of heights that do not meet the rule, hatched."""
    if not values["curve"]:
        return
    near, far = (
        np.array([p[k] for p in values["curve"]]) / frame.unit_m
        for k in ("from_agl_m", "to_agl_m")
    )
    # left of the curve no far height shown does, right of it the last one holds on
    x = np.concatenate([[0.0, near[0]], near, [max(frame.top, float(near[-1]))]])
    y = np.concatenate([[frame.top, frame.top], far, far[-1:]])
    ax.fill_between(
        x,
        np.minimum(y, frame.top),
        0.0,
        facecolor="none",
        edgecolor=page.LEVEL,
        hatch="\\\\\\\\",
        lw=0.0,
        zorder=0,
        label="too low",
    )


def _number(ax: Axes, number: int, run: FloatArray, frame: Frame, taken: Spots) -> None:
    """The criterion's number on its run, where it is furthest from other marks."""
    inside = run[:, np.all((run >= 0.0) & (run <= frame.top), axis=0)]
    if inside.size == 0:
        return
    edge = np.minimum(inside, frame.top - inside).min(axis=0)
    apart = [np.hypot(inside[0] - x, inside[1] - y) for x, y in taken]
    k = int(np.argmax(np.min([edge, *apart], axis=0)))
    at = (float(inside[0, k]), float(inside[1, k]))
    look = {"ms": DISC, "mfc": page.PAPER, "mew": HAIR, "zorder": page.Z_RAY + 1}
    page.spot(ax, at, "o", label=f"number {number}", **look)
    page.letter_beside(ax, str(number), at, (0.0, 0.0))
    taken.append(at)


def _mark(ax: Axes, pair: Pair, at: tuple[float, float]) -> None:
    """A pair of heights, and a line from a given height to it."""
    look: dict[str, Any] = {"color": page.QUIET, "lw": HAIR, "ls": page.RULE_DASHES}
    if pair.given == "from":
        ax.plot([at[0], at[0]], [0.0, at[1]], zorder=page.Z_EDGE, **look)
    if pair.given == "to":
        ax.plot([0.0, at[0]], [at[1], at[1]], zorder=page.Z_EDGE, **look)
    face = page.EDGE if pair.is_solid else page.PAPER
    page.spot(ax, at, pair.shape, label=pair.what, ms=MARK, mfc=face)


def _letters(ax: Axes, pairs: list[Pair], spots: Spots, frame: Frame) -> None:
    """Letters on the free side of the curve, apart along it, tied to their marks."""
    per_unit = AREA.width * page.PT_PER_IN / frame.top
    along = [(x - y) * per_unit * HALF_ROOT for x, y in spots]
    far = 2.0 * AREA.width * page.PT_PER_IN
    placed = spread(along, LETTER_GAP, -far, far)
    for pair, at, was, now in zip(pairs, spots, along, placed, strict=True):
        shift = (now - was) * HALF_ROOT
        off = (LETTER_OFF + shift, LETTER_OFF - shift)
        ax.annotate(
            pair.letter,
            at,
            xytext=off,
            textcoords="offset points",
            ha="center",
            va="center",
            fontproperties=page.letters(bold=True),
            zorder=page.Z_MARK,
            arrowprops={"arrowstyle": "-", "lw": HAIR, "shrinkA": 1.0, "shrinkB": 4.0},
        )


def _axis_words(figure: Figure, frame: Frame, names: tuple[str, str]) -> None:
    """Whose height each axis counts."""
    middle = AREA.left + AREA.width / 2.0, AREA.bottom + AREA.height / 2.0
    unit = f"antenna above ground, {frame.show.unit}"
    y = AREA.bottom - BELOW_IN
    text = page.write(figure, middle[0], y, f"A: {names[0]}, {unit}", ha="center")
    page.fit(figure, text, AREA.width, least_pt=page.SMALL)
    look: dict[str, Any] = {
        "ha": "center",
        "va": "center",
        "rotation": QUARTER_TURN_DEG,
    }
    page.write(
        figure, AREA.left - BESIDE_IN, middle[1], f"B: {names[1]}, {unit}", **look
    )


def _marked(figure: Figure, ax: Axes, frame: Frame) -> None:
    """Thin lines from which on marking and lighting rules may apply."""
    at = MARKED_FROM_M / frame.unit_m
    if at >= frame.top:
        return
    look: dict[str, Any] = {"color": page.QUIET, "lw": HAIR, "ls": page.ZONE_DOTS}
    ax.axvline(at, label="marked from", zorder=page.Z_GROUND, **look)
    ax.axhline(at, label="marked from", zorder=page.Z_GROUND, **look)
    share = at / frame.top
    text = (
        f"{MARKED_FROM_M / FOOT_M:.0f} ft"
        if frame.show.unit == "ft"
        else f"{MARKED_FROM_M:.2f} m"
    )
    x, y = AREA.left + share * AREA.width, AREA.bottom + share * AREA.height
    up = AREA.top + page.BASELINE_IN
    page.write(figure, x, up, text, size=page.SMALL, ha="center")
    right = AREA.right + page.BASELINE_IN
    page.write(figure, right, y, text, size=page.SMALL, va="center")


def _quiet(values: Json) -> list[str]:
    """Ground, program and warnings."""
    files = values["terrain"]["files"]
    ground = "no file gives ground"
    if files:
        more = f" and {len(files) - 1} more" if len(files) > 1 else ""
        digest = f" {files[0]['sha256'][:HASH_SHOWN]}" if files[0]["sha256"] else ""
        posts = posts_text([f["cell_m"] for f in files])
        ground = f"{files[0]['name']}{digest}{more}, {posts}"
    way = values["terrain"]["interpolation"]
    lines = [f"Ground: {short(ground, LINE_MOST)}, {way}.  {WHO}"]
    warnings = [note["text"] for note in values["warnings"]]
    if warnings:
        head = "Warning" if len(warnings) == 1 else f"{len(warnings)} warnings, first"
        lines.append(f"{head}: {warnings[0]}")
    return lines


def _cautions(values: Json) -> list[str]:
    first, *rest = values["cautions"]
    notes = [first, *(n for n in rest if n["code"].startswith("radio"))]
    texts = [MASTS_CAUTION, *(note["text"] for note in notes)]
    return [part for text in texts for part in textwrap.wrap(text, CAUTION_MOST)]
