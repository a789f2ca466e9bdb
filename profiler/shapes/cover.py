"""Trees and buildings from files of polygons and points with heights."""

import re
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from os import PathLike
from pathlib import Path
from typing import Any, Final

import numpy as np

from profiler.constants import FOOT_M, HEIGHT_UNIT_M, TALLEST_MAST_M
from profiler.earth.projection import Projector
from profiler.errors import InputError
from profiler.model import CoverKind, Note, Point
from profiler.shapes.layers import LAYER_SUFFIXES, Layer, read_layers
from profiler.shapes.outline import outline_of
from profiler.shapes.site import column_of, decimal_from, plain_heading

#: Radius of a point's disc when its file gives none [m]; our choice: a tree's crown.
DISC_RADIUS_M: Final = 5.0
_METRES: Final = (
    "height_m",
    "height",
    "tree_height_m",
    "tree_height",
    "canopy_height_m",
    "canopy_height",
    "building_height_m",
    "building_height",
    "h_m",
    "h",
)
_FEET: Final = (
    "height_ft",
    "tree_height_ft",
    "canopy_height_ft",
    "building_height_ft",
    "h_ft",
)
#: Headings of the height, the most telling first, and the metres in their unit; the
#: last two as a shapefile, which keeps ten letters, cuts them.
HEIGHT_HEADINGS: Final = {
    **dict.fromkeys(_METRES, 1.0),
    **dict.fromkeys(_FEET, FOOT_M),
    "tree_heigh": 1.0,
    "building_h": 1.0,
}
RADIUS_HEADINGS: Final = {
    **dict.fromkeys(("radius_m", "radius", "crown_radius_m", "crown_radius"), 1.0),
    **dict.fromkeys(("radius_ft", "crown_radius_ft"), FOOT_M),
}
#: Headings of a name; an "id" is a number among others and names nothing.
COVER_NAME_HEADINGS: Final = ("name", "label", "title")
KIND_HEADINGS: Final = ("kind", "type", "class", "cover")
_NUMBER_AND_UNIT: Final = re.compile(r"(.*?)\s*(m|ft)?")


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class CoverShape:
    """Trees or a building: an outline on the map, or a disc around a point."""

    name: str
    """As the file has it, or "polygon 12", "point 3" by its number in the file."""
    kind: CoverKind
    height_m: float
    """Above bare ground [m], > 0."""
    crs: Projector
    """The map that the outline is drawn on; its edges are straight there."""
    outline: Any = None
    """Shapely polygons in that map's unit, longitude or easting first; None: a disc."""
    centre: Point | None = None
    """Middle of the disc; None for an outline."""
    radius_m: float = 0.0
    """Radius of the disc [m]."""


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class CoverFile:
    """The trees and buildings of a file, and what was left out of it."""

    shapes: tuple[CoverShape, ...]
    """In the order of the file."""
    notes: tuple[Note, ...] = ()
    """What was left out, and how much of it."""


@dataclass(slots=True, kw_only=True)
class _Left:
    """How many features were left out, and those that lack a height."""

    no_areas: int = 0
    no_height: list[str]


def read_cover(
    path: str | PathLike[str], *, otherwise_m: float | None = None
) -> tuple[CoverShape, ...]:
    """Trees and buildings of a file, as `read_cover_file` reads them, without notes.

    Parameters
    ----------
    path : path
        GeoJSON, GeoPackage, KML, FlatGeobuf or a shapefile; its ending says which.
    otherwise_m : float or None [m]
        Height of features that state none.

    Raises
    ------
    InputError
        If the file is missing or cannot be used.
    """
    return read_cover_file(path, otherwise_m=otherwise_m).shapes


def read_cover_file(
    path: str | PathLike[str], *, otherwise_m: float | None = None
) -> CoverFile:
    """Trees and buildings of a file, and how many of its features were left out.

    Parameters
    ----------
    path : path
        GeoJSON, GeoPackage, KML, FlatGeobuf or a shapefile; its ending says which.
    otherwise_m : float or None [m]
        Height of features that state none; None: a file with such features is
        refused.

    Returns
    -------
    CoverFile
        Polygons with their holes, and points as discs of their column ``radius_m``,
        else of `DISC_RADIUS_M`. Heights come from a column such as ``height_m``,
        ``tree_height`` or ``building_height_ft``; features of height 0 are none. A
        column ``kind``, ``type`` or ``class`` that speaks of a building makes one,
        else a height of the building's own does; all else are trees.

    Raises
    ------
    InputError
        If the file is missing, cannot be read, states no CRS, holds no polygon or
        point, or one without a height or with one that cannot be.
    """
    file = Path(path)
    if not file.is_file():
        what = "is a folder, not a file" if file.is_dir() else "does not exist"
        msg = f"The file of cover {file} {what}."
        raise InputError(msg)
    if file.suffix.lower() not in LAYER_SUFFIXES:
        known = ", ".join(LAYER_SUFFIXES)
        msg = f"{file.name}: trees and buildings are read from files in {known}."
        raise InputError(msg)
    left = _Left(no_height=[])
    try:
        layers = read_layers(file, _is_wanted)
    except OSError as error:
        msg = f"The file of cover {file} cannot be opened: {error.strerror}."
        raise InputError(msg) from error
    shapes = [s for layer in layers for s in _shapes_of(layer, file, otherwise_m, left)]
    if left.no_height:
        raise _without_height(file, layers, left.no_height)
    if not shapes:
        other = f" ({left.no_areas} lines or empty shapes)" if left.no_areas else ""
        msg = f"{file.name} holds no polygon or point with a height above 0{other}."
        raise InputError(msg)
    return CoverFile(shapes=tuple(shapes), notes=_notes(file, left))


