"""Sites from point layers: GeoJSON, GeoPackage, GPX, KML and shapefiles."""

from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

from profiler.errors import InputError
from profiler.model import Note, Point
from profiler.shapes.layers import Layer, read_layers
from profiler.shapes.site import (
    GROUND_HEADINGS,
    NAME_HEADINGS,
    NOTE_HEADINGS,
    Site,
    SiteFile,
    column_of,
    ground_from,
)


@dataclass(slots=True, kw_only=True)
class _Left:
    """How many features were left out."""

    no_points: int = 0
    no_names: int = 0


def read_layer_sites(path: Path) -> SiteFile:
    """Sites of every point layer in a file; of GPX, of its waypoints.

    Parameters
    ----------
    path : Path
        An existing file whose name ends in one of `LAYER_SUFFIXES`. Its CRS may be
        any that pyproj knows; the third coordinate of points is not used.

    Returns
    -------
    SiteFile
        In the order of the file; latitude and longitude on WGS84 [deg], ground [m].
        Features that are no points, or have no name, are counted in its notes.

    Raises
    ------
    InputError
        If the file cannot be read, is not what its name says, declares XML entities,
        states no CRS, or holds no named point.
    """
    left = _Left()
    sites: list[Site] = []
    headings: list[str] = []
    for layer in read_layers(path, _is_wanted):
        headings += layer.columns
        sites.extend(_sites_of(layer, path, left))
    if not sites and left.no_names:
        msg = (
            f"{path.name} has points but no names (its columns: {', '.join(headings)})"
            '; give them a column "name".'
        )
        raise InputError(msg)
    if not sites:
        other = f" ({left.no_points} lines, areas or empty shapes)"
        msg = f"{path.name} holds no points{other if left.no_points else ''}."
        raise InputError(msg)
    return SiteFile(sites=tuple(sites), notes=_notes(path, left))


def _notes(path: Path, left: _Left) -> tuple[Note, ...]:
    parts = (
        ("that are no points", left.no_points),
        ("that have no name", left.no_names),
    )
    return tuple(
        Note(code="sites_skipped", text=f"{path.name}: features {why}, left out: {n}.")
        for why, n in parts
        if n
    )


def _is_wanted(field: str) -> bool:
    wanted = (*NAME_HEADINGS, *NOTE_HEADINGS, *GROUND_HEADINGS)
    return column_of([field], wanted) is not None


def _sites_of(layer: Layer, path: Path, left: _Left) -> Iterator[Site]:
    """Named points of a layer; the others are counted."""
    points = [_single_point(shape) for shape in layer.shapes]
    left.no_points += sum(point is None for point in points)
    kept = [i for i, point in enumerate(points) if point is not None]
    headings = list(layer.columns)
    name_at = column_of(headings, NAME_HEADINGS)
    note_at = column_of(headings, NOTE_HEADINGS)
    ground_at = column_of(headings, tuple(GROUND_HEADINGS))
    if not kept:
        return
    places = _to_wgs84([points[i] for i in kept], layer, path)
    for i, (lat_deg, lon_deg) in zip(kept, places, strict=True):
        name = layer.text(name_at, i)
        if not name:
            left.no_names += 1
            continue
        ground_m = None
        if ground_at is not None:
            heading = headings[ground_at]
            value = layer.columns[heading][i]
            ground_m = ground_from(value, heading=heading, where=f'Site "{name}"')
        try:
            point = Point(lat_deg=float(lat_deg), lon_deg=float(lon_deg))
        except InputError as error:
            msg = f'Site "{name}" in {path.name}: {error}'
            raise InputError(msg) from error
        yield Site(
            name=name,
            point=point,
            surveyed_ground_m=ground_m,
            note=layer.text(note_at, i),
        )


def _single_point(shape: Any) -> Any:
    """The point that a shape is, or a group of one is; None for all others."""
    if shape is None or shape.is_empty:
        return None
    if shape.geom_type == "MultiPoint" and len(shape.geoms) == 1:
        return shape.geoms[0]
    return shape if shape.geom_type == "Point" else None


def _to_wgs84(points: list[Any], layer: Layer, path: Path) -> list[tuple[float, float]]:
    """Latitude and longitude [deg] of points whose x is easting or longitude."""
    remedy = "save it with one, or as CSV with the columns name, lat, lon"
    crs = layer.projector(path, remedy=remedy)
    x = np.array([point.x for point in points])
    y = np.array([point.y for point in points])
    lat_deg, lon_deg = crs.to_wgs84(x, y)
    return list(zip(lat_deg.tolist(), lon_deg.tolist(), strict=True))
