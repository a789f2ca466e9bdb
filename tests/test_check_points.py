"""Check points for the survey crew: which places, what they say, safe to open."""

import csv
import io
import json
import xml.etree.ElementTree as ET
from dataclasses import replace
from pathlib import Path

import pytest
from pyproj import Geod

from profiler.errors import InputError
from profiler.output.check_points import (
    COLUMNS,
    GPX,
    CheckPoint,
    check_points,
    check_points_csv,
    check_points_geojson,
    check_points_gpx,
    writer_for,
)
from tests.asking import HIDDEN, PART, SEA, UPLAND, answer_of, profile, record_of, run

RADIO = (*HIDDEN, "--frequency", "6GHz", "--rule-set", "p530-temperate")
#: Clear, with ground inside the first zone.
TIGHT = (
    *("--from", "Skarvel", "--from-height", "45m"),
    *("--to", "Quillet Mast", "--to-height", "45m"),
    *("--frequency", "6GHz", "--criterion", "ke=4/3 f1=0.6"),
)
ENDINGS = (".csv", ".geojson", ".gpx")
POINT = CheckPoint(
    name="Mast",
    lat_deg=1.0,
    lon_deg=-2.0,
    distance_m=10.0,
    ground_m=3.0,
    measure="height",
    why="because",
)


def rows_of(text: str) -> list[dict[str, str]]:
    return list(csv.DictReader(io.StringIO(text)))


def test_the_stations_stand_first_and_last_with_ground_and_antenna() -> None:
    values = record_of(*RADIO)
    first, *_, last = check_points(answer_of(*RADIO))
    for point, role in ((first, "from"), (last, "to")):
        end = values[role]
        assert point.name == end["name"]
        assert (point.lat_deg, point.lon_deg) == (end["lat_deg"], end["lon_deg"])
        assert (point.ground_m, point.antenna_agl_m) == (
            end["ground_m"],
            end["agl_m"],
        )
    assert (first.distance_m, last.distance_m) == (0.0, values["path"]["distance_m"])


def test_every_blocked_stretch_is_visited_once_at_its_worst_place() -> None:
    values = record_of(*HIDDEN)
    inner = check_points(answer_of(*HIDDEN))[1:-1]
    assert [(p.distance_m, p.decides_m) for p in inner] == [
        (s["worst_at_m"], -s["worst_margin_m"]) for s in values["blocked_stretches"]
    ]
    assert "decisive point" in inner[0].why
    assert "worst of blocked stretch 1" in inner[0].why
    assert inner[0].ground_m == values["decisive"]["ground_m"]


def test_ground_of_a_stretch_is_the_line_and_what_stands_above_it() -> None:
    line = answer_of(*HIDDEN)
    for point, stretch in zip(
        check_points(line)[1:-1], line.blocked_stretches, strict=True
    ):
        # between two samples of a stretch the ground is no straight line
        at = abs(line.profile.dist_m - stretch.worst_at_m).argmin()
        assert point.ground_m == pytest.approx(line.profile.ground_m[at], abs=0.5)


def test_each_criterion_and_each_obstacle_within_f1_has_its_place() -> None:
    radio = record_of(*TIGHT)["radio"]
    told = {p.distance_m: p.why for p in check_points(answer_of(*TIGHT))}
    for result in radio["criteria"]:
        assert "0.6 F1 at ke 4/3" in told[result["at"]["distance_m"]]
    near = [o for o in radio["obstacles"] if o["f1_share"] < 1.0]
    assert 0 < len(near) < len(radio["obstacles"])
    for obstacle in radio["obstacles"]:
        listed = "obstacle" in told.get(obstacle["distance_m"], "")
        assert listed == (obstacle["f1_share"] < 1.0)


def test_the_least_metres_of_a_place_with_several_reasons_are_told() -> None:
    radio = record_of(*TIGHT)["radio"]
    at = radio["criteria"][0]
    place = next(
        p
        for p in check_points(answer_of(*TIGHT))
        if p.distance_m == at["at"]["distance_m"]
    )
    assert place.decides_m == min(at["margin_m"], at["at"]["clearance_m"])


