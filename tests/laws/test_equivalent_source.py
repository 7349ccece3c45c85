"""The equivalent voltage source at the fault: voltages, contributions, and what is told of them."""

from __future__ import annotations

import cmath
import math
from typing import Any

import numpy as np
import pytest
from laws.random_systems import Cable, Grower, Machine, Unit, group, system
from laws.test_faults import LOOPS, between

import equiv
from equiv.threephase.cases import FaultCase, FaultTerm, Phases
from equiv.threephase.casework import CaseMaker
from equiv.threephase.coordinates.phase_coordinates import PhaseCoordinates
from equiv.threephase.fault import FaultResult, fault
from equiv.threephase.model import Bus, Item, OneLine, View
from equiv.threephase.sequence.faulted import Faulted
from equiv.threephase.sequence.solve import SystemSolution
from equiv.threephase.standard import transformer_correction

HV, LV = Bus("HV", 33e3), Bus("LV", 11e3)
STANDARD: dict[str, Any] = {"basis": "equivalent-source"}
RADIAL = """three-phase 50 Hz
bus GRID 33 kV
bus MAIN 6.6 kV
bus PUMP 6.6 kV
infeed Utility GRID level 500 MVA x/r 10 z0/z1 1
transformer T GRID > MAIN 10 MVA 33/6.9 kV z 8% x/r 10 vector Yd1
line L MAIN > PUMP 2 km z1 0.1+0.1j ohm/km z0 0.3+0.3j ohm/km
"""


def cases(text: str | OneLine, *buses: str, **options: Any) -> list[FaultCase]:
    found = equiv.parse(text) if isinstance(text, str) else text
    result = fault(found, *buses, **STANDARD, **options)
    assert all(check.passed for check in result.checks), result.checks
    return list(result.cases)


def said(result: FaultResult) -> str:
    """What stands above and below the tables."""
    return " ".join(
        words for table in result.tables() for words in (*table.subtitles, *table.notes)
    )


def off(result: FaultResult, words: str) -> float:
    (value,) = [abs(check.value) for check in result.checks if check.name.startswith(words)]
    return float(value)


def test_voltages_and_impedances_follow_the_ratio_between() -> None:
    """Worked by hand: a relay before a unit of 33/6.9 kV sees the unit, and the line through it."""
    (case,) = cases(RADIAL, "PUMP", type="three-phase", branches=["T", "L"])
    pu = cmath.rect(0.08, math.atan(10))
    z_unit = transformer_correction(1.10, pu.imag) * pu * 33e3**2 / 10e6
    z_line = 0.2 + 0.2j
    unit, line = case.relays
    assert unit.impedance == pytest.approx(z_unit + (33 / 6.9) ** 2 * z_line, rel=1e-12)
    assert line.impedance == pytest.approx(z_line, rel=1e-12)
    # the source makes c·Un at PUMP, and 33/6.9 of it at GRID, less what the infeed drops
    z_grid = 1.1 * cmath.rect(33e3**2 / 500e6, math.atan(10))
    whole = z_grid + z_unit + (33 / 6.9) ** 2 * z_line
    no_load = 1.1 * 6.6e3 / math.sqrt(3) * 33 / 6.9
    left = abs(no_load * (1 - z_grid / whole))
    assert abs(case.voltages["GRID"].a) == pytest.approx(left, rel=1e-12)
    assert abs(case.voltages["PUMP"].a) == 0


def test_far_from_the_fault_the_voltage_is_that_of_no_load() -> None:
    """A bus that the fault does not pull down: c·Un/√3 of the faulted bus, by the ratio between."""
    text = RADIAL.replace("line L", "bus FAR 400 V\ntransformer T2 GRID > FAR 1 kVA 33/0.42 kV "
                          "z 4% vector Dyn11 neutral2 solid\nline L")  # fmt: skip
    stiff = text.replace("level 500 MVA", "level 500000000 MVA")
    case = cases(stiff, "FAR", type="three-phase")[0]
    for bus, level in (("GRID", 33 / 0.42), ("MAIN", 6.9 / 0.42), ("PUMP", 6.9 / 0.42)):
        wanted = 1.05 * 400 / math.sqrt(3) * level
        assert abs(case.voltages[bus].a) == pytest.approx(wanted, rel=1e-6)


@pytest.mark.parametrize("loop", LOOPS)
def test_no_load_voltages_where_ratios_around_a_loop_disagree(loop: str) -> None:
    """With no machine that takes current, found again in phase coordinates."""
    items: list[Item] = [Machine("G", bus=HV, z=(6j, 0.5 + 5j, 0.5 + 5j), star=0j)]
    items += [between(f"T{n}", *of) for n, of in enumerate(LOOPS[loop])]
    found = fault(system(*items), **STANDARD)
    assert off(found, "bus voltages") < 1e-9
    assert off(found, "sum of the contributions") < 1e-9


