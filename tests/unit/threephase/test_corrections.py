"""What the standard's factors, taps, levels and counts do to impedances, worked by hand."""

from __future__ import annotations

import cmath
import math
from typing import Any

import pytest

from equiv.threephase import standard
from equiv.threephase.entered import scaled
from equiv.threephase.fault import fault
from equiv.threephase.loading import parse, require_system
from equiv.threephase.model import View

SUPERPOSITION = View()
MAX = View("equivalent-source", "max")
MIN = View("equivalent-source", "min")
HEAD = """three-phase 50 Hz
bus A 33 kV
bus B 11 kV
bus L 400 V
bus D 400 V tolerance 10%
infeed Elsewhere A level 1 MVA
"""


def item_of(line: str) -> Any:
    return require_system(parse(HEAD + line)).items[line.split()[1]]


def test_generators_have_the_largest_c_in_both_cases() -> None:
    """IEC 60909-0:2016, 6.6.1 (from memory): K_G has c_max."""
    machine = item_of("generator G B 2 MVA 11 kV x1 20% cosphi 0.8")
    k = 1.10 / (1 + 0.2 * 0.6)
    for view in (MAX, MIN):
        assert machine.series(1, view) == pytest.approx(k * 0.2j * 11e3**2 / 2e6, rel=1e-12)


def test_transformers_have_the_c_of_their_low_voltage_side() -> None:
    """IEC 60909-0:2016, 6.3.3 (from memory): 1.05 where the low side has a tolerance of 6 %."""
    for line in ("T B > L 400 kVA 11/0.4 kV", "T L > B 400 kVA 0.4/11 kV"):
        unit = item_of(f"transformer {line} z 4% vector Dyn5 neutral2 solid".replace(
            "neutral2" if line.startswith("T L") else "-", "neutral1"))  # fmt: skip
        own = unit.series(1, SUPERPOSITION)
        for view in (MAX, MIN):
            assert unit.series(1, view) == pytest.approx(own * 0.95 * 1.05 / 1.024, rel=1e-12)


@pytest.mark.parametrize(
    ("volts", "tolerance", "case", "c"),
    [
        (400, 0.06, "max", 1.05), (400, 0.06, "min", 0.95), (400, 0.10, "max", 1.10),
        (400, 0.10, "min", 0.90), (11e3, 0.06, "max", 1.10), (11e3, 0.10, "min", 1.00),
    ],
)  # fmt: skip
def test_the_voltage_factor(volts: float, tolerance: float, case: str, c: float) -> None:
    """IEC 60909-0:2016, table 1 (from memory)."""
    assert standard.voltage_factor(volts, case, tolerance) == c


def test_the_tolerance_of_a_bus_is_in_its_smallest_current() -> None:
    found = fault(
        parse("three-phase 50 Hz\nbus D 400 V tolerance 10%\ninfeed U D z1 0.01j ohm\n"),
        "D", type="three-phase", basis="equivalent-source", case="min",
    )  # fmt: skip
    assert abs(found.cases[0].total) == pytest.approx(0.90 * 400 / math.sqrt(3) / 0.01, rel=1e-12)


def test_parallel_transformers_have_parallel_neutrals() -> None:
    line = "transformer T A > B 5 MVA 33/11 kV z 8% vector YNyn0 neutral1 6 ohm neutral2 9+3j ohm"
    unit = item_of(f"{line} count 3")
    assert unit.neutral(1) == 2 and unit.neutral(2) == 3 + 1j


def test_the_emf_of_a_machine_is_in_per_unit_of_its_own_voltage() -> None:
    for line in (
        "generator G B 2 MVA 10.5 kV x1 20% voltage 1.05 pu",
        "motor G B 600 kVA 10.5 kV start 6 voltage 105%",
        "synchronous-motor G B 2 MVA 10.5 kV x1 20% voltage 1.05 pu",
    ):
        emf = item_of(line).emf(SUPERPOSITION)
        assert emf == pytest.approx(1.05 * 10.5e3 / math.sqrt(3), rel=1e-12)


