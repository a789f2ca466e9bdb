"""Check points for a survey crew: where to go, what to measure, how far it matters.

As a table (CSV), as GeoJSON (RFC 7946) or as waypoints (GPX 1.1), by the ending.
Every number is the record's.
"""

import csv
import io
import json
import xml.etree.ElementTree as ET
from collections.abc import Callable
from dataclasses import dataclass, replace
from pathlib import Path
from typing import Any, Final

import numpy as np

from profiler.constants import HALF_TURN_DEG
from profiler.errors import InputError
from profiler.model import SightLine
from profiler.output.naming import capital, names_of, printable
from profiler.output.numbers import DOWN, UP, Show
from profiler.output.record import record
from profiler.output.rounding import metres

#: Obstacles of a radio path are listed up to this share of F1 [1]; our choice: what
#: stands outside the first zone costs nothing.
WITHIN_F1: Final = 1.0
#: Places nearer to each other than this are visited as one [m]; our choice, below the
#: side of any cell.
SAME_PLACE_M: Final = 0.5
#: What a spreadsheet takes for the beginning of a formula.
FORMULA_SIGNS: Final = ("=", "+", "-", "@")
#: Namespace of GPX 1.1.
GPX: Final = "http://www.topografix.com/GPX/1/1"
GROUND: Final = "height of ground, and of trees or buildings on it"
#: Where a station's ground came from, in words.
GROUND_FROM: Final = {
    "dem": "as in the elevation file",
    "surveyed": "surveyed",
    "none": "not known",
}
COLUMNS: Final = (
    "name",
    "lat_deg",
    "lon_deg",
    "distance_m",
    "offset_m",
    "side",
    "ground_m",
    "antenna_agl_m",
    "decides_m",
    "measure",
    "why",
)

Json = dict[str, Any]


@dataclass(frozen=True, slots=True, kw_only=True)
class CheckPoint:
    """One place for the crew."""

    name: str
    """Of the station, or "Check" and a number from the eye's end."""
    lat_deg: float
    lon_deg: float
    distance_m: float
    """Along the path from the eye's end [m]."""
    ground_m: float | None
    """Ground in use there [m above the file's datum]."""
    measure: str
    """What to measure."""
    why: str
    """What makes the place matter; several reasons with a semicolon between."""
    decides_m: float | None = None
    """Metres of height that matter there, the least of all reasons [m]."""
    antenna_agl_m: float | None = None
    """Antenna or eye above ground, at a station [m]."""
    offset_m: float = 0.0
    """From the path [m]; 0 on it."""
    side: str = ""
    """"left" or "right" of it, looking from the eye's end."""


def check_points(line: SightLine, *, show_in: str = "m") -> tuple[CheckPoint, ...]:
    """Both stations and every place that decides, in order of distance.

    Parameters
    ----------
    line : SightLine
    show_in : str
        Unit of the heights in the reasons, "m" or "ft"; the columns are in metres.

    Returns
    -------
    tuple of CheckPoint
        The first is the eye's end, the last the target's.

    Raises
    ------
    InputError
        If ``show_in`` is no such unit.
    """
    values = record(line)
    show = Show(unit=show_in, path_m=values["path"]["distance_m"])
    found = [*_sight(line, values, show), *_radio(values, show)]
    found.sort(key=lambda point: (point.distance_m, point.offset_m))
    merged: list[CheckPoint] = []
    for point in found:
        if merged and _is_same(merged[-1], point):
            merged[-1] = _together(merged[-1], point)
        else:
            merged.append(point)
    numbered = (
        replace(point, name=f"Check {number}")
        for number, point in enumerate(merged, start=1)
    )
    near, far = _stations(values)
    return (near, *numbered, far)


def _is_same(one: CheckPoint, other: CheckPoint) -> bool:
    return (
        abs(one.distance_m - other.distance_m) <= SAME_PLACE_M
        and one.offset_m == other.offset_m == 0.0
    )


def _together(one: CheckPoint, other: CheckPoint) -> CheckPoint:
    told = [m for m in (one.decides_m, other.decides_m) if m is not None]
    return replace(
        one,
        why=f"{one.why}; {other.why}",
        ground_m=other.ground_m if one.ground_m is None else one.ground_m,
        decides_m=min(told) if told else None,
    )


