"""Published values of three-phase faults, each with its source, and a Z-bus of numpy's."""

from __future__ import annotations

import cmath
import math
import random
from dataclasses import replace

import numpy as np
import pytest
from laws.random_systems import Cable, Machine, system

import equiv
from equiv.equations.layout import Numbers
from equiv.threephase import standard
from equiv.threephase.cases import FaultCase, Phases, Sequence
from equiv.threephase.fault import fault
from equiv.threephase.loading import require_system
from equiv.threephase.model import Bus, OneLine
from equiv.threephase.sequence.connection import phases

A = cmath.rect(1, 2 * math.pi / 3)


def printed(text: str, times: float = 1.0, rtol: float = 0.0) -> object:
    """A printed number: met within half of its last digit (times a factor), or within rtol."""
    decimals = len(text.partition(".")[2])
    value = float(text)
    half = 0.5 * 10.0**-decimals * (1 + 1e-9)
    return pytest.approx(value, abs=max(half * times, rtol * abs(value)), rel=0)


def read(text: str) -> OneLine:
    return require_system(equiv.parse(text))


def only(found: OneLine, bus: str, type_: str, **options: object) -> FaultCase:
    result = fault(found, bus, type=type_, **options)  # type: ignore[arg-type]
    for check in result.checks:
        assert check.passed, check
    (case,) = result.cases
    return case


def base_current(found: OneLine, bus: str) -> float:
    return found.base / math.sqrt(3) / found.buses[bus].volts


def sequences(of: Phases) -> Sequence:
    """Sequence values of phase values, by their definition."""
    a, b, c = of
    return Sequence((a + b + c) / 3, (a + A * b + A**2 * c) / 3, (a + A**2 * b + A * c) / 3)


def test_d01_two_generators_through_a_transformer() -> None:
    """W. D. Stevenson Jr., Elements of Power System Analysis (4th ed.), Example 10.1, p. 253."""
    found = read(
        """
        three-phase 60 Hz
        base 75 MVA
        prefault 0.9565217391304348 pu
        bus LV 13.8 kV
        bus HV 69 kV
        generator G1 LV 50 MVA 13.8 kV x1 25%
        generator G2 LV 25 MVA 13.8 kV x1 25%
        transformer T LV > HV 75 MVA 13.8/69 kV z 10% vector YNd1
        """
    )
    case = only(found, "HV", "three-phase")
    assert abs(case.total) / base_current(found, "HV") == printed("2.73", 1.2)
    g1, g2 = case.terms
    pu = base_current(found, "HV")
    assert abs(g1.contribution) / pu == printed("1.82194617", 1.2)
    assert abs(g2.contribution) / pu == printed("0.91097308", 1.2)
    assert g1.partial is not None and g2.partial is not None
    assert abs(g1.partial.a) == printed("5716.85", 1.2)
    assert abs(g2.partial.a) == printed("2858.43", 1.2)
    assert math.degrees(cmath.phase(case.total)) == pytest.approx(-90)


def test_d03_five_buses() -> None:
    """W. D. Stevenson Jr. (4th ed.), Example 10.4, p. 265; part of the answers from memory."""
    lines = {"1-2": 0.168, "1-5": 0.126, "2-3": 0.126, "3-4": 0.336, "3-5": 0.21, "4-5": 0.252}
    text = ["three-phase 60 Hz", "base 100 MVA", *(f"bus B{n} 138 kV" for n in range(1, 6))]
    text += [
        "infeed G1 B1 z1 0+0.1111111111111111j pu",
        "infeed G3 B3 z1 0+0.13333333333333333j pu",
    ]
    text += [f"line L{k[0]}{k[2]} B{k[0]} > B{k[2]} z1 0+{x}j pu" for k, x in lines.items()]
    found = read("\n".join(text))
    case = only(found, "B4", "three-phase", branches=["L34@B3", "L45@B5"])
    pu = base_current(found, "B4")
    assert pu / abs(case.total) == printed("0.2321", 3)
    assert abs(case.total) / pu == printed("4.308", 3)
    volts = 138e3 / math.sqrt(3)
    assert abs(case.voltages["B3"].a) / volts == printed("0.6898", 3)
    assert abs(case.voltages["B5"].a) / volts == printed("0.5683", 3)
    first, second = case.relays
    assert abs(first.total) / pu == printed("2.053", 3)
    assert abs(second.total) / pu == printed("2.255", 3)


