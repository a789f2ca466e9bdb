"""Several rounded obstacles in a row: cascaded cylinders on a detailed profile."""

import math
from dataclasses import dataclass

import numpy as np

from profiler.model import FloatArray
from profiler.radio.inputs import (
    check_effective_radius,
    check_not_negative,
    checked_profile,
)
from profiler.radio.knife_edge import (
    knife_edge_loss_db,
    nu_from_height,
    nu_from_share_of_f1,
)
from profiler.radio.rounded import RoundedLoss, rounded_obstacle_loss
from profiler.radio.waves import POWER_DB, check_wavelength

#: Consecutive string points nearer than this are one obstruction [m]; Rec. ITU-R
#: P.526-16 section 4.4, Attachment 1.
ONE_OBSTRUCTION_M = 250.0
#: Growth of the radius with ν and its exponent [1]; Rec. ITU-R P.526-16 (123).
RADIUS_NU, RADIUS_EXPONENT = 4.0, 3


@dataclass(frozen=True, slots=True, kw_only=True)
class Cylinder:
    """One rounded obstacle of the cascade."""

    first: int
    """Index of its first sample."""
    last: int
    """Index of its last sample."""
    vertex_m: float
    """Distance from the first end to where its tangent rays cross."""
    height_m: float
    """Height of that vertex above the line between its neighbours' near points."""
    radius_m: float
    """Radius of curvature of its top; 0 is a knife edge."""
    loss: RoundedLoss
    """Loss over it between the neighbouring vertices."""


@dataclass(frozen=True, slots=True, kw_only=True)
class CylinderLoss:
    """Loss over cascaded cylinders, and what it is made of."""

    total_db: float
    """Loss relative to free space."""
    cylinders: tuple[Cylinder, ...]
    """The obstacles, from the first end on; none on a path in sight."""
    between_db: tuple[float, ...]
    """Losses of the stretches before, between and after them, one more than they."""
    spreading_db: float
    """−20·log10(C_N): what the spreading between several obstacles adds."""


@dataclass(frozen=True, slots=True, eq=False)
class _Path:
    """A profile with its antennas, and what bends over it."""

    dist: FloatArray
    ground: FloatArray
    top: FloatArray
    kappa: float
    wave: float

    def rise(self, start: int, stop: int) -> float:
        """Slope at which ``stop`` appears from ``start``; (44), (108), (109)."""
        apart = abs(float(self.dist[stop] - self.dist[start]))
        slope = float(self.top[stop] - self.top[start]) / apart
        return slope - apart * self.kappa / 2.0


def cylinder_loss(
    dist_m: FloatArray,
    height_m: FloatArray,
    *,
    from_agl_m: float,
    to_agl_m: float,
    wavelength_m: float,
    effective_radius_m: float,
) -> CylinderLoss:
    """Loss over cascaded cylinders.

    What the Recommendation leaves open is settled so: of string points that appear
    equally high the farthest is taken; only those 250 m apart or less are merged; a
    concave top (t <= 0) has radius 0; the ν in the radius (123) is that of the loss;
    the height of a vertex is not let below its line; a stretch whose two walks pass
    each other (p > q) loses nothing, like p = q; J is the approximation.

    Parameters
    ----------
    dist_m : (n,) float64 [m]
        Distances along the path, increasing, n >= 3, best 250 m apart or less.
    height_m : (n,) float64 [m]
        Ground above sea level, the first and last under the antennas.
    from_agl_m, to_agl_m : float [m]
        Antennas above the ground at the ends, 0 or more.
    wavelength_m : float [m]
        Wavelength, 1 mm to 30 m.
    effective_radius_m : float [m]
        Effective earth radius, > 0; inf for a flat earth.

    Returns
    -------
    CylinderLoss
        Obstacles, stretches between them and spreading. Ray angles are taken as small,
        below about 5 degrees.

    Raises
    ------
    InputError
        If the profile or a number is outside its range.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.4 equations (44) to (48), Attachment 1
    equations (107) to (123), Attachment 2 equations (124) to (129). No published
    example was found.
    """
    dist, ground = checked_profile(dist_m, height_m)
    check_effective_radius(effective_radius_m)
    check_wavelength(wavelength_m)
    check_not_negative(from_agl_m, "Height of the first antenna above ground")
    check_not_negative(to_agl_m, "Height of the second antenna above ground")
    top = ground.copy()
    top[0] += from_agl_m
    top[-1] += to_agl_m
    path = _Path(dist, ground, top, 1.0 / effective_radius_m, wavelength_m)
    spans = _merge(dist, stretched_string(dist, top, effective_radius_m))
    cylinders = _cylinders(path, spans)
    starts = [0, *(last for _, last in spans)]
    stops = [*(first for first, _ in spans), dist.size - 1]
    between = tuple(_stretch_db(path, u, v) for u, v in zip(starts, stops, strict=True))
    vertices = [0.0, *(one.vertex_m for one in cylinders), float(dist[-1])]
    spreading_db = _spreading_db(np.diff(vertices))
    own_db = math.fsum(one.loss.total_db for one in cylinders)
    return CylinderLoss(
        total_db=own_db + math.fsum(between) + spreading_db,
        cylinders=cylinders,
        between_db=between,
        spreading_db=spreading_db,
    )


