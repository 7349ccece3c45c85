"""What a relay in a branch sees: its current term by term, infeed factor, apparent impedance.

A relay in one of several items in parallel sees the current of that one.

The relay's current is a sum of element currents in each sequence network; the coefficients of
the EMFs and of the fault current on it come from one transposed solve a sequence.

infeed factor = fault-path current / relay's current, per unit (both at one level), in the phase
that the terms are about. Apparent impedance: Va/Ia for three-phase and line-ground faults (no
zero-sequence compensation), (Vb - Vc)/(Ib - Ic) for the others, at the relay's bus and level.

Source: J. L. Blackburn, Protective Relaying (from memory): infeed and apparent impedance.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.errors import Diagnostic, UsageError, nearest
from equiv.threephase.asymmetry import NO_CURRENT
from equiv.threephase.cases import FaultTerm, Phases, Relay, Sequence, phase_of_terms
from equiv.threephase.grouping import Groups
from equiv.threephase.model import Item, Link, OneLine, Shunt, Transformer
from equiv.threephase.sequence.connection import term_weights
from equiv.threephase.sequence.displacement import rotation
from equiv.threephase.sequence.faulted import CANCELLED, Faulted
from equiv.threephase.sequence.networks import injection
from equiv.threephase.sequence.sequences import Charging, Series, ToEarth, amperes_of
from equiv.threephase.sequence.solve import SequenceSolution, SystemSolution
from equiv.threephase.words import phase_of


class Place(NamedTuple):
    """The end of an item where a relay is."""

    item: Item
    bus: str


def places(system: OneLine, branches: tuple[str, ...]) -> tuple[Place, ...]:
    """The places of relays: `NAME`, at the first bus of the branch, or `NAME@BUS`.

    Errors: UsageError for a name that no branch has, or a bus that it does not end at.
    """
    return tuple(_place(system, branch) for branch in branches)


def _place(system: OneLine, branch: str) -> Place:
    name, _, bus = branch.partition("@")
    item = system.items.get(name)
    if item is None:
        message = f"there is no branch called {name}"
        raise UsageError(Diagnostic("unknown-name", message, hint=nearest(name, system.items)))
    ends = _ends(item)
    if bus and bus not in ends:
        message = f"{name} does not end at {bus}"
        hint = f"write {' or '.join(f'{name}@{end}' for end in ends)}"
        raise UsageError(Diagnostic("unknown-name", message, hint=hint))
    return Place(item, bus or ends[0])


def _ends(item: Item) -> tuple[str, ...]:
    if isinstance(item, Link | Transformer):
        return item.first.name, item.second.name
    assert isinstance(item, Shunt)
    return (item.bus.name,)


def _ahead(system: OneLine, place: Place) -> frozenset[str]:
    """The buses that the relay looks at: beyond its branch, without a way through its own bus."""
    ways: dict[str, list[str]] = {}
    for item in system.items.values():
        ends = _ends(item)
        for one, other in zip(ends, reversed(ends), strict=True):
            ways.setdefault(one, []).append(other)
    waiting = [end for end in _ends(place.item) if end != place.bus]
    found = {place.bus, *waiting}
    while waiting:
        new = [bus for bus in ways[waiting.pop()] if bus not in found]
        found.update(new)
        waiting += new
    return frozenset(found - {place.bus})


class Response(NamedTuple):
    """The relay's current in one sequence, per unit; what rounding alone can make is zero."""

    own: Numbers
    """For each source, EMFs as they are and 1 A of a current source into a faulted bus."""
    before: complex
    """Before the fault, with all EMFs at once."""


