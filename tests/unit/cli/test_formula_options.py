"""`--symbolic` with names and without, before and after other words."""

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

from equiv.cli.formula_options import with_values

BRIDGE = """
voltage Vs +a -gnd 10 V
resistor R1 a b 1 ohm
resistor R2 b gnd 2 ohm
port OUT +b -gnd
find I:R2
"""


@pytest.mark.parametrize(
    ("words", "found"),
    [
        ("f.equiv --symbolic", "f.equiv --symbolic="),
        ("f.equiv --symbolic I:R3", "f.equiv --symbolic= I:R3"),
        ("f.equiv --symbolic V2:T1", "f.equiv --symbolic= V2:T1"),
        ("f.equiv --symbolic --json", "f.equiv --symbolic= --json"),
        ("--symbolic f.equiv I:R3", "--symbolic= f.equiv I:R3"),
        ("--symbolic - I:R3", "--symbolic= - I:R3"),
        ("--symbolic ./nets/f I:R3", "--symbolic= ./nets/f I:R3"),
        ("--symbolic R1,R2 f.equiv", "--symbolic=R1,R2 f.equiv"),
        ("f.equiv I:R3 --symbolic R1", "f.equiv I:R3 --symbolic=R1"),
        ("f.equiv --symbolic=R1 I:R3", "f.equiv --symbolic=R1 I:R3"),
        ("f.equiv -- --symbolic x", "f.equiv -- --symbolic x"),
        ("f.equiv I:R3", "f.equiv I:R3"),
    ],
)
def test_a_value_is_put_where_there_is_none(words: str, found: str) -> None:
    assert list(with_values(words.split())) == found.split()


def result(words: list[str], folder: Path) -> dict[str, object]:
    """The JSON of a process run in a folder."""
    root = Path(__file__).resolve().parents[3]
    done = subprocess.run(
        [sys.executable, "-m", "equiv", *words, "--json"], cwd=folder, capture_output=True,
        text=True, env={**os.environ, "PYTHONPATH": str(root)}, check=False,
    )  # fmt: skip
    return json.loads(done.stdout)


@pytest.mark.parametrize(
    ("words", "formula"),
    [
        ("superpose f.equiv --symbolic", "Vs/(R1 + R2)"),
        ("superpose --symbolic f.equiv I:R1", "Vs/(R1 + R2)"),
        ("superpose f.equiv --symbolic I:R1", "Vs/(R1 + R2)"),
        ("superpose f.equiv I:R1 --symbolic R1", "10/(R1 + 2)"),
        ("superpose --symbolic R1,Vs f.equiv", "Vs/(R1 + 2)"),
    ],
)
def test_superpose(words: str, formula: str, tmp_path: Path) -> None:
    (tmp_path / "f.equiv").write_text(BRIDGE)
    found = result(words.split(), tmp_path)
    assert found["schema"] == "equiv/superpose/1"
    (q,) = found["result"]["quantities"]  # type: ignore[index]
    assert q["frequencies"][0]["total"]["formula"] == formula


@pytest.mark.parametrize(
    ("words", "formula"),
    [
        ("port f.equiv --symbolic", "R1*R2/(R1 + R2)"),
        ("port f.equiv --symbolic OUT", "R1*R2/(R1 + R2)"),
        ("port f.equiv --symbolic b,gnd", "R1*R2/(R1 + R2)"),
        ("port f.equiv OUT --symbolic R2", "R2/(R2 + 1)"),
        ("port --symbolic R2 f.equiv b,gnd", "R2/(R2 + 1)"),
    ],
)
def test_port(words: str, formula: str, tmp_path: Path) -> None:
    (tmp_path / "f.equiv").write_text(BRIDGE)
    found = result(words.split(), tmp_path)
    assert found["result"]["thevenin"]["impedance"][0][0]["formula"] == formula  # type: ignore[index]


def test_a_symbol_without_a_value_has_no_number(tmp_path: Path) -> None:
    (tmp_path / "f.equiv").write_text(BRIDGE.replace("1 ohm", "?"))
    found = result(["superpose", "f.equiv", "--symbolic", "R2"], tmp_path)
    total = found["result"]["quantities"][0]["frequencies"][0]["total"]  # type: ignore[index]
    assert total == {"re": None, "im": None, "formula": "10/(R1 + R2)"}
