"""Every number in the words is the record's, at the rounding that is shown."""

import re

import pytest

from profiler.output.numbers import DOWN, UP, Show, box, percent, rounded_text
from tests.asking import HIDDEN, OWN_HILL, PART, SAMPLE, SEA, answer_of, profile
from tests.sheet import Sheet
from tests.sheet_lines import read_all

COMBE = str(SAMPLE / "combe_fine.tif")
BARE = ("--from", "Skarvel", "--to", "Wexel Hut")
QUESTIONS = {
    "hidden": HIDDEN,
    "hidden by three, heights not stated": (
        "--from",
        "Skarvel",
        "--to",
        "Quillet Mast",
    ),
    "bare target hidden": BARE,
    "many in the way": ("--from", "Skarvel", "--to", "Vennick", "--ke", "0.1"),
    "part": PART,
    "whole": ("--from", "Skarvel", "--to", "Thrane Pike", "--to-height", "25.5m"),
    "own hill": OWN_HILL,
    "own hill hidden all the same": ("--from", "Skarvel", "--to", "Pellow Knowe"),
    "sea": SEA,
    "water": (*SEA, "--sea-level", "0"),
    "just enough": (*HIDDEN, "--from-height", "33.2m"),
    "duct": (*PART, "--kr", "1.5"),
    "flat": (*PART, "--kr", "1"),
    "gradient": (*PART, "--n-gradient", "-39"),
    "survey above": (*HIDDEN, "--to-ground", "470m"),
    "survey below": (*HIDDEN, "--to-ground", "440m"),
    "near ends ignored": (*PART, "--ignore-near", "1.5km"),
    "void below": (*SEA, "--void-below", "55m"),
    "no ground at all": (
        *("--from", "48.205,-21.60", "--from-amsl", "50m"),
        *("--to", "48.21,-21.60", "--to-amsl", "60m"),
    ),
    "no ground at all, none that high": (
        *("--from", "48.205,-21.60", "--from-amsl", "50m"),
        *("--to", "48.21,-21.60", "--to-amsl", "60m", "--void-below", "20m"),
    ),
    "crest at the eye's feet": ("--from", "Sillet Brow", "--to", "Thrane Pike"),
    "tight before the target": (
        *("--from", "Quillet Mast", "--to", "Pellow Knowe", "--to-height", "5m"),
        *("--from-height", "30m"),
    ),
    "tight before the eye": ("--from", "Cobbin Round", "--to", "Quillet Mast"),
    "an end decides": ("--from", "Thrane Pike", "--to", "Sillet Brow"),
    "the other end of a short path decides": (
        *("--from", "48.20920,-21.50344", "--from-height", "40m"),
        *("--to", "48.20930,-21.50600", "--to-height", "0.5m"),
    ),
    "two sizes of cell": ("--dem", COMBE, "--from", "Thrane Pike", "--to", "Skarvel"),
    "hidden, with a void": (
        *("--from", "Wexel Hut", "--to", "48.205,-21.60", "--to-amsl", "60m"),
    ),
    "short": ("--from", "Skarvel", "--to", "48.2093,-21.5045", "--from-height", "0"),
}
FIRST = {"clear": "SEEN. ", "blocked": "HIDDEN. ", "undetermined": "CANNOT SAY. "}


@pytest.mark.parametrize("show_in", ["m", "ft"])
@pytest.mark.parametrize("question", QUESTIONS)
def test_every_number_in_the_words_is_the_records(question: str, show_in: str) -> None:
    sheet = Sheet(answer_of(*QUESTIONS[question]), show_in)
    assert sheet.left.startswith(FIRST[sheet.record["verdict"]])
    read_all(sheet)
    assert not re.search(r"\d", sheet.left), f"not read:\n{sheet.left}"


@pytest.mark.parametrize("question", QUESTIONS)
def test_the_headline_of_the_figure_is_the_first_line(question: str) -> None:
    from profiler.output.words import headline

    answer = answer_of(*QUESTIONS[question])
    assert "".join(headline(answer)) == answer.words().splitlines()[0]


def test_heights_that_nobody_stated_are_called_defaults() -> None:
    text = profile("--from", "Skarvel", "--to", "Vennick").out
    assert "eye 1.7 m above it (default)" in text
    assert "nothing on it (default)" in text
    stated = profile(*HIDDEN).out
    assert "above it (default)" not in stated


