"""What a figure of masts takes from the record: pairs named, runs of the curve."""

from typing import Any, Final, NamedTuple

import numpy as np

from profiler.model import FloatArray
from profiler.output.figures import page

Json = dict[str, Any]


class Look(NamedTuple):
    """How a criterion's part of the curve is drawn."""

    color: str
    dashes: Any


#: Looks of the criteria in turn: Okabe and Ito's blue, orange, reddish purple, sky
#: blue, and black; told apart by their dashes alone.
LOOKS: Final = (
    Look(page.SIGHT, "-"),
    Look(page.GRAZING, (0, (4.0, 1.5))),
    Look(page.DISC, (0, (1.2, 1.0))),
    Look(page.ZONE, page.DASH_DOT),
    Look(page.EDGE, (0, (7.0, 1.5, 1.2, 1.5, 1.2, 1.5))),
)


class Pair(NamedTuple):
    """Two antenna heights that the record names."""

    what: str
    letter: str
    heights_m: tuple[float, float]
    governing: Json | None
    """The criterion; None where the record does not say."""
    given: str
    """"from" or "to" when that height was given, else empty."""
    shape: str
    is_solid: bool


def same_criterion(one: Json, other: Json) -> bool:
    """Whether two criteria of the record are one."""
    return all(one[k] == other[k] for k in ("ke", "f1_fraction", "extra_m"))


def number_of(values: Json, criterion: Json) -> int:
    """The criterion's number on the page, from 1."""
    for number, one in enumerate(values["criteria"], start=1):
        if same_criterion(one, criterion):
            return number
    msg = f"{criterion} is not among the record's criteria."
    raise ValueError(msg)


def looks_of(values: Json) -> list[Look]:
    """One look for each criterion; they repeat after five."""
    return [LOOKS[k % len(LOOKS)] for k in range(len(values["criteria"]))]


def pairs_of(values: Json) -> list[Pair]:
    """Equal heights, pairs with a given height and the cheapest pair, if there."""
    found = []
    at, equal, cheapest = (values[k] for k in ("margins_at", "equal_agl_m", "cheapest"))
    is_given = [values[k] is not None for k in ("from_agl_m", "to_agl_m")]
    governing = values["governing"]
    if equal is not None:
        governs = None if any(is_given) else governing
        heights = (equal, equal)
        found.append(Pair("equal heights", "E", heights, governs, "", "D", False))
    if is_given[0]:
        heights = (values["from_agl_m"], at["to_agl_m"])
        found.append(Pair("B as given", "G", heights, governing, "to", "v", False))
    if is_given[1]:
        first = at if not is_given[0] else values["from"]
        heights = (first["from_agl_m" if first is at else "agl_m"], values["to_agl_m"])
        governs = None if is_given[0] else governing
        found.append(Pair("A as given", "H", heights, governs, "from", "^", False))
    if cheapest is not None:
        heights = (cheapest["from_agl_m"], cheapest["to_agl_m"])
        governs = cheapest["governing"]
        found.append(Pair("cheapest pair", "C", heights, governs, "", "*", True))
    return found


def runs_of(values: Json) -> list[tuple[int, FloatArray, FloatArray]]:
    """Parts of the curve under one criterion: its number, near and far heights [m].

    Each part runs on to the first point of the next one, so that none is left out.
    """
    curve = values["curve"]
    numbers = [number_of(values, p["governing"]) for p in curve]
    near, far = (
        np.array([p[k] for p in curve], dtype=np.float64)
        for k in ("from_agl_m", "to_agl_m")
    )
    cuts = [k for k in range(1, len(numbers)) if numbers[k] != numbers[k - 1]]
    starts, ends = [0, *cuts], [*cuts, len(numbers) - 1]
    return [
        (numbers[a], near[a : b + 1], far[a : b + 1])
        for a, b in zip(starts, ends, strict=True)
        if len(numbers) > 0
    ]