def stretched_string(
    dist_m: FloatArray, height_m: FloatArray, effective_radius_m: float
) -> tuple[int, ...]:
    """Samples that a string stretched over the profile touches.

    Parameters
    ----------
    dist_m : (n,) float64 [m]
        Distances along the path, increasing.
    height_m : (n,) float64 [m]
        Ground above sea level; the antennas at both ends.
    effective_radius_m : float [m]
        Effective earth radius, > 0; inf for a flat earth.

    Returns
    -------
    tuple of int
        Indices between the ends, increasing; empty if the ends see each other. Of
        samples that appear equally high the farthest is taken.

    References
    ----------
    Rec. ITU-R P.526-16 (11/2025) section 4.4 equation (44).
    """
    touched: list[int] = []
    at, end = 0, dist_m.size - 1
    while at < end:
        apart = dist_m[at + 1 :] - dist_m[at]
        rise = (height_m[at + 1 :] - height_m[at]) / apart
        rise = rise - apart / (2.0 * effective_radius_m)
        at = end - int(np.argmax(rise[::-1]))
        touched.append(at)
    return tuple(touched[:-1])


def _merge(dist: FloatArray, touched: tuple[int, ...]) -> list[tuple[int, int]]:
    """First and last sample of each obstruction, from the string's points."""
    spans: list[tuple[int, int]] = []
    for at in touched:
        close = dist[at] - dist[at - 1] <= ONE_OBSTRUCTION_M
        if spans and spans[-1][1] == at - 1 and close:
            spans[-1] = (spans[-1][0], at)
        else:
            spans.append((at, at))
    return spans


def _cylinders(path: _Path, spans: list[tuple[int, int]]) -> tuple[Cylinder, ...]:
    """Every obstruction with its vertex, its radius and its loss."""
    before = [0, *(last for _, last in spans)][: len(spans)]
    after = [*(first for first, _ in spans[1:]), path.dist.size - 1][: len(spans)]
    tops = [
        _vertex(path, w, x, y, z)
        for w, (x, y), z in zip(before, spans, after, strict=True)
    ]
    places = [0.0, *(place for place, _ in tops), float(path.dist[-1])]
    sides = np.diff(places)
    return tuple(
        _cylinder(path, span, top, float(sides[i]), float(sides[i + 1]))
        for i, (span, top) in enumerate(zip(spans, tops, strict=True))
    )


