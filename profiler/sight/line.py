"""The sight line over the ground: margins, the verdict's lowest, blocked stretches."""

from typing import NamedTuple

import numpy as np

from profiler.constants import GRAZING_M
from profiler.kernels.circle import sight_height
from profiler.model.arrays import BoolArray, FloatArray, IntArray
from profiler.sight.ground import TOO_NEAR_M, Ground, in_order, inner_roots, quadratic

#: Differences of margins below this are rounding [m]; heights carry 1e-12 m.
ROUNDING_M = 1e-9
#: Stretches that touch within this are one [m]; rounding of neighbouring roots.
TOUCH_M = 1e-6


class Line(NamedTuple):
    """A straight line between two ends, over the curved earth."""

    length_m: float
    """From the eye to the aim point."""
    eye_m: float
    aim_m: float
    kappa_per_m: float

    def height(self, dist_m: FloatArray) -> FloatArray:
        """Height of the line at distances from the eye [m]."""
        return sight_height(
            dist_m, self.length_m, self.eye_m, self.aim_m, self.kappa_per_m
        )


class Spots(NamedTuple):
    """Places on the ground in order of distance."""

    dist_m: FloatArray
    ground_m: FloatArray
    margin_m: FloatArray


def margins(line: Line, ground: Ground) -> FloatArray:
    """(k, 3) line minus ground at the samples of known pieces [m]."""
    margin: FloatArray = line.height(ground.dist_m) - ground.height_m
    return margin


def spots(line: Line, ground: Ground) -> Spots:
    """Samples of known pieces, where the margin is lowest and where it touches first.

    Parameters
    ----------
    line : Line
    ground : Ground
        Known pieces only.

    Notes
    -----
    Besides the three samples each piece gives the vertex of its margin and the
    stationary points of margin/(d1·d2), so that no finer sampling finds a lower one.
    """
    fit = quadratic(margins(line, ground))
    with np.errstate(divide="ignore", invalid="ignore"):
        vertex = np.where(fit.c > 0.0, -fit.b / (2.0 * fit.c), np.nan)
    vertex[~((vertex > 0.0) & (vertex < 1.0))] = np.nan
    near, far = ground.dist_m[:, 0], line.length_m - ground.dist_m[:, 0]
    step = ground.dist_m[:, 2] - ground.dist_m[:, 0]
    alpha, beta, gamma = near * far, step * (far - near), -step * step
    first = inner_roots(
        fit.b * alpha - fit.a * beta,
        2.0 * (fit.c * alpha - fit.a * gamma),
        fit.c * beta - fit.b * gamma,
    )
    dist, height = in_order(ground, (vertex, first[:, 0], first[:, 1]))
    between = np.minimum(dist, line.length_m - dist) > TOO_NEAR_M
    dist, height = dist[between], height[between]
    return Spots(dist, height, line.height(dist) - height)


def first_to_touch(line: Line, at: Spots) -> FloatArray:
    """margin/(d1·d2) of spots [1/m]: half the bending that brings them to touch."""
    ratio: FloatArray = at.margin_m / (at.dist_m * (line.length_m - at.dist_m))
    return ratio


def is_end_run(at: Spots, *, eye_on_ground: bool, aim_on_ground: bool) -> BoolArray:
    """(n,) spots next to an end on bare ground from which the margin only rises.

    An eye or target lying on the ground touches it there without grazing anything:
    the ground beside it belongs to the station until the margin first falls.

    Parameters
    ----------
    at : Spots
    eye_on_ground, aim_on_ground : bool
        Which ends lie on bare ground.
    """
    run = np.zeros(at.margin_m.size, dtype=np.bool_)
    falls = np.flatnonzero(np.diff(at.margin_m) < -ROUNDING_M)
    rises = np.flatnonzero(np.diff(at.margin_m) > ROUNDING_M)
    if eye_on_ground:
        run[: falls[0] if falls.size else run.size] = True
    if aim_on_ground:
        run[rises[-1] + 2 if rises.size else 0 :] = True
    return run


