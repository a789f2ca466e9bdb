"""The few places that can ever govern: the upper hull of a path in true shape.

In Cartesian coordinates of the circle the sight line is straight, so only the upper
convex hull of what must be cleared decides any pair of heights at the ends: of ten
thousand samples a few dozen over hills, a few hundred over smooth ground.
"""

from typing import NamedTuple

import numpy as np

from profiler.kernels.circle import arc_ratio
from profiler.model import FloatArray

#: Height by which a smooth hull may be simplified [m], times the share of the path to
#: the nearer end: what a ray over it misses at the other end is no more than this, a
#: tenth of the step to which heights are rounded.
SAME_M = 1e-3


class Reach(NamedTuple):
    """What a line must clear: distances and heights of a few places."""

    dist_m: FloatArray
    height_m: FloatArray


def true_shape(
    dist_m: FloatArray, height_m: FloatArray, kappa_per_m: float
) -> tuple[FloatArray, FloatArray]:
    """Cartesian coordinates in the plane of the path [m].

    Parameters
    ----------
    dist_m, height_m : (n,) float64 [m]
        Distance along the curved surface and height above it.
    kappa_per_m : float [1/m]
        Effective curvature.

    Returns
    -------
    x, y : (n,) float64 [m]
        Along the tangent at distance 0 and up from it; lines are straight in them.
    """
    stretch = 1.0 + kappa_per_m * height_m
    half = arc_ratio(dist_m / 2.0, kappa_per_m)
    x = stretch * dist_m * arc_ratio(dist_m, kappa_per_m)
    y = height_m - stretch * (kappa_per_m * dist_m * dist_m / 2.0) * half * half
    return x, y


def upper_hull(
    dist_m: FloatArray,
    height_m: FloatArray,
    kappa_per_m: float,
    *,
    same_m: float = SAME_M,
) -> Reach:
    """The places on the upper convex hull, in order of distance.

    Places that stand less than ``same_m`` above a chord of the hull, and less than a
    like share of it towards the ends, are left out. Every place of the hull is one of
    those given: what clears too little of it is short.

    Parameters
    ----------
    dist_m, height_m : (n,) float64 [m]
        Places to be cleared, in order of distance, n >= 1.
    kappa_per_m : float [1/m]
        Effective curvature.
    same_m : float [m]
        Height by which the hull may be simplified; 0 keeps every corner.
    """
    x, y = true_shape(dist_m, height_m, kappa_per_m)
    span = x[-1] - x[0]
    same = same_m * np.minimum(x - x[0], x[-1] - x) / span if span > 0.0 else x
    keep = {0, int(x.size) - 1}
    spans = [(0, int(x.size) - 1)]
    while spans:
        a, b = spans.pop()
        if b - a < 2:
            continue
        inner = slice(a + 1, b)
        slope = (y[b] - y[a]) / (x[b] - x[a]) if x[b] > x[a] else 0.0
        above = y[inner] - y[a] - slope * (x[inner] - x[a])
        best = int(np.argmax(above))
        top = a + 1 + best
        if above[best] <= same[top]:
            continue
        keep.add(top)
        spans += [(a, top), (top, b)]
    index = np.array(sorted(keep))
    return Reach(dist_m[index], height_m[index])
