"""The JSON record: the one machine-readable form of an answer.

Field names are the contract of docs/record.md: more may be added, none renamed.
Metres carry 3 decimals, degrees 9, ratios 6; the same inputs give the same bytes.
"""

import hashlib
import json
from typing import Any, Final

import numpy as np

from profiler.constants import VERSION
from profiler.kernels.runs import runs_of_true
from profiler.model import (
    EndReport,
    Note,
    Place,
    SightLine,
    Stretch,
    Target,
    VoidStretch,
)
from profiler.output.naming import storable
from profiler.output.rounding import deg, metres, metres_down, ratio
from profiler.output.standing import cover_rows
from profiler.output.told import growth_of, radio_of

#: Name and version of the record's form.
SCHEMA: Final = "overbrow/profile/1"
#: Who wrote a record.
SOFTWARE: Final = {"name": "overbrow", "version": VERSION}
#: Significant digits of a curvature [1/m].
KAPPA_DIGITS: Final = 10

Json = dict[str, Any]


def record(line: SightLine) -> Json:
    """The answer as plain values in the record's order.

    Parameters
    ----------
    line : SightLine

    Returns
    -------
    dict
        Only str, int, float, bool, None, list and dict; no NaN, no infinity.
    """
    return {
        "schema": SCHEMA,
        "verdict": line.verdict.value,
        "grazing": line.grazing,
        "margin_m": metres(line.margin_m),
        "decisive": _place(line.decisive),
        "first_block": _place(line.first_block),
        "horizon": _horizon(line.horizon),
        "front_crest": _place(line.front_crest),
        "blocked_stretches": [_stretch(s) for s in line.blocked_stretches],
        "target": _target(line.target),
        "needed": _needed(line),
        "path": _path(line),
        "angles": {
            "from_elevation_deg": deg(line.from_elevation_deg),
            "to_elevation_deg": deg(line.to_elevation_deg),
        },
        "earth": _earth(line),
        "terrain": _terrain(line),
        "cover": cover_rows(line.profile),
        "from": _end(line.from_),
        "to": _end(line.to),
        "other_ground": _other(line),
        "void": _void(line.void),
        "seen_stretches": _seen_stretches(line),
        "settings": _settings(line),
        **_radio(line),
        **_growth(line),
        "cautions": [note_record(n) for n in line.cautions],
        "warnings": [note_record(n) for n in line.warnings],
        "software": SOFTWARE,
    }


def record_text(line: SightLine) -> str:
    """The record as JSON text, one final newline."""
    return json_text(record(line))


def json_text(values: Json) -> str:
    """Any record of the house as JSON text, one final newline.

    Parameters
    ----------
    values : dict
        Plain values; NaN and infinity are refused, which no record holds.
    """
    return json.dumps(values, indent=1, ensure_ascii=False, allow_nan=False) + "\n"


def _path(line: SightLine) -> Json:
    return {
        "distance_m": metres(line.path.length_m),
        "azimuth_deg": deg(line.path.azimuth_deg),
        "back_azimuth_deg": deg(line.path.back_azimuth_deg),
        "samples": int(line.profile.dist_m.size),
        "void_samples": int(np.count_nonzero(np.isnan(line.profile.ground_m))),
        "void_m": metres(_void_length(line)),
    }


def _settings(line: SightLine) -> Json:
    return {
        "ignore_near_m": metres(line.ignore_near_m),
        "void_below_m": metres(line.void_below_m),
        "sea_level_m": metres(line.profile.sea_level_m),
        "sea_filled_m": metres(line.profile.sea_filled_m),
    }


def _void_length(line: SightLine) -> float:
    """Length of path without ground [m]."""
    start, end = line.profile.piece_bounds_m
    void = np.isnan(line.profile.ground_m[line.profile.piece_start + 1])
    return float(np.sum(end[void] - start[void]))


def _place(place: Place | None) -> Json | None:
    return None if place is None else _place_fields(place)


def _place_fields(place: Place) -> Json:
    return {
        "distance_m": metres(place.distance_m),
        "lat_deg": deg(place.lat_deg),
        "lon_deg": deg(place.lon_deg),
        "ground_m": metres(place.ground_m),
        "cover_m": metres(place.cover_m),
        "cover_name": storable(place.cover_name),
        "cover_kind": None if place.cover_kind is None else place.cover_kind.value,
        "sight_m": metres(place.sight_m),
        "margin_m": metres(place.margin_m),
    }


def _horizon(place: Place | None) -> Json | None:
    if place is None:
        return None
    return {**_place_fields(place), "elevation_deg": deg(place.elevation_deg)}


def _stretch(stretch: Stretch) -> Json:
    return {
        "start_m": metres(stretch.start_m),
        "end_m": metres(stretch.end_m),
        "worst_margin_m": metres(stretch.worst_margin_m),
        "worst_at_m": metres(stretch.worst_at_m),
        "lat_deg": deg(stretch.lat_deg),
        "lon_deg": deg(stretch.lon_deg),
        "cover_name": storable(stretch.cover_name),
        "cover_kind": None if stretch.cover_kind is None else stretch.cover_kind.value,
    }


