"""The console blocks of the pages: found, run and, on request, written again.

A block holds ``$ command`` lines, each followed by what it prints on stdout. Run
``python -m docs.blocks`` from the top of a checkout after an output has changed on
purpose: it writes the real output into every page. tests/test_docs.py compares.
"""

import doctest
import os
import re
import shutil
import subprocess
import sys
import tempfile
from dataclasses import dataclass
from pathlib import Path

ROOT = Path(__file__).resolve().parents[1]
#: Sample files copied beside the block that runs.
SAMPLE_FILES = ("upland.tif", "combe_fine.tif", "sites.csv", "tops.gpx")
#: Printed after each command with its exit status; in no output.
END = "\x1e"
#: No command of a page takes longer [s].
LONGEST_S = 120.0
PROLOGUE = f"""\
overbrow() {{ '{sys.executable}' -m profiler "$@"; }}
python() {{ '{sys.executable}' "$@"; }}
"""
FENCE = re.compile(r"^```([a-z{}]*)\n(.*?)^```$", re.M | re.S)


@dataclass(frozen=True, slots=True, kw_only=True)
class Block:
    """One fenced block of a page."""

    page: Path
    line: int
    language: str
    text: str

    @property
    def where(self) -> str:
        """Page and line, for a message."""
        return f"{self.page.relative_to(ROOT)}:{self.line}"

    @property
    def steps(self) -> list[tuple[str, str]]:
        """Commands of a console block, each with the output shown.

        A command goes on after a backslash and on lines that begin with ``> ``.
        """
        steps: list[tuple[str, str]] = []
        for line in self.text.splitlines(keepends=True):
            if line.startswith("$ "):
                steps.append((line[2:], ""))
                continue
            command, shown = steps[-1]
            if not shown and (command.endswith("\\\n") or line.startswith("> ")):
                steps[-1] = (command + line, "")
            else:
                steps[-1] = (command, shown + line)
        return steps


@dataclass(frozen=True, slots=True, kw_only=True)
class Printed:
    """What one command printed on stdout, and its exit status."""

    stdout: str
    status: int


def pages() -> list[Path]:
    """Every page of text: the two at the top and those in docs."""
    found = sorted(p for p in (ROOT / "docs").rglob("*.md") if "_build" not in p.parts)
    return [ROOT / "README.md", ROOT / "DEVELOPERS.md", *found]


def blocks(page: Path) -> list[Block]:
    """Fenced blocks of a page, in order."""
    text = page.read_text(encoding="utf-8")
    return [
        Block(
            page=page,
            line=text.count("\n", 0, match.start()) + 1,
            language=match[1],
            text=match[2],
        )
        for match in FENCE.finditer(text)
    ]


def run(block: Block, folder: Path) -> list[Printed]:
    """Run a console block in a folder with the sample beside it.

    Raises
    ------
    RuntimeError
        If the shell stopped before the last command.
    """
    (folder / "sample_dem").mkdir()
    for name in SAMPLE_FILES:
        shutil.copy(ROOT / "sample_dem" / name, folder / "sample_dem" / name)
    report = f"_s=$?; printf '{END}%d\\n' $_s; (exit $_s)\n"
    commands = [re.sub("^> ", "", text, flags=re.M) for text, _ in block.steps]
    script = PROLOGUE + "".join(command + report for command in commands)
    done = subprocess.run(
        ["bash", "-c", script],
        cwd=folder,
        env={**os.environ, "PYTHONPATH": str(ROOT), "LC_ALL": "C.UTF-8"},
        stdin=subprocess.DEVNULL,
        capture_output=True,
        encoding="utf-8",
        timeout=LONGEST_S,
        check=False,
    )
    parts = re.findall(rf"(.*?){END}(\d+)\n", done.stdout, re.S)
    if len(parts) != len(block.steps):
        msg = f"{block.where}: the shell stopped early: {done.stderr}"
        raise RuntimeError(msg)
    return [Printed(stdout=out, status=int(status)) for out, status in parts]


def agrees(shown: str, printed: str) -> bool:
    """Whether an output is the one shown; ``...`` stands for what a machine decides."""
    return doctest.OutputChecker().check_output(shown, printed, doctest.ELLIPSIS)


def rewritten(block: Block, printed: list[Printed]) -> str:
    """Text of a console block with the real outputs, those that agree left alone."""
    text = ""
    for (command, shown), real in zip(block.steps, printed, strict=True):
        kept = shown if agrees(shown, real.stdout) else real.stdout
        text += f"$ {command}{kept}"
    return text


def main() -> None:
    """Write the real outputs into every page."""
    for page in pages():
        text = page.read_text(encoding="utf-8")
        for block in blocks(page):
            if block.language != "console":
                continue
            with tempfile.TemporaryDirectory() as folder:
                new = rewritten(block, run(block, Path(folder)))
            if new != block.text:
                old = f"```console\n{block.text}```"
                text = text.replace(old, f"```console\n{new}```", 1)
                sys.stdout.write(f"changed {block.where}\n")
        page.write_text(text, encoding="utf-8")


if __name__ == "__main__":
    main()
