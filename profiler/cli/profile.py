"""``overbrow profile``: the main job, one question answered."""

import logging
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Any, Final

import click

from profiler.cli.options import (
    air_options,
    ground_options,
    question_options,
    radio_options,
    result_options,
)
from profiler.cli.outside import check_ends
from profiler.cli.question import (
    Options,
    Places,
    air_from,
    assumed_heights,
    box_text,
    check_heights,
    check_radio_heights,
    check_targets,
    cover_in,
    cover_of,
    own_hill_from,
    rule_from,
    spare_elevation_files,
    terrain_from,
)
from profiler.cli.sections import SectionCommand
from profiler.errors import InputError
from profiler.model import Air, Verdict
from profiler.output.answer import Answer, look, look_ahead
from profiler.output.check_points import check_points_text, writer_for
from profiler.output.exchange import geojson_text
from profiler.output.files import FIGURE_SUFFIXES, write_text
from profiler.output.record import record_text
from profiler.output.words import words
from profiler.terrain import Terrain

if TYPE_CHECKING:
    from profiler.radio.answer import Rule

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
    "Radio": '--frequency 7.5GHz --criterion "ke=4/3 f1=1" --criterion "ke=2/3 f1=0.3"',
    "Results": "--figure profile.png --json profile.json --exit-code",
}


@click.command("profile", cls=SectionCommand, examples=EXAMPLES)
@question_options
@ground_options
@air_options
@radio_options
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
    rule = rule_from(options)
    check_radio_heights(options)
    return path_answer(
        options, air_from(options), frequency_hz=options["frequency"], rule=rule
    )


def path_answer(
    options: Options,
    air: Air,
    *,
    frequency_hz: float | None = None,
    rule: "Rule | None" = None,
) -> Answer:
    """The answer for the path that the options name, in one state of the air.

    Parameters
    ----------
    options : mapping
        Of the command, by parameter name.
    air : Air
    frequency_hz : float or None [Hz]
        None: light.
    rule : RuleSet, sequence of Criterion, str, Path or None
        Clearance rule of a radio path.

    Raises
    ------
    click.UsageError
        If no elevation file is named.
    ProfilerError
        If an input or an elevation file cannot be used.
    """
    own_hill = own_hill_from(options)
    check_targets(options)
    check_figure_name(options.get("figure"))
    if options.get("check_points") is not None:
        writer_for(Path(options["check_points"]))
    places = Places(options)
    terrain = _terrain_for(options, places)
    eye, target = (places.station(role, terrain) for role in ("from", "to"))
    check_ends(terrain, eye, target, in_degrees=options["crs"] is None)
    cover = cover_of(options)
    years, growth_m = options["years"] or 0, options["growth"] or 0.0

    def answer_in(year: int) -> Answer:
        return look(
            terrain,
            eye,
            target,
            air=air,
            own_hill_m=own_hill,
            ignore_near_m=options["ignore_near"],
            void_below_m=options["void_below"],
            cover=cover_in(cover, growth_m, year),
            frequency_hz=frequency_hz,
            rule=rule,
        )

    if cover is None or not years:
        return answer_in(0)
    return look_ahead(answer_in, metres_per_year=growth_m, years=years)


def _terrain_for(options: Options, places: Places) -> Terrain:
    """The elevation model, refused when none is named or a result would replace it."""
    if not options["dem"]:
        msg = (
            "No elevation file. Give one with --dem; it must cover "
            f"{box_text(places)} (docs/elevation-data.md says where data comes from)."
        )
        raise click.UsageError(msg)
    terrain = terrain_from(options)
    spare_elevation_files(options, terrain)
    return terrain


def check_figure_name(name: str | None) -> None:
    """Refuse a figure's ending before any work is done.

    Raises
    ------
    InputError
        If it is none of .png, .svg, .pdf.
    """
    if name is not None and Path(name).suffix.lower() not in FIGURE_SUFFIXES:
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
    print_answer(
        options["json_file"],
        record=lambda: record_text(answer),
        told=lambda: words_for(answer, options),
    )
    if options["geojson"] is not None:
        wrote(options["geojson"], lambda p: write_text(p, geojson_text(answer)))
    if options["check_points"] is not None:
        name, unit = Path(options["check_points"]), options["show_in"]
        text = check_points_text(answer, name, show_in=unit)
        wrote(options["check_points"], lambda p: write_text(p, text))
    if options["figure"] is not None:
        # a plotting library without a cache of its own has nothing to tell a planner
        logging.getLogger("matplotlib").setLevel(logging.ERROR)
        from profiler.output.figure import save_figure  # matplotlib: 0.6 s

        figure = answer.figure(draw=options["draw"], show_in=options["show_in"])
        wrote(options["figure"], lambda p: save_figure(figure, p))
    elif options["json_file"] is None:
        click.echo(next_step(answer), err=True)


def print_answer(
    json_file: str | None, *, record: Callable[[], str], told: Callable[[], str]
) -> None:
    """Print the words, or the record alone; write the record where it was asked for.

    Parameters
    ----------
    json_file : str or None
        Of ``--json``; "-" prints the record instead of the words.
    record, told : callable
        Make the record's text and the words.
    """
    if json_file == "-":
        # bytes: the same as in a file, whatever the terminal's encoding
        click.echo(record().encode(), nl=False)
    else:
        click.echo(told(), nl=False)
    if json_file not in (None, "-"):
        wrote(json_file, lambda p: write_text(p, record()))


def next_step(answer: Answer) -> str:
    """What a person would do next."""
    radio = answer.radio
    if radio is not None and radio.result.state.value in ("blocked", "not_met"):
        return "Next: overbrow masts with the same options names heights that do."
    return "Next: add --figure profile.png to see it drawn."


def wrote(name: str, write: Callable[[Path], None]) -> None:
    """Write one result and name it on stderr."""
    write(Path(name))
    click.echo(f"Wrote {name}", err=True)
