"""Points beyond the elevation model, told with the options that would mend it."""

import itertools
from typing import Final

import numpy as np

from profiler.constants import M_PER_KM, TURN_DEG
from profiler.earth import geodesic_path, points_at, within_half_turn
from profiler.errors import InputError, OutsideDemError
from profiler.model import GeodesicPath, Point, Station
from profiler.output.numbers import box, latitude, longitude
from profiler.sight.outside import fits_exchanged, has_ground
from profiler.terrain import Terrain
from profiler.terrain.near import is_inside

#: Pieces a path is cut into to find where it leaves the files, and halvings of the
#: piece in which it does [1]; together they place the edge within 1500 km / 2**26.
PIECES: Final = 64
HALVINGS: Final = 20
#: Decimals of a place where files end [1]; a kilometre, enough to find the next file.
EDGE_DECIMALS: Final = 2


def check_ends(
    terrain: Terrain, eye: Station, target: Station, *, in_degrees: bool = True
) -> None:
    """Refuse an end beyond every file, unless its heights are stated.

    Parameters
    ----------
    terrain : Terrain
    eye, target : Station
    in_degrees : bool
        Whether the points were typed as latitude,longitude, so that the exchanged
        numbers can be offered.

    Raises
    ------
    OutsideDemError
        The message offers the exchanged numbers if those fit, says from where to
        where the path has no ground, or names the box that the files cover.
    """
    inside = [has_ground(terrain, station) for station in (eye, target)]
    for station, role, known in zip((eye, target), ("from", "to"), inside, strict=True):
        if in_degrees and not known and fits_exchanged(terrain, station.point):
            raise OutsideDemError(_exchanged_text(terrain, station.point, role))
    if all(inside):
        return
    if any(inside):
        text = _gap_text(terrain, eye.point, target.point, leaves=inside[0])
        if text:
            raise OutsideDemError(text)
    role, station = ("to", target) if inside[0] else ("from", eye)
    covers = box(*terrain.outline_deg(), decimals=EDGE_DECIMALS)
    msg = (
        f"--{role}: {_named(station)} lies outside the DEM, which covers {covers}. "
        "Check sign and order, or add files."
    )
    raise OutsideDemError(msg)


def _named(station: Station) -> str:
    point = station.point
    where = f"{latitude(point.lat_deg)} {longitude(point.lon_deg)}"
    return f"{station.name} ({where})" if station.name else where


def _exchanged_text(terrain: Terrain, point: Point, role: str) -> str:
    south, west, north, east = terrain.outline_deg()
    turns = (-TURN_DEG, 0.0, TURN_DEG)
    what = f"Latitude {point.lat_deg:.9g}"
    if not any(west <= point.lon_deg + turn <= east for turn in turns):
        what = f"Longitude {point.lon_deg:.9g}"
    elif south <= point.lat_deg <= north:
        what = f"{point.lat_deg:.9g}, {point.lon_deg:.9g}"
    return (
        f"{what} lies outside the DEM. With latitude and longitude exchanged the point "
        f'fits: --{role} "{point.lon_deg:.9g},{point.lat_deg:.9g}".'
    )


def _gap_text(terrain: Terrain, start: Point, end: Point, *, leaves: bool) -> str:
    """Which kilometres beyond the last file have no ground, and where it ends."""
    try:
        path = geodesic_path(start, end)
    except InputError:
        return ""  # too far or one place: another message says so
    edge_m = _edge_of(terrain, path, leaves=leaves)
    if edge_m is None:
        return ""
    first, last = (edge_m, path.length_m) if leaves else (0.0, edge_m)
    at = _point_at(path, edge_m)
    ends = _edge_text(terrain, at)
    return (
        f"No ground from {first / M_PER_KM:.1f} to {last / M_PER_KM:.1f} km; this DEM "
        f"ends at {ends}. Add the file beyond, or choose a nearer point."
    )


def _edge_of(terrain: Terrain, path: GeodesicPath, *, leaves: bool) -> float | None:
    """Where the stretch without files begins, or where it ends [m]."""
    dist = np.linspace(0.0, path.length_m, PIECES + 1)
    known = [is_inside(terrain, _point_at(path, d)) for d in dist]
    if not any(known):
        return None
    pairs = list(itertools.pairwise(range(PIECES + 1)))
    # from the outside end, the first piece that reaches a file
    order = reversed(pairs) if leaves else pairs
    low, high = next((dist[a], dist[b]) for a, b in order if known[a] != known[b])
    for _ in range(HALVINGS):
        middle = (low + high) / 2.0
        if is_inside(terrain, _point_at(path, middle)) == leaves:
            low = middle
        else:
            high = middle
    return float(low if leaves else high)


def _point_at(path: GeodesicPath, dist_m: float) -> Point:
    lat, lon = points_at(path, np.array([dist_m]))
    return Point(lat_deg=float(lat[0]), lon_deg=within_half_turn(float(lon[0])))


def _edge_text(terrain: Terrain, at: Point) -> str:
    """The side of the files' box that a place on their edge is nearest to."""
    south, west, north, east = terrain.outline_deg()
    lon = at.lon_deg + TURN_DEG if at.lon_deg < west - (east - west) else at.lon_deg
    squeeze = float(np.cos(np.radians(at.lat_deg)))
    off_lat = min(abs(at.lat_deg - south), abs(at.lat_deg - north))
    off_lon = min(abs(lon - west), abs(lon - east)) * squeeze
    if off_lat < off_lon:
        return latitude(at.lat_deg, EDGE_DECIMALS)
    return longitude(at.lon_deg, EDGE_DECIMALS)
