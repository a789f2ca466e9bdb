"""The record keeps its contract: every field, its place, its decimals, its bytes."""

import hashlib
import json
import math
from collections.abc import Iterator
from decimal import Decimal
from typing import Any

import numpy as np
import pytest

from tests.asking import HIDDEN, OWN_HILL, PART, SEA, answer_of, profile, record_of

QUESTIONS = {
    "hidden": HIDDEN,
    "part": PART,
    "own hill": OWN_HILL,
    "sea": SEA,
    "flat": (*PART, "--kr", "1"),
    "duct": (*PART, "--kr", "1.5"),
    "survey": (*HIDDEN, "--to-ground", "470m"),
}

PLACE = "distance_m lat_deg lon_deg ground_m cover_m sight_m margin_m"
END = "name lat_deg lon_deg ground_m agl_m amsl_m"
#: Every object of the contract with its fields in order; more may stand between.
CONTRACT = {
    "": "schema verdict grazing margin_m decisive first_block horizon front_crest "
    "blocked_stretches target needed path angles earth terrain from to void cautions "
    "warnings software",
    "decisive": PLACE,
    "first_block": PLACE,
    "horizon": f"{PLACE} elevation_deg",
    "front_crest": PLACE,
    "blocked_stretches.0": "start_m end_m worst_margin_m worst_at_m lat_deg lon_deg",
    "target": "height_m shown visible_m hidden_m visible_fraction visible_arcmin "
    "above_crest_m own_hill_m aim_moved_m point_shown",
    "needed": "from_agl_m to_agl_m both_extra_m ke kr dem_bias_m dem_bias_at_m",
    "path": "distance_m azimuth_deg back_azimuth_deg samples void_samples void_m",
    "other_ground": "verdict margin_m at_m shown from_ground_m to_ground_m",
    "angles": "from_elevation_deg to_elevation_deg",
    "earth": "ke kr kappa_per_m radius_m effective_radius_m",
    "terrain": "files samples_sha256 dem_kind interpolation vertical_unit",
    "terrain.files.0": "name bytes sha256 crs cell_m",
    "from": END,
    "to": END,
    "void": "start_m end_m lat_deg lon_deg blocks_above_m",
    "cautions.0": "code text",
    "software": "name version",
}
#: The question whose record holds each object that another record lacks.
HELD_BY = {
    "decisive": "hidden",
    "first_block": "hidden",
    "blocked_stretches.0": "hidden",
    "void": "sea",
    "other_ground": "survey",
}
#: Decimals by the ending of a field's name.
DECIMALS = {"_m": 3, "_deg": 9, "_arcmin": 3, "ke": 6, "kr": 6, "_fraction": 6}


def at(values: Any, where: str) -> Any:
    for key in where.split(".") if where else []:
        values = values[int(key)] if key.isdigit() else values[key]
    return values


def leaves(values: Any, name: str = "") -> Iterator[tuple[str, Any]]:
    if isinstance(values, dict):
        for key, value in values.items():
            yield from leaves(value, key)
    elif isinstance(values, list):
        for value in values:
            yield from leaves(value, name)
    else:
        yield name, values


@pytest.mark.parametrize("where", CONTRACT)
def test_every_field_of_the_contract_stands_in_its_order(where: str) -> None:
    values = at(record_of(*QUESTIONS[HELD_BY.get(where, "hidden")]), where)
    wanted = CONTRACT[where].split()
    assert [key for key in values if key in wanted] == wanted


@pytest.mark.parametrize("question", QUESTIONS)
def test_metres_have_3_decimals_degrees_9_and_ratios_6(question: str) -> None:
    text = profile(*QUESTIONS[question], "--json", "-").out
    values = json.loads(text, parse_float=Decimal)
    seen = 0
    for name, value in leaves(values):
        ending = next((e for e in DECIMALS if name.endswith(e)), None)
        if name == "kappa_per_m":  # 10 significant digits, no fixed decimals
            continue
        if ending is not None and isinstance(value, Decimal):
            exponent = value.as_tuple().exponent
            assert isinstance(exponent, int)
            assert -exponent <= DECIMALS[ending], (name, value)
            seen += 1
    assert seen > 40


@pytest.mark.parametrize("question", QUESTIONS)
def test_no_number_of_a_record_is_nan_infinite_or_minus_zero(question: str) -> None:
    text = profile(*QUESTIONS[question], "--json", "-").out

    def refuse(constant: str) -> None:
        pytest.fail(f"{constant} in the record")

    numbers = [
        value
        for _, value in leaves(json.loads(text, parse_constant=refuse))
        if isinstance(value, float)
    ]
    assert all(math.isfinite(n) for n in numbers)
    assert not [n for n in numbers if n == 0.0 and math.copysign(1.0, n) < 0.0]


@pytest.mark.parametrize("question", QUESTIONS)
def test_the_same_question_gives_the_same_bytes(question: str) -> None:
    first, again = (profile(*QUESTIONS[question], "--json", "-") for _ in range(2))
    assert first.out == again.out