def test_two_units_of_unequal_ratio_divide_the_no_load_voltage() -> None:
    """By hand: HV drives LV through two ratios, and the leakages divide their difference."""
    taps = (1.05, 1.0)
    units = [between(f"T{n}", "YNyn0", HV, LV, tap=tap) for n, tap in enumerate(taps)]
    weak = Machine("G", bus=HV, z=(None, 1e9j, 1e9j))
    found = system(weak, *units)
    # no current out of LV: Σ r(e - r·v)/z = 0, e at HV, both with the same z
    level = sum(taps) / sum(r * r for r in taps)
    profile = SystemSolution(found, View("equivalent-source"), ("HV",)).profile("HV")
    assert profile == pytest.approx([1, level], rel=1e-12)
    assert cases(found, "HV", type="three-phase")[0].voltages["HV"] == Phases(0, 0, 0)


def test_the_charging_of_lines_is_in_the_zero_sequence_alone() -> None:
    """IEC 60909-0:2016, clause 5 (from memory): shunts are left out but in the zero sequence."""
    text = """three-phase 50 Hz
    bus A 110 kV
    bus B 110 kV
    infeed U A level 2000 MVA x/r 20 z0/z1 1
    line L A > B 80 km z1 0.05+0.12j ohm/km z0 0.3+0.4j ohm/km b1 {} uS/km b0 {} uS/km count 2
    """
    none, with_b1, with_b0 = (
        {case.type: case for case in cases(text.format(*b), "B")}
        for b in ((0, 0), (100, 0), (0, 70))
    )
    grid = 1.1 * cmath.rect(110e3**2 / 2e9, math.atan(20))
    line = 40 * (0.05 + 0.12j)
    current = 1.1 * 110e3 / math.sqrt(3) / (grid + line)
    for case in (none, with_b1, with_b0):
        assert case["three-phase"].total == pytest.approx(current, rel=1e-9)
    assert with_b1["line-ground"].total == pytest.approx(none["line-ground"].total, rel=1e-12)
    # by hand: half of the charging beyond the series impedance, half before it
    half, z0 = 1j * 70e-6 * 80 * 2 / 2, 40 * (0.3 + 0.4j)
    zero = 1 / (half + 1 / (z0 + 1 / (half + 1 / grid)))
    wanted = 3 * 1.1 * 110e3 / math.sqrt(3) / (2 * (grid + line) + zero)
    assert with_b0["line-ground"].total == pytest.approx(wanted, rel=1e-9)
    (network,) = [term for term in with_b0["line-ground"].terms if term.kind == "network"]
    bus_b = with_b0["line-ground"].sequence.zero * zero
    bus_a = bus_b * (1 / (half + 1 / grid)) / (z0 + 1 / (half + 1 / grid))
    # what the capacitances of both ends give of I0, and so of the phase current I0 + I1 + I2
    assert network.contribution == pytest.approx(half * (bus_a + bus_b), rel=1e-9)


def test_the_checks_can_fail(monkeypatch: pytest.MonkeyPatch) -> None:
    """A wrong voltage elsewhere, and a term that is left out, are noticed."""
    grown = Grower(3).grown()
    true = Faulted.bus_voltages

    def wrong(self: Faulted, bus: str) -> Phases:
        found = true(self, bus)
        return found if bus == self.at.name else Phases(*(1.001 * v for v in found))

    monkeypatch.setattr(Faulted, "bus_voltages", wrong)
    assert off(fault(grown, **STANDARD), "bus voltages") > 1e-6
    monkeypatch.undo()

    def without(self: Any, found: Faulted) -> tuple[FaultTerm, ...]:
        return tuple(term for term in terms(self, found) if term.kind != "network")

    terms = CaseMaker.terms
    monkeypatch.setattr(CaseMaker, "terms", without)
    units = [between(f"T{n}", *of) for n, of in enumerate(LOOPS["parallel"])]
    machine = Machine("M", bus=LV, z=(None, 2j, 2j))
    assert off(fault(system(machine, *units), **STANDARD), "sum of the contributions") > 1e-6


def test_a_relay_of_the_one_source_is_not_said_to_be_checked() -> None:
    found = fault(equiv.parse(RADIAL), "PUMP", type="three-phase", branches=["L"], **STANDARD)
    (terms,) = [t for t in found.tables() if t.name.startswith("relay terms")]
    assert not [note for note in terms.notes if "limit" in note]


