"""``overbrow masts``: its record, its words and what it refuses."""

import json
import math
import re
from pathlib import Path
from typing import Any

import pytest

from tests.asking import GIVEN, UPLAND, Ended, record_of, run

ENDS = ("--from", "Skarvel", "--to", "Quillet Mast")
RADIO = ("--frequency", "7.5GHz")
RULE = (*RADIO, "--criterion", "ke=4/3 f1=1", "--criterion", "ke=2/3 f1=0.3")


def masts(*words: str) -> Ended:
    return run("masts", *GIVEN, *ENDS, *words)


def values_of(*words: str) -> dict[str, Any]:
    ended = masts(*words, "--json", "-")
    assert ended.status == 0, ended.err
    values: dict[str, Any] = json.loads(ended.out)
    return values


def test_the_record_keeps_its_contract() -> None:
    values = values_of(*RULE, "--to-height", "60m")
    assert values["schema"] == "overbrow/masts/1"
    assert values["equal_agl_m"] > 0.0
    assert values["from_agl_m"] > 0.0
    assert values["to_agl_m"] is None
    assert set(values["governing"]) == {"ke", "f1_fraction", "extra_m"}
    assert [set(c) for c in values["criteria"]] == [
        {"ke", "f1_fraction", "extra_m", "margin_m"}
    ] * 2
    assert all(c["margin_m"] >= 0.0 for c in values["criteria"])
    assert {"from_agl_m", "to_agl_m"} <= set(values["curve"][0])
    assert values["given"] == {"from_agl_m": None, "to_agl_m": 60.0}
    assert values["beyond"] == {"from_agl_m": None, "to_agl_m": None}
    assert values["limits"]["from"]["most_m"] == 1000.0
    assert "radio-geometry" in [c["code"] for c in values["cautions"]]


def test_printed_heights_meet_the_rule_when_they_are_typed_back() -> None:
    values = values_of(*RULE, "--from-height", "30m", "--to-height", "60m")
    equal, cheap = values["equal_agl_m"], values["cheapest"]
    pairs = [
        (equal, equal),
        (values["from_agl_m"], 60.0),
        (30.0, values["to_agl_m"]),
        (cheap["from_agl_m"], cheap["to_agl_m"]),
        *((p["from_agl_m"], p["to_agl_m"]) for p in values["curve"][::8]),
    ]

    def state(near: float, far: float) -> str:
        heights = ("--from-height", f"{near}m", "--to-height", f"{far}m")
        found: str = record_of(*ENDS, *heights, *RULE)["radio"]["state"]
        return found

    for near, far in pairs:
        assert state(near, far) == "met"
    for near, far in pairs[:3]:
        # 2 cm less at both ends, which is short wherever the line is tight
        assert state(near - 0.02, far - 0.02) == "not_met"


def test_the_words_say_what_the_record_holds() -> None:
    words = (*RULE, "--to-height", "60m", "--section", "3m", "--to-cost", "1.6")
    values, said = values_of(*words), masts(*words).out
    found = re.search(r"^Equal antenna heights of (\S+) m meet", said)
    assert found
    assert float(found[1]) == values["equal_agl_m"]
    assert values["equal_agl_m"] % 3.0 == 0.0
    found = re.search(r"least +Skarvel at (\S+) m with Quillet Mast at 60 m", said)
    assert found
    assert float(found[1]) == values["from_agl_m"]
    found = re.search(r"Skarvel at (\S+) m, Quillet Mast at (\S+) m: cost (\S+);", said)
    cheap = values["cheapest"]
    assert found
    assert [float(n) for n in found.groups()] == pytest.approx(
        [cheap["from_agl_m"], cheap["to_agl_m"], cheap["cost"]], abs=1e-3
    )
    assert cheap["cost"] == pytest.approx(cheap["from_agl_m"] + 1.6 * cheap["to_agl_m"])
    lefts = [float(n) for n in re.findall(r"leaves (\S+) m", said)]
    for left, criterion in zip(lefts, values["criteria"], strict=True):
        assert 0.0 <= criterion["margin_m"] - left < 0.1


def test_a_given_height_without_an_answer_is_told_with_what_it_would_take() -> None:
    words = (*RULE, "--to-height", "30m", "--from-most", "80m")
    values, said = values_of(*words), masts(*words).out
    assert values["from_agl_m"] is None
    beyond = values["beyond"]["from_agl_m"]
    assert beyond > 80.0
    free = values_of(*RULE, "--to-height", "30m")
    assert free["from_agl_m"] == beyond
    shown = math.ceil(round(beyond * 10, 6)) / 10
    assert (
        "no height up to 80 m at Skarvel does with Quillet Mast at 30 m; "
        f"{shown:.1f} m would" in said
    )


def test_a_given_height_that_nothing_helps_says_only_that() -> None:
    said = masts(*RADIO, "--criterion", "ke=4/3 f1=1 extra=5m", "--to-height", "1m").out
    assert re.search(r"does with Quillet Mast at 1 m$", said, re.MULTILINE)


