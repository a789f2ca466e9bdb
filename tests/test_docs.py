"""The pages: commands run, tables match the program, links lead to files."""

import json
import re
import subprocess
import sys
import tomllib
from collections.abc import Iterator
from importlib import import_module
from pathlib import Path
from typing import Any

import click
import pytest

import profiler
from docs.blocks import ROOT, Block, agrees, blocks, pages, run
from profiler.cli import endings
from profiler.cli.main import COMMANDS
from profiler.cli.profile import EXIT_BY_VERDICT
from profiler.constants import VERSION
from profiler.model import Air, Point, Station
from tests.asking import GIVEN, HIDDEN
from tests.asking import run as run_command

#: Exit status of a command line that click refuses; click's own.
EXIT_USAGE = 2
#: The sample that the pages' questions are asked on.
UPLAND = ROOT / "sample_dem" / "upland.tif"
#: Rooms whose notes reach the record or the inspection sheet.
NOTING_ROOMS = ("terrain", "shapes", "sight", "radio", "output")

ALL_BLOCKS = [block for page in pages() for block in blocks(page)]
CONSOLE = [block for block in ALL_BLOCKS if block.language == "console"]


def page(name: str) -> str:
    return (ROOT / name).read_text(encoding="utf-8")


def pyproject() -> dict[str, Any]:
    return tomllib.loads(page("pyproject.toml"))


def first_column(text: str) -> Iterator[str]:
    """Words in backquotes in the first column of every table row."""
    for row in re.findall(r"^\| *(`.*?) \| ", text, re.M):
        yield from re.findall(r"`([^`]+)`", row)


# --- what is shown is what is printed ---------------------------------------------


@pytest.mark.parametrize("block", CONSOLE, ids=lambda block: block.where)
def test_a_console_block_prints_what_the_page_shows(
    block: Block, tmp_path: Path
) -> None:
    printed = run(block, tmp_path)
    followers = [command for command, _ in block.steps[1:]] + [""]
    for (command, shown), real, next_command in zip(
        block.steps, printed, followers, strict=True
    ):
        assert agrees(shown, real.stdout), f"$ {command}{real.stdout}"
        told = next_command.strip() == "echo $?"
        assert real.status == 0 or told, f"status {real.status} after $ {command}"


def test_every_block_is_one_that_is_run_or_compared() -> None:
    for block in ALL_BLOCKS:
        assert block.language in ("console", "python", "bash", "{toctree}")
        if block.language == "python":
            assert block.text.startswith(">>> "), block.where
            assert block.text.endswith("\n\n"), f"{block.where}: blank line at the end"


def test_a_wrong_output_is_noticed(tmp_path: Path) -> None:
    shown = "$ overbrow --version\noverbrow 9\n$ false\n"
    block = Block(page=ROOT / "README.md", line=1, language="console", text=shown)
    version, failed = run(block, tmp_path)
    assert not agrees(block.steps[0][1], version.stdout)
    assert VERSION in version.stdout
    assert (failed.stdout, failed.status) == ("", 1)


def test_bash_blocks_are_the_commands_of_a_fresh_machine() -> None:
    lines = [block.text.strip() for block in ALL_BLOCKS if block.language == "bash"]
    run_it, test_it, set_up, check_it = lines
    for line in (run_it, test_it, set_up):
        assert line.startswith("python3 -m venv .venv && .venv/bin/pip install -q ")
    assert run_it.endswith(" && .venv/bin/overbrow demo")
    assert check_it == ".ci/run"
    assert set(re.findall(r"\[(\w+)\]", test_it + set_up)) <= set(
        pyproject()["project"]["optional-dependencies"]
    )


def test_ci_runs_the_test_command_of_the_readme_first() -> None:
    _, test_it = (b for b in blocks(ROOT / "README.md") if b.language == "bash")
    script = page(".ci/run")
    assert f"\n  {test_it.text}" in script
    assert script.index(test_it.text) < script.index("ruff check")


def test_ci_is_a_shell_script_that_reads_nothing() -> None:
    path = ROOT / ".ci" / "run"
    assert path.stat().st_mode & 0o111
    assert "exec </dev/null" in page(".ci/run")
    subprocess.run(["bash", "-n", str(path)], check=True)


# --- tables of the pages against the program --------------------------------------


def commands() -> Iterator[tuple[str, click.Command]]:
    for name, (module, attribute) in COMMANDS.items():
        yield name, getattr(import_module(module), attribute)


def test_commands_page_lists_every_option_and_no_other() -> None:
    parts = re.split(r"^## `overbrow (\w+)`$", page("docs/commands.md"), flags=re.M)
    sections = dict(zip(parts[1::2], parts[2::2], strict=True))
    assert list(sections) == list(COMMANDS)
    for name, command in commands():
        real = {
            opt
            for param in command.params
            if isinstance(param, click.Option)
            for opt in param.opts
            if opt.startswith("--") and opt != "--help"
        }
        cells = first_column(sections[name])
        listed = {cell.split()[0] for cell in cells if cell.startswith("--")}
        assert listed == real, name


