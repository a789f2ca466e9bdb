"""Points as people write them."""

import pytest

from profiler.cli.points import EastingNorthing, LatLon, SiteName, parse_point
from profiler.errors import InputError

# 48° 12′ 33.1″ and 21° 30′ 12.4″ in decimal degrees, by hand: 33.1/3600 = 0.009194444
LAT = 48 + 12 / 60 + 33.1 / 3600
LON = -(21 + 30 / 60 + 12.4 / 3600)


def refusal(text: str, *, crs_given: bool = False) -> str:
    with pytest.raises(InputError) as caught:
        parse_point(text, crs_given=crs_given)
    return str(caught.value)


@pytest.mark.parametrize(
    "text",
    [
        "57.1,-4.2",
        "57.1, -4.2",
        "57.1 ,-4.2",
        "57.1;-4.2",
        "57.1 -4.2",
        "  57.1,−4.2 ",
        "+57.1,-4.2",
        "57.1N 4.2W",
        "57.1N,4.2W",
        "4.2W 57.1N",
        "W4.2, N57.1",
        "N57.1 4.2W",
        "57.1n4.2w",
        "57 06 N 4 12 W",
        "57-06-00N 004-12-00W",
        "57.1 degrees north, 4.2 degrees west",
        "57.1°,-4.2°",
        "57.1° -4.2°",
        "+57.1-004.2/",
        "+5706-00412/",
        "５７．１，－４．２",
        "\u200e57.1,\u00a0-4.2",
    ],
)
def test_decimal_degrees_are_read_in_every_order_and_spacing(text: str) -> None:
    point = parse_point(text)
    assert isinstance(point, LatLon)
    assert point.lat_deg == pytest.approx(57.1, abs=1e-12)
    assert point.lon_deg == pytest.approx(-4.2, abs=1e-12)


@pytest.mark.parametrize(
    "text",
    [
        "48 12 33.1 N, 21 30 12.4 W",
        "48 12 33.1 N 21 30 12.4 W",
        "48 12 33.1, -21 30 12.4",
        "48:12:33.1N 21:30:12.4W",
        "48d12m33.1sN 021d30m12.4sW",
        "48D12M33.1SN 021D30M12.4SW",
        "48d12m33.1s -21d30m12.4s",
        "48°12′33.1″N 21°30′12.4″W",
        "48º 12’ 33.1” n, 21º 30’ 12.4'' w",
        "48°12'33.1\" -21°30'12.4\"",
        "N 48 12 33.1 W 21 30 12.4",
        "21 30 12.4 W, 48 12 33.1 N",
        "48deg 12min 33.1sec N, 21deg 30min 12.4sec W",
        "+481233.1-0213012.4/",
    ],
)
def test_degrees_minutes_and_seconds_are_read_in_every_notation(text: str) -> None:
    point = parse_point(text)
    assert isinstance(point, LatLon)
    assert point.lat_deg == pytest.approx(LAT, abs=1e-12)
    assert point.lon_deg == pytest.approx(LON, abs=1e-12)


def test_a_capital_s_after_the_seconds_is_south_and_a_small_one_the_seconds() -> None:
    assert parse_point("48d30m0S 21d30m0E") == LatLon(-48.5, 21.5)
    assert parse_point("48d30m0s, 21d30m0s") == LatLon(48.5, 21.5)
    assert parse_point("48 30 0 s, 21 30 0 e") == LatLon(-48.5, 21.5)


def test_decimal_minutes_are_read() -> None:
    assert parse_point("48 30.5 N, 21 30 W") == LatLon(48 + 30.5 / 60, -21.5)


def test_a_second_degree_sign_begins_the_second_angle() -> None:
    assert parse_point("48° 21°30'") == LatLon(48.0, 21.5)


def test_a_minus_before_zero_degrees_is_kept() -> None:
    assert parse_point("-0 30,-0 15") == LatLon(-0.5, -0.25)


def test_digits_of_another_script_are_read() -> None:
    assert parse_point("٤٨.٢,٢١.٥") == LatLon(48.2, 21.5)


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("57,1,-4,2", "Four numbers: write decimals with points: 57.1,-4.2."),
        ("57,1,4,2", "Four numbers: write decimals with points: 57.1,4.2."),
        ("57,1;-4,2", "Four numbers: write decimals with points: 57.1;-4.2."),
        ("48,2N 21,5W", "Four numbers: write decimals with points: 48.2N 21.5W."),
        (
            "48 12 33,1 N, 21 30 12,4 W",
            "Eight numbers: write decimals with points: 48 12 33.1 N, 21 30 12.4 W.",
        ),
    ],
)
def test_decimal_commas_are_refused_with_the_numbers_as_they_should_be(
    text: str, said: str
) -> None:
    assert refusal(text) == said


@pytest.mark.parametrize(
    "text", ["512345,4212345", "512345 4212345", "512345E 4212345N"]
)
def test_a_grid_pair_without_crs_asks_for_the_crs(text: str) -> None:
    assert refusal(text) == (
        "These look like easting, northing. Add --crs EPSG:n, or --crs dem for the "
        "DEM's own."
    )


@pytest.mark.parametrize("text", ["512345.5,4212345", "512345.5 4212345"])
def test_with_a_crs_two_numbers_are_easting_northing(text: str) -> None:
    assert parse_point(text, crs_given=True) == EastingNorthing(512345.5, 4212345.0)
    assert parse_point("-4.2,57.1", crs_given=True) == EastingNorthing(-4.2, 57.1)


