"""The main command: what it prints, writes and returns."""

import json
from pathlib import Path

import pytest
from pyproj import Geod, Transformer

from tests.asking import (
    GIVEN,
    HIDDEN,
    PART,
    SAMPLE,
    SEA,
    UPLAND,
    profile,
    record_of,
    run,
    spawn,
)

SKARVEL = (48.2092, -21.50344)
MAST = (48.32758, -21.17892)


@pytest.mark.parametrize(
    ("question", "plain", "asked"), [(PART, 0, 0), (HIDDEN, 0, 4), (SEA, 0, 5)]
)
def test_the_verdict_is_a_status_only_when_asked(
    question: tuple[str, ...], plain: int, asked: int
) -> None:
    assert profile(*question).status == plain
    assert profile(*question, "--exit-code").status == asked


def test_stdout_is_the_answer_and_stderr_the_next_step() -> None:
    ended = profile(*HIDDEN)
    assert ended.out.startswith("HIDDEN. ")
    assert ended.out.endswith("Judged for light. For a radio path add --frequency.\n")
    assert ended.err == "Next: add --figure profile.png to see it drawn.\n"


def test_the_record_alone_goes_to_stdout_with_a_dash() -> None:
    ended = profile(*HIDDEN, "--json", "-")
    assert json.loads(ended.out)["schema"] == "overbrow/profile/1"


def test_every_result_is_written_and_named_on_stderr(tmp_path: Path) -> None:
    names = {
        "--json": tmp_path / "a.json",
        "--geojson": tmp_path / "a.geojson",
        "--figure": tmp_path / "a.svg",
    }
    words = [word for name, path in names.items() for word in (name, str(path))]
    ended = profile(*HIDDEN, *words)
    assert ended.out == profile(*HIDDEN).out
    assert ended.err.splitlines() == [f"Wrote {path}" for path in names.values()]
    assert sorted(tmp_path.iterdir()) == sorted(names.values())
    assert names["--json"].read_text("utf-8") == profile(*HIDDEN, "--json", "-").out
    json.loads(names["--geojson"].read_text("utf-8"))
    assert b"<svg" in names["--figure"].read_bytes()


@pytest.mark.parametrize("ending", [".png", ".pdf", ".SVG"])
def test_the_ending_says_what_kind_of_figure(tmp_path: Path, ending: str) -> None:
    begins = {".png": b"\x89PNG", ".pdf": b"%PDF", ".SVG": b"<?xml"}
    path = tmp_path / f"profile{ending}"
    assert profile(*HIDDEN, "--figure", str(path)).status == 0
    assert path.read_bytes().startswith(begins[ending])


@pytest.mark.parametrize(
    "start",
    [
        "48.2092,-21.50344",
        "48.2092 -21.50344",
        "48 12 33.12 N, 21 30 12.384 W",
        "48:12:33.12N 21:30:12.384W",
        "48d12m33.12sN 21d30m12.384sW",
        "21 30 12.384 W, 48 12 33.12 N",
        "+481233.12-0213012.384/",
        "skarvel",
        "SKÁRVEL",
    ],
)
def test_every_way_to_write_a_point_gives_the_same_answer(start: str) -> None:
    values = record_of("--from", start, "--to", "Quillet Mast")
    plain = record_of("--from", "Skarvel", "--to", "Quillet Mast")
    assert values["from"]["lat_deg"] == pytest.approx(SKARVEL[0], abs=1e-9)
    assert values["from"]["lon_deg"] == pytest.approx(SKARVEL[1], abs=1e-9)
    assert values["margin_m"] == plain["margin_m"]


def test_easting_and_northing_need_a_crs_and_come_easting_first() -> None:
    east, north = Transformer.from_crs(4326, 32627, always_xy=True).transform(
        SKARVEL[1], SKARVEL[0]
    )
    values = record_of(
        "--from", f"{east:.4f},{north:.4f}", "--to", "Quillet Mast", "--crs",
        "EPSG:32627",
    )  # fmt: skip
    assert values["from"]["lat_deg"] == pytest.approx(SKARVEL[0], abs=1e-8)
    assert values["from"]["lon_deg"] == pytest.approx(SKARVEL[1], abs=1e-8)


