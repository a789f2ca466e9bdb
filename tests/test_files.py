"""A result file is whole or it is not there."""

import os
import signal
import subprocess
import sys
import threading
from pathlib import Path

import pytest

from profiler.errors import InputError
from profiler.output.files import check_target, write_text, write_whole
from tests.asking import ROOT

#: Writes half a file over an old one, says so and waits to be killed.
HALF_WRITER = """
import sys, time
from pathlib import Path
from profiler.output.files import write_whole

def write(beside):
    beside.write_text("half of the n")
    print("writing", flush=True)
    time.sleep(60)

write_whole(Path(sys.argv[1]), write)
"""


def names_in(folder: Path) -> list[str]:
    return sorted(p.name for p in folder.iterdir())


def test_a_text_is_written_as_utf_8_and_nothing_else_is_left(tmp_path: Path) -> None:
    write_text(tmp_path / "words.txt", "48° 12′\n")
    assert (tmp_path / "words.txt").read_bytes() == "48° 12′\n".encode()
    assert names_in(tmp_path) == ["words.txt"]


def test_an_old_file_is_replaced(tmp_path: Path) -> None:
    path = tmp_path / "words.txt"
    path.write_text("old and longer")
    write_text(path, "new")
    assert path.read_text() == "new"


def test_the_writer_gets_a_name_beside_with_the_same_ending(tmp_path: Path) -> None:
    seen: list[Path] = []

    def write(beside: Path) -> None:
        seen.append(beside)
        beside.write_text("x")

    write_whole(tmp_path / "profile.svg", write)
    assert seen[0].parent == tmp_path
    assert seen[0].suffix == ".svg"


@pytest.mark.parametrize("error", [RuntimeError, KeyboardInterrupt])
def test_a_writer_that_fails_leaves_the_old_file_whole(
    tmp_path: Path, error: type[BaseException]
) -> None:
    path = tmp_path / "words.txt"
    path.write_text("old")

    def write(beside: Path) -> None:
        beside.write_text("half")
        raise error

    with pytest.raises(error):
        write_whole(path, write)
    assert path.read_text() == "old"
    assert names_in(tmp_path) == ["words.txt"]


def test_a_disk_that_fills_up_is_told_in_one_sentence(tmp_path: Path) -> None:
    def write(beside: Path) -> None:
        beside.write_text("half")
        raise OSError(28, "No space left on device")

    with pytest.raises(InputError, match=r"cannot be written \(No space left"):
        write_whole(tmp_path / "words.txt", write)
    assert names_in(tmp_path) == []


def test_killing_the_writer_leaves_the_old_file_whole(tmp_path: Path) -> None:
    path = tmp_path / "words.txt"
    path.write_text("old")
    with subprocess.Popen(
        [sys.executable, "-c", HALF_WRITER, str(path)],
        stdout=subprocess.PIPE,
        env={**os.environ, "PYTHONPATH": str(ROOT)},
    ) as writer:
        assert writer.stdout is not None
        assert writer.stdout.readline() == b"writing\n"
        writer.kill()
    assert writer.returncode == -signal.SIGKILL
    assert path.read_text() == "old"


def test_a_reader_never_sees_half_a_file(tmp_path: Path) -> None:
    path = tmp_path / "words.txt"
    texts = ["a" * 200_000, "b" * 200_000]
    write_text(path, texts[0])
    seen: set[str] = set()
    stop = threading.Event()

    def read() -> None:
        while not stop.is_set():
            seen.add(path.read_text())

    reader = threading.Thread(target=read)
    reader.start()
    for turn in range(200):
        write_text(path, texts[turn % 2])
    stop.set()
    reader.join()
    assert seen <= set(texts)
    assert seen


def test_a_link_stays_a_link_and_its_file_is_replaced(tmp_path: Path) -> None:
    (tmp_path / "store").mkdir()
    real = tmp_path / "store" / "real.txt"
    real.write_text("old")
    link = tmp_path / "link.txt"
    link.symlink_to(real)
    write_text(link, "new")
    assert link.is_symlink()
    assert real.read_text() == "new"


def test_a_folder_is_refused_as_a_file(tmp_path: Path) -> None:
    with pytest.raises(InputError, match="is a folder"):
        check_target(tmp_path)


def test_a_missing_folder_is_refused(tmp_path: Path) -> None:
    with pytest.raises(InputError, match="does not exist"):
        check_target(tmp_path / "none" / "words.txt")


def test_a_device_is_refused_and_left_alone() -> None:
    before = Path(os.devnull).stat()
    with pytest.raises(InputError, match="is a device"):
        write_text(Path(os.devnull), "x")
    assert Path(os.devnull).stat().st_rdev == before.st_rdev


def test_a_folder_that_takes_no_files_is_refused_before_any_work() -> None:
    with pytest.raises(InputError, match="cannot be written"):
        check_target(Path("/proc/words.txt"))


def test_a_name_as_long_as_the_disk_allows_is_written(tmp_path: Path) -> None:
    path = tmp_path / ("n" * 251 + ".txt")
    write_text(path, "x")
    assert names_in(tmp_path) == [path.name]


def test_a_longer_name_is_refused(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"cannot be written .File name too long"):
        write_text(tmp_path / ("n" * 252 + ".txt"), "x")
    assert names_in(tmp_path) == []


def test_a_new_file_has_the_rights_that_the_mask_leaves(tmp_path: Path) -> None:
    mask = os.umask(0o027)
    try:
        write_text(tmp_path / "words.txt", "x")
    finally:
        os.umask(mask)
    assert (tmp_path / "words.txt").stat().st_mode & 0o777 == 0o640
