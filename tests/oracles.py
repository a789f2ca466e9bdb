"""The line-of-sight answer found the slow way, to hold the real code against.

Nothing here comes from the package. The ground is scanned with hundreds of samples a
cell along the WGS84 geodesic, the lowest places are polished by golden section, and
every threshold is found by bisection; the geometry is in ``oracle_earth``. Distances
and heights are metres, angles degrees, curvatures 1/m; a void is NaN; a positive margin
is clear.
"""

from collections.abc import Callable
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np
from numpy.typing import ArrayLike

from tests.oracle_earth import (
    WGS84,
    Array,
    Line,
    RasterGround,
    along,
    elevation,
    euler_radius,
    line_height,
)
from tests.oracle_search import bisect, lowest_places, polish

#: a line is blocked when its lowest margin is below this (design, section 4), m
BLOCKED_BELOW_M = -0.001
#: a shadow deeper than this makes the ground before it a front crest (section 3), m
CREST_SHADOW_M = 10.0
#: the highest station a needed height is looked for, above ground, m
TALLEST_M = 20_000.0
#: a needed height is accepted when the polished scan agrees this well, m
AGREED_M = 1e-7
#: rough length of the path in cells is measured over this many pieces
PIECES = 400
#: curvatures are tried up to this share of one over the greatest height
BEND_SHARE = 0.2
#: scans a threshold may take before something is wrong
MOST_SCANS = 100