def test_with_a_crs_letters_and_names_keep_their_meaning() -> None:
    assert parse_point("57.1N 4.2W", crs_given=True) == LatLon(57.1, -4.2)
    assert parse_point("+57.1-004.2/", crs_given=True) == LatLon(57.1, -4.2)
    assert parse_point("Skarvel", crs_given=True) == SiteName("Skarvel")


@pytest.mark.parametrize(
    ("text", "part"),
    [
        ("512 345, 4 212 345", "two plain numbers"),
        ("512345", "two plain numbers"),
        ("512345E 4212345N", "without letters"),
        ("512345,5,4212345,2", "512345.5,4212345.2"),
        ("9999999999,1", "Easting 1e+10 is too large"),
        ("1,-9999999999", "Northing -1e+10 is too large"),
    ],
)
def test_with_a_crs_a_pair_that_is_none_is_refused(text: str, part: str) -> None:
    assert part in refusal(text, crs_given=True)


def test_an_exchanged_pair_is_named_as_such_only_where_it_would_fit() -> None:
    assert refusal("-121.5,48.2") == (
        "Latitude -121.5 is outside -90 to 90 degrees. With latitude and longitude "
        'exchanged the point fits: "48.2,-121.5".'
    )
    assert "exchanged" not in refusal("121.5,170")
    assert "exchanged" not in refusal("121.5N 48.2W")


@pytest.mark.parametrize(
    ("text", "part"),
    [
        ("", "A point is missing"),
        (" \t ", "A point is missing"),
        (",", '"," is no point'),
        ("°", "is no point"),
        ("57.1", "One number"),
        ("57.1,", "Put the pair in quotes"),
        ("57.1N", "One number"),
        ("57.1,-4.2,431", "height"),
        ("+57.1-004.2+431/", "holds a height, +431"),
        ("+57.1-004.2CRSlocal/", 'the CRS "local"'),
        ("+57.1-4.2", "put a comma"),
        ("57.1-4.2", "Cannot read"),
        ("57.1 - 4.2", "Cannot read"),
        ("57.1/4.2", "Cannot read"),
        ("57.1,,-4.2", "Cannot read"),
        ("1,2,3,4,5", "Cannot read"),
        ("48,12.5 N 21,30.5 W", "Cannot read"),
        ("-4.2 W, 57 N", "a sign or a letter"),
        ("57.1 N, -4.2 W", "a sign or a letter"),
        ("57.1 N, 4.2", "both angles or to neither"),
        ("57.1 N 4.2 S", "two latitudes"),
        ("57.1 E, 4.2 W", "two longitudes"),
        ("48 60 N, 21 W", "Minutes 60"),
        ("48 12 60 N, 21 W", "Seconds 60"),
        ("+4860-02100/", "Minutes 60"),
        ("48.5 12 N, 21 W", "only the last number"),
        ("48 12 33 4 N, 21 W", "as an angle"),
        ("48'12 N, 21 W", "as an angle"),
        ("48°12:33 N, 21 W", "as an angle"),
        ("48:12: N, 21 W", "as an angle"),
        ("N48 12 N, 21 W", "as an angle"),
        ("12:30", "as an angle"),
        ("nan,1", "two finite numbers"),
        ("1;-inf", "two finite numbers"),
        ("NaN", "two finite numbers"),
        ("1e400,2e3", "without an exponent"),
        ("57.1,-400", "Longitude -400"),
        ("+57.1-400.0/", "Longitude -400"),
        ("48.2°N 21.5°O", "letter O"),
        ("48.2°N 21.5°Q", "Cannot read"),
        ("1" * 150 + ",1", "easting, northing"),
        ("1" * 250, "too long"),
    ],
)
def test_what_is_no_point_is_refused_with_its_reason(text: str, part: str) -> None:
    said = refusal(text)
    assert part in said
    assert said.endswith(".")
    assert len(said) < 300


@pytest.mark.parametrize(
    "text",
    [
        "Skarvel",
        "Hill 402",
        "E12",
        "S 4",
        "North",
        "North, South",
        "Inf Hill 2",
        "St. Anne, old",
        "Quillet Mast",
        "T-junction 3",
        "Élan-Söder 5m",
        "駅",
    ],
)
def test_anything_with_a_word_is_the_name_of_a_site(text: str) -> None:
    assert parse_point(f" {text} ") == SiteName(text)


def test_the_exact_name_of_a_known_site_wins_over_coordinates() -> None:
    assert parse_point("57.1,-4.2", names={"57.1,-4.2"}) == SiteName("57.1,-4.2")
    assert parse_point("402", names=["402"]) == SiteName("402")


def test_the_longitude_of_a_whole_turn_is_left_as_written() -> None:
    assert parse_point("57.1,355.8") == LatLon(57.1, 355.8)


@pytest.mark.parametrize("text", ["1" * 190 + "/", "1 " * 95 + "x", "+1" * 95 + "/"])
def test_a_long_row_of_digits_is_settled_at_once(text: str) -> None:
    # a pattern with nested repeats took 17 s for 60 points of 25 digits
    with pytest.raises(InputError):
        parse_point(text + "°")
