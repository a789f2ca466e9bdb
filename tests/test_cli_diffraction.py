"""The command for the loss by ground: what it prints, writes and refuses."""

import json
from pathlib import Path
from typing import Any

import pytest

from profiler.output.loss import loss_words
from tests.asking import GIVEN, HIDDEN, SEA, UPLAND, Ended, record_of, run

AT = ("--frequency", "6GHz")


def diffraction(*words: str) -> Ended:
    return run("diffraction", *GIVEN, *words)


def losses_of(*words: str) -> dict[str, Any]:
    ended = diffraction(*words, "--json", "-")
    assert ended.status == 0, ended.err
    values: dict[str, Any] = json.loads(ended.out)
    return values


def test_the_loss_is_that_of_the_path_sheet() -> None:
    values = losses_of(*HIDDEN, *AT)
    sheet = record_of(*HIDDEN, *AT)["radio"]["loss"]
    assert values["schema"] == "overbrow/diffraction/1"
    assert values["diffraction_db"] == sheet["diffraction_db"]
    assert values["free_space_db"] == sheet["free_space_db"]
    assert values["method"] == sheet["method"]
    parts = values["methods"][0]["parts"]
    for name in ("bullington_db", "smooth_bullington_db", "spherical_db"):
        assert parts[name] == sheet[name]


def test_the_first_line_says_the_loss_and_that_of_free_space() -> None:
    values, ended = losses_of(*HIDDEN, *AT), diffraction(*HIDDEN, *AT)
    assert ended.out.splitlines()[0] == (
        f"Diffraction loss {values['diffraction_db']:.1f} dB at 6 GHz, on top of "
        f"{values['free_space_db']:.1f} dB of free space; delta-Bullington."
    )
    assert ended.err == ""


def test_every_method_is_told_with_its_loss_and_whether_it_applies() -> None:
    values, out = losses_of(*HIDDEN, *AT), diffraction(*HIDDEN, *AT).out
    for method in values["methods"][1:]:
        (line,) = (x for x in out.splitlines() if x[13:].startswith(method["name"]))
        told = "-" if method["loss_db"] is None else f"{method['loss_db']:.1f} dB"
        assert told in line
        assert ("does not apply: " in line) != method["applies"]


def test_it_says_that_it_is_no_link_budget_and_no_coverage() -> None:
    out = " ".join(diffraction(*HIDDEN, *AT).out.split())
    assert "no link budget, coverage, rain or multipath statistics" in out
    codes = [note["code"] for note in losses_of(*HIDDEN, *AT)["cautions"]]
    assert "radio-geometry" in codes


def test_the_air_is_that_of_radio_unless_another_is_stated() -> None:
    assert "Air: radio, ke 1.333 = kr 0.25 (default)." in diffraction(*HIDDEN, *AT).out
    given = losses_of(*HIDDEN, *AT, "--ke", "2/3")
    assert given["earth"]["ke"] == 0.666667
    assert given["diffraction_db"] > losses_of(*HIDDEN, *AT)["diffraction_db"]


def test_a_void_leaves_no_loss_and_says_why() -> None:
    values, ended = losses_of(*SEA, *AT), diffraction(*SEA, *AT)
    assert values["diffraction_db"] is None
    assert values["methods"] == []
    assert ended.out.startswith(
        "No diffraction loss at 6 GHz: part of the path has no known ground."
    )


def test_a_path_without_any_known_ground_has_no_place_to_name() -> None:
    sea = (
        *("--from", "48.40,-21.60", "--from-amsl", "40m"),
        *("--to", "48.39,-21.60", "--to-amsl", "40m"),
    )
    ended = diffraction(*sea, *AT)
    assert ended.status == 0, ended.err
    (path,) = (x for x in ended.out.splitlines() if x.startswith("path "))
    assert " the line" not in path
    assert losses_of(*sea, *AT)["decisive"] is None


def test_ground_left_out_of_the_line_still_costs_and_that_is_said() -> None:
    told = "Ground near the ends counts in the loss, though left out of the line."
    near = (*HIDDEN, *AT, "--ignore-near", "50m")
    assert told in diffraction(*near).out
    assert told not in diffraction(*HIDDEN, *AT).out
    assert (
        losses_of(*near)["diffraction_db"] == losses_of(*HIDDEN, *AT)["diffraction_db"]
    )


def test_obstacles_that_are_none_are_told_as_none() -> None:
    high = ("--from", "Skarvel", "--from-height", "300m")
    ended = diffraction(*high, *HIDDEN[4:], *AT)
    assert "none: no ground within 0.6 F1 of the line" in ended.out
    assert ended.out.startswith("Diffraction loss 0.0 dB at 6 GHz")


def test_trees_add_to_the_loss() -> None:
    bare, wood = losses_of(*HIDDEN, *AT), losses_of(*HIDDEN, *AT, "--canopy", "15m")
    assert wood["diffraction_db"] > bare["diffraction_db"]


def test_the_words_follow_the_unit_that_is_shown() -> None:
    values = losses_of(*HIDDEN, *AT)
    assert "Skarvel (65.6 ft)" in loss_words(values, show_in="ft")


def test_the_record_in_a_file_is_the_one_on_stdout(tmp_path: Path) -> None:
    name = tmp_path / "loss.json"
    ended = diffraction(*HIDDEN, *AT, "--json", str(name))
    assert ended.err == f"Wrote {name}\n"
    assert name.read_text("utf-8") == diffraction(*HIDDEN, *AT, "--json", "-").out


def test_sea_and_polarization_change_a_long_low_path_only_where_they_may() -> None:
    low = (
        *("--from", "Ostrey Haven", "--from-height", "2m", "--sea-level", "0m"),
        *("--to", "48.40,-21.60", "--to-height", "2m", "--frequency", "30MHz"),
    )
    land = losses_of(*low, "--polarization", "vertical")
    sea = losses_of(*low, "--polarization", "vertical", "--sea-share", "1")
    assert sea["diffraction_db"] < land["diffraction_db"]
    assert sea["sea_fraction"] == 1.0


@pytest.mark.parametrize(
    ("words", "status", "said"),
    [
        ((), 2, "Missing option '--frequency'."),
        (("--frequency", "6"), 2, "6 what? Write 6GHz or 6MHz."),
        ((*AT, "--sea-share", "2"), 3, "share of the path over sea is from 0 to 1"),
        ((*AT, "--polarization", "slant"), 2, "'slant' is not one of"),
    ],
)
def test_what_cannot_be_used_is_refused(
    words: tuple[str, ...], status: int, said: str
) -> None:
    ended = diffraction(*HIDDEN, *words)
    assert ended.status == status
    assert said in ended.err


def test_heights_have_no_default() -> None:
    ended = diffraction("--from", "Skarvel", "--to", "Quillet Mast", *AT)
    assert ended.status == 2
    assert "A radio path has no default heights" in ended.err


def test_the_elevation_file_is_not_overwritten() -> None:
    ended = diffraction(*HIDDEN, *AT, "--json", str(UPLAND))
    assert ended.status == 3
    assert "would be overwritten" in ended.err
