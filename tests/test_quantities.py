"""Heights, lengths and bendings as people write them, and click's view of them."""

import subprocess
import sys

import click
import pytest
from click.testing import CliRunner

from profiler.cli.points import EastingNorthing, LatLon
from profiler.cli.quantities import (
    bare_k_message,
    ke_looks_like_kr,
    parse_height,
    parse_ke,
    parse_kr,
    parse_length,
    parse_n_gradient,
)
from profiler.cli.types import HEIGHT, KE, KR, LENGTH, N_GRADIENT, POINT, PointType
from profiler.errors import InputError


@pytest.mark.parametrize(
    ("text", "height_m"),
    [
        ("20m", 20.0),
        ("20", 20.0),
        ("20.", 20.0),
        (".5 m", 0.5),
        ("−3.5 metres", -3.5),
        ("65ft", 65 * 0.3048),
        ("65 FEET", 65 * 0.3048),
        ("65 us-ft", 65 * 1200 / 3937),
        ("65us ft", 65 * 1200 / 3937),
        ("٢٠m", 20.0),
    ],
)
def test_a_height_is_metres_unless_its_unit_says_otherwise(
    text: str, height_m: float
) -> None:
    assert parse_height(text) == pytest.approx(height_m, rel=1e-15)


@pytest.mark.parametrize(
    ("text", "length_m"),
    [
        ("50m", 50.0),
        ("12km", 12000.0),
        ("2mi", 2 * 1609.344),
        ("5nmi", 5 * 1852.0),
        ("100 ft", 30.48),
        ("0", 0.0),
    ],
)
def test_a_length_takes_the_units_of_maps(text: str, length_m: float) -> None:
    assert parse_length(text) == pytest.approx(length_m, rel=1e-15)


@pytest.mark.parametrize(
    ("text", "part"),
    [
        ("", "A height is missing"),
        ("20 yd", '20 what? "yd"'),
        ("65'", "65 what?"),
        ("1,5", "write decimals with a point: 1.5."),
        ("1,5m", "1.5"),
        ("1,500", "write 1500 or 1.500"),
        ("1e400", "without an exponent"),
        ("nan", "not a height"),
        ("inf m", "not a height"),
        ("m", "not a height"),
        ("1.2.3", "not a number"),
        ("-", "not a height"),
        ("9" * 300, "not a height"),
        ("20² m", "20 what?"),
    ],
)
def test_a_height_that_is_none_is_refused_with_its_reason(text: str, part: str) -> None:
    with pytest.raises(InputError) as caught:
        parse_height(text)
    assert part in str(caught.value)


def test_a_length_below_zero_is_refused() -> None:
    with pytest.raises(InputError, match="below 0"):
        parse_length("-1km")


def test_a_nanometre_is_no_nautical_mile() -> None:
    with pytest.raises(InputError, match="nmi"):
        parse_length("5nm")


def test_a_fraction_gives_the_ratio_that_python_computes() -> None:
    assert parse_ke("4/3") == 4 / 3
    assert parse_ke(" 4 / 3 ") == 4 / 3
    assert parse_ke("1.333") == 1.333
    assert parse_kr("1/7") == 1 / 7
    assert parse_kr("-4") == -4.0
    assert parse_n_gradient("−39 N/km") == -39.0
    assert parse_n_gradient("-39") == -39.0


@pytest.mark.parametrize("text", ["0", "-1", "0/3", "-4/3"])
def test_a_ke_not_above_zero_is_refused(text: str) -> None:
    with pytest.raises(InputError, match="not above 0"):
        parse_ke(text)


@pytest.mark.parametrize("text", ["1/0", "4/3/2", "", "/", "four thirds", "4/nan"])
def test_a_ke_that_is_no_number_is_refused(text: str) -> None:
    with pytest.raises(InputError):
        parse_ke(text)


def test_a_quotient_beyond_all_numbers_is_refused() -> None:
    with pytest.raises(InputError, match="too large"):
        parse_kr("9" * 190 + "/0." + "0" * 150 + "1")


