"""The WGS84 geodesic: the path between two points, its length and its bearings."""

from typing import NamedTuple

import numpy as np
from pyproj import Geod

from profiler.constants import (
    HALF_TURN_DEG,
    LONGEST_PATH_M,
    M_PER_KM,
    QUARTER_TURN_DEG,
    TURN_DEG,
)
from profiler.earth.curvature import ScalarOrArray, euler_radius
from profiler.errors import InputError
from profiler.model import FloatArray, GeodesicPath, Point

#: Two points nearer than this are one place [m]; our choice, the record's millimetre.
SAME_PLACE_M = 0.001

_WGS84 = Geod(ellps="WGS84")


class GeodesicLine(NamedTuple):
    """A geodesic of any length: how long it is and where it points at its ends."""

    length_m: float
    """Length [m]."""
    azimuth_deg: float
    """Bearing at the start towards the end [deg], 0 to 360."""
    back_azimuth_deg: float
    """Bearing at the end towards the start [deg], 0 to 360."""


def geodesic_line(start: Point, end: Point) -> GeodesicLine:
    """Shortest line on WGS84 between two points, however long.

    Parameters
    ----------
    start, end : Point
        The two ends; the same point twice gives length 0.

    Returns
    -------
    GeodesicLine
        Length [m] and bearings [deg]; swapping the ends swaps the bearings.

    References
    ----------
    Karney 2013, Algorithms for geodesics, Journal of Geodesy 87, as PROJ has it.
    """
    azimuth, back, length = _WGS84.inv(
        start.lon_deg, start.lat_deg, end.lon_deg, end.lat_deg
    )
    return GeodesicLine(float(length), _turned(azimuth), _turned(back))


def destination(start: Point, azimuth_deg: float, *, dist_m: float) -> Point:
    """Where the geodesic from a point along a bearing ends.

    Parameters
    ----------
    start : Point
        Where it begins.
    azimuth_deg : float [deg]
        Bearing from north at the start.
    dist_m : float [m]
        Length of the geodesic; negative goes backwards.

    Returns
    -------
    Point
        The far end.

    Raises
    ------
    InputError
        If a number is not finite.

    References
    ----------
    As for :func:`geodesic_line`.
    """
    lon_deg, lat_deg, _ = _WGS84.fwd(start.lon_deg, start.lat_deg, azimuth_deg, dist_m)
    return Point(lat_deg=float(lat_deg), lon_deg=float(lon_deg))


def geodesic_path(start: Point, end: Point) -> GeodesicPath:
    """Lay the path that is asked about, with the one radius used along it.

    Parameters
    ----------
    start : Point
        The eye's end.
    end : Point
        The target's end.

    Returns
    -------
    GeodesicPath
        Length [m], bearings [deg, 0 to 360] and the Euler radius [m] at the midpoint
        along the path's bearing there.

    Raises
    ------
    InputError
        If the two points are the same place, or more than 1 500 km apart.

    References
    ----------
    Karney 2013, Algorithms for geodesics; Euler's theorem on normal sections.
    """
    line = geodesic_line(start, end)
    if line.length_m < SAME_PLACE_M:
        msg = "The two points are the same place. Give two that differ."
        raise InputError(msg)
    if line.length_m > LONGEST_PATH_M:
        msg = (
            f"The points are {line.length_m / M_PER_KM:.1f} km apart; the longest path "
            f"is {LONGEST_PATH_M / M_PER_KM:.0f} km. Check latitude, longitude and "
            "their signs, or give a nearer point."
        )
        raise InputError(msg)
    _, mid_lat_deg, mid_back_deg = _WGS84.fwd(
        start.lon_deg, start.lat_deg, line.azimuth_deg, line.length_m / 2.0
    )
    return GeodesicPath(
        start=start,
        end=end,
        length_m=line.length_m,
        azimuth_deg=line.azimuth_deg,
        back_azimuth_deg=line.back_azimuth_deg,
        radius_m=float(euler_radius(float(mid_lat_deg), float(mid_back_deg))),
    )


