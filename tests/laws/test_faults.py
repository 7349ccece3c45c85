"""Laws of three-phase faults on random systems, and on small ones whose answer is known."""

from __future__ import annotations

import cmath
import math
import random
from dataclasses import replace

import numpy as np
import pytest
from laws.random_systems import GROUPS, Cable, Grower, Machine, Unit, group, system

import equiv
from equiv.errors import DoesNotExistError, NoUniqueSolutionError, UsageError
from equiv.network import Network
from equiv.threephase import work
from equiv.threephase.cases import TYPES, FaultCase, Phases
from equiv.threephase.fault import FaultResult, fault
from equiv.threephase.model import Bus, Item, OneLine
from equiv.threephase.sequence.composite import composite, isolate
from equiv.threephase.sequence.connection import EARTH_FAULTS
from equiv.threephase.sequence.displacement import no_load_angles, rotation
from equiv.threephase.sequence.sequences import amperes_of

A = cmath.rect(1, 2 * math.pi / 3)
HV, LV = Bus("HV", 33e3), Bus("LV", 11e3)


def grid(bus: Bus = HV, z0: complex | None = 0.6 + 6j, star: complex | None = 0j) -> Machine:
    return Machine("Grid", bus=bus, z=(z0, 0.5 + 5j, 0.5 + 5j), star=star)


def unit(
    windings: str, stars: tuple[complex | None, complex | None] = (None, None), tap: float = 1.0
) -> Unit:
    return Unit(
        "T", first=HV, second=LV, rated=(33e3 * tap, 11e3), group_of_windings=group(windings),
        z=(0.8 + 9j, 0.7 + 10j), stars=stars,
    )  # fmt: skip


def only(result: FaultResult) -> FaultCase:
    (case,) = result.cases
    return case


def close(one: complex, other: complex, within: float = 1e-9) -> bool:
    return abs(one - other) <= within * max(abs(one), abs(other))


@pytest.mark.parametrize("basis", ["superposition", "equivalent-source"])
@pytest.mark.parametrize("seed", range(40))
def test_phase_coordinates_and_sums_agree(seed: int, basis: str) -> None:
    grown = Grower(seed).grown()
    relays = [name for name, item in grown.items.items() if isinstance(item, Cable | Unit)]
    for fault_impedance, ground_impedance in ((0, 0), (0.3 + 0.1j, 0.7)):
        result = fault(
            grown, basis=basis, branches=relays,  # type: ignore[arg-type]
            fault_impedance=fault_impedance, ground_impedance=ground_impedance,
        )  # fmt: skip
        assert len(result.cases) == 4 * len(grown.buses)
        assert all(case.check is not None for case in result.cases)
        assert len(result.checks) == 4
        for check in result.checks:
            assert check.passed, check


@pytest.mark.parametrize("seed", range(24))
def test_impedances_and_ties_of_very_different_sizes(seed: int) -> None:
    """Cables of micro-ohms, loads of kilo-ohms, charging of nano-siemens, loose neutrals."""
    chance = random.Random(seed)
    items: list[Item] = []
    for item in Grower(seed, size=7).items:
        size = 10 ** chance.uniform(-4, 3)
        if isinstance(item, Cable):
            z0, z1, z2 = (size * (z or 0) for z in item.z)
            b0, b1 = (b * 10 ** chance.uniform(-7, 0) for b in item.b)
            items.append(replace(item, z=(z0, z1, z2), b=(b0, b1)))
        elif isinstance(item, Unit):
            first, second = (
                None if star is None else star * 10 ** chance.uniform(-3, 4) for star in item.stars
            )
            items.append(replace(item, stars=(first, second)))
        else:
            items.append(item)
    for basis in ("superposition", "equivalent-source"):
        result = fault(system(*items), basis=basis, branches=[item.name for item in items])  # type: ignore[arg-type]
        for check in result.checks:
            assert check.passed, check


def between(
    name: str, windings: str, first: Bus, second: Bus, tap: float = 1.0, stars: bool = True
) -> Unit:
    """A transformer with solidly earthed star points, or none."""
    of = group(windings)
    earthed = (
        0j if stars and of.first.neutral_out else None,
        0j if stars and of.second.neutral_out else None,
    )
    return Unit(
        name, first=first, second=second, rated=(first.volts * tap, second.volts),
        group_of_windings=of, z=(0.9 + 8j, 0.7 + 10j), stars=earthed,
    )  # fmt: skip


