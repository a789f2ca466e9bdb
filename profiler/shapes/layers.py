"""Layers of GeoJSON, GeoPackage, GPX, KML, FlatGeobuf and shapefiles, as they stand.

What they mean, places or trees and buildings, is decided by who reads them.
"""

import re
import warnings
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Final

from profiler.earth.projection import Projector, crs_from_user, projector
from profiler.errors import DemError, InputError

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
    ".fgb": b"fgb",
}
#: Kinds too large to be searched whole, and no text.
_LARGE: Final = (".gpkg", ".fgb")
#: Endings of the names of files that `read_layers` reads.
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
class Layer:
    """One layer as read."""

    crs: str | None
    shapes: Any
    """(n,) shapely geometries, None where a feature has none."""
    columns: dict[str, Any]
    """Column name to (n,) array of values."""

    def text(self, column: int | None, row: int) -> str:
        """A cell as text; empty without a column, a value or anything but blanks."""
        if column is None:
            return ""
        value = self.columns[list(self.columns)[column]][row]
        return "" if value is None or value != value else str(value).strip()

    def projector(self, path: Path, *, remedy: str) -> Projector:
        """The way from the layer's CRS to WGS84.

        Raises
        ------
        InputError
            If the layer states no CRS (``remedy`` says what else to do), or one that
            cannot be used.
        """
        if not self.crs:
            msg = f"{path.name} states no CRS; {remedy}."
            raise InputError(msg)
        try:
            return projector(self.crs) if "[" in self.crs else crs_from_user(self.crs)
        except (DemError, InputError) as error:
            msg = f"{path.name}: its CRS cannot be used. {error}"
            raise InputError(msg) from error


def _refuse_pretender(path: Path) -> None:
    """Refuse a file that is not what its name says, or whose XML is a trap."""
    suffix = path.suffix.lower()
    if suffix in _LARGE:
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


def read_layers(path: Path, is_wanted: Callable[[str], bool]) -> list[Layer]:
    """Every layer that has shapes; of GPX, its waypoints.

    Parameters
    ----------
    path : Path
        An existing file whose name ends in one of `LAYER_SUFFIXES`.
    is_wanted : function
        Whether a column of that heading is read.

    Raises
    ------
    InputError
        If the file cannot be read, is not what its name says or declares XML
        entities.
    """
    _refuse_pretender(path)
    import shapely
    from pyogrio import errors

    whole = str(path.resolve())
    try:
        with warnings.catch_warnings():
            # the library warns of odd fields and dates, which are not read here
            warnings.simplefilter("ignore")
            return [_layer(whole, n, is_wanted) for n in _layer_names(whole)]
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


def _layer(whole: str, name: str, is_wanted: Callable[[str], bool]) -> Layer:
    import pyogrio
    import shapely
    from pyogrio import raw

    fields = pyogrio.read_info(whole, layer=name)["fields"]
    wanted = [field for field in fields if is_wanted(field)]
    meta, _, shapes, values = raw.read(whole, layer=name, columns=wanted, force_2d=True)
    columns = dict(zip(meta["fields"], values, strict=True))
    return Layer(crs=meta["crs"], shapes=shapely.from_wkb(shapes), columns=columns)
