"""Terrains whose answers are known by geometry, and writers of elevation files.

Most stand on a plane whose distances and bearings from its centre post are exactly
those of the WGS84 geodesic, so that a path from the centre is a straight line over the
posts. Heights and distances are metres; a void is NaN; rows run from north to south.
"""

from pathlib import Path
from typing import Any, NamedTuple

import matplotlib.cbook
import numpy as np
import rasterio
from numpy.typing import NDArray
from pyproj import Geod
from rasterio.transform import Affine

Posts = NDArray[np.float64]
Transform = tuple[float, float, float, float, float, float]

#: latitude, longitude of the post every centred terrain is built around
CENTRE = (56.5, -4.25)
CENTRED_CRS = (
    f"+proj=aeqd +lat_0={CENTRE[0]} +lon_0={CENTRE[1]} +datum=WGS84 +units=m +no_defs"
)


class Terrain(NamedTuple):
    """Posts, affine (a, b, c, d, e, f; cell corners), CRS and what is known of it."""

    posts: Posts
    transform: Transform
    crs: str
    facts: dict[str, float]


def place(azimuth_deg: float, distance_m: float) -> tuple[float, float]:
    """Latitude, longitude at a bearing and distance from the centre post."""
    lon, lat, _ = Geod(ellps="WGS84").fwd(CENTRE[1], CENTRE[0], azimuth_deg, distance_m)
    return float(lat), float(lon)


def offsets(
    cell_m: float, east_m: float, north_m: float, back_m: float
) -> tuple[Posts, Posts, Transform]:
    """East and north of every post from the centre post, and the transform."""
    west = -np.ceil(back_m / cell_m)
    column = np.arange(west, np.ceil(east_m / cell_m) + 1)
    row = np.arange(np.ceil(north_m / cell_m), west - 1, -1)
    east, north = np.meshgrid(column * cell_m, row * cell_m)
    transform = (
        cell_m,
        0.0,
        float((column[0] - 0.5) * cell_m),
        0.0,
        -cell_m,
        float((row[0] + 0.5) * cell_m),
    )
    return east, north, transform


def plane(
    slope_east: float = 0.0,
    slope_north: float = 0.0,
    *,
    base_m: float = 0.0,
    cell_m: float = 30.0,
    reach_m: float = 6000.0,
    back_m: float = 300.0,
) -> Terrain:
    """Ground rising evenly; slopes as rise over run."""
    east, north, transform = offsets(cell_m, reach_m, reach_m, back_m)
    posts = base_m + slope_east * east + slope_north * north
    facts = {
        "base_m": base_m,
        "gradient": float(np.hypot(slope_east, slope_north)),
        "uphill_azimuth_deg": float(np.degrees(np.arctan2(slope_east, slope_north))),
    }
    return Terrain(posts, transform, CENTRED_CRS, facts)


def ridge(
    lies: str,
    *,
    height_m: float = 100.0,
    cells_away: int = 100,
    cell_m: float = 30.0,
    back_m: float = 300.0,
) -> Terrain:
    """Flat ground with raised posts along a "row", a "column" or a "diagonal".

    From the centre it is met at a post: due north, due east or to the north-east. The
    diagonal wall runs from north-west to south-east.
    """
    reach = 2 * cells_away * cell_m
    east, north, transform = offsets(cell_m, reach, reach, back_m)
    i, j = np.round(north / cell_m), np.round(east / cell_m)
    wall = {
        "row": i == cells_away,
        "column": j == cells_away,
        "diagonal": i + j == 2 * cells_away,
    }[lies]
    azimuth = {"row": 0.0, "column": 90.0, "diagonal": 45.0}[lies]
    away = cells_away * cell_m * (np.sqrt(2.0) if lies == "diagonal" else 1.0)
    facts = {
        "azimuth_deg": azimuth,
        "crest_at_m": float(away),
        "crest_m": height_m,
        "reach_m": float(2 * away),
    }
    posts = np.where(wall, height_m, 0.0)
    return Terrain(posts, transform, CENTRED_CRS, facts)


def _hill(
    profile: Any, away_m: float, cell_m: float, reach_m: float, side_m: float
) -> tuple[Posts, Transform]:
    east, north, transform = offsets(cell_m, reach_m, side_m, side_m)
    return np.maximum(profile(np.hypot(east - away_m, north)), 0.0), transform