MV = Bus("MV", 6.6e3)
LOOPS = {
    "parallel": [("YNyn0", HV, LV, 1.05), ("YNyn0", HV, LV, 1.0)],
    "delta and zigzag": [("YNyn0", HV, LV, 1.05), ("Dzn0", HV, LV, 1.0), ("Dd0", HV, LV, 1.0)],
    "reversed": [("YNyn6", HV, LV, 1.05), ("Dd6", HV, LV, 1.0)],
    "ring": [("Dyn11", HV, LV, 1.0), ("YNd11", LV, MV, 1.0), ("YNyn10", HV, MV, 0.97)],
    "ring of stars": [("YNyn4", HV, LV, 1.0), ("YNyn10", LV, MV, 1.0), ("YNyn2", HV, MV, 0.97)],
}  # fmt: skip


@pytest.mark.parametrize("star", [0j, None])
@pytest.mark.parametrize("stars", [True, False])
@pytest.mark.parametrize("loop", LOOPS)
def test_loops_of_transformers(loop: str, stars: bool, star: complex | None) -> None:
    """Unequal ratios around a loop, which tie a zero-sequence network that nothing else ties."""
    items: list[Item] = [grid(star=star), Machine("M", bus=LV, z=(None, 0.1 + 2j, 0.1 + 2j))]
    items += [between(f"T{n}", *of, stars=stars) for n, of in enumerate(LOOPS[loop])]
    for basis in ("superposition", "equivalent-source"):
        result = fault(system(*items), basis=basis, branches=["T0@HV", "T1@LV"])  # type: ignore[arg-type]
        for check in result.checks:
            assert check.passed, check
    earth = {case.bus: abs(case.earth) for case in result.cases if case.type == "line-ground"}
    assert (earth["HV"] > 0) == (star == 0 or (stars and loop not in ("reversed", "ring")))


def test_the_random_systems_have_all_vector_groups() -> None:
    seen = {
        item.group_of_windings
        for seed in range(60)
        for item in Grower(seed).grown().items.values()
        if isinstance(item, Unit)
    }
    assert {group(text) for text in GROUPS} == seen


@pytest.mark.parametrize("text", GROUPS)
@pytest.mark.parametrize("turned", [False, True])
def test_each_vector_group_in_phase_coordinates(text: str, turned: bool) -> None:
    windings = group(text)
    stars: tuple[complex | None, complex | None] = (
        0.5 + 0.2j if windings.first.neutral_out else None,
        0.3 + 0.1j if windings.second.neutral_out else None,
    )
    t = unit(text, stars, tap=1.04)
    items: list[Item] = [t, Machine("G", bus=LV, z=(0.4j, 0.1 + 1.5j, 0.1 + 1.7j), star=2 + 0j)]
    feeder = Machine("F", bus=HV, z=(0.6 + 6j, 0.5 + 5j, 0.5 + 5j), star=0j)
    result = fault(system(*items, feeder), fault_impedance=0.1, branches=["T@HV", "T@LV"])
    assert all(check.passed for check in result.checks), result.checks
    # the same with the machines' places exchanged: the part of each side changes
    items = [t, Machine("G", bus=LV, z=(None, 0.1 + 1.5j, 0.1 + 1.7j))]
    feeder = Machine("F", bus=HV, z=(None, 0.5 + 5j, 0.5 + 5j))
    result = fault(system(*items, feeder))
    assert all(check.passed for check in result.checks), result.checks


@pytest.mark.parametrize("seed", range(12))
@pytest.mark.parametrize("type_", TYPES)
def test_the_composite_network_superposed_gives_the_terms(seed: int, type_: str) -> None:
    grown = Grower(seed, size=5).grown()
    bus = list(grown.buses)[seed % len(grown.buses)]
    ground = 0.4 if type_ in EARTH_FAULTS else 0
    case = only(fault(grown, bus, type=type_, fault_impedance=0.2j, ground_impedance=ground))
    network = composite(grown, bus, type_, 0.2j, ground)
    again = equiv.parse(equiv.write(network))
    assert isinstance(again, Network)
    amperes = amperes_of(grown.buses[bus], grown.base)
    terms = phase_terms(again, type_, amperes)
    for term in case.terms:
        assert abs(terms[term.source] - term.contribution) <= 1e-9 * abs(case.total) + 1e-12
    # one source alone, run again from its text
    name = case.terms[-1].source
    alone = equiv.parse(equiv.write(isolate(grown, name, bus, type_, 0.2j, ground).subcircuit))
    (value,) = phase_terms(alone, type_, amperes).values()
    assert abs(value - case.terms[-1].contribution) <= 1e-9 * abs(case.total) + 1e-12


