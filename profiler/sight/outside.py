"""Points that miss the elevation model, with what probably went wrong."""

from profiler.errors import InputError, OutsideDemError
from profiler.model import Point, Station
from profiler.terrain import Terrain
from profiler.terrain.near import is_inside


def check_inside(terrain: Terrain, station: Station, *, role: str) -> None:
    """Refuse a point outside every file, unless its heights are stated.

    Parameters
    ----------
    terrain : Terrain
    station : Station
    role : str
        "from" or "to", for the message.

    Raises
    ------
    OutsideDemError
        If the point misses the DEM; says so when the exchanged numbers would fit.
    """
    point = station.point
    if is_inside(terrain, point):
        return
    if station.amsl_m is not None or station.surveyed_ground_m is not None:
        return
    if _fits_exchanged(terrain, point):
        msg = (
            f"--{role}: {point.lat_deg:g}, {point.lon_deg:g} lies outside the DEM. "
            "With latitude and longitude exchanged the point fits: "
            f'--{role} "{point.lon_deg:g},{point.lat_deg:g}".'
        )
        raise OutsideDemError(msg)
    msg = (
        f"--{role}: {_named(station)} lies outside the DEM, which covers "
        f"{outline_text(terrain)}. Check sign and order, or add files."
    )
    raise OutsideDemError(msg)


def _fits_exchanged(terrain: Terrain, point: Point) -> bool:
    try:
        other = Point(lat_deg=point.lon_deg, lon_deg=point.lat_deg)
    except InputError:
        return False
    return is_inside(terrain, other)


def _named(station: Station) -> str:
    point = station.point
    where = f"{point.lat_deg:.5f}, {point.lon_deg:.5f}"
    return f"{station.name} ({where})" if station.name else where


def outline_text(terrain: Terrain) -> str:
    """The box of latitude and longitude that the files cover, in words."""
    south, west, north, east = terrain.outline_deg()
    return f"{south:.3f} to {north:.3f} N, {west:.3f} to {east:.3f} E"
