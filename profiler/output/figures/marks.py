"""Which places of the answer get a disc, and where the discs stand."""

from dataclasses import dataclass, replace
from typing import Final

import numpy as np

from profiler.model import CoverKind, Place, Stretch
from profiler.output.figures.course import Course
from profiler.output.figures.zone import has_rule
from profiler.output.told import radio_of

#: Blocked stretches that get a disc when there are no more of them [1].
MOST_STRETCHES: Final = 8
#: The same for a radio path, whose footer is longer [1].
MOST_RADIO: Final = 6
#: Places nearer than this are one place [m]; the record's last digit.
SAME_M: Final = 0.001
#: Letters of the discs that carry no number.
FIRST_BLOCK: Final = "F"
HORIZON: Final = "H"
RULE: Final = "R"


@dataclass(frozen=True, slots=True, kw_only=True)
class Mark:
    """One place that gets a disc and a row of the table."""

    symbol: str
    """What stands in the disc: a number, F (first block), H (horizon) or R (rule)."""
    decides: bool
    """Whether it is the decisive point."""
    distance_m: float
    """From the eye's end [m]."""
    ground_m: float
    """Ground and cover there [m]."""
    margin_m: float
    """Sight line minus ground and cover [m]."""
    lat_deg: float
    lon_deg: float
    note: str
    """What the table says of it."""
    is_cover: bool = False
    """Whether trees or a building stand there."""


def marks_of(course: Course) -> tuple[list[Mark], int]:
    """Places to mark, numbered ones first, and how many stretches are left out.

    Returns
    -------
    list of Mark
        The decisive point alone when nothing blocks; else the blocked stretches by
        their number from the eye, the worst ones when there are many; then the first
        block and the horizon point where they are places of their own.
    int
        Blocked stretches without a mark.
    """
    line, radio = course.line, radio_of(course.line)
    numbered = list(enumerate(line.blocked_stretches, start=1))
    most = MOST_STRETCHES if radio is None else MOST_RADIO
    shown = numbered
    if len(numbered) > most:
        # one row tells how many more there are
        worst = sorted(numbered, key=lambda pair: pair[1].worst_margin_m)[: most - 1]
        shown = sorted(worst, key=lambda pair: pair[0])
    marks = [_of_stretch(course, number, s) for number, s in shown]
    if line.decisive is not None and not marks:
        marks.append(_of_place("1", line.decisive, "decides"))
    others = ((FIRST_BLOCK, line.first_block), (HORIZON, line.horizon))
    for symbol, place in others:
        if place is not None and not _is_marked(marks, place):
            marks.append(_of_place(symbol, place, _NOTES[symbol]))
    if radio is not None and has_rule(radio):
        marks = _with_rule(course, marks, radio.result.governing.at.place)
    return marks, len(numbered) - len(shown)


def _with_rule(course: Course, marks: list[Mark], place: Place) -> list[Mark]:
    """The marks with the place where the rule leaves least: an old one or one more."""
    for k, mark in enumerate(marks):
        if abs(mark.distance_m - place.distance_m) <= SAME_M:
            told = replace(mark, note=f"{mark.note}, rule" if mark.note else "rule")
            return [*marks[:k], told, *marks[k + 1 :]]
    # the place's own margin is that of the criterion's air; discs tell the stated air
    sight = float(course.sight_m(np.array([place.distance_m]))[0])
    margin = sight - place.ground_m - place.cover_m
    ruled = _of_place(RULE, place, _NOTES[RULE])
    return [*marks, replace(ruled, margin_m=margin)]


_NOTES: Final = {
    FIRST_BLOCK: "first block",
    HORIZON: "horizon",
    RULE: "rule",
}


def _is_marked(marks: list[Mark], place: Place) -> bool:
    return any(abs(m.distance_m - place.distance_m) <= SAME_M for m in marks)


def _of_place(symbol: str, place: Place, note: str) -> Mark:
    return Mark(
        symbol=symbol,
        decides=symbol not in _NOTES,
        distance_m=place.distance_m,
        ground_m=place.ground_m + place.cover_m,
        margin_m=place.margin_m,
        lat_deg=place.lat_deg,
        lon_deg=place.lon_deg,
        note=_note(note, place.cover_kind),
        is_cover=place.cover_m > 0.0,
    )


def _note(note: str, kind: CoverKind | None) -> str:
    """What the table says of a place, with what stands there."""
    return ", ".join(part for part in (note, kind and kind.value) if part)


def _of_stretch(course: Course, number: int, stretch: Stretch) -> Mark:
    place = course.line.decisive
    if place is not None and stretch.start_m <= place.distance_m <= stretch.end_m:
        return _of_place(str(number), place, "decides")
    sight = float(course.sight_m(np.array([stretch.worst_at_m]))[0])
    return Mark(
        symbol=str(number),
        decides=False,
        distance_m=stretch.worst_at_m,
        ground_m=sight - stretch.worst_margin_m,
        margin_m=stretch.worst_margin_m,
        lat_deg=stretch.lat_deg,
        lon_deg=stretch.lon_deg,
        note=_note("", stretch.cover_kind),
        is_cover=stretch.cover_kind is not None,
    )


def spread(wanted: list[float], gap: float, low: float, high: float) -> list[float]:
    """Places on a line as near to the wanted ones as a least distance allows.

    Parameters
    ----------
    wanted : list of float
        Wanted places, in any order.
    gap : float
        Least distance between two of them.
    low, high : float
        The line's ends.

    Returns
    -------
    list of float
        In the order of ``wanted``; each cluster stays centred on what it wants.
    """
    order = sorted(range(len(wanted)), key=lambda k: wanted[k])
    clusters: list[list[int]] = []
    for k in order:
        clusters.append([k])
        while len(clusters) > 1 and _start(
            clusters[-1], wanted, gap, low, high
        ) < gap + _end(clusters[-2], wanted, gap, low, high):
            clusters[-2:] = [clusters[-2] + clusters[-1]]
    placed = list(wanted)
    for cluster in clusters:
        first = _start(cluster, wanted, gap, low, high)
        for n, k in enumerate(cluster):
            placed[k] = first + n * gap
    return placed


def _start(
    cluster: list[int], wanted: list[float], gap: float, low: float, high: float
) -> float:
    """Where a cluster's first member stands."""
    half = (len(cluster) - 1) * gap / 2.0
    middle = sum(wanted[k] for k in cluster) / len(cluster)
    return min(max(middle, low + half), high - half) - half


def _end(
    cluster: list[int], wanted: list[float], gap: float, low: float, high: float
) -> float:
    return _start(cluster, wanted, gap, low, high) + (len(cluster) - 1) * gap
