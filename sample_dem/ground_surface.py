"""The invented ground, known at every point.

A rough block is cut by running water (stream power, solved from the mouths upward
after Braun and Willett 2013, and creep, on a coarse lattice), carried to any point by
a smooth spline, roughened with gradient noise (after Perlin 2002) and shaped at named
places until those have the heights asked for. References from memory.
"""

import heapq

import numpy as np
from numpy.typing import NDArray

from sample_dem.ground_numbers import (
    ANCHORS,
    BEND_X,
    BEND_Y,
    BENDS_M,
    BLOCK_M,
    BLOCK_OCTAVES,
    BLOCK_RISE_M,
    BLOCK_ROUGH_M,
    BLOCK_WAVE_M,
    COAST_AT_M,
    COAST_NORMAL,
    COAST_OCTAVES,
    COAST_WANDER_M,
    COAST_WAVE_M,
    CREEP,
    CUBE,
    CUT_AREA_POWER,
    CUT_ROUNDS,
    CUT_STRENGTH,
    EASE,
    EDGE_M,
    EXTRA_OCTAVES,
    EXTRA_WAVE_M,
    FILL_FALL_M,
    GAIN,
    LACUNARITY,
    LAT_DEG_M,
    LATTICE_HALF_X_M,
    LATTICE_HALF_Y_M,
    LATTICE_M,
    LEVEL_M,
    LOCH_DEPTH_M,
    LOCH_END,
    LOCH_FROM_M,
    LOCH_HALF_M,
    LOCH_LEVEL_M,
    LOCH_RAGGED,
    LOCH_RIM,
    LOCH_TO_M,
    LOCH_WAVE_M,
    LON_DEG_M,
    LOW_FROM_M,
    LOW_HALF_M,
    LOW_SHARE,
    LOW_SOFT_M,
    LOW_TO_M,
    MASS_BEND,
    MASSES,
    MID_LAT_DEG,
    MID_LON_DEG,
    MOUTH_M,
    NEIGHBOURS,
    NOISE_GAIN,
    OCTAVE_COS,
    OCTAVE_SIN,
    OCTAVE_X,
    OCTAVE_Y,
    ROUGH_FLOOR_M,
    ROUGH_OCTAVES,
    ROUGH_OF_SLOPE_M,
    ROUGH_WAVE_M,
    SEA_BED_M,
    SIX,
    SMOOTH,
    SPLINE_MID,
    TABLE,
)

FloatArray = NDArray[np.float64]


class Noise:
    """Smooth gradient noise with fixed tables, of about -1 to 1."""

    def __init__(self, rng: np.random.Generator) -> None:
        self._order = rng.permutation(TABLE)
        angle = rng.uniform(0.0, 2.0 * np.pi, TABLE)
        self._gx, self._gy = np.cos(angle), np.sin(angle)

    def _corner(
        self,
        ix: NDArray[np.int64],
        iy: NDArray[np.int64],
        fx: FloatArray,
        fy: FloatArray,
    ) -> FloatArray:
        mask = TABLE - 1
        pick = self._order[(self._order[ix & mask] + iy) & mask]
        out: FloatArray = self._gx[pick] * fx + self._gy[pick] * fy
        return out

    def at(self, x: FloatArray, y: FloatArray) -> FloatArray:
        """One octave at points given in waves."""
        ix, iy = np.floor(x).astype(np.int64), np.floor(y).astype(np.int64)
        fx, fy = x - ix, y - iy
        sx, sy = ease(fx), ease(fy)
        low = self._corner(ix, iy, fx, fy) * (1 - sx)
        low = low + self._corner(ix + 1, iy, fx - 1, fy) * sx
        top = self._corner(ix, iy + 1, fx, fy - 1) * (1 - sx)
        top = top + self._corner(ix + 1, iy + 1, fx - 1, fy - 1) * sx
        return (low + sy * (top - low)) * NOISE_GAIN

    def fractal(
        self, x: FloatArray, y: FloatArray, wave_m: float, octaves: int
    ) -> FloatArray:
        """Sum of octaves, each turned, shorter and weaker than the one before."""
        u, v, weight = x / wave_m, y / wave_m, 1.0
        total = np.zeros(np.broadcast(x, y).shape)
        for _ in range(octaves):
            total = total + weight * self.at(u, v)
            u, v = OCTAVE_COS * u - OCTAVE_SIN * v, OCTAVE_SIN * u + OCTAVE_COS * v
            u, v = u * LACUNARITY + OCTAVE_X, v * LACUNARITY + OCTAVE_Y
            weight = weight * GAIN
        return total


