"""Antenna heights by dense scanning on the circle; nothing of the package but pieces.

Distances and heights are metres. Criteria are (ke, share of F1, extra).
"""

from typing import NamedTuple

import numpy as np

from tests.oracle_earth import Array, circle_point, line_height

#: places in each cell, and places crowding to each end
PER_CELL = 64
CROWD = 400


class Scene(NamedTuple):
    """Straight ground between posts."""

    dist_m: Array
    height_m: Array
    wavelength_m: float
    radius_m: float

    @property
    def length_m(self) -> float:
        return float(self.dist_m[-1])


Ask = tuple[float, float, float]


def places(scene: Scene, crowd: int = CROWD) -> Array:
    """Every post, places between them, and places ever nearer to the ends."""
    fine = np.concatenate(
        [
            np.linspace(a, b, PER_CELL, endpoint=False)
            for a, b in zip(scene.dist_m[:-1], scene.dist_m[1:], strict=True)
        ]
    )
    near = np.geomspace(1e-5, scene.dist_m[1], crowd)
    every = np.concatenate([fine, near, scene.length_m - near])
    return np.unique(every[(every > 0) & (every < scene.length_m)])


def asked(scene: Scene, ask: Ask, at: Array) -> Array:
    """Height that a line must have to meet one criterion."""
    zone = np.sqrt(scene.wavelength_m * at * (scene.length_m - at) / scene.length_m)
    ground = np.interp(at, scene.dist_m, scene.height_m)
    return np.asarray(ground + ask[1] * zone + ask[2])


def least_left(scene: Scene, ask: Ask, from_agl: float, to_agl: float) -> float:
    """The least that a line leaves over what is asked."""
    at = places(scene)
    ends = scene.height_m[0] + from_agl, scene.height_m[-1] + to_agl
    line = line_height((1 / (ask[0] * scene.radius_m), *ends), scene.length_m, at)
    return float(np.min(line - asked(scene, ask, at)))


def left(scene: Scene, asks: list[Ask], from_agl: float, to_agl: float) -> float:
    """The least over all criteria."""
    return min(least_left(scene, ask, from_agl, to_agl) for ask in asks)


def far_needed(
    scene: Scene, asks: list[Ask], from_agl: float, crowd: int = CROWD
) -> float:
    """Least height above ground at the far end for one at the near end."""
    at, most = places(scene, crowd), -np.inf
    for ask in asks:
        kappa = 1 / (ask[0] * scene.radius_m)
        x0, y0 = circle_point(kappa, 0.0, scene.height_m[0] + from_agl)
        x, y = circle_point(kappa, at, asked(scene, ask, at))
        slope = np.max((y - y0) / (x - x0))
        # the ray meets the plumb line of the far end, which leans by its angle
        foot_x, foot_y = circle_point(kappa, scene.length_m, 0.0)
        turn = kappa * scene.length_m
        up = (y0 + slope * (foot_x - x0) - foot_y) / (
            np.cos(turn) - slope * np.sin(turn)
        )
        most = max(most, float(up))
    return max(most - float(scene.height_m[-1]), 0.0)
