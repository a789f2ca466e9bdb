"""Warnings about this answer's data, and cautions that every answer carries."""

import numpy as np

from profiler.constants import LOWEST_GROUND_M, M_PER_KM, TALLEST_MAST_M, VOID_BELOW_M
from profiler.kernels.runs import runs_of_true
from profiler.model import Bending, DemKind, EndReport, GeodesicPath, Note, PathProfile
from profiler.sight.ends import survey_gap_m

#: Shortest run of ground at exactly 0 that looks like filled sea or void [m]; our
#: choice: longer than any beach a path runs along.
ZERO_RUN_M = 1000.0
#: A survey further than this from the DEM is questioned [m]; our choice: about the
#: largest offset between a geoid and the ellipsoid in much of the world.
ODD_SURVEY_M = 40.0
#: Paths longer than this meet the geoid's own bow [m]; our choice.
GEOID_BOW_FROM_M = 100_000.0
#: Posts further apart than this miss metres of a sharp crest [m]; our choice.
COARSE_CELL_M = 15.0


def warnings_for(
    profile: PathProfile, ends: tuple[EndReport, EndReport]
) -> tuple[Note, ...]:
    """What looked wrong or was chosen for this answer."""
    notes = [*profile.notes, *_height_notes(profile)]
    for role, end in zip(("from", "to"), ends, strict=True):
        if end.agl_m is not None and end.agl_m > TALLEST_MAST_M:
            text = (
                f"{end.agl_m:g} m above ground at the {role} end is higher than any "
                f"mast. If it is above sea level, say --{role}-amsl."
            )
            notes.append(Note(code="tall", text=text))
        gap = survey_gap_m(end)
        if abs(gap) > ODD_SURVEY_M:
            side = "above" if gap > 0.0 else "below"
            text = (
                f"The surveyed ground at the {role} end lies {abs(gap):.0f} m {side} "
                "the DEM's. Feet for metres, or another height datum?"
            )
            notes.append(Note(code="survey-gap", text=text))
    if profile.sea_filled_m > 0.0:
        text = (
            f"{profile.sea_filled_m / M_PER_KM:.2f} km without ground count as water "
            f"at {profile.sea_level_m:g} m, as asked. Tides and waves are not counted."
        )
        notes.append(Note(code="sea-filled", text=text))
    return tuple(notes)


def _height_notes(profile: PathProfile) -> list[Note]:
    notes = []
    ground, dist = profile.ground_m, profile.dist_m
    odd = np.flatnonzero((ground < LOWEST_GROUND_M) | (ground > VOID_BELOW_M))
    if odd.size:
        text = (
            f"Ground of {ground[odd[0]]:.0f} m at {dist[odd[0]] / M_PER_KM:.2f} km is "
            "no ground on land. Check the unit of heights and the nodata value."
        )
        notes.append(Note(code="implausible", text=text))
    start, end = _longest_zero_run(profile)
    if end - start >= ZERO_RUN_M and profile.sea_level_m != 0.0:
        text = (
            f"Ground is exactly 0 from {start / M_PER_KM:.2f} to {end / M_PER_KM:.2f} "
            "km: sea, or a void filled with 0?"
        )
        notes.append(Note(code="zeros", text=text))
    return notes


def _longest_zero_run(profile: PathProfile) -> tuple[float, float]:
    """Start and end of the longest run of ground at exactly 0 [m]."""
    first, end = runs_of_true(profile.ground_m == 0.0)
    if first.size == 0:
        return 0.0, 0.0
    starts, ends = profile.dist_m[first], profile.dist_m[end - 1]
    longest = int(np.argmax(ends - starts))
    return float(starts[longest]), float(ends[longest])


def cautions_for(
    profile: PathProfile, path: GeodesicPath, earth: Bending
) -> tuple[Note, ...]:
    """What the answer cannot know, whatever the data.

    Parameters
    ----------
    profile : PathProfile
    path : GeodesicPath
    earth : Bending
    """
    counted = "Ground only: no trees, buildings or weather."
    if profile.dem_kind is DemKind.SURFACE:
        counted = "Trees and buildings as the surface model has them; no weather."
    elif profile.cover_spans:
        counted = "Ground, and the trees and buildings given; no others, no weather."
    text = (
        f"{counted} Check on site before you build, climb or decide; local codes and "
        "licensed practice rule."
    )
    notes = [Note(code="check-on-site", text=text)]
    cell = profile.coarsest_cell_m
    if cell > COARSE_CELL_M:
        text = f"{cell:.0f} m posts can miss metres of a sharp crest or summit."
        notes.append(Note(code="coarse-posts", text=text))
    if path.length_m > GEOID_BOW_FROM_M:
        text = "Heights above a geoid follow its bow over so long a path; not modelled."
        notes.append(Note(code="geoid-bow", text=text))
    if earth.kappa_per_m <= 0.0:
        text = "A ray bent as much as the earth or more is a duct: never planned on."
        notes.append(Note(code="duct", text=text))
    return tuple(notes)
