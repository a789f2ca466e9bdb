"""The path and its places are GeoJSON that any map reads (RFC 7946)."""

import json
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from pyproj import Geod

from profiler import Answer, Point, Station, look, open_terrain
from profiler.output.exchange import geojson_text
from tests import terrain
from tests.asking import HIDDEN, OWN_HILL, PART, SEA, answer_of

GEOMETRIES = ("Point", "LineString", "MultiLineString")


def positions(geometry: dict[str, Any]) -> list[list[float]]:
    coordinates = geometry["coordinates"]
    if geometry["type"] == "Point":
        return [coordinates]
    if geometry["type"] == "LineString":
        return list(coordinates)
    return [p for part in coordinates for p in part]


def roles(shapes: dict[str, Any]) -> dict[str, dict[str, Any]]:
    return {f["properties"]["role"]: f for f in shapes["features"]}


def across(folder: Path, *, turned: bool) -> Answer:
    """A path of 34 km over a ridge, across the 180th meridian or 90 degrees west."""
    east = -90.0 if turned else 0.0
    column = np.arange(501)
    posts = np.where(np.abs(column - 250) < 2, 300.0, 50.0) + np.zeros((301, 1))
    transform = (0.001, 0.0, 179.75 + east - 0.0005, 0.0, -0.001, 48.1505)
    file = terrain.write_geotiff(
        folder / f"across{turned}.tif", posts, transform, "EPSG:4326"
    )
    return look(
        open_terrain(file, dem_unit="m"),
        Station(point=Point(lat_deg=47.95, lon_deg=179.8 + east), agl_m=10.0),
        Station(point=Point(lat_deg=48.05, lon_deg=180.2 + east), agl_m=10.0),
    )


@pytest.mark.parametrize("question", [HIDDEN, PART, OWN_HILL, SEA])
def test_every_feature_has_the_structure_of_rfc_7946(question: tuple[str, ...]) -> None:
    shapes = json.loads(geojson_text(answer_of(*question)))
    assert set(shapes) == {"type", "features"}
    assert shapes["type"] == "FeatureCollection"
    for feature in shapes["features"]:
        assert set(feature) == {"type", "geometry", "properties"}
        assert feature["type"] == "Feature"
        assert set(feature["geometry"]) == {"type", "coordinates"}
        assert feature["geometry"]["type"] in GEOMETRIES
        for lon, lat in positions(feature["geometry"]):
            assert -180.0 <= lon <= 180.0
            assert -90.0 <= lat <= 90.0


def test_positions_are_longitude_then_latitude() -> None:
    answer = answer_of(*HIDDEN)
    record = answer.record()
    found = roles(answer.geojson())
    for role in ("from", "to", "decisive", "first_block", "horizon"):
        place = record[role]
        assert found[role]["geometry"]["coordinates"] == [
            place["lon_deg"],
            place["lat_deg"],
        ]


def test_properties_are_the_records_fields() -> None:
    answer = answer_of(*HIDDEN)
    record, found = answer.record(), roles(answer.geojson())
    assert found["path"]["properties"]["verdict"] == "blocked"
    assert found["path"]["properties"]["margin_m"] == record["margin_m"]
    for name, value in found["decisive"]["properties"].items():
        assert name == "role" or record["decisive"][name] == value


def test_every_blocked_stretch_is_a_line_with_its_number() -> None:
    answer = answer_of(*HIDDEN)
    stretches = [
        f
        for f in answer.geojson()["features"]
        if f["properties"]["role"] == "blocked_stretch"
    ]
    record = answer.record()["blocked_stretches"]
    assert [s["properties"]["number"] for s in stretches] == [1, 2]
    for shape, stretch in zip(stretches, record, strict=True):
        line = shape["geometry"]["coordinates"]
        (lon0, lat0), (lon1, lat1) = line[0], line[-1]
        _, _, length = Geod(ellps="WGS84").inv(lon0, lat0, lon1, lat1)
        assert length == pytest.approx(stretch["end_m"] - stretch["start_m"], abs=0.01)


def test_the_path_is_the_geodesic_from_end_to_end() -> None:
    answer = answer_of(*HIDDEN)
    record = answer.record()
    line = roles(answer.geojson())["path"]["geometry"]["coordinates"]
    assert line[0] == [record["from"]["lon_deg"], record["from"]["lat_deg"]]
    assert line[-1] == [record["to"]["lon_deg"], record["to"]["lat_deg"]]
    geod = Geod(ellps="WGS84")
    azimuth, _, length = geod.inv(*line[0], *line[-1])
    lon, lat, _ = geod.fwd(line[0][0], line[0][1], azimuth, length / 2.0)
    assert line[len(line) // 2] == pytest.approx([lon, lat], abs=2e-9)


def test_a_line_across_the_180th_meridian_is_cut_there(tmp_path: Path) -> None:
    path = roles(across(tmp_path, turned=False).geojson())["path"]["geometry"]
    assert path["type"] == "MultiLineString"
    west, east = path["coordinates"]
    assert west[-1][0] == 180.0
    assert east[0][0] == -180.0
    assert west[-1][1] == east[0][1]
    for part in (west, east):
        lons = [lon for lon, _ in part]
        assert max(lons) - min(lons) < 1.0
        assert len({np.sign(lon) for lon in lons}) == 1


def test_a_stretch_on_the_180th_meridian_is_cut_too(tmp_path: Path) -> None:
    found = roles(across(tmp_path, turned=False).geojson())
    assert found["blocked_stretch"]["geometry"]["type"] == "MultiLineString"


def test_the_cut_line_is_the_same_line_elsewhere_on_earth(tmp_path: Path) -> None:
    cut = positions(roles(across(tmp_path, turned=False).geojson())["path"]["geometry"])
    plain = roles(across(tmp_path, turned=True).geojson())["path"]["geometry"]
    assert plain["type"] == "LineString"
    moved = [[(lon - 90.0) % 360.0 - 360.0, lat] for lon, lat in cut]
    there = [p for p in moved if abs(p[0] + 270.0) > 1e-12]
    assert len(there) == len(plain["coordinates"])
    for one, other in zip(there, plain["coordinates"], strict=True):
        assert (one[0] + 540.0) % 360.0 - 180.0 == pytest.approx(other[0], abs=2e-9)
        assert one[1] == pytest.approx(other[1], abs=2e-9)


def test_a_void_is_a_point_with_the_height_that_blocks() -> None:
    answer = answer_of(*SEA)
    void = roles(answer.geojson())["void"]
    assert (
        void["properties"]["blocks_above_m"]
        == (answer.record()["void"]["blocks_above_m"])
    )
