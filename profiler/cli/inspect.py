"""The command that tells what elevation files are and what must be declared."""

import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import TYPE_CHECKING, Final

import click

if TYPE_CHECKING:
    from rich.progress import Progress

    from profiler.terrain.scan import Progress as OnProgress

#: Time after which long work shows how far it is [s]; design choice.
QUIET_S: Final = 2.0


@click.command(name="inspect", short_help="Tell what an elevation file is.")
@click.argument("files", metavar="FILE...", nargs=-1, required=True)
@click.option(
    "--dem-crs",
    metavar="EPSG:n",
    help="Coordinate system of files that state none.",
)
@click.option(
    "--json",
    "json_to",
    metavar="FILE|-",
    help="Write the facts as JSON; - prints them instead of the sheets.",
)
def inspect_command(
    files: tuple[str, ...], dem_crs: str | None, json_to: str | None
) -> None:
    """Tell what elevation files are, what looks wrong and what must be declared.

    FILE is an elevation file, a folder of them or a quoted pattern such as
    'tiles/*.tif'. Every post is read.
    """
    # help needs none of these
    from profiler.output.files import check_target, write_text
    from profiler.output.inspection import (
        inspection_text,
        inspections_json,
        notes_text,
    )
    from profiler.terrain.dem import expand
    from profiler.terrain.inspect import inspect_file

    if json_to not in (None, "-"):
        check_target(Path(json_to))
    reports = []
    for number, path in enumerate(expand(files)):
        with _progress(path.name) as on_progress:
            report = inspect_file(path, dem_crs=dem_crs, progress=on_progress)
        reports.append(report)
        if json_to == "-":
            for line in notes_text(report):
                click.echo(line, err=True)
            continue
        click.echo(("\n" if number else "") + inspection_text(report), nl=False)
    if json_to == "-":
        click.echo(inspections_json(reports), nl=False)
    elif json_to is not None:
        write_text(Path(json_to), inspections_json(reports))
        click.echo(f"Written: {json_to}", err=True)


@contextmanager
def _progress(what: str) -> "Iterator[OnProgress]":
    """Progress on stderr that shows itself only when the work takes long."""
    begun = time.monotonic()
    bars: list[Progress] = []

    def on_progress(done: int, total: int) -> None:
        if time.monotonic() - begun < QUIET_S or done == total:
            return
        if not bars:
            bars.append(_new_bar(what, total))
        bars[0].update(bars[0].task_ids[0], completed=done)

    try:
        yield on_progress
    finally:
        for bar in bars:
            bar.stop()


def _new_bar(what: str, total: int) -> "Progress":
    # only long work shows a bar
    from rich.console import Console
    from rich.progress import Progress

    bar = Progress(console=Console(stderr=True), transient=True)
    bar.add_task(what, total=total)
    bar.start()
    return bar
