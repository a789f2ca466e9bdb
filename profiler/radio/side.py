"""Ground beside the path inside the first Fresnel zone: what a centre line misses."""

from dataclasses import dataclass
from typing import Final

import numpy as np

from profiler.earth import beside_path
from profiler.model import FloatArray, SightLine
from profiler.radio.fresnel import fresnel_radius_m
from profiler.sight.line import Line
from profiler.terrain import Terrain
from profiler.terrain.at_points import ground_at

#: Places across the zone on each side at least [1]; our choice: a crag is found when
#: it is wider than a sixth of the zone.
ACROSS: Final = 6
#: Places along the path at most [1]; our choice, 20 m apart on 60 km.
ALONG: Final = 3000
#: A place beside the path counts when its share is below the centre line's by this [1].
TIGHTER_F1: Final = 0.05


@dataclass(frozen=True, slots=True, kw_only=True)
class SidePlace:
    """The tightest ground beside the path."""

    distance_m: float
    """Along the path from the eye's end [m]."""
    offset_m: float
    """From the centre line, > 0 [m]."""
    side: str
    """"left" or "right", looking from the eye's end."""
    lat_deg: float
    lon_deg: float
    ground_m: float
    share: float
    """Distance from the ray as a share of F1 [1]."""
    centre_share: float
    """The centre line's own share at the same distance [1]."""


def side_terrain(
    terrain: Terrain, line: SightLine, *, wavelength_m: float
) -> SidePlace | None:
    """The tightest ground beside the path that the centre line does not show.

    In the plane across the path the zone is a circle of radius F1 around the ray.
    Ground at an offset s whose height is c below the ray is sqrt(s² + c²) from it, and
    s when it stands above the ray. Level ground is nearest on the centre line, so there
    is nothing to report.

    Parameters
    ----------
    terrain : Terrain
    line : SightLine
    wavelength_m : float [m]

    Returns
    -------
    SidePlace or None
        None when no ground beside the path is inside the zone and tighter than the
        centre line.

    Raises
    ------
    DemError
        If a file is damaged.
    """
    dist = _places_along(line)
    f1 = fresnel_radius_m(dist, length_m=line.path.length_m, wavelength_m=wavelength_m)
    ray = Line(
        line.path.length_m,
        line.from_.amsl_m,
        line.to.amsl_m,
        line.earth.kappa_per_m,
    ).height(dist)
    offsets = np.arange(-ACROSS, ACROSS + 1) / ACROSS
    across = offsets[:, None] * f1[None, :]
    lat, lon = beside_path(
        line.path, np.broadcast_to(dist, across.shape).ravel(), across.ravel()
    )
    ground = ground_at(terrain, lat, lon).reshape(across.shape)
    share = _shares(ray, ground, across, f1)
    centre = share[ACROSS]
    tighter = np.where(share < np.minimum(centre, 1.0) - TIGHTER_F1, share, np.inf)
    if not np.any(np.isfinite(tighter)):
        return None
    k, i = np.unravel_index(int(np.argmin(tighter)), tighter.shape)
    flat = int(k) * dist.size + int(i)
    return SidePlace(
        distance_m=float(dist[i]),
        offset_m=abs(float(across[k, i])),
        side="right" if across[k, i] > 0.0 else "left",
        lat_deg=float(lat[flat]),
        lon_deg=(float(lon[flat]) + 180.0) % 360.0 - 180.0,
        ground_m=float(ground[k, i]),
        share=float(share[k, i]),
        centre_share=float(centre[i]),
    )


def _places_along(line: SightLine) -> FloatArray:
    """Distances strictly between the counted ends [m]."""
    near, length = line.ignore_near_m, line.path.length_m
    cells = [min(f.cell_m) for f in line.profile.files]
    step = max(min(cells, default=length) / 2.0, length / ALONG)
    count = max(int((length - 2.0 * near) / step), 3)
    return np.linspace(near, length - near, count + 2)[1:-1]


def _shares(
    ray_m: FloatArray, ground_m: FloatArray, across_m: FloatArray, f1_m: FloatArray
) -> FloatArray:
    """Signed on the centre line (above the ray is negative), a distance beside it."""
    below = ray_m[None, :] - ground_m
    with np.errstate(invalid="ignore"):
        apart = np.hypot(across_m, np.maximum(below, 0.0)) / f1_m[None, :]
    apart[ACROSS] = below[ACROSS] / f1_m
    apart[np.isnan(apart)] = np.inf
    return apart
