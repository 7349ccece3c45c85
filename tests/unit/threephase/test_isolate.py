"""The sub-circuit of one source at a fault: a network whose quantities are the source's terms."""

import math

import pytest

import equiv
from equiv.errors import DoesNotExistError, UsageError
from equiv.threephase.cases import TYPES
from equiv.threephase.loading import require_system
from equiv.threephase.sequence.connection import EARTH_FAULTS

TEXT = """
title Two sources
three-phase 50 Hz
base 10 MVA
bus HIGH 20 kV
bus MAIN 6 kV
infeed U HIGH level 240 MVA x/r 8 z0/z1 2.6
transformer T1 HIGH > MAIN 5 MVA 20/6 kV z 7.1% x/r 12 vector Dyn5 neutral2 3 ohm
generator G1 MAIN 1.6 MVA 6 kV x1 13.5% x2 15% x/r 24 cosphi 0.8
motor M1 MAIN 450 kW 6 kV cosphi 0.86 efficiency 94.6% start 5.4 x/r 6.5 group wet
motor M2 MAIN 90 kW 6 kV cosphi 0.86 efficiency 92% start 5.4 x/r 6.5 group wet
load Lights MAIN 300 kVA cosphi 0.9
"""
SYSTEM = equiv.parse(TEXT)
A = complex(-0.5, math.sqrt(3) / 2)
WEIGHTS = {
    "three-phase": {"1": 1},
    "line-ground": {"1": 3},
    "line-line": {"1": A**2 - A},
    "line-line-ground": {"0": 1, "1": A**2, "2": A},
}


def sequence_currents(text: str) -> dict[str, complex]:
    """Superpose a written sub-circuit: the currents into the fault, per unit."""
    found = equiv.superpose(equiv.parse(text)).quantities
    return {str(q.quantity)[-1]: complex(q.frequencies[0].total) for q in found}


@pytest.mark.parametrize("kind", TYPES)
@pytest.mark.parametrize("source", ["U", "G1", "wet"])
def test_its_text_run_again_gives_the_term(kind: str, source: str) -> None:
    by = "group" if source == "wet" else "source"
    words = {"type": kind, "fault_impedance": "0.1+0.05j ohm"}
    if kind in EARTH_FAULTS:
        words["ground_impedance"] = "0.4 ohm"
    (case,) = equiv.fault(SYSTEM, "MAIN", by=by, **words).cases
    (term,) = [t.contribution for t in case.terms if t.source == source]
    text = equiv.isolate(SYSTEM, source, bus="MAIN", **words).plain_text()
    currents = sequence_currents(text)
    base = require_system(SYSTEM).base / (math.sqrt(3) * case.volts)
    found = base * sum(w * currents[s] for s, w in WEIGHTS[kind].items())
    assert found == pytest.approx(term, rel=1e-9)


def test_a_network_is_isolated_as_before() -> None:
    network = equiv.parse("voltage E +a -gnd 1 V\ncurrent J gnd > a 1 A\nresistor R a gnd 1 ohm\n")
    assert equiv.isolate(network, "J").subcircuit == network.isolate("J")
    with pytest.raises(UsageError, match="a bus of a fault was given"):
        equiv.isolate(network, "J", bus="MAIN")


@pytest.mark.parametrize(
    ("words", "message"),
    [
        ({}, "no bus was named"),
        ({"bus": "MAN"}, "there is no bus called MAN(.|\n)*did you mean MAIN"),
        ({"bus": "MAIN", "type": "line-grond"}, "did you mean line-ground"),
        ({"bus": "MAIN", "fault_impedance": "-1 ohm"}, "resistance of zero or more"),
        ({"bus": "MAIN", "fault_impedance": "3 V"}, "expected ohms"),
        ({"bus": "MAIN", "ground_impedance": "3 ohm"}, "no place in a three-phase fault"),
    ],
)
def test_what_cannot_be_isolated(words: dict[str, str], message: str) -> None:
    with pytest.raises(UsageError, match=message):
        equiv.isolate(SYSTEM, "U", **words)


def test_a_source_that_is_none() -> None:
    with pytest.raises(UsageError, match="no source and no group called Lights"):
        equiv.isolate(SYSTEM, "Lights", bus="MAIN")


def test_missing_data_are_told() -> None:
    text = TEXT.replace("x/r 24 cosphi 0.8", "x/r 24 cosphi 0.8 neutral solid")
    with pytest.raises(DoesNotExistError, match="no zero-sequence data for G1"):
        equiv.isolate(equiv.parse(text), "U", bus="MAIN", type="line-ground")
