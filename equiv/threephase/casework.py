"""One fault as a case: currents, terms, partial currents, peak, voltages, relays."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from equiv.threephase.asymmetry import asymmetry
from equiv.threephase.cases import FaultCase, FaultTerm, Phases, phase_of_terms
from equiv.threephase.cases import Sequence as SequenceValues
from equiv.threephase.contributions import contributions
from equiv.threephase.coordinates.phase_coordinates import PhaseCoordinates
from equiv.threephase.grouping import Groups
from equiv.threephase.proof import Apart, apart, three_phase
from equiv.threephase.reasons import why
from equiv.threephase.relays import RelayFinder
from equiv.threephase.sequence.connection import term_weights
from equiv.threephase.sequence.faulted import (
    CANCELLED,
    AtBus,
    Fault,
    Faulted,
    per_volt,
    scaled_fault,
)
from equiv.threephase.sequence.sequences import machines
from equiv.threephase.sequence.solve import SystemSolution
from equiv.threephase.words import phase_of


class CaseMaker:
    """Makes cases of a system in one view; `slow` is the same system at 0.4 of its frequency."""

    def __init__(
        self,
        solution: SystemSolution,
        slow: SystemSolution,
        relays: Sequence[RelayFinder],
        again: PhaseCoordinates | None,
        by: str,
        reasons: Mapping[str, str],
    ) -> None:
        self.solution, self.slow, self.relays, self.again = solution, slow, relays, again
        self.reasons = reasons
        self.apart: list[Apart] = []
        """What proves the cases made so far."""
        self.bolted: dict[str, float] = {}
        """The three-phase current (A) of the buses so far."""
        system, view = solution.system, solution.view
        self.machines = machines(system, view)
        self.groups = Groups(system, [item.name for item in self.machines], by)

    def case(self, at: AtBus, slow: AtBus, fault: Fault) -> FaultCase:
        """The case of one fault."""
        found = Faulted(at, fault)
        if at.name not in self.bolted:
            self.bolted[at.name] = three_phase(at)
        again = self.again.fault(at.name, fault) if self.again else None
        if again:
            self.apart.append(apart(found, again, self.machines))
        phases = found.phases
        largest = max(map(abs, phases))
        slow_fault = scaled_fault(fault, self.slow)
        first = asymmetry(found.per_volt.positive, per_volt_of(slow, slow_fault), largest)
        positive = at.amperes
        return FaultCase(
            at.name,
            fault.type,
            at.bus.volts,
            phases,
            3 * found.current.zero * positive,
            SequenceValues(*(x * positive for x in found.current)),
            first.x_over_r,
            first.peak_factor,
            first.peak,
            first.asymmetrical_rms,
            self.terms(found),
            phase_of(phases, phase_of_terms(fault.type)),
            _without_rounding(again.currents, self.bolted[at.name]) if again else None,
            {bus: found.bus_voltages(bus) for bus in self.solution.buses},
            tuple(relay.relay(found, self.groups) for relay in self.relays),
            why(self.reasons, at.name, fault.type, at.voltage, at.z.of(0)),
            first.reason,
        )

    def terms(self, found: Faulted) -> tuple[FaultTerm, ...]:
        """What each source gives to the current of the phase that the terms are about."""
        partials = [found.partial(item.name, item.bus) for item in self.machines]
        if self.solution.view.basis == "superposition":
            factor = term_factor(found.fault.type, found.per_volt) * found.at.amperes
            values = self.groups.placed(self.solution.emfs, factor * found.at.terms)
            return self.groups.terms(values, partials)
        return contributions(found, self.groups, self.machines, partials)


def _without_rounding(currents: Phases, bolted: float) -> Phases:
    """Phase currents, of which what is nothing beside the bolted current is none."""
    return Phases(*(0j if abs(i) <= CANCELLED * bolted else i for i in currents))


def term_factor(kind: str, of: SequenceValues) -> complex:
    """The current of the phase that the terms are about, per volt before the fault."""
    return sum((w * x for w, x in zip(term_weights(kind), of, strict=True)), 0j)


def per_volt_of(at: AtBus, fault: Fault) -> complex:
    """I1 of a fault per volt before it."""
    return per_volt(at.z, fault, at.ohms, at.name).positive
