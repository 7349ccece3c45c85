"""Whatever goes wrong ends in words, or JSON, and in its own exit status."""

import errno
import io
import json

import pytest
from unit.cli.made import Library, Process, Terminal

from equiv.cli import progress
from equiv.cli.boundary import run
from equiv.errors import (
    Diagnostic,
    DoesNotExistError,
    EquivError,
    FileAccessError,
    NetworkFileError,
    NoUniqueSolutionError,
    UsageError,
)


@pytest.mark.parametrize(
    ("error", "status"),
    [
        (UsageError, 2),
        (NetworkFileError, 3),
        (NoUniqueSolutionError, 4),
        (DoesNotExistError, 5),
        (FileAccessError, 6),
        (EquivError, 70),
    ],
)
def test_the_status_of_each_error(library: Library, error: type[EquivError], status: int):
    library.answer = error(Diagnostic("a-code", "what is wrong"))
    process = Process()
    assert run(["solve", "f"], process.environment) == status
    assert process.told == "error[a-code]: what is wrong\n"
    assert process.printed == ""


@pytest.mark.parametrize(
    "words",
    [
        [],
        ["nonsense"],
        ["solve"],
        ["solve", "f", "g"],
        ["solve", "f", "--nonsense"],
        ["solve", "f", "--digits", "18"],
        ["solve", "f", "--digits", "0"],
        ["solve", "f", "--digits", "few"],
        ["solve", "f", "--as", "html"],
        ["solve", "f", "--given", "nothing"],
        ["solve", "f", "--given", "=1"],
        ["solve", "f", "--given"],
        ["superpose", "f", "--check", "some"],
        ["superpose", "f", "--by", "kind"],
        ["isolate", "f"],
        ["--nonsense"],
    ],
)
def test_wrong_usage_is_status_2_in_words_and_in_json(library: Library, words: list[str]):
    process = Process()
    assert run(words, process.environment) == 2
    assert process.printed == ""
    assert process.told.startswith("error[")
    assert "\n    hint: " in process.told
    assert "Traceback" not in process.told
    process = Process()
    assert run([*words, "--json"], process.environment) == 2
    assert process.told == ""
    (error,) = json.loads(process.printed)["errors"]
    assert error["message"] and error["hint"]


@pytest.mark.parametrize("command", [["fault", "f"], ["isolate", "f"]])
def test_another_word_for_a_type_of_fault(library: Library, command: list[str]):
    process = Process()
    assert run([*command, "--type", "SLG"], process.environment) == 2
    assert process.told.endswith("hint: did you mean line-ground?\n")


def test_two_forms_are_one_too_many(library: Library):
    assert run(["solve", "f", "--json", "--as", "csv"], Process().environment) == 2
    assert run(["solve", "f", "--json", "--as", "json"], Process().environment) == 0


def test_hostile_words_are_harmless(library: Library):
    process = Process()
    assert run(["solve", "f", "--as", "\x1b[31m[red]"], process.environment) == 2
    assert "\x1b" not in process.told


@pytest.mark.parametrize(
    "error", [ZeroDivisionError("by\nzero"), MemoryError(), RecursionError("deep"), KeyError("x")]
)
def test_an_error_of_the_program_is_one_line(library: Library, error: Exception):
    library.answer = error
    process = Process()
    assert run(["solve", "f"], process.environment) == 70
    assert process.told.count("\n") == 1
    assert process.told.startswith("error[internal]: an error of the program itself: ")
    assert process.told.endswith("; run again with --traceback\n")
    process = Process()
    assert run(["solve", "f", "--json"], process.environment) == 70
    assert json.loads(process.printed)["errors"][0]["code"] == "internal"


def test_a_traceback_only_when_it_is_asked_for(library: Library):
    library.answer = ZeroDivisionError("\x1b[2J")
    process = Process()
    assert run(["solve", "f", "--traceback"], process.environment) == 70
    assert process.told.startswith("Traceback (most recent call last):\n")
    assert "\x1b" not in process.told


def test_a_result_that_is_not_json_is_an_error_of_the_program(
    library: Library, monkeypatch: pytest.MonkeyPatch
):
    monkeypatch.setattr(type(library.answer), "data", lambda self: {"x": float("nan")})
    process = Process()
    assert run(["solve", "f", "--json"], process.environment) == 70
    assert json.loads(process.printed)["errors"][0]["code"] == "internal"


def test_interrupted(library: Library):
    library.answer = KeyboardInterrupt()
    process = Process()
    assert run(["solve", "f"], process.environment) == 130
    assert process.told == "interrupted\n"


class Broken(io.StringIO):
    """A stream that cannot be written."""

    def __init__(self, error: OSError) -> None:
        super().__init__()
        self.error = error

    def write(self, text: str) -> int:
        raise self.error


def test_a_broken_pipe_is_silent(library: Library):
    process = Process(out=Broken(BrokenPipeError(errno.EPIPE, "Broken pipe")))
    assert run(["solve", "f"], process.environment) == 0
    assert process.told == ""


@pytest.mark.parametrize("form", [[], ["--json"]])
def test_a_full_disk_is_status_6_in_words(library: Library, form: list[str]):
    process = Process(out=Broken(OSError(errno.ENOSPC, "No space left on device")))
    assert run(["solve", "f", *form], process.environment) == 6
    assert "standard output cannot be written: No space left on device" in process.told


def test_nobody_reads_the_messages(library: Library):
    process = Process(err=Broken(BrokenPipeError(errno.EPIPE, "Broken pipe")))
    assert run(["nonsense"], process.environment) == 2


def working(words: list[str], library: Library, monkeypatch: pytest.MonkeyPatch, **about) -> str:
    """What is told while a long work goes on."""

    def solve(network, exact, progress):
        for done in range(4):
            progress("solving [red]\x1b[31m", done, 4)
        return library.answer

    monkeypatch.setattr(progress, "SECONDS_BEFORE", 0.0)
    monkeypatch.setattr("equiv.solve", solve)
    monkeypatch.setenv("TERM", "xterm")
    process = Process(err=Terminal(), **about)
    assert run(words, process.environment) == 0
    assert process.printed.startswith("Made")
    return process.told


def test_a_bar_on_a_terminal(library: Library, monkeypatch: pytest.MonkeyPatch):
    told = working(["solve", "f"], library, monkeypatch, err_is_terminal=True)
    assert "solving [red]\\x1b[31m" in told
    assert "\x1b[31msolving" not in told


def test_no_bar_without_a_terminal_or_when_quiet(library: Library, monkeypatch: pytest.MonkeyPatch):
    assert working(["solve", "f"], library, monkeypatch) == ""
    assert working(["solve", "f", "--quiet"], library, monkeypatch, err_is_terminal=True) == ""


def test_no_bar_in_the_first_second(library: Library, monkeypatch: pytest.MonkeyPatch):
    process = Process(err=Terminal(), err_is_terminal=True)
    bar = progress.ProgressBar(process.environment, quiet=False)
    with bar:
        bar("work", 1, 10)
    assert process.told == ""