class Blocked(NamedTuple):
    """A run of ground above the line."""

    start_m: float
    end_m: float
    worst: int
    """Index of its lowest margin among the spots."""


def blocked_runs(line: Line, ground: Ground, at: Spots) -> list[Blocked]:
    """Every run of known ground above the line by more than the grazing band.

    Parameters
    ----------
    line : Line
    ground : Ground
        Known pieces only.
    at : Spots
        The spots of the same line and ground.
    """
    runs = _negative_runs(ground, margins(line, ground))
    found = []
    for start, end in runs:
        low = np.searchsorted(at.dist_m, start - TOUCH_M)
        high = np.searchsorted(at.dist_m, end + TOUCH_M, side="right")
        if low == high:
            continue
        worst = int(low + np.argmin(at.margin_m[low:high]))
        if at.margin_m[worst] < -GRAZING_M:
            found.append(Blocked(start, end, worst))
    return found


def _negative_runs(ground: Ground, margin: FloatArray) -> list[tuple[float, float]]:
    """Where the margin is below zero, joined over neighbouring pieces [m]."""
    fit = quadratic(margin)
    roots = np.sort(inner_roots(fit.a, fit.b, fit.c), axis=1)
    edges = np.column_stack(
        [np.zeros(margin.shape[0]), roots, np.ones(margin.shape[0])]
    )
    # a missing root repeats the edge before it, which makes an empty part
    for k in (1, 2):
        edges[:, k] = np.where(np.isnan(edges[:, k]), edges[:, k - 1], edges[:, k])
    step = ground.dist_m[:, 2] - ground.dist_m[:, 0]
    starts, ends = [], []
    for k in range(3):
        low, high = edges[:, k], edges[:, k + 1]
        below = (fit.at((low + high) / 2.0) < 0.0) & (high > low)
        starts.append((ground.dist_m[:, 0] + low * step)[below])
        ends.append((ground.dist_m[:, 0] + high * step)[below])
    start, end = np.concatenate(starts), np.concatenate(ends)
    order = np.argsort(start, kind="stable")
    start, end = start[order], end[order]
    if start.size == 0:
        return []
    gap = np.concatenate([[True], start[1:] > end[:-1] + TOUCH_M])
    heads = np.flatnonzero(gap)
    tails = np.concatenate([heads[1:] - 1, [start.size - 1]])
    return [(float(start[a]), float(end[b])) for a, b in zip(heads, tails, strict=True)]


def decisive(
    line: Line, at: Spots, *, blocked: bool, low_end_first: bool
) -> int | None:
    """Index of the decisive spot, None without spots.

    Parameters
    ----------
    line : Line
    at : Spots
    blocked : bool
        Blocked: the lowest margin. Clear: the lowest margin/(d1·d2).
    low_end_first : bool
        Whether the eye's end has the smaller latitude, then longitude; it settles
        ties at equal distance from mid-path.

    Notes
    -----
    Spots within 1 mm of the winner tie (for clear: within 1 mm of touching when it
    touches; for blocked: those that block). Neighbouring ones are one place, which
    stands where it is tightest; of several places the one nearest mid-path is taken,
    the same from both ends.
    """
    if at.margin_m.size == 0:
        return None
    if blocked:
        excess = at.margin_m - at.margin_m.min()
        ties = (excess <= GRAZING_M) & (at.margin_m < -GRAZING_M)
    else:
        ratio = first_to_touch(line, at)
        excess = (ratio - ratio.min()) * at.dist_m * (line.length_m - at.dist_m)
        ties = excess <= GRAZING_M
    tied = np.flatnonzero(ties)
    off_mid = at.dist_m - line.length_m / 2.0

    def nearest_mid(index: IntArray) -> int:
        off = np.abs(off_mid[index])
        close = index[off <= off.min() + GRAZING_M]
        return int(close[0] if low_end_first else close[-1])

    runs = np.split(tied, np.flatnonzero(np.diff(tied) > 1) + 1)
    places = [
        nearest_mid(run[excess[run] <= excess[run].min() + ROUNDING_M]) for run in runs
    ]
    return nearest_mid(np.array(places))