def _target(target: Target) -> Json:
    return {
        "height_m": metres(target.height_m),
        "shown": target.shown.value,
        "visible_m": metres(target.visible_m),
        "hidden_m": metres(target.hidden_m),
        "visible_fraction": ratio(target.visible_fraction),
        "visible_arcmin": metres(target.visible_arcmin),
        "above_crest_m": metres(target.above_crest_m),
        "own_hill_m": metres(target.own_hill_m),
        "aim_moved_m": metres(target.aim_moved_m),
        "point_shown": target.point_shown.value,
    }


def _needed(line: SightLine) -> Json:
    needed = line.needed
    return {
        "from_agl_m": metres(needed.from_agl_m),
        "to_agl_m": metres(needed.to_agl_m),
        "both_extra_m": metres(needed.both_extra_m),
        "ke": ratio(needed.ke),
        "kr": ratio(needed.kr),
        "dem_bias_m": metres(needed.dem_bias_m),
        "dem_bias_at_m": metres(needed.dem_bias_at_m),
        "from_stretch": needed.from_stretch,
        "to_stretch": needed.to_stretch,
        "both_stretch": needed.both_stretch,
    }


def _earth(line: SightLine) -> Json:
    earth = line.earth
    return {
        "ke": ratio(earth.ke),
        "kr": ratio(earth.kr),
        "kappa_per_m": float(f"{earth.kappa_per_m:.{KAPPA_DIGITS}g}") + 0.0,
        "radius_m": metres(earth.radius_m),
        "effective_radius_m": metres(earth.effective_radius_m),
        "stated": earth.stated,
        "is_default": earth.is_default,
    }


def _terrain(line: SightLine) -> Json:
    profile = line.profile
    heights = profile.ground_m.astype("<f8").tobytes()
    return {
        "files": [
            {
                "name": storable(f.name),
                "bytes": f.bytes,
                "sha256": f.sha256,
                "crs": f.crs,
                "cell_m": [metres(side) for side in f.cell_m],
            }
            for f in profile.files
        ],
        "samples_sha256": hashlib.sha256(heights).hexdigest(),
        "dem_kind": profile.dem_kind.value,
        "interpolation": profile.interpolation.value,
        "vertical_unit": profile.vertical_unit,
    }


def _end(end: EndReport) -> Json:
    return {
        "name": storable(end.name),
        "lat_deg": deg(end.lat_deg),
        "lon_deg": deg(end.lon_deg),
        "ground_m": metres(end.ground_m),
        "agl_m": metres(end.agl_m),
        "amsl_m": metres(end.amsl_m),
        "dem_ground_m": metres(end.dem_ground_m),
        "ground_from": end.ground_from,
    }


def _other(line: SightLine) -> Json | None:
    other = line.other_ground
    if other is None:
        return None
    return {
        "verdict": other.verdict.value,
        "margin_m": metres(other.margin_m),
        "at_m": metres(other.at_m),
        "shown": other.shown.value,
        "from_ground_m": metres(other.from_ground_m),
        "to_ground_m": metres(other.to_ground_m),
    }


def _void(void: VoidStretch | None) -> Json | None:
    if void is None:
        return None
    return {
        "start_m": metres(void.start_m),
        "end_m": metres(void.end_m),
        "lat_deg": deg(void.lat_deg),
        "lon_deg": deg(void.lon_deg),
        # ground that would block is rounded down: the safe side
        "blocks_above_m": metres_down(void.blocks_above_m),
    }


def note_record(note: Note) -> Json:
    """A warning or caution as every record writes it."""
    return {"code": note.code, "text": storable(note.text)}


def _seen_stretches(line: SightLine) -> list[Json]:
    """Runs of ground along the path that the eye sees."""
    dist = line.profile.dist_m
    first, end = runs_of_true(line.ground_seen)
    return [
        {"start_m": metres(float(dist[a])), "end_m": metres(float(dist[b - 1]))}
        for a, b in zip(first, end, strict=True)
        if dist[b - 1] > dist[a]
    ]


def _radio(line: SightLine) -> Json:
    """The radio part, only where a frequency was given."""
    radio = radio_of(line)
    if radio is None:
        return {}
    from profiler.output.radio_record import radio_record  # only for a radio path

    return {"radio": radio_record(radio)}


def _growth(line: SightLine) -> Json:
    """The growth of trees, only where it was asked for."""
    growth = growth_of(line)
    if growth is None:
        return {}
    return {
        "growth": {
            "metres_per_year": metres(growth.metres_per_year),
            "years": growth.years,
            "first_failing_year": growth.first_failing_year,
        }
    }
