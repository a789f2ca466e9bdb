"""The two ends of a path: which ground they stand on and how high they reach."""

from profiler.errors import InputError, OutsideDemError
from profiler.model import EndReport, Station

#: A height above sea level this little under its ground stands on it [m]; below the
#: millimetre that the record prints.
ON_GROUND_M = 0.0005


def end_report(
    station: Station, dem_ground_m: float | None, *, role: str, survey: bool = True
) -> EndReport:
    """One end with its ground and both its heights.

    Parameters
    ----------
    station : Station
    dem_ground_m : float or None [m]
        Ground that the DEM gives there; None on a void or outside.
    role : str
        "from" or "to": named when the station has no name.
    survey : bool
        Whether a surveyed elevation is used instead of the DEM's. If not, a station
        that has one may stand under the DEM's ground, which then hides it.

    Raises
    ------
    OutsideDemError
        If the height is above ground and no ground is known.
    InputError
        If the height above sea level lies under the ground.
    """
    surveyed = station.surveyed_ground_m if survey else None
    ground = dem_ground_m if surveyed is None else surveyed
    known_from = "dem" if surveyed is None else "surveyed"
    agl, amsl = station.agl_m, station.amsl_m
    if amsl is None:
        if ground is None or agl is None:
            raise _no_ground(station, role)
        amsl = ground + agl
    elif ground is not None:
        agl = amsl - ground
        if survey or station.surveyed_ground_m is None:
            agl = _above_ground(station, agl, ground, role)
            amsl = max(amsl, ground)
    return EndReport(
        name=station.name,
        lat_deg=station.point.lat_deg,
        lon_deg=station.point.lon_deg,
        ground_m=ground,
        agl_m=agl,
        amsl_m=amsl,
        dem_ground_m=dem_ground_m,
        ground_from="none" if ground is None else known_from,
    )


def survey_gap_m(end: EndReport) -> float:
    """Surveyed ground less the DEM's [m]; 0 without one of them."""
    if end.ground_from != "surveyed" or end.dem_ground_m is None:
        return 0.0
    return (end.ground_m or 0.0) - end.dem_ground_m


def _above_ground(station: Station, agl_m: float, ground_m: float, role: str) -> float:
    if agl_m < -ON_GROUND_M:
        who = station.name or f"the {role} end"
        msg = (
            f"{station.amsl_m:g} m above sea level at {who} is {-agl_m:.1f} m under "
            f"its ground of {ground_m:.1f} m. Was the height above ground? Then say "
            f"--{role}-height; or give the surveyed ground with --{role}-ground."
        )
        raise InputError(msg)
    return max(agl_m, 0.0)


def _no_ground(station: Station, role: str) -> OutsideDemError:
    who = station.name or "the point"
    lat, lon = station.point.lat_deg, station.point.lon_deg
    msg = (
        f"--{role}: no ground is known at {who} ({lat:.5f}, {lon:.5f}). Give its "
        f"height above sea level (--{role}-amsl) or its surveyed ground "
        f"(--{role}-ground)."
    )
    return OutsideDemError(msg)
