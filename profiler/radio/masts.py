"""Antenna heights: least at one end, equal, the whole trade-off and the cheapest."""

import math
from dataclasses import dataclass, field
from typing import Final

import numpy as np

from profiler.errors import InputError
from profiler.radio.bench import Bench, Need
from profiler.radio.criteria import Criterion

#: Step to which heights are rounded up [m].
STEP_M: Final = 0.01
#: Highest mast sought [m]: above any built.
HIGHEST_M: Final = 1000.0
#: Points of the trade-off curve [1]; our choice.
CURVE_POINTS: Final = 41
#: How far the curve goes beyond equal heights [1]; our choice.
CURVE_REACH: Final = 4.0
#: Halvings of an interval of heights [1]: a kilometre to a nanometre.
HALVINGS: Final = 60
#: Share of a step by which rounding may miss a whole step [1].
WHOLE_STEP: Final = 1e-7
#: Most heights tried at one end for the cheapest pair [1].
MOST_TRIED: Final = 200_001


@dataclass(frozen=True, slots=True, kw_only=True)
class MastLimits:
    """What can be built at one end and what it costs."""

    least_m: float = 0.0
    """Lowest antenna height allowed [m]."""
    most_m: float = HIGHEST_M
    """Highest antenna height allowed [m]."""
    section_m: float = STEP_M
    """Masts come in multiples of this [m]."""
    cost_per_m: float = 1.0
    """Cost of a metre in any unit."""

    def __post_init__(self) -> None:
        """Refuse what cannot be built."""
        for value in (self.least_m, self.most_m, self.section_m, self.cost_per_m):
            if not (math.isfinite(value) and value >= 0.0):
                msg = f"Limits, sections and costs must be 0 or more, not {value:g}."
                raise InputError(msg)
        if self.section_m < STEP_M:
            msg = f"A mast section of {self.section_m:g} m is below {STEP_M:g} m."
            raise InputError(msg)
        if self.least_m > self.most_m:
            msg = (
                f"The lowest height allowed, {self.least_m:g} m, is above the "
                f"highest, {self.most_m:g} m."
            )
            raise InputError(msg)
        if self.rounded(self.least_m) > self.most_m:
            msg = (
                f"No multiple of {self.section_m:g} m lies between {self.least_m:g} "
                f"and {self.most_m:g} m."
            )
            raise InputError(msg)

    def rounded(self, agl_m: float) -> float:
        """The least height that can be built and is not below ``agl_m`` [m]."""
        return _up(max(agl_m, self.least_m), self.section_m)


@dataclass(frozen=True, slots=True, kw_only=True)
class MastPair:
    """Two antenna heights above ground, what they cost and which criterion governs."""

    from_agl_m: float
    to_agl_m: float
    cost: float
    governing: Criterion
    margins_m: tuple[float, ...]
    """What each criterion leaves at these heights [m]."""


@dataclass(frozen=True, slots=True, kw_only=True)
class MastPlan:
    """Antenna heights that meet every criterion at once."""

    criteria: tuple[Criterion, ...]
    equal: MastPair | None
    """Equal heights; None if no height up to the limits does."""
    for_given_to: MastPair | None
    """Least height at the near end for the given far one; None if none was given."""
    for_given_from: MastPair | None
    cheapest: MastPair | None
    """Least total cost within limits and sections; None if no pair does."""
    curve: tuple[tuple[float, float, Criterion], ...] = field(default=())
    """Near height, least far height [m] and the criterion that governs there."""


def _up(value_m: float, step_m: float) -> float:
    steps = math.ceil(value_m / step_m - WHOLE_STEP)
    return round(steps * step_m, 9)


def plan_masts(
    bench: Bench,
    *,
    near: MastLimits | None = None,
    far: MastLimits | None = None,
    given_from_agl_m: float | None = None,
    given_to_agl_m: float | None = None,
) -> MastPlan:
    """Every answer about antenna heights for one prepared path.

    Parameters
    ----------
    bench : Bench
    near, far : MastLimits or None
        What can be built at the two ends; None: anything up to 1000 m.
    given_from_agl_m, given_to_agl_m : float or None [m]
        A height at one end for which the least one at the other is wanted.
    """
    near, far = near or MastLimits(), far or MastLimits()
    to_given = from_given = None
    if given_to_agl_m is not None:
        agl = near.rounded(bench.from_agl(given_to_agl_m).agl_m)
        to_given = _pair(bench, agl, given_to_agl_m, near, far)
    if given_from_agl_m is not None:
        agl = far.rounded(bench.to_agl(given_from_agl_m).agl_m)
        from_given = _pair(bench, given_from_agl_m, agl, near, far)
    equal = _equal(bench, near, far)
    return MastPlan(
        criteria=tuple(d.criterion for d in bench.demands),
        equal=equal,
        for_given_to=_within(to_given, near, far),
        for_given_from=_within(from_given, near, far),
        cheapest=_cheapest(bench, near, far),
        curve=_curve(bench, near, far, equal),
    )


