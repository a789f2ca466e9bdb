"""Commands whose help stands in named sections, with errors that teach."""

import re
from typing import Any

import click

from profiler.cli.quantities import bare_k_message

#: What a shell that cut a pair at its blank calls for.
QUOTES = 'Put the pair in quotes: --from "57.1,-4.2".'


class SectionOption(click.Option):
    """An option that knows the section of the help it stands in."""

    def __init__(
        self, *args: Any, section: str = "Other", once: bool = False, **kwargs: Any
    ) -> None:
        """Take, besides what click takes, the section and whether it stands once."""
        self.section = section
        self.once = once
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
        given = list(args)  # click empties the list as it reads
        for arg in given:
            if re.fullmatch(r"--?k(=.*)?", arg):
                raise click.UsageError(bare_k_message(), ctx)
        self._refuse_repeats(ctx, args)
        try:
            return super().parse_args(ctx, args)
        except click.NoSuchOption as error:
            if re.match(r"-[\d.]", error.option_name):
                raise click.UsageError(QUOTES, ctx) from error
            raise
        except click.UsageError as error:
            if "unexpected extra argument" in error.message:
                raise click.UsageError(_extra_arguments(given, error), ctx) from error
            raise

    def _refuse_repeats(self, ctx: click.Context, args: list[str]) -> None:
        """Refuse what may stand only once: of two, click would keep the last."""
        for param in self.get_params(ctx):
            if not (isinstance(param, SectionOption) and param.once):
                continue
            name = param.opts[0]
            if sum(arg == name or arg.startswith(f"{name}=") for arg in args) > 1:
                msg = f"{name} stands twice. Give one; ask again for another."
                raise click.UsageError(msg, ctx)


def _extra_arguments(given: list[str], error: click.UsageError) -> str:
    """What words that belong to no option probably were."""
    extra = error.message.partition("(")[2].rstrip(")").split()
    if not extra:
        return "An empty word stands among the options. Leave it out, or quote a name."
    if any(re.fullmatch(r"[-+]?[\d.,°'\"]+[NSEWnsew]?,?", word) for word in extra):
        return QUOTES
    option, words = _option_before(extra[0], given)
    if option == "--dem":
        folder = extra[0].rpartition("/")[0] or "."
        return f"--dem takes one name each time; give the folder: --dem {folder}."
    if words:
        return f'Put the words in quotes: {option} "{" ".join(words)}".'
    return f"{error.message}: it belongs to no option."


def _option_before(word: str, given: list[str]) -> tuple[str, list[str]]:
    """The last option before a word, and all words that follow that option."""
    for at in range(given.index(word) if word in given else 0, -1, -1):
        option, equals, value = given[at].partition("=")
        if option.startswith("--"):
            words = [value] if equals else []
            for follower in given[at + 1 :]:
                if follower.startswith("--"):
                    break
                words.append(follower)
            return option, words
    return "", []