@pytest.mark.parametrize("basis", ["superposition", "equivalent-source"])
@pytest.mark.parametrize("type_", ["three-phase", "line-ground"])
def test_a_relay_is_in_one_of_the_items_in_parallel(basis: Any, type_: str) -> None:
    """Three lines written as one are, for a relay, one of three written one by one."""
    head = RADIAL.partition("line L")[0].replace("vector Yd1", "vector Dyn1 neutral2 solid")
    line = "line {} MAIN > PUMP 2 km z1 0.1+0.1j ohm/km z0 0.3+0.3j ohm/km {}\n"
    together = equiv.parse(head + line.format("L", "count 3"))
    single = equiv.parse(head + "".join(line.format(f"L{n}", "") for n in range(3)))
    options: dict[str, Any] = {"type": type_, "basis": basis}
    result = fault(together, "PUMP", branches=["L"], **options)
    one = result.cases[0].relays[0]
    other = fault(single, "PUMP", branches=["L1"], **options).cases[0].relays[0]
    assert (one.parallel, other.parallel) == (3, 1)
    assert one.phases == pytest.approx(other.phases, rel=1e-9, abs=1e-6)
    assert [t.contribution for t in one.terms] == pytest.approx(
        [t.contribution for t in other.terms], rel=1e-9
    )
    assert one.impedance == pytest.approx(other.impedance, rel=1e-9)
    assert one.infeed_factor == pytest.approx(other.infeed_factor, rel=1e-9)
    assert abs(one.infeed_factor or 0) == pytest.approx(3, rel=1e-9)
    assert "one of 3 in parallel" in said(result)
    assert all(check.passed for check in result.checks)


def test_partial_currents_of_several_machines_say_so() -> None:
    text = RADIAL + "motor M PUMP 300 kVA 6.6 kV start 5 x/r 8 count 4\n"
    found = fault(equiv.parse(text), "PUMP", type="three-phase", **STANDARD)
    assert "M: 4 in parallel together." in said(found)
    terms = {term["source"]: term for term in found.data()["faults"][0]["terms"]}
    assert (terms["M"]["parallel"], terms["Utility"]["parallel"]) == (4, 1)
    one = fault(equiv.parse(text.replace(" count 4", "")), "PUMP", type="three-phase", **STANDARD)
    partials = [c.cases[0].terms[1].partial for c in (found, one)]
    assert partials[0] and partials[1]
    assert partials[0].a == pytest.approx(4 * partials[1].a, rel=1e-9)


def test_a_survey_says_why_currents_are_zero() -> None:
    text = RADIAL + "bus DEAD 11 kV\nbus END 11 kV\nline X DEAD > END z1 1j ohm z0 3j ohm\n"
    found = fault(equiv.parse(text), type="line-ground")
    notes = " ".join(found.tables()[0].notes)
    assert notes.count("No source feeds DEAD and END.") == 1
    assert notes.count("No path for earth-fault current at MAIN and PUMP: ") == 1
    for case, row in zip(found.cases, found.tables()[0].rows, strict=True):
        assert bool(case.reasons) == (row.cells[2] == 0)


def test_where_it_is_less_than_the_standard() -> None:
    """Each caution in its case only."""
    machine = "generator G MAIN 3 MVA 6.6 kV x1 15% x0 5% x/r 25\n"

    def codes(text: str, **options: Any) -> set[str]:
        return {caution.code for caution in fault(equiv.parse(text), "MAIN", **options).cautions}

    only = {"generators", "warm-conductors", "smallest-level"}
    assert not codes(RADIAL + machine, case="min") & only
    assert codes(RADIAL, **STANDARD) & only == set()
    assert codes(RADIAL + machine, **STANDARD) & only == {"generators"}
    assert codes(RADIAL, **STANDARD, case="min") & only == {"warm-conductors", "smallest-level"}


def test_what_is_null_has_its_reason() -> None:
    text = RADIAL + "bus DEAD 11 kV\nbus END 11 kV\nline X DEAD > END z1 1j ohm z0 3j ohm\n"
    found = fault(equiv.parse(text), "DEAD", "MAIN", type="three-phase", branches=["X"])
    dead, live = found.data()["faults"]
    assert dead["x_over_r"] is None and dead["x_over_r_reason"]
    assert live["x_over_r"] and live["x_over_r_reason"] is None
    assert (dead["reasons"], live["reasons"]) == (["no source feeds DEAD"], [])
    relay = live["relays"][0]
    assert relay["infeed_factor"] is None and relay["infeed_factor_reason"]
    assert relay["impedance"] is None and relay["impedance_reason"]


def test_the_profile_in_phases_is_not_that_of_the_sequences() -> None:
    """Phase coordinates find no-load voltages from windings: a delta turns them."""
    unit = Unit("T", first=HV, second=LV, rated=(33e3 * 1.04, 11e3),
                group_of_windings=group("Dyn11"), z=(9j, 10j), stars=(None, 0j))  # fmt: skip
    grid = Machine("G", bus=HV, z=(6j, 5j, 5j), star=0j)
    cable = Cable("C", first=LV, second=Bus("END", 11e3), z=(1j, 0.3j, 0.3j), b=(1e-4, 0.0))
    found = system(grid, unit, cable)
    again = PhaseCoordinates(found, View("equivalent-source"), ("END",))
    profile = again._profile("END").reshape(3, 3)
    at_hv, at_lv, at_end = profile[:, 0]
    assert at_lv == pytest.approx(at_end, rel=1e-12)
    assert at_hv / at_lv == pytest.approx(1.04 * cmath.rect(1, -math.pi / 6), rel=1e-12)
    assert np.abs(profile.sum(axis=1)).max() < 1e-12