def test_a_clear_path_of_light_has_its_decisive_and_its_horizon_point() -> None:
    values = record_of(*PART)
    told = {p.distance_m: p.why for p in check_points(answer_of(*PART))}
    assert "decisive point" in told[values["decisive"]["distance_m"]]
    assert "horizon" in told[values["horizon"]["distance_m"]]


def test_unknown_ground_is_a_place_to_measure() -> None:
    values = record_of(*SEA)
    point = next(p for p in check_points(answer_of(*SEA)) if "no ground known" in p.why)
    assert point.lat_deg == values["void"]["lat_deg"]
    assert point.decides_m is None


def test_ground_beside_the_path_is_a_place_of_its_own() -> None:
    asked = (
        *("--from", "Skarvel", "--from-height", "45m", "--to", "Vennick"),
        *("--to-height", "10m", "--frequency", "400MHz"),
    )
    values = record_of(*asked)
    side = values["radio"]["side"]
    (point,) = (p for p in check_points(answer_of(*asked)) if p.offset_m > 0.0)
    assert (point.side, point.offset_m) == (side["side"], side["offset_m"])
    assert (point.lat_deg, point.lon_deg) == (side["lat_deg"], side["lon_deg"])
    d1 = side["distance_m"]
    d2 = values["path"]["distance_m"] - d1
    f1 = (values["radio"]["wavelength_m"] * d1 * d2 / (d1 + d2)) ** 0.5
    assert point.decides_m == pytest.approx(side["f1_share"] * f1, abs=1e-3)
    assert "beside the path" in point.why


def test_trees_hide_how_high_the_ground_of_a_stretch_is() -> None:
    line = answer_of(*HIDDEN, "--canopy", "15m")
    points = check_points(line)[1:-1]
    stretches = [p for p in points if "worst of blocked stretch" in p.why]
    assert len(stretches) == len(line.blocked_stretches)
    decisive = line.decisive
    assert decisive is not None
    for point in stretches:
        is_decisive = "decisive" in point.why
        assert (point.ground_m is not None) == is_decisive
        if is_decisive:
            assert point.ground_m == pytest.approx(decisive.ground_m, abs=1e-3)


def test_a_path_of_unknown_ground_has_its_void_and_its_stations() -> None:
    sea = (
        *("--from", "48.40,-21.60", "--from-amsl", "40m"),
        *("--to", "48.39,-21.60", "--to-amsl", "40m"),
    )
    near, void, far = check_points(answer_of(*sea))
    assert "no ground known" in void.why
    assert (near.ground_m, void.ground_m, far.ground_m) == (None, None, None)
    assert near.why == "station, ground not known"


def test_places_are_in_order_and_lie_on_the_path() -> None:
    line = answer_of(*TIGHT)
    points = [p for p in check_points(line) if p.offset_m == 0.0]
    dist = [p.distance_m for p in points]
    assert dist == sorted(dist)
    start = line.path.start
    for point in points:
        _, _, away = Geod(ellps="WGS84").inv(
            start.lon_deg, start.lat_deg, point.lon_deg, point.lat_deg
        )
        # coordinates with 9 decimals: a tenth of a millimetre
        assert away == pytest.approx(point.distance_m, abs=2e-3)


@pytest.mark.parametrize("question", [HIDDEN, RADIO, TIGHT, SEA])
def test_all_three_forms_hold_the_same_places(question: tuple[str, ...]) -> None:
    points = check_points(answer_of(*question))
    table = rows_of(check_points_csv(points))
    features = json.loads(check_points_geojson(points))["features"]
    waypoints = ET.fromstring(check_points_gpx(points)).findall(f"{{{GPX}}}wpt")
    there = [(p.lat_deg, p.lon_deg) for p in points]
    assert [(float(r["lat_deg"]), float(r["lon_deg"])) for r in table] == there
    assert [tuple(f["geometry"]["coordinates"][::-1]) for f in features] == there
    assert [(float(w.attrib["lat"]), float(w.attrib["lon"])) for w in waypoints] == (
        there
    )
    assert tuple(table[0]) == COLUMNS


