"""The oracle's ground and geometry: posts, the circle, exact three dimensions.

Nothing here comes from the package. Heights stand on a circle of radius 1/kappa in
plane Cartesian coordinates (long double); the sight line is straight there.
Distances and heights are metres, angles degrees unless said, curvatures 1/m; a void is
NaN.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray
from pyproj import CRS, Geod, Transformer

Array = NDArray[Any]
#: kappa, eye height and aim height of one trial line
Line = tuple[float, float, float]

WGS84 = Geod(ellps="WGS84")
#: weights below this share of a cell are rounding of the projection, not ground
SNAP_CELLS = 1e-8


@dataclass(frozen=True)
class RasterGround:
    """Ground between posts; ``transform`` is a, b, c, d, e, f of the affine.

    x = a*col + b*row + c and y = d*col + e*row + f at cell *corners*, so the post of
    column j and row i stands at col = j + 0.5, row = i + 0.5.
    """

    posts: NDArray[np.float64]
    transform: Sequence[float]
    crs: CRS
    interpolation: str = "bilinear"

    @cached_property
    def _to_map(self) -> Transformer:
        return Transformer.from_crs("EPSG:4326", self.crs, always_xy=True)

    def pixel(self, lat: ArrayLike, lon: ArrayLike) -> tuple[Array, Array]:
        """Column and row in posts (0, 0 is the first post), any turn of longitude."""
        a, b, c, d, e, f = tuple(self.transform)[:6]
        x, y = self._to_map.transform(np.mod(np.asarray(lon) + 180, 360) - 180, lat)
        rows, cols = self.posts.shape
        if self.crs.is_geographic:
            middle = a * cols / 2 + b * rows / 2 + c
            x = x + 360 * np.round((middle - x) / 360)
        col = (e * (x - c) - b * (y - f)) / (a * e - b * d) - 0.5
        row = (a * (y - f) - d * (x - c)) / (a * e - b * d) - 0.5
        return _snap(col), _snap(row)

    def height(self, lat: ArrayLike, lon: ArrayLike) -> Array:
        """Ground, m; NaN where a post with weight is void or outside."""
        col, row = self.pixel(np.asarray(lat, float), np.asarray(lon, float))
        if self.interpolation == "nearest":
            return self._post(np.floor(row + 0.5), np.floor(col + 0.5))
        north, west = np.floor(row), np.floor(col)
        total = np.zeros(np.shape(col))
        top = np.full(np.shape(col), -np.inf)
        for i in (0, 1):
            for j in (0, 1):
                weight = (1 - np.abs(row - north - i)) * (1 - np.abs(col - west - j))
                post = self._post(north + i, west + j)
                total = total + np.where(weight > 0, weight * post, 0)
                top = np.maximum(top, np.where(weight > 0, post, -np.inf))
        if self.interpolation == "highest":
            return top
        if self.interpolation != "bilinear":
            raise ValueError(self.interpolation)
        return total

    def _post(self, row: Array, col: Array) -> Array:
        rows, cols = self.posts.shape
        inside = (row >= 0) & (row < rows) & (col >= 0) & (col < cols)
        i = np.where(inside, row, 0).astype(int)
        j = np.where(inside, col, 0).astype(int)
        return np.where(inside, self.posts[i, j], np.nan)


def _snap(pixel: Array) -> Array:
    whole = np.round(pixel)
    return np.where(np.abs(pixel - whole) < SNAP_CELLS, whole, pixel)


# --- the circle ---------------------------------------------------------------


def circle_point(
    kappa: float, distance: ArrayLike, height: ArrayLike
) -> tuple[Array, Array]:
    """Plane coordinates of a point on the circle, from the sea under the eye, m."""
    d = np.asarray(distance, np.longdouble)
    z = np.asarray(height, np.longdouble)
    if kappa == 0:
        return d + 0 * z, z + 0 * d
    radius = 1 / np.longdouble(kappa)
    angle = np.longdouble(kappa) * d
    x = (radius + z) * np.sin(angle)
    return x, z * np.cos(angle) - 2 * radius * np.sin(angle / 2) ** 2


def line_height(line: Line, length: float, distance: ArrayLike) -> Array:
    """Height where the straight line meets the local vertical at distance, m."""
    kappa, eye, aim = line
    x0, y0 = circle_point(kappa, 0, eye)
    x1, y1 = circle_point(kappa, length, aim)
    x, y = circle_point(kappa, distance, 0)
    angle = np.longdouble(kappa) * np.asarray(distance, np.longdouble)
    run, rise = x1 - x0, y1 - y0
    up = run * np.cos(angle) - rise * np.sin(angle)
    return np.asarray((rise * (x - x0) - run * (y - y0)) / up)


def elevation(
    kappa: float, eye: float, distance: ArrayLike, height: ArrayLike
) -> Array:
    """Elevation angle from the eye above its own horizontal, radians."""
    x, y = circle_point(kappa, distance, height)
    return np.arctan2(y - np.longdouble(eye), x)


def euler_radius(lat: float, azimuth: float) -> float:
    """Radius of curvature of WGS84 along an azimuth, m."""
    squash = 1 - WGS84.es * np.sin(np.radians(lat)) ** 2
    meridian = WGS84.a * (1 - WGS84.es) / squash**1.5
    prime = WGS84.a / np.sqrt(squash)
    turn = np.radians(azimuth)
    return float(1 / (np.cos(turn) ** 2 / meridian + np.sin(turn) ** 2 / prime))


def along(
    start: tuple[float, float], azimuth: float, distance: ArrayLike
) -> tuple[Array, Array]:
    """Latitude and longitude on a geodesic, any shape of distance."""
    far = np.asarray(distance, float).reshape(-1)
    same = np.ones(far.shape)
    lon, lat, _ = WGS84.fwd(same * start[1], same * start[0], same * azimuth, far)
    shape = np.shape(distance)
    return np.reshape(lat, shape), np.reshape(lon, shape)


# --- exact three-dimensional geometry ---------------------------------------------


def ecef(lat: ArrayLike, lon: ArrayLike, height: ArrayLike) -> Array:
    """Earth-centred Cartesian coordinates of ellipsoidal positions, shape (n, 3), m."""
    phi, lam = np.radians(lat), np.radians(lon)
    prime = WGS84.a / np.sqrt(1 - WGS84.es * np.sin(phi) ** 2)
    height = np.asarray(height, float)
    flat = (prime + height) * np.cos(phi)
    up = (prime * (1 - WGS84.es) + height) * np.sin(phi)
    return np.stack([flat * np.cos(lam), flat * np.sin(lam), up], axis=-1)


def chord_margins(
    start: tuple[float, float, float],
    end: tuple[float, float, float],
    at_m: Array,
    ground_m: Array,
) -> Array:
    """Straight chord minus ground along the ellipsoid's normals, ke = 1, m.

    Ends are latitude, longitude, ellipsoidal height; the ground stands at_m along the
    geodesic. The chord is met in the plane across the path at each ground point: it
    leaves the geodesic sideways by metres, which changes the height by microns.
    """
    azimuth, _, _ = WGS84.inv(start[1], start[0], end[1], end[0])
    blank = np.full(np.shape(at_m), 1.0)
    lon, lat, back = WGS84.fwd(
        start[1] * blank, start[0] * blank, azimuth * blank, np.asarray(at_m, float)
    )
    phi, lam = np.radians(lat), np.radians(lon)
    turn = np.radians(np.asarray(back) + 180)
    up = ecef(lat, lon, np.ones_like(phi)) - ecef(lat, lon, np.zeros_like(phi))
    east = np.stack([-np.sin(lam), np.cos(lam), 0 * lam], axis=-1)
    forward = np.sin(turn)[:, None] * east + np.cos(turn)[:, None] * np.cross(up, east)
    first = ecef(*start)
    chord = ecef(*end) - first
    foot = ecef(lat, lon, np.asarray(ground_m, float))
    share = np.sum((foot - first) * forward, axis=-1) / np.sum(chord * forward, axis=-1)
    meets = first + share[:, None] * chord
    return np.asarray(np.sum((meets - foot) * up, axis=-1))
