"""The command ``overbrow``: its first screen and its sub-commands."""

import gc
import io
import sys
from importlib import import_module
from typing import Any, Final

import click

from profiler.cli.characters import echo
from profiler.cli.endings import EXIT_NO_READER, plain_endings, silence
from profiler.constants import VERSION

#: Sub-commands: module and name of the command in it, imported when called.
COMMANDS: Final = {
    "profile": ("profiler.cli.profile", "profile_command"),
    "masts": ("profiler.cli.masts", "masts_command"),
    "diffraction": ("profiler.cli.diffraction", "diffraction_command"),
    "inspect": ("profiler.cli.inspect", "inspect_command"),
    "demo": ("profiler.cli.demo", "demo_command"),
}

FIRST_SCREEN: Final = f"""\
overbrow {VERSION}, terrain line-of-sight profiler.
Does one point see another over real ground, by how much, what decides it, and what
would change the answer? You bring an elevation file (GeoTIFF) and two points.

Try it on the invented sample upland:
  overbrow demo
Ask about two points (latitude,longitude; heights above ground):
  overbrow profile --dem sample_dem/upland.tif --from "48.20920,-21.50344" \\
    --from-height 20m --to "48.32758,-21.17892" --to-height 30m
Ask by name, draw the profile and keep the record:
  overbrow profile --dem sample_dem/upland.tif --sites sample_dem/sites.csv \\
    --from Skarvel --to "Thrane Pike" --figure profile.png --json profile.json
See what an elevation file is and what must be declared:
  overbrow inspect sample_dem/upland.tif

More: overbrow --help, overbrow profile --help
"""


class LazyGroup(click.Group):
    """A group that imports a sub-command only when it is called or listed."""

    def list_commands(self, ctx: click.Context) -> list[str]:
        """Names in the order of use."""
        del ctx
        return list(COMMANDS)

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        """The command, or None if there is none of that name."""
        del ctx
        if cmd_name not in COMMANDS:
            return None
        module, name = COMMANDS[cmd_name]
        command: click.Command = getattr(import_module(module), name)
        return command

    def resolve_command(
        self, ctx: click.Context, args: list[str]
    ) -> tuple[str | None, click.Command | None, list[str]]:
        """The command that is meant; an unknown one is refused with the nearest."""
        name = args[0]
        if name not in COMMANDS and not name.startswith("-"):
            import difflib  # only a slip needs it

            near = difflib.get_close_matches(name, COMMANDS, n=1)
            hint = f"Nearest: {near[0]}." if near else f"Known: {', '.join(COMMANDS)}."
            msg = f"No command {echo(name)}. {hint}"
            raise click.UsageError(msg, ctx)
        return super().resolve_command(ctx, args)

    def make_context(self, *args: Any, **kwargs: Any) -> click.Context:
        """Read the first words; an early end is plain."""
        with plain_endings():
            return super().make_context(*args, **kwargs)

    def invoke(self, ctx: click.Context) -> Any:
        """Run the sub-command; an early end is plain."""
        with plain_endings():
            return super().invoke(ctx)


@click.group(cls=LazyGroup, invoke_without_command=True)
@click.version_option(VERSION, prog_name="overbrow, terrain line-of-sight profiler")
@click.pass_context
def overbrow(ctx: click.Context) -> None:
    """Terrain line-of-sight profiler: does one point see another over real ground.

    Every command has --help of its own, with units, defaults and examples.
    """
    if ctx.invoked_subcommand is None:
        click.echo(FIRST_SCREEN, nl=False)


def run() -> None:
    """Run the command line; the entry point of the installed script."""
    # a run is short; docs/decisions/0008 says what looking for cycles would cost
    gc.disable()
    for stream in (sys.stdout, sys.stderr):
        if isinstance(stream, io.TextIOWrapper):
            # a terminal that lacks ° or ′ shows ? there instead of failing
            stream.reconfigure(errors="replace")
    try:
        overbrow.main(prog_name="overbrow", windows_expand_args=False)
    except BrokenPipeError:
        # the reader went away while the last words were being said
        silence()
        sys.exit(EXIT_NO_READER)