def test_the_air_is_called_a_default_or_given() -> None:
    assert "Air: light, kr 0.13 = ke 1.149 (default)." in profile(*HIDDEN).out
    assert "Air: ke 1.333 = kr 0.25 (given)." in profile(*HIDDEN, "--ke", "4/3").out
    assert "Air: kr 0 = ke 1 (given)." in profile(*HIDDEN, "--no-refraction").out


def test_the_printed_height_opens_the_line_when_it_is_typed_back() -> None:
    text = profile(*HIDDEN).out
    found = re.search(r"Skarvel at (\S+) m, or Quillet Mast at (\S+) m", text)
    assert found
    assert profile(*HIDDEN, "--from-height", found[1]).out.startswith("SEEN")
    assert profile(*HIDDEN, "--to-height", found[2]).out.startswith("SEEN")


def test_a_printed_height_in_feet_opens_the_line_when_it_is_typed_back() -> None:
    found = re.search(r"Skarvel at (\S+) ft", profile(*HIDDEN, "--show-in", "ft").out)
    assert found
    assert profile(*HIDDEN, "--from-height", f"{found[1]}ft").out.startswith("SEEN")


def test_a_line_that_touches_ground_says_that_it_grazes() -> None:
    needed = answer_of(*BARE).record()["needed"]["from_agl_m"]
    grazing = answer_of(*BARE, "--from-height", f"{needed}m")
    assert grazing.grazing
    assert re.fullmatch(
        r"SEEN\. Skarvel sees Wexel Hut: the line grazes ground at \d+\.\d\d km\.",
        grazing.words().splitlines()[0],
    )


def test_lead_words_stand_in_one_column() -> None:
    lines = profile(*HIDDEN).out.splitlines()
    leads = ("in the way", "shown", "would open", "check", "careful")
    for lead in leads:
        line = next(line for line in lines if line.startswith(lead))
        assert line[len(lead) : 13].strip() == ""
        assert line[13] != " "


def test_a_name_that_would_move_the_cursor_is_told_on_one_line() -> None:
    from dataclasses import replace

    answer = answer_of(*HIDDEN)
    odd = replace(answer, from_=replace(answer.from_, name="Skar\x1b[2J\nvel"))
    first = odd.words().splitlines()[0]
    assert first.startswith("HIDDEN. Skar [2J vel does not see")


@pytest.mark.parametrize(
    ("value", "decimals", "rounding", "text"),
    [
        (33.1201, 1, UP, "33.2"),
        (33.2, 1, UP, "33.2"),
        (33.29, 1, DOWN, "33.2"),
        (-0.04, 1, UP, "0.0"),
        (0.3, 1, DOWN, "0.3"),
        (2.675, 2, "nearest", "2.67"),
    ],
)
def test_numbers_are_rounded_to_the_side_that_is_asked(
    value: float, decimals: int, rounding: str, text: str
) -> None:
    assert rounded_text(value, decimals, rounding=rounding) == text


def test_small_heights_keep_their_digits() -> None:
    show = Show()
    assert show.height(0.004) == "0.004 m"
    assert show.height(0.37) == "0.37 m"
    assert show.height(0.0) == "0.0 m"
    assert show.given(30.0) == "30 m"
    assert show.given(25.5) == "25.5 m"


def test_a_share_is_0_or_100_only_when_it_is_exactly_that() -> None:
    shares = [percent(s) for s in (0.0, 0.001, 0.5, 0.999, 1.0)]
    assert shares == ["0%", "under 1%", "50%", "over 99%", "100%"]


def test_a_box_has_letters_and_no_signs() -> None:
    assert box(-1.5, -2.0, -1.0, 3.0, decimals=1) == "1.5 to 1.0 S, 2.0 W to 3.0 E"
    assert box(1.0, 179.5, 2.0, 180.5, decimals=1) == "1.0 to 2.0 N, 179.5 E to 179.5 W"
    assert box(-90.0, -180.0, 90.0, 180.0, decimals=0) == "90 S to 90 N, 180 W to 180 E"


def test_a_target_below_the_crest_is_not_said_to_rise_above_it() -> None:
    answer = answer_of(*SEA, "--sea-level", "0")
    assert answer.front_crest is not None
    assert answer.to.amsl_m < answer.front_crest.ground_m
    assert "rises" not in answer.words()
    assert "rises" in answer_of(*PART).words()
