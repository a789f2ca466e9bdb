"""A path prepared for trying antenna heights against a set of criteria."""

import math
from dataclasses import dataclass
from typing import Final, NamedTuple

import numpy as np

from profiler.errors import InputError
from profiler.kernels.circle import elevation_tangent, ray_height
from profiler.model import FloatArray
from profiler.radio.criteria import Criterion
from profiler.radio.fresnel import fresnel_radius_m
from profiler.radio.hull import Reach, true_shape, upper_hull
from profiler.radio.tight import tight_places
from profiler.sight.ground import Ground, quadratic
from profiler.sight.line import Line

#: A quadratic rises above its three samples by at most this part of its second
#: coefficient: between u = 0 and ½ the interpolation error is c·u(½ − u), c/16 at most.
BULGE_SHARE: Final = 16.0
#: Room for the curve of the Fresnel zone inside a cell [m]; our choice, away from the
#: ends it is below a centimetre.
SLACK_M: Final = 0.05
#: Pieces at each end, where the zone is steep, that are always cut fine [1].
END_PIECES: Final = 8
#: Places to which a piece is cut [1]; what is missed is c/4096, below a millimetre.
FINE: Final = 33


class Demand(NamedTuple):
    """One criterion with its curvature and the places that can govern it."""

    criterion: Criterion
    kappa_per_m: float
    reach: Reach


class Need(NamedTuple):
    """A height above ground and the criterion that asks for it."""

    agl_m: float
    governing: int
    """Index of the criterion."""


@dataclass(frozen=True, slots=True, kw_only=True)
class Bench:
    """Ground, ends and demands of one path."""

    ground: Ground
    """Known counted pieces."""
    length_m: float
    from_ground_m: float
    to_ground_m: float
    wavelength_m: float
    demands: tuple[Demand, ...]

    def to_agl(self, from_agl_m: float) -> Need:
        """Least height at the far end for a height at the near one."""
        return self._least(self.from_ground_m + from_agl_m, self.to_ground_m, near=True)

    def from_agl(self, to_agl_m: float) -> Need:
        """Least height at the near end for a height at the far one."""
        return self._least(self.to_ground_m + to_agl_m, self.from_ground_m, near=False)

    def _least(self, eye_m: float, ground_m: float, *, near: bool) -> Need:
        heights = [
            _ray_over(self.length_m, eye_m, demand, near=near)
            for demand in self.demands
        ]
        governing = int(np.argmax(heights))
        return Need(max(heights[governing] - ground_m, 0.0), governing)

    def to_agl_many(self, from_agl_m: FloatArray) -> FloatArray:
        """(n,) least heights at the far end for (n,) heights at the near one [m]."""
        eye = self.from_ground_m + from_agl_m
        best = np.full(eye.shape, -np.inf)
        for demand in self.demands:
            tangent = _largest_tangents(demand, eye)
            over = _heights(self.length_m, tangent, eye, demand.kappa_per_m)
            best = np.maximum(best, over)
        heights: FloatArray = np.maximum(best - self.to_ground_m, 0.0)
        return heights

    def left(self, from_agl_m: float, to_agl_m: float) -> list[float]:
        """For each criterion the least that is left anywhere, at two heights [m]."""
        found = []
        for demand in self.demands:
            line = Line(
                self.length_m,
                self.from_ground_m + from_agl_m,
                self.to_ground_m + to_agl_m,
                demand.kappa_per_m,
            )
            at = tight_places(line, self.ground, demand.criterion, self.wavelength_m)
            found.append(float(at.left_m.min()))
        return found


def _ray_over(length_m: float, eye_m: float, demand: Demand, *, near: bool) -> float:
    """Height at the other end of the ray over everything one criterion asks for [m]."""
    dist = demand.reach.dist_m if near else length_m - demand.reach.dist_m
    kappa = demand.kappa_per_m
    if dist.size == 0:
        return -math.inf
    tangent = float(
        np.max(elevation_tangent(dist, demand.reach.height_m, eye_m, kappa))
    )
    return float(ray_height(length_m, tangent, eye_m, kappa))


