"""What a fault result shows in each form: the contract's keys, cautions, harmless texts."""

import csv
import io
import json
import math
from dataclasses import replace
from typing import Any

import pytest
from unit.rendering.hostile import HOSTILE

import equiv
from equiv.threephase.cases import TYPES
from equiv.threephase.fault import FaultResult
from equiv.threephase.loading import require_system
from equiv.threephase.model import OneLine

TEXT = """
title        Board of a works
three-phase  50 Hz
base         10 MVA
bus HIGH 20 kV
bus MAIN 6 kV
bus WELL 6 kV
infeed       Utility  HIGH         level 240 MVA  x/r 8  z0/z1 2.6  voltage 1.03 pu @ 2 deg
transformer  T1       HIGH > MAIN  5 MVA  20/6 kV  z 7.1%  x/r 12  vector Dyn5  neutral2 3 ohm
generator    Set      MAIN         1.6 MVA  6 kV  x1 13.5%  x2 15%  x0 4.5%  x/r 24  cosphi 0.8
line         Feeder   MAIN > WELL  0.38 km  z1 0.206+0.098j ohm/km  z0 0.92+0.36j ohm/km
motor        Pump     WELL         450 kW  6 kV  cosphi 0.86  efficiency 94.6%  start 5.4  x/r 6.5  group wet
motor        Screen   MAIN         90 kW  6 kV  cosphi 0.86  efficiency 92%  start 5.4  x/r 6.5  group wet
load         Lights   MAIN         300 kVA  cosphi 0.9
"""
FORMS = ("table", "csv", "markdown", "latex", "html")


def system(text: str = TEXT) -> OneLine:
    return require_system(equiv.parse(text))


def told(found: FaultResult) -> str:
    """The tables' words, whatever the lines."""
    return " ".join(str(found).split())


def number(value: dict[str, float]) -> complex:
    return complex(value["re"], value["im"])


def rows_of(text: str, table: str) -> list[dict[str, str]]:
    """The rows of one table of a CSV."""
    for part in text.split("\n\n"):
        rows = list(csv.DictReader(io.StringIO(part)))
        if rows and rows[0]["table"] == table:
            return rows
    raise AssertionError(f"no table {table}")


@pytest.fixture(scope="module")
def result() -> FaultResult:
    return equiv.fault(system(), "MAIN", branches=["Feeder@WELL"])


def test_json_has_the_keys_that_were_promised(result: FaultResult) -> None:
    data = json.loads(json.dumps(result.to_dict(), allow_nan=False))
    assert data["schema"] == "equiv/fault/1" and data["phasors"] == "rms"
    assert set(data["result"]) == {"basis", "case", "study", "faults"}
    assert [fault["type"] for fault in data["result"]["faults"]] == list(TYPES)
    for fault in data["result"]["faults"]:
        assert {
            "bus", "type", "kilovolts", "phases", "earth", "sequence", "x_over_r", "peak_factor",
            "peak", "asymmetrical_rms", "terms", "total", "check", "voltages",
        } <= set(fault)  # fmt: skip
        assert set(fault["phases"]) == set(fault["check"]) == {"a", "b", "c"}
        assert set(fault["sequence"]) == {"0", "1", "2"}
        assert set(fault["voltages"]) == {"HIGH", "MAIN", "WELL"}
        for term in fault["terms"]:
            assert {
                "source", "members", "contribution", "share", "gross_share", "running_sum", "partial",
            } <= set(term)  # fmt: skip
        assert fault["kilovolts"] == 6.0


def test_json_agrees_with_itself(result: FaultResult) -> None:
    for fault in result.to_dict()["result"]["faults"]:
        total = number(fault["total"])
        phase = "a" if fault["type"] in ("three-phase", "line-ground") else "b"
        assert total == number(fault["phases"][phase]) and fault["phase"] == phase
        assert sum(number(t["contribution"]) for t in fault["terms"]) == pytest.approx(total)
        assert sum(t["share"] for t in fault["terms"]) == pytest.approx(1)
        assert sum(t["gross_share"] for t in fault["terms"]) == pytest.approx(1)
        assert number(fault["terms"][-1]["running_sum"]) == pytest.approx(total)
        assert 3 * number(fault["sequence"]["0"]) == pytest.approx(number(fault["earth"]))
        largest = max(abs(number(i)) for i in fault["phases"].values())
        assert fault["peak"] == pytest.approx(fault["peak_factor"] * math.sqrt(2) * largest)
        (relay,) = fault["relays"]
        assert (relay["branch"], relay["bus"]) == ("Feeder", "WELL")
        terms = sum(number(t["contribution"]) for t in relay["terms"])
        assert terms == pytest.approx(number(relay["total"]))


