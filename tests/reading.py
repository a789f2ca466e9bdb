"""Ways to read ground that the tests of the terrain room share.

`exact` answers with none of the package's own code: it takes geodesic points from
PROJ, turns them into the file's pixels and interpolates with scipy.
"""

from functools import lru_cache
from pathlib import Path
from typing import Any

import numpy as np
import rasterio
from numpy.typing import NDArray
from pyproj import Geod, Transformer
from scipy.ndimage import map_coordinates

from profiler.earth.geodesic import geodesic_path
from profiler.model import PathProfile, Point
from profiler.terrain import open_terrain, sample_path

Floats = NDArray[np.float64]
Pair = tuple[float, float]


def profile(files: Path | list[Path], start: Pair, end: Pair, **options: Any) -> Any:
    """Ground between two places given as latitude, longitude."""
    names = files if isinstance(files, list) else [files]
    terrain = open_terrain(*names, **options)
    path = geodesic_path(
        Point(lat_deg=start[0], lon_deg=start[1]), Point(lat_deg=end[0], lon_deg=end[1])
    )
    return sample_path(terrain, path)


def ground_at(found: PathProfile, dist_m: Floats) -> Floats:
    """Ground anywhere on a path: the quadratic of the piece that owns the place."""
    first = found.piece_start
    starts = found.dist_m[first]
    k = np.clip(np.searchsorted(starts, dist_m, side="right") - 1, 0, first.size - 1)
    a, b = starts[k], found.dist_m[first[k] + 2]
    t = 2.0 * (dist_m - a) / (b - a) - 1.0
    z0, z1, z2 = (found.ground_m[first[k] + j] for j in range(3))
    ground: Floats = z1 + t * (z2 - z0) / 2.0 + t * t * ((z0 + z2) / 2.0 - z1)
    return ground


def geodesic_points(start: Pair, end: Pair, dist_m: Floats) -> tuple[Floats, Floats]:
    """Latitude and longitude on the geodesic, by PROJ."""
    geod = Geod(ellps="WGS84")
    azimuth, _, _ = geod.inv(start[1], start[0], end[1], end[0])
    full = np.full(dist_m.shape, 1.0)
    lon, lat, _ = geod.fwd(full * start[1], full * start[0], full * azimuth, dist_m)
    return np.asarray(lat), np.asarray(lon)


def pixels(transform: Any, x: Floats, y: Floats) -> tuple[Floats, Floats]:
    """Column and row of map coordinates, whole at cell corners."""
    t = ~transform
    return t.a * x + t.b * y + t.c, t.d * x + t.e * y + t.f


@lru_cache(maxsize=8)
def _opened(file: Path, written_ns: int) -> tuple[Floats, Any, Transformer]:
    """Posts, transform and the way to the map; kept until the file is written anew."""
    assert written_ns > 0
    with rasterio.open(file) as data:
        to_crs = Transformer.from_crs(4326, data.crs.to_wkt(), always_xy=True)
        return data.read(1).astype(float), data.transform, to_crs


def exact(file: Path, start: Pair, end: Pair, dist_m: Floats) -> Floats:
    """Bilinear ground of one file on the geodesic, by PROJ and scipy."""
    lat, lon = geodesic_points(start, end, dist_m)
    posts, transform, to_crs = _opened(file, file.stat().st_mtime_ns)
    x, y = to_crs.transform(lon, lat)
    col, row = pixels(transform, np.asarray(x), np.asarray(y))
    ground: Floats = map_coordinates(posts, [row - 0.5, col - 0.5], order=1)
    return ground


def step_in(found: PathProfile) -> float:
    """Largest change of ground at one place of the path [m]."""
    same = np.diff(found.dist_m) == 0.0
    return float(np.abs(np.diff(found.ground_m)[same]).max(initial=0.0))


def codes(found: PathProfile) -> list[str]:
    """Codes of a profile's notes."""
    return [note.code for note in found.notes]
