"""What stands over a station's foot, or may stand under it: trees and roofs."""

from profiler.model import CoverSpan, DemKind, EndReport, Note, PathProfile, Station
from profiler.sight.cover import called
from profiler.terrain import Terrain
from profiler.terrain.near import rise_over_ring

#: Ground this far above the lowest post around a station is questioned on a surface
#: model [m]; our choice: above the noise of such models, below a young wood.
CANOPY_FROM_M = 3.0


def foot_notes(
    terrain: Terrain,
    profile: PathProfile,
    stations: tuple[Station, Station],
    ends: tuple[EndReport, EndReport],
    *,
    ignore_near_m: float,
) -> tuple[Note, ...]:
    """Every note on cover over and under the two stations.

    Parameters
    ----------
    terrain : Terrain
    profile : PathProfile
        Ground and cover along the path.
    stations : tuple of two Station
        As asked for.
    ends : tuple of two EndReport
        As used.
    ignore_near_m : float [m]
        Ground and cover this near to an end are not counted.

    Raises
    ------
    DemError
        If a file is damaged.
    """
    notes = [
        *under_cover_notes(profile, ends, ignore_near_m),
        *under_mast_notes(terrain, stations, ends),
    ]
    if profile.cover_spans and profile.dem_kind is DemKind.SURFACE:
        text = (
            "A surface model has trees and buildings in it already; cover added on it "
            "counts them twice. Use bare ground with it, or leave the cover out."
        )
        notes.append(Note(code="cover-on-surface", text=text))
    return tuple(notes)


def under_cover_notes(
    profile: PathProfile, ends: tuple[EndReport, EndReport], ignore_near_m: float
) -> tuple[Note, ...]:
    """A note for each end that stands inside the cover over its own foot.

    Parameters
    ----------
    profile : PathProfile
    ends : tuple of two EndReport
    ignore_near_m : float [m]
        Ground and cover this near to an end are not counted; above 0 there is nothing
        to say.
    """
    if ignore_near_m > 0.0:
        return ()
    notes = []
    for role, end, at in zip(("from", "to"), ends, (0, -1), strict=True):
        span = _span_at(profile, at)
        ground = float(profile.ground_m[at])
        if span is None or not end.amsl_m < ground + span.height_m:
            continue
        height = end.amsl_m - ground
        text = (
            f"The {role} end, {height:.1f} m above the ground of the DEM, is under "
            f"{called(span.kind, span.name)} of {span.height_m:.1f} m, which block at "
            "once. If it stands in the open, say --ignore-near 50m, or as far as that "
            "reaches."
        )
        notes.append(Note(code="under-cover", text=text))
    return tuple(notes)


def _span_at(profile: PathProfile, sample: int) -> CoverSpan | None:
    number = int(profile.cover_index[sample])
    return None if number < 0 else profile.cover_spans[number]


def under_mast_notes(
    terrain: Terrain,
    stations: tuple[Station, Station],
    ends: tuple[EndReport, EndReport],
) -> tuple[Note, ...]:
    """A note for each end whose ground on a surface model may be tree tops.

    Parameters
    ----------
    terrain : Terrain
    stations : tuple of two Station
        As asked for; only heights above ground stand on the model's ground.
    ends : tuple of two EndReport
        As used; a surveyed ground settles the question.

    Raises
    ------
    DemError
        If a file is damaged.
    """
    if terrain.dem_kind is not DemKind.SURFACE:
        return ()
    notes = []
    for role, station, end in zip(("from", "to"), stations, ends, strict=True):
        if station.agl_m is None or end.ground_from != "dem" or end.ground_m is None:
            continue
        rise = rise_over_ring(terrain, station.point, end.ground_m)
        if rise is None or rise <= CANOPY_FROM_M:
            continue
        lower = end.ground_m - rise
        text = (
            f"The {role} end's ground of {end.ground_m:.1f} m stands {rise:.1f} m "
            f"above the lowest post around it ({lower:.1f} m, slope taken out). On a "
            "surface model that is a sharp top, or trees or a roof from which the "
            f"height is counted. If so, say --{role}-ground {lower:.1f}m."
        )
        notes.append(Note(code="canopy-under-mast", text=text))
    return tuple(notes)