def test_csv_has_a_row_a_term(result: FaultResult) -> None:
    text = result.render("csv")
    rows = rows_of(text, "terms")
    data = result.to_dict()["result"]["faults"]
    terms = [(f["bus"], f["type"], f["phase"], t) for f in data for t in f["terms"]]
    assert len(rows) == len(terms) == 16
    for row, (bus, kind, phase, term) in zip(rows, terms, strict=True):
        assert (row["bus"], row["type"], row["phase"]) == (bus, kind, phase)
        assert row["source"] == term["source"]
        assert float(row["contribution_re [A]"]) == term["contribution"]["re"]
        assert float(row["contribution_im [A]"]) == term["contribution"]["im"]
        assert float(row["share"]) == term["share"]
        assert float(row["partial_a_re [A]"]) == term["partial"]["a"]["re"]
        assert float(row["partial_c_im [A]"]) == term["partial"]["c"]["im"]
    faults = rows_of(text, "faults")
    assert [float(row["peak [A]"]) for row in faults] == [fault["peak"] for fault in data]
    assert len(rows_of(text, "voltages")) == 12
    assert len(rows_of(text, "relay terms")) == 16
    assert all(row["passed"] == "yes" for row in rows_of(text, "checks"))


@pytest.mark.parametrize("form", FORMS)
@pytest.mark.parametrize("buses", [("MAIN",), ()])
@pytest.mark.parametrize("basis", ["superposition", "equivalent-source"])
def test_cautions_stand_once_on_every_form(form: str, buses: tuple[str, ...], basis: Any) -> None:
    found = equiv.fault(system(), *buses, basis=basis)
    drawn = " ".join(found.render(form).replace("\n", " ").split())
    for words in (
        "arcs, saturation, converter current limits and decaying currents",
        "the largest bolted current is not the worst case for arc flash",
        "the work of a licensed engineer under the local code",
    ):
        assert drawn.count(words) == 1, words
    warnings = found.to_dict()["warnings"]
    assert {"fault-duty", "arc-flash"} <= {warning["code"] for warning in warnings}


def test_the_impedances_are_said_where_they_are() -> None:
    found = equiv.fault(system(), "MAIN", fault_impedance="0.1+0.2j ohm", ground_impedance=2)
    drawn = " ".join(str(found).split())
    assert "Fault impedance 0.1 + j0.2 Ω in each phase" in drawn
    assert "between phases b and c" in drawn
    assert "in each of the two phase legs; ground impedance 2.0000 Ω from their common" in drawn
    assert "books differ" in drawn


def test_groups_are_terms() -> None:
    (case,) = equiv.fault(system(), "MAIN", type="three-phase", by="group").cases
    terms = {term.source: term for term in case.terms}
    assert terms["wet"].members == ("Pump", "Screen") and terms["wet"].partial is None
    each = equiv.fault(system(), "MAIN", type="three-phase").cases[0].terms
    both = sum(t.contribution for t in each if t.source in ("Pump", "Screen"))
    assert terms["wet"].contribution == pytest.approx(both)
    found = equiv.fault(system(), "MAIN", type="three-phase", by="group")
    assert "several buses" in str(found)


def test_terms_and_partial_currents_are_told_apart() -> None:
    def told(text: str, bus: str) -> str:
        return " ".join(str(equiv.fault(system(text), bus, type="three-phase")).split())

    # at WELL the load and the unequal EMFs of MAIN intervene; a load at the fault draws nothing
    assert "of the fault current apart" in told(TEXT, "WELL")
    assert "here they are the same" in told(TEXT, "MAIN")
    alike = TEXT.replace("voltage 1.03 pu @ 2 deg", "")
    alike = "\n".join(line for line in alike.splitlines() if not line.startswith("load"))
    assert "here they are the same" in told(alike, "WELL")


def test_no_path_is_said_in_words() -> None:
    text = TEXT.replace("vector Dyn5  neutral2 3 ohm", "vector Dd0")
    found = equiv.fault(system(text), "WELL", type="line-ground")
    words = "no path for earth-fault current at WELL"
    assert words in found.to_dict()["result"]["faults"][0]["reasons"][0]
    assert f"N{words[1:]}" in told(found)
    assert "capacitance to earth of cables and machines is not entered (b0)" in told(found)
    assert found.cases[0].peak is None and "Peak and first cycle" not in str(found)


def hostile() -> OneLine:
    """A system in which every text is hostile: made in code, since reading refuses such names."""
    plain = system()
    names = iter(HOSTILE)
    buses = {name: replace(bus, name=next(names)) for name, bus in plain.buses.items()}
    items = {}
    for item in plain.items.values():
        ends = {
            end: buses[getattr(item, end).name]
            for end in ("bus", "first", "second")
            if hasattr(item, end)
        }
        made = replace(item, name=next(names), label=HOSTILE[8], **ends)  # type: ignore[arg-type]
        items[made.name] = made
    return replace(
        plain, buses={bus.name: bus for bus in buses.values()}, items=items,
        title=HOSTILE[2], notes=(HOSTILE[0], HOSTILE[18], HOSTILE[19]),
    )  # fmt: skip


@pytest.mark.parametrize("survey", [True, False])
def test_hostile_texts_are_nothing_but_text(survey: bool) -> None:
    made = hostile()
    found = equiv.fault(made, *(() if survey else list(made.buses)[1:2]))
    for form in FORMS:
        drawn = found.render(form)
        assert not {"\x1b", "\u202e", "\r", "\t"} & set(drawn), form
    for row in csv.reader(io.StringIO(found.render("csv"))):
        for cell in row:
            if cell.startswith(("=", "+", "-", "@")):
                float(cell)  # a number, not a formula
    assert "<script" not in found.render("html") and "<b>" not in found.render("markdown")
    assert "\n\\input" not in found.render("latex") and "\\write18" not in found.render("latex")
    json.dumps(found.to_dict(), allow_nan=False)