def _within(
    pair: MastPair | None, near: MastLimits, far: MastLimits
) -> MastPair | None:
    """The pair, or None when a height found is above what can be built."""
    if (
        pair is None
        or max(pair.from_agl_m - near.most_m, pair.to_agl_m - far.most_m) > STEP_M
    ):
        return None
    return pair


def _pair(
    bench: Bench, from_agl: float, to_agl: float, near: MastLimits, far: MastLimits
) -> MastPair:
    """A pair of heights with its proof: what is left along the whole path."""
    left = bench.left(from_agl, to_agl)
    return MastPair(
        from_agl_m=from_agl,
        to_agl_m=to_agl,
        cost=from_agl * near.cost_per_m + to_agl * far.cost_per_m,
        governing=bench.demands[int(np.argmin(left))].criterion,
        margins_m=tuple(left),
    )


def _equal(bench: Bench, near: MastLimits, far: MastLimits) -> MastPair | None:
    """Equal heights; sections of both ends are kept when they are the same."""
    low, high = 0.0, min(near.most_m, far.most_m)
    if bench.to_agl(high).agl_m > high:
        return None
    for _ in range(HALVINGS):
        mid = (low + high) / 2.0
        if bench.to_agl(mid).agl_m > mid:
            low = mid
        else:
            high = mid
    section = max(near.section_m, far.section_m)
    agl = _up(max(high, near.least_m, far.least_m), section)
    if agl > min(near.most_m, far.most_m) + STEP_M / 2.0:
        return None
    return _pair(bench, agl, agl, near, far)


def _heights_to_try(bench: Bench, near: MastLimits, far: MastLimits) -> np.ndarray:
    """Buildable heights of the near end worth trying, rising [m]."""
    enough = near.rounded(bench.from_agl(far.rounded(far.least_m)).agl_m)
    first, last = near.rounded(near.least_m), min(enough, near.most_m)
    count = math.floor((last - first) / near.section_m + WHOLE_STEP) + 1
    if count > MOST_TRIED:
        msg = f"{count} mast heights to try; use longer sections or a lower limit."
        raise InputError(msg)
    heights: np.ndarray = np.round(first + near.section_m * np.arange(max(count, 1)), 9)
    return heights


def _cheapest(bench: Bench, near: MastLimits, far: MastLimits) -> MastPair | None:
    """The cheapest buildable pair: for each near height the least far one."""
    tried = _heights_to_try(bench, near, far)
    least = np.maximum(bench.to_agl_many(tried), far.least_m)
    steps = np.ceil(least / far.section_m - WHOLE_STEP)
    others = np.round(steps * far.section_m, 9)
    cost = tried * near.cost_per_m + others * far.cost_per_m
    cost[others > far.most_m] = np.inf
    if not np.any(np.isfinite(cost)):
        return None
    # of equally cheap pairs the one with the lower taller mast
    cheap = np.flatnonzero(cost <= cost.min() + WHOLE_STEP)
    best = int(cheap[np.argmin(np.maximum(tried[cheap], others[cheap]))])
    return _pair(bench, float(tried[best]), float(others[best]), near, far)


def _curve(
    bench: Bench, near: MastLimits, far: MastLimits, equal: MastPair | None
) -> tuple[tuple[float, float, Criterion], ...]:
    """The trade-off between the two heights, both rounded up to a centimetre.

    It runs from a far mast of four times the equal height to a near one of as much,
    in equal ratios of the near height, within the limits.
    """
    reach = CURVE_REACH * max(1.0, HIGHEST_M if equal is None else equal.from_agl_m)
    low = max(near.least_m, bench.from_agl(min(far.most_m, reach)).agl_m)
    high = max(low, min(near.most_m, reach))
    points = []
    for agl in np.geomspace(low + 1.0, high + 1.0, CURVE_POINTS) - 1.0:
        height = _up(float(agl), STEP_M)
        need: Need = bench.to_agl(height)
        criterion = bench.demands[need.governing].criterion
        points.append((height, _up(max(need.agl_m, far.least_m), STEP_M), criterion))
    return tuple(points)
