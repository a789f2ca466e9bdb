"""Sites from a table of text: one row a site, headings in the first row."""

import csv
import io
from dataclasses import dataclass
from pathlib import Path
from typing import Final

from profiler.constants import QUARTER_TURN_DEG, TURN_DEG
from profiler.errors import InputError
from profiler.model import Point
from profiler.shapes.site import (
    GROUND_HEADINGS,
    NAME_HEADINGS,
    NOTE_HEADINGS,
    Site,
    SiteFile,
    column_of,
    decimal_from,
    ground_from,
    plain_heading,
)

LATITUDE_HEADINGS: Final = ("lat_deg", "latitude_deg", "latitude", "lat")
LONGITUDE_HEADINGS: Final = (
    "lon_deg",
    "longitude_deg",
    "longitude",
    "lon",
    "lng",
    "long",
)
_DELIMITERS: Final = (",", ";", "\t")
_UTF16_MARKS: Final = (b"\xff\xfe", b"\xfe\xff")


@dataclass(frozen=True, slots=True, kw_only=True)
class _Columns:
    name: int
    lat: int
    lon: int
    ground: int | None
    note: int | None
    headings: tuple[str, ...]


def read_csv_sites(path: Path) -> SiteFile:
    """Sites of a table whose cells are parted by commas, semicolons or tabs.

    Parameters
    ----------
    path : Path
        UTF-8 (with or without its mark) or UTF-16 text.

    Returns
    -------
    SiteFile
        In the order of the rows; latitude and longitude [deg], ground [m].

    Raises
    ------
    InputError
        If the text or its headings cannot be used, or a row cannot: the message
        names the row, counting the headings as row 1.
    """
    text = _text_of(path)
    rows = _rows_of(text, path)
    if not rows:
        msg = f"{path.name} is empty; it needs the headings name, lat, lon."
        raise InputError(msg)
    columns = _columns_of(rows[0][1], path)
    sites = tuple(_site_of(row, number, columns) for number, row in rows[1:])
    if not sites:
        msg = f"{path.name} has headings but no rows."
        raise InputError(msg)
    return SiteFile(sites=sites)


def _text_of(path: Path) -> str:
    raw = path.read_bytes()
    encoding = "utf-16" if raw.startswith(_UTF16_MARKS) else "utf-8-sig"
    try:
        return raw.decode(encoding)
    except UnicodeDecodeError as error:
        line = raw[: error.start].count(b"\n") + 1
        msg = f"{path.name}, line {line}, is not UTF-8 text; save it as CSV in UTF-8."
        raise InputError(msg) from error


def _rows_of(text: str, path: Path) -> list[tuple[int, list[str]]]:
    """Rows that are not blank, with their numbers; the heading decides the cut."""
    tables = [_cut(text, delimiter, path) for delimiter in _DELIMITERS]
    return max(tables, key=lambda rows: len(rows[0][1]) if rows else 0)


def _cut(text: str, delimiter: str, path: Path) -> list[tuple[int, list[str]]]:
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=delimiter)
    rows = []
    try:
        for number, row in enumerate(reader, start=1):
            cells = [cell.strip() for cell in row]
            if any(cells):
                rows.append((number, cells))
    except csv.Error as error:
        msg = f"{path.name}, row {len(rows) + 1}, cannot be read as CSV: {error}."
        raise InputError(msg) from error
    return rows


def _columns_of(headings: list[str], path: Path) -> _Columns:
    plain = [plain_heading(heading) for heading in headings]
    found: dict[str, int] = {}
    for what, wanted in (
        ("name", NAME_HEADINGS),
        ("lat", LATITUDE_HEADINGS),
        ("lon", LONGITUDE_HEADINGS),
    ):
        column = column_of(headings, wanted)
        if column is None:
            msg = (
                f"{path.name} has no {what} column (its headings: "
                f'{", ".join(headings)}); name it "{what}".'
            )
            raise InputError(msg)
        same = [i for i, heading in enumerate(plain) if heading in wanted]
        if what != "name" and len(same) > 1:
            twice = " and ".join(headings[i] for i in same)
            msg = f"{path.name} has two {what} columns, {twice}; keep one."
            raise InputError(msg)
        found[what] = column
    return _Columns(
        **found,
        ground=column_of(headings, tuple(GROUND_HEADINGS)),
        note=column_of(headings, NOTE_HEADINGS),
        headings=tuple(headings),
    )


def _site_of(row: list[str], number: int, columns: _Columns) -> Site:
    where = f"Row {number}"
    width = len(columns.headings)
    if any(row[width:]):
        msg = (
            f"{where} has {len(row)} cells under {width} headings; write decimals "
            "with points and put text with commas in quotes."
        )
        raise InputError(msg)
    cells = row + [""] * (width - len(row))
    name = cells[columns.name]
    if not name:
        msg = f"{where} has no name."
        raise InputError(msg)
    ground_m = None
    if columns.ground is not None:
        heading = columns.headings[columns.ground]
        ground_m = ground_from(cells[columns.ground], heading=heading, where=where)
    return Site(
        name=name,
        point=_point_of(cells[columns.lat], cells[columns.lon], where=where),
        surveyed_ground_m=ground_m,
        note="" if columns.note is None else cells[columns.note],
    )


def _point_of(lat: str, lon: str, *, where: str) -> Point:
    for cell, what in ((lat, "latitude"), (lon, "longitude")):
        if not cell:
            msg = f"{where} has no {what}."
            raise InputError(msg)
    lat_deg = decimal_from(lat, what="latitude", where=where)
    lon_deg = decimal_from(lon, what="longitude", where=where)
    if QUARTER_TURN_DEG < abs(lat_deg) <= TURN_DEG and (
        abs(lon_deg) <= QUARTER_TURN_DEG
    ):
        msg = (
            f"{where}: latitude {lat} is outside -90 to 90 degrees. With latitude and "
            "longitude exchanged the point fits."
        )
        raise InputError(msg)
    if max(abs(lat_deg), abs(lon_deg)) > TURN_DEG:
        msg = (
            f"{where}: {lat}, {lon} look like easting, northing; a table of sites "
            "needs latitude and longitude in degrees."
        )
        raise InputError(msg)
    try:
        return Point(lat_deg=lat_deg, lon_deg=lon_deg)
    except InputError as error:
        msg = f"{where}: {error}"
        raise InputError(msg) from error
