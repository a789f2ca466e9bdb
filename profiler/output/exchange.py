"""The path and its places as GeoJSON (RFC 7946)."""

import json
from typing import Any, Final

import numpy as np

from profiler.constants import HALF_TURN_DEG, TURN_DEG
from profiler.earth import points_at
from profiler.model import GeodesicPath, SightLine
from profiler.output.record import record
from profiler.output.rounding import deg

#: Vertices of the drawn path [1]; at 450 km the geodesic strays 10 m from the chords.
PATH_VERTICES: Final = 129

Json = dict[str, Any]


def geojson(line: SightLine) -> Json:
    """The path, both ends and every named place as a feature collection.

    Parameters
    ----------
    line : SightLine

    Returns
    -------
    dict
        Longitude, latitude order on WGS84; lines that cross the antimeridian are cut
        there, as RFC 7946 section 3.1.9 asks. Properties are the record's fields.
    """
    values = record(line)
    summary = {k: values[k] for k in ("verdict", "grazing", "margin_m")}
    summary["distance_m"] = values["path"]["distance_m"]
    features = [
        _feature("path", _line(line.path, 0.0, line.path.length_m), summary),
        _feature("from", _point(values["from"]), values["from"]),
        _feature("to", _point(values["to"]), values["to"]),
    ]
    for role in ("decisive", "first_block", "horizon", "front_crest", "void"):
        if values[role] is not None:
            features.append(_feature(role, _point(values[role]), values[role]))
    for number, stretch in enumerate(values["blocked_stretches"], start=1):
        course = _line(line.path, stretch["start_m"], stretch["end_m"])
        features.append(
            _feature("blocked_stretch", course, {"number": number, **stretch})
        )
    return {"type": "FeatureCollection", "features": features}


def geojson_text(line: SightLine) -> str:
    """The feature collection as JSON text, one final newline."""
    return json.dumps(geojson(line), ensure_ascii=False, allow_nan=False) + "\n"


def _feature(role: str, geometry: Json, fields: Json) -> Json:
    kept = {k: v for k, v in fields.items() if k not in ("lat_deg", "lon_deg")}
    return {
        "type": "Feature",
        "geometry": geometry,
        "properties": {"role": role, **kept},
    }


def _point(fields: Json) -> Json:
    return {"type": "Point", "coordinates": [fields["lon_deg"], fields["lat_deg"]]}


def _line(path: GeodesicPath, start_m: float, end_m: float) -> Json:
    dist = np.linspace(start_m, min(end_m, path.length_m), PATH_VERTICES)
    lat, lon = points_at(path, dist)
    turn = np.floor((lon + HALF_TURN_DEG) / TURN_DEG)
    parts: list[list[list[float]]] = [[]]
    for k in range(dist.size):
        if k and turn[k] != turn[k - 1]:
            edge = TURN_DEG * max(turn[k], turn[k - 1]) - HALF_TURN_DEG
            share = (edge - lon[k - 1]) / (lon[k] - lon[k - 1])
            at = float(lat[k - 1] + share * (lat[k] - lat[k - 1]))
            side = HALF_TURN_DEG if turn[k] > turn[k - 1] else -HALF_TURN_DEG
            parts[-1].append(_position(side, at))
            parts.append([_position(-side, at)])
        parts[-1].append(_position(float(lon[k] - TURN_DEG * turn[k]), float(lat[k])))
    if len(parts) == 1:
        return {"type": "LineString", "coordinates": parts[0]}
    return {"type": "MultiLineString", "coordinates": parts}


def _position(lon_deg: float, lat_deg: float) -> list[float]:
    return [deg(lon_deg), deg(lat_deg)]