def test_the_dems_own_crs_can_be_used() -> None:
    values = record_of(
        "--from", "-21.50344,48.2092", "--to", "Quillet Mast", "--crs", "dem"
    )
    assert values["from"]["lat_deg"] == pytest.approx(SKARVEL[0], abs=1e-9)


def test_defaults_are_an_eye_of_1_7_m_and_bare_ground() -> None:
    values = record_of("--from", "Skarvel", "--to", "Quillet Mast")
    assert values["from"]["agl_m"] == 1.7
    assert values["to"]["agl_m"] == 0.0
    assert values["earth"]["kr"] == 0.13


@pytest.mark.parametrize(
    ("typed", "metres"),
    [("20", 20.0), ("20m", 20.0), ("65ft", 19.812), ("65 us-ft", 19.812)],
)
def test_a_height_is_metres_unless_it_has_a_unit(typed: str, metres: float) -> None:
    values = record_of(*HIDDEN, "--from-height", typed)
    assert values["from"]["agl_m"] == pytest.approx(metres, abs=0.0005)


def test_a_height_above_sea_is_the_same_as_above_ground() -> None:
    plain = record_of(*HIDDEN)
    words = ("--from", "Skarvel", "--to", "Quillet Mast", "--to-height", "30m")
    amsl = record_of(*words, "--from-amsl", str(plain["from"]["amsl_m"]))
    assert amsl["margin_m"] == pytest.approx(plain["margin_m"], abs=0.0015)


@pytest.mark.parametrize("option", [("--ke", "4/3"), ("--kr", "0.25")])
def test_the_same_air_by_two_names_gives_the_same_margin(
    option: tuple[str, str],
) -> None:
    values = record_of(*HIDDEN, *option)
    assert values["margin_m"] == record_of(*HIDDEN, "--ke", "1.3333333333")["margin_m"]


def test_a_negative_gradient_and_a_negative_kr_are_values() -> None:
    assert profile(*HIDDEN, "--n-gradient", "-39").status == 0
    assert profile(*HIDDEN, "--kr", "-0.2").status == 0


def test_a_ke_that_looks_like_a_kr_is_answered_with_a_warning() -> None:
    ended = profile(*HIDDEN, "--ke", "0.13")
    assert ended.status == 0
    assert ended.err.splitlines()[0] == (
        "Warning: --ke 0.13 is an earth bent 7.7 times as hard as it is; for a "
        "coefficient of refraction write --kr 0.13."
    )


def test_the_same_file_twice_is_one_file() -> None:
    words = ("profile", *GIVEN, "--dem", str(UPLAND), *HIDDEN, "--json", "-")
    ended = run(*words)
    assert ended.status == 0
    assert len(json.loads(ended.out)["terrain"]["files"]) == 1


@pytest.mark.parametrize("name", [SAMPLE, SAMPLE / "*.tif", SAMPLE / "upland.t[i]f"])
def test_a_folder_and_a_pattern_stand_for_their_files(name: Path) -> None:
    ended = run("profile", "--dem", str(name), *GIVEN[2:], *HIDDEN, "--json", "-")
    assert ended.status == 0
    files = [f["name"] for f in json.loads(ended.out)["terrain"]["files"]]
    assert "upland.tif" in files


def test_water_is_counted_only_on_request_and_is_told() -> None:
    ended = profile(*SEA, "--sea-level", "0")
    assert ended.out.startswith("SEEN. ")
    assert ended.err.startswith("Warning: 2.14 km without ground count as water at 0 m")