def cone(
    *,
    apex_m: float = 200.0,
    slope: float = 0.5,
    away_m: float = 3000.0,
    cell_m: float = 30.0,
    reach_m: float = 6000.0,
) -> Terrain:
    """A cone due east whose apex is a post; its shadow edge is known.

    An eye at height h outside sees the sector within ``acos(foot/away)`` of its own
    direction from the axis, foot = (apex - h)/slope.
    """
    foot = apex_m / slope
    posts, transform = _hill(
        lambda r: apex_m - slope * r, away_m, cell_m, reach_m, foot + 10 * cell_m
    )
    facts = {"azimuth_deg": 90.0, "apex_at_m": away_m, "apex_m": apex_m, "foot_m": foot}
    return Terrain(posts, transform, CENTRED_CRS, facts)


def cap(
    *,
    radius_m: float = 500.0,
    top_m: float = 80.0,
    away_m: float = 2000.0,
    cell_m: float = 5.0,
    reach_m: float = 4000.0,
) -> Terrain:
    """A spherical cap due east on flat ground; heights of a smooth sphere at the posts.

    With ``cell_m=30`` it is the rounded summit that hides its own top from below.
    """
    rim = float(np.sqrt(radius_m**2 - (radius_m - top_m) ** 2))

    def profile(r: Posts) -> Posts:
        return np.sqrt(np.maximum(radius_m**2 - r**2, 0.0)) - (radius_m - top_m)

    posts, transform = _hill(profile, away_m, cell_m, reach_m, rim + 10 * cell_m)
    facts = {"azimuth_deg": 90.0, "top_at_m": away_m, "top_m": top_m, "rim_m": rim}
    return Terrain(posts, transform, CENTRED_CRS, facts)


def pillar(
    *, height_m: float = 50.0, cells_away: int = 40, cell_m: float = 30.0
) -> Terrain:
    """One raised post due east on flat ground; it stands within one cell each way."""
    reach = 2 * cells_away * cell_m
    east, north, transform = offsets(cell_m, reach, 10 * cell_m, 10 * cell_m)
    at = cells_away * cell_m
    near = np.hypot(east - at, north) < cell_m / 2
    facts = {
        "azimuth_deg": 90.0,
        "crest_at_m": at,
        "crest_m": height_m,
        "reach_m": reach,
        "half_width_m": cell_m,
    }
    return Terrain(np.where(near, height_m, 0.0), transform, CENTRED_CRS, facts)


def step(
    *,
    low_m: float = 0.0,
    high_m: float = 100.0,
    cells_away: int = 50,
    cell_m: float = 30,
) -> Terrain:
    """A cliff along a column due east: low up to one post, high from the next."""
    reach = 2 * cells_away * cell_m
    east, _, transform = offsets(cell_m, reach, 10 * cell_m, 10 * cell_m)
    brink = cells_away * cell_m
    posts = np.where(east > brink - cell_m / 2, high_m, low_m)
    facts = {
        "azimuth_deg": 90.0,
        "foot_at_m": brink - cell_m,
        "brink_at_m": brink,
        "low_m": low_m,
        "high_m": high_m,
        "reach_m": reach,
    }
    return Terrain(posts, transform, CENTRED_CRS, facts)


def step_tiles(**settings: Any) -> tuple[Terrain, Terrain]:
    """The same cliff cut into a western and an eastern tile between foot and brink."""
    posts, transform, crs, facts = step(**settings)
    cut = int(np.argmax(posts[0] == facts["high_m"]))
    a, b, c, d, e, f = transform
    east = Terrain(posts[:, cut:], (a, b, c + a * cut, d, e, f), crs, facts)
    return Terrain(posts[:, :cut], transform, crs, facts), east


def sea(
    *, land_m: float = 40.0, shore_m: float = 1500.0, cell_m: float = 30.0
) -> Terrain:
    """Flat land about the centre, void from the first post past the shore eastward."""
    east, _, transform = offsets(cell_m, 2 * shore_m, 10 * cell_m, 10 * cell_m)
    facts = {
        "azimuth_deg": 90.0,
        "land_m": land_m,
        "void_from_m": float(np.floor(shore_m / cell_m) * cell_m),
        "reach_m": 2 * shore_m,
    }
    posts = np.where(east > shore_m, np.nan, land_m)
    return Terrain(posts, transform, CENTRED_CRS, facts)


