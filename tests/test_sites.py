"""Files of named places."""

import json
from collections.abc import Callable
from pathlib import Path

import numpy as np
import pyogrio
import pytest
import shapely

from profiler.errors import InputError
from profiler.model import Point
from profiler.shapes import Site, read_site_file, read_sites

Write = Callable[[str, str | bytes], Path]

SKARVEL = Site(
    name="Skarvel", point=Point(lat_deg=48.2, lon_deg=-21.5), surveyed_ground_m=431.0
)
SKARN = Site(name="Skarn", point=Point(lat_deg=48.3, lon_deg=-21.2))

GPX_HEAD = (
    '<?xml version="1.0"?><gpx version="1.1" creator="x" '
    'xmlns="http://www.topografix.com/GPX/1/1">'
)
GPX = (
    GPX_HEAD + '<wpt lat="48.2" lon="-21.5"><ele>431</ele><name>Skarvel</name></wpt>'
    '<wpt lat="48.3" lon="-21.2"><name>Skarn</name></wpt>'
)
TRACK = '<trk><name>T</name><trkseg><trkpt lat="1" lon="2"/></trkseg></trk>'
PLACEMARK = (
    "<Placemark><name>{}</name><Point><coordinates>{}</coordinates></Point></Placemark>"
)
KML = (
    '<?xml version="1.0"?><!-- saved --><kml xmlns="http://www.opengis.net/kml/2.2">'
    "<Document><Folder><name>A</name>"
    + PLACEMARK.format("Skarvel", "-21.5,48.2,431")
    + "</Folder><Folder><name>B</name>"
    + PLACEMARK.format("Skarn", "-21.2,48.3")
    + "<Placemark><name>Road</name><LineString><coordinates>-21.5,48.2 -21,48"
    "</coordinates></LineString></Placemark></Folder></Document></kml>"
)


@pytest.fixture(name="write")
def _write(tmp_path: Path) -> Write:
    def write(name: str, content: str | bytes) -> Path:
        path = tmp_path / name
        raw = content.encode() if isinstance(content, str) else content
        path.write_bytes(raw)
        return path

    return write


def refusal(path: Path | str) -> str:
    with pytest.raises(InputError) as caught:
        read_sites(path)
    return str(caught.value)


def geojson(*features: dict[str, object], **more: object) -> str:
    return json.dumps({"type": "FeatureCollection", "features": features, **more})


def feature(geometry: object, **properties: object) -> dict[str, object]:
    return {"type": "Feature", "properties": properties, "geometry": geometry}


def at(*xy: float) -> dict[str, object]:
    return {"type": "Point", "coordinates": xy}


def write_gpkg(path: Path, shapes: list[object], **columns: list[object]) -> Path:
    pyogrio.raw.write(
        path,
        shapely.to_wkb(np.array(shapes, dtype=object)),
        [np.array(column, dtype=object) for column in columns.values()],
        list(columns),
        geometry_type="Unknown",
        crs="EPSG:32630",
        driver="GPKG",
    )
    return path


@pytest.mark.parametrize(
    "text",
    [
        "name,lat,lon,ele\nSkarvel,48.2,-21.5,431\nSkarn,48.3,-21.2,\n",
        "\ufeffname;latitude;longitude;elevation\r\nSkarvel;48.2;-21.5;431\r\n\r\n"
        "Skarn;48.3;−21.2;\r\n",
        "Ground (m)\tLng\tLat_deg\tSite name\n431\t-21.5\t48.2\tSkarvel\n"
        "\t-21.2\t48.3\tSkarn",
        'id,name,lat,lon,ground_m,extra\n1,"Skarvel",48.2,-21.5,431,"a, b"\n'
        "2,Skarn,48.3,-21.2\n",
        "\n,,,\nstation,lat_deg,lon_deg,ele\n\nSkarvel,48.2,338.5,4.31e2\n"
        "Skarn,48.3,-2.12e1,\n",
    ],
    ids=[
        "commas",
        "semicolons and mark",
        "tabs",
        "quotes and short rows",
        "blank rows",
    ],
)
def test_a_table_gives_its_rows_whatever_parts_its_cells(
    write: Write, text: str
) -> None:
    assert read_sites(write("sites.csv", text)) == (SKARVEL, SKARN)


def test_a_table_in_utf_16_is_read(write: Write) -> None:
    text = "name\tlat\tlon\tele\nSkarvel\t48.2\t-21.5\t431\nSkarn\t48.3\t-21.2\t\n"
    assert read_sites(write("s.txt", text.encode("utf-16"))) == (SKARVEL, SKARN)


def test_a_note_is_kept_and_ground_in_feet_is_metres(write: Write) -> None:
    text = 'name,lat,lon,ele_ft,Remark\nSkarvel,48.2,-21.5,1000,"by the cairn, north"\n'
    (site,) = read_sites(write("sites.csv", text))
    assert site.note == "by the cairn, north"
    assert site.surveyed_ground_m == pytest.approx(304.8, abs=1e-12)


