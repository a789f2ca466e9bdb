"""What is said of a radio path: first words, every number, the record's form."""

import json
import math
import re
from pathlib import Path
from typing import Any

import pytest

from tests.asking import HIDDEN, PART, SEA, UPLAND, answer_of, profile, record_of, run
from tests.radio_sheet import radio_part, read_first_line, read_rows
from tests.sheet import Sheet

PLAIN = ("--frequency", "7.5GHz", "--rule-set", "plain-0.6")
TEMPERATE = ("--frequency", "7.5GHz", "--rule-set", "p530-temperate")
OWN = (
    *("--frequency", "16GHz", "--criterion", "ke=4/3 f1=1 extra=2"),
    *("--criterion", "ke=2/3 f1=0.3"),
)
LOW = (*PART, "--from-height", "40m", "--to-height", "45m")
#: Over the sea, where known ground meets any rule.
OUT = (*SEA, "--frequency", "7.5GHz")
QUESTIONS = {
    "met": (*PART, *TEMPERATE),
    "not met": (*LOW, *OWN),
    "not met, beside a lower line": (*PART, *OWN, "--criterion", "ke=0.35 f1=0.1"),
    "blocked": (*HIDDEN, *PLAIN),
    "no rule": (*PART, "--frequency", "868MHz"),
    "blocked without a rule": (*HIDDEN, "--frequency", "160MHz"),
    "in feet of extra": (*LOW, "--frequency", "80GHz", "--criterion", "ke=1 f1=0"),
}
FIRST = {
    "met": "RULE MET. ",
    "not_met": "RULE NOT MET. ",
    "blocked": "BLOCKED. ",
    "no_rule": "No rule given. ",
    "undetermined": "CANNOT SAY. ",
}


@pytest.mark.parametrize("show_in", ["m", "ft"])
@pytest.mark.parametrize("question", QUESTIONS)
def test_every_number_of_a_radio_path_is_the_records(
    question: str, show_in: str
) -> None:
    sheet = Sheet(answer_of(*QUESTIONS[question]), show_in)
    sheet.left = radio_part(sheet)
    assert sheet.left.startswith(FIRST[sheet.record["radio"]["state"]])
    read_first_line(sheet)
    read_rows(sheet)
    assert not re.search(r"\d", sheet.left), f"not read:\n{sheet.left}"


@pytest.mark.parametrize(
    ("question", "state"),
    [
        ("met", "met"),
        ("not met", "not_met"),
        ("blocked", "blocked"),
        ("no rule", "no_rule"),
        ("blocked without a rule", "blocked"),
    ],
)
def test_the_first_words_are_those_of_the_state(question: str, state: str) -> None:
    values = record_of(*QUESTIONS[question])
    assert values["radio"]["state"] == state
    assert profile(*QUESTIONS[question]).out.startswith(FIRST[state])


@pytest.mark.parametrize("question", QUESTIONS)
def test_the_radio_record_keeps_its_decimals(question: str) -> None:
    decimals = {"_m": 3, "_deg": 9, "_db": 3, "_share": 6, "_fraction": 6, "ke": 6}

    def check(values: Any, name: str) -> None:
        if isinstance(values, dict):
            for key, value in values.items():
                check(value, key)
        elif isinstance(values, list):
            for value in values:
                check(value, name)
        elif isinstance(values, float):
            assert math.isfinite(values)
            places = next((n for end, n in decimals.items() if name.endswith(end)), 6)
            places = 6 if name == "wavelength_m" else places
            assert values == round(values, places), name

    radio = record_of(*QUESTIONS[question])["radio"]
    check(radio, "radio")
    assert "NaN" not in json.dumps(radio)


@pytest.mark.parametrize("question", ["no rule", "blocked without a rule"])
def test_without_a_rule_nothing_is_said_to_be_met(question: str) -> None:
    said = profile(*QUESTIONS[question]).out
    assert "RULE" not in said
    assert "plain-0.6" not in said