def _stations(values: Json) -> tuple[CheckPoint, CheckPoint]:
    names = [capital(name) for name in names_of(values)]
    near, far = (
        CheckPoint(
            name=name,
            lat_deg=values[role]["lat_deg"],
            lon_deg=values[role]["lon_deg"],
            distance_m=distance,
            ground_m=values[role]["ground_m"],
            antenna_agl_m=values[role]["agl_m"],
            measure="elevation of the ground; height of the antenna or eye above it",
            why=f"station, ground {GROUND_FROM[values[role]['ground_from']]}",
        )
        for role, name, distance in zip(
            ("from", "to"), names, (0.0, values["path"]["distance_m"]), strict=True
        )
    )
    return near, far


def _at(
    place: Json, why: str, decides_m: float | None, *, dist: str = "distance_m"
) -> CheckPoint:
    return CheckPoint(
        name="",
        lat_deg=place["lat_deg"],
        lon_deg=place["lon_deg"],
        distance_m=place[dist],
        ground_m=place.get("ground_m"),
        decides_m=decides_m,
        measure=GROUND,
        why=why,
    )


def _ground_of(line: SightLine, stretch: Json) -> float | None:
    """Ground at the worst place of a stretch; None under trees or a building [m]."""
    if stretch["cover_kind"] is not None:
        return None
    sight = np.interp(stretch["worst_at_m"], line.profile.dist_m, line.sight_m)
    ground: float = metres(float(sight) - stretch["worst_margin_m"])
    return ground


def _sight(line: SightLine, values: Json, show: Show) -> list[CheckPoint]:
    """Decisive point, blocked stretches, void and horizon point."""
    points = []
    at, horizon, void = values["decisive"], values["horizon"], values["void"]
    if at is not None:
        side = "above" if at["margin_m"] < 0.0 else "below"
        over = show.height(abs(at["margin_m"]))
        why = f"decisive point, {over} {side} the line"
        points.append(_at(at, why, abs(at["margin_m"])))
    for number, stretch in enumerate(values["blocked_stretches"], start=1):
        over = show.height(-stretch["worst_margin_m"])
        run = f"{show.bare_distance(stretch['start_m'])}-"
        run += show.distance(stretch["end_m"])
        why = f"worst of blocked stretch {number} ({run}), {over} above the line"
        place = {**stretch, "ground_m": _ground_of(line, stretch)}
        points.append(_at(place, why, -stretch["worst_margin_m"], dist="worst_at_m"))
    if void is not None:
        above = show.height(void["blocks_above_m"], rounding=DOWN)
        middle = (void["start_m"] + void["end_m"]) / 2.0
        why = f"no ground known; ground above {above} would block"
        points.append(_at({**void, "distance_m": middle}, why, None))
    if horizon is not None:
        gap = show.height(abs(horizon["margin_m"]))
        side = "above" if horizon["margin_m"] < 0.0 else "below"
        why = f"horizon seen from the eye, {gap} {side} the line"
        points.append(_at(horizon, why, abs(horizon["margin_m"])))
    return points


def _radio(values: Json, show: Show) -> list[CheckPoint]:
    """Governing place of each criterion, obstacles, ground beside the path."""
    if "radio" not in values:
        return []
    from profiler.output.radio_words import criterion_text  # only for a radio path

    radio, points = values["radio"], []
    for result in radio["criteria"]:
        left = result["margin_m"]
        how = show.height(abs(left), rounding=UP if left < 0.0 else DOWN)
        side = "short" if left < 0.0 else "to spare"
        why = f"{criterion_text(result)}: {how} {side}"
        points.append(_at(result["at"], why, abs(left)))
    for obstacle in radio["obstacles"]:
        if obstacle["f1_share"] < WITHIN_F1:
            why = f"obstacle, {obstacle['f1_share']:.2f} of F1"
            points.append(_at(obstacle, why, abs(obstacle["clearance_m"])))
    side_place = radio["side"]
    if side_place is not None:
        points.append(_beside(values, side_place, show))
    return points


def _beside(values: Json, place: Json, show: Show) -> CheckPoint:
    from profiler.radio.fresnel import fresnel_radius_m  # only for a radio path

    f1 = fresnel_radius_m(
        place["distance_m"],
        length_m=values["path"]["distance_m"],
        wavelength_m=values["radio"]["wavelength_m"],
    )
    apart = metres(place["f1_share"] * float(f1))
    why = (
        f"beside the path, {show.height(place['offset_m'])} to the {place['side']}: "
        f"{place['f1_share']:.2f} of F1 from the ray, {show.height(apart)}"
    )
    return replace(
        _at(place, why, apart), offset_m=place["offset_m"], side=place["side"]
    )