class RelayFinder:
    """The currents of one relay for any fault: responses found once a sequence."""

    def __init__(self, solution: SystemSolution, place: Place) -> None:
        self.solution, self.place = solution, place
        self.responses = {s: _response(of, place) for s, of in solution.of.items()}
        self.ahead = _ahead(solution.system, place)

    def relay(self, faulted: Faulted, groups: Groups) -> Relay:
        """What the relay sees of a fault."""
        at, solution, bus = faulted.at, self.solution, self.place.bus
        level = amperes_of(solution.system.buses[bus], solution.system.base)
        count = self.place.item.count
        unit = level / count
        drawn = {s: self._by_injection(s, at.name) for s in (0, 1, 2)}
        of = Sequence(*(self._during(s, drawn[s] * i) for s, i in faulted.by_number.items()))
        phases = faulted.in_phases(of, bus, unit)
        steps = solution.steps(bus, at.name)
        turned = [w * rotation(s, steps) for s, w in enumerate(term_weights(faulted.fault.type))]
        total = _in_phase(phases, faulted)
        through = [
            -t * drawn[s] * i for s, (t, i) in enumerate(zip(turned, faulted.per_volt, strict=True))
        ]
        if solution.view.basis == "superposition":
            values = _summed(turned[1] * self._own(), *(w * at.terms for w in through)) * unit
            terms = groups.terms(groups.placed(solution.emfs, values))
        else:
            name = f"equivalent source at {at.name}"
            value = complex(_summed(*(w * at.voltage * unit for w in through)))
            terms = (FaultTerm(name, (name,), value, kind="network"),)
        gross = sum(map(abs, of)) * unit
        path = _in_phase(faulted.phases, faulted) / faulted.at.amperes * level
        blind = self._blind(faulted)
        sees = not blind and abs(total) > CANCELLED * gross
        return Relay(
            self.place.item.name, bus, phases, terms, total,
            infeed_factor=path / total if sees else None,
            impedance=None if blind else self._impedance(faulted, phases, gross),
            parallel=count, blind=blind,
        )  # fmt: skip

    def _own(self) -> Numbers:
        """What each EMF gives to the relay's positive-sequence current before the fault."""
        of, found = self.solution.of[1], self.responses[1]
        if found is None:
            return np.zeros(len(self.solution.emfs))
        return found.own[[of.source(name) for name in self.solution.emfs]]

    def _during(self, sequence: int, taken: complex) -> complex:
        """The relay's current during the fault: that before it, less what the fault takes."""
        before = self._before(sequence)
        found = before - taken
        return found if abs(found) > CANCELLED * (abs(before) + abs(taken)) else 0j

    def _before(self, sequence: int) -> complex:
        """The relay's current before the fault."""
        found = self.responses[sequence]
        superposed = self.solution.view.basis == "superposition"
        return found.before if superposed and sequence == 1 and found else 0j

    def _by_injection(self, sequence: int, bus: str) -> complex:
        of, found = self.solution.of[sequence], self.responses[sequence]
        if found is None or not of.ties.is_tied(bus):
            return 0j
        return complex(found.own[of.source(injection(bus))])

    def _blind(self, faulted: Faulted) -> str:
        """Why the relay does not look at the fault; empty where it does."""
        place, bus = self.place, faulted.at.name
        if not any(faulted.phases):
            return NO_CURRENT
        if bus == place.bus:
            return "the fault is at the relay's own bus"
        if not self.ahead:
            return f"{place.item.name} is no way to another bus: no fault lies beyond it"
        return "" if bus in self.ahead else "the relay looks away from the fault"

    def _impedance(self, faulted: Faulted, phases: Phases, gross: float) -> complex | None:
        """The apparent impedance (ohm); None where the current of its loop is only rounding."""
        voltages = faulted.bus_voltages(self.place.bus)
        if phase_of_terms(faulted.fault.type) == "a":
            across, through = voltages.a, phases.a
        else:
            across, through = voltages.b - voltages.c, phases.b - phases.c
        return across / through if abs(through) > CANCELLED * gross else None


def _summed(*parts: Numbers | complex) -> Numbers:
    """A sum; zero where only the rounding of its parts is left."""
    total, gross = sum(parts), sum(map(np.abs, parts))
    return np.where(np.abs(total) > CANCELLED * gross, total, 0)


def _in_phase(phases: Phases, faulted: Faulted) -> complex:
    return phase_of(phases, phase_of_terms(faulted.fault.type))


def _response(of: SequenceSolution, place: Place) -> Response | None:
    """The relay's response to each source; None where it carries nothing."""
    quantities = _quantities(of, place)
    if not quantities or of.solver is None:
        return None
    u = of.solver.u
    sizes = np.where([e.output == "V" for e in of.of.network.sources], u, 1.0)
    own, bound = np.zeros(len(u), complex), np.zeros(len(u))
    before = 0j
    for quantity, sign in quantities:
        own += sign * of.coefficients(quantity) * sizes
        bound += of.solver.rounding(quantity, np.diag(sizes))
        before += sign * of.before.of(quantity) if of.before else 0j
    emfs = bound[u != 0].sum()
    return Response(np.where(np.abs(own) > bound, own, 0), before if abs(before) > emfs else 0j)


def _quantities(of: SequenceSolution, place: Place) -> list[tuple[Quantity, int]]:
    """The element currents that add to the current from the bus into the item, with signs."""
    found: list[tuple[Quantity, int]] = []
    for part in of.of.parts:
        if part.item is not place.item:
            continue
        names, item = of.names, part.item.name
        name = names.element(item)
        if isinstance(part, Charging) and part.bus == place.bus:
            found.append((Quantity("I", (names.charging(item, part.end),)), 1))
        elif isinstance(part, ToEarth) and part.bus == place.bus:
            found.append((Quantity("I", (name,)), -1))
        elif isinstance(part, Series) and part.first == place.bus:
            found.append((Quantity("I", (name,)), 1))
        elif isinstance(part, Series) and part.ratio == 1.0:
            found.append((Quantity("I", (name,)), -1))
        elif isinstance(part, Series):
            found.append((Quantity("I", (names.ratio(item),), 1), 1))
    elements = of.of.network.elements
    return [(quantity, sign) for quantity, sign in found if quantity.names[0] in elements]
