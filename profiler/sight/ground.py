"""Ground along a path as quadratic pieces, and clipping it to a range."""

from typing import NamedTuple

import numpy as np

from profiler.model.arrays import FloatArray
from profiler.model.terrain import PathProfile

#: Ground this near to an end is a piece of its own [m]; our choice: over it the
#: margin beside a station on the ground leaves its slope there by under 1e-6 m.
BESIDE_M = 0.01
#: Nearer to an end than this quotients with the distance to it are rounding [m]; less
#: than half of `BESIDE_M`.
TOO_NEAR_M = 0.004


class Quadratic(NamedTuple):
    """a + b·u + c·u² on each piece, u from 0 at its start to 1 at its end."""

    a: FloatArray
    b: FloatArray
    c: FloatArray

    def at(self, u: FloatArray) -> FloatArray:
        """Values at one u per piece."""
        value: FloatArray = self.a + u * (self.b + u * self.c)
        return value


def quadratic(values: FloatArray) -> Quadratic:
    """The quadratic through (k, 3) values at u = 0, ½, 1."""
    first, mid, last = values[:, 0], values[:, 1], values[:, 2]
    c = 2.0 * (first - 2.0 * mid + last)
    return Quadratic(first, last - first - c, c)


class Ground(NamedTuple):
    """Pieces of path in order; unknown pieces have NaN midway."""

    dist_m: FloatArray
    """(k, 3) distance at start, middle and end."""
    height_m: FloatArray
    """(k, 3) ground and cover there."""

    @property
    def known(self) -> "Ground":
        """The pieces with ground."""
        mask = np.isfinite(self.height_m[:, 1])
        return Ground(self.dist_m[mask], self.height_m[mask])

    @property
    def void(self) -> "Ground":
        """The pieces without."""
        mask = np.isnan(self.height_m[:, 1])
        return Ground(self.dist_m[mask], self.height_m[mask])

    def place(self, u: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Distance and height at one u per piece, NaN where u is."""
        length = self.dist_m[:, 2] - self.dist_m[:, 0]
        return self.dist_m[:, 0] + u * length, quadratic(self.height_m).at(u)


def in_order(
    ground: Ground, inner: tuple[FloatArray, ...]
) -> tuple[FloatArray, FloatArray]:
    """Samples of pieces and places inside them, in order of distance.

    Parameters
    ----------
    ground : Ground
    inner : tuple of (k,) float64 [1]
        One u per piece, NaN for none.

    Returns
    -------
    dist_m, height_m : (n,) float64 [m]
    """
    dist, height = [ground.dist_m.ravel()], [ground.height_m.ravel()]
    for u in inner:
        there = np.isfinite(u)
        d, z = Ground(ground.dist_m[there], ground.height_m[there]).place(u[there])
        dist.append(d)
        height.append(z)
    all_dist, all_height = np.concatenate(dist), np.concatenate(height)
    order = np.argsort(all_dist, kind="stable")
    return all_dist[order], all_height[order]


def ground_of(profile: PathProfile) -> Ground:
    """Pieces of a path profile, ground and cover together."""
    index = profile.piece_samples
    return Ground(profile.dist_m[index], profile.top_m[index])


def clip(ground: Ground, low_m: float, high_m: float) -> Ground:
    """The pieces between two distances, those at the limits cut.

    Parameters
    ----------
    ground : Ground
    low_m, high_m : float [m]
        Limits; an empty range gives no pieces.
    """
    inside = (ground.dist_m[:, 2] > low_m) & (ground.dist_m[:, 0] < high_m)
    if high_m <= low_m:
        inside[:] = False
    dist, height = ground.dist_m[inside], ground.height_m[inside]
    cut = (dist[:, 0] < low_m) | (dist[:, 2] > high_m)
    if not np.any(cut):
        return Ground(dist, height)
    part = Ground(dist[cut], height[cut])
    start = part.dist_m[:, 0]
    length = part.dist_m[:, 2] - start
    u0 = (np.maximum(start, low_m) - start) / length
    u1 = (np.minimum(part.dist_m[:, 2], high_m) - start) / length
    for k, u in enumerate((u0, (u0 + u1) / 2.0, u1)):
        new_dist, new_height = part.place(u)
        dist[cut, k], height[cut, k] = new_dist, new_height
    return Ground(dist, height)


def with_ends(ground: Ground, length_m: float) -> Ground:
    """The same ground with the first and last centimetre as pieces of their own.

    A station on the ground is hidden by the slope right beside it, and one below it
    (surveyed) by the ground's very edge: half a cell away either can look clear.
    """
    first = clip(ground, 0.0, BESIDE_M)
    between = clip(ground, BESIDE_M, length_m - BESIDE_M)
    last = clip(ground, length_m - BESIDE_M, length_m)
    return joined(joined(first, between), last)


def joined(first: Ground, second: Ground) -> Ground:
    """The pieces of one, then those of the other."""
    return Ground(
        np.concatenate([first.dist_m, second.dist_m]),
        np.concatenate([first.height_m, second.height_m]),
    )


def mirrored(ground: Ground, length_m: float) -> Ground:
    """The same pieces with distances counted from the other end."""
    return Ground(length_m - ground.dist_m[::-1, ::-1], ground.height_m[::-1, ::-1])


def inner_roots(a: FloatArray, b: FloatArray, c: FloatArray) -> FloatArray:
    """(k, 2) roots of a + b·u + c·u² inside 0 < u < 1, NaN for none.

    Written without the difference of nearly equal numbers, so that nearly linear
    pieces lose nothing.

    Parameters
    ----------
    a, b, c : (k,) float64
        Coefficients, all in the unit of the quadratic's value.
    """
    with np.errstate(divide="ignore", invalid="ignore"):
        root = np.sqrt(b * b - 4.0 * a * c)
        q = -0.5 * (b + np.where(b < 0.0, -root, root))
        roots = np.stack([q / c, a / q], axis=1)
        outside = ~((roots > 0.0) & (roots < 1.0))
    roots[outside] = np.nan
    return roots
