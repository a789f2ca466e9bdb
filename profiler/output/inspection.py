"""What an elevation file is: the sheet a planner reads, and its JSON record."""

import math
from collections.abc import Iterable, Iterator
from typing import Any, Final

from profiler.constants import TURN_DEG
from profiler.model.note import Note
from profiler.model.terrain import DemKind
from profiler.output.numbers import count, latitude, longitude, place, ratio
from profiler.output.record import json_text
from profiler.output.rounding import deg, metres
from profiler.output.rounding import ratio as share
from profiler.terrain.inspect import FileReport, Group, Spot

#: Name and version of the record of inspected files.
INSPECT_SCHEMA: Final = "overbrow/inspect/1"
#: Width of the lead words [characters]; the longest is "declare".
LEAD: Final = 10
#: Bytes in the units of file sizes [bytes], as planners count them (common practice).
_BYTE_UNITS: Final = ((10**9, "GB"), (10**6, "MB"), (10**3, "kB"))
#: Formats by the raster library's name for them.
_FORMATS: Final = {"GTiff": "GeoTIFF", "SRTMHGT": "HGT", "AAIGrid": "ASCII grid"}
_VERTICAL: Final = {"m": "metres", "ft": "feet", "us-ft": "US survey feet"}

Json = dict[str, Any]


def inspection_text(report: FileReport) -> str:
    """One file's sheet, several aligned lines and one final newline.

    Parameters
    ----------
    report : FileReport
    """
    lines = [_first_line(report), ""]
    for lead, texts in _rows(report):
        for k, text in enumerate(texts):
            lines.append(f"{lead if k == 0 else '':<{LEAD}}{text}".rstrip())
    return "\n".join(lines) + "\n"


def _first_line(report: FileReport) -> str:
    if report.crs is None:
        state = "cannot be used as it is: its place on the Earth is not known"
    elif report.voids == report.posts:
        state = "holds no ground at all"
    elif report.notes:
        things = "1 thing" if len(report.notes) == 1 else f"{len(report.notes)} things"
        state = f"can be used, with care for {things}"
    else:
        state = "can be used"
    return f"{report.name} {state}."


def _rows(report: FileReport) -> Iterator[tuple[str, list[str]]]:
    """Lead word and lines of every row of the sheet."""
    yield (
        "file",
        [f"{_FORMATS.get(report.driver, report.driver)}, {_size(report.bytes)}"],
    )
    yield "posts", [_posts(report)]
    yield "map", [_map(report)]
    yield "lies", [*_lies(report)]
    yield "tagged", [_registration(report)]
    yield "heights", [*_heights(report)]
    yield "unit", [_unit(report)]
    yield "above", [report.vertical_datum or "not stated: above which sea is not known"]
    yield "shows", [_shows(report)]
    yield "voids", [_voids(report)]
    yield "stored", [_stored(report)]
    if report.date:
        yield "dated", [report.date]
    yield "sha256", [report.sha256]
    if report.notes:
        yield "careful", [n.text for n in report.notes]
    if report.to_declare:
        yield "declare", [f"{d.option}   {d.why}" for d in report.to_declare]


def _size(size: int) -> str:
    for unit, name in _BYTE_UNITS:
        if size >= unit:
            return f"{size / unit:.1f} {name}"
    return f"{size} bytes"


def _posts(report: FileReport) -> str:
    grid = f"{count(report.rows)} rows x {count(report.cols)} columns"
    if report.cell_m is None:
        return f"{grid}; spacing on the ground not known"
    down, along = report.cell_m
    turned = ", rows turned against the map" if report.rotated else ""
    return f"{grid}, {down:.2f} m down a column, {along:.2f} m along a row{turned}"


def _map(report: FileReport) -> str:
    x0, y0, x1, y1 = report.outline_crs
    box = f"x {x0:.10g} to {x1:.10g}, y {y0:.10g} to {y1:.10g}"
    if report.crs is None:
        return f"no coordinate system; {box}"
    said = " (declared)" if report.crs_declared else ""
    step = f"step {report.step[1]:.8g} x {report.step[0]:.8g}"
    return f"{report.crs}{said} in {report.map_unit}; {box}; {step}"


def _lies(report: FileReport) -> Iterator[str]:
    if report.outline_deg is None:
        yield "not known"
        return
    south, west, north, east = report.outline_deg
    yield (
        f"{latitude(south)} to {latitude(north)}, "
        f"{longitude(_within(west))} to {longitude(_within(east))}"
    )


def _within(lon_deg: float) -> float:
    """Longitude [deg] within ±180."""
    return math.remainder(lon_deg, TURN_DEG)


def _registration(report: FileReport) -> str:
    if report.registration == "untagged":
        return "neither pixel is area nor pixel is point; posts are cell centres"
    return (
        f"pixel is {report.registration}; posts are cell centres, and either tag "
        "gives the same ground"
    )


def _heights(report: FileReport) -> Iterator[str]:
    for what, spot in (("lowest", report.lowest), ("highest", report.highest)):
        if spot is not None:
            yield f"{what:<7} {spot.value:9.1f} m at {_where(spot)}"
    if report.lowest is None:
        yield "none"