def phase_terms(network: Network, type_: str, amperes: float) -> dict[str, complex]:
    """The terms of the phase current (A) from the superposed sequence currents."""
    found: dict[str, complex] = {}
    weights = {"1": 1, "2": 1, "0": 1} if type_ in TYPES[:2] else {"1": A**2, "2": A, "0": 1}
    for q in equiv.superpose(network).quantities:
        sequence = str(q.quantity).rstrip("'")[-1]
        weight = complex(weights[sequence])
        if type_ == "line-line":
            weight -= A  # I2 = -I1
        for term in q.frequencies[0].terms:
            value = weight * amperes * (term.contribution or 0)
            found[term.source] = found.get(term.source, 0) + value
    return found


@pytest.mark.parametrize("seed", range(6))
@pytest.mark.parametrize("basis", ["superposition", "equivalent-source"])
def test_the_base_power_changes_nothing(seed: int, basis: str) -> None:
    results = [
        fault(Grower(seed).grown(base), basis=basis, fault_impedance=0.1, branches=["M0"])  # type: ignore[arg-type]
        for base in (10e6, 730e6)
    ]
    for one, other in zip(*(r.cases for r in results), strict=True):
        size = max(map(abs, one.phases)) or 1.0
        for a, b in zip(values_of(one), values_of(other), strict=True):
            assert abs(a - b) <= 1e-9 * max(size, abs(a))


def _peak(case: FaultCase) -> list[float]:
    """Peak factor, peak and first-cycle rms; -1 where there is none."""
    found = (case.peak_factor, case.peak, case.asymmetrical_rms)
    return [-1.0 if each is None else each for each in found]


def values_of(case: FaultCase) -> list[complex]:
    found = [*case.phases, case.earth, *case.sequence, *_peak(case)]
    for term in case.terms:
        found += [term.contribution, *(term.partial or ())]
    for voltages in case.voltages.values():
        found += voltages
    for relay in case.relays:
        found += relay.phases
    return [*map(complex, found)]


@pytest.mark.parametrize("seed", range(10))
def test_terms_are_partial_currents_where_nothing_intervenes(seed: int) -> None:
    grown = Grower(seed, plain=True).grown()
    for case in fault(grown, type="three-phase").cases:
        for term in case.terms:
            assert term.partial is not None and term.partial_bus is not None
            steps = no_load_angles(grown)[term.partial_bus] - no_load_angles(grown)[case.bus]
            level = grown.buses[term.partial_bus].volts / case.volts
            carried = term.partial.a / rotation(1, steps) * level
            assert abs(carried - term.contribution) <= 1e-9 * abs(case.total)


@pytest.mark.parametrize("change", ["load", "emf", "charging"])
def test_terms_are_not_partial_currents_otherwise(change: str) -> None:
    feeder = Cable(
        "L", first=LV, second=(end := Bus("END", 11e3)), z=(1j, 0.2 + 1j, 0.2 + 1j),
        b=(0.0, 0.01 if change == "charging" else 0.0),
    )  # fmt: skip
    items: list[Item] = [grid(), unit("Dyn11", (None, 0j)), feeder]
    items.append(
        Machine("G", bus=end, z=(None, 0.1 + 2j, 0.1 + 2j), volts=7e3 if change == "emf" else None)
    )
    if change == "load":
        items.append(Machine("Load", bus=end, z=(None, 20 + 5j, 20 + 5j), load=True))
    stub = Bus("STUB", 11e3)
    items.append(Cable("S", first=LV, second=stub, z=(1j, 1j, 1j)))
    case = only(fault(system(*items), "STUB", type="three-phase"))
    (term,) = [t for t in case.terms if t.source == "G"]
    assert term.partial is not None
    assert abs(term.partial.a - term.contribution) > 1e-3 * abs(case.total)