@dataclass(frozen=True)
class OracleLook:
    """One line of sight, scanned; every property is worked out when first asked."""

    ground: RasterGround
    start: tuple[float, float]
    length_m: float
    azimuth_deg: float
    radius_m: float
    kappa: float
    from_ground_m: float
    to_ground_m: float
    eye_m: float
    aim_m: float
    void_below_m: float
    at_m: Array = field(repr=False)
    ground_m: Array = field(repr=False)

    @property
    def line(self) -> Line:
        return self.kappa, self.eye_m, self.aim_m

    def position(self, distance: ArrayLike) -> tuple[Array, Array]:
        """Latitude and longitude on the geodesic."""
        return along(self.start, self.azimuth_deg, distance)

    def ground_at(self, distance: ArrayLike) -> Array:
        return self.ground.height(*self.position(distance))

    def sight(self, distance: ArrayLike) -> Array:
        return line_height(self.line, self.length_m, distance)

    def margin(self, distance: ArrayLike) -> Array:
        return self.sight(distance) - self.ground_at(distance)

    def angle(self, distance: ArrayLike) -> Array:
        ground = self.ground_at(distance)
        return elevation(self.kappa, self.eye_m, distance, ground)

    def lows(self, line: Line) -> tuple[Array, Array]:
        """Lowest places of another line over the same ground, ends left out."""
        at = self.at_m[1:-1]
        scan = line_height(line, self.length_m, at) - self.ground_m[1:-1]
        return lowest_places(
            lambda d: line_height(line, self.length_m, d) - self.ground_at(d), at, scan
        )

    @cached_property
    def lowest(self) -> tuple[float, float]:
        """Place and value of the lowest margin, the ends included.

        Equals within 1 mm go to the place nearest mid-path.
        """
        places, values = self.lows(self.line)
        places = np.concatenate([places, [0, self.length_m]])
        ends = [self.eye_m - self.from_ground_m, self.aim_m - self.to_ground_m]
        values = np.concatenate([values, ends])
        tied = np.flatnonzero(values <= np.nanmin(values) - BLOCKED_BELOW_M)
        off_middle = np.abs(places[tied] - self.length_m / 2)
        best = tied[np.argmin(off_middle)]
        return float(places[best]), float(np.nanmin(values))

    @property
    def lowest_margin_m(self) -> float:
        return self.lowest[1]

    @property
    def lowest_at_m(self) -> float:
        return self.lowest[0]

    @property
    def void_blocks_above_m(self) -> float | None:
        """Ground in the voids that would block: the lowest sight line over them."""
        void = np.isnan(self.ground_m)
        if not void.any():
            return None
        return float(np.min(self.sight(self.at_m[void])))

    @property
    def verdict(self) -> str:
        if self.lowest_margin_m < BLOCKED_BELOW_M:
            return "blocked"
        doubt = self.void_blocks_above_m
        return "clear" if doubt is None or doubt > self.void_below_m else "undetermined"

    @property
    def grazing(self) -> bool:
        return abs(self.lowest_margin_m) <= -BLOCKED_BELOW_M

    @cached_property
    def touches_first(self) -> tuple[float, float]:
        """Place of the smallest margin/(d1 d2) and the margin there."""
        at = self.at_m[1:-1]
        scan = self.margin(at) / (at * (self.length_m - at))
        places, _ = lowest_places(
            lambda d: self.margin(d) / (d * (self.length_m - d)), at, scan
        )
        return float(places[0]), float(self.margin(places[0]))

    @property
    def decisive(self) -> tuple[float, float]:
        """Place and margin of the decisive point."""
        return self.lowest if self.verdict == "blocked" else self.touches_first

    @cached_property
    def blocked_stretches(self) -> list[tuple[float, float, float, float]]:
        """Start, end, worst margin and its place of each stretch below -1 mm.

        A stretch runs as far as the ground stands above the line (margin below 0).
        """
        scan = np.asarray(self.sight(self.at_m) - self.ground_m, float)
        low = np.concatenate([[False], scan < 0, [False]])
        edges = np.flatnonzero(low[1:] != low[:-1])
        found = []
        for first, after in zip(edges[::2], edges[1::2], strict=True):
            start, end = self._edge(first, first - 1), self._edge(after - 1, after)
            places, values = lowest_places(
                self.margin, self.at_m[first:after], scan[first:after]
            )
            if values[0] < BLOCKED_BELOW_M:
                found.append((start, end, float(values[0]), float(places[0])))
        return found

    def _edge(self, low: int, clear: int) -> float:
        if clear < 0 or clear >= self.at_m.size:
            return float(self.at_m[low])
        return bisect(
            lambda d: bool(self.margin(d) < 0),
            float(self.at_m[clear]),
            float(self.at_m[low]),
        )

    @cached_property
    def horizon(self) -> tuple[float, float]:
        """Place and elevation (degrees) of the ground highest in the eye's view."""
        at = self.at_m[1:]
        scan = -elevation(self.kappa, self.eye_m, at, self.ground_m[1:])
        places, values = lowest_places(lambda d: -self.angle(d), at, scan)
        return float(places[0]), float(np.degrees(-values[0]))

    def ray_over(self, distance: float, at: ArrayLike) -> Array:
        """Height of the ray from the eye over the ground at distance."""
        ground = float(self.ground_at(distance))
        return line_height((self.kappa, self.eye_m, ground), distance, at)

    @property
    def hidden_m(self) -> float:
        """How much of the target, from its foot, lies below the grazing ray."""
        ray = float(self.ray_over(self.horizon[0], self.length_m))
        return float(np.clip(ray - self.to_ground_m, 0, self.aim_m - self.to_ground_m))

    @property
    def visible_m(self) -> float:
        return self.aim_m - self.to_ground_m - self.hidden_m

    @cached_property
    def front_crest_m(self) -> float | None:
        """Place of the front crest, or None.

        Each unseen stretch has its own grazing ray, the one over the last ground seen
        before it.
        """
        if self.verdict == "blocked":
            return self.horizon[0]
        known = np.flatnonzero(~np.isnan(self.ground_m))
        known = known[known > 0]
        at, ground = self.at_m[known], self.ground_m[known]
        angle = elevation(self.kappa, self.eye_m, at, ground)
        unseen = angle < np.maximum.accumulate(angle)
        edges = np.flatnonzero(np.diff(np.concatenate([[False], unseen, [False]])))
        for first, after in zip(edges[-2::-2], edges[::-2], strict=True):
            crest, _ = polish(
                lambda d: -self.angle(d), at[max(first - 2, 0)], at[first]
            )
            ray = self.ray_over(float(crest), at[first:after])
            if np.max(ray - ground[first:after]) > CREST_SHADOW_M:
                return float(crest)
        return None

    @property
    def above_crest_m(self) -> float | None:
        """Aim point minus the ray over the front crest, at the target."""
        crest = self.front_crest_m
        if crest is None:
            return None
        return self.aim_m - float(self.ray_over(crest, self.length_m))

    def least(
        self, trial: Callable[[float], Line], low: float, high: float, clear_at: float
    ) -> float | None:
        """Least value whose line has no margin below clear_at; None if none has.

        The line must rise with the value. Bisects over the worst places known so far,
        then scans the whole path again, until the scan finds no worse place.
        """
        places, values = self.lows(trial(low))
        if values.size == 0 or values[0] >= clear_at:
            return low
        for _ in range(MOST_SCANS):
            ground = self.ground_at(places)

            def clear(value: float, at: Array = places, z: Array = ground) -> bool:
                above = line_height(trial(value), self.length_m, at) - z
                return bool(np.min(above) >= clear_at)

            if not clear(high):
                return None
            value = bisect(clear, low, high)
            more, values = self.lows(trial(value))
            if values[0] >= clear_at - AGREED_M:
                return value
            places = np.concatenate([places, more])
        msg = "the worst places keep changing"
        raise AssertionError(msg)

    def least_from_agl_m(self, clear_at: float = BLOCKED_BELOW_M) -> float | None:
        def trial(agl: float) -> Line:
            return self.kappa, self.from_ground_m + agl, self.aim_m

        return self.least(trial, 0.0, TALLEST_M, clear_at)

    def least_to_agl_m(self, clear_at: float = BLOCKED_BELOW_M) -> float | None:
        def trial(agl: float) -> Line:
            return self.kappa, self.eye_m, self.to_ground_m + agl

        return self.least(trial, 0.0, TALLEST_M, clear_at)

    def least_both_extra_m(self, clear_at: float = BLOCKED_BELOW_M) -> float | None:
        def trial(extra: float) -> Line:
            return self.kappa, self.eye_m + extra, self.aim_m + extra

        return self.least(trial, 0.0, TALLEST_M, clear_at)

    def critical_kappa(self, clear_at: float = BLOCKED_BELOW_M) -> float | None:
        """The largest curvature that leaves the line clear; None if none does."""
        tallest = np.nanmax(np.abs([self.eye_m, self.aim_m, *self.ground_m, 1]))
        limit = float(min(1 / self.length_m, BEND_SHARE / tallest))
        found = self.least(
            lambda v: (-v, self.eye_m, self.aim_m), -limit, limit, clear_at
        )
        return None if found is None or found == -limit else -found