def _where(spot: Spot) -> str:
    if spot.lat_deg is None or spot.lon_deg is None:
        return f"row {spot.row}, column {spot.col}"
    return place(spot.lat_deg, _within(spot.lon_deg))


def _unit(report: FileReport) -> str:
    if report.unit_stated is not None:
        return f"{_VERTICAL[report.unit_stated]}, as the file states"
    if report.unit_text:
        return f'"{report.unit_text}", which is not read; taken as metres here'
    return "not stated; taken as metres here"


def _shows(report: FileReport) -> str:
    if report.kind_stated is DemKind.BARE:
        return "bare ground, as the file states"
    if report.kind_stated is DemKind.SURFACE:
        return "the surface with trees and buildings, as the file states"
    return "bare ground or surface not stated"


def _voids(report: FileReport) -> str:
    means = []
    if report.nodata is not None:
        means.append(f"void is {report.nodata:.9g}")
    if report.mask:
        means.append("void by mask")
    tag = ", ".join(means) or "no value means void"
    share = f"{ratio(100.0 * report.void_share)} %"
    return f"{count(report.voids)} of {count(report.posts)} posts ({share}); {tag}"


def _stored(report: FileReport) -> str:
    parts = [report.dtype]
    if report.scale != 1.0 or report.offset != 0.0:
        parts.append(f"height = stored x {report.scale:g} + {report.offset:g}")
    parts.append(report.compression or "not compressed")
    rows, cols = report.block
    parts.append(f"{'tiles' if report.tiled else 'strips'} of {rows} x {cols}")
    if report.overviews:
        parts.append("overviews " + " ".join(map(str, report.overviews)))
    return ", ".join(parts)


def inspection_record(report: FileReport) -> Json:
    """One file's record as plain values: no NaN, no infinity.

    Parameters
    ----------
    report : FileReport
    """
    return {
        "name": report.name,
        "bytes": report.bytes,
        "sha256": report.sha256,
        "driver": report.driver,
        "crs": report.crs,
        "crs_declared": report.crs_declared,
        "crs_problem": report.crs_problem,
        "map_unit": report.map_unit,
        "rows": report.rows,
        "cols": report.cols,
        "step": list(report.step),
        "rotated": report.rotated,
        "cell_m": report.cell_m and [metres(v) for v in report.cell_m],
        "outline_deg": report.outline_deg and [deg(v) for v in report.outline_deg],
        "outline_crs": list(report.outline_crs),
        "registration": report.registration,
        "dtype": report.dtype,
        "scale": report.scale,
        "offset": report.offset,
        "unit_text": report.unit_text,
        "unit_stated": report.unit_stated,
        "unit_used": report.unit_used,
        "vertical_datum": report.vertical_datum,
        "dem_kind": report.kind_stated.value,
        "nodata": _raw(report.nodata),
        "mask": report.mask,
        **_posts_record(report),
        "date": report.date,
        "description": report.description,
        "tiled": report.tiled,
        "block": list(report.block),
        "compression": report.compression,
        "overviews": list(report.overviews),
        "warnings": [{"code": n.code, "text": n.text} for n in report.notes],
        "to_declare": [{"option": d.option, "why": d.why} for d in report.to_declare],
    }


def _posts_record(report: FileReport) -> Json:
    return {
        "posts": report.posts,
        "voids": report.voids,
        "void_share": share(report.void_share),
        "zeros": report.zeros,
        "zero_share": share(report.zero_share),
        "lowest": _spot(report.lowest, "height_m"),
        "highest": _spot(report.highest, "height_m"),
        "fillers": [_group(g, "raw") for g in report.fillers],
        "implausible": _group(report.implausible, "height_m"),
    }


def _raw(value: float | None) -> float | str | None:
    """A raw value; NaN and infinities, which JSON does not have, as text."""
    return value if value is None or math.isfinite(value) else str(value)


def _spot(spot: Spot | None, value: str) -> Json | None:
    if spot is None:
        return None
    held = metres(spot.value) if value == "height_m" else _raw(spot.value)
    lat, lon = spot.lat_deg, spot.lon_deg
    return {
        value: held,
        "row": spot.row,
        "col": spot.col,
        "lat_deg": None if lat is None else deg(lat),
        "lon_deg": None if lon is None else deg(_within(lon)),
    }


def _group(group: Group | None, value: str) -> Json | None:
    if group is None:
        return None
    return {"count": group.count, "first": _spot(group.first, value)}


def inspections_json(reports: Iterable[FileReport]) -> str:
    """The records of several files as one JSON text with a final newline.

    Parameters
    ----------
    reports : iterable of FileReport
        In the order wanted.
    """
    record = {
        "schema": INSPECT_SCHEMA,
        "files": [inspection_record(r) for r in reports],
    }
    return json_text(record)


def notes_text(report: FileReport) -> Iterator[str]:
    """Each warning as one line that names its file."""
    notes: tuple[Note, ...] = report.notes
    for note in notes:
        yield f"{report.name}: {note.text}."