def ease(t: FloatArray) -> FloatArray:
    """Smooth step of 0..1 with zero first and second derivatives at both ends."""
    return t * t * t * (t * (t * EASE[0] - EASE[1]) + EASE[2])


def turned(
    x: FloatArray, y: FloatArray, turn_deg: float
) -> tuple[FloatArray, FloatArray]:
    """Coordinates along and across an axis turned from east."""
    cos, sin = np.cos(np.radians(turn_deg)), np.sin(np.radians(turn_deg))
    return x * cos + y * sin, y * cos - x * sin


def to_plane(lat_deg: FloatArray, lon_deg: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Easting and northing [m] in the local plane of the surface."""
    return (lon_deg - MID_LON_DEG) * LON_DEG_M, (lat_deg - MID_LAT_DEG) * LAT_DEG_M


def rough_block(noise: Noise, x: FloatArray, y: FloatArray) -> FloatArray:
    """Heights [m] of the block before water cuts it; negative in the sea."""
    wander = COAST_WANDER_M * noise.fractal(x, y, COAST_WAVE_M, COAST_OCTAVES)
    inland = (x - COAST_AT_M[0]) * COAST_NORMAL[0]
    inland = inland + (y - COAST_AT_M[1]) * COAST_NORMAL[1] + wander
    rough = noise.fractal(x + 900.0, y, BLOCK_WAVE_M, BLOCK_OCTAVES)
    land = BLOCK_M + BLOCK_ROUGH_M * rough
    bx, by = bend(noise, x, y, MASS_BEND)
    for cx, cy, height, long, short, turn, edge in MASSES:
        u, v = turned(bx - cx, by - cy, turn)
        reach = (u / long) ** 2 + (v / short) ** 2
        land = land + height * np.exp(-(reach**edge))
    rise = 1.0 - np.exp(-np.maximum(inland, 0.0) / BLOCK_RISE_M)
    return np.where(inland > 0, 2 + land * rise, SEA_BED_M)


def bend(
    noise: Noise, x: FloatArray, y: FloatArray, more: float = 1.0
) -> tuple[FloatArray, FloatArray]:
    """Coordinates [m] moved a little, so that nothing runs straight or round."""
    dx, dy = np.zeros_like(x), np.zeros_like(y)
    for size, wave in BENDS_M:
        wave = wave * more
        dx = dx + more * size * noise.at(x / wave + BEND_X[0], y / wave + BEND_X[1])
        dy = dy + more * size * noise.at(x / wave + BEND_Y[0], y / wave + BEND_Y[1])
    return x + dx, y + dy


def fill_hollows(height: FloatArray, base: NDArray[np.bool_]) -> FloatArray:
    """Heights with every hollow filled so that water reaches the base."""
    rows, cols = height.shape
    filled = height.tolist()
    seen = base.tolist()
    heap = [(filled[r][c], r, c) for r, c in np.argwhere(base).tolist()]
    heapq.heapify(heap)
    while heap:
        level, r, c = heapq.heappop(heap)
        for dr, dc in NEIGHBOURS:
            i, j = r + dr, c + dc
            if 0 <= i < rows and 0 <= j < cols and not seen[i][j]:
                seen[i][j] = True
                filled[i][j] = max(filled[i][j], level + FILL_FALL_M)
                heapq.heappush(heap, (filled[i][j], i, j))
    return np.array(filled)


def downhill(filled: FloatArray) -> tuple[NDArray[np.int64], FloatArray]:
    """Flat index of the steepest lower neighbour of each node, and its distance [m]."""
    rows, cols = filled.shape
    padded = np.pad(filled, 1, constant_values=np.inf)
    index = np.arange(rows * cols).reshape(rows, cols)
    to, far = index.copy(), np.full(filled.shape, LATTICE_M)
    steepest = np.zeros(filled.shape)
    for dr, dc in NEIGHBOURS:
        step = LATTICE_M * np.hypot(dr, dc)
        other = padded[1 + dr : rows + 1 + dr, 1 + dc : cols + 1 + dc]
        fall = (filled - other) / step
        better = fall > steepest
        steepest = np.where(better, fall, steepest)
        to = np.where(better, index + dr * cols + dc, to)
        far = np.where(better, step, far)
    return to, far


def cut_once(height: FloatArray, base: NDArray[np.bool_]) -> FloatArray:
    """One round of stream-power cutting, solved from the mouths upward."""
    filled = fill_hollows(height, base)
    to, far = downhill(filled)
    order = np.argsort(filled, axis=None, kind="stable").tolist()
    receiver, out = to.ravel().tolist(), height.ravel().tolist()
    area = [LATTICE_M**2] * len(out)
    for node in reversed(order):
        if receiver[node] != node:
            area[receiver[node]] += area[node]
    factor = CUT_STRENGTH * np.array(area) ** CUT_AREA_POWER / far.ravel() * LATTICE_M
    factor = np.where(base.ravel(), 0.0, factor)
    pull = factor.tolist()
    for node in order:
        low = out[receiver[node]]
        if out[node] > low:
            out[node] = (out[node] + pull[node] * low) / (1.0 + pull[node])
    return np.array(out).reshape(height.shape)


def creep_once(height: FloatArray) -> FloatArray:
    """One round of soil creep: every node moves towards the mean of its neighbours."""
    p = np.pad(height, 1, mode="edge")
    mean = (p[:-2, 1:-1] + p[2:, 1:-1] + p[1:-1, :-2] + p[1:-1, 2:]) / len("nesw")
    return height + CREEP * (mean - height)


def cut_block(noise: Noise) -> FloatArray:
    """Lattice of heights [m] (rows northward) after all rounds of cutting."""
    x = np.arange(-LATTICE_HALF_X_M, LATTICE_HALF_X_M + 1, LATTICE_M)
    y = np.arange(-LATTICE_HALF_Y_M, LATTICE_HALF_Y_M + 1, LATTICE_M)
    height = rough_block(noise, *np.meshgrid(x, y))
    sea = height <= 0
    edge = np.ones_like(sea)
    edge[1:-1, 1:-1] = False
    base = sea | edge
    height = np.where(edge, np.minimum(height, EDGE_M), height)
    height = np.where(sea, MOUTH_M, height)
    for _ in range(CUT_ROUNDS):
        height = cut_once(height, base)
        height = np.where(base, height, creep_once(height))
    return np.where(sea, SEA_BED_M, fill_hollows(height, base))


def spline_weights(t: FloatArray) -> tuple[FloatArray, ...]:
    """Weights of four neighbours of the uniform cubic B-spline."""
    s = 1 - t
    sixth = 1 / SIX
    mid_low = (SPLINE_MID - SIX * t**2 + CUBE * t**3) * sixth
    mid_top = (SPLINE_MID - SIX * s**2 + CUBE * s**3) * sixth
    return s**CUBE * sixth, mid_low, mid_top, t**CUBE * sixth


def spline(lattice: FloatArray, x: FloatArray, y: FloatArray) -> FloatArray:
    """Smooth value of a lattice at points of the local plane [m]."""
    rows, cols = lattice.shape
    u = np.clip((x + LATTICE_HALF_X_M) / LATTICE_M, 1, cols - CUBE)
    v = np.clip((y + LATTICE_HALF_Y_M) / LATTICE_M, 1, rows - CUBE)
    i, j = np.floor(v).astype(np.int64), np.floor(u).astype(np.int64)
    across = spline_weights(u - j)
    total = np.zeros(u.shape)
    for dr, down in enumerate(spline_weights(v - i)):
        for dc, over in enumerate(across):
            total = total + down * over * lattice[i + dr - 1, j + dc - 1]
    return total


def along_line(
    x: FloatArray, y: FloatArray, start: tuple[float, float], end: tuple[float, float]
) -> tuple[FloatArray, FloatArray]:
    """Share of a straight line (0..1) and distance [m] from it."""
    dx, dy = end[0] - start[0], end[1] - start[1]
    share = ((x - start[0]) * dx + (y - start[1]) * dy) / (dx**2 + dy**2)
    share = np.clip(share, 0.0, 1.0)
    return share, np.hypot(x - start[0] - share * dx, y - start[1] - share * dy)


class Surface:
    """The ground, known at every point."""

    def __init__(self, seed: int) -> None:
        self._noise = Noise(np.random.Generator(np.random.PCG64(seed)))
        self._block = cut_block(self._noise)
        north, east = np.gradient(np.maximum(self._block, 0.0), LATTICE_M)
        self._slope = np.hypot(north, east)
        lat = np.array([a.lat_deg for a in ANCHORS])
        lon = np.array([a.lon_deg for a in ANCHORS])
        self._x, self._y = to_plane(lat, lon)
        self._bent_x, self._bent_y = bend(self._noise, self._x, self._y)
        self.lifts_m = self._solve_lifts()

    def _solve_lifts(self) -> FloatArray:
        """Lift and two tilts of each anchor: asked height, level ground."""
        x = self._x + LEVEL_M * np.array([[0], [1], [-1], [0], [0]])
        y = self._y + LEVEL_M * np.array([[0], [0], [0], [1], [-1]])
        wanted = np.array([a.ground_m for a in ANCHORS])
        plain = self._plain(x, y)
        pulls = np.concatenate([self._pulls(k, x, y) for k in range(len(ANCHORS))])
        rows = [pulls[:, 0], pulls[:, 1] - pulls[:, 2], pulls[:, CUBE] - pulls[:, -1]]
        goal = [wanted - plain[0], plain[2] - plain[1], plain[-1] - plain[CUBE]]
        return np.linalg.solve(np.concatenate(rows, axis=1).T, np.concatenate(goal))

    def _pulls(self, k: int, x: FloatArray, y: FloatArray) -> FloatArray:
        """Share of anchor ``k`` felt at points, plain and tilted along and across."""
        bx, by = bend(self._noise, x, y)
        a = ANCHORS[k]
        u, v = turned(bx - self._bent_x[k], by - self._bent_y[k], a.turn_deg)
        u, v = u / a.long_m, v / a.short_m
        round_share = np.exp(-(u**2 + v**2))
        edged = (np.hypot(u, v) + np.abs(u) + np.abs(v)) / 2
        share = np.exp(-edged) if a.sharp else round_share
        return np.stack([share, u * round_share, v * round_share])

    def _plain(self, x: FloatArray, y: FloatArray) -> FloatArray:
        """Ground before the anchors."""
        bx, by = bend(self._noise, x, y)
        slope = spline(self._slope, bx, by)
        size = ROUGH_FLOOR_M + ROUGH_OF_SLOPE_M * slope
        for k, reach_m in SMOOTH:
            far = np.hypot(x - self._x[k], y - self._y[k]) / reach_m
            size = size * (1 - np.exp(-(far**2)))
        rough = self._noise.fractal(x, y, ROUGH_WAVE_M, ROUGH_OCTAVES)
        ground = spline(self._block, bx, by) + size * rough
        start = float(self._x[0]), float(self._y[0])
        share, off = along_line(bx, by, start, (float(self._x[1]), float(self._y[1])))
        low = LOW_FROM_M + (LOW_TO_M - LOW_FROM_M) * share
        over = LOW_SOFT_M * np.logaddexp(0.0, (ground - low) / LOW_SOFT_M)
        return ground - LOW_SHARE * np.exp(-((off / LOW_HALF_M) ** 4)) * over

    def _with_loch(
        self, ground: FloatArray, x: FloatArray, y: FloatArray
    ) -> FloatArray:
        bx, by = bend(self._noise, x, y)
        off = along_line(bx, by, LOCH_FROM_M, LOCH_TO_M)[1] / LOCH_HALF_M
        ragged = self._noise.fractal(x, y, LOCH_WAVE_M, 2)
        off = off * (1 + LOCH_RAGGED * ragged)
        bowl = LOCH_LEVEL_M + LOCH_DEPTH_M * (off**2 - 1)
        old = ease(np.clip((off - LOCH_RIM) / (LOCH_END - LOCH_RIM), 0.0, 1.0))
        ground = bowl + old * (ground - bowl)
        return np.where(off < LOCH_RIM, np.maximum(ground, LOCH_LEVEL_M), ground)

    def ground(
        self, lat_deg: FloatArray, lon_deg: FloatArray, extra_m: float = 0.0
    ) -> FloatArray:
        """Height [m] at points; zero or less is sea. ``extra_m`` adds small detail."""
        x, y = to_plane(lat_deg, lon_deg)
        ground = self._plain(x, y)
        for k, lifts in enumerate(self.lifts_m.reshape(-1, CUBE)):
            ground = ground + np.tensordot(lifts, self._pulls(k, x, y), axes=1)
        if extra_m:
            more = self._noise.fractal(x, y, EXTRA_WAVE_M, EXTRA_OCTAVES)
            ground = ground + extra_m * more
        return self._with_loch(ground, x, y)
