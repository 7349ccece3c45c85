"""`load` and `loadtest` on the command line: words, files, pipes and exit statuses."""

import json
from pathlib import Path

import pytest
from unit.cli.made import Process

from equiv.cli.boundary import run

NETWORK = (
    "voltage E +s -gnd 20 V\nresistor R5 s a 5 ohm\nresistor R15 a gnd 15 ohm\nport P +a -gnd\n"
)


@pytest.fixture
def network(tmp_path: Path) -> str:
    path = tmp_path / "n.equiv"
    path.write_text(NETWORK, encoding="utf-8")
    return str(path)


def loads(network: str, *words: str) -> list[dict]:
    process = Process()
    assert run(["load", network, "P", *words, "--json"], process.environment) == 0
    return json.loads(process.printed)["result"]["loads"]


def test_loads_quoted_or_in_words(network: str) -> None:
    assert loads(network, "8 ohm", "short", "power 5 W") == loads(
        network, "8", "ohm", "short", "power", "5", "W"
    )
    assert [found["load"] for found in loads(network, "8ohm", "open")] == ["8ohm", "open"]


def test_a_curve_between_words(network: str, tmp_path: Path) -> None:
    curve = tmp_path / "my lamp.CSV"
    curve.write_text("voltage [V],current [A]\n0,0\n15,4\n", encoding="utf-8")
    resistor, lamp, short = loads(network, "3.75", "ohm", str(curve), "short")
    assert lamp["load"] == "my lamp.CSV" and lamp["kind"] == "curve"
    assert lamp["voltage"]["re"] == pytest.approx(resistor["voltage"]["re"])
    assert short["kind"] == "short"


def test_a_negative_load_behind_two_dashes(network: str) -> None:
    process = Process()
    assert run(["load", network, "P", "--json", "--", "-8", "ohm"], process.environment) == 0
    (found,) = json.loads(process.printed)["result"]["loads"]
    assert found["current"]["re"] == pytest.approx(15 / (3.75 - 8))


@pytest.mark.parametrize(
    ("words", "status", "message"),
    [
        (["P", "power 16 W"], 5, "at most 15.000 W can be drawn"),
        (["P", "power 16 W", "open"], 0, "at most 15.000 W can be drawn"),
        (["P", "8 A"], 2, "expected ohms"),
        (["P"], 2, "missing argument"),
        (["Q", "open"], 2, "no port called Q"),
        (["P", "none.csv"], 6, "cannot read none.csv"),
    ],
)
def test_exit_statuses(network: str, words: list[str], status: int, message: str) -> None:
    process = Process()
    assert run(["load", network, *words], process.environment) == status
    assert message in process.printed + process.err.getvalue()


def test_a_broken_curve_is_told_with_its_place(network: str, tmp_path: Path) -> None:
    curve = tmp_path / "c.csv"
    curve.write_text("voltage [V],current [A]\n0,x\n", encoding="utf-8")
    process = Process()
    assert run(["load", network, "P", str(curve)], process.environment) == 3
    assert process.err.getvalue().startswith("c.csv:2:3: error[not-a-value]")


def test_loadtest_reads_a_file_or_a_pipe(tmp_path: Path) -> None:
    text = "load [ohm],voltage [V]\n5.5,11\n1.5,9\n"
    path = tmp_path / "r.csv"
    path.write_text(text, encoding="utf-8")
    for file, stdin in ((str(path), b""), ("-", text.encode())):
        process = Process(stdin)
        assert run(["loadtest", file, "--json"], process.environment) == 0
        data = json.loads(process.printed)
        assert data["result"]["emf"]["re"] == pytest.approx(12)
        assert data["file"]["name"] == ("-" if file == "-" else "r.csv")


@pytest.mark.parametrize(
    ("text", "status"), [("load [ohm],voltage [V]\n1,2\n2,4\n", 5), ("load\n", 3)]
)
def test_loadtest_refuses(text: str, status: int) -> None:
    process = Process(text.encode())
    assert run(["loadtest", "-", "--json"], process.environment) == status
    (error,) = json.loads(process.printed)["errors"]
    assert error["line"] and error["column"]


def test_loadtest_of_no_file() -> None:
    assert run(["loadtest", "no such file.csv"], Process().environment) == 6