def check_points_csv(points: tuple[CheckPoint, ...]) -> str:
    """The points as comma-separated text with a heading."""
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(COLUMNS)
    for point in points:
        writer.writerow([_cell(getattr(point, column), column) for column in COLUMNS])
    return out.getvalue()


def _cell(value: str | float | None, column: str) -> str:
    if value is None:
        return ""
    if isinstance(value, str):
        # a spreadsheet would run a cell that begins like a formula; tabs are gone
        text = printable(value)
        return f"'{text}" if text.startswith(FORMULA_SIGNS) else text
    return f"{value:.9f}" if column.endswith("_deg") else f"{value:.3f}"


def check_points_geojson(points: tuple[CheckPoint, ...]) -> str:
    """The points as a GeoJSON feature collection, one final newline."""
    features = [
        {
            "type": "Feature",
            "geometry": {"type": "Point", "coordinates": [p.lon_deg, p.lat_deg]},
            "properties": {
                column: _text(getattr(p, column))
                for column in COLUMNS
                if column not in ("lat_deg", "lon_deg")
            },
        }
        for p in points
    ]
    values = {"type": "FeatureCollection", "features": features}
    return json.dumps(values, ensure_ascii=False, allow_nan=False) + "\n"


def _text(value: str | float | None) -> str | float | None:
    return printable(value) if isinstance(value, str) else value


def check_points_gpx(points: tuple[CheckPoint, ...]) -> str:
    """The points as GPX 1.1 waypoints, one final newline."""
    root = ET.Element("gpx", {"version": "1.1", "creator": "overbrow", "xmlns": GPX})
    for point in points:
        # GPX 1.1 allows -180 and not 180
        lon = -HALF_TURN_DEG if point.lon_deg == HALF_TURN_DEG else point.lon_deg
        where = {"lat": f"{point.lat_deg:.9f}", "lon": f"{lon:.9f}"}
        waypoint = ET.SubElement(root, "wpt", where)
        if point.ground_m is not None:
            ET.SubElement(waypoint, "ele").text = f"{point.ground_m:.3f}"
        ET.SubElement(waypoint, "name").text = printable(point.name)
        ET.SubElement(waypoint, "desc").text = _described(point)
    ET.indent(root, " ")
    head = '<?xml version="1.0" encoding="UTF-8"?>\n'
    return head + ET.tostring(root, encoding="unicode") + "\n"


def _described(point: CheckPoint) -> str:
    """What a hand-held receiver shows: everything that has no field of its own."""
    parts = [printable(point.why), f"measure {point.measure}"]
    if point.decides_m is not None:
        parts.append(f"{point.decides_m:.1f} m decide")
    if point.antenna_agl_m is not None:
        parts.append(f"antenna or eye {point.antenna_agl_m:.1f} m above ground")
    parts.append(f"at {point.distance_m:.0f} m of the path")
    return ". ".join(parts)


#: Writers by ending.
WRITERS: Final[dict[str, Callable[[tuple[CheckPoint, ...]], str]]] = {
    ".csv": check_points_csv,
    ".geojson": check_points_geojson,
    ".gpx": check_points_gpx,
}


def writer_for(path: Path) -> Callable[[tuple[CheckPoint, ...]], str]:
    """The writer that a file's ending asks for.

    Raises
    ------
    InputError
        If the ending is none of .csv, .geojson, .gpx.
    """
    writer = WRITERS.get(path.suffix.lower())
    if writer is None:
        msg = f'"{path}" must end in .csv, .geojson or .gpx.'
        raise InputError(msg)
    return writer


def check_points_text(line: SightLine, path: Path, *, show_in: str = "m") -> str:
    """The check points in the form that a file's ending asks for.

    Parameters
    ----------
    line : SightLine
    path : Path
        Ending .csv, .geojson or .gpx.
    show_in : str
        Unit of the heights in the reasons, "m" or "ft".

    Raises
    ------
    InputError
        If the ending or the unit is not known.
    """
    return writer_for(path)(check_points(line, show_in=show_in))