@pytest.mark.parametrize("seed", range(10))
def test_contributions_of_the_equivalent_source_are_the_partial_currents(seed: int) -> None:
    grown = Grower(seed, plain=True).grown()
    for case in fault(grown, basis="equivalent-source").cases:
        assert not [term for term in case.terms if term.kind == "network"]
        total = sum(term.contribution for term in case.terms)
        assert abs(total - case.total) <= 1e-9 * max(abs(case.total), 1.0)
        for term in case.terms:
            assert term.partial is not None
            if case.type == "three-phase":
                level = grown.buses[term.partial_bus or ""].volts / case.volts
                assert close(abs(term.partial.a) * level, abs(term.contribution))


@pytest.mark.parametrize(("z0", "sign"), [(2j, 1), (5j, 0), (11j, -1)])
def test_line_to_ground_against_three_phase_by_zero_sequence(z0: complex, sign: int) -> None:
    source = Machine("G", bus=HV, z=(z0, 5j, 5j), star=0j)
    found = {c.type: c for c in fault(system(source), "HV").cases}
    difference = abs(found["line-ground"].phases.a) - abs(found["three-phase"].phases.a)
    assert round(difference / abs(found["three-phase"].phases.a), 9) * sign >= 0
    assert (abs(difference) < 1e-9) == (sign == 0)
    three = abs(found["three-phase"].phases.a)
    assert close(abs(found["line-line"].phases.b), three * math.sqrt(3) / 2)
    assert close(three, 33e3 / math.sqrt(3) / 5)


def test_an_unearthed_side_has_no_earth_current_and_rises_to_the_line_voltage() -> None:
    found = system(grid(), unit("Dy11"))
    case = only(fault(found, "LV", type="line-ground"))
    assert case.phases == Phases(0, 0, 0) and case.earth == 0
    assert case.peak is None and case.no_peak == "no current in the fault"
    assert case.reasons and "no path for earth-fault current at LV" in case.reasons[0]
    a, b, c = case.voltages["LV"]
    assert a == 0
    assert close(abs(b), 11e3) and close(abs(c), 11e3)
    assert close(abs(b - c), 11e3)
    two = {k.type: k for k in fault(found, "LV").cases}
    assert two["line-line-ground"].earth == 0
    assert close(two["line-line-ground"].phases.b, two["line-line"].phases.b)
    # both faulted phases are at earth, the sound one at 1.5 of its phase voltage
    sound = two["line-line-ground"].voltages["LV"]
    assert sound.b == 0 and sound.c == 0
    assert close(abs(sound.a), 1.5 * 11e3 / math.sqrt(3))


def test_the_charging_of_an_unearthed_network_is_its_earth_fault_current() -> None:
    end = Bus("END", 11e3)
    b0 = 2e-5
    cable = Cable("C", first=LV, second=end, z=(0.3j, 0.1j, 0.1j), b=(b0, 0.0))
    found = system(grid(), unit("Dyn11"), cable)
    case = only(fault(found, "LV", type="line-ground"))
    # 3·E·jωC0, the series impedances being small beside the charging (common practice)
    assert close(case.earth, 3 * 11e3 / math.sqrt(3) * 1j * b0, 1e-3)
    assert case.check is not None and close(case.check.a, case.phases.a)


@pytest.mark.parametrize(("clock", "degrees"), [(1, -30), (11, 30), (5, -150), (7, 150)])
def test_the_low_side_is_shifted_by_the_clock(clock: int, degrees: int) -> None:
    """IEC 60076-1: Dyn11, the low side leads by 30 degrees; negative sequence the other way."""
    found = system(grid(), unit(f"Dyn{clock}", (None, 0j)))
    balanced = only(fault(found, "LV", type="three-phase"))
    relay = only(fault(found, "LV", type="three-phase", branches=["T"])).relays[0]
    into = relay.phases.a * 33e3 / 11e3
    # seen from LV, what HV carries is behind by what LV is ahead
    assert close(into, balanced.phases.a * cmath.rect(1, math.radians(-degrees)))
    unbalanced = only(fault(found, "LV", type="line-line", branches=["T"]))
    currents = np.array(unbalanced.relays[0].phases) * 3
    positive = (currents * [1, A, A**2]).sum() / 3
    negative = (currents * [1, A**2, A]).sum() / 3
    i = unbalanced.sequence
    assert close(positive, i.positive * cmath.rect(1, math.radians(-degrees)))
    assert close(negative, i.negative * cmath.rect(1, math.radians(degrees)))


