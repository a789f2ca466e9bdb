"""A path prepared for trying antenna heights against a set of criteria."""

import math
from dataclasses import dataclass, replace
from typing import Final, NamedTuple

import numpy as np

from profiler.errors import InputError
from profiler.kernels.circle import elevation_tangent, ray_height
from profiler.model.arrays import FloatArray, IntArray
from profiler.radio.criteria import Criterion, curvature_of
from profiler.radio.hull import Reach, upper_hull
from profiler.radio.reach import reach_of
from profiler.radio.tight import tightest_place
from profiler.sight.ground import Ground
from profiler.sight.line import Line

#: A criterion short by less than this at a trial is met [m]; a thousandth of the
#: verdict's own band.
SHORT_M: Final = 1e-6


class Demand(NamedTuple):
    """One criterion with its curvature and the places that can govern it."""

    criterion: Criterion
    kappa_per_m: float
    reach: Reach


class Need(NamedTuple):
    """A height above ground and the criterion that asks for it."""

    agl_m: float
    """Infinite when no height does."""
    governing: int
    """Index of the criterion."""


class Trial(NamedTuple):
    """Two heights tried along the whole path."""

    left_m: tuple[float, ...]
    """For each criterion the least that is left anywhere."""
    places: tuple[tuple[float, float], ...]
    """For each criterion where that is, and the height it asks for there [m]."""


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
        return self.to_agl_governed(from_agl_m)[0]

    def to_agl_governed(self, from_agl_m: FloatArray) -> tuple[FloatArray, IntArray]:
        """The same, and for each the index of the criterion that asks for it."""
        eye = self.from_ground_m + from_agl_m
        over = [self._far_heights(demand, eye) for demand in self.demands]
        heights = np.maximum(np.max(over, axis=0) - self.to_ground_m, 0.0)
        return heights, np.argmax(over, axis=0)

    def _far_heights(self, demand: Demand, eye_m: FloatArray) -> FloatArray:
        tangent = _largest_tangents(demand, eye_m)
        return _heights(self.length_m, tangent, eye_m, demand.kappa_per_m)

    def tried(self, from_agl_m: float, to_agl_m: float) -> Trial:
        """What each criterion leaves along the whole path at two heights."""
        ends = self.from_ground_m + from_agl_m, self.to_ground_m + to_agl_m
        left, places = [], []
        for demand in self.demands:
            line = Line(self.length_m, *ends, demand.kappa_per_m)
            at = tightest_place(line, self.ground, demand.criterion, self.wavelength_m)
            asked = at.ground_m + at.clear_m - at.left_m
            left.append(float(at.left_m[0]))
            places.append((float(at.dist_m[0]), float(asked[0])))
        return Trial(tuple(left), tuple(places))

    def with_places(self, trial: Trial) -> "Bench | None":
        """The bench with the places at which a trial was short; None without any."""
        if min(trial.left_m) >= -SHORT_M:
            return None
        demands = [
            demand if left >= -SHORT_M else _with_place(demand, *place)
            for demand, left, place in zip(
                self.demands, trial.left_m, trial.places, strict=True
            )
        ]
        return replace(self, demands=tuple(demands))


def _with_place(demand: Demand, dist_m: float, height_m: float) -> Demand:
    reach = demand.reach
    at = int(np.searchsorted(reach.dist_m, dist_m))
    dist = np.insert(reach.dist_m, at, dist_m)
    height = np.insert(reach.height_m, at, height_m)
    # a place that a trial found short must stay, however little it was short by
    hull = upper_hull(dist, height, demand.kappa_per_m, same_m=0.0)
    return demand._replace(reach=hull)


def _ray_over(length_m: float, eye_m: float, demand: Demand, *, near: bool) -> float:
    """Height at the other end of the ray over everything one criterion asks for [m]."""
    dist = demand.reach.dist_m if near else length_m - demand.reach.dist_m
    kappa = demand.kappa_per_m
    tangents = elevation_tangent(dist, demand.reach.height_m, eye_m, kappa)
    tangent = np.array([np.max(tangents)])
    return float(_heights(length_m, tangent, np.array([eye_m]), kappa)[0])


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
    """Heights at the far end of many rays from many eyes: linear in the eye too.

    A ray so steep that it leaves the earth before the far end meets no height there.
    """
    from_zero = ray_height(np.full(eye_m.shape, length_m), tangent, 0.0, kappa)
    # 1 + kappa·height is 1/(1 - kappa·rise), negative past the upright ray
    heights = from_zero + eye_m * (1.0 + kappa * from_zero)
    heights[~(1.0 + kappa * from_zero > 0.0)] = math.inf
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
        If no ground is known between the ends, or a criterion bends the earth by a
        quarter circle over the path.
    """
    if ground.dist_m.size == 0:
        msg = "No ground is known between the ends; no height can be named."
        raise InputError(msg)
    demands = []
    for criterion in criteria:
        kappa = curvature_of(criterion, radius_m=radius_m, length_m=length_m)
        reach = reach_of(
            ground,
            criterion,
            length_m=length_m,
            wavelength_m=wavelength_m,
            kappa_per_m=kappa,
        )
        demands.append(Demand(criterion, kappa, reach))
    return Bench(
        ground=ground,
        length_m=length_m,
        from_ground_m=from_ground_m,
        to_ground_m=to_ground_m,
        wavelength_m=wavelength_m,
        demands=tuple(demands),
    )
