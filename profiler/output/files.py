"""Files that are whole or not there: written beside, then renamed."""

import os
import tempfile
from collections.abc import Callable
from pathlib import Path

from profiler.errors import InputError


def check_target(path: Path) -> None:
    """Refuse, before any work, a file that cannot be written.

    Raises
    ------
    InputError
        If the name is a folder, its folder is missing or is not writable.
    """
    if path.is_dir():
        msg = f'"{path}" is a folder; give the name of a file in it.'
        raise InputError(msg)
    folder = path.parent
    if not folder.is_dir():
        msg = f'Folder "{folder}" for "{path.name}" does not exist. Make it first.'
        raise InputError(msg)
    if not os.access(folder, os.W_OK):
        msg = (
            f'Folder "{folder}" cannot be written to. Choose another for "{path.name}".'
        )
        raise InputError(msg)


def write_whole(path: Path, write: Callable[[Path], None]) -> None:
    """Let ``write`` make a file beside ``path``, then put it in place at once.

    Parameters
    ----------
    path : Path
        The file wanted.
    write : callable
        Takes the name of a temporary file with the same ending and fills it.

    Raises
    ------
    InputError
        If the file cannot be written; nothing is left behind.
    """
    check_target(path)
    try:
        handle, name = tempfile.mkstemp(
            prefix=f".{path.stem}-", suffix=path.suffix, dir=path.parent
        )
        os.close(handle)
        beside = Path(name)
        try:
            write(beside)
            beside.chmod(0o666 & ~_umask())
            beside.replace(path)
        finally:
            beside.unlink(missing_ok=True)
    except OSError as error:
        msg = f'"{path}" cannot be written ({error.strerror or error}).'
        raise InputError(msg) from error


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
