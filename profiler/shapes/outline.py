"""Outlines on a map made fit for use: valid, and in one piece over the date line."""

from typing import Any

import numpy as np

from profiler.earth.projection import Projector
from profiler.errors import InputError
from profiler.model import FloatArray


def outline_of(shape: Any, crs: Projector, *, where: str) -> Any:
    """The area of a shape: valid, and without a jump of longitude.

    Parameters
    ----------
    shape : shapely Polygon or MultiPolygon
        In the unit of the map, longitude or easting first.
    crs : Projector
        The map.
    where : str
        The feature, for the error message.

    Returns
    -------
    shapely geometry
        Polygons with their holes; empty if the shape has no area. A ring that crosses
        itself is taken apart into areas.

    Raises
    ------
    InputError
        If coordinates are not finite, or an outline runs around a pole.
    """
    import shapely

    found = []
    for part in shapely.get_parts(shape):
        if not np.all(np.isfinite(shapely.get_coordinates(part))):
            msg = f"{where}: its outline has coordinates that are no numbers."
            raise InputError(msg)
        polygon = _unrolled(part, crs, where) if crs.is_geographic else part
        found.append(polygon if polygon.is_valid else shapely.make_valid(polygon))
    if len(found) == 1 and found[0].geom_type == "Polygon":
        return found[0]
    # what make_valid leaves beside areas are lines without width
    whole = shapely.get_parts(shapely.union_all(found))
    areas = [p for p in whole if "Polygon" in p.geom_type]
    return shapely.union_all(areas)


def _unrolled(polygon: Any, crs: Projector, where: str) -> Any:
    """A polygon whose longitudes run on past half a turn instead of jumping."""
    from shapely import Polygon

    shell = _ring(np.array(polygon.exterior.coords), crs.turn, where)
    middle = float(shell[:, 0].mean())
    holes = []
    for hole in polygon.interiors:
        ring = _ring(np.array(hole.coords), crs.turn, where)
        ring[:, 0] += crs.turn * np.round((middle - ring[:, 0].mean()) / crs.turn)
        holes.append(ring)
    return Polygon(shell, holes)


def _ring(coordinates: FloatArray, turn: float, where: str) -> FloatArray:
    ring = coordinates[:, :2].copy()
    ring[:, 0] = np.unwrap(ring[:, 0], period=turn)
    if abs(ring[-1, 0] - ring[0, 0]) > turn / 2.0:
        msg = f"{where}: its outline runs around a pole; draw it on a map of the pole."
        raise InputError(msg)
    return ring