def test_a_void_under_a_line_that_meets_the_rule_cannot_be_judged() -> None:
    values = record_of(*OUT, "--rule-set", "plain-0.6")
    assert values["verdict"] == "undetermined"
    assert values["radio"]["state"] == "undetermined"
    assert all(c["met"] for c in values["radio"]["criteria"])
    said = profile(*OUT, "--rule-set", "plain-0.6").out
    assert said.startswith("CANNOT SAY. Known ground is clear by")


def test_a_void_is_not_called_no_rule_when_none_is_given() -> None:
    values = record_of(*OUT)
    assert values["radio"]["state"] == "undetermined"
    assert profile(*OUT).out.startswith("CANNOT SAY. ")


def test_a_void_too_low_for_the_line_may_still_stand_in_the_zone() -> None:
    # the line ends 60 m above the sea: ground of 55 m is below it, but within the zone
    asked = (*OUT, "--void-below", "55m", "--criterion", "ke=4/3 f1=0.6 extra=10m")
    values = record_of(*asked)
    assert values["verdict"] == "clear"
    assert all(c["met"] for c in values["radio"]["criteria"])
    assert values["radio"]["state"] == "undetermined"
    first = profile(*asked).out.splitlines()[0]
    assert re.fullmatch(
        r"CANNOT SAY\. Known ground meets the rule; \S+ km of path have no ground, and "
        r"ground up to 55 m there could break it\.",
        first,
    )
    water = record_of(*asked, "--void-below", "0m")
    assert water["radio"]["state"] == "met"


def test_known_ground_that_breaks_the_rule_decides_whatever_the_void() -> None:
    values = record_of(*OUT, "--criterion", "ke=4/3 f1=3 extra=400m")
    assert values["radio"]["state"] == "not_met"


def test_a_radio_path_without_any_known_ground_is_not_judged_for_light() -> None:
    said = run(
        *("profile", "--dem", str(UPLAND), *PLAIN),
        *("--from", "48.205,-21.60", "--from-amsl", "50m"),
        *("--to", "48.21,-21.60", "--to-amsl", "60m"),
    ).out
    assert said.startswith("CANNOT SAY. ")
    assert "Air: radio" in said
    assert "Judged for radio" in said
    assert "Judged for light" not in said


@pytest.mark.parametrize(
    ("frequency", "extra", "code"),
    [
        ("868MHz", "", "low-frequency"),
        ("2GHz", "", None),
        ("13GHz", "", None),
        ("23GHz", "", "high-frequency"),
        ("23GHz", " extra=3m", None),
    ],
)
def test_p530s_limits_of_frequency_are_warned_of(
    frequency: str, extra: str, code: str | None
) -> None:
    asked = ("--frequency", frequency, "--criterion", f"ke=4/3 f1=0.6{extra}")
    codes = [w["code"] for w in record_of(*PART, *asked)["warnings"]]
    assert codes == ([] if code is None else [code])
    ended = profile(*PART, *asked)
    assert ("Warning:" in ended.err) == (code is not None)


def test_a_rule_of_the_users_own_file_is_named(tmp_path: Path) -> None:
    rule = tmp_path / "none.toml"
    rule.write_text(
        'source = "Ours\\u001b[2J, page 3"\n[[criterion]]\nke = 1\nf1 = 0.6\n'
    )
    asked = (*PART, "--frequency", "6GHz", "--rule-set", str(rule))
    assert record_of(*asked)["radio"]["state"] == "met"
    said = profile(*asked).out
    assert said.startswith("RULE MET. ")
    assert "none.toml: Ours [2J, page 3" in said


def test_a_canopy_that_stands_above_a_radio_line_is_called_one() -> None:
    said = profile(*HIDDEN, *PLAIN, "--canopy", "20m").out.splitlines()[0]
    assert "BLOCKED." in said
    assert "canopy at" in said


