"""``overbrow profile``: the main job, one question answered."""

from collections.abc import Callable
from pathlib import Path
from typing import Any, Final

import click

from profiler.cli.outside import check_ends
from profiler.cli.question import (
    Options,
    Places,
    air_from,
    assumed_heights,
    box_text,
    check_heights,
    check_targets,
    own_hill_from,
    spare_elevation_files,
    terrain_from,
)
from profiler.cli.sections import SectionCommand, SectionOption
from profiler.cli.types import HEIGHT, KE, KR, LENGTH, N_GRADIENT
from profiler.constants import VOID_BELOW_M
from profiler.errors import InputError
from profiler.model import Verdict
from profiler.output.answer import Answer, look
from profiler.output.exchange import geojson_text
from profiler.output.files import write_text
from profiler.output.record import record_text
from profiler.output.words import words

#: Exit status by verdict with --exit-code; the contract of docs/commands.md.
EXIT_BY_VERDICT: Final = {
    Verdict.CLEAR: 0,
    Verdict.BLOCKED: 4,
    Verdict.UNDETERMINED: 5,
}

EXAMPLES: Final = {
    "Question": '--from "48 12 33.1 N, 21 30 12.4 W" --from-height 20m --to Skarvel '
    "--sites sites.csv",
    "Ground": "--dem tiles --dem-kind bare --interpolation highest",
    "Air": "--kr 0.17",
    "Results": "--figure profile.png --json profile.json --exit-code",
}

Decorator = Callable[[Callable[..., None]], Callable[..., None]]


def _option(section: str, *names: str, **settings: Any) -> Decorator:
    return click.option(*names, cls=SectionOption, section=section, **settings)


def _stacked(decorators: list[Decorator]) -> Decorator:
    def decorate(function: Callable[..., None]) -> Callable[..., None]:
        for decorator in reversed(decorators):
            function = decorator(function)
        return function

    return decorate


def _end_options(role: str, who: str, default: str) -> list[Decorator]:
    return [
        _option(
            "Question",
            f"--{role}",
            f"{role}_point",
            metavar="POINT",
            required=True,
            help=f'{who}: "57.1,-4.2" (latitude,longitude), "48 12 33.1 N, 21 30 12.4 '
            'W", EASTING,NORTHING with --crs, or a name from --sites.',
        ),
        _option(
            "Question",
            f"--{role}-height",
            type=HEIGHT,
            metavar="HEIGHT",
            help=f"Height above ground, such as 20m or 65ft.  [default: {default}]",
        ),
        _option(
            "Question",
            f"--{role}-amsl",
            type=HEIGHT,
            metavar="HEIGHT",
            help="Height above sea level instead, in the DEM's datum.",
        ),
        _option(
            "Question",
            f"--{role}-ground",
            type=HEIGHT,
            metavar="HEIGHT",
            help="Surveyed elevation of the ground there, instead of the DEM's.",
        ),
    ]


question_options = _stacked(
    [
        *_end_options("from", "The eye", "1.7m"),
        *_end_options("to", "The target", "0, bare ground"),
        _option(
            "Question",
            "--crs",
            is_eager=True,
            metavar="EPSG:n|dem",
            help="Points are easting,northing in this CRS, or in the DEM's own.",
        ),
        _option(
            "Question",
            "--sites",
            metavar="FILE",
            help="Named places: CSV, GeoJSON, GeoPackage, GPX waypoints or KML.",
        ),
    ]
)

ground_options = _stacked(
    [
        _option(
            "Ground",
            "--dem",
            multiple=True,
            metavar="FILE|FOLDER|GLOB",
            help="Elevation files; repeatable. The finest that has a value wins.",
        ),
        _option(
            "Ground",
            "--dem-kind",
            type=click.Choice(["bare", "surface"]),
            help="What the heights show: bare ground, or tree tops and roofs too.  "
            "[default: not stated]",
        ),
        _option(
            "Ground",
            "--dem-unit",
            type=click.Choice(["m", "ft", "us-ft"]),
            help="Unit of the heights.  [default: as the file states, else m]",
        ),
        _option(
            "Ground",
            "--dem-crs",
            metavar="EPSG:n",
            help="CRS of files that state none.",
        ),
        _option(
            "Ground",
            "--interpolation",
            type=click.Choice(["bilinear", "highest", "nearest"]),
            default="bilinear",
            show_default=True,
            help="Ground between posts; highest, of the four around, is cautious.",
        ),
        _option(
            "Ground",
            "--ignore-near",
            type=LENGTH,
            default="0m",
            show_default=True,
            metavar="LENGTH",
            help="Ground this near to either end does not count, such as 50m.",
        ),
        _option(
            "Ground",
            "--own-hill",
            type=LENGTH,
            metavar="LENGTH",
            help="A bare summit's own hill: ground this near to it cannot hide it; 0 "
            "for none.  [default: the larger of 100m and 3 cells]",
        ),
        _option(
            "Ground",
            "--void-below",
            type=HEIGHT,
            default=f"{VOID_BELOW_M:.0f}m",
            show_default=True,
            metavar="HEIGHT",
            help="No unknown ground stands higher: a void that only higher ground "
            "could block is clear.",
        ),
        _option(
            "Ground",
            "--sea-level",
            type=HEIGHT,
            metavar="HEIGHT",
            help="Voids are water at this height.  [default: voids stay voids]",
        ),
        _option(
            "Ground",
            "--hash",
            "hash_all",
            is_flag=True,
            help="Hash files above 200 MB too.",
        ),
    ]
)

