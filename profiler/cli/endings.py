"""How a run ends when it is cut short: one line, a plain status, no traceback."""

import contextlib
import os
import signal
import sys
import threading
from collections.abc import Iterator
from typing import Final

import click

from profiler.errors import ProfilerError

#: Exit status of bad input or a bad elevation file; the contract of docs/commands.md.
EXIT_BAD_INPUT: Final = 3
#: Exit status of a run that was asked to end; as a shell reports SIGTERM.
EXIT_ENDED: Final = 143
#: Exit status of a run stopped by Ctrl-C; as a shell reports SIGINT.
EXIT_STOPPED: Final = 130
#: Exit status when the reader of the output went away; as a shell reports SIGPIPE.
EXIT_NO_READER: Final = 141


@contextlib.contextmanager
def plain_endings() -> Iterator[None]:
    """Turn what cuts a run short into one line on stderr and an exit status.

    Raises
    ------
    click.exceptions.Exit
        With the status, for click to leave by.
    """
    # an end asked for from outside unwinds like any other: no file stays half written
    before = signal.signal(signal.SIGTERM, _end) if _in_main_thread() else None
    try:
        yield
    except ProfilerError as error:
        click.echo(f"Error: {error}", err=True)
        raise click.exceptions.Exit(EXIT_BAD_INPUT) from error
    except BrokenPipeError as error:
        silence()
        raise click.exceptions.Exit(EXIT_NO_READER) from error
    except (KeyboardInterrupt, click.Abort) as error:
        click.echo("Stopped; no half-written file is left.", err=True)
        raise click.exceptions.Exit(EXIT_STOPPED) from error
    except OSError as error:
        about = (
            f"{error.filename}: " if error.filename else "The answer cannot be told: "
        )
        click.echo(f"Error: {about}{error.strerror or error}.", err=True)
        raise click.exceptions.Exit(EXIT_BAD_INPUT) from error
    finally:
        if before is not None:
            signal.signal(signal.SIGTERM, before)


def _in_main_thread() -> bool:
    return threading.current_thread() is threading.main_thread()


def _end(number: int, frame: object) -> None:
    del number, frame
    raise SystemExit(EXIT_ENDED)


def silence() -> None:
    """Send what is still to be said nowhere: whoever read it has gone."""
    nowhere = os.open(os.devnull, os.O_WRONLY)
    for stream in (sys.stdout, sys.stderr):
        # a stream without a number of its own, as in a test, has no pipe either
        with contextlib.suppress(OSError, ValueError):
            os.dup2(nowhere, stream.fileno())
    os.close(nowhere)
