"""Antenna heights: least at one end, equal, the whole trade-off and the cheapest."""

import math
from collections.abc import Callable
from dataclasses import dataclass, field
from typing import Final

import numpy as np

from profiler.errors import InputError
from profiler.model import FloatArray
from profiler.radio.bench import Bench, Trial
from profiler.radio.cheapest import cheapest_heights, whole_steps
from profiler.radio.criteria import Criterion
from profiler.radio.limits import HIGHEST_M, STEP_M, MastLimits, round_up

#: Points of the trade-off curve [1]; our choice.
CURVE_POINTS: Final = 41
#: How far the curve goes beyond equal heights [1]; our choice.
CURVE_REACH: Final = 4.0
#: Cuts of an interval of heights, and how often it is cut [1]: a kilometre to a
#: tenth of a micrometre.
CUTS: Final = 101
TIMES: Final = 5
#: Metres at the far end for a metre at the near one from which on a point of the curve
#: is tried along the whole path [1]; our choice: the cut misses 0.02 mm at most.
STEEP: Final = 20.0
#: Trials after which heights are refused as unproven [1]; one or two are usual, a
#: flat trade-off with centimetre steps has needed over forty.
MOST_TRIALS: Final = 1000

#: Two heights, or None when none within the limits do.
Heights = tuple[float, float] | None


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
    near: MastLimits
    """What could be built at the near end."""
    far: MastLimits
    given_from_agl_m: float | None
    """The near height for which the least far one was wanted [m]."""
    given_to_agl_m: float | None
    equal: MastPair | None
    """Equal heights; None if no height up to the limits does."""
    for_given_to: MastPair | None
    """Least height at the near end for the given far one; None if none was given, or
    none up to the limit does."""
    for_given_from: MastPair | None
    from_beyond_agl_m: float | None
    """Near height that the given far one needs, where that is above the limit [m]; None
    if none up to 1000 m does."""
    to_beyond_agl_m: float | None
    cheapest: MastPair | None
    """Least total cost within limits and sections; None if no pair does."""
    curve: tuple[tuple[float, float, Criterion], ...] = field(default=())
    """Near height, least far height [m] and the criterion that governs there."""


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

    Raises
    ------
    InputError
        If a given height is below 0 or above its limit, or no heights can be proven.
    """
    near, far = near or MastLimits(), far or MastLimits()
    _check_given(given_from_agl_m, near)
    _check_given(given_to_agl_m, far)
    to_given, from_beyond = _for_given(bench, near, far, given_to_agl_m, far_given=True)
    from_given, to_beyond = _for_given(
        bench, near, far, given_from_agl_m, far_given=False
    )
    bench, equal = _settled(bench, lambda b: _equal(b, near, far), near, far)
    bench, cheapest = _settled(
        bench, lambda b: cheapest_heights(b, near, far), near, far
    )
    return MastPlan(
        criteria=tuple(d.criterion for d in bench.demands),
        near=near,
        far=far,
        given_from_agl_m=given_from_agl_m,
        given_to_agl_m=given_to_agl_m,
        equal=equal,
        for_given_to=to_given,
        for_given_from=from_given,
        from_beyond_agl_m=from_beyond,
        to_beyond_agl_m=to_beyond,
        cheapest=cheapest,
        curve=_curve(bench, near, far, equal),
    )


def _check_given(agl_m: float | None, limits: MastLimits) -> None:
    if agl_m is None:
        return
    if not (math.isfinite(agl_m) and agl_m >= 0.0):
        msg = f"A given height must be 0 m or more, not {agl_m:g} m."
        raise InputError(msg)
    if not limits.allows(agl_m):
        msg = (
            f"The given height of {agl_m:g} m is above the highest allowed there, "
            f"{limits.most_m:g} m."
        )
        raise InputError(msg)


def _settled(
    bench: Bench,
    choose: Callable[[Bench], Heights],
    near: MastLimits,
    far: MastLimits,
) -> tuple[Bench, MastPair | None]:
    """Chosen heights, tried along the whole path until nothing is short.

    The bench asks for too little at worst: heights that it allows and that prove short
    add the place where they are, and the next choice is made. The first that is not
    short is the least.

    Raises
    ------
    InputError
        If no choice is proven in `MOST_TRIALS`; never told as "no heights do".
    """
    for _ in range(MOST_TRIALS):
        chosen = choose(bench)
        if chosen is None:
            return bench, None
        trial = bench.tried(*chosen)
        mended = bench.with_places(trial)
        if mended is None:
            return bench, _pair(bench, *chosen, trial, near, far)
        bench = mended
    msg = (
        f"No heights could be proven in {MOST_TRIALS} trials. Use longer sections or "
        "closer limits."
    )
    raise InputError(msg)


def _for_given(
    bench: Bench,
    near: MastLimits,
    far: MastLimits,
    given_m: float | None,
    *,
    far_given: bool,
) -> tuple[MastPair | None, float | None]:
    """Least pair for a height given at one end, or the height beyond the limit."""
    if given_m is None:
        return None, None
    limits = near if far_given else far

    def choose(trial: Bench) -> Heights:
        need = trial.from_agl(given_m) if far_given else trial.to_agl(given_m)
        agl = limits.rounded(need.agl_m)
        if agl > max(HIGHEST_M, limits.most_m):
            return None
        return (agl, given_m) if far_given else (given_m, agl)

    _, pair = _settled(bench, choose, near, far)
    if pair is None:
        return None, None
    agl = pair.from_agl_m if far_given else pair.to_agl_m
    return (pair, None) if limits.allows(agl) else (None, agl)


def _pair(
    bench: Bench,
    from_agl: float,
    to_agl: float,
    trial: Trial,
    near: MastLimits,
    far: MastLimits,
) -> MastPair:
    """A pair of heights with its proof: what is left along the whole path."""
    return MastPair(
        from_agl_m=from_agl,
        to_agl_m=to_agl,
        cost=from_agl * near.cost_per_m + to_agl * far.cost_per_m,
        governing=bench.demands[int(np.argmin(trial.left_m))].criterion,
        margins_m=trial.left_m,
    )


def _equal(bench: Bench, near: MastLimits, far: MastLimits) -> Heights:
    """Equal heights that both ends can build."""
    low, high = 0.0, min(near.most_m, far.most_m)
    if bench.to_agl(high).agl_m > high:
        return None
    for _ in range(TIMES):
        tried = np.linspace(low, high, CUTS)
        # the first that suffices; the last one always does
        first = int(np.argmax(_suffices(bench, tried)))
        low, high = float(tried[max(first - 1, 0)]), float(tried[first])
    agl = whole_steps(max(high, near.least_m, far.least_m), near, far)
    return (agl, agl) if near.allows(agl) and far.allows(agl) else None


def _suffices(bench: Bench, agl_m: FloatArray) -> np.ndarray:
    enough: np.ndarray = bench.to_agl_many(agl_m) <= agl_m
    enough[-1] = True
    return enough


def _curve(
    bench: Bench, near: MastLimits, far: MastLimits, equal: MastPair | None
) -> tuple[tuple[float, float, Criterion], ...]:
    """The trade-off between the two heights, both rounded up to a centimetre.

    It runs from a far mast of four times the equal height to a near one of as much,
    in equal ratios of the near height, within the limits.
    """
    reach = CURVE_REACH * max(1.0, HIGHEST_M if equal is None else equal.from_agl_m)
    low = max(near.least_m, bench.from_agl(min(far.most_m, reach)).agl_m)
    high = min(near.most_m, max(reach, near.least_m))
    if not low <= high:
        return ()
    rising = np.geomspace(low + 1.0, high + 1.0, CURVE_POINTS) - 1.0
    heights = np.unique([round_up(float(agl), STEP_M) for agl in rising])
    bench = _exact_where_steep(bench, heights, near, far)
    needs, governing = bench.to_agl_governed(heights)
    points = []
    for height, need, index in zip(heights, needs, governing, strict=True):
        other = round_up(max(float(need), far.least_m), STEP_M)
        if near.allows(height) and far.allows(other):
            points.append((float(height), other, bench.demands[index].criterion))
    return tuple(points)


def _exact_where_steep(
    bench: Bench, heights: FloatArray, near: MastLimits, far: MastLimits
) -> Bench:
    """The bench mended at near heights where the far one falls steeply.

    There ground close to the near mast governs, and a long lever hangs on the places
    to which it was cut.
    """
    needs = bench.to_agl_many(np.concatenate([heights, heights + STEP_M]))
    needs = np.minimum(needs, far.most_m)
    fall = (needs[: heights.size] - needs[heights.size :]) / STEP_M
    for height in heights[fall > STEEP]:

        def least(trial: Bench, near_m: float = float(height)) -> Heights:
            agl = round_up(max(trial.to_agl(near_m).agl_m, far.least_m), STEP_M)
            return (near_m, agl) if far.allows(agl) else None

        bench, _ = _settled(bench, least, near, far)
    return bench