def test_commands_page_lists_every_exit_status_and_no_other() -> None:
    section = page("docs/commands.md").split("## `overbrow profile`")[0]
    listed = {int(n) for n in re.findall(r"^\| (\d+) \|", section, re.M)}
    cut_short = {n for name, n in vars(endings).items() if name.startswith("EXIT_")}
    known = {*EXIT_BY_VERDICT.values(), EXIT_USAGE, *cut_short}
    assert listed == known


def keys_of(value: Any) -> set[str]:
    if isinstance(value, dict):
        return set(value).union(*(keys_of(v) for v in value.values()))
    if isinstance(value, list):
        return set().union(*(keys_of(v) for v in value))
    return set()


def test_record_page_lists_every_field_and_no_other() -> None:
    terrain = profiler.open_terrain(UPLAND)
    hill = Point(lat_deg=48.2092, lon_deg=-21.50344)
    mast = Point(lat_deg=48.32758, lon_deg=-21.17892)
    sea = Point(lat_deg=48.4, lon_deg=-21.585)
    shore = Point(lat_deg=48.39, lon_deg=-21.4)
    answers = [
        profiler.look(
            terrain,
            Station(point=hill, agl_m=20.0, surveyed_ground_m=436.0),
            Station(point=mast, agl_m=30.0),
        ),
        profiler.look(
            terrain,
            Station(point=sea, amsl_m=40.0),
            Station(point=shore, agl_m=60.0),
            air=Air(ke=4 / 3),
        ),
    ]
    radio = ("--frequency", "400MHz", "--rule-set", "p530-temperate")
    trees = ("--canopy", "15m", "--growth", "0.4m", "--years", "3")
    beside = ("--from", "Skarvel", "--to", "Vennick", "--from-height", "45m")
    records = [
        *(answer.record() for answer in answers),
        *(
            json.loads(run_command(name, *GIVEN, *asked, *more, "--json", "-").out)
            for name, asked, more in (
                ("profile", (*beside, "--to-height", "10m"), radio),
                ("profile", HIDDEN, trees),
                ("masts", HIDDEN, radio),
                ("diffraction", HIDDEN, ("--frequency", "6GHz")),
            )
        ),
    ]
    text = page("docs/record.md").split("## Codes")[0]
    real = set().union(*(keys_of(values) for values in records))
    listed = set(first_column(text))
    inner = {"code", "text", "version"}  # of notes and software, named in their rows
    assert listed == real - inner
    assert all(f"`{name}`" in text for name in inner)


def test_record_page_lists_every_code_of_a_note_and_no_other() -> None:
    files = [p for r in NOTING_ROOMS for p in (ROOT / "profiler" / r).rglob("*.py")]
    source = "\n".join(p.read_text(encoding="utf-8") for p in files)
    real = set(re.findall(r'\bNote\(\s*code="([a-z-]+)"', source))
    section = page("docs/record.md").split("## Codes")[1]
    listed = set(re.findall(r"`([a-z]+(?:-[a-z]+)*)`", section)) - {"code", "text"}
    assert listed == real


def test_analyst_page_lists_every_public_name_and_no_other() -> None:
    section = page("docs/howto-gis-analyst.md").split("## Public names")[1]
    assert sorted(first_column(section)) == sorted(profiler.__all__)


def test_floors_table_is_the_contract_that_is_checked() -> None:
    floors, *doors = pyproject()["tool"]["importlinter"]["contracts"]
    rows = re.findall(
        r"^\| \d+ \| (.+?) \| .+? \| (.+?) \|$", page("DEVELOPERS.md"), re.M
    )
    layers = [" | ".join(re.findall(r"`(\w+)`", rooms)) for rooms, _ in rows]
    assert layers == floors["layers"]
    named = {word for _, door in rows for word in re.findall(r"[a-z]+", door)}
    assert named == {library for d in doors for library in d["forbidden_modules"]}


def test_dependencies_page_gives_a_reason_for_every_library() -> None:
    project = pyproject()["project"]
    extras = project["optional-dependencies"]
    wanted = [*project["dependencies"], *(d for e in extras.values() for d in e)]
    names = {re.split(r"[<>=\[]", d)[0] for d in wanted} - {"overbrow"}
    text = page("docs/decisions/0005-dependencies.md").split("**Rejected**")[0]
    assert {
        n for n in names if not re.search(rf"^\|.*\b{n}\b.* \|", text, re.M)
    } == set()


def test_changes_page_begins_with_this_version() -> None:
    headings = re.findall(r"^## \[([^\]]+)\]", page("docs/changes.md"), re.M)
    assert headings[0] == VERSION


def test_links_between_pages_lead_to_files() -> None:
    for path in pages():
        text = path.read_text(encoding="utf-8")
        for target in re.findall(r"\]\(([^)#\s]+)[^)]*\)", text):
            assert (path.parent / target).exists(), f"{path.name}: {target}"


def test_measured_bounds_are_printed_by_one_command() -> None:
    done = subprocess.run(
        [sys.executable, "-c", "import docs.measure as m; print(len(m.MEASURES))"],
        cwd=ROOT,
        capture_output=True,
        encoding="utf-8",
        check=True,
    )
    shown = "".join(p.read_text(encoding="utf-8") for p in pages())
    module = import_module("docs.measure")
    assert int(json.loads(done.stdout)) == len(module.MEASURES)
    for measure in module.MEASURES:
        assert f"print({measure.__name__}())" in shown, measure.__name__
