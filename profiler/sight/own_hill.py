"""A summit's own hill: a bare top must not hide itself."""

import numpy as np

from profiler.constants import OWN_HILL_CELLS, OWN_HILL_M
from profiler.model import GeodesicPath, PathProfile
from profiler.terrain.dem import Terrain
from profiler.terrain.near import finest_at, posts_near


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
    lattice = finest_at(terrain, path.end)
    if lattice is None or asked_m == 0.0:
        return 0.0
    radius = asked_m
    if radius is None:
        radius = max(OWN_HILL_M, OWN_HILL_CELLS * max(lattice.cell_m))
    if 2.0 * radius >= path.length_m:
        return 0.0
    near = posts_near(terrain, path.end, radius)
    if near is None or near.height_m.size == 0 or np.any(np.isnan(near.height_m)):
        return 0.0
    if asked_m is None and OWN_HILL_CELLS * near.cell_m > radius:
        # the finest grid has a void here and a coarser one gives the ground
        return own_hill_radius(terrain, path, OWN_HILL_CELLS * near.cell_m)
    highest = near.dist_m[near.height_m == near.height_m.max()]
    return radius if highest.max() <= radius - near.cell_m else 0.0


def stands_bare(profile: PathProfile, radius_m: float) -> bool:
    """Whether no cover stands within a distance of the target.

    Only a bare summit has an own hill: trees on it do hide what is behind them.
    """
    near = profile.dist_m > profile.length_m - radius_m
    return not np.any(profile.cover_m[near] > 0.0)
