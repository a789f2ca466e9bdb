"""``overbrow demo`` answers a question and leaves every telling of it."""

import json
import shlex
from pathlib import Path

import pytest

from profiler.cli import demo
from profiler.cli.demo import LEAVES
from tests.asking import HIDDEN, profile, run


@pytest.fixture(scope="module")
def shown(tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, str]:
    folder = tmp_path_factory.mktemp("demo") / "new" / "folder"
    ended = run("demo", str(folder))
    assert ended.status == 0, ended.err
    return folder, ended.out


def test_the_demo_leaves_what_it_says_and_nothing_else(
    shown: tuple[Path, str],
) -> None:
    folder, out = shown
    assert sorted(p.name for p in folder.iterdir()) == sorted(LEAVES)
    for name, what in LEAVES.items():
        assert f"{name:<16} {what}" in out


def test_the_demo_tells_the_same_in_words_and_record(shown: tuple[Path, str]) -> None:
    folder, out = shown
    text = (folder / "words.txt").read_text("utf-8")
    assert text == profile(*HIDDEN).out
    assert text in out
    record = (folder / "profile.json").read_text("utf-8")
    assert record == profile(*HIDDEN, "--json", "-").out


def test_the_demo_draws_a_picture_and_a_map_layer(shown: tuple[Path, str]) -> None:
    folder, _ = shown
    assert (folder / "profile.png").read_bytes().startswith(b"\x89PNG")
    shapes = json.loads((folder / "profile.geojson").read_text("utf-8"))
    assert shapes["type"] == "FeatureCollection"


def test_the_command_that_the_demo_prints_can_be_run(shown: tuple[Path, str]) -> None:
    folder, out = shown
    words = shlex.split(out.splitlines()[0])
    assert words[:3] == ["$", "overbrow", "profile"]
    assert str(folder / "profile.png") in words
    figure = words.index("--figure")
    ended = run(*words[2:figure])
    assert ended.status == 0
    assert ended.out == (folder / "words.txt").read_text("utf-8")


def test_a_folder_that_is_a_file_is_refused(tmp_path: Path) -> None:
    (tmp_path / "demo").write_text("mine")
    ended = run("demo", str(tmp_path / "demo"))
    assert ended.status == 3
    assert ended.said.startswith("Error: Folder ")
    assert (tmp_path / "demo").read_text() == "mine"


def test_a_missing_sample_is_told_in_words(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(demo, "SAMPLE_FOLDERS", (tmp_path,))
    ended = run("demo", str(tmp_path / "out"))
    assert ended.status == 3
    assert ended.said == (
        "Error: The sample terrain is not installed. Run from a checkout of the "
        "project."
    )
