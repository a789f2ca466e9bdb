"""Where a radio path is tight: clearance left after a criterion, and obstacles.

The first Fresnel zone's radius grows like a square root from the ends, so what is left
of the clearance is no quadratic inside a piece. Each piece gives its three samples and
the vertex of the parabola through them; pieces that may hold the lowest place are then
searched by golden section, the clearance as a quadratic and the zone as it is.
"""

import math
from typing import Final, NamedTuple

import numpy as np

from profiler.model.arrays import BoolArray, FloatArray
from profiler.radio.criteria import Criterion
from profiler.radio.fresnel import fresnel_radius_m
from profiler.sight.ground import Ground, Quadratic, quadratic
from profiler.sight.line import Line

#: Largest error of the parabola through three samples of the zone's radius, as a share
#: of their spread [1]: 0.14 for a square root from 0, 0.25 for a whole path as a piece.
PARABOLA_MISS: Final = 0.3
#: Room for rounding in that comparison [m].
ROUNDING_M: Final = 1e-6
#: Golden sections of a piece [1]: 0.618^40 of a 100 m cell is below a micrometre.
SECTIONS: Final = 40
GOLDEN: Final = (math.sqrt(5.0) - 1.0) / 2.0
#: Two obstacles are apart when the clearance between them rises by this share of F1
#: above the lesser one's [1]; our choice: half of what free space asks for.
APART_F1: Final = 0.3
#: Obstacles listed [1].
MOST_OBSTACLES: Final = 8


class Tight(NamedTuple):
    """Places on the path in order of distance."""

    dist_m: FloatArray
    ground_m: FloatArray
    clear_m: FloatArray
    """Line minus ground and cover."""
    f1_m: FloatArray
    """Radius of the first Fresnel zone."""
    left_m: FloatArray
    """Clearance minus what the criterion asks for; negative: so much short."""

    @property
    def share(self) -> FloatArray:
        """Clearance as a share of F1 [1]."""
        with np.errstate(divide="ignore", invalid="ignore"):
            share: FloatArray = self.clear_m / self.f1_m
        return share


def tight_places(
    line: Line, ground: Ground, criterion: Criterion, wavelength_m: float
) -> Tight:
    """Samples, vertices and the searched lowest places of one criterion.

    Parameters
    ----------
    line : Line
        With the criterion's curvature.
    ground : Ground
        Known pieces only.
    criterion : Criterion
    wavelength_m : float [m]
        Wavelength, > 0.
    """
    first = _evaluate(line, ground.dist_m, ground.height_m, criterion, wavelength_m)
    dist, height = [ground.dist_m.ravel()], [ground.height_m.ravel()]
    if ground.dist_m.size:
        fit = quadratic(first.left_m)
        u = _vertex(fit)
        search = _may_be_lowest(first, criterion, fit, u)
        part = Ground(ground.dist_m[search], first.clear_m[search])
        u[search] = _lowest_u(part, line.length_m, criterion, wavelength_m)
        there = np.isfinite(u)
        d, z = Ground(ground.dist_m[there], ground.height_m[there]).place(u[there])
        dist.append(d)
        height.append(z)
    all_dist, all_height = np.concatenate(dist), np.concatenate(height)
    order = np.argsort(all_dist, kind="stable")
    all_dist, all_height = all_dist[order], all_height[order]
    between = (all_dist > 0.0) & (all_dist < line.length_m)
    return _evaluate(
        line, all_dist[between], all_height[between], criterion, wavelength_m
    )


def tightest_place(
    line: Line, ground: Ground, criterion: Criterion, wavelength_m: float
) -> Tight:
    """The one place where least is left after a criterion, as arrays of one.

    The same as the lowest of `tight_places`, without the rest.
    """
    first = _evaluate(line, ground.dist_m, ground.height_m, criterion, wavelength_m)
    fit = quadratic(first.left_m)
    search = _may_be_lowest(first, criterion, fit, _vertex(fit))
    part = Ground(ground.dist_m[search], ground.height_m[search])
    clear = Ground(part.dist_m, first.clear_m[search])
    u = _lowest_u(clear, line.length_m, criterion, wavelength_m)
    inner, height = part.place(u)
    dist = np.concatenate([part.dist_m.ravel(), inner])
    at = _evaluate(
        line,
        dist,
        np.concatenate([part.height_m.ravel(), height]),
        criterion,
        wavelength_m,
    )
    between = (dist > 0.0) & (dist < line.length_m)
    low = int(np.argmin(np.where(between, at.left_m, np.inf)))
    return Tight(*(values[low : low + 1] for values in at))


