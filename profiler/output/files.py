"""Files that are whole or not there: written beside, then renamed."""

import contextlib
import os
import tempfile
from collections.abc import Callable, Iterator
from pathlib import Path
from typing import Final

from profiler.errors import InputError

#: Endings of a figure's name.
FIGURE_SUFFIXES: Final = (".png", ".svg", ".pdf")
#: How much of a file's name its temporary twin repeats [characters]; our choice.
STEM_CHARACTERS: Final = 40
#: Rights of a new file before the user's mask: all may read and write [mode bits].
OPEN_TO_ALL: Final = 0o666


def check_target(path: Path) -> None:
    """Refuse, before any work, a file that cannot be written.

    Parameters
    ----------
    path : Path
        The file wanted; an existing one may be replaced.

    Raises
    ------
    InputError
        If the name is a folder or a device, its folder is missing or nothing can be
        written there.
    """
    with _plainly(path):
        if path.is_dir():
            msg = f'"{path}" is a folder; give the name of a file in it.'
            raise InputError(msg)
        if path.exists() and not path.is_file():
            msg = f'"{path}" is a device, not a file; give the name of a file.'
            raise InputError(msg)
        if not path.parent.is_dir():
            msg = f'Folder "{path.parent}" for "{path.name}" does not exist. '
            msg += "Make it first."
            raise InputError(msg)
    with _beside(path):
        pass


@contextlib.contextmanager
def _plainly(path: Path) -> Iterator[None]:
    """Say in one sentence what the disk refuses."""
    try:
        yield
    except OSError as error:
        msg = f'"{path}" cannot be written ({error.strerror or error}).'
        raise InputError(msg) from error


def write_whole(path: Path, write: Callable[[Path], None]) -> None:
    """Let ``write`` make a file beside ``path``, then put it in place at once.

    Parameters
    ----------
    path : Path
        The file wanted; a link stays and the file it points to is replaced.
    write : callable
        Takes the name of a temporary file with the same ending and fills it.

    Raises
    ------
    InputError
        If the file cannot be written; nothing is left behind.
    """
    check_target(path)
    with _beside(path) as beside:
        write(beside)
        beside.chmod(OPEN_TO_ALL & ~_umask())
        beside.replace(os.path.realpath(path))


@contextlib.contextmanager
def _beside(path: Path) -> Iterator[Path]:
    """A new empty file in the same folder with the same ending; gone afterwards."""
    real = Path(os.path.realpath(path))
    with _plainly(path):
        handle, name = tempfile.mkstemp(
            prefix=f".{real.stem[:STEM_CHARACTERS]}-",
            suffix=real.suffix,
            dir=real.parent,
        )
        os.close(handle)
        beside = Path(name)
        try:
            yield beside
        finally:
            beside.unlink(missing_ok=True)


def write_text(path: Path, text: str) -> None:
    """Write UTF-8 text to a file, whole or not at all.

    Raises
    ------
    InputError
        If the file cannot be written.
    """
    write_whole(path, lambda beside: _put(beside, text))


def _put(beside: Path, text: str) -> None:
    beside.write_bytes(text.encode("utf-8"))


def _umask() -> int:
    mask = os.umask(0)
    os.umask(mask)
    return mask
