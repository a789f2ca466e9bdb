"""Ways to ask the command that the tests of the command line share."""

import json
import os
import re
import subprocess
import sys
from pathlib import Path
from typing import Any, NamedTuple

from click.testing import CliRunner

from profiler import Answer
from profiler.cli.main import overbrow
from profiler.cli.profile import answer_to, profile_command

ROOT = Path(__file__).resolve().parents[1]
SAMPLE = ROOT / "sample_dem"
UPLAND = SAMPLE / "upland.tif"
SITES = SAMPLE / "sites.csv"

#: The elevation file and its named places.
GIVEN = ("--dem", str(UPLAND), "--sites", str(SITES))
#: The main example: blocked twice.
HIDDEN = (
    *("--from", "Skarvel", "--from-height", "20m"),
    *("--to", "Quillet Mast", "--to-height", "30m"),
)
#: Clear, with part of the mast hidden.
PART = (
    *("--from", "Skarvel", "--from-height", "45m"),
    *("--to", "Quillet Mast", "--to-height", "60m"),
)
#: A bare summit that hides its own highest point.
OWN_HILL = ("--from", "Skarvel", "--to", "Cobbin Round")
#: Out over the sea, where the sample has no ground.
SEA = (
    *("--from", "Skarvel", "--from-amsl", "500m"),
    *("--to", "48.205,-21.60", "--to-amsl", "60m"),
)


class Ended(NamedTuple):
    """How a run ended."""

    status: int
    out: str
    err: str

    @property
    def said(self) -> str:
        """Lines of stderr without click's two lines of usage."""
        lines = [line for line in self.err.splitlines() if line]
        return "\n".join(
            line for line in lines if not re.match(r"Usage: |Try '.*--help' for", line)
        )


def run(*words: str) -> Ended:
    """The command, in this process; an exception that escapes is raised."""
    result = CliRunner(catch_exceptions=False).invoke(overbrow, list(words))
    return Ended(result.exit_code, result.stdout, result.stderr)


def profile(*words: str) -> Ended:
    """``overbrow profile`` on the sample upland."""
    return run("profile", *GIVEN, *words)


def record_of(*words: str) -> dict[str, Any]:
    """The record that ``overbrow profile`` prints for the sample upland."""
    ended = profile(*words, "--json", "-")
    assert ended.status == 0, ended.err
    values: dict[str, Any] = json.loads(ended.out)
    return values


def answer_of(*words: str) -> Answer:
    """The answer object behind the same command."""
    context = profile_command.make_context("profile", [*GIVEN, *words])
    return answer_to(context.params)


def spawn(*words: str, **settings: Any) -> Ended:
    """``python -m profiler`` in a process of its own."""
    done = subprocess.run(
        [sys.executable, "-m", "profiler", *words],
        capture_output=True,
        check=False,
        cwd=settings.pop("cwd", ROOT),
        env={**os.environ, "PYTHONPATH": str(ROOT), **settings.pop("env", {})},
        **settings,
    )
    return Ended(done.returncode, done.stdout.decode(), done.stderr.decode())
