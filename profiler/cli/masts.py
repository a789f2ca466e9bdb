"""``overbrow masts``: antenna heights that meet a clearance rule."""

from typing import Any, Final

import click

from profiler.cli.options import (
    ground_options,
    option,
    question_options,
    radio_options,
    stacked,
)
from profiler.cli.profile import path_answer, print_answer, wrote
from profiler.cli.question import Options, assumed_heights, check_heights, rule_from
from profiler.cli.sections import SectionCommand
from profiler.cli.types import HEIGHT, NUMBER
from profiler.constants import KE_RADIO
from profiler.model import Air, EndReport
from profiler.output.record import json_text

EXAMPLES: Final = {
    "Question": "--from Skarvel --to Quillet --sites sites.csv --to-height 30m",
    "Radio": '--frequency 7.5GHz --criterion "ke=4/3 f1=1" --criterion "ke=2/3 f1=0.3"',
    "Masts": "--section 3m --from-most 60m --to-cost 1.6",
}


def _end_options(role: str) -> list[Any]:
    return [
        option(
            "Masts",
            f"--{role}-least",
            type=HEIGHT,
            default="0m",
            show_default=True,
            metavar="HEIGHT",
            help=f"Lowest antenna height allowed at --{role}.",
        ),
        option(
            "Masts",
            f"--{role}-most",
            type=HEIGHT,
            default="1000m",
            show_default=True,
            metavar="HEIGHT",
            help=f"Highest antenna height allowed at --{role}.",
        ),
        option(
            "Masts",
            f"--{role}-cost",
            type=NUMBER,
            default="1",
            show_default=True,
            metavar="COST",
            help=f"Cost of a metre of mast at --{role}, in any unit.",
        ),
    ]


mast_options = stacked(
    [
        option(
            "Masts",
            "--section",
            type=HEIGHT,
            default="0.01m",
            show_default=True,
            metavar="LENGTH",
            help="Masts come in multiples of this, such as 3m.",
        ),
        *_end_options("from"),
        *_end_options("to"),
    ]
)

result_options = stacked(
    [
        option(
            "Results",
            "--json",
            "json_file",
            metavar="FILE|-",
            help="The masts' record as JSON; - prints it alone instead of the words.",
        ),
        option(
            "Results",
            "--figure",
            metavar="FILE",
            help="The trade-off between the two heights: .png, .svg or .pdf.",
        ),
        option(
            "Results",
            "--show-in",
            type=click.Choice(["m", "ft"]),
            default="m",
            show_default=True,
            help="Unit of heights in the words.",
        ),
    ]
)


@click.command("masts", cls=SectionCommand, examples=EXAMPLES)
@question_options
@ground_options
@radio_options
@mast_options
@result_options
def masts_command(**options: Any) -> None:
    """Name antenna heights that meet every criterion of a clearance rule.

    A height given with --from-height or --to-height is kept, and the least one at the
    other end is named; equal heights, the cheapest pair and the whole trade-off always.
    """
    # the radio room and its scipy, which help does not need
    from profiler.output.masts_record import masts_record
    from profiler.output.masts_words import masts_words
    from profiler.radio.assess import rule_warnings
    from profiler.radio.plan import antenna_heights

    check_heights(options)
    rule = rule_from(options)
    if options["frequency"] is None or rule is None:
        msg = "Antenna heights need --frequency and a rule: --criterion or --rule-set."
        raise click.UsageError(msg)
    line = path_answer(options, Air(ke=KE_RADIO))
    near, far = _limits(options, "from"), _limits(options, "to")
    plan, made = antenna_heights(
        line,
        frequency_hz=options["frequency"],
        rule=rule,
        near=near,
        far=far,
        given_from_agl_m=_given(line.from_, "from", options),
        given_to_agl_m=_given(line.to, "to", options),
    )
    values = masts_record(plan, line, rule=made, frequency_hz=options["frequency"])
    for note in (*line.warnings, *rule_warnings(options["frequency"], made)):
        click.echo(f"Warning: {note.text}", err=True)
    print_answer(
        options["json_file"],
        record=lambda: json_text(values),
        told=lambda: masts_words(values, show_in=options["show_in"]),
    )
    if options["figure"] is not None:
        _draw(values, options)


def _given(end: EndReport, role: str, options: Options) -> float | None:
    """Height above ground of an end whose height was stated [m]."""
    return None if role in assumed_heights(options) else end.agl_m


def _limits(options: Options, role: str) -> Any:
    from profiler.radio.limits import MastLimits

    return MastLimits(
        least_m=options[f"{role}_least"],
        most_m=options[f"{role}_most"],
        section_m=options["section"],
        cost_per_m=options[f"{role}_cost"],
    )


def _draw(values: dict[str, Any], options: Options) -> None:
    from profiler.output.figure import save_figure  # matplotlib: 0.6 s
    from profiler.output.masts_figure import draw_masts

    figure = draw_masts(values, show_in=options["show_in"])
    wrote(options["figure"], lambda p: save_figure(figure, p))
