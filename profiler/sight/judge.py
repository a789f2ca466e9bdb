"""The one computation: from a question to the sight line and what it means."""

import math
from dataclasses import replace

import numpy as np

from profiler.constants import GRAZING_M, M_PER_KM, VOID_BELOW_M
from profiler.earth import bend, geodesic_path
from profiler.errors import InputError
from profiler.model import (
    Air,
    Bending,
    EndReport,
    GeodesicPath,
    OtherGround,
    PathProfile,
    SightLine,
    Station,
)
from profiler.sight.case import QUARTER_TURN, Case, look_at
from profiler.sight.cover_sources import CoverAlong, with_cover
from profiler.sight.ends import end_report, survey_gap_m
from profiler.sight.feet import foot_notes
from profiler.sight.ground import ground_of, with_ends
from profiler.sight.outside import check_inside
from profiler.sight.own_hill import own_hill_radius, stands_bare
from profiler.sight.places import void_stretches
from profiler.sight.sight_line import (
    Ready,
    decisive_index,
    sight_line_of,
    verdict_of,
)
from profiler.sight.target import shown_target
from profiler.terrain import Terrain, sample_path
from profiler.terrain.at_points import ground_at


def judge(
    terrain: Terrain,
    eye: Station,
    target: Station,
    *,
    air: Air | None = None,
    own_hill_m: float | None = None,
    ignore_near_m: float = 0.0,
    void_below_m: float = VOID_BELOW_M,
    cover: CoverAlong | None = None,
) -> SightLine:
    """Whether one station sees another over a terrain, and what decides it.

    Parameters
    ----------
    terrain : Terrain
    eye, target : Station
        The observing end and the observed one.
    air : Air or None
        Bending of the ray; None: light, kr 0.13.
    own_hill_m : float or None [m]
        Radius of a bare summit's own hill; None: the larger of 100 m and 3 cells.
    ignore_near_m : float [m]
        Ground this near to either end is not counted.
    void_below_m : float [m]
        A void that only higher ground could block counts as clear.
    cover : function or None
        Trees and buildings, from `cover_along`; None: bare ground.

    Returns
    -------
    SightLine

    Raises
    ------
    InputError
        If the points are one place or nearer than a cell, or a height is impossible.
    DemError
        If a file is damaged; OutsideDemError if an end has no ground.
    """
    # a point in the wrong place is told before a path that is far too long
    check_inside(terrain, eye, role="from")
    check_inside(terrain, target, role="to")
    path = geodesic_path(eye.point, target.point)
    _check_lengths(path, ignore_near_m, own_hill_m, void_below_m)
    profile = with_cover(sample_path(terrain, path), path, cover)
    _check_cell(profile, path)
    earth = bend(air or Air(), path.radius_m)
    _check_bending(earth, path)
    ends = _ends(eye, target, _end_ground(terrain, profile, path))
    hill_m = 0.0
    if ends[1].agl_m == 0.0:
        hill_m = own_hill_radius(terrain, path, own_hill_m)
        hill_m = hill_m if stands_bare(profile, hill_m) else 0.0
    feet = foot_notes(
        terrain, profile, (eye, target), ends, ignore_near_m=ignore_near_m
    )
    profile = replace(profile, notes=profile.notes + feet)
    case = _case(path, profile, earth, ends, hill_m=hill_m, near_m=ignore_near_m)
    ready = _look(path, profile, earth, ends, case=case, void_below_m=void_below_m)
    other = None
    if _survey_matters(eye, ends[0]) or _survey_matters(target, ends[1]):
        other = _on_dem_ground(eye, target, ready)
    return sight_line_of(ready, other=other)


def _check_lengths(
    path: GeodesicPath,
    ignore_near_m: float,
    own_hill_m: float | None,
    void_below_m: float,
) -> None:
    for option, value in (
        ("--ignore-near", ignore_near_m),
        ("--own-hill", own_hill_m or 0.0),
    ):
        if not (math.isfinite(value) and value >= 0.0):
            msg = f"{option} {value:g} m must be 0 or more."
            raise InputError(msg)
    if not math.isfinite(void_below_m):
        msg = f"--void-below {void_below_m:g} m must be a height. Use 9000 m or less."
        raise InputError(msg)
    if 2.0 * ignore_near_m >= path.length_m:
        msg = (
            f"--ignore-near {ignore_near_m:g} m at both ends leaves nothing of a path "
            f"of {path.length_m:.0f} m. Use less than half of it."
        )
        raise InputError(msg)


