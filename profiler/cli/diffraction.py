"""``overbrow diffraction``: what the ground between two antennas costs."""

from typing import Any, Final

import click

from profiler.cli.options import (
    air_options,
    ground_options,
    option,
    question_options,
    stacked,
)
from profiler.cli.profile import path_answer, print_answer
from profiler.cli.question import air_from, check_heights, check_radio_heights
from profiler.cli.sections import SectionCommand
from profiler.cli.types import FREQUENCY, NUMBER
from profiler.output.record import json_text

EXAMPLES: Final = {
    "Question": "--from Skarvel --from-height 20m --to Quillet --to-height 30m",
    "Radio": "--frequency 868MHz --polarization vertical --sea-share 0.4",
}

loss_options = stacked(
    [
        option(
            "Radio",
            "--frequency",
            type=FREQUENCY,
            required=True,
            metavar="FREQUENCY",
            help="Frequency with its unit, such as 7.5GHz; 10 MHz to 300 GHz.",
        ),
        option(
            "Radio",
            "--polarization",
            type=click.Choice(["horizontal", "vertical"]),
            default="horizontal",
            show_default=True,
            help="Polarization of the wave; matters over smooth ground.",
        ),
        option(
            "Radio",
            "--sea-share",
            type=NUMBER,
            default="0",
            show_default=True,
            metavar="SHARE",
            help="Share of the path over sea, 0 to 1.",
        ),
        option(
            "Results",
            "--json",
            "json_file",
            metavar="FILE|-",
            help="The losses as JSON; - prints them alone instead of the words.",
        ),
    ]
)


@click.command("diffraction", cls=SectionCommand, examples=EXAMPLES)
@question_options
@ground_options
@air_options
@loss_options
def diffraction_command(**options: Any) -> None:
    """Tell the diffraction loss by ground, by every method that applies; no coverage.

    No link budget, rain or multipath statistics: geometry and diffraction only.
    """
    # the radio room and its scipy, which help does not need
    from profiler.output.loss import loss_record, loss_words
    from profiler.radio.losses import path_losses

    check_heights(options)
    check_radio_heights(options)
    line = path_answer(options, air_from(options))
    losses = path_losses(
        line,
        frequency_hz=options["frequency"],
        sea_fraction=options["sea_share"],
        polarization=options["polarization"],
    )
    for note in line.warnings:
        click.echo(f"Warning: {note.text}", err=True)
    values = loss_record(losses, line)
    print_answer(
        options["json_file"],
        record=lambda: json_text(values),
        told=lambda: loss_words(values),
    )
