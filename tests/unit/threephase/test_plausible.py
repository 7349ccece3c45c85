"""What can be calculated with and is hardly meant: the limits are common practice."""

from __future__ import annotations

import pytest

import equiv
from equiv.threephase.loading import parse, require_system
from equiv.threephase.plausible import implausible

HEAD = "bus A 33 kV\nbus B 11 kV\n"
GRID = "infeed U A level 1 GVA x/r 9 z0/z1 1.3\n"


def codes(text: str, first: str = "three-phase 50 Hz\n") -> list[str]:
    system = require_system(parse(first + HEAD + text))
    return [caution.code for caution in implausible(system)]


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("infeed V A level 9 MVA x/r 9 voltage 1.5 pu @ 0 deg", "doubtful-emf"),
        ("infeed V B level 9 MVA x/r 9 voltage 11 V @ 0 deg", "doubtful-emf"),
        ("generator G B 3 MVA 11 kV x1 15% x/r 30 voltage 0.7 pu", "doubtful-emf"),
        ("line L B > C 1 km z1 0.1+0.1j ohm/km b1 90 mS/km", "doubtful-susceptance"),
        ("line L B > C 1 km z1 0.1+0.1j ohm/km b0 0.09 S/km", "doubtful-susceptance"),
        ("line L B > C 2 km z1 0.1+0.1j ohm/km b1 3 mS", "doubtful-susceptance"),
        ("generator G B 3 MVA 11 kV x1 15 pu x/r 30", "doubtful-reactance"),
        ("generator G B 3 MVA 11 kV x1 90 ohm x/r 30", "doubtful-reactance"),
        ("generator G B 3 MVA 11 kV x1 15%", "no-resistance"),
        ("infeed V A level 9 MVA", "no-resistance"),
        ("infeed V A z1 3 ohm", "no-resistance"),
        ("motor M B 1 MVA 11 kV start 5", "no-resistance"),
        ("transformer T A > B 9 MVA 33/11 kV z 8% vector Dyn11", "no-resistance"),
    ],
)
def test_slips(text: str, code: str) -> None:
    assert codes(f"bus C 11 kV\n{GRID}{text}") == [code]


@pytest.mark.parametrize(
    "text",
    [
        "infeed V A level 9 MVA x/r 9 voltage 1.2 pu @ 5 deg",
        "generator G B 3 MVA 11 kV x1 15% x/r 30 voltage 12.5 kV",
        "line L B > C 2 km z1 0.1+0.1j ohm/km b1 300 uS/km b0 1 mS",
        "generator G B 3 MVA 11 kV x1 40% x/r 30",
        "infeed V A z1 3j ohm",
        "transformer T A > B 9 MVA 33/11 kV z 1+8j % vector Dyn11",
        "load L B 300 kW\ncapacitor-bank K B 9 kvar",
    ],
)
def test_what_is_usual(text: str) -> None:
    assert codes(f"bus C 11 kV\n{GRID}{text}") == []


@pytest.mark.parametrize(
    ("hertz", "usual"), [("50", 1), ("60", 1), ("16.7", 1), ("5", 0), ("500", 0)]
)
def test_frequency(hertz: str, usual: int) -> None:
    expected = [] if usual else ["doubtful-frequency"]
    assert codes(GRID, f"three-phase {hertz} Hz\n") == expected


@pytest.mark.parametrize(("prefault", "usual"), [("0.8", 1), ("120%", 1), ("0.79", 0), ("11", 0)])
def test_voltage_before_the_fault(prefault: str, usual: int) -> None:
    unit = "" if prefault.endswith("%") else " pu"
    expected = [] if usual else ["doubtful-prefault"]
    assert codes(GRID, f"three-phase 50 Hz\nprefault {prefault}{unit}\n") == expected


def test_check_says_so() -> None:
    """The numbers are those of the file, not of the calculation."""
    text = "infeed V B level 9 MVA x/r 9 voltage 16.5 kV @ 0 deg"
    report = equiv.check(parse(f"three-phase 50 Hz\n{HEAD}{GRID}{text}"))
    said = [c.message for c in report.cautions if c.code == "doubtful-emf"]
    assert said == ["the voltage of V is 1.5 of the nominal one of B (11 kV)"]
