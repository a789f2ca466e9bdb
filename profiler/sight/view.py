"""What the eye sees of the ground: elevation angles, horizon, seen stretches, crest."""

from typing import NamedTuple

import numpy as np

from profiler.constants import CREST_DEPTH_M
from profiler.kernels.circle import elevation_tangent, ray_height
from profiler.model.arrays import BoolArray, FloatArray
from profiler.sight.ground import TOO_NEAR_M, Ground, in_order, inner_roots, quadratic

#: Ground whose angle is this far below the highest so far still counts as seen [1];
#: rounding of the angle, ten micrometres at ten kilometres.
SAME_TANGENT = 1e-9


class Rays(NamedTuple):
    """Ground in order of distance with its elevation tangent from the eye."""

    dist_m: FloatArray
    ground_m: FloatArray
    tangent: FloatArray


def rays(ground: Ground, eye_m: float, kappa_per_m: float) -> Rays:
    """Samples of known pieces and the places where the angle is largest in each.

    Parameters
    ----------
    ground : Ground
        Known pieces only; the eye stands at distance 0.
    eye_m : float [m]
        Height of the eye.
    kappa_per_m : float [1/m]
        Effective curvature.

    Notes
    -----
    The stationary points are those of (z − H0)/d − kappa·d/2. The exact tangent is
    then taken there; being stationary, it is off by less than a rounding error.
    """
    fit = quadratic(ground.height_m)
    near = ground.dist_m[:, 0]
    step = ground.dist_m[:, 2] - near
    half = kappa_per_m / 2.0
    with np.errstate(divide="ignore", invalid="ignore"):
        best = inner_roots(
            fit.b * near / step - (fit.a - eye_m) - half * near * near,
            2.0 * (fit.c * near / step - half * near * step),
            fit.c - half * step * step,
        )
    dist, height = in_order(ground, (best[:, 0], best[:, 1]))
    beyond = dist > TOO_NEAR_M
    dist, height = dist[beyond], height[beyond]
    return Rays(dist, height, elevation_tangent(dist, height, eye_m, kappa_per_m))


def before(seen: Rays, dist_m: float) -> Rays:
    """The rays to ground nearer than a distance."""
    nearer = seen.dist_m < dist_m
    return Rays(seen.dist_m[nearer], seen.ground_m[nearer], seen.tangent[nearer])


def horizon_index(seen: Rays) -> int | None:
    """Index of the largest tangent; of equal ones the nearest; None without rays."""
    return int(np.argmax(seen.tangent)) if seen.tangent.size else None


def is_seen(seen: Rays) -> BoolArray:
    """(n,) whether nothing nearer stands higher in the view."""
    highest = np.maximum.accumulate(seen.tangent)
    visible: BoolArray = seen.tangent >= highest - SAME_TANGENT
    return visible


def front_crest_index(seen: Rays, eye_m: float, kappa_per_m: float) -> int | None:
    """Index of the last ground seen before the last deep unseen stretch.

    Deep means that the grazing ray over the last seen ground passes more than
    `CREST_DEPTH_M` above ground somewhere in the stretch. None when there is none.

    Parameters
    ----------
    seen : Rays
        In order of distance.
    eye_m : float [m]
        Height of the eye.
    kappa_per_m : float [1/m]
        Effective curvature.
    """
    visible = is_seen(seen)
    if not np.any(~visible):
        return None
    crest = np.maximum.accumulate(np.where(visible, np.arange(visible.size), 0))
    ray_m = ray_height(seen.dist_m, seen.tangent[crest], eye_m, kappa_per_m)
    deep = np.flatnonzero(~visible & (ray_m - seen.ground_m > CREST_DEPTH_M))
    return int(crest[deep[-1]]) if deep.size else None