UNLOADED = """
three-phase 60 Hz
base 20 MVA
bus G 13.8 kV
generator G1 G 20 MVA 13.8 kV x1 25% x2 35% x0 10% neutral solid
"""


def test_d05_line_to_ground_on_an_unloaded_generator() -> None:
    """W. D. Stevenson Jr. (4th ed.), Example 12.1, p. 308; part of the answers from memory."""
    found = read(UNLOADED)
    case = only(found, "G", "line-ground")
    volts = 13.8e3 / math.sqrt(3)
    of = sequences(case.voltages["G"])
    assert of.positive.real / volts == printed("0.64286")
    assert of.negative.real / volts == printed("-0.50000")
    assert of.zero.real / volts == printed("-0.14286")
    assert base_current(found, "G") == printed("836.739521")
    assert abs(case.phases.a) == printed("3586")
    v = case.voltages["G"]
    assert math.degrees(cmath.phase(v.a - v.b)) == printed("77.78")
    assert abs(v.b) / volts == printed("1.013")


def test_d07_line_to_line_to_ground_on_an_unloaded_generator() -> None:
    """W. D. Stevenson Jr. (4th ed.), Example 12.3, p. 314; part of the answers from memory."""
    found = read(UNLOADED)
    case = only(found, "G", "line-line-ground")
    volts = 13.8e3 / math.sqrt(3)
    assert sequences(case.voltages["G"]).positive.real / volts == printed("0.237", 1.05, 0.002)
    assert abs(case.voltages["G"].a) / volts == printed("0.711", 1.05, 0.002)
    assert abs(case.earth) / base_current(found, "G") == printed("7.11", 1.05, 0.002)


def test_d09_three_results_on_a_line() -> None:
    """C. L. Wadhwa, Electrical Power Systems, Example 13.6, p. 335."""
    found = read(
        """
        three-phase 50 Hz
        base 30 MVA
        bus F 120 kV
        infeed S F z1 0+0.146j pu z0 0+0.06767j pu
        """
    )
    assert abs(only(found, "F", "line-ground").phases.a) == printed("1204", 1.05, 0.001)
    assert abs(only(found, "F", "line-line").phases.b) == printed("856.2", 1.05, 0.001)
    assert abs(only(found, "F", "line-line-ground").earth) == printed("1538", 1.05, 0.001)


def test_d11_bolted_and_through_five_ohms() -> None:
    """T. Gonen, Electric Power Transmission System Engineering, Examples 9.11-9.13, pp. 485-494."""
    found = read(
        """
        three-phase 60 Hz
        base 200 MVA
        bus F 230 kV
        generator S F 200 MVA 230 kV x1 26.18% x2 36.19% x0 56% neutral solid
        """
    )
    pu = base_current(found, "F")
    between = only(found, "F", "line-line")
    assert abs(between.sequence.positive) / pu == printed("1.6033", 1.05, 1e-6)
    assert abs(between.phases.b) / pu == printed("2.77705757", 1.05, 1e-6)
    both = only(found, "F", "line-line-ground")
    for value, text in zip(both.sequence, ("0.8151", "2.0763", "1.2612"), strict=True):
        assert abs(value) / pu == printed(text, 1.05, 1e-6)
    assert abs(both.phases.b) / pu == printed("3.13828", 1.05, 1e-6)
    assert math.degrees(cmath.phase(both.phases.b)) == printed("157.0721", 1.05, 1e-6)
    three = only(found, "F", "three-phase", fault_impedance=5)
    assert abs(three.phases.a) / pu == printed("3.8098", 1.05, 1e-6)
    assert math.degrees(cmath.phase(three.phases.a)) == printed("-85.87", 1.05, 1e-6)


def polar(size: float, degrees: float) -> complex:
    return cmath.rect(size, math.radians(degrees))


