"""How far a fault is from the same fault in phase coordinates."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import NamedTuple

from equiv.analyses.result import Check
from equiv.errors import NoUniqueSolutionError
from equiv.threephase.cases import FaultCase, FaultTerm, Phases
from equiv.threephase.coordinates.phase_coordinates import Again
from equiv.threephase.model import OneLine, Shunt
from equiv.threephase.sequence.connection import EARTH_FAULTS
from equiv.threephase.sequence.faulted import AtBus, Fault, Faulted
from equiv.threephase.sequence.sequences import amperes_of

TERM_SUM_LIMIT = 1e-9
PHASE_LIMIT = 1e-9
SUM_CHECKS = {
    "superposition": "sum of the terms against all sources at once",
    "equivalent-source": "sum of the contributions against the fault current",
}
SMALLEST = 1e-6
"""Of the bolted current: what is smaller has lost digits to it."""


class Apart(NamedTuple):
    """Relative differences of phase currents, of partial currents and bus voltages."""

    currents: float
    partials: float
    voltages: float


def apart(found: Faulted, again: Again, machines: Iterable[Shunt]) -> Apart:
    """A fault against itself in phase coordinates.

    Voltages to earth are compared where the fault is one to earth and the zero-sequence network
    joins the bus to it, voltages between phases elsewhere: a part that floats has no other.

    Currents are relative to the largest phase current into the fault (no less than a millionth of
    the bolted current, which sums with it leave no more digits); where that is exactly zero, and
    for partial currents, to the bolted three-phase current of the bus.
    """
    at, system = found.at, found.solution.system
    bolted = three_phase(at)
    largest = max(map(abs, found.phases))
    largest = max(largest, SMALLEST * bolted) if largest else bolted
    currents = _most(found.phases, again.currents) / largest
    partials = voltages = 0.0
    ties, earthed = found.solution.of[0].ties, found.fault.type in EARTH_FAULTS
    level = max(largest, bolted) / at.amperes
    for item in machines:
        off = _most(found.partial(item.name, item.bus), again.delivered[item.name])
        partials = max(partials, off / amperes_of(item.bus, system.base) / level)
    for name, bus in system.buses.items():
        pair = (found.bus_voltages(name), again.voltages[name])
        if not (earthed and ties.label[name] == ties.label[at.name]):
            pair = (_between(pair[0]), _between(pair[1]))
        voltages = max(voltages, _most(*pair) / bus.volts)
    return Apart(currents, partials, voltages)


def _most(one: Phases, other: Phases) -> float:
    return max(abs(a - b) for a, b in zip(one, other, strict=True))


def _between(of: Phases) -> Phases:
    return Phases(of.a - of.b, of.b - of.c, of.c - of.a)


def three_phase(at: AtBus) -> float:
    """The size of the bolted three-phase current (A) at a bus; the base current where none is."""
    try:
        size = abs(Faulted(at, Fault("three-phase")).current.positive)
    except NoUniqueSolutionError:
        size = 0.0
    return (size or 1.0) * at.amperes


def checks_of(
    system: OneLine,
    basis: str,
    cases: Sequence[FaultCase],
    found: Sequence[Apart],
    bolted: Mapping[str, float],
) -> tuple[Check, ...]:
    """The sums of the terms, and what was found again in phase coordinates.

    `bolted` is the three-phase current (A) of each faulted bus.
    """
    relays = basis == "superposition"  # the source at the fault is one term there
    sums = max((_sum_off(system, case, bolted[case.bus], relays) for case in cases), default=0.0)
    checks = [Check(SUM_CHECKS[basis], sums, TERM_SUM_LIMIT)]
    if found:
        names = ("phase currents", "partial currents", "bus voltages")
        checks += [
            Check(f"{name} against phase coordinates", max(values), PHASE_LIMIT)
            for name, values in zip(names, zip(*found, strict=True), strict=True)
        ]
    return tuple(checks)


def _sum_off(system: OneLine, case: FaultCase, bolted: float, relays: bool) -> float:
    """How far terms are from their totals; a relay's against the bolted current at its level."""
    gross = sum(abs(term.contribution) for term in case.terms)
    worst = _off(case.terms, case.total, gross)
    for relay in case.relays if relays else ():
        level = case.volts / system.buses[relay.bus].volts
        own = sum(abs(term.contribution) for term in relay.terms)
        worst = max(worst, _off(relay.terms, relay.total, max(own, bolted * level)))
    return worst


def _off(terms: Iterable[FaultTerm], total: complex, gross: float) -> float:
    off = abs(sum(term.contribution for term in terms) - total)
    return off / gross if gross else off
