"""The oracle's searching: golden section in many brackets, bisection."""

from collections.abc import Callable

import numpy as np
from numpy.typing import ArrayLike

from tests.oracle_earth import Array

#: how many of the lowest places of a scan are polished
POLISHED = 40
GOLDEN = (np.sqrt(5.0) - 1) / 2
#: bracket left by golden section: 0.618**60 = 3e-13 of a scan step
GOLDEN_STEPS = 60
BISECTIONS = 80


def polish(
    value: Callable[[Array], Array], low: ArrayLike, high: ArrayLike
) -> tuple[Array, Array]:
    """Golden section in many brackets at once: places and the least values seen."""
    low, high = np.asarray(low, float), np.asarray(high, float)
    inner, outer = high - GOLDEN * (high - low), low + GOLDEN * (high - low)
    at_inner, at_outer = value(inner), value(outer)
    for _ in range(GOLDEN_STEPS):
        left = at_inner <= at_outer
        low, high = np.where(left, low, inner), np.where(left, outer, high)
        fresh = np.where(
            left, high - GOLDEN * (high - low), low + GOLDEN * (high - low)
        )
        found = value(fresh)
        inner, outer = np.where(left, fresh, outer), np.where(left, inner, fresh)
        at_inner, at_outer = (
            np.where(left, found, at_outer),
            np.where(left, at_inner, found),
        )
    best = at_inner <= at_outer
    return np.where(best, inner, outer), np.where(best, at_inner, at_outer)


def lowest_places(
    value: Callable[[Array], Array], at: Array, scan: Array
) -> tuple[Array, Array]:
    """Polish the lowest places of a scan; void (NaN) never is one. Sorted by value."""
    filled = np.where(np.isnan(scan), np.inf, scan)
    padded = np.concatenate([[np.inf], filled, [np.inf]])
    dips = np.flatnonzero(
        (filled <= padded[:-2]) & (filled <= padded[2:]) & np.isfinite(filled)
    )
    dips = dips[np.argsort(filled[dips], kind="stable")][:POLISHED]

    def known(places: Array) -> Array:
        found = value(places)
        return np.where(np.isnan(found), np.inf, found)

    low, high = at[np.maximum(dips - 1, 0)], at[np.minimum(dips + 1, at.size - 1)]
    places, values = polish(known, low, high)
    better = values < filled[dips]
    places = np.where(better, places, at[dips])
    values = np.where(better, values, filled[dips])
    order = np.argsort(values, kind="stable")
    return places[order], values[order]


def bisect(good: Callable[[float], bool], bad_at: float, good_at: float) -> float:
    """The good side of the change between a bad and a good value."""
    for _ in range(BISECTIONS):
        middle = (bad_at + good_at) / 2
        if good(middle):
            good_at = middle
        else:
            bad_at = middle
    return good_at
