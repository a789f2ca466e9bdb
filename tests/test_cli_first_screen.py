"""What a person meets first: the screen, the help, and how a run may end early."""

import os
import re
import signal
import subprocess
import sys
from pathlib import Path

import click
import pytest
from click.testing import CliRunner

from profiler.cli.main import COMMANDS, FIRST_SCREEN, overbrow
from profiler.cli.main import run as run_command
from profiler.constants import VERSION
from tests.asking import GIVEN, HIDDEN, PART, ROOT, run, spawn

#: Starts the command with a pause where the answer is found, and says when.
PAUSED = """
import sys, time
import profiler.cli.profile as profile

def wait(options):
    print("asked", file=sys.stderr, flush=True)
    time.sleep(60)

profile.answer_to = wait
from profiler.cli.main import run
run()
"""


def test_the_name_alone_says_what_it_is_and_exits_0() -> None:
    ended = run()
    assert ended.status == 0
    assert ended.err == ""
    assert ended.out.startswith(f"overbrow {VERSION}, terrain line-of-sight profiler.")


def test_the_first_screen_shows_four_commands() -> None:
    text = run().out.replace("\\\n", " ")
    commands = re.findall(r"^  (overbrow .*)$", text, re.MULTILINE)
    assert len(commands) == 4


def test_the_commands_of_the_first_screen_work_as_written(tmp_path: Path) -> None:
    # a folder like the checkout, so that the results land in it and not there
    (tmp_path / "sample_dem").symlink_to(ROOT / "sample_dem")
    text = FIRST_SCREEN.replace("\\\n", " ")
    for command in re.findall(r"^  overbrow (.*)$", text, re.MULTILINE):
        done = subprocess.run(
            f'"{sys.executable}" -m profiler {command}',
            shell=True,
            capture_output=True,
            check=False,
            cwd=tmp_path,
            env={**os.environ, "PYTHONPATH": str(ROOT)},
        )
        assert done.returncode == 0, (command, done.stderr)
        assert done.stdout


def test_the_module_does_what_the_command_does() -> None:
    assert spawn() == (0, FIRST_SCREEN, "")
    assert spawn("--version").out == (
        f"overbrow, terrain line-of-sight profiler, version {VERSION}\n"
    )


@pytest.mark.parametrize("name", COMMANDS)
def test_every_command_explains_every_option(name: str) -> None:
    ended = run(name, "--help")
    assert ended.status == 0
    command = overbrow.get_command(click.Context(overbrow), name)
    assert command is not None
    for option in command.params:
        if isinstance(option, click.Option):
            assert option.help, option.name
            assert option.opts[0] in ended.out


def test_the_help_of_profile_names_unit_default_and_an_example_by_section() -> None:
    text = " ".join(run("profile", "--help").out.split())
    for section in ("Question:", "Ground:", "Air:", "Radio:", "Results:"):
        assert section in text
    assert text.count("Example:") == 5
    for default in ("1.7m", "0, bare ground", "0.13, light", "9000m", "100m and 3"):
        assert default in text


@pytest.mark.parametrize(
    ("typed", "said"),
    [
        ("prifile", 'No command "prifile". Nearest: profile.'),
        ("zzz", 'No command "zzz". Known: profile, masts, diffraction, inspect, demo.'),
    ],
)
def test_an_unknown_command_is_refused_with_the_nearest(typed: str, said: str) -> None:
    ended = run(typed)
    assert ended.status == 2
    assert ended.said == f"Error: {said}"
    assert ended.out == ""


@pytest.mark.parametrize("words", [("profile", *GIVEN, *HIDDEN), ("--help",), ()])
def test_a_reader_that_goes_away_gets_no_traceback(words: tuple[str, ...]) -> None:
    with subprocess.Popen(
        [sys.executable, "-m", "profiler", *words],
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        cwd=ROOT,
    ) as process:
        assert process.stdout is not None
        assert process.stderr is not None
        process.stdout.close()
        said = process.stderr.read().decode()
    assert process.returncode == 141
    assert "Traceback" not in said
    assert "Exception" not in said


def test_an_answer_that_finds_no_room_is_told_in_one_line() -> None:
    with Path("/dev/full").open("wb") as full:
        done = subprocess.run(
            [sys.executable, "-m", "profiler", "profile", *GIVEN, *HIDDEN],
            stdout=full,
            stderr=subprocess.PIPE,
            check=False,
            cwd=ROOT,
        )
    assert done.returncode == 3
    assert done.stderr == (
        b"Error: The answer cannot be told: No space left on device.\n"
    )


def test_ctrl_c_ends_with_one_line_and_status_130() -> None:
    with subprocess.Popen(
        [sys.executable, "-c", PAUSED, "profile", *GIVEN, *HIDDEN],
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        cwd=ROOT,
    ) as process:
        assert process.stderr is not None
        assert process.stderr.readline() == b"asked\n"
        process.send_signal(signal.SIGINT)
        out, said = process.communicate(timeout=30)
    assert process.returncode == 130
    assert said.decode().splitlines() == ["Stopped; no half-written file is left."]
    assert out == b""


def test_a_terminal_without_minute_signs_still_gets_the_answer() -> None:
    done = subprocess.run(
        [sys.executable, "-m", "profiler", "profile", *GIVEN, *PART],
        capture_output=True,
        check=False,
        cwd=ROOT,
        env={**os.environ, "PYTHONIOENCODING": "latin-1"},
    )
    assert done.returncode == 0
    text = done.stdout.decode("latin-1")
    assert "(4.1?)" in text
    assert "bearing 61.2°" in text


def test_the_record_is_utf_8_whatever_the_terminal() -> None:
    words = ("profile", *GIVEN, *HIDDEN, "--json", "-")
    plain, latin = (
        spawn(*words, env={"PYTHONIOENCODING": name}) for name in ("utf-8", "latin-1")
    )
    assert plain.out == latin.out


def test_the_entry_point_is_the_group(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "argv", ["overbrow", "--version"])
    with pytest.raises(SystemExit) as ended:
        run_command()
    assert ended.value.code == 0


def test_an_abort_counts_as_ctrl_c(monkeypatch: pytest.MonkeyPatch) -> None:
    import profiler.cli.profile

    def stop(_: object) -> None:
        raise click.Abort

    monkeypatch.setattr(profiler.cli.profile, "answer_to", stop)
    result = CliRunner().invoke(overbrow, ["profile", *GIVEN, *HIDDEN])
    assert result.exit_code == 130
