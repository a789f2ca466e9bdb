"""Whatever is typed after an option, the command answers or says why not."""

import json
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.asking import GIVEN, Ended, run

FEW = settings(deadline=None, max_examples=15)
NEAR = st.text(alphabet="0123456789 .,;:+-−/°'\"′″NSEWnsewdmkftu=CR٣eO", max_size=24)
#: What a shell can pass on: no character 0, and nothing that UTF-8 cannot hold.
ANY = st.text(
    st.characters(exclude_characters="\x00", exclude_categories=["Cs"]), max_size=60
)
TEXT = st.one_of(ANY, NEAR, st.floats().map(str), st.integers().map(str))
#: Points, good ones too, so that many get as far as an answer.
DEGREES = st.tuples(st.floats(48.1, 48.5), st.floats(-21.7, -21.0)).map(
    lambda pair: f"{pair[0]},{pair[1]}"
)
HEIGHTS = st.floats(-100.0, 3000.0).map(lambda value: f"{value:.3f}m")
VERDICTS = ("clear", "blocked", "undetermined")
FIRST = ("SEEN. ", "HIDDEN. ", "CANNOT SAY. ")

QUESTION = {"--from": "Skarvel", "--to": "Quillet Mast"}
POINTS = ("--from", "--to")
QUANTITIES = (
    *("--from-height", "--to-height", "--from-amsl", "--to-amsl"),
    *("--from-ground", "--to-ground", "--ignore-near", "--own-hill"),
    *("--void-below", "--sea-level", "--ke", "--kr", "--n-gradient"),
)
OTHERS = ("--crs", "--dem-crs", "--dem-unit", "--dem-kind", "--interpolation")


def ask(options: dict[str, str], *more: str) -> Ended:
    words = [word for pair in {**QUESTION, **options}.items() for word in pair]
    return run("profile", *GIVEN, *words, *more)


def check(options: dict[str, str]) -> Ended:
    """Answered in words, or refused in one line; nothing in between."""
    ended = ask(options)
    if ended.status == 0:
        assert ended.out.startswith(FIRST)
        assert ended.out.endswith(
            "Judged for light. For a radio path add --frequency.\n"
        )
    else:
        assert ended.status in (2, 3)
        assert ended.out == ""
        assert ended.said.splitlines()[-1].startswith("Error: ")
    return ended


@FEW
@given(TEXT)
@pytest.mark.parametrize("option", [*POINTS, *QUANTITIES, *OTHERS])
def test_any_text_after_an_option_is_answered_or_refused(
    option: str, text: str
) -> None:
    check({option: text})


@FEW
@given(DEGREES, DEGREES, HEIGHTS, HEIGHTS)
def test_any_two_points_and_heights_are_answered_or_refused(
    start: str, end: str, low: str, high: str
) -> None:
    check({"--from": start, "--to": end, "--from-height": low, "--to-height": high})


@FEW
@given(DEGREES, HEIGHTS, HEIGHTS, st.sampled_from(["bilinear", "highest", "nearest"]))
def test_an_answer_is_always_a_whole_record(
    end: str, amsl: str, ground: str, interpolation: str
) -> None:
    options = {
        "--to": end,
        "--from-amsl": amsl,
        "--to-ground": ground,
        "--interpolation": interpolation,
    }
    ended = ask(options, "--json", "-")
    if ended.status != 0:
        assert ended.out == ""
        return
    values: dict[str, Any] = json.loads(ended.out, parse_constant=pytest.fail)
    assert values["verdict"] in VERDICTS
    assert (values["void"] is not None) >= (values["verdict"] == "undetermined")
    assert bool(values["blocked_stretches"]) == (values["verdict"] == "blocked")
    if values["margin_m"] is not None and not values["grazing"]:
        assert (values["margin_m"] < 0.0) == (values["verdict"] == "blocked")


@FEW
@given(st.lists(TEXT, max_size=4))
def test_any_words_after_profile_end_plainly(words: list[str]) -> None:
    ended = run("profile", *GIVEN, "--from", "Skarvel", "--to", "Vennick", *words)
    assert ended.status in (0, 2, 3)