def points_at(path: GeodesicPath, dist_m: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Places on a path at distances from its start.

    Parameters
    ----------
    path : GeodesicPath
        The path.
    dist_m : (n,) float64 [m]
        Distances from the start, in any order.

    Returns
    -------
    lat_deg : (n,) float64 [deg]
        Latitude; at distance 0 and at the path's length exactly that of the end.
    lon_deg : (n,) float64 [deg]
        Longitude, running on through ±180 without a jump from the start's own value;
        at the path's length the end's, but for whole turns.

    References
    ----------
    As for :func:`geodesic_line`.
    """
    dist_m = np.asarray(dist_m, dtype=np.float64)
    lon_deg, lat_deg, _ = _WGS84.fwd(
        np.full(dist_m.shape, path.start.lon_deg),
        np.full(dist_m.shape, path.start.lat_deg),
        np.full(dist_m.shape, path.azimuth_deg),
        dist_m,
    )
    for at_m, point in ((0.0, path.start), (path.length_m, path.end)):
        here = dist_m == at_m
        lat_deg[here] = point.lat_deg
        lon_deg[here] = point.lon_deg
    return lat_deg, _unwrapped(lon_deg, path)


def distances_m(start: Point, lat_deg: FloatArray, lon_deg: FloatArray) -> FloatArray:
    """Lengths of the geodesics from one point to many.

    Parameters
    ----------
    start : Point
        The end they share.
    lat_deg, lon_deg : (n,) float64 [deg]
        The other ends.

    Returns
    -------
    (n,) float64 [m]
        Their lengths; 0 where an end is the start itself.

    References
    ----------
    As for :func:`geodesic_line`.
    """
    lat = np.asarray(lat_deg, dtype=np.float64)
    here = np.full(lat.shape, start.lat_deg)
    _, _, length = _WGS84.inv(
        np.full(lat.shape, start.lon_deg), here, np.asarray(lon_deg), lat
    )
    return np.asarray(length, dtype=np.float64)


def within_half_turn(lon_deg: ScalarOrArray) -> ScalarOrArray:
    """Longitude on the turn from −180 to 180.

    Parameters
    ----------
    lon_deg : float or float64 array of any shape [deg]
        A longitude that may have run past the antimeridian, or a difference of two.

    Returns
    -------
    same shape [deg]
        −180 <= longitude < 180.
    """
    return (lon_deg + HALF_TURN_DEG) % TURN_DEG - HALF_TURN_DEG


def _unwrapped(lon_deg: FloatArray, path: GeodesicPath) -> FloatArray:
    """Longitudes [deg] without a jump along the path.

    A shortest line goes east or west all the way and less than half a turn, so each
    point is settled by itself. Distances may stand in any order, which following the
    jumps from point to point would not survive.
    """
    since_start = lon_deg - path.start.lon_deg
    if path.azimuth_deg <= HALF_TURN_DEG:
        return np.where(since_start < -QUARTER_TURN_DEG, lon_deg + TURN_DEG, lon_deg)
    return np.where(since_start > QUARTER_TURN_DEG, lon_deg - TURN_DEG, lon_deg)


def _turned(azimuth_deg: float) -> float:
    """Bearing [deg] in 0 <= bearing < 360."""
    turned = float(azimuth_deg) % TURN_DEG
    # a bearing of -1e-15 comes out of the remainder as 360 itself
    return 0.0 if turned == TURN_DEG else turned


def beside_path(
    path: GeodesicPath, dist_m: FloatArray, offset_m: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """Places beside a path, square to it.

    Parameters
    ----------
    path : GeodesicPath
    dist_m : (n,) float64 [m]
        Distance along the path from its start.
    offset_m : (n,) float64 [m]
        Distance from the path, positive to the right looking from its start.

    Returns
    -------
    lat_deg, lon_deg : (n,) float64 [deg]
        Longitudes may lie outside ±180.
    """
    dist = np.asarray(dist_m, dtype=np.float64)
    lat, lon = points_at(path, dist)
    here = np.full(dist.shape, path.start.lat_deg)
    origin = np.full(dist.shape, path.start.lon_deg)
    azimuth = np.full(dist.shape, path.azimuth_deg)
    _, _, back = _WGS84.fwd(origin, here, azimuth, dist)
    right = np.asarray(back) + HALF_TURN_DEG + QUARTER_TURN_DEG
    there_lon, there_lat, _ = _WGS84.fwd(lon, lat, right, np.asarray(offset_m))
    return np.asarray(there_lat), np.asarray(there_lon)
