"""Coordinates of a map or DEM: its CRS, its units and the way to and from WGS84."""

import math
import re
from dataclasses import dataclass, replace
from functools import lru_cache

import numpy as np
from pyproj import CRS, Transformer
from pyproj.exceptions import CRSError, ProjError

from profiler.constants import HEIGHT_UNIT_M, TURN_DEG
from profiler.errors import DemError, InputError
from profiler.model import FloatArray

#: Confidence above which a CRS without a code is given the code it matches [%];
#: our choice: name and definition agree.
SURE_OF_CODE = 90
#: How far two units of length may differ and still be one [1]; our choice: the two
#: feet differ by 2e-6.
SAME_UNIT = 1e-8
#: The EPSG code of WGS84, latitude and longitude.
WGS84_EPSG = 4326
#: How many CRSs are kept ready [1]; our choice: a mosaic rarely mixes more.
KEPT_READY = 64

#: Characters of an unreadable CRS that the message repeats [1]; our choice.
SHOWN_WKT = 60

#: Names under which WGS84 goes about, letters and digits only.
_WGS84_NAMES = ("worldgeodeticsystem1984", "wgs1984", "wgs84")
_CODE = re.compile(r"\s*([A-Za-z]+)\s*:\s*([A-Za-z0-9_.]+)\s*")
#: Axes of a three-dimensional CRS [1].
_THREE_AXES = 3


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Projector:
    """A CRS and the way to and from WGS84; easting or longitude always stands first."""

    crs_name: str
    """Code of the horizontal CRS, "EPSG:32627", or its name where it has none."""
    is_geographic: bool
    """Whether its coordinates are angles (latitude and longitude)."""
    unit_name: str
    """Unit of its coordinates: "metre", "US survey foot", "degree"."""
    metres_per_unit: float
    """Metres in that unit [m]; 1 when the coordinates are angles."""
    vertical_unit: str | None
    """Unit of heights, "m", "ft" or "us-ft"; None when the CRS does not say."""
    vertical_datum: str | None
    """What heights stand above; None when the CRS does not say."""
    ballpark: bool
    """Whether no datum shift to WGS84 is known: places may be 100 m or more off."""
    transformer: Transformer | None
    """From WGS84 to the CRS; None where the two are the same."""
    turn: float
    """A full turn of longitude in the CRS's unit; 0 when not geographic."""
    degrees_per_unit: float
    """Degrees in the CRS's unit [deg]; 0 when not geographic."""
    meridian_deg: float
    """Longitude of the CRS's prime meridian [deg]; 0 for Greenwich."""

    def to_crs(
        self, lat_deg: FloatArray, lon_deg: FloatArray
    ) -> tuple[FloatArray, FloatArray]:
        """Coordinates in the CRS of places on WGS84.

        Parameters
        ----------
        lat_deg, lon_deg : (n,) float64 [deg]
            WGS84 latitude and longitude; longitude may have run past ±180.

        Returns
        -------
        x, y : (n,) float64 [the CRS's unit]
            Easting and northing, or longitude and latitude; longitudes keep the
            turns of the input. Infinite where the projection has no value.
        """
        lon_deg = np.asarray(lon_deg, dtype=np.float64)
        lat_deg = np.asarray(lat_deg, dtype=np.float64)
        if self.transformer is None:
            return lon_deg.copy(), lat_deg.copy()
        within = lon_deg - TURN_DEG * np.round(lon_deg / TURN_DEG)
        x, y = self.transformer.transform(within, lat_deg)
        if self.is_geographic:
            wanted = (lon_deg - self.meridian_deg) / self.degrees_per_unit
            x = _near(x, wanted, self.turn)
        return x, y

    def to_wgs84(self, x: FloatArray, y: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Places on WGS84 of coordinates in the CRS.

        Parameters
        ----------
        x, y : (n,) float64 [the CRS's unit]
            Easting and northing, or longitude and latitude.

        Returns
        -------
        lat_deg, lon_deg : (n,) float64 [deg]
            WGS84 latitude and longitude; from a geographic CRS longitude keeps the
            turns of the input, from a projected one it lies within ±180. Infinite
            where the projection has no value.
        """
        x = np.asarray(x, dtype=np.float64)
        y = np.asarray(y, dtype=np.float64)
        if self.transformer is None:
            return y.copy(), x.copy()
        within = x
        if self.is_geographic:
            within = x - self.turn * np.round(x / self.turn)
        lon_deg, lat_deg = self.transformer.transform(within, y, direction="INVERSE")
        if self.is_geographic:
            wanted = x * self.degrees_per_unit + self.meridian_deg
            lon_deg = _near(lon_deg, wanted, TURN_DEG)
        return lat_deg, lon_deg

    def settled_at(self, x: float, y: float) -> "Projector":
        """The same with the one datum shift that serves a place in the CRS.

        Where several shifts are known the library picks one for each point, and a path
        over the border of two would jump by metres. One file keeps one shift.

        Parameters
        ----------
        x, y : float [the CRS's unit]
            Easting and northing, or longitude and latitude, of the place.
        """
        used = self._used_at(*self.to_wgs84(np.array([x]), np.array([y])))
        if used is None:
            return self
        return replace(self, transformer=used, ballpark=_says_ballpark(used))

    def _used_at(self, lat_deg: FloatArray, lon_deg: FloatArray) -> Transformer | None:
        """The shift that the library picks at a place; None where it has no choice."""
        if self.transformer is None:
            return None
        self.to_crs(lat_deg, lon_deg)
        try:
            return self.transformer.get_last_used_operation()
        except ProjError:
            # with one shift only there is no choice to report
            return None


@lru_cache(maxsize=KEPT_READY)
def projector(crs_wkt: str) -> Projector:
    """Find the way to and from WGS84 for a DEM's CRS.

    Parameters
    ----------
    crs_wkt : str
        The CRS as well-known text, any version; of a compound CRS the horizontal
        part is used for places and the vertical part for the unit of heights.

    Returns
    -------
    Projector
        Ready to use; the same text gives the same object.

    Raises
    ------
    DemError
        If the text is empty or malformed, if the CRS is no map (geocentric, vertical,
        local, rotated pole) or if its heights have a unit or sense not read here.
    """
    if not crs_wkt.strip():
        msg = "The DEM states no CRS. Give it one before use, for example by its maker."
        raise DemError(msg)
    try:
        return _projector_of(CRS.from_wkt(crs_wkt))
    except (CRSError, ProjError) as error:
        msg = f'The DEM\'s CRS cannot be read: "{crs_wkt[:SHOWN_WKT]}". {_cause(error)}'
        raise DemError(msg) from error


@lru_cache(maxsize=KEPT_READY)
def crs_from_user(text: str) -> Projector:
    """Find the way to and from WGS84 for a CRS that a person named.

    Parameters
    ----------
    text : str
        A code such as "EPSG:32627", in any case.

    Returns
    -------
    Projector
        Ready to use.

    Raises
    ------
    InputError
        If the text is no code, the code is unknown or its CRS is no map.
    """
    code = _CODE.fullmatch(text)
    if code is None:
        msg = f'"{text}" is no CRS code. Write EPSG:n, for example EPSG:32627.'
        raise InputError(msg)
    try:
        return _projector_of(CRS.from_authority(code[1].upper(), code[2]))
    except (CRSError, ProjError) as error:
        msg = f'No CRS "{text}" is known. Write EPSG:n, for example EPSG:32627.'
        raise InputError(msg) from error
    except DemError as error:
        raise InputError(str(error)) from error


def plane_around(lat_deg: float, lon_deg: float) -> Projector:
    """A plane on which distances and bearings from its middle are true.

    Parameters
    ----------
    lat_deg, lon_deg : float [deg]
        The middle, on WGS84.

    Returns
    -------
    Projector
        Azimuthal equidistant, metres east and north of the middle.
    """
    text = f"+proj=aeqd +lat_0={lat_deg!r} +lon_0={lon_deg!r} +datum=WGS84 +units=m"
    # looking such a CRS up in the register of codes would take longer than drawing it
    return _projector_of(CRS.from_proj4(text), name="around a point")


def _projector_of(crs: CRS, name: str | None = None) -> Projector:
    """Build the projector; DemError when the CRS is no map."""
    flat = _horizontal(crs)
    plain = flat.source_crs if flat.is_bound and flat.source_crs else flat
    axes, meridian = plain.axis_info, plain.prime_meridian
    if meridian is None or not _is_map(plain):
        msg = (
            f'The CRS "{crs.name}" ({plain.type_name}) is no map of easting and '
            "northing or of latitude and longitude. Reproject the data first."
        )
        raise DemError(msg)
    unit, datum = _vertical(crs)
    factor = axes[0].unit_conversion_factor
    in_rad = float(meridian.unit_conversion_factor)
    meridian_deg = math.degrees(meridian.longitude * in_rad)
    transformer = None if _is_wgs84(flat, meridian_deg) else _from_wgs84(flat)
    return Projector(
        crs_name=name or _name(plain),
        is_geographic=plain.is_geographic,
        # WKT of one maker writes "Degree"
        unit_name=axes[0].unit_name.replace("Degree", "degree"),
        metres_per_unit=1.0 if plain.is_geographic else factor,
        vertical_unit=unit,
        vertical_datum=datum,
        ballpark=transformer is not None and _says_ballpark(transformer),
        transformer=transformer,
        turn=math.tau / factor if plain.is_geographic else 0.0,
        degrees_per_unit=math.degrees(factor) if plain.is_geographic else 0.0,
        meridian_deg=meridian_deg,
    )


def _horizontal(crs: CRS) -> CRS:
    """Keep the part of a CRS that says where, not how high."""
    part = crs.sub_crs_list[0] if crs.is_compound else crs
    return part.to_2d() if len(part.axis_info) == _THREE_AXES else part


def _is_map(crs: CRS) -> bool:
    """Whether it is projected, or geographic on a globe that is not turned."""
    return crs.is_projected or (crs.is_geographic and not crs.is_derived)


def _vertical(crs: CRS) -> tuple[str | None, str | None]:
    """Read unit and datum of the heights, None when not stated; DemError if odd."""
    part = crs.sub_crs_list[-1] if crs.is_compound else crs
    if part.is_bound and part.source_crs:
        part = part.source_crs
    if crs.is_compound:
        datum = part.datum.name if part.datum else part.name
    elif len(part.axis_info) == _THREE_AXES:
        datum = f"ellipsoid of {part.datum.name}" if part.datum else "ellipsoid"
    else:
        return None, None
    axis = part.axis_info[-1]
    if axis.direction != "up":
        msg = f'"{part.name}" counts downwards (depths). Turn the sign of the heights.'
        raise DemError(msg)
    for unit, metres in HEIGHT_UNIT_M.items():
        if math.isclose(axis.unit_conversion_factor, metres, rel_tol=SAME_UNIT):
            return unit, datum
    msg = (
        f'Heights in "{axis.unit_name}" are not read; m, ft and us-ft are. Convert '
        "them to metres."
    )
    raise DemError(msg)


def _is_wgs84(crs: CRS, meridian_deg: float) -> bool:
    """Whether the CRS is plain WGS84 latitude and longitude in degrees."""
    if crs.is_bound or not crs.is_geographic or meridian_deg != 0.0:
        return False
    degrees = math.degrees(crs.axis_info[0].unit_conversion_factor)
    if not math.isclose(degrees, 1.0, rel_tol=SAME_UNIT) or crs.datum is None:
        return False
    letters = re.sub(r"[^a-z0-9]", "", crs.datum.name.lower())
    return any(name in letters for name in _WGS84_NAMES)


def _from_wgs84(crs: CRS) -> Transformer:
    """Make the transformer from WGS84 longitude, latitude to easting, northing."""
    return Transformer.from_crs(WGS84_EPSG, crs, always_xy=True)


def _says_ballpark(transformer: Transformer) -> bool:
    """Whether PROJ's own description of the operation admits a guess."""
    return "ballpark" in transformer.description.lower()


def _name(crs: CRS) -> str:
    """Code of the CRS, or its name where no code is sure."""
    authority = crs.to_authority(min_confidence=SURE_OF_CODE)
    return ":".join(authority) if authority else crs.name


def _near(angle: FloatArray, wanted: FloatArray, turn: float) -> FloatArray:
    """Angles moved by whole turns to lie nearest to the wanted ones."""
    turns = np.round((wanted - angle) / turn)
    return np.where(np.isfinite(angle), angle + turn * turns, angle)


def _cause(error: Exception) -> str:
    """PROJ's reason without its prefix, ended by one full stop."""
    return f"{str(error).rsplit(': ', maxsplit=1)[-1].rstrip(').')}."