def test_the_hash_of_samples_is_that_of_the_heights_in_path_order() -> None:
    answer = answer_of(*SEA)
    heights = np.array(list(answer.profile.ground_m), dtype="<f8")
    values = answer.record()
    assert (
        values["terrain"]["samples_sha256"]
        == hashlib.sha256(heights.tobytes()).hexdigest()
    )
    assert values["path"]["samples"] == heights.size
    assert values["path"]["void_samples"] == np.isnan(heights).sum()


def test_the_hash_of_a_file_is_that_of_its_bytes() -> None:
    from tests.asking import UPLAND

    file = record_of(*HIDDEN)["terrain"]["files"][0]
    assert file["sha256"] == hashlib.sha256(UPLAND.read_bytes()).hexdigest()
    assert file["bytes"] == UPLAND.stat().st_size
    assert file["name"] == "upland.tif"


@pytest.mark.parametrize("question", ["hidden", "part", "own hill", "survey"])
def test_the_margin_is_that_of_the_decisive_point(question: str) -> None:
    values = record_of(*QUESTIONS[question])
    decisive = values["decisive"]
    assert values["margin_m"] == decisive["margin_m"]
    gap = decisive["sight_m"] - decisive["ground_m"] - decisive["cover_m"]
    assert decisive["margin_m"] == pytest.approx(gap, abs=0.0011)


def test_seen_and_hidden_parts_make_the_height() -> None:
    target = record_of(*PART)["target"]
    assert target["shown"] == "part"
    assert target["visible_m"] + target["hidden_m"] == pytest.approx(
        target["height_m"], abs=0.0011
    )
    assert target["visible_fraction"] == pytest.approx(
        target["visible_m"] / target["height_m"], abs=2e-5
    )


def test_a_bare_point_has_no_visible_fraction_and_no_part() -> None:
    target = record_of(*OWN_HILL)["target"]
    assert target["visible_fraction"] is None
    assert target["shown"] in ("whole", "none")


def test_a_flat_earth_has_no_ke_and_a_duct_a_negative_one() -> None:
    flat = record_of(*QUESTIONS["flat"])["earth"]
    assert flat["ke"] is None
    assert flat["effective_radius_m"] is None
    assert record_of(*QUESTIONS["duct"])["earth"]["ke"] < 0.0


def test_ke_and_kr_are_both_stated_and_agree() -> None:
    for option, value in (("--ke", "4/3"), ("--kr", "0.13"), ("--n-gradient", "-39")):
        earth = record_of(*HIDDEN, option, value)["earth"]
        assert earth["ke"] == pytest.approx(1.0 / (1.0 - earth["kr"]), abs=3e-6)


def test_every_record_carries_its_cautions() -> None:
    codes = [note["code"] for note in record_of(*HIDDEN)["cautions"]]
    assert "check-on-site" in codes


def test_both_answers_stand_in_the_record_when_ground_is_surveyed() -> None:
    values = record_of(*QUESTIONS["survey"])
    assert values["to"]["ground_m"] == 470.0
    plain = record_of(*HIDDEN)
    assert values["other_ground"]["margin_m"] == plain["margin_m"]
    assert values["margin_m"] > plain["margin_m"]


@pytest.mark.parametrize("end", ["from", "to"])
def test_a_printed_needed_height_is_clear_when_asked_again(end: str) -> None:
    needed = record_of(*HIDDEN)["needed"][f"{end}_agl_m"]
    assert record_of(*HIDDEN, f"--{end}-height", str(needed))["verdict"] == "clear"
    less = record_of(*HIDDEN, f"--{end}-height", str(needed - 0.05))
    assert less["verdict"] == "blocked"


def test_the_printed_bending_is_clear_when_asked_again() -> None:
    needed = record_of(*HIDDEN)["needed"]
    assert record_of(*HIDDEN, "--kr", str(needed["kr"]))["verdict"] == "clear"
    assert record_of(*HIDDEN, "--ke", str(needed["ke"]))["verdict"] == "clear"


def test_ground_above_the_printed_height_in_a_void_blocks() -> None:
    values = record_of(*SEA)
    assert values["verdict"] == "undetermined"
    above = values["void"]["blocks_above_m"]
    assert record_of(*SEA, "--void-below", str(above))["verdict"] == "clear"


def test_seen_stretches_are_the_ground_that_the_eye_sees() -> None:
    answer = answer_of(*HIDDEN)
    stretches = answer.record()["seen_stretches"]
    edges = [edge for s in stretches for edge in (s["start_m"], s["end_m"])]
    assert edges == sorted(edges)
    dist, seen = answer.profile.dist_m, answer.ground_seen
    for s in stretches:
        within = (dist >= s["start_m"] - 0.001) & (dist <= s["end_m"] + 0.001)
        assert seen[within].all()
    # the last ground seen is the place that hides the rest
    assert answer.horizon is not None
    assert abs(edges[-1] - answer.horizon.distance_m) < 30.0
