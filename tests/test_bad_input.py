"""Bad input ends in one clear sentence or two: no traceback, no output, no file."""

import re
from pathlib import Path

import pytest

from tests.asking import GIVEN, HIDDEN, SITES, UPLAND, Ended, run
from tests.bad_files import (
    ELEVATION,
    FROM,
    NAMES,
    TO,
    Bad,
    main_example,
    output,
    start,
    words,
)

OUTSIDE = r"lies outside the DEM"
QUOTES = 'Put the pair in quotes: --from "57.1,-4.2".'

PLACES = [
    Bad(
        "latitude and longitude exchanged",
        start("-21.5,48.2"),
        3,
        r"^Error: Longitude 48\.2 lies outside the DEM\. With latitude and longitude "
        r'exchanged the point fits: --from "48\.2,-21\.5"\.$',
    ),
    Bad(
        "target exchanged",
        words(*FROM, "--to", "-21.2,48.3"),
        3,
        r'Longitude 48.3 lies .*: --to "48\.3,-21\.2"\.$',
    ),
    Bad(
        "a target past the edge",
        words(*FROM, "--to", "48.2092,-20.9"),
        3,
        r"^Error: No ground from 33\.7 to 44\.8 km; this DEM ends at 21\.05 W\.",
    ),
    Bad(
        "an eye past the edge",
        start("48.1,-21.3"),
        3,
        r"^Error: No ground from 0\.0 to .* km; this DEM ends at 48\.15 N\.",
    ),
    Bad(
        "both ends outside",
        words("--from", "51,3", "--to", "52,4"),
        3,
        r"--from: 51.00000 N 3.00000 E lies outside the DEM, which covers 48.15 to "
        r"48.42 N, 21.62 to 21.05 W\.",
    ),
    Bad("the other side of the earth", start("48.2,158.5"), 3, OUTSIDE),
    Bad("sign lost", start("48.2092,21.50344"), 3, OUTSIDE),
    Bad("latitude of 91", start("91,-21.5"), 3, r"Latitude 91 is outside -90 to 90"),
    Bad("longitude of 361", start("48.2,361"), 3, r"Longitude 361 is outside"),
    Bad(
        "a grid's numbers without a CRS",
        start("500000,5340000"),
        3,
        r"These look like easting, northing\. Add --crs EPSG:n, or --crs dem for the "
        r"DEM's own\.$",
    ),
    Bad(
        "decimal commas",
        start("57,2,-4,5"),
        3,
        r"Four numbers: write decimals with points: 57\.2,-4\.5\.$",
    ),
    Bad("nothing", start(""), 3, r"--from: A point is missing"),
    Bad("blanks", start("   "), 3, r"--from: A point is missing"),
    Bad("nan", start("nan,nan"), 3, r"needs two finite numbers"),
    Bad("inf", start("inf,-21.5"), 3, r"needs two finite numbers"),
    Bad("1e400", start("1e400,-21.5"), 3, r"without an exponent"),
    Bad("a number of 300 digits", start("9" * 300 + ",1"), 3, r"too long for a point"),
    Bad("one number", start("48.2"), 3, r"A point has two"),
    Bad("three numbers", start("48.2,-21.5,300"), 3, r"height by its own option"),
    Bad("61 minutes", start("48 61 0 N, 21 30 0 W"), 3, r"must be below 60"),
    Bad("two latitudes", start("48.2N 21.5N"), 3, r"gives two latitudes"),
    Bad("sign and letter", start("-48.2N 21.5W"), 3, r"a sign or a letter"),
    Bad("only signs", start("???"), 3, r"is no point"),
    Bad("marks without sense", start("48°°,21"), 3, r"Cannot read"),
    Bad("same point twice", words(*FROM, "--to", FROM[1]), 3, r"are the same place"),
    Bad(
        "half a cell apart",
        words(*FROM, "--to", "48.2093,-21.50344"),
        3,
        r"11\.1 m apart, less than one cell",
    ),
    Bad(
        "a pair cut by a blank",
        words("--from", "48.2,", "-21.5", *TO),
        2,
        re.escape(QUOTES) + "$",
    ),
    Bad(
        "a pair cut by a blank, no comma",
        words("--from", "48.2", "21.5", *TO),
        2,
        re.escape(QUOTES) + "$",
    ),
    Bad(
        "a name cut by a blank",
        words(*FROM, "--to", "Quillet", "Mast"),
        2,
        r'Put the words in quotes: --to "Quillet Mast"\.$',
    ),
    Bad("no point at all", words(*FROM), 2, r"Missing option '--to'"),
    Bad(
        "unknown CRS",
        start("500000,5340000", "--crs", "EPSG:999999"),
        3,
        r"EPSG:999999",
    ),
    Bad("a CRS that is none", start("500000,5340000", "--crs", "grid"), 3, r"grid"),
    Bad(
        "grid of the DEM, northing first",
        words("--from", "48.2,-21.5", "--to", "-21.2,48.3", "--crs", "dem"),
        3,
        OUTSIDE,
    ),
    Bad("no place on the grid", start("10,95", "--crs", "dem"), 3, r"Latitude 95 is"),
    Bad("far off a grid", start("1e8,5", "--crs", "EPSG:32627"), 3, r"plain digits"),
    Bad(
        "farther off a grid",
        start("199999999,5340000", "--crs", "EPSG:32627"),
        3,
        r"is no place in",
    ),
    Bad(
        "the DEM's grid without a DEM",
        lambda _: ("profile", "--from", "1,2", "--to", "3,4", "--crs", "dem"),
        3,
        r"--crs dem needs --dem\.$",
    ),
    Bad(
        "no --dem across the 180th meridian",
        lambda _: ("profile", "--from", "-48,179.9", "--to", "-48.1,-179.9"),
        2,
        r"must cover 48\.11 to 47\.99 S, 179\.89 E to 179\.89 W",
    ),
    Bad(
        "a word before all options", lambda _: ("profile", "x", *FROM, *TO), 2, r"\(x\)"
    ),
    Bad("three parts on a grid", start("1,2,3", "--crs", "dem"), 3, r"two plain"),
]
HEIGHTS = [
    Bad(
        f"{option} {text!r}",
        main_example(option, text),
        2,
        rf"Invalid value for '{option}': ",
    )
    for option in (
        "--from-height", "--to-height", "--from-ground", "--own-hill", "--ignore-near",
        "--void-below", "--sea-level",
    )
    for text in ("", "nan", "inf", "1e400", "ten", "7.5 yd", "1,5", "5-", "9" * 300)
] + [
    Bad(
        "a unit that is none",
        main_example("--from-height", "7.5GHz"),
        2,
        r'7\.5 what\? "GHz" is not a unit known here: use m, ft or us-ft\.$',
    ),
    Bad(
        "both heights",
        main_example("--from-amsl", "500m"),
        2,
        r"--from-height and --from-amsl both state a height\. Give one\.$",
    ),
    Bad("negative height", main_example("--from-height", "-3"), 3, r"below the ground"),
    Bad(
        "above sea, under the ground",
        words("--from", "Skarvel", "--from-amsl", "20m", *TO),
        3,
        r"20 m above sea level at Skarvel is 410\.8 m under its ground of 430\.8 m\.",
    ),
    Bad("negative hill", main_example("--own-hill", "-1"), 2, r"is below 0"),
    Bad("a hill of 900 km", main_example("--own-hill", "900km"), 3, r"2000 m or less"),
    Bad("negative near", main_example("--ignore-near", "-1m"), 2, r"is below 0"),
    Bad("near is all", main_example("--ignore-near", "14km"), 3, r"less than half"),
]  # fmt: skip
AIR = [
    Bad(
        f"{option} {text!r}",
        main_example(option, text),
        2,
        rf"Invalid value for '{option}': ",
    )
    for option in ("--ke", "--kr", "--n-gradient")
    for text in ("", "nan", "1e400", "air", "1/0", "1,3", "k=0.13", "9" * 400)
] + [
    Bad("ke 0", main_example("--ke", "0"), 2, r"is not above 0"),
    Bad("ke -1", main_example("--ke", "-1"), 2, r"State a duct by kr"),
    Bad("ke infinite", main_example("--ke", "inf"), 2, r"write --kr 1\.$"),
    Bad("kr called ke", main_example("--ke", "kr=0.13"), 2, r"use --kr 0\.13\.$"),
    Bad(
        "bare k", main_example("--k", "0.13"), 2, r"k alone has two meanings\. Write ke"
    ),
    Bad("bare k=", main_example("--k=0.13"), 2, r"k alone has two meanings"),
    Bad("bare -k", main_example("-k", "0.13"), 2, r"k alone has two meanings"),
    Bad("ke and kr", main_example("--ke", "1", "--kr", "0"), 2, r"--ke and --kr say"),
    Bad(
        "no refraction and a gradient",
        main_example("--no-refraction", "--n-gradient", "-39"),
        2,
        r"--n-gradient and --no-refraction say the same thing twice\. Give one",
    ),
]
RESULTS = [
    Bad("a folder as file", output("--json", "."), 3, r"is a folder"),
    Bad("an empty name", main_example("--json", ""), 3, r"is a folder"),
    Bad("a missing folder", output("--json", "none/r.json"), 3, r"Make it first"),
    Bad("a file as folder", main_example("--json", f"{SITES}/r"), 3, r"does not exist"),
    Bad("no writing there", main_example("--json", "/proc/r"), 3, r"cannot be written"),
    Bad("no drawing there", main_example("--figure", "/proc/r.png"), 3, r"be written"),
    Bad("a device", main_example("--geojson", "/dev/null"), 3, r"is a device"),
    Bad("too long a name", output("--json", "n" * 300), 3, r"File name too long"),
    Bad("unknown ending", output("--figure", "r.gif"), 3, r"end in \.png, \.svg or"),
    Bad("no ending", output("--figure", "png"), 3, r"end in \.png, \.svg or \.pdf\.$"),
    Bad("over the DEM", main_example("--json", str(UPLAND)), 3, r"be overwritten"),
    Bad("over the sites", main_example("--geojson", str(SITES)), 3, r"be overwritten"),
    Bad(
        "two results in one file",
        lambda f: (
            "profile", *GIVEN, *HIDDEN, "--json", str(f / "r"), "--geojson",
            str(f / "." / "r"),
        ),
        3,
        r"Two results go to one file\. Give each its own name\.$",
    ),
    Bad("unknown drawing", main_example("--draw", "flat"), 2, r"is not one of"),
    Bad("unknown unit of words", main_example("--show-in", "yd"), 2, r"is not one of"),
    Bad("unknown option", main_example("--figur", "r.png"), 2, r"--figure"),
    Bad("option without value", main_example("--json"), 2, r"requires an argument"),
    Bad("an empty word", main_example(""), 2, r"An empty word stands among"),
    Bad("unknown command", lambda _: ("prifile",), 2, r"Nearest: profile\.$"),
]  # fmt: skip
CASES = ELEVATION + PLACES + NAMES + HEIGHTS + AIR + RESULTS