def test_an_infinite_ke_is_told_to_be_kr_1() -> None:
    with pytest.raises(InputError, match="--kr 1"):
        parse_ke("inf")


@pytest.mark.parametrize("parse", [parse_ke, parse_kr, parse_n_gradient])
@pytest.mark.parametrize("text", ["k=0.13", "K = 4/3"])
def test_a_bare_k_is_refused_by_telling_ke_and_kr_apart(parse, text) -> None:  # type: ignore[no-untyped-def]
    with pytest.raises(InputError) as caught:
        parse(text)
    assert str(caught.value) == bare_k_message()
    assert "ke" in bare_k_message()
    assert "kr" in bare_k_message()


def test_a_named_number_is_sent_to_its_own_option() -> None:
    with pytest.raises(InputError, match=r"use --kr 0\.13"):
        parse_ke("kr=0.13")
    with pytest.raises(InputError, match="the number alone: --ke 4/3"):
        parse_ke("ke=4/3")


def test_only_a_ke_between_0_and_0_3_looks_like_a_kr() -> None:
    assert ke_looks_like_kr(0.13)
    assert not ke_looks_like_kr(0.3)
    assert not ke_looks_like_kr(4 / 3)
    assert not ke_looks_like_kr(0.0)


@click.command()
@click.option("--crs", is_eager=True)
@click.option("--from", "from_", type=POINT)
@click.option("--height", type=HEIGHT, default=1.7)
@click.option("--ke", type=KE)
@click.option("--kr", type=KR)
@click.option("--radius", type=LENGTH)
@click.option("--n-gradient", type=N_GRADIENT)
def show(**values: object) -> None:
    click.echo("|".join(str(value) for value in values.values()))


def test_click_hands_over_values_in_si() -> None:
    args = ["--from", "-57.1,4.2", "--height", "65ft", "--ke", "4/3", "--radius", "2km"]
    result = CliRunner().invoke(show, [*args, "--kr", "-2", "--n-gradient", "-39"])
    assert result.exit_code == 0
    assert str(LatLon(-57.1, 4.2)) in result.stdout
    assert "19.812" in result.stdout
    assert "2000.0" in result.stdout
    assert "-39.0" in result.stdout


def test_click_keeps_a_default_that_is_a_number_already() -> None:
    assert "1.7" in CliRunner().invoke(show, []).stdout
    assert PointType().convert(LatLon(1.0, 2.0), None, None) == LatLon(1.0, 2.0)


def test_click_reads_a_grid_pair_when_the_crs_comes_after_it() -> None:
    args = ["--from", "512345,4212345", "--crs", "EPSG:32630"]
    result = CliRunner().invoke(show, args)
    assert str(EastingNorthing(512345.0, 4212345.0)) in result.stdout


@pytest.mark.parametrize(
    ("option", "text", "part"),
    [
        ("--from", "512345,4212345", "Add --crs"),
        ("--height", "20 yd", "20 what?"),
        ("--ke", "0", "not above 0"),
    ],
)
def test_click_exits_2_with_the_sentence_of_the_parser(
    option: str, text: str, part: str
) -> None:
    result = CliRunner().invoke(show, [option, text])
    assert result.exit_code == 2
    assert part in result.output.replace("\n", " ")
    assert option in result.output


def test_help_names_what_each_option_takes() -> None:
    text = CliRunner().invoke(show, ["--help"]).output
    for metavar in ("POINT", "HEIGHT", "LENGTH", "KE", "KR", "N/KM"):
        assert metavar in text


def test_the_parsers_load_no_large_library() -> None:
    code = "import sys, profiler.cli.types; print(*sys.modules)"
    loaded = subprocess.run(
        [sys.executable, "-c", code], capture_output=True, text=True, check=True
    ).stdout.split()
    large = {"pyogrio", "shapely", "matplotlib", "scipy", "numba"}
    assert large.isdisjoint(loaded)
    assert "profiler.cli.types" in loaded
