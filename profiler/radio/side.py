"""Ground beside the path inside the first Fresnel zone: what a centre line misses."""

from dataclasses import dataclass
from typing import Final, NamedTuple

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
#: Places a side of the grids that close in on the tightest [1], how many grids [1],
#: and by how much each is smaller than the one before [1]; the last step is a 900th of
#: the first.
FINE: Final = 13
ROUNDS: Final = 3
CLOSER: Final = 5.0
#: Places this near to an end have no zone worth the name [m].
END_M: Final = 0.01
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
    grid = np.arange(-ACROSS, ACROSS + 1) / ACROSS
    first = _look_beside(terrain, line, dist, grid[:, None] * f1[None, :], wavelength_m)
    centre = first.share[ACROSS]
    tighter = first.share < np.minimum(centre, 1.0) - TIGHTER_F1
    if not np.any(tighter):
        return None
    k, i = np.unravel_index(
        int(np.argmin(np.where(tighter, first.share, np.inf))), tighter.shape
    )
    return _refined(
        terrain,
        line,
        (float(dist[i]), float(grid[k] * f1[i])),
        (float(dist[1] - dist[0]), float(f1[i] / ACROSS)),
        wavelength_m,
        float(centre[i]),
    )


class _Beside(NamedTuple):
    """Ground at a grid of offsets and distances."""

    across_m: FloatArray
    """(k, n) offset, positive to the right."""
    lat_deg: FloatArray
    lon_deg: FloatArray
    ground_m: FloatArray
    share: FloatArray
    """(k, n) distance from the ray as a share of F1; infinite where void."""


def _look_beside(
    terrain: Terrain,
    line: SightLine,
    dist_m: FloatArray,
    across_m: FloatArray,
    wavelength_m: float,
) -> _Beside:
    """Ground and share of F1 at (k, n) offsets from (n,) places on the path."""
    length = line.path.length_m
    f1 = fresnel_radius_m(dist_m, length_m=length, wavelength_m=wavelength_m)
    ends = line.from_.amsl_m, line.to.amsl_m
    ray = Line(length, *ends, line.earth.kappa_per_m).height(dist_m)
    everywhere = np.broadcast_to(dist_m, across_m.shape)
    lat, lon = beside_path(line.path, everywhere.ravel(), across_m.ravel())
    ground = ground_at(terrain, lat, lon).reshape(across_m.shape)
    share = _shares(ray, ground, across_m, f1)
    shape = across_m.shape
    return _Beside(across_m, lat.reshape(shape), lon.reshape(shape), ground, share)


def _refined(
    terrain: Terrain,
    line: SightLine,
    at: tuple[float, float],
    step: tuple[float, float],
    wavelength_m: float,
    centre_share: float,
) -> SidePlace:
    """The tightest place around a found one, on grids that close in on it.

    Parameters
    ----------
    at : (float, float) [m]
        Distance along the path and offset, positive to the right.
    step : (float, float) [m]
        Steps of the grid on which it was found.
    """
    best, size = at, step
    unit = np.linspace(-1.0, 1.0, FINE)
    for _ in range(ROUNDS):
        inside = np.clip(best[0] + unit * size[0], END_M, line.path.length_m - END_M)
        across = best[1] + unit * size[1]
        # the same side throughout: the centre line is another matter
        across = across[np.sign(across) == np.sign(at[1])]
        grid = np.broadcast_to(across[:, None], (across.size, inside.size))
        found = _look_beside(terrain, line, inside, grid, wavelength_m)
        k, i = np.unravel_index(int(np.argmin(found.share)), found.share.shape)
        best = float(inside[i]), float(across[k])
        size = size[0] / CLOSER, size[1] / CLOSER
    return SidePlace(
        distance_m=best[0],
        offset_m=abs(best[1]),
        side="right" if best[1] > 0.0 else "left",
        lat_deg=float(found.lat_deg[k, i]),
        lon_deg=(float(found.lon_deg[k, i]) + 180.0) % 360.0 - 180.0,
        ground_m=float(found.ground_m[k, i]),
        share=float(found.share[k, i]),
        centre_share=centre_share,
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
        under = below / f1_m[None, :]
    share: FloatArray = np.where(across_m == 0.0, under, apart)
    share[np.isnan(share)] = np.inf
    return share
