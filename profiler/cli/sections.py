"""Commands whose help stands in named sections, with errors that teach."""

import re
from typing import Any

import click

from profiler.errors import ProfilerError

#: Exit status of bad input or a bad elevation file; the contract of docs/commands.md.
EXIT_BAD_INPUT = 3
#: Exit status when the reader of the output went away; as a shell reports SIGPIPE.
EXIT_NO_READER = 141


class SectionOption(click.Option):
    """An option that knows the section of the help it stands in."""

    def __init__(self, *args: Any, section: str = "Other", **kwargs: Any) -> None:
        """Take the section besides what click takes."""
        self.section = section
        super().__init__(*args, **kwargs)


class SectionCommand(click.Command):
    """A command whose options are listed by section, each with an example.

    ``examples`` maps a section's name to one line that shows its use.
    """

    def __init__(
        self, *args: Any, examples: dict[str, str] | None = None, **kwargs: Any
    ) -> None:
        """Take the examples besides what click takes."""
        self.examples = examples or {}
        super().__init__(*args, **kwargs)

    def format_options(
        self, ctx: click.Context, formatter: click.HelpFormatter
    ) -> None:
        """Write the options section by section."""
        sections: dict[str, list[tuple[str, str]]] = {}
        for param in self.get_params(ctx):
            row = param.get_help_record(ctx)
            if row is not None:
                name = getattr(param, "section", "Other")
                sections.setdefault(name, []).append(row)
        for name, rows in sections.items():
            with formatter.section(name):
                formatter.write_dl(rows)
                if name in self.examples:
                    formatter.write_paragraph()
                    formatter.write_text(f"Example: {self.examples[name]}")

    def parse_args(self, ctx: click.Context, args: list[str]) -> list[str]:
        """Parse, and say what to do where click only says what is wrong."""
        for arg in args:
            if re.fullmatch(r"--?k(=.*)?", arg):
                from profiler.cli.quantities import bare_k_message

                raise click.UsageError(bare_k_message(), ctx)
        try:
            return super().parse_args(ctx, args)
        except click.NoSuchOption as error:
            if re.match(r"-[\d.]", error.option_name):
                msg = 'Put the pair in quotes: --from "57.1,-4.2".'
                raise click.UsageError(msg, ctx) from error
            raise
        except click.UsageError as error:
            if "unexpected extra argument" in error.message:
                raise click.UsageError(_extra_arguments(args, error), ctx) from error
            raise

    def invoke(self, ctx: click.Context) -> Any:
        """Run; an error of ours becomes one sentence and exit status 3."""
        try:
            return super().invoke(ctx)
        except ProfilerError as error:
            click.echo(f"Error: {error}", err=True)
            ctx.exit(EXIT_BAD_INPUT)


def _extra_arguments(args: list[str], error: click.UsageError) -> str:
    """What words that belong to no option probably were."""
    extra = re.findall(r"[^\s()]+", error.message.split("(", 1)[-1])
    if any(re.fullmatch(r"[-+]?[\d.,]+[NSEW]?,?", word) for word in extra):
        return 'Put the pair in quotes: --from "57.1,-4.2".'
    if "--dem" in args and extra:
        folder = extra[0].rpartition("/")[0] or "tiles"
        return f"--dem takes one name each time; give the folder: --dem {folder}."
    return error.message