def _check_cell(profile: PathProfile, path: GeodesicPath) -> None:
    cell = profile.coarsest_cell_m
    if path.length_m < cell:
        msg = (
            f"The points are {path.length_m:.1f} m apart, less than one cell "
            f"({cell:.0f} m) of this DEM: it cannot tell. Use a finer one."
        )
        raise InputError(msg)


def _check_bending(earth: Bending, path: GeodesicPath) -> None:
    if abs(earth.kappa_per_m) * path.length_m >= QUARTER_TURN:
        msg = (
            f"With {earth.stated} the effective earth turns a quarter circle or more "
            f"over {path.length_m / M_PER_KM:.0f} km: no sight line exists. Use a "
            "shorter path or less bending."
        )
        raise InputError(msg)


def _ends(
    eye: Station, target: Station, ground: tuple[float | None, float | None]
) -> tuple[EndReport, EndReport]:
    return (
        end_report(eye, ground[0], role="from"),
        end_report(target, ground[1], role="to"),
    )


def _end_ground(
    terrain: Terrain, profile: PathProfile, path: GeodesicPath
) -> tuple[float | None, float | None]:
    """Ground that the DEM gives at the two ends [m].

    A station on a known post beside a void has ground, though its path has none.
    """
    first, last = (float(profile.ground_m[k]) for k in (0, -1))
    if math.isnan(first) or math.isnan(last):
        lat = np.array([path.start.lat_deg, path.end.lat_deg])
        lon = np.array([path.start.lon_deg, path.end.lon_deg])
        there = ground_at(terrain, lat, lon)
        first = float(there[0]) if math.isnan(first) else first
        last = float(there[1]) if math.isnan(last) else last
    return _known(first), _known(last)


def _known(value: float) -> float | None:
    return value if math.isfinite(value) else None


def _survey_matters(station: Station, end: EndReport) -> bool:
    """Whether the survey differs enough from the DEM for both answers."""
    return abs(survey_gap_m(end)) > station.survey_gap_m


def _case(
    path: GeodesicPath,
    profile: PathProfile,
    earth: Bending,
    ends: tuple[EndReport, EndReport],
    *,
    hill_m: float,
    near_m: float,
) -> Case:
    return Case(
        ground=with_ends(ground_of(profile), path.length_m),
        length_m=path.length_m,
        eye_m=ends[0].amsl_m,
        top_m=ends[1].amsl_m,
        eye_on_ground=ends[0].agl_m is not None and ends[0].agl_m <= GRAZING_M,
        top_on_ground=ends[1].agl_m is not None and ends[1].agl_m <= GRAZING_M,
        near_m=near_m,
        hill_m=hill_m,
        kappa_per_m=earth.kappa_per_m,
    )


def _look(
    path: GeodesicPath,
    profile: PathProfile,
    earth: Bending,
    ends: tuple[EndReport, EndReport],
    *,
    case: Case,
    void_below_m: float,
) -> Ready:
    look = look_at(case)
    voids = [
        v
        for v in void_stretches(path, look.line, look.void, profile=profile)
        if v.blocks_above_m < void_below_m
    ]
    lowest = min(voids, key=lambda v: v.blocks_above_m, default=None)
    return Ready(path, profile, earth, ends, case, look, lowest, void_below_m)


def _on_dem_ground(eye: Station, target: Station, ready: Ready) -> OtherGround:
    """The same question without the surveyed elevations."""
    from_dem, to_dem = (end.dem_ground_m for end in ready.ends)
    ends = (
        end_report(eye, from_dem, role="from", survey=from_dem is None),
        end_report(target, to_dem, role="to", survey=to_dem is None),
    )
    case = _case(
        ready.path,
        ready.profile,
        ready.earth,
        ends,
        hill_m=ready.case.hill_m,
        near_m=ready.case.near_m,
    )
    other = _look(
        ready.path,
        ready.profile,
        ready.earth,
        ends,
        case=case,
        void_below_m=ready.void_below_m,
    )
    at = decisive_index(other)
    shown = shown_target(
        case, other.look, height_m=ends[1].agl_m or 0.0, crest_tangent=None
    ).shown
    return OtherGround(
        verdict=verdict_of(other),
        margin_m=None if at is None else float(other.look.at.margin_m[at]),
        at_m=None if at is None else float(other.look.at.dist_m[at]),
        shown=shown,
        from_ground_m=ends[0].ground_m,
        to_ground_m=ends[1].ground_m,
    )