def test_a_frequency_asks_for_both_heights() -> None:
    ends = ("--from", "Skarvel", "--to", "Quillet Mast", *PLAIN)
    ended = profile(*ends)
    assert ended.status == 2
    assert "Give --from-height and --to-height, such as 20m." in ended.said
    ended = profile(*ends, "--from-height", "20m")
    assert ended.status == 2
    assert "Give --to-height" in ended.said


@pytest.mark.parametrize(
    "rule", [("--criterion", "ke=1 f1=0.6"), ("--rule-set", "plain-0.6")]
)
def test_a_rule_without_a_frequency_is_refused(rule: tuple[str, str]) -> None:
    ended = profile(*PART, *rule)
    assert ended.status == 2
    assert "A clearance rule needs a frequency." in ended.said


def test_a_rule_stated_twice_is_refused() -> None:
    ended = profile(*PART, *PLAIN, "--criterion", "ke=1 f1=0.6")
    assert ended.status == 2
    assert "both state a rule" in ended.said


@pytest.mark.parametrize(
    ("words", "status", "message"),
    [
        (("--frequency", "7.5"), 2, "7.5 what? Write 7.5GHz or 7.5MHz."),
        (("--frequency", "-6GHz"), 2, "outside 10 MHz to 300 GHz"),
        (("--frequency", "1e12"), 2, "is no frequency"),
        (("--frequency", "7,5GHz"), 2, "write decimals with a point"),
        (("--frequency", "6GHz", "--criterion", "k=1 f1=1"), 2, '"k=1" in a'),
        (("--frequency", "6GHz", "--rule-set", "itu"), 3, 'No rule set "itu"'),
        (("--frequency", "6GHz", "--rule-set", "no.toml"), 3, 'No rule file "no.toml"'),
        (
            ("--frequency", "6GHz", "--criterion", "ke=0.001 f1=1"),
            3,
            "turns a quarter circle or more over 27 km",
        ),
    ],
)
def test_a_bad_radio_option_is_one_clear_sentence(
    words: tuple[str, ...], status: int, message: str
) -> None:
    ended = profile(*PART, *words)
    assert ended.status == status
    assert message in ended.said
    assert ended.out == ""


def test_ends_exchanged_leave_the_same_margins() -> None:
    there = record_of(*PART, *TEMPERATE)["radio"]
    back = record_of(
        *("--from", "Quillet Mast", "--from-height", "60m"),
        *("--to", "Skarvel", "--to-height", "45m"),
        *TEMPERATE,
    )["radio"]
    for one, two in zip(there["criteria"], back["criteria"], strict=True):
        assert one["margin_m"] == pytest.approx(two["margin_m"], abs=0.0011)
        assert one["at"]["lat_deg"] == pytest.approx(two["at"]["lat_deg"], abs=1e-7)
    assert there["obstruction"]["kind"] == back["obstruction"]["kind"]


def test_a_met_rule_is_told_at_the_tightest_place_not_at_a_masts_foot() -> None:
    hilltop = (
        *("--dem", str(UPLAND), "--sites", str(UPLAND.parent / "sites.csv")),
        *("--from", "Thrane Pike", "--from-height", "12m"),
        *("--to", "Skarvel", "--to-height", "25m"),
        *("--frequency", "6GHz", "--rule-set", "plain-0.6"),
    )
    values = record_of(*hilltop)
    tightest = values["radio"]["obstacles"][0]
    first = profile(*hilltop).out.splitlines()[0]
    assert values["radio"]["criteria"][0]["at"]["distance_m"] < 50.0
    where = f"{tightest['distance_m'] / 1000.0:.2f} km"
    assert first.startswith("RULE MET. The line is clear by ")
    assert where in first
    assert f"{tightest['f1_share']:.2f} of F1" in first
    assert first.endswith("0.6 F1 at ke 4/3 holds all along.")
