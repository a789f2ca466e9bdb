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
    if has_ground(terrain, station):
        return
    point = station.point
    if fits_exchanged(terrain, point):
        msg = (
            f"--{role}: {point.lat_deg:.9g}, {point.lon_deg:.9g} lies outside the DEM. "
            "With latitude and longitude exchanged the point fits: "
            f'--{role} "{point.lon_deg:.9g},{point.lat_deg:.9g}".'
        )
        raise OutsideDemError(msg)
    msg = (
        f"--{role}: {_named(station)} lies outside the DEM, which covers "
        f"{_outline_text(terrain)}. Check sign and order, or add files."
    )
    raise OutsideDemError(msg)


def has_ground(terrain: Terrain, station: Station) -> bool:
    """Whether a station lies within the files, or needs no ground of theirs."""
    stated = station.amsl_m is not None or station.surveyed_ground_m is not None
    return stated or is_inside(terrain, station.point)


def fits_exchanged(terrain: Terrain, point: Point) -> bool:
    """Whether the files hold a point once latitude and longitude change places."""
    try:
        other = Point(lat_deg=point.lon_deg, lon_deg=point.lat_deg)
    except InputError:
        return False
    return is_inside(terrain, other)


def _named(station: Station) -> str:
    point = station.point
    where = f"{point.lat_deg:.5f}, {point.lon_deg:.5f}"
    return f"{station.name} ({where})" if station.name else where


def _outline_text(terrain: Terrain) -> str:
    """The box of latitude and longitude that the files cover, in words."""
    south, west, north, east = terrain.outline_deg()
    across = f"{_lettered(west, 'EW')} to {_lettered(east, 'EW')}"
    return f"{_lettered(south, 'NS')} to {_lettered(north, 'NS')}, {across}"


def _lettered(value_deg: float, letters: str) -> str:
    """Degrees with the letter of their side instead of a sign."""
    return f"{abs(value_deg):.3f} {letters[value_deg < 0.0]}"