def _largest_tangents(demand: Demand, eye_m: FloatArray) -> FloatArray:
    """Largest tangent to one criterion's hull from each of many eyes.

    Seen from outside, the tangent rises along a convex chain and then falls, so a
    search by halves finds its top for all eyes together.
    """
    reach, kappa = demand.reach, demand.kappa_per_m
    # the eye enters the formula linearly
    base = elevation_tangent(reach.dist_m, reach.height_m, 0.0, kappa)
    per_m = elevation_tangent(reach.dist_m, reach.height_m, 1.0, kappa) - base
    low = np.zeros(eye_m.shape, dtype=np.int64)
    high = np.full(eye_m.shape, base.size - 1)
    while np.any(low < high):
        mid = (low + high) // 2
        after = np.minimum(mid + 1, base.size - 1)
        rising = base[after] + per_m[after] * eye_m > base[mid] + per_m[mid] * eye_m
        low = np.where(rising & (low < high), after, low)
        high = np.where(rising, high, mid)
    tangent: FloatArray = base[low] + per_m[low] * eye_m
    return tangent


def _heights(
    length_m: float, tangent: FloatArray, eye_m: FloatArray, kappa: float
) -> FloatArray:
    """Heights at the far end of many rays from many eyes: linear in the eye too."""
    from_zero = ray_height(np.full(eye_m.shape, length_m), tangent, 0.0, kappa)
    heights: FloatArray = from_zero + eye_m * (1.0 + kappa * from_zero)
    return heights


def bench_for(
    ground: Ground,
    *,
    length_m: float,
    from_ground_m: float,
    to_ground_m: float,
    criteria: tuple[Criterion, ...],
    wavelength_m: float,
    radius_m: float,
) -> Bench:
    """Prepare a path for trying heights.

    Parameters
    ----------
    ground : Ground
        Known counted pieces.
    length_m : float [m]
    from_ground_m, to_ground_m : float [m]
        Ground at the ends.
    criteria : tuple of Criterion
    wavelength_m : float [m]
    radius_m : float [m]
        Radius of the earth along the path.

    Raises
    ------
    InputError
        If no ground is known between the ends.
    """
    if ground.dist_m.size == 0:
        msg = "No ground is known between the ends; no height can be named."
        raise InputError(msg)
    demands = []
    for criterion in criteria:
        kappa = 1.0 / (criterion.ke * radius_m)
        reach = _reach(ground, length_m, criterion, wavelength_m, kappa)
        demands.append(Demand(criterion, kappa, reach))
    return Bench(
        ground=ground,
        length_m=length_m,
        from_ground_m=from_ground_m,
        to_ground_m=to_ground_m,
        wavelength_m=wavelength_m,
        demands=tuple(demands),
    )


def _reach(
    ground: Ground,
    length_m: float,
    criterion: Criterion,
    wavelength_m: float,
    kappa: float,
) -> Reach:
    """Hull of what one criterion asks for, exact between the samples too.

    Between its samples a quadratic piece rises above them by at most a sixteenth of
    its second coefficient. Pieces that could so rise above the hull of the samples are
    cut fine, and the hull is taken again.
    """

    def ask(dist: FloatArray, height: FloatArray) -> FloatArray:
        zone = fresnel_radius_m(dist, length_m=length_m, wavelength_m=wavelength_m)
        asked: FloatArray = height + criterion.f1_fraction * zone + criterion.extra_m
        return asked

    samples = ask(ground.dist_m, ground.height_m)
    dist, need = _inside(ground.dist_m.ravel(), samples.ravel(), length_m)
    hull = upper_hull(dist, need, kappa)
    hull_x, hull_y = true_shape(hull.dist_m, hull.height_m, kappa)
    x, y = true_shape(ground.dist_m, samples, kappa)
    gap = np.min(np.interp(x, hull_x, hull_y) - y, axis=1)
    near = gap <= np.abs(quadratic(samples).c) / BULGE_SHARE + SLACK_M
    near[:END_PIECES] = near[-END_PIECES:] = True
    unit = np.linspace(0.0, 1.0, FINE)
    part = Ground(ground.dist_m[near], ground.height_m[near])
    fine = [part.place(np.full(part.dist_m.shape[0], u)) for u in unit]
    all_dist = np.concatenate([dist, *(d for d, _ in fine)])
    all_need = np.concatenate([need, *(ask(d, z) for d, z in fine)])
    order = np.argsort(all_dist, kind="stable")
    return upper_hull(*_inside(all_dist[order], all_need[order], length_m), kappa)


def _inside(
    dist_m: FloatArray, need_m: FloatArray, length_m: float
) -> tuple[FloatArray, FloatArray]:
    """The places strictly between the ends."""
    between = (dist_m > 0.0) & (dist_m < length_m)
    return dist_m[between], need_m[between]