@pytest.mark.parametrize("sign", ["=", "+", "-", "@"])
def test_a_spreadsheet_is_not_made_to_run_a_name(sign: str) -> None:
    name = f'{sign}HYPERLINK("x")'
    (row,) = rows_of(check_points_csv((replace(POINT, name=name),)))
    assert row["name"] == f"'{name}"
    assert row["lon_deg"] == "-2.000000000"


def test_a_name_with_mark_up_and_line_breaks_stays_a_name() -> None:
    odd = replace(POINT, name='A <b>&"\n\x01 mast')
    root = ET.fromstring(check_points_gpx((odd,)))
    assert root.findtext(f"{{{GPX}}}wpt/{{{GPX}}}name") == 'A <b>&" mast'
    (row,) = rows_of(check_points_csv((odd,)))
    assert row["name"] == 'A <b>&" mast'
    feature = json.loads(check_points_geojson((odd,)))["features"][0]
    assert feature["properties"]["name"] == 'A <b>&" mast'


def test_waypoints_end_just_before_the_antimeridian() -> None:
    """GPX 1.1 schema, longitudeType: -180 <= value < 180."""
    root = ET.fromstring(check_points_gpx((replace(POINT, lon_deg=180.0),)))
    waypoint = root.find(f"{{{GPX}}}wpt")
    assert waypoint is not None
    assert float(waypoint.attrib["lon"]) == -180.0


def test_a_place_without_known_ground_has_an_empty_cell_and_no_elevation() -> None:
    bare = replace(POINT, ground_m=None)
    assert rows_of(check_points_csv((bare,)))[0]["ground_m"] == ""
    assert "<ele>" not in check_points_gpx((bare,))


@pytest.mark.parametrize("ending", ENDINGS)
def test_the_option_writes_the_form_of_the_ending(ending: str, tmp_path: Path) -> None:
    name = tmp_path / f"points{ending.upper()}"
    ended = profile(*HIDDEN, "--check-points", str(name))
    assert ended.status == 0
    assert f"Wrote {name}" in ended.err
    points = check_points(answer_of(*HIDDEN))
    assert name.read_text("utf-8") == writer_for(name)(points)
    profile(*HIDDEN, "--check-points", str(tmp_path / f"again{ending}"))
    assert (tmp_path / f"again{ending}").read_bytes() == name.read_bytes()


def test_reasons_follow_the_unit_that_is_shown_and_columns_stay_metres() -> None:
    line = answer_of(*HIDDEN)
    feet, metres = check_points(line, show_in="ft"), check_points(line)
    assert "19.6 ft above the line" in feet[1].why
    assert [p.decides_m for p in feet] == [p.decides_m for p in metres]


def test_another_ending_is_refused_before_any_work() -> None:
    ended = profile(*HIDDEN, "--check-points", "points.shp")
    assert ended.status == 3
    assert ended.said == 'Error: "points.shp" must end in .csv, .geojson or .gpx.'
    with pytest.raises(InputError, match=r"must end in \.csv"):
        writer_for(Path("points"))


def test_check_points_never_overwrite_what_the_question_reads(tmp_path: Path) -> None:
    sites = tmp_path / "sites.csv"
    sites.write_text("name,lat,lon\nA,48.2092,-21.50344\nB,48.32758,-21.17892\n")
    ended = run(
        *("profile", "--dem", str(UPLAND), "--sites", str(sites)),
        *("--from", "A", "--to", "B", "--check-points", str(sites)),
    )
    assert ended.status == 3
    assert "would be overwritten" in ended.err
    assert sites.read_text().startswith("name,lat,lon\n")


def test_two_results_do_not_share_a_file(tmp_path: Path) -> None:
    name = str(tmp_path / "one.geojson")
    ended = profile(*HIDDEN, "--geojson", name, "--check-points", name)
    assert ended.status == 3
    assert "Two results go to one file" in ended.err