def sentences(text: str) -> int:
    """How many sentences a message has; dots in numbers and names do not count."""
    without_quotes = re.sub(r'"[^"]*"', "x", text)
    # a question and its remedy are one
    return len(re.findall(r"[.!](?=\s+[A-Z(]|$|\)$)", without_quotes))


def contents(folder: Path) -> dict[str, bytes | None]:
    return {
        str(p.relative_to(folder)): p.read_bytes() if p.is_file() else None
        for p in folder.rglob("*")
    }


@pytest.mark.filterwarnings("ignore::rasterio.errors.NotGeoreferencedWarning")
@pytest.mark.parametrize("bad", CASES, ids=lambda bad: bad.name)
def test_bad_input_ends_in_a_clear_sentence_and_leaves_nothing(
    bad: Bad, tmp_path: Path
) -> None:
    given = bad.make(tmp_path)
    before = contents(tmp_path)
    sample = {p: p.stat().st_mtime_ns for p in UPLAND.parent.iterdir()}
    ended: Ended = run(*given)
    assert ended.status == bad.status, ended
    assert ended.out == ""
    assert ended.said.startswith("Error: ")
    assert len(ended.said.splitlines()) == 1
    assert re.search(bad.says, ended.said), ended.said
    assert ended.said.endswith((".", ".)", "?)"))
    assert 1 <= sentences(ended.said) <= 2
    assert "Traceback" not in ended.err
    assert len(ended.said) < 500
    assert contents(tmp_path) == before
    assert {p: p.stat().st_mtime_ns for p in UPLAND.parent.iterdir()} == sample