def test_a_surveyed_height_of_a_site_file_is_used_and_told() -> None:
    ended = run(
        "profile", "--dem", str(UPLAND), "--sites", str(SAMPLE / "tops.gpx"),
        "--from", "Pellow Knowe", "--to", "Thrane Pike",
    )  # fmt: skip
    assert ended.status == 0
    assert "ground 1004.0 m (surveyed)" in ended.out
    assert "DEM alone    SEEN, margin " in ended.out


@pytest.mark.parametrize(
    ("dash", "file"), [(("--json", "-"), "--geojson"), ((), "--json")]
)
def test_a_file_is_written_beside_either_answer(
    tmp_path: Path, dash: tuple[str, ...], file: str
) -> None:
    ended = profile(*HIDDEN, *dash, file, str(tmp_path / "result"))
    assert ended.status == 0
    json.loads((tmp_path / "result").read_text("utf-8"))


def test_the_other_interpolations_are_named_in_the_answer() -> None:
    text = profile(*HIDDEN, "--interpolation", "highest").out
    assert "posts 31 x 21 m, highest post, bare or surface not stated." in text


@pytest.mark.parametrize(
    ("kind", "told"), [("bare", "bare ground"), ("surface", "surface model")]
)
def test_the_kind_of_model_is_told_as_declared(kind: str, told: str) -> None:
    first_two = profile(*HIDDEN, "--dem-kind", kind).out.splitlines()[:2]
    assert first_two[1].endswith(f", {told}.")


def test_a_result_may_have_a_name_in_no_encoding(tmp_path: Path) -> None:
    odd = tmp_path / "r\udcff.json"
    ended = spawn("profile", *GIVEN, *HIDDEN, "--json", str(odd))
    assert ended.status == 0
    assert ended.err == f"Wrote {tmp_path}/r?.json\n"
    json.loads(odd.read_text("utf-8"))


def test_kilometres_without_ground_are_those_of_the_geodesic() -> None:
    geod = Geod(ellps="WGS84")
    _, _, length = geod.inv(SKARVEL[1], SKARVEL[0], -20.9, 48.3)
    azimuth, _, _ = geod.inv(SKARVEL[1], SKARVEL[0], -20.9, 48.3)
    low, high = 0.0, length
    while high - low > 1.0:
        middle = (low + high) / 2.0
        lon, _, _ = geod.fwd(SKARVEL[1], SKARVEL[0], azimuth, middle)
        low, high = (middle, high) if lon < -21.05 else (low, middle)
    ended = profile("--from", "Skarvel", "--to", "48.3,-20.9")
    assert ended.said == (
        f"Error: No ground from {low / 1000:.1f} to {length / 1000:.1f} km; this DEM "
        "ends at 21.05 W. Add the file beyond, or choose a nearer point."
    )


def test_shapes_left_out_of_a_file_of_sites_are_counted(tmp_path: Path) -> None:
    point = {"type": "Point", "coordinates": [SKARVEL[1], SKARVEL[0]]}
    line = {"type": "LineString", "coordinates": [[0, 0], [1, 1]]}
    features = [
        {"type": "Feature", "properties": {"name": "A"}, "geometry": geometry}
        for geometry in (point, line)
    ]
    file = tmp_path / "sites.geojson"
    file.write_text(json.dumps({"type": "FeatureCollection", "features": features}))
    ended = run(
        "profile", "--dem", str(UPLAND), "--sites", str(file), "--from", "A",
        "--to", f"{MAST[0]},{MAST[1]}",
    )  # fmt: skip
    assert ended.status == 0
    assert ended.err.splitlines()[0] == (
        "Warning: sites.geojson: features that are no points, left out: 1."
    )


def test_ground_that_does_not_count_is_named_in_the_words() -> None:
    near = profile(*PART, "--ignore-near", "50m").out
    assert "left out     ground within 50 m of either end, as asked\n" in near
    water = profile(*SEA, "--sea-level", "0").out
    assert "left out     2.14 km without ground, taken as water at 0 m, as" in water
    assert "left out" not in profile(*PART).out