def test_d13_d15_symmetrical_components() -> None:
    """V. K. Mehta, R. Mehta, Principles of Power System, Examples 18.2-18.4, pp. 429-430."""
    of = Sequence(polar(27.29, 4.69), polar(57.98, 43.3), polar(18.97, 24.96))
    known = (polar(100, 30), polar(50, 300), polar(30, 180))
    for value, wanted in zip(phases(of), known, strict=True):
        assert abs(value - wanted) < 0.03  # three printed values of two decimals
    of = Sequence(3 + 1.33j, 10.85 + 10.13j, -1.85 - 5.46j)
    for value, wanted in zip(phases(of), (12 + 6j, 12 - 12j, -15 + 10j), strict=True):
        assert abs(value - wanted) < 0.02
    r, y, b = phases(Sequence(100, 200 - 100j, -100))
    assert abs(r) == printed("223.61", 1.2)
    assert abs(y) == printed("213", 1.2)
    assert abs(b) == printed("338.59", 1.2)
    for value, text in ((r, "-26.57"), (y, "-99.90"), (b, "66.2")):
        assert math.degrees(cmath.phase(value)) == printed(text, 1.2)


def test_d17_two_alternators_in_parallel() -> None:
    """V. K. Mehta, R. Mehta, Principles of Power System, Example 17.1, p. 402."""
    found = read(
        """
        three-phase 50 Hz
        bus B 12 kV
        generator A1 B 15 MVA 12 kV x1 30%
        generator A2 B 20 MVA 12 kV x1 50%
        """
    )
    assert abs(only(found, "B", "three-phase").phases.a) == printed("4330")


@pytest.mark.parametrize(("sections", "level"), [(3, "450.000"), (9, "613.636")])
def test_d19_tie_bar_reactors(sections: int, level: str) -> None:
    """V. K. Mehta, R. Mehta, Principles of Power System, Example 17.10, p. 412."""
    text = ["three-phase 50 Hz", "base 50 MVA", "bus TIE 11 kV"]
    for n in range(sections):
        text += [
            f"bus S{n} 11 kV",
            f"generator G{n} S{n} 50 MVA 11 kV x1 20%",
            f"reactor X{n} S{n} > TIE x 10%",
        ]
    case = only(read("\n".join(text)), "S0", "three-phase")
    assert abs(case.phases.a) * math.sqrt(3) * 11e3 / 1e6 == printed(level)


def test_d21_a_line_with_resistance() -> None:
    """V. K. Mehta, R. Mehta, Principles of Power System, Example 17.3, p. 404."""
    found = read(
        """
        three-phase 50 Hz
        base 10 MVA
        bus G 3.3 kV
        bus T 10 kV
        bus END 10 kV
        generator G1 G 10 MVA 3.3 kV x1 10%
        transformer T1 G > T 10 MVA 3.3/10 kV z 10% vector Yd11
        line L T > END z1 1+4j ohm
        """
    )
    for bus, text in (("END", "16440"), ("T", "50000")):
        case = only(found, bus, "three-phase")
        assert abs(case.phases.a) * math.sqrt(3) * 10e3 / 1e3 == printed(text)


def test_d22_three_generators() -> None:
    """V. K. Mehta, R. Mehta, Principles of Power System, Example 17.4, p. 405."""
    found = read(
        """
        three-phase 50 Hz
        bus LV 6.6 kV
        bus HV 33 kV
        generator A LV 10 MVA 6.6 kV x1 12%
        generator B LV 10 MVA 6.6 kV x1 12%
        generator C LV 5 MVA 6.6 kV x1 18%
        transformer T HV > LV 5 MVA 33/6.6 kV z 5% vector Dyn11
        """
    )
    for bus, text in (("LV", "194.4"), ("HV", "66")):
        case = only(found, bus, "three-phase")
        assert abs(case.phases.a) * math.sqrt(3) * case.volts / 1e6 == printed(text)


def test_d23_a_radial_system_at_480_volts() -> None:
    """US Army Corps of Engineers training example, as discussed on industrialmonitordirect.com."""
    found = read(
        """
        three-phase 60 Hz
        base 1 MVA
        bus UTILITY 13.8 kV
        bus SUB 4.16 kV
        bus LC 480 V
        infeed Utility UTILITY level 500 MVA
        transformer T1 UTILITY > SUB 3750 kVA 13.8/4.16 kV z 8% vector Dyn1
        transformer T2 SUB > LC 1000 kVA 4160/480 V z 4.75% vector Dyn1
        generator G LC 200 kVA 480 V x1 28%
        """
    )
    utility, generator = only(found, "LC", "three-phase").terms
    assert abs(utility.contribution) == printed("16982", 1.05, 0.0002)
    assert abs(generator.contribution) == printed("859", 1.05, 0.0002)