def _vertex(fit: Quadratic) -> FloatArray:
    """Where inside its piece a quadratic is lowest, NaN where it is so at an end."""
    with np.errstate(divide="ignore", invalid="ignore"):
        u = np.where(fit.c > 0.0, -fit.b / (2.0 * fit.c), np.nan)
    u[~((u > 0.0) & (u < 1.0))] = np.nan
    return u


def _may_be_lowest(
    first: Tight, criterion: Criterion, fit: Quadratic, vertex: FloatArray
) -> BoolArray:
    """(k,) pieces that may hold the lowest place, by their (k, 3) samples."""
    low = np.fmin(np.minimum.reduce(first.left_m.T), fit.at(vertex))
    miss = criterion.f1_fraction * parabola_miss(first.f1_m)
    may: BoolArray = low - miss <= np.min(first.left_m) + ROUNDING_M
    return may


def _evaluate(
    line: Line,
    dist_m: FloatArray,
    ground_m: FloatArray,
    criterion: Criterion,
    wavelength_m: float,
) -> Tight:
    clear = line.height(dist_m) - ground_m
    f1 = fresnel_radius_m(dist_m, length_m=line.length_m, wavelength_m=wavelength_m)
    left = clear - criterion.f1_fraction * f1 - criterion.extra_m
    return Tight(dist_m, ground_m, clear, f1, left)


def parabola_miss(f1_m: FloatArray) -> FloatArray:
    """(k,) bound on what the parabola through (k, 3) radii misses of the zone [m]."""
    spread: FloatArray = np.maximum.reduce(f1_m.T) - np.minimum.reduce(f1_m.T)
    return PARABOLA_MISS * spread


def _lowest_u(
    clear: Ground, length_m: float, criterion: Criterion, wavelength_m: float
) -> FloatArray:
    """Where within pieces of clearance least of it is left, 0 to 1."""
    fit = quadratic(clear.height_m)
    start, step = clear.dist_m[:, 0], clear.dist_m[:, 2] - clear.dist_m[:, 0]
    scale = criterion.f1_fraction * math.sqrt(wavelength_m / length_m)

    def left(u: FloatArray) -> FloatArray:
        dist = start + u * step
        rest = np.maximum(length_m - dist, 0.0)
        value: FloatArray = fit.at(u) - scale * np.sqrt(dist * rest)
        return value

    a, b = np.zeros(start.shape), np.ones(start.shape)
    c, d = b - GOLDEN * (b - a), a + GOLDEN * (b - a)
    at_c, at_d = left(c), left(d)
    for _ in range(SECTIONS):
        lower = at_c < at_d
        a, b = np.where(lower, a, c), np.where(lower, d, b)
        new = np.where(lower, b - GOLDEN * (b - a), a + GOLDEN * (b - a))
        at_new = left(new)
        c, d = np.where(lower, new, d), np.where(lower, c, new)
        at_c, at_d = np.where(lower, at_new, at_d), np.where(lower, at_c, at_new)
    return (a + b) / 2.0


def obstacles(at: Tight) -> list[int]:
    """Indices of the distinct obstacles, the tightest share of F1 first.

    Two places are distinct obstacles when the share of F1 between them rises by
    `APART_F1` above the larger of the two.
    """
    share = at.share
    if share.size == 0:
        return []
    padded = np.concatenate([[np.inf], share, [np.inf]])
    dips = np.flatnonzero((share <= padded[:-2]) & (share <= padded[2:]))
    chosen: list[int] = []
    for dip in dips[np.argsort(share[dips], kind="stable")]:
        if len(chosen) == MOST_OBSTACLES:
            break
        if all(_is_apart(share, int(dip), other) for other in chosen):
            chosen.append(int(dip))
    return chosen


def _is_apart(share: FloatArray, one: int, other: int) -> bool:
    low, high = min(one, other), max(one, other)
    rise = float(np.max(share[low : high + 1])) - max(share[one], share[other])
    return bool(rise >= APART_F1)
