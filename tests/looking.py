"""Ways to ask the sight room that its tests share.

`seen` asks over a made terrain, `twin` gives the oracle's answer to the same question.
"""

from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray
from pyproj import CRS

from profiler.model import Air, Point, SightLine, Station
from profiler.sight import judge
from profiler.sight.ground import Ground
from profiler.terrain import Terrain, open_terrain
from tests import terrain
from tests.oracle_earth import RasterGround
from tests.oracles import OracleLook, oracle_look
from tests.terrain import CENTRE, place

Pair = tuple[float, float]
#: Refraction at which the path is flat.
FLAT_KR = 1.0


def opened(folder: Path, made: terrain.Terrain, **options: Any) -> Terrain:
    """A made terrain as a GeoTIFF of 64-bit metres, opened."""
    count = len(list(folder.glob("*.tif")))
    name = folder / f"ground{count}.tif"
    terrain.write_geotiff(name, *made[:3], unit="m")
    return open_terrain(name, **options)


def station(pair: Pair, **heights: Any) -> Station:
    """A station at latitude, longitude."""
    return Station(point=Point(lat_deg=pair[0], lon_deg=pair[1]), **heights)


def seen(
    ground: Terrain,
    start: Pair,
    end: Pair,
    *,
    eye: dict[str, Any] | float = 1.7,
    top: dict[str, Any] | float = 0.0,
    kr: float | None = None,
    ke: float | None = None,
    **options: Any,
) -> SightLine:
    """The answer; a plain height is above ground, air is flat if nothing is said."""
    air = Air(kr=FLAT_KR) if kr is None and ke is None else Air(kr=kr, ke=ke)
    ends = [h if isinstance(h, dict) else {"agl_m": h} for h in (eye, top)]
    return judge(
        ground, station(start, **ends[0]), station(end, **ends[1]), air=air, **options
    )


def from_centre(
    ground: Terrain, azimuth_deg: float, distance_m: float, **asked: Any
) -> SightLine:
    """The answer from the centre post to a bearing and distance."""
    return seen(ground, CENTRE, place(azimuth_deg, distance_m), **asked)


def raster(made: terrain.Terrain, interpolation: str = "bilinear") -> RasterGround:
    """The oracle's ground of a made terrain."""
    crs = CRS.from_user_input(made.crs)
    return RasterGround(made.posts, made.transform, crs, interpolation)


def twin(
    made: terrain.Terrain | RasterGround, start: Pair, end: Pair, **asked: Any
) -> OracleLook:
    """The oracle's answer to a question over the same ground."""
    ground = made if isinstance(made, RasterGround) else raster(made)
    return oracle_look(ground, *start, *end, **asked)


def pieces(dist_m: NDArray[np.float64], height_m: NDArray[np.float64]) -> Ground:
    """Ground that runs straight between posts, as pieces."""
    dist, height = np.asarray(dist_m, float), np.asarray(height_m, float)
    at = np.column_stack([dist[:-1], (dist[:-1] + dist[1:]) / 2.0, dist[1:]])
    mid = (height[:-1] + height[1:]) / 2.0
    return Ground(at, np.column_stack([height[:-1], mid, height[1:]]))