def test_d24_peak_factor() -> None:
    """IEC 60909-0, κ = 1.02 + 0.98 exp(-3R/X) (from memory)."""
    known = {0: "2.00", 0.05: "1.86", 0.07: "1.81", 0.1: "1.75", 0.15: "1.64", 0.3: "1.42",
             0.42: "1.30", 1.0: "1.07"}  # fmt: skip
    for ratio, text in known.items():
        assert standard.peak_factor(ratio) == printed(text)
        # of a fault behind one impedance, R/X at 20 Hz is that at 50 Hz
        machine = Machine("G", bus=Bus("B", 11e3), z=(None, ratio + 1j, ratio + 1j))
        assert only(system(machine), "B", "three-phase").peak_factor == printed(text)


def test_d26_transformer_correction() -> None:
    """IEC 60909-0 (2001/2016), network transformers, K_T (from memory)."""
    known = (
        (0.04, 1.05, "0.974"),
        (0.06, 1.05, "0.963"),
        (0.1, 1.1, "0.986"),
        (0.12, 1.1, "0.975"),
    )
    for reactance, c_max, text in known:
        assert standard.transformer_correction(c_max, reactance) == printed(text)
    found = read(
        """
        three-phase 50 Hz
        bus HV 110 kV
        bus MV 20 kV
        infeed Q HV z1 0+1e-9j ohm
        transformer T HV > MV 20 MVA 110/20 kV z 12% vector YNd5
        """
    )
    case = only(found, "MV", "three-phase", basis="equivalent-source")
    z = 1.1 * 20e3 / math.sqrt(3) / abs(case.phases.a)
    assert z / (0.12 * 20e3**2 / 20e6) == printed("0.975")


def test_d27_formulas_of_iec_60909() -> None:
    """IEC 60909-0, clause 4/7 (formulas from memory, numbers worked by themselves)."""
    machine = Machine("G", bus=Bus("B", 10e3), z=(0.3 + 2.4j, 0.1 + 1j, 0.12 + 1.1j), star=0j)
    found = {
        kind: only(system(machine), "B", kind, basis="equivalent-source")
        for kind in ("line-line", "line-ground", "line-line-ground")
    }
    assert abs(found["line-line"].phases.b) == printed("5209.585501")
    assert abs(found["line-ground"].phases.a) == printed("4205.914128")
    both = found["line-line-ground"]
    assert abs(both.earth) == printed("3390.027709")
    assert abs(both.phases.b) == printed("5543.783514")
    assert abs(both.phases.c) == printed("5502.575405")


def test_d28_first_cycle() -> None:
    """IEEE Std 551 practice, 1.6 at X/R 25 (from memory)."""
    assert standard.asymmetry_factor(25) == printed("1.60")
    assert standard.asymmetry_factor(math.inf) == printed("1.7321")
    machine = Machine("G", bus=Bus("B", 11e3), z=(None, 1 + 25j, 1 + 25j))
    case = only(system(machine), "B", "three-phase")
    assert case.x_over_r == pytest.approx(25)
    assert case.asymmetrical_rms / abs(case.phases.a) == printed("1.60")
    lossless = Machine("G", bus=Bus("B", 11e3), z=(None, 25j, 25j))
    case = only(system(lossless), "B", "three-phase")
    assert case.x_over_r is None and case.peak_factor == pytest.approx(2)
    assert case.asymmetrical_rms / abs(case.phases.a) == printed("1.7321")


def test_d29_four_faults_through_an_impedance() -> None:
    """H. Saadat, Power System Analysis, Example 10.5; the printed answers from memory.

    Its line-line impedance is between the phases, its line-line-ground impedance to earth only.
    """
    machine = Machine("G", bus=Bus("B", 10e3), z=(0.35j, 0.22j, 0.22j), star=0j)
    found = system(machine, base=100e6)  # 1 ohm is one per unit
    pu = base_current(found, "B")
    assert abs(only(found, "B", "three-phase", fault_impedance=0.1j).total) / pu == printed("3.125")
    case = only(found, "B", "line-ground", fault_impedance=0.1j)
    assert abs(case.sequence.zero) / pu == printed("0.9174")
    assert abs(case.phases.a) / pu == printed("2.7523")
    case = only(found, "B", "line-line", fault_impedance=0.1j)
    assert abs(case.sequence.positive) / pu == printed("1.8519")
    assert abs(case.phases.b) / pu == printed("3.2075")
    case = only(found, "B", "line-line-ground", ground_impedance=0.1j)
    assert abs(case.sequence.positive) / pu == printed("2.6017")
    assert abs(case.phases.b) / pu == printed("4.058")
    assert math.degrees(cmath.phase(case.phases.b)) == printed("165.93")


