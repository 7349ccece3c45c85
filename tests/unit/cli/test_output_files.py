"""--output writes a file whole or not at all."""

import os
import stat
from pathlib import Path

import pytest
from unit.cli.made import NETWORK, RESULT, Library, Made, Process

from equiv.cli.boundary import run
from equiv.rendering.terminal import draw


def solve(*words: str, **about: object) -> tuple[int, Process]:
    process = Process(**about)
    return run(["solve", "f", *words], process.environment), process


def test_a_file_is_written_and_nothing_is_printed(library: Library, tmp_path: Path):
    file = tmp_path / "out.txt"
    status, process = solve("--output", str(file), width=20, encoding="ascii")
    assert status == 0
    assert process.printed == process.told == ""
    assert file.read_text("utf-8") == draw(RESULT.tables())
    assert list(tmp_path.iterdir()) == [file]
    umask = os.umask(0)
    os.umask(umask)
    assert stat.S_IMODE(file.stat().st_mode) == 0o666 & ~umask


def test_an_existing_file_is_not_overwritten_and_no_work_is_done(library: Library, tmp_path: Path):
    file = tmp_path / "out.csv"
    file.write_text("precious")
    status, process = solve("--as", "csv", "--output", str(file))
    assert status == 6
    assert process.told == (
        "error[cannot-write]: out.csv exists already\n    hint: --force overwrites it\n"
    )
    assert file.read_text() == "precious"
    assert "solve" not in library.calls


def test_force_overwrites(library: Library, tmp_path: Path):
    file = tmp_path / "out.json"
    file.write_text("old")
    status, _ = solve("--json", "--output", str(file), "--force")
    assert status == 0
    assert file.read_text().startswith("{")
    assert list(tmp_path.iterdir()) == [file]


def test_force_writes_through_a_link(library: Library, tmp_path: Path):
    file, link = tmp_path / "file", tmp_path / "link"
    file.write_text("old")
    link.symlink_to(file)
    assert solve("--output", str(link), "--force")[0] == 0
    assert link.is_symlink()
    assert file.read_text().startswith("Made")


@pytest.mark.parametrize("name", ["missing/out.txt", ".", "x" * 300, "/dev/null"])
def test_what_cannot_be_written_is_status_6(library: Library, tmp_path: Path, name: str):
    status, process = solve("--output", str(tmp_path / name), "--force")
    assert status == 6
    assert process.told.startswith("error[cannot-write]: ")
    assert Path("/dev/null").is_char_device()
    assert list(tmp_path.iterdir()) == []


def test_an_error_while_writing_leaves_nothing(
    library: Library, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
):
    def full(descriptor: int) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    file = tmp_path / "out.txt"
    file.write_text("old")
    status, process = solve("--output", str(file), "--force")
    assert status == 6
    assert "out.txt cannot be written: No space left on device" in process.told
    assert file.read_text() == "old"
    assert list(tmp_path.iterdir()) == [file]


def test_a_file_made_meanwhile_is_kept(
    library: Library, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
):
    file = tmp_path / "out.txt"
    monkeypatch.setattr(os, "fsync", lambda descriptor: file.write_text("another's"))
    assert solve("--output", str(file))[0] == 6
    assert file.read_text() == "another's"
    assert list(tmp_path.iterdir()) == [file]


def test_an_error_leaves_no_file(library: Library, tmp_path: Path):
    library.answer = ZeroDivisionError()
    assert solve("--output", str(tmp_path / "out.txt"))[0] == 70
    assert list(tmp_path.iterdir()) == []


def test_a_text_goes_to_a_file_byte_for_byte(library: Library, tmp_path: Path):
    library.answer = Made(NETWORK, text="é\t\n")
    file = tmp_path / "sub.equiv"
    assert solve("--output", str(file), out_is_terminal=True)[0] == 0
    assert file.read_bytes() == "é\t\n".encode()