def _vertex(path: _Path, w: int, x: int, y: int, z: int) -> tuple[float, float]:
    """Distance of a vertex from the first end, and its height h; (107) to (116)."""
    h_w, h_z = float(path.top[w]), float(path.top[z])
    d_wz, d_wx = (float(path.dist[i] - path.dist[w]) for i in (z, x))
    d_wy = float(path.dist[y] - path.dist[w])
    from_angle, to_angle = path.rise(w, x), path.rise(z, y)
    across = d_wz * path.kappa
    turn = from_angle + to_angle + across
    if x == y:
        d_wv, h_v = d_wx, float(path.top[x])
    else:
        d_wv = (d_wx + d_wy) / 2.0
        if turn > 0.0 and turn >= (d_wy - d_wx) * path.kappa:
            d_wv = ((to_angle + across / 2.0) * d_wz + h_z - h_w) / turn
        h_v = d_wv * from_angle + h_w + d_wv * d_wv * path.kappa / 2.0
    d_vz = d_wz - d_wv
    line = (h_w * d_vz + h_z * d_wv) / d_wz
    height = h_v + d_wv * d_vz * path.kappa / 2.0 - line
    return float(path.dist[w]) + d_wv, max(height, 0.0)


def _cylinder(
    path: _Path,
    span: tuple[int, int],
    vertex: tuple[float, float],
    from_m: float,
    to_m: float,
) -> Cylinder:
    """One obstruction between its neighbouring vertices."""
    place, height = vertex
    sides = {"from_m": from_m, "to_m": to_m, "wavelength_m": path.wave}
    radius = _radius(path, span, float(nu_from_height(height, **sides)))
    return Cylinder(
        first=span[0],
        last=span[1],
        vertex_m=place,
        height_m=height,
        radius_m=radius,
        loss=rounded_obstacle_loss(height, radius_m=radius, **sides),
    )


def _radius(path: _Path, span: tuple[int, int], nu: float) -> float:
    """Radius of curvature of a top, from the samples beside it; (122), (123)."""
    x, y = span
    p, q = x - 1, y + 1
    d, h = path.dist, path.ground
    d_pq = float(d[q] - d[p])
    t = float((h[x] - h[p]) / (d[x] - d[p]) + (h[y] - h[q]) / (d[q] - d[y]))
    # the sign of the last term as the source has it; the geometry of a bent profile
    # would add it, a change of 4e-5 in t for d_pq = 170 m: it matters on flat tops only
    t -= d_pq * path.kappa
    if t <= 0.0:
        return 0.0
    return float(d_pq / t * -(math.expm1(-RADIUS_NU * nu) ** RADIUS_EXPONENT))


def _stretch_db(path: _Path, u: int, v: int) -> float:
    """Loss between two neighbouring points of the string; Attachment 2."""
    top = path.top
    p, q = u + 1, v - 1
    while p < v and top[p] > top[p + 1]:
        p += 1
    while q > u and top[q] > top[q - 1]:
        q -= 1
    if p >= q:
        return 0.0
    d_ui = path.dist[p : q + 1] - path.dist[u]
    d_uv = float(path.dist[v] - path.dist[u])
    d_iv = d_uv - d_ui
    ray = (top[u] * d_iv + top[v] * d_ui) / d_uv
    ground = top[p : q + 1] + d_ui * d_iv * path.kappa / 2.0
    zone = np.sqrt(path.wave * d_ui * d_iv / d_uv)
    share = float(np.min((ray - ground) / zone))
    return float(knife_edge_loss_db(nu_from_share_of_f1(share)))


def _spreading_db(sides: FloatArray) -> float:
    """−20·log10(C_N) from the distances between vertices; (46) to (48)."""
    if sides.size == 1:
        return 0.0
    # P_a/P_b of (47), (48): Π s2_i·(s1_1 + Σ s2) over s2_N·Π (s1_i + s2_i), in logs,
    # for the products of many metres overflow
    above = np.sum(np.log10(sides[1:])) + np.log10(np.sum(sides))
    below = np.log10(sides[-1]) + np.sum(np.log10(sides[:-1] + sides[1:]))
    return float(POWER_DB * (below - above))
