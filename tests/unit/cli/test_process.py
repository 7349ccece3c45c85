"""The real process: start, streams and what is imported."""

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

from equiv.cli.environment import of_process
from equiv.errors import ExitStatus

PROJECT = Path(__file__).parents[3]


def equiv(
    *words: str, given: bytes = b"", **environment: str
) -> subprocess.CompletedProcess[bytes]:
    return subprocess.run(
        [sys.executable, "-m", "equiv", *words],
        cwd=PROJECT,
        input=given,
        env={**os.environ, "COLUMNS": "80", **environment},
        capture_output=True,
        timeout=60,
    )


def test_help_fits_eighty_columns():
    done = equiv("--help")
    assert done.returncode == 0
    assert done.stderr == b""
    page = done.stdout.decode()
    assert max(map(len, page.splitlines())) <= 80
    for command in ("check", "solve", "superpose", "isolate", "port", "kinds", "sample"):
        assert f"\n  {command} " in page
    assert "..." not in page.partition("Commands:")[2]


def test_wrong_words():
    done = equiv("superpos")
    assert done.returncode == ExitStatus.USAGE
    assert done.stdout == b""
    assert done.stderr.startswith(b"error[usage]: no such command 'superpos'")


def test_a_sample_is_printed_byte_for_byte():
    done = equiv("sample", "pump-station")
    assert done.returncode == 0
    assert done.stdout == (PROJECT / "samples" / "pump-station.equiv").read_bytes()


def test_a_sub_circuit_is_piped_back_in():
    isolated = equiv("isolate", "samples/pump-station.equiv", "Mains")
    assert isolated.returncode == 0
    solved = equiv("solve", "-", "--json", given=isolated.stdout)
    assert (solved.returncode, solved.stderr) == (0, b"")
    elements = json.loads(solved.stdout)["result"]["elements"]
    (alone,) = (e["current"]["re"] for e in elements if e["name"] == "Fault")
    superposed = equiv("superpose", "samples/pump-station.equiv", "I:Fault", "--json")
    (quantity,) = json.loads(superposed.stdout)["result"]["quantities"]
    (mains,) = (t for t in quantity["frequencies"][0]["terms"] if t["source"] == "Mains")
    assert alone == pytest.approx(mains["contribution"]["re"], rel=1e-12)


def test_a_reader_that_leaves_early():
    line = f"{sys.executable} -m equiv kinds | head -n 1; echo ${{PIPESTATUS[0]}}"
    done = subprocess.run(["bash", "-c", line], cwd=PROJECT, capture_output=True, timeout=60)
    assert done.stderr == b""
    assert done.stdout.endswith(b"\n0\n")


def test_the_shell_is_offered_names():
    done = equiv(
        _EQUIV_COMPLETE="complete_bash",
        COMP_WORDS="equiv\nisolate\nsamples/pump-station.equiv\nM",
        COMP_CWORD="3",
    )
    assert done.stdout == b"Mains\n"
    assert done.stderr == b""


def test_a_closed_pipe_is_silent():
    reading, writing = os.pipe()
    os.close(reading)
    done = subprocess.run(
        [sys.executable, "-m", "equiv", "nonsense", "--json"],
        cwd=PROJECT,
        stdout=writing,
        stderr=subprocess.PIPE,
        timeout=60,
    )
    os.close(writing)
    assert done.stderr == b""
    assert done.returncode == ExitStatus.USAGE


def test_a_full_device_is_said_once():
    if not Path("/dev/full").exists():
        pytest.skip("there is no /dev/full here")
    with Path("/dev/full").open("wb") as full:
        done = subprocess.run(
            [sys.executable, "-m", "equiv", "nonsense", "--json"],
            cwd=PROJECT,
            stdout=full,
            stderr=subprocess.PIPE,
            timeout=60,
        )
    assert done.stderr.count(b"\n") == 1
    assert b"standard output cannot be written" in done.stderr


@pytest.mark.parametrize("statement", ["import equiv", "import equiv.cli"])
def test_nothing_heavy_is_imported_at_start(statement: str):
    heavy = "{'numpy', 'scipy', 'sympy', 'rich', 'decimal', 'flint'}"
    code = f"import sys; {statement}; print(sorted({heavy} & set(sys.modules)))"
    done = subprocess.run([sys.executable, "-c", code], cwd=PROJECT, capture_output=True)
    assert done.stdout == b"[]\n"


@pytest.mark.parametrize("command", ["kinds", "sample"])
def test_pages_without_numbers_import_no_numpy(command: str):
    """They calculate nothing, and numpy is half of their time."""
    code = (
        f"import sys; sys.argv = ['equiv', {command!r}]\nfrom equiv.cli import main\n"
        "try:\n    main()\nfinally:\n    print('numpy' in sys.modules, file=sys.stderr)"
    )
    done = subprocess.run([sys.executable, "-c", code], cwd=PROJECT, capture_output=True)
    assert done.stderr.split()[-1] == b"False"


def test_columns_are_honoured(monkeypatch: pytest.MonkeyPatch):
    monkeypatch.setenv("COLUMNS", "57")
    assert of_process().width == 57
    monkeypatch.setenv("COLUMNS", "many")
    assert of_process().width is None
    monkeypatch.setenv("NO_COLOR", "1")
    assert not of_process().colour


def shortest(words: list[str]) -> float:
    import time

    times = []
    for _ in range(10):
        start = time.perf_counter()
        subprocess.run([sys.executable, *words], cwd=PROJECT, stdout=subprocess.DEVNULL)
        times.append(time.perf_counter() - start)
    return min(times)


@pytest.mark.performance
def test_help_takes_ten_times_the_start_of_python():
    assert shortest(["-m", "equiv", "--help"]) < 10 * shortest(["-c", "pass"])