air_options = _stacked(
    [
        _option(
            "Air",
            "--ke",
            type=KE,
            metavar="RATIO",
            help="Effective earth radius factor, such as 4/3; above 0.",
        ),
        _option(
            "Air",
            "--kr",
            type=KR,
            metavar="RATIO",
            help="Coefficient of refraction.  [default: 0.13, light]",
        ),
        _option(
            "Air",
            "--n-gradient",
            type=N_GRADIENT,
            metavar="N/KM",
            help="Refractivity gradient, such as -39 (N units a kilometre).",
        ),
        _option(
            "Air", "--no-refraction", is_flag=True, help="Straight rays: kr 0, ke 1."
        ),
    ]
)

result_options = _stacked(
    [
        _option(
            "Results",
            "--json",
            "json_file",
            metavar="FILE|-",
            help="The record as JSON; - prints it alone instead of the words.",
        ),
        _option(
            "Results",
            "--figure",
            metavar="FILE",
            help="The annotated profile: .png, .svg or .pdf.",
        ),
        _option(
            "Results",
            "--geojson",
            metavar="FILE",
            help="Path and places as GeoJSON.",
        ),
        _option(
            "Results",
            "--draw",
            type=click.Choice(["curved-sea", "level-sea"]),
            default="curved-sea",
            show_default=True,
            help="A straight line over a curved sea, or a bent one over a level sea.",
        ),
        _option(
            "Results",
            "--show-in",
            type=click.Choice(["m", "ft"]),
            default="m",
            show_default=True,
            help="Unit of heights in words and figure; the record stays in metres.",
        ),
        _option(
            "Results",
            "--exit-code",
            is_flag=True,
            help="Exit 0 if clear, 4 if blocked, 5 if undetermined.",
        ),
    ]
)


@click.command("profile", cls=SectionCommand, examples=EXAMPLES)
@question_options
@ground_options
@air_options
@result_options
@click.pass_context
def profile_command(ctx: click.Context, /, **options: Any) -> None:
    """Say whether one point sees another, by how much and what decides it."""
    answer = answer_to(options)
    tell(answer, options)
    if options["exit_code"]:
        ctx.exit(EXIT_BY_VERDICT[answer.verdict])


def answer_to(options: Options) -> Answer:
    """The answer to the question that the options ask.

    Raises
    ------
    click.UsageError
        If options contradict each other or no elevation file is named.
    ProfilerError
        If an input or an elevation file cannot be used.
    """
    check_heights(options)
    air, own_hill = air_from(options), own_hill_from(options)
    check_targets(options)
    check_figure_name(options["figure"])
    places = Places(options)
    if not options["dem"]:
        msg = (
            "No elevation file. Give one with --dem; it must cover "
            f"{box_text(places)} (docs/elevation-data.md says where data comes from)."
        )
        raise click.UsageError(msg)
    terrain = terrain_from(options)
    spare_elevation_files(options, terrain)
    eye, target = (places.station(role, terrain) for role in ("from", "to"))
    check_ends(terrain, eye, target, in_degrees=options["crs"] is None)
    return look(
        terrain,
        eye,
        target,
        air=air,
        own_hill_m=own_hill,
        ignore_near_m=options["ignore_near"],
        void_below_m=options["void_below"],
    )


def check_figure_name(name: str | None) -> None:
    """Refuse a figure's ending before any work is done.

    Raises
    ------
    InputError
        If it is none of .png, .svg, .pdf.
    """
    if name is not None and Path(name).suffix.lower() not in (".png", ".svg", ".pdf"):
        msg = f'"{name}" must end in .png, .svg or .pdf.'
        raise InputError(msg)


def words_for(answer: Answer, options: Options) -> str:
    """The answer in plain words, in the unit asked for."""
    assumed = assumed_heights(options)
    return words(answer, show_in=options["show_in"], assumed=assumed)


def tell(answer: Answer, options: Options) -> None:
    """Print the answer, write what was asked for, and name it on stderr."""
    for note in answer.warnings:
        click.echo(f"Warning: {note.text}", err=True)
    if options["json_file"] == "-":
        # bytes: the same as in a file, whatever the terminal's encoding
        click.echo(record_text(answer).encode(), nl=False)
    else:
        click.echo(words_for(answer, options), nl=False)
    if options["json_file"] not in (None, "-"):
        _wrote(options["json_file"], lambda p: write_text(p, record_text(answer)))
    if options["geojson"] is not None:
        _wrote(options["geojson"], lambda p: write_text(p, geojson_text(answer)))
    if options["figure"] is not None:
        from profiler.output.figure import save_figure  # matplotlib: 0.6 s

        figure = answer.figure(draw=options["draw"], show_in=options["show_in"])
        _wrote(options["figure"], lambda p: save_figure(figure, p))
    elif options["json_file"] is None:
        click.echo("Next: add --figure profile.png to see it drawn.", err=True)


def _wrote(name: str, write: Callable[[Path], None]) -> None:
    write(Path(name))
    click.echo(f"Wrote {name}", err=True)
