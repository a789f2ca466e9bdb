"""The cheapest pair of masts that can be built, out of all pairs of sections."""

import math
from typing import Final, NamedTuple

import numpy as np

from profiler.errors import InputError
from profiler.model.arrays import FloatArray, IntArray
from profiler.radio.bench import Bench
from profiler.radio.limits import DECIMALS, SAME_M, WHOLE_STEP, MastLimits, round_up

#: Heights tried at one end in one go [1]; our choice.
ONE_GO: Final = 513
#: Most heights tried at one end when costs leave them all alike [1].
MOST_TRIED: Final = 200_001
#: Costs nearer than this are the same [in the unit of cost].
SAME_COST: Final = 1e-7
#: Parts of a metre to which sections are compared [1/m].
PARTS_PER_M: Final = 1e6


def whole_steps(agl_m: float, near: MastLimits, far: MastLimits) -> float:
    """The least height not below ``agl_m`` that the sections of both ends make [m]."""
    parts = [round(end.section_m * PARTS_PER_M) for end in (near, far)]
    return round_up(agl_m, math.lcm(*parts) / PARTS_PER_M)


def cheapest_heights(
    bench: Bench, near: MastLimits, far: MastLimits
) -> tuple[float, float] | None:
    """The cheapest buildable pair; None if no pair within the limits does.

    The least far height is a convex function of the near one, so that the near heights
    which can beat a price known to be possible are neighbours: few need be tried.

    Raises
    ------
    InputError
        If there are too many pairs to tell apart.
    """
    prices = _Prices(bench, near, far)
    low, high = 0, prices.count - 1
    best = math.inf
    while high - low >= ONE_GO:
        index = np.unique(np.linspace(low, high, ONE_GO).round().astype(np.int64))
        found = prices.of(index)
        best = min(best, float(found.price.min()))
        if math.isinf(best):
            # the highest near mast is among them, and asks for the lowest far one
            return None
        can = np.flatnonzero(found.floor <= best + SAME_COST)
        before, after = max(can[0] - 1, 0), min(can[-1] + 1, index.size - 1)
        narrowed = int(index[before]), int(index[after])
        if 2 * (narrowed[1] - narrowed[0]) > high - low:
            break
        low, high = narrowed
    if high - low >= MOST_TRIED:
        msg = f"{high - low + 1} mast heights cost alike; use longer sections."
        raise InputError(msg)
    found = prices.of(np.arange(low, high + 1))
    if math.isinf(found.price.min()):
        return None
    # of equally cheap pairs the one with the lower taller mast
    cheap = np.flatnonzero(found.price <= found.price.min() + SAME_COST)
    taller = np.maximum(found.near_m[cheap], found.far_m[cheap])
    pick = int(cheap[np.argmin(taller)])
    return float(found.near_m[pick]), float(found.far_m[pick])


class _Found(NamedTuple):
    """Buildable pairs: for each near height the least far one."""

    near_m: FloatArray
    far_m: FloatArray
    price: FloatArray
    """Cost; infinite where the far height is above its limit."""
    floor: FloatArray
    """Cost if the far mast needed no whole sections: convex, and never more."""


class _Prices:
    """Costs of pairs, by the number of sections of the near mast."""

    def __init__(self, bench: Bench, near: MastLimits, far: MastLimits) -> None:
        """Count the near heights that can be built."""
        self._bench, self._near, self._far = bench, near, far
        self._first_m = near.rounded(near.least_m)
        rest = (near.most_m - self._first_m) / near.section_m
        self.count = math.floor(rest + WHOLE_STEP) + 1

    def of(self, index: IntArray) -> _Found:
        """The pairs of near heights so many sections above the lowest."""
        near, far = self._near, self._far
        heights = np.round(self._first_m + near.section_m * index, DECIMALS)
        needed = self._bench.to_agl_many(heights)
        # no cost times an infinite height
        can = needed <= far.most_m + SAME_M
        least = np.maximum(np.where(can, needed, far.most_m), far.least_m)
        steps = np.ceil(least / far.section_m - WHOLE_STEP)
        others = np.round(steps * far.section_m, DECIMALS)
        price = heights * near.cost_per_m + others * far.cost_per_m
        floor = heights * near.cost_per_m + least * far.cost_per_m
        is_built = can & (others <= far.most_m + SAME_M)
        return _Found(
            heights,
            others,
            np.where(is_built, price, np.inf),
            np.where(can, floor, np.inf),
        )
