"""`fault`, and `isolate` on three-phase files, on the command line."""

import csv
import io
import json
from pathlib import Path

import pytest
from unit.cli.made import NETWORK, Library, Process
from unit.cli.test_completion import context

from equiv.cli import completion
from equiv.cli.boundary import run

SYSTEM = """\
title Two sources
three-phase 50 Hz
bus HIGH 20 kV
bus MAIN 6 kV
infeed U HIGH level 240 MVA x/r 8 z0/z1 2.6
transformer T1 HIGH > MAIN 5 MVA 20/6 kV z 7.1% x/r 12 vector Dyn5 neutral2 3 ohm
motor M1 MAIN 450 kW 6 kV cosphi 0.86 efficiency 94.6% start 5.4 x/r 6.5 group wet
load Lights MAIN 300 kVA cosphi 0.9
"""


@pytest.fixture
def system(tmp_path: Path) -> str:
    path = tmp_path / "two.equiv"
    path.write_text(SYSTEM, encoding="utf-8")
    return str(path)


def test_fault_passes_its_words_on(library: Library) -> None:
    line = (
        "fault f.equiv MAIN HIGH --type line-ground --fault-impedance 0.5ohm --ground-impedance "
        "1+2j --basis equivalent-source --case min --branch T1 --branch C1@MAIN --by group"
    )
    assert run(line.split(), Process().environment) == 0
    words, options = library.calls["fault"]
    assert words == (NETWORK, "MAIN", "HIGH")
    assert callable(options.pop("progress"))
    assert options == {
        "type": "line-ground", "fault_impedance": "0.5ohm", "ground_impedance": "1+2j",
        "basis": "equivalent-source", "case": "min", "branches": ["T1", "C1@MAIN"], "by": "group",
    }  # fmt: skip


def test_fault_without_words(library: Library) -> None:
    assert run(["fault", "f.equiv"], Process().environment) == 0
    words, options = library.calls["fault"]
    assert words == (NETWORK,)
    assert options["type"] == "all" and options["basis"] == "superposition"
    assert options["case"] == "max" and options["by"] == "source"
    assert not (options["fault_impedance"] or options["ground_impedance"] or options["branches"])


def test_isolate_passes_on_what_was_given(library: Library) -> None:
    assert run(["isolate", "f.equiv", "U"], Process().environment) == 0
    assert library.calls["isolate"] == ((NETWORK, "U"), {})
    line = "isolate f.equiv U --bus MAIN --type line-line --fault-impedance 1ohm"
    assert run(line.split(), Process().environment) == 0
    assert library.calls["isolate"][1] == {
        "bus": "MAIN", "type": "line-line", "fault_impedance": "1ohm",
    }  # fmt: skip


@pytest.mark.parametrize(
    ("line", "status", "message"),
    [
        ("fault FILE MAN", 2, "there is no bus called MAN"),
        ("fault FILE MAN", 2, "did you mean MAIN?"),
        ("fault FILE --type line-grond", 2, "line-grond"),
        ("fault FILE --basis iec", 2, "iec"),
        ("fault FILE --branch T2", 2, "there is no branch called T2"),
        ("fault FILE --branch T1@WELL", 2, "T1 does not end at WELL"),
        ("fault FILE --fault-impedance 3V", 2, "expected ohms"),
        ("fault FILE --fault-impedance=-1ohm", 2, "must have a resistance of zero or more"),
        ("fault FILE --frequency 60Hz", 2, "known at its own frequency only"),
        ("isolate FILE U", 2, "no bus was named"),
        ("isolate FILE Lights --bus MAIN", 2, "there is no source and no group called Lights"),
        ("superpose FILE", 2, "describes a three-phase system"),
        ("port FILE", 2, "describes a three-phase system"),
        ("solve FILE", 2, "describes a three-phase system"),
    ],
)
def test_exit_statuses(system: str, line: str, status: int, message: str) -> None:
    process = Process()
    words = [system if word == "FILE" else word for word in line.split()]
    assert run(words, process.environment) == status
    assert message in process.printed + process.told


def test_a_network_has_no_three_phase_faults(tmp_path: Path) -> None:
    path = tmp_path / "plain.equiv"
    path.write_text("voltage E +a -gnd 1 V\nresistor R a gnd 1 ohm\n", encoding="utf-8")
    for words in (["fault", str(path)], ["fault", str(path), "--json"]):
        process = Process()
        assert run(words, process.environment) == 2
        assert "plain.equiv does not describe a three-phase system" in (
            process.printed + process.told
        )


def test_a_sub_circuit_goes_through_a_pipe(system: str) -> None:
    first = Process()
    words = ["isolate", system, "wet", "--bus", "MAIN", "--type", "line-ground"]
    assert run(words, first.environment) == 0
    for command in ("superpose", "solve"):
        second = Process(stdin=first.printed.encode())
        assert run([command, "-", "--json"], second.environment) == 0
    by_fault = Process()
    line = ["fault", system, "MAIN", "--type", "line-ground", "--json", "--by", "group"]
    assert run(line, by_fault.environment) == 0
    (fault,) = json.loads(by_fault.printed)["result"]["faults"]
    term = next(t["contribution"] for t in fault["terms"] if t["source"] == "wet")
    solved = json.loads(second.printed)["result"]["elements"]
    into = next(e["current"] for e in solved if e["name"] == "into_fault_1")
    base = 100e6 / (3**0.5 * 6000)
    for part in ("re", "im"):
        assert 3 * base * into[part] == pytest.approx(term[part], rel=1e-6)


def test_a_survey_goes_into_a_file(system: str, tmp_path: Path) -> None:
    target = tmp_path / "faults.csv"
    words = ["fault", system, "--as", "csv", "--output", str(target)]
    assert run(words, Process().environment) == 0
    terms, *_ = target.read_text().split("\n\n")
    rows = list(csv.DictReader(io.StringIO(terms)))
    assert len(rows) == 2 * 4 * 2 and {row["bus"] for row in rows} == {"HIGH", "MAIN"}


def test_buses_branches_and_sources_complete(system: str) -> None:
    file = Path(system)
    assert completion.buses(context(file), "") == ["HIGH", "MAIN"]
    assert completion.buses(context(file), "M") == ["MAIN"]
    assert completion.branches(context(file), "") == ["T1", "T1@HIGH", "T1@MAIN"]
    assert completion.sources(context(file), "") == ["U", "M1", "wet"]
    assert completion.ports(context(file), "") == []


def test_nothing_is_completed_for_a_network(tmp_path: Path) -> None:
    path = tmp_path / "plain.equiv"
    path.write_text("voltage E +a -gnd 1 V\nresistor R a gnd 1 ohm\n", encoding="utf-8")
    assert completion.buses(context(path), "") == completion.branches(context(path), "") == []


def test_what_is_always_refused_is_not_offered(
    system: str, capsys: pytest.CaptureFixture[str]
) -> None:
    assert run(["fault", "--help"], Process().environment) == 0
    offered = capsys.readouterr().out
    assert "--given" in offered and "--frequency" not in offered
    assert run(["solve", "--help"], Process().environment) == 0
    assert "--frequency" in capsys.readouterr().out
    refused = Process()
    assert run(["fault", system, "--frequency", "60Hz"], refused.environment) == 2
    assert "is known at its own frequency only" in refused.err.getvalue()
