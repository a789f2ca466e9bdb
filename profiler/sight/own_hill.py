"""A summit's own hill: a bare top must not hide itself."""

import numpy as np

from profiler.constants import OWN_HILL_CELLS, OWN_HILL_M
from profiler.model import GeodesicPath
from profiler.terrain.dem import Terrain
from profiler.terrain.near import posts_near


def own_hill_radius(
    terrain: Terrain, path: GeodesicPath, asked_m: float | None
) -> float:
    """Radius of the ground that belongs to a bare target [m]; 0 if it is no top.

    Parameters
    ----------
    terrain : Terrain
    path : GeodesicPath
        Its end is the target.
    asked_m : float or None [m]
        Radius asked for; None: the larger of 100 m and 3 cells; 0: none.

    Notes
    -----
    The target is a top when the highest posts within the circle all lie at least one
    cell inside it. A circle with a void in it proves nothing and gives none; neither
    does one that reaches half the path.
    """
    first = posts_near(terrain, path.end, OWN_HILL_M if asked_m is None else asked_m)
    if first is None or asked_m == 0.0:
        return 0.0
    radius = asked_m
    near = first
    if radius is None:
        radius = max(OWN_HILL_M, OWN_HILL_CELLS * first.cell_m)
        again = posts_near(terrain, path.end, radius)
        near = first if again is None else again
    if 2.0 * radius >= path.length_m or near.height_m.size == 0:
        return 0.0
    if np.any(np.isnan(near.height_m)):
        return 0.0
    highest = near.dist_m[near.height_m == near.height_m.max()]
    return radius if highest.max() <= radius - near.cell_m else 0.0
