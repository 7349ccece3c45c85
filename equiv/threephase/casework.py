"""One fault as a case: currents, terms, partial currents, peak, voltages, relays."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence

import numpy as np

from equiv.threephase.cases import FaultCase, FaultTerm, Phases
from equiv.threephase.cases import Sequence as SequenceValues
from equiv.threephase.coordinates.phase_coordinates import PhaseCoordinates
from equiv.threephase.grouping import Groups
from equiv.threephase.model import Shunt
from equiv.threephase.proof import Apart, apart, three_phase
from equiv.threephase.relays import RelayFinder
from equiv.threephase.sequence.connection import EARTH_FAULTS, term_weights
from equiv.threephase.sequence.faulted import (
    CANCELLED,
    AtBus,
    Fault,
    Faulted,
    per_volt,
    scaled_fault,
)
from equiv.threephase.sequence.networks import elements_of
from equiv.threephase.sequence.sequences import ToEarth, amperes_of, there
from equiv.threephase.sequence.solve import SystemSolution
from equiv.threephase.standard import asymmetry_factor, peak_factor

NO_RESISTANCE = 1e-12
"""A resistance below this part of the impedance is none."""
REMAINDER = 1e-10
"""What is left of a sum below this part of its terms is rounding."""


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
        self.machines = [
            item for item in there(system, view) if isinstance(item, Shunt) and item.drives
        ]
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
        ratio = x_over_r(found.loop)
        kappa = slow_peak_factor(per_volt_of(slow, scaled_fault(fault, self.slow)))
        positive = at.amperes
        return FaultCase(
            at.name,
            fault.type,
            at.bus.volts,
            phases,
            3 * found.current.zero * positive,
            SequenceValues(*(x * positive for x in found.current)),
            ratio,
            kappa,
            kappa * math.sqrt(2) * largest,
            asymmetry_factor(math.inf if ratio is None else ratio) * largest,
            self.terms(found),
            phases.a if fault.type in ("three-phase", "line-ground") else phases.b,
            _without_rounding(again.currents, self.bolted[at.name]) if again else None,
            {bus: found.bus_voltages(bus) for bus in self.solution.buses},
            tuple(relay.relay(found, self.groups) for relay in self.relays),
            why(self.reasons, at.name, fault.type, at.voltage, at.z.of(0)),
        )

    def terms(self, found: Faulted) -> tuple[FaultTerm, ...]:
        """What each source gives to the current of the phase that the terms are about."""
        partials = [found.partial(item.name, item.bus) for item in self.machines]
        if self.solution.view.basis == "superposition":
            factor = term_factor(found.fault.type, found.per_volt) * found.at.amperes
            values = self.groups.placed(self.solution.emfs, factor * found.at.terms)
            return self.groups.terms(values, partials)
        weights = term_weights(found.fault.type)
        values = np.array([
            sum(w * found.delivered(item.name, s) for s, w in enumerate(weights))
            for item in self.machines
        ])  # fmt: skip
        rows = [
            *self.groups.terms(values * found.at.amperes, partials),
            *self._earthing(found, weights.zero),
        ]
        total = term_factor(found.fault.type, found.per_volt) * found.at.voltage * found.at.amperes
        left = total - sum(row.contribution for row in rows)
        if abs(left) > REMAINDER * sum(abs(row.contribution) for row in rows):
            rows.append(FaultTerm("network", (), complex(left), kind="network"))
        return tuple(rows)

    def _earthing(self, found: Faulted, weight: complex) -> Iterator[FaultTerm]:
        """The star points that bring zero-sequence current, other than those of machines."""
        zero = self.solution.of[0]
        for part in zero.of.parts:
            if not isinstance(part, ToEarth) or part.item.name in self.groups.sources:
                continue
            if not any(elements_of(part, zero.names, zero.ties)):
                continue
            current = found.delivered(part.item.name, 0)
            if not current:
                continue
            bus = self.solution.system.buses[part.bus]
            partial = found.in_phases(
                SequenceValues(current, 0, 0), part.bus, amperes_of(bus, self.solution.system.base)
            )
            value = complex(weight * current * found.at.amperes)
            yield FaultTerm(
                part.item.name, (part.item.name,), value, Phases(*partial), part.bus, "earthing"
            )


def why(
    reasons: Mapping[str, str], bus: str, kind: str, voltage: complex, z: SequenceValues
) -> tuple[str, ...]:
    """Why a current is zero, in words, from the voltage before the fault and the impedances."""
    if not voltage or not np.isfinite(z.positive):
        return (f"no source feeds {bus}",)
    if kind in EARTH_FAULTS and not np.isfinite(z.zero):
        general = f"no path for earth-fault current at {bus}: nothing earths its network"
        return (reasons.get(bus, general),)
    return ()


def _without_rounding(currents: Phases, bolted: float) -> Phases:
    """Phase currents, of which what is nothing beside the bolted current is none."""
    return Phases(*(0j if abs(i) <= CANCELLED * bolted else i for i in currents))


def term_factor(kind: str, of: SequenceValues) -> complex:
    """The current of the phase that the terms are about, per volt before the fault."""
    return sum((w * x for w, x in zip(term_weights(kind), of, strict=True)), 0j)


def per_volt_of(at: AtBus, fault: Fault) -> complex:
    """I1 of a fault per volt before it."""
    return per_volt(at.z, fault, at.ohms, at.name).positive


def x_over_r(loop: complex | None) -> float | None:
    """X/R of the fault loop; None where it has no resistance, or there is no loop."""
    if loop is None or abs(loop.real) <= NO_RESISTANCE * abs(loop):
        return None
    return loop.imag / loop.real


def slow_peak_factor(per_volt: complex) -> float:
    """The peak factor from the loop at 0.4 of the frequency: R/X = 0.4·Rc/Xc.

    Where there is no loop, or nothing inductive in it, it is that of a resistance.
    Source: IEC 60909-0:2016, 8.1, method (c).
    """
    loop = 1 / per_volt if per_volt else complex(1, 0)
    return peak_factor(0.4 * loop.real / loop.imag if loop.imag > 0 else math.inf)
