"""``overbrow demo``: the main job on the sample upland, with everything it leaves."""

import shlex
import sys
from pathlib import Path
from typing import Final

import click

from profiler.cli.profile import answer_to, profile_command, tell, words_for
from profiler.cli.sections import SectionCommand
from profiler.errors import InputError
from profiler.output.files import write_text

#: Where the sample may lie: beside the package in a checkout, or where it installs.
SAMPLE_FOLDERS: Final = (
    Path(__file__).resolve().parents[2] / "sample_dem",
    Path(sys.prefix) / "share" / "overbrow" / "sample_dem",
)
#: What the demo leaves and what each file is.
LEAVES: Final = {
    "words.txt": "the answer in plain words, as printed above",
    "profile.png": "the annotated profile, to look at",
    "profile.json": "the record, for scripts",
    "profile.geojson": "path and places, for a map",
}


def sample_folder() -> Path:
    """Folder of the sample terrain.

    Raises
    ------
    InputError
        If it was not installed.
    """
    for folder in SAMPLE_FOLDERS:
        if (folder / "upland.tif").is_file():
            return folder
    msg = "The sample terrain is not installed. Run from a checkout of the project."
    raise InputError(msg)


@click.command("demo", cls=SectionCommand)
@click.argument("folder", required=False, default="overbrow-demo")
@click.pass_context
def demo_command(ctx: click.Context, folder: str) -> None:
    """Answer a question on the sample upland and leave every result in FOLDER.

    FOLDER is made if need be; by default overbrow-demo.
    """
    sample = sample_folder()
    out = Path(folder)
    try:
        out.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        msg = f'Folder "{folder}" cannot be made ({error.strerror}).'
        raise InputError(msg) from error
    args = [
        *("--dem", str(sample / "upland.tif"), "--sites", str(sample / "sites.csv")),
        *("--from", "Skarvel", "--from-height", "20m"),
        *("--to", "Quillet Mast", "--to-height", "30m"),
        *("--figure", str(out / "profile.png"), "--json", str(out / "profile.json")),
        *("--geojson", str(out / "profile.geojson")),
    ]
    click.echo(f"$ {shlex.join(['overbrow', 'profile', *args])}\n")
    with profile_command.make_context("profile", args, parent=ctx) as inner:
        answer = answer_to(inner.params)
        tell(answer, inner.params)
        write_text(out / "words.txt", words_for(answer, inner.params))
    click.echo(f"\nIn {out}:")
    for name, what in LEAVES.items():
        click.echo(f"  {name:<16} {what}")