def one_void(
    *, land_m: float = 40.0, cells_away: int = 40, cell_m: float = 30.0
) -> Terrain:
    """Flat land with one void post due east: no ground within one cell of it."""
    reach = 2 * cells_away * cell_m
    east, north, transform = offsets(cell_m, reach, 10 * cell_m, 10 * cell_m)
    at = cells_away * cell_m
    posts = np.where(np.hypot(east - at, north) < cell_m / 2, np.nan, land_m)
    facts = {
        "azimuth_deg": 90.0,
        "land_m": land_m,
        "void_from_m": at - cell_m,
        "void_to_m": at + cell_m,
        "reach_m": reach,
    }
    return Terrain(posts, transform, CENTRED_CRS, facts)


def fractal(
    seed: int,
    *,
    shape: tuple[int, int] = (300, 300),
    relief_m: float = 600.0,
    roughness: float = 2.2,
    transform: Transform | None = None,
    crs: str = CENTRED_CRS,
    cell_m: float = 30.0,
) -> Terrain:
    """Rough ground by spectral synthesis: amplitudes fall as frequency**-roughness.

    Heights run from 0 to relief_m. Without a transform the centre post is the middle.
    """
    rows, cols = shape
    random = np.random.default_rng(seed)
    spectrum = np.fft.rfft2(random.standard_normal(shape))
    frequency = np.hypot(np.fft.fftfreq(rows)[:, None], np.fft.rfftfreq(cols)[None, :])
    frequency[0, 0] = np.inf
    posts = np.fft.irfft2(spectrum * frequency**-roughness, s=shape)
    posts = relief_m * (posts - posts.min()) / np.ptp(posts)
    if transform is None:
        west, north = -(cols // 2 + 0.5) * cell_m, (rows // 2 + 0.5) * cell_m
        transform = (cell_m, 0.0, west, 0.0, -cell_m, north)
    facts = {"seed": float(seed), "relief_m": relief_m}
    return Terrain(np.asarray(posts, float), transform, crs, facts)


def write_geotiff(
    path: Path,
    posts: Posts,
    transform: Transform,
    crs: str | None,
    *,
    nodata: float | None = None,
    dtype: str = "float64",
    point_registration: bool = False,
    unit: str | None = None,
    scale: float = 1.0,
    offset: float = 0.0,
    **creation: Any,
) -> Path:
    """Write posts as one band: stored = (post - offset)/scale, voids as nodata.

    Whole-number types are rounded. With ``point_registration`` the file says that a
    cell's value belongs to its point; the transform given here stays that of the cell
    corners. ``creation`` goes to the driver (``tiled=True, blockxsize=256, ...``).
    """
    stored = (np.asarray(posts, float) - offset) / scale
    if np.issubdtype(np.dtype(dtype), np.integer):
        stored = np.round(stored)
    void = np.isnan(stored)
    if nodata is not None:
        stored = np.where(void, nodata, stored)
    elif void.any() and np.issubdtype(np.dtype(dtype), np.integer):
        msg = "voids in whole numbers need nodata"
        raise ValueError(msg)
    with rasterio.open(
        path,
        "w",
        driver="GTiff",
        height=stored.shape[0],
        width=stored.shape[1],
        count=1,
        dtype=dtype,
        crs=crs,
        transform=Affine(*transform),
        nodata=nodata,
        **creation,
    ) as file:
        if point_registration:
            file.update_tags(AREA_OR_POINT="Point")
        if unit is not None:
            file.units = (unit,)
        if scale != 1 or offset != 0:
            file.scales, file.offsets = (scale,), (offset,)
        file.write(stored.astype(dtype), 1)
    return path


def jacksboro(folder: Path) -> Path:
    """The elevation sample that comes with matplotlib, as a GeoTIFF.

    344 by 403 posts of 3 arc-seconds, 236 to 1076 m, whole metres, latitude and
    longitude. The archive's ymin is the north edge and its extents are cell edges.
    """
    name = "jacksboro_fault_dem.npz"
    source = matplotlib.cbook.get_sample_data(name, asfileobj=False)
    with np.load(str(source)) as archive:
        posts = archive["elevation"].astype(float)
        west, north = float(archive["xmin"]), float(archive["ymin"])
        cell = float(archive["dx"])
    transform = (cell, 0.0, west, 0.0, -cell, north)
    return write_geotiff(
        folder / "jacksboro.tif", posts, transform, "EPSG:4326", dtype="int16"
    )
