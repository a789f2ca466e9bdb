"""Sites from point layers: GeoJSON, GeoPackage, GPX, KML and shapefiles."""

import re
import warnings
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Final

from profiler.errors import DemError, InputError
from profiler.model import Note, Point
from profiler.shapes.site import (
    GROUND_HEADINGS,
    NAME_HEADINGS,
    NOTE_HEADINGS,
    Site,
    SiteFile,
    column_of,
    ground_from,
)

#: The layer of a GPX file that holds places; the others repeat tracks point by point.
_GPX_LAYER: Final = "waypoints"
#: What each kind of file begins with, comments and marks left out.
_BEGINNINGS: Final = {
    ".geojson": b"{",
    ".json": b"{",
    ".gpkg": b"SQLite format 3",
    ".shp": b"'\n",
    ".gpx": b"gpx",
    ".kml": b"kml",
}
#: Endings of the names of files that `read_layer_sites` reads.
LAYER_SUFFIXES: Final = tuple(_BEGINNINGS)
_XML: Final = (".gpx", ".kml")
#: The root of an XML file must begin within so much [bytes]; our choice.
_ROOT_WITHIN: Final = 65_536
_BEFORE_ROOT: Final = re.compile(rb"<\?.*?\?>|<!--.*?-->", re.DOTALL)
_ROOT: Final = re.compile(rb"[^<]*<(?:[\w.-]+:)?([\w.-]+)")
_DECLARES: Final = re.compile(rb"<!(?:DOCTYPE|ENTITY)", re.IGNORECASE)
#: Text that turns a file into a list of other files and hosts to read.
_REDIRECTS: Final = b"<OGRVRTDataSource"


@dataclass(frozen=True, slots=True, kw_only=True)
class _Layer:
    """One layer as read."""

    crs: str | None
    shapes: Any
    """(n,) shapely geometries, None where a feature has none."""
    columns: dict[str, Any]
    """Column name to (n,) array of values."""


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
    _refuse_pretender(path)
    left = _Left()
    sites: list[Site] = []
    headings: list[str] = []
    for layer in _layers(path):
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


def _refuse_pretender(path: Path) -> None:
    """Refuse a file that is not what its name says, or whose XML is a trap."""
    suffix = path.suffix.lower()
    if suffix == ".gpkg":
        with path.open("rb") as file:
            head = data = file.read(len(_BEGINNINGS[suffix]))
    else:
        data = path.read_bytes().replace(b"\x00", b"")  # UTF-16 reads like ASCII
        head = data.lstrip(b"\xef\xbb\xbf\xff\xfe \t\r\n")
    if not head:
        msg = f"{path.name} is empty."
        raise InputError(msg)
    if suffix in _XML:
        root = _ROOT.match(_BEFORE_ROOT.sub(b"", data[:_ROOT_WITHIN]))
        head = root[1] if root else b""
        if _DECLARES.search(data):
            msg = (
                f"{path.name} declares its own XML entities or document type and is "
                "not read; save it again without them."
            )
            raise InputError(msg)
    if _REDIRECTS in data or not head.startswith(_BEGINNINGS[suffix]):
        msg = f"{path.name} is not what its name says: no {suffix[1:]} file."
        raise InputError(msg)


def _layers(path: Path) -> list[_Layer]:
    import shapely
    from pyogrio import errors

    whole = str(path.resolve())
    try:
        with warnings.catch_warnings():
            # the library warns of odd fields and dates, which are not read here
            warnings.simplefilter("ignore")
            return [_layer(whole, name) for name in _layer_names(whole)]
    except (
        errors.DataSourceError,
        errors.DataLayerError,
        errors.FeatureError,
        errors.GeometryError,
        errors.FieldError,
        errors.CRSError,
        shapely.errors.ShapelyError,
        UnicodeDecodeError,
    ) as error:
        cause = str(error).replace(whole, path.name).replace("; ", ", ").rstrip(". ")
        if "not recognized" in cause:
            cause = f"it is broken, or no {path.suffix[1:].lower()} file"
        msg = f"{path.name} cannot be read: {cause}."
        raise InputError(msg) from error


def _layer_names(whole: str) -> list[str]:
    import pyogrio

    names = [name for name, kind in pyogrio.list_layers(whole) if kind is not None]
    if whole.lower().endswith(".gpx"):
        return [name for name in names if name == _GPX_LAYER]
    return names


def _layer(whole: str, name: str) -> _Layer:
    import pyogrio
    import shapely
    from pyogrio import raw

    fields = pyogrio.read_info(whole, layer=name)["fields"]
    wanted = [field for field in fields if _is_wanted(field)]
    meta, _, shapes, values = raw.read(whole, layer=name, columns=wanted, force_2d=True)
    columns = dict(zip(meta["fields"], values, strict=True))
    return _Layer(crs=meta["crs"], shapes=shapely.from_wkb(shapes), columns=columns)


def _is_wanted(field: str) -> bool:
    wanted = (*NAME_HEADINGS, *NOTE_HEADINGS, *GROUND_HEADINGS)
    return column_of([field], wanted) is not None


def _sites_of(layer: _Layer, path: Path, left: _Left) -> Iterator[Site]:
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
    places = _to_wgs84([points[i] for i in kept], layer.crs, path)
    for i, (lat_deg, lon_deg) in zip(kept, places, strict=True):
        name = _text(layer, name_at, i)
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
            note=_text(layer, note_at, i),
        )


def _text(layer: _Layer, column: int | None, row: int) -> str:
    if column is None:
        return ""
    value = layer.columns[list(layer.columns)[column]][row]
    return "" if value is None or value != value else str(value).strip()


def _single_point(shape: Any) -> Any:
    """The point that a shape is, or a group of one is; None for all others."""
    if shape is None or shape.is_empty:
        return None
    if shape.geom_type == "MultiPoint" and len(shape.geoms) == 1:
        return shape.geoms[0]
    return shape if shape.geom_type == "Point" else None


def _to_wgs84(
    points: list[Any], crs: str | None, path: Path
) -> list[tuple[float, float]]:
    """Latitude and longitude [deg] of points whose x is easting or longitude."""
    import numpy as np

    from profiler.earth.projection import crs_from_user, projector

    if not crs:
        msg = (
            f"{path.name} states no CRS; save it with one, or as CSV with the columns "
            "name, lat, lon."
        )
        raise InputError(msg)
    try:
        found = projector(crs) if "[" in crs else crs_from_user(crs)
    except (DemError, InputError) as error:
        msg = f"{path.name}: its CRS cannot be used. {error}"
        raise InputError(msg) from error
    x = np.array([point.x for point in points])
    y = np.array([point.y for point in points])
    lat_deg, lon_deg = found.to_wgs84(x, y)
    return list(zip(lat_deg.tolist(), lon_deg.tolist(), strict=True))