def _without_height(file: Path, layers: list[Layer], lacking: list[str]) -> InputError:
    headings = [heading for layer in layers for heading in layer.columns]
    if column_of(headings, tuple(HEIGHT_HEADINGS)) is None:
        msg = f'{file.name} has no column of heights; name it "height_m".'
        return InputError(msg)
    more = f" and {len(lacking) - 1} more" if len(lacking) > 1 else ""
    msg = (
        f"{file.name}: {lacking[0]}{more} state no height. Fill it in, or write 0 "
        "where nothing stands."
    )
    return InputError(msg)


def _notes(file: Path, left: _Left) -> tuple[Note, ...]:
    if not left.no_areas:
        return ()
    text = (
        f"{file.name}: features that are neither polygons nor points, left out: "
        f"{left.no_areas}."
    )
    return (Note(code="cover-skipped", text=text),)


def _is_wanted(field: str) -> bool:
    wanted = (
        *COVER_NAME_HEADINGS,
        *KIND_HEADINGS,
        *HEIGHT_HEADINGS,
        *RADIUS_HEADINGS,
    )
    return column_of([field], wanted) is not None


def _shapes_of(
    layer: Layer, file: Path, otherwise_m: float | None, left: _Left
) -> Iterator[CoverShape]:
    """The shapes of a layer that stand above ground; the others are counted."""
    cell = _cells(layer)
    for i, shape in enumerate(layer.shapes):
        flat = None if shape is None or shape.is_empty else shape.geom_type
        if flat not in ("Polygon", "MultiPolygon", "Point", "MultiPoint"):
            left.no_areas += 1
            continue
        number = f"{'polygon' if 'Polygon' in flat else 'point'} {i + 1}"
        name = cell(COVER_NAME_HEADINGS, i)[1] or number
        heading, text = cell(tuple(HEIGHT_HEADINGS), i)
        where = f'"{name}" in {file.name}'
        height_m = otherwise_m
        if text:
            height_m = _metres(text, HEIGHT_HEADINGS[heading], "height", where)
        if height_m is None:
            left.no_height.append(f'"{name}"')
            continue
        if height_m == 0.0:
            continue
        crs = layer.projector(file, remedy="save it with one")
        kind = _kind(cell(KIND_HEADINGS, i)[1], heading if text else "")
        if "Polygon" in flat:
            outline = outline_of(shape, crs, where=where)
            yield CoverShape(
                name=name, kind=kind, height_m=height_m, crs=crs, outline=outline
            )
            continue
        radius_m = _radius(*cell(tuple(RADIUS_HEADINGS), i), where)
        for centre in _centres(shape, crs, where):
            yield CoverShape(
                name=name,
                kind=kind,
                height_m=height_m,
                crs=crs,
                centre=centre,
                radius_m=radius_m,
            )


def _radius(heading: str, text: str, where: str) -> float:
    """Radius of a disc as its cell states it, else the usual one [m]."""
    if not text:
        return DISC_RADIUS_M
    return _metres(text, RADIUS_HEADINGS[heading], "radius", where)


def _cells(layer: Layer) -> Callable[[tuple[str, ...], int], tuple[str, str]]:
    """Finds, for a row, the plain heading and the text of the first column wanted."""
    headings = list(layer.columns)

    def cell(wanted: tuple[str, ...], row: int) -> tuple[str, str]:
        column = column_of(headings, wanted)
        if column is None:
            return "", ""
        return plain_heading(headings[column]), layer.text(column, row)

    return cell


def _kind(text: str, heading: str) -> CoverKind:
    if "build" in text.casefold() or (not text and heading.startswith("build")):
        return CoverKind.BUILDING
    return CoverKind.TREES


def _metres(text: str, unit_m: float, what: str, where: str) -> float:
    """A height or radius in a cell [m]; a unit in the cell wins over its heading."""
    parts = _NUMBER_AND_UNIT.fullmatch(text)
    number, unit = (text, None) if parts is None else parts.groups()
    value = decimal_from(number, what=what, where=where)
    value *= unit_m if unit is None else HEIGHT_UNIT_M[unit]
    if what == "height":
        limits = f"0 to {TALLEST_MAST_M:g} m; it counts from bare ground, not the sea"
        is_one = 0.0 <= value <= TALLEST_MAST_M
    else:
        limits = f"above 0 to {TALLEST_MAST_M:g} m"
        is_one = 0.0 < value <= TALLEST_MAST_M
    if not is_one:
        msg = f"{where}: {what} {text} is not within {limits}."
        raise InputError(msg)
    return value


def _centres(shape: Any, crs: Projector, where: str) -> Iterator[Point]:
    points = getattr(shape, "geoms", [shape])
    for point in points:
        lat, lon = crs.to_wgs84(np.array([point.x]), np.array([point.y]))
        try:
            yield Point(lat_deg=float(lat[0]), lon_deg=float(lon[0]))
        except InputError as error:
            msg = f"{where}: {error}"
            raise InputError(msg) from error