@pytest.mark.parametrize("tap", [-5, 0, 10])
def test_ohms_of_a_transformer_stay_as_they_are_seen_from_the_first_side(tap: float) -> None:
    unit = item_of(f"transformer T A > B 10 MVA 33/11 kV z 10 ohm z0 9 ohm vector Dyn11 tap {tap}%")
    assert unit.series(1, SUPERPOSITION) == pytest.approx(10j, rel=1e-12)
    assert unit.series(0, SUPERPOSITION) == pytest.approx(9j, rel=1e-12)
    k = 0.95 * 1.10 / (1 + 0.6 * 10 * 10e6 / 33e3**2)
    assert unit.series(1, MAX) == pytest.approx(k * 10j, rel=1e-12)
    percent = item_of(f"transformer T A > B 10 MVA 33/11 kV z 10% vector Dyn11 tap {tap}%")
    base = (33e3 * (1 + tap / 100)) ** 2 / 10e6
    assert percent.series(1, SUPERPOSITION) == pytest.approx(0.1j * base, rel=1e-12)


@pytest.mark.parametrize("zero", ["", "x0/r0 3"])
@pytest.mark.parametrize("view", [SUPERPOSITION, MAX, MIN])
def test_z0_of_a_line_to_ground_level_beside_z1(zero: str, view: View) -> None:
    """c multiplies neither: z0 is what it is in superposition, and never negative."""
    volts = 400 / math.sqrt(3)
    line = f"infeed U D z1 0.002+0.01j ohm level1 {3 * volts / 0.0205 / 1e3} kA {zero}"
    infeed = item_of(line)
    z0 = infeed.series(0, view)
    assert z0 == infeed.series(0, SUPERPOSITION)
    assert z0.real > 0 and z0.imag > 0
    assert abs(2 * infeed.series(1, view) + z0) == pytest.approx(0.0205, rel=1e-9)


def test_a_capacitive_reactance_goes_against_the_frequency() -> None:
    assert scaled(3 + 5j, 0.4) == pytest.approx(3 + 2j)
    assert scaled(3 - 5j, 0.4) == pytest.approx(3 - 12.5j)


def test_a_capacitive_fault_impedance_at_20_hz() -> None:
    """By hand: κ of 0.5 + j(0.4·1 - 0.1/0.4), from R/X = 0.4 Rc/Xc."""
    found = fault(
        parse("three-phase 50 Hz\nbus A 11 kV\ninfeed U A z1 0.3+1j ohm\n"),
        "A", type="three-phase", fault_impedance=0.2 - 0.1j,
    )  # fmt: skip
    kappa = 1.02 + 0.98 * math.exp(-3 * 0.4 * 0.5 / 0.15)
    assert found.cases[0].peak_factor == pytest.approx(kappa, rel=1e-9)


def test_a_capacitive_neutral_at_20_hz() -> None:
    """Of a machine, and of a transformer's star point, in sequences and in conductors alike."""
    text = """three-phase 50 Hz
    bus A 11 kV
    bus B 400 V
    generator G A 2 MVA 11 kV x1 15% x0 5% x/r 20 neutral 1-2j ohm
    transformer T A > B 400 kVA 11/0.4 kV z 4% x/r 3 vector Dyn11 neutral2 0.2-0.01j ohm
    """
    from equiv.threephase.sequence.solve import SystemSolution

    solution = SystemSolution(require_system(parse(text)), View(reactances=0.4), ("A", "B"))
    z = solution.impedances(["A", "B"]).zero
    own = cmath.rect(0.04 * 400**2 / 400e3, math.atan(3))
    at_b = complex(own.real + 0.6, 0.4 * own.imag - 0.03 / 0.4)
    x = 0.15 * 11e3**2 / 2e6
    at_a = complex(x / 20 + 3, 0.4 * 0.05 * 11e3**2 / 2e6 - 6 / 0.4)
    base = solution.system.base
    assert z[0] * 11e3**2 / base == pytest.approx(at_a, rel=1e-9)
    assert z[1] * 400**2 / base == pytest.approx(at_b, rel=1e-9)