def test_d31_voltage_factors() -> None:
    """IEC 60909-0:2001 and :2016, table 1 (from memory)."""
    assert standard.voltage_factor(400, "max") == 1.05
    assert standard.voltage_factor(400, "min") == 0.95
    assert standard.voltage_factor(400, "max", 0.10) == 1.10
    assert standard.voltage_factor(20e3, "max") == 1.10
    assert standard.voltage_factor(110e3, "min") == 1.00


@pytest.mark.parametrize("seed", range(5))
def test_a_z_bus_of_numpy(seed: int) -> None:
    """Z = Y⁻¹ of each sequence, written here: currents, voltages, line currents at every bus."""
    grown, y, injected, (i, j) = meshed(seed)
    z_bus = {s: np.linalg.inv(y[s]) for s in (0, 1, 2)}
    before = z_bus[1] @ injected
    found = {(c.bus, c.type): c for c in fault(grown, branches=["L0"]).cases}
    first_line = grown.items["L0"].z[1]  # type: ignore[attr-defined]
    for n, bus in enumerate(grown.buses):
        z1, z2, z0 = (z_bus[s][n, n] for s in (1, 2, 0))
        case = found[bus, "line-ground"]
        current = before[n] / (z1 + z2 + z0)
        assert case.phases.a == pytest.approx(3 * current, rel=1e-9)
        for m, other in enumerate(grown.buses):
            of = Sequence(
                -z_bus[0][m, n] * current,
                before[m] - z_bus[1][m, n] * current,
                -z_bus[2][m, n] * current,
            )
            assert case.voltages[other] == pytest.approx(phases(of), abs=1e-6)
        # bolted three-phase: the current of the first line, from the difference of voltages
        drop = [before[m] - z_bus[1][m, n] * before[n] / z1 for m in (i, j)]
        relay = found[bus, "three-phase"].relays[0]
        assert relay.total == pytest.approx((drop[0] - drop[1]) / first_line, rel=1e-9)


def meshed(seed: int) -> tuple[OneLine, dict[int, Numbers], Numbers, tuple[int, int]]:
    """A random system of one level, its admittance matrices, EMF currents, ends of line L0."""
    chance, count = random.Random(seed), 9
    buses = [Bus(f"B{n}", 20e3) for n in range(count)]
    y = {s: np.zeros((count, count), complex) for s in (0, 1, 2)}
    injected, items = np.zeros(count, complex), []
    edges = [(chance.randrange(n), n) for n in range(1, count)]
    edges += [tuple(chance.sample(range(count), 2)) for _ in range(6)]  # type: ignore[misc]
    for number, (i, j) in enumerate(edges):
        z = tuple(complex(chance.uniform(0.1, 1), chance.uniform(0.5, 4)) for _ in range(2))
        items.append(
            Cable(f"L{number}", first=buses[i], second=buses[j], z=(z[0], z[1], z[1]))
        )  # fmt: skip
        for s in (0, 1, 2):
            admittance = 1 / z[1 if s else 0]
            y[s][i, i] += admittance
            y[s][j, j] += admittance
            y[s][i, j] -= admittance
            y[s][j, i] -= admittance
    for n in chance.sample(range(count), 4):
        z0, z1, z2 = (complex(0.2, chance.uniform(2, 9)) for _ in range(3))
        emf = cmath.rect(chance.uniform(11e3, 12e3), chance.uniform(-0.3, 0.3))
        items.append(Machine(f"G{n}", bus=buses[n], z=(z0, z1, z2), star=0.5 + 0j, volts=emf))  # type: ignore[arg-type]
        for s, z in ((0, z0 + 1.5), (1, z1), (2, z2)):
            y[s][n, n] += 1 / z
        injected[n] = emf / z1
    grown = replace(system(*items), buses={bus.name: bus for bus in buses})
    return grown, y, injected, edges[0]