def test_a_line_to_line_fault_behind_a_delta_star_unit() -> None:
    """One phase of the other side carries twice the current of the two others (common practice)."""
    relay = only(
        fault(system(grid(), unit("Dyn11", (None, 0j))), "LV", type="line-line", branches=["T"])
    ).relays[0]
    sizes = sorted(map(abs, relay.phases))
    assert close(sizes[2], 2 * sizes[0]) and close(sizes[0], sizes[1])


def test_relay_impedance_is_the_line_to_the_fault_and_infeed_raises_it() -> None:
    middle, end = Bus("MID", 33e3), Bus("END", 33e3)
    z = 1 + 4j
    items: list[Item] = [
        grid(),
        Cable("L1", first=HV, second=middle, z=(3 * z, z, z)),
        Cable("L2", first=middle, second=end, z=(3 * z, z, z)),
    ]
    radial = only(fault(system(*items), "END", type="three-phase", branches=["L1"])).relays[0]
    assert radial.impedance is not None and close(radial.impedance, 2 * z)
    assert radial.infeed_factor is not None and close(radial.infeed_factor, 1)
    items.append(Machine("G", bus=middle, z=(None, 6j, 6j)))
    for type_ in ("three-phase", "line-line"):
        fed = only(fault(system(*items), "END", type=type_, branches=["L1"])).relays[0]
        assert fed.impedance is not None and fed.infeed_factor is not None
        # Z = Z_L1 + (I_path/I_relay)·Z_L2 with the same current in phase (common practice)
        assert close(fed.impedance, z + fed.infeed_factor * z)
        assert abs(fed.impedance) > abs(2 * z)
    assert (
        only(fault(system(*items), "END", type="three-phase", branches=["L1@MID"])).relays[0].bus
        == "MID"
    )


@pytest.mark.parametrize("basis", ["superposition", "equivalent-source"])
@pytest.mark.parametrize("seed", range(8))
def test_currents_into_all_items_of_a_bus_and_the_fault_are_zero(seed: int, basis: str) -> None:
    """Kirchhoff in each phase, from relays at every end of every item."""
    grown = Grower(seed).grown()
    ends = []
    for name, item in grown.items.items():
        buses = (item.first, item.second) if isinstance(item, Cable | Unit) else (item.bus,)  # type: ignore[attr-defined]
        ends += [f"{name}@{bus.name}" for bus in buses]
    for case in fault(grown, basis=basis, fault_impedance=0.2j, branches=ends).cases:  # type: ignore[arg-type]
        for bus, at in grown.buses.items():
            into = np.sum([relay.phases for relay in case.relays if relay.bus == bus], axis=0)
            if bus == case.bus:
                into = into + np.array(case.phases)
            size = (max(map(abs, case.phases)) or 1.0) * case.volts / at.volts
            assert np.abs(into).max() <= 1e-8 * max(size, 1.0), (case.type, case.bus, bus)


def test_groups_are_sums_of_their_members() -> None:
    items: list[Item] = [grid(), unit("Dyn11", (None, 0j))]
    items += [Machine(f"M{n}", bus=LV, z=(None, (2 + n) * 1j, 2j), group="motors") for n in (1, 2)]
    single = only(fault(system(*items), "LV", type="line-line"))
    grouped = only(fault(system(*items), "LV", type="line-line", by="group"))
    motors = grouped.terms[-1]
    assert (motors.source, motors.kind, motors.members) == ("motors", "group", ("M1", "M2"))
    assert close(motors.contribution, sum(t.contribution for t in single.terms[1:]))
    assert motors.partial is not None and single.terms[1].partial and single.terms[2].partial
    assert close(motors.partial.b, single.terms[1].partial.b + single.terms[2].partial.b)