def oracle_look(
    ground: RasterGround,
    lat0: float,
    lon0: float,
    lat1: float,
    lon1: float,
    *,
    from_agl: float | None = None,
    from_amsl: float | None = None,
    to_agl: float | None = None,
    to_amsl: float | None = None,
    kr: float | None = None,
    kappa: float | None = None,
    points_per_cell: int = 200,
    void_below: float = 9000.0,
) -> OracleLook:
    """Look from 0 to 1; each end by agl or amsl, the air by kr or kappa."""
    azimuth, _, length = WGS84.inv(lon0, lat0, lon1, lat1)
    _, middle, back = WGS84.fwd(lon0, lat0, azimuth, length / 2)
    radius = euler_radius(middle, back + 180)
    if (kr is None) == (kappa is None):
        msg = "kr or kappa"
        raise ValueError(msg)
    bend = kappa if kappa is not None else (1 - float(kr or 0)) / radius
    feet = ground.height(np.array([lat0, lat1]), np.array([lon0, lon1]))
    heights = []
    for foot, agl, amsl in zip(
        feet, (from_agl, to_agl), (from_amsl, to_amsl), strict=True
    ):
        if (agl is None) == (amsl is None):
            msg = "agl or amsl"
            raise ValueError(msg)
        heights.append(float(amsl if amsl is not None else foot + agl))
    start = lat0, lon0
    col, row = ground.pixel(*along(start, azimuth, np.linspace(0, length, PIECES + 1)))
    cells = float(np.sum(np.hypot(np.diff(col), np.diff(row))))
    samples = max(PIECES, int(np.ceil(points_per_cell * cells)))
    at = np.linspace(0, length, samples + 1)
    return OracleLook(
        ground=ground,
        start=start,
        length_m=length,
        azimuth_deg=azimuth,
        radius_m=radius,
        kappa=bend,
        from_ground_m=float(feet[0]),
        to_ground_m=float(feet[1]),
        eye_m=heights[0],
        aim_m=heights[1],
        void_below_m=void_below,
        at_m=at,
        ground_m=ground.height(*along(start, azimuth, at)),
    )
