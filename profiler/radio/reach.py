"""What one criterion asks a line to clear, exact between the samples too."""

import math
from typing import Final

import numpy as np

from profiler.model.arrays import BoolArray, FloatArray, IntArray
from profiler.radio.criteria import Criterion
from profiler.radio.hull import Reach, true_shape, upper_hull
from profiler.radio.tight import parabola_miss
from profiler.sight.ground import Ground, quadratic

#: A quadratic rises above its three samples by at most this part of its second
#: coefficient: between u = 0 and ½ the interpolation error is c·u(½ − u), c/16 at most.
BULGE_SHARE: Final = 16.0
#: Room left when pieces are chosen [m]; the hull's own simplification is a tenth.
ROOM_M: Final = 1e-3
#: Places to which a piece is cut, and to which the two parts beside a corner are [1];
#: what is missed is below 0.02 mm for a second coefficient of 10 m.
FINE: Final = 33
FINER: Final = 17


def reach_of(
    ground: Ground,
    criterion: Criterion,
    *,
    length_m: float,
    wavelength_m: float,
    kappa_per_m: float,
) -> Reach:
    """Hull of what one criterion asks for.

    Pieces that can rise above the hull of the samples are cut fine, and those at the
    corners of the finer hull once more.

    Parameters
    ----------
    ground : Ground
        Known counted pieces, k >= 1.
    criterion : Criterion
    length_m : float [m]
    wavelength_m : float [m]
    kappa_per_m : float [1/m]
        Effective curvature.
    """
    scale = criterion.f1_fraction * math.sqrt(wavelength_m / length_m)

    def asked(dist_m: FloatArray, height_m: FloatArray) -> FloatArray:
        rest = np.maximum(length_m - dist_m, 0.0)
        need: FloatArray = height_m + scale * np.sqrt(dist_m * rest)
        return need + criterion.extra_m

    samples = Ground(ground.dist_m, asked(ground.dist_m, ground.height_m))
    zone = samples.height_m - ground.height_m
    near = _may_govern(samples, parabola_miss(zone), length_m, kappa_per_m)
    part = Ground(ground.dist_m[near], ground.height_m[near])
    at_end = (part.dist_m[:, 0] <= 0.0) | (part.dist_m[:, 2] >= length_m)

    def fine_hull(piece: IntArray, step: FloatArray) -> tuple[Reach, IntArray]:
        """Hull of places on pieces, and the indices of its corners."""
        # beside an end the zone is a square root: places crowd there
        u = np.where(at_end[piece], step * step * (1.0 + 2.0 * (1.0 - step)), step)
        dist, height = Ground(part.dist_m[piece], part.height_m[piece]).place(u)
        order = np.argsort(dist, kind="stable")
        order = order[(dist[order] > 0.0) & (dist[order] < length_m)]
        need = asked(dist[order], height[order])
        hull = upper_hull(dist[order], need, kappa_per_m)
        return hull, order[np.searchsorted(dist[order], hull.dist_m)]

    count = part.dist_m.shape[0]
    piece = np.repeat(np.arange(count), FINE)
    step = np.tile(np.linspace(0.0, 1.0, FINE), count)
    _, corner = fine_hull(piece, step)
    around = np.tile(np.linspace(-1.0, 1.0, FINER) / (FINE - 1.0), corner.size)
    finer = np.clip(np.repeat(step[corner], FINER) + around, 0.0, 1.0)
    hull, _ = fine_hull(np.repeat(piece[corner], FINER), finer)
    return hull


def _may_govern(
    samples: Ground, miss_m: FloatArray, length_m: float, kappa_per_m: float
) -> BoolArray:
    """(k,) pieces of what is asked that can rise above the hull of the samples."""
    dist, need = samples.dist_m.ravel(), samples.height_m.ravel()
    between = (dist > 0.0) & (dist < length_m)
    hull = upper_hull(dist[between], need[between], kappa_per_m)
    hull_x, hull_y = true_shape(*hull, kappa_per_m)
    x, y = true_shape(*samples, kappa_per_m)
    gap = np.min(np.interp(x, hull_x, hull_y) - y, axis=1)
    bulge = np.abs(quadratic(samples.height_m).c) / BULGE_SHARE
    near: BoolArray = gap <= bulge + miss_m + ROOM_M
    return near