@pytest.mark.parametrize("basis", ["superposition", "equivalent-source"])
@pytest.mark.parametrize("seed", range(6))
def test_the_survey_is_the_cases(seed: int, basis: str, monkeypatch: pytest.MonkeyPatch) -> None:
    grown = Grower(seed, size=8).grown()
    one_by_one = fault(grown, basis=basis, fault_impedance=0.2, ground_impedance=0.1)  # type: ignore[arg-type]
    monkeypatch.setattr(work, "FULL_UP_TO", 0)
    at_once = fault(grown, basis=basis, fault_impedance=0.2, ground_impedance=0.1)  # type: ignore[arg-type]
    assert all(check.passed for check in at_once.checks)
    for one, many in zip(one_by_one.cases, at_once.cases, strict=True):
        assert (one.bus, one.type) == (many.bus, many.type)
        size = max(map(abs, one.phases)) or 1.0
        for a, b in zip(
            (*one.phases, one.earth, one.total, *_peak(one)),
            (*many.phases, many.earth, many.total, *_peak(many)),
            strict=True,
        ):
            assert abs(a - b) <= 1e-9 * size
        known = {term.source: term.contribution for term in one.terms}
        for term in many.terms:
            if term.kind != "network":
                assert abs(known[term.source] - term.contribution) <= 1e-9 * size
    for one_type, many_type in zip(one_by_one.surveys, at_once.surveys, strict=True):
        assert np.allclose(one_type.totals, many_type.totals, rtol=1e-9)
        peaks = [np.array(each.peaks, float) for each in (one_type, many_type)]  # None is nan
        assert np.allclose(*peaks, rtol=1e-9, equal_nan=True)
        assert list(one_type.peak_phases) == list(many_type.peak_phases)
        assert np.allclose(one_type.earth, many_type.earth, rtol=1e-9)


def test_earth_faults_without_data_are_refused_or_left_out() -> None:
    end = Bus("END", 11e3)
    cable = Cable("C7", first=LV, second=end, z=(None, 0.1j, 0.1j))
    found = system(grid(), unit("Dyn11", (None, 0j)), cable)
    everything = fault(found)
    left = {(case.bus, case.type) for case in everything.cases}
    assert ("END", "line-ground") not in left and ("LV", "line-line-ground") not in left
    assert ("HV", "line-ground") in left and ("END", "line-line") in left
    assert any(c.code == "no-zero-sequence" and "C7" in c.message for c in everything.cautions)
    with pytest.raises(DoesNotExistError, match="C7"):
        fault(found, "END", type="line-ground")
    with pytest.raises(DoesNotExistError, match="C7"):
        composite(found, "END", "line-ground")


def test_a_bus_that_no_source_feeds() -> None:
    island, load = Bus("ISLAND", 11e3), Bus("LOAD", 11e3)
    line = Cable("L", first=island, second=load, z=(1j, 1j, 1j))
    found = system(grid(), line)
    for case in fault(found, "ISLAND").cases:
        assert case.phases == Phases(0, 0, 0)
        assert case.reasons == ("no source feeds ISLAND",)
        assert case.check is not None and max(map(abs, case.check)) < 1e-9


def test_nothing_limits_the_current() -> None:
    source = Machine("G", bus=HV, z=(0j, 0j, 0j), star=0j)
    with pytest.raises(NoUniqueSolutionError, match="not bounded"):
        fault(system(source), "HV", type="line-ground")


def test_wrong_words() -> None:
    found = system(grid())
    with pytest.raises(UsageError, match="did you mean BOARD"):
        fault(system(grid(Bus("BOARD", 33e3))), "BORD")
    with pytest.raises(UsageError, match="line-line"):
        fault(found, type="line-lin")
    with pytest.raises(UsageError, match="no branch called"):
        fault(found, branches=["X"])
    with pytest.raises(UsageError, match="does not end at"):
        fault(found, branches=["Grid@LV"])
    with pytest.raises(UsageError, match="three-phase"):
        fault(equiv.parse("resistor R a gnd 1 ohm"))


def test_vector_groups_around_a_loop_must_agree() -> None:
    one, other = unit("Dyn11", (None, 0j)), unit("Dyn1", (None, 0j))
    both = OneLine(
        {"HV": HV, "LV": LV},
        {"G": grid(), "T1": one, "T2": Unit(**{**vars(other), "name": "T2"})},
        50.0,
    )
    with pytest.raises(UsageError, match="disagree"):
        fault(both)


def test_names_with_dots_do_not_meet() -> None:
    end = Bus("HV.1", 33e3)
    items: list[Item] = [
        Machine("L", bus=HV, z=(6j, 5j, 5j), star=0j),
        Machine("L.1", bus=end, z=(6j, 7j, 7j), star=0j),
        Cable("HV", first=HV, second=end, z=(3j, 1j, 1j)),
    ]
    result = fault(system(*items))
    assert all(check.passed for check in result.checks)
    assert len(composite(system(*items), "HV.1", "line-ground").sources) == 2