def test_a_height_above_sea_level_is_a_given_height_too() -> None:
    amsl = values_of(*RULE, "--to-amsl", "500m")
    given = amsl["given"]["to_agl_m"]
    assert given == pytest.approx(500.0 - amsl["to"]["ground_m"], abs=1e-3)
    agl = values_of(*RULE, "--to-height", f"{given}m")
    assert amsl["from_agl_m"] == pytest.approx(agl["from_agl_m"], abs=0.0101)


def test_heights_in_feet_suffice() -> None:
    values = values_of(*RULE)
    said = masts(*RULE, "--show-in", "ft").out
    found = re.search(r"^Equal antenna heights of (\S+) ft", said)
    assert found
    assert 0.0 <= float(found[1]) * 0.3048 - values["equal_agl_m"] < 0.1 * 0.3048


def test_low_limits_leave_no_heights() -> None:
    words = (*RULE, "--from-most", "5m", "--to-most", "5m")
    ended = masts(*words)
    assert ended.status == 0
    assert ended.out.startswith("No equal heights within the limits meet the rule")
    assert "no pair within the limits meets the rule" in ended.out
    values = values_of(*words)
    assert values["equal_agl_m"] is None
    assert values["cheapest"] is None
    assert values["governing"] is None
    assert values["curve"] == []
    assert all(c["margin_m"] is None for c in values["criteria"])


def test_the_record_goes_to_a_file_with_the_same_bytes(tmp_path: Path) -> None:
    out = tmp_path / "masts.json"
    ended = masts(*RULE, "--json", str(out))
    assert ended.status == 0
    assert f"Wrote {out}" in ended.err
    assert out.read_text() == masts(*RULE, "--json", "-").out


@pytest.mark.parametrize(
    ("frequency", "code"), [("868MHz", "low-frequency"), ("23GHz", "high-frequency")]
)
def test_p530s_limits_of_frequency_are_warned_of(frequency: str, code: str) -> None:
    words = ("--frequency", frequency, "--rule-set", "plain-0.6")
    assert code in [w["code"] for w in values_of(*words)["warnings"]]
    assert "ITU-R P.530-19 section 2.2.2.1" in masts(*words).err


@pytest.mark.parametrize(
    ("words", "status", "message"),
    [
        (("--to-height", "30m"), 2, "need --frequency and a rule"),
        (RADIO, 2, "need --frequency and a rule"),
        (("--criterion", "ke=1 f1=1"), 2, "A clearance rule needs a frequency."),
        ((*RULE, "--section", "0"), 3, "A mast section of 0 m is below 0.01 m."),
        ((*RULE, "--from-cost=-1"), 3, "must be 0 or more, not -1."),
        ((*RULE, "--to-least", "-3m"), 3, "must be 0 or more, not -3."),
        (
            (*RULE, "--from-least", "50m", "--from-most", "40m"),
            3,
            "The lowest height allowed, 50 m, is above the highest, 40 m.",
        ),
        (
            (*RULE, "--from-least", "41m", "--from-most", "44m", "--section", "10m"),
            3,
            "No multiple of 10 m lies between 41 and 44 m.",
        ),
        (
            (*RULE, "--to-height", "30m", "--to-most", "20m"),
            3,
            "The given height of 30 m is above the highest allowed there, 20 m.",
        ),
        ((*RULE, "--to-height", "-3m"), 3, "below the ground"),
        (
            (*RULE, "--to-height", "3m", "--to-amsl", "500m"),
            2,
            "both state a height. Give one.",
        ),
        (
            (*RADIO, "--criterion", "ke=0.001 f1=1"),
            3,
            "turns a quarter circle or more over 27 km",
        ),
    ],
)
def test_what_cannot_be_planned_is_one_clear_sentence(
    words: tuple[str, ...], status: int, message: str
) -> None:
    ended = masts(*words)
    assert ended.status == status
    assert message in ended.said
    assert len(ended.said.splitlines()) == 1
    assert ended.out == ""


def test_a_void_on_the_path_leaves_no_heights_whatever_the_line_passes() -> None:
    # 500 m up the line clears any ground that may stand in the void; masts need not
    for above in ((), ("--void-below", "55m")):
        ended = run(
            *("masts", "--dem", str(UPLAND), *RULE, *above),
            *("--from", "48.2092,-21.50344", "--to", "48.205,-21.60"),
            *("--to-ground", "0", "--to-height", "60m", "--from-height", "70m"),
        )
        assert ended.status == 3
        assert re.search(r"\d+ m of the path have no known ground", ended.said)


def test_unknown_ground_at_an_end_is_asked_for() -> None:
    ended = run(
        *("masts", "--dem", str(UPLAND), *RULE),
        *("--from", "48.2092,-21.50344", "--to", "48.205,-21.60", "--to-amsl", "60m"),
    )
    assert ended.status == 3
    assert "need ground at both ends" in ended.said