@pytest.mark.parametrize(
    ("text", "part"),
    [
        ("", "is empty"),
        ("\n\n", "is empty"),
        ("name,lat,lon\n", "no rows"),
        ("lat,lon\n48.2,-21.5\n", "no name column (its headings: lat, lon)"),
        ("name,lon\nA,1\n", "no lat column"),
        ("name,lat,y\nA,1,2\n", "no lon column"),
        ("name,lat,latitude,lon\nA,1,1,2\n", "two lat columns, lat and latitude"),
        ("name,lat,lon\nA,48.2,-21.5\n,48.2,-21.5\n", "Row 3 has no name."),
        ("name,lat,lon\n\nA,,-21.5\n", "Row 3 has no latitude."),
        ("name,lat,lon\nA,48.2\n", "Row 2 has no longitude."),
        ("name,lat,lon\nA,north,1\n", 'Row 2: latitude "north" is not a decimal'),
        ("name,lat,lon\nA,nan,1\n", 'Row 2: latitude "nan"'),
        ("name;lat;lon\nA;48,2;1\n", "write decimals with a point, 48.2."),
        ("name,lat,lon\nA,48,2,-21,5\n", "Row 2 has 5 cells under 3 headings"),
        ("name,lat,lon\nA,-121.5,48.2\n", "Row 2: latitude -121.5 is outside"),
        ("name,lat,lon\nA,-121.5,48.2\n", "exchanged the point fits"),
        ("name,lat,lon\nA,95,170\n", "Row 2: Latitude 95 is outside"),
        ("name,lat,lon\nA,4212345,512345\n", "Row 2: 4212345, 512345 look like"),
        ("name,lat,lon\nA,1e400,1\n", "look like"),
        ("name,lat,lon,ele\nA,1,2,high\n", 'Row 2: ground "high"'),
        ("name,lat,lon,ele\nA,1,2,-32768\n", "Row 2: ground -32768 under ele"),
        ("name,lat,lon,ele_ft\nA,1,2,99999\n", "outside -500 to 9000 m"),
        ('name,lat,lon\nA,1,2\n"' + "x" * 140_000 + '",1,2\n', "row 3, cannot be read"),
        (b"name,lat,lon\nA,1,2\n\xd8st,1,2\n", "line 3, is not UTF-8"),
    ],
)
def test_a_table_that_cannot_be_used_names_the_row(
    write: Write, text: str | bytes, part: str
) -> None:
    assert part in refusal(write("sites.csv", text))


def test_waypoints_are_sites_and_tracks_are_not(write: Write) -> None:
    found = read_site_file(write("Sites.GPX", GPX + TRACK + "</gpx>"))
    assert found.sites == (SKARVEL, SKARN)
    assert found.notes == ()


def test_placemarks_of_every_folder_are_sites_and_lines_are_counted(
    write: Write,
) -> None:
    found = read_site_file(write("sites.kml", KML))
    skarvel = Site(name="Skarvel", point=SKARVEL.point)
    assert found.sites == (skarvel, SKARN)
    (note,) = found.notes
    assert note.code == "sites_skipped"
    assert note.text == "sites.kml: features that are no points, left out: 1."


def test_geojson_gives_points_with_names_and_counts_the_rest(write: Write) -> None:
    line = {"type": "LineString", "coordinates": [[0, 0], [1, 1]]}
    group = {"type": "MultiPoint", "coordinates": [[-21.2, 48.3]]}
    pair = {"type": "MultiPoint", "coordinates": [[0, 0], [1, 1]]}
    text = geojson(
        feature(at(-21.5, 48.2, 7.0), name="Skarvel", ele=431, odd=[1, 2]),
        feature(group, name="Skarn", ele=None),
        feature(line, name="Road"),
        feature(pair, name="Pair"),
        feature(None, name="Nowhere"),
        feature(at(1.0, 2.0), name=""),
    )
    found = read_site_file(write("sites.geojson", text))
    assert found.sites == (SKARVEL, SKARN)
    assert [note.text.split(": ")[2] for note in found.notes] == ["3.", "1."]


def test_a_number_can_be_a_name_and_text_a_ground(write: Write) -> None:
    text = geojson(feature(at(-21.5, 48.2), name=402, elevation="431"))
    (site,) = read_sites(write("sites.json", text))
    assert (site.name, site.surveyed_ground_m) == ("402", 431.0)


def test_coordinates_of_a_grid_are_brought_to_latitude_and_longitude(
    write: Write, tmp_path: Path
) -> None:
    # x = 500 km is the central meridian of UTM zone 30, 3° W, by definition of the
    # zone; y = 0 is the equator
    crs = {"type": "name", "properties": {"name": "urn:ogc:def:crs:EPSG::32630"}}
    text = geojson(feature(at(500_000.0, 0.0), name="A"), crs=crs)
    gpkg = write_gpkg(tmp_path / "a.gpkg", [shapely.Point(500_000, 0)], name=["A"])
    for path in (write("a.geojson", text), gpkg):
        (site,) = read_sites(path)
        assert site.point.lat_deg == pytest.approx(0.0, abs=1e-9)
        assert site.point.lon_deg == pytest.approx(-3.0, abs=1e-9)


def test_a_shapefile_without_crs_is_refused_and_with_one_is_read(
    tmp_path: Path,
) -> None:
    path = tmp_path / "a.shp"
    pyogrio.raw.write(
        path,
        shapely.to_wkb(np.array([shapely.Point(-21.5, 48.2)])),
        [np.array(["Skarvel"], dtype=object)],
        ["name"],
        geometry_type="Point",
        crs="EPSG:4326",
        driver="ESRI Shapefile",
    )
    assert read_sites(path) == (Site(name="Skarvel", point=SKARVEL.point),)
    path.with_suffix(".prj").unlink()
    assert "states no CRS" in refusal(path)


def test_a_geopackage_without_points_or_names_is_refused(tmp_path: Path) -> None:
    line = shapely.LineString([(0, 0), (1, 1)])
    lines = write_gpkg(tmp_path / "lines.gpkg", [line], name=["Road"])
    assert "holds no points (1 lines, areas" in refusal(lines)
    unnamed = write_gpkg(tmp_path / "a.gpkg", [shapely.Point(5e5, 0)], ele=["3"])
    assert 'points but no names (its columns: ele); give them a column "name"' in (
        refusal(unnamed)
    )


@pytest.mark.parametrize(
    ("name", "text", "part"),
    [
        ("a.gpx", "", "is empty"),
        ("a.gpx", GPX_HEAD + "</gpx>", "holds no points."),
        ("a.gpx", GPX, "no element found at line 1"),
        ("a.gpx", '<gpx><wpt lat="1"', "broken, or no gpx file"),
        ("a.gpx", KML, "is not what its name says: no gpx file"),
        ("a.kml", KML[:-20], "cannot be read"),
        ("a.kml", GPX + "</gpx>", "no kml file"),
        ("a.geojson", "nonsense", "no geojson file"),
        ("a.geojson", '{"a": 1}', "broken, or no geojson file"),
        ("a.geojson", geojson(feature(at(1.0, 2.0), name="A"))[:-9], "cannot be read"),
        ("a.geojson", geojson(), "holds no points."),
        ("a.geojson", geojson(feature(at(1.0, 99.0), name="A")), 'Site "A" in a.geo'),
        ("a.geojson", geojson(feature(at(1.0, 2.0), name="A", ele=-9999)), "-9999"),
        ("a.gpkg", "SQLite format 2", "no gpkg file"),
        ("a.gpkg", "SQLite format 3\0 and nothing else", "cannot be read"),
        ("a.shp", "abc", "no shp file"),
        ("a.kmz", "PK", "files that end in .csv"),
    ],
)
def test_a_broken_or_empty_file_is_refused_with_its_reason(
    write: Write, name: str, text: str, part: str
) -> None:
    said = refusal(write(name, text))
    assert part in said
    assert "/" not in said.replace("lat/lon", "")


@pytest.mark.parametrize("encoding", ["utf-8", "utf-16"])
def test_xml_that_declares_entities_is_refused_before_it_is_parsed(
    write: Write, encoding: str
) -> None:
    bomb = '<!DOCTYPE gpx [<!ENTITY a "ha"><!ENTITY b "&a;&a;&a;&a;">]>'
    head = f'<?xml version="1.0" encoding="{encoding}"?>'
    text = head + bomb + GPX.partition("?>")[2].replace("Skarn", "&b;") + "</gpx>"
    said = refusal(write("a.gpx", text.encode(encoding)))
    assert "declares its own XML entities" in said


@pytest.mark.parametrize("name", ["a.gpx", "a.kml", "a.geojson"])
def test_a_file_that_sends_the_reader_elsewhere_is_refused(
    write: Write, name: str
) -> None:
    source = write("secret.csv", "name,lat,lon\nA,1,2\n")
    text = (
        "<OGRVRTDataSource><OGRVRTLayer name='secret'><SrcDataSource>"
        f"{source}</SrcDataSource></OGRVRTLayer></OGRVRTDataSource>"
    )
    assert "is not what its name says" in refusal(write(name, text))
    assert "is not what its name says" in refusal(write(name, f"<gpx/>{text}"))


def test_a_missing_file_and_a_folder_are_told_apart(tmp_path: Path) -> None:
    assert refusal(tmp_path / "none.csv").endswith("none.csv does not exist.")
    assert refusal(tmp_path).endswith("is a folder, not a file.")


def test_a_crs_that_is_no_map_is_refused(write: Write) -> None:
    crs = {"type": "name", "properties": {"name": "urn:ogc:def:crs:EPSG::4978"}}
    text = geojson(feature(at(1.0, 2.0), name="A"), crs=crs)
    assert "a.geojson: its CRS cannot be used." in refusal(write("a.geojson", text))


@pytest.mark.parametrize("name", ["a.csv", "a.gpx"])
def test_a_file_that_may_not_be_read_says_so(
    write: Write, monkeypatch: pytest.MonkeyPatch, name: str
) -> None:
    def refuse(path: Path) -> bytes:
        raise PermissionError(13, "Permission denied", path)

    path = write(name, GPX)
    monkeypatch.setattr(Path, "read_bytes", refuse)
    assert refusal(path).endswith(f"{name} cannot be opened: Permission denied.")
