"""One fault at one bus: what it does in each sequence network, per unit and in phases.

v = v(before) - z·i: what the EMFs make before the fault, and what the fault current, drawn out
of the bus, takes away (superposition).
"""

from __future__ import annotations

import math
from collections.abc import Sequence as Many
from functools import cached_property
from typing import NamedTuple

import numpy as np

from equiv.equations.layout import Numbers
from equiv.errors import Diagnostic, NoUniqueSolutionError
from equiv.threephase.cases import Phases, Sequence
from equiv.threephase.entered import scaled
from equiv.threephase.model import Bus
from equiv.threephase.sequence.connection import (
    EARTH_FAULTS,
    Currents,
    Impedances,
    currents,
    phase_currents,
    phases,
)
from equiv.threephase.sequence.displacement import rotation
from equiv.threephase.sequence.networks import injection
from equiv.threephase.sequence.sequences import amperes_of, ohms_of
from equiv.threephase.sequence.solve import SystemSolution
from equiv.threephase.standard import voltage_factor

CANCELLED = 1e-12
"""A sum of sequence values below this part of them is their rounding."""


class Fault(NamedTuple):
    """A type of fault, and its impedances (ohm)."""

    type: str
    impedance: complex = 0j
    ground: complex = 0j


class AtBus:
    """A bus as a fault sees it: Thevenin's equivalent of each sequence, and their responses."""

    def __init__(self, solution: SystemSolution, bus: str) -> None:
        self.solution, self.name = solution, bus
        self.bus: Bus = solution.system.buses[bus]
        self.ohms = ohms_of(self.bus, solution.system.base)
        self.amperes = amperes_of(self.bus, solution.system.base)
        positive = solution.of[1]
        self.tied = positive.ties.is_tied(bus)
        """Whether anything at all is connected to the bus."""
        self.terms = np.zeros(len(solution.emfs), complex)
        """What each EMF gives to the voltage before the fault (per unit)."""
        own: complex | None = None
        if self.tied and positive.solver is not None:
            h = positive.coefficients(positive.voltage(bus))
            places = [positive.source(name) for name in solution.emfs]
            self.terms = h[places] * positive.solver.u[places]
            own = complex(h[positive.source(injection(bus))])
        self.z = solution.impedances([bus], own)

    @cached_property
    def before(self) -> Numbers:
        """The voltage of every bus before the fault, per unit.

        Of the equivalent source: c at the faulted bus, elsewhere what the ratios make of it.
        """
        positive = self.solution.of[1]
        if self.solution.view.basis == "superposition":
            return positive.voltages(positive.before)
        c = voltage_factor(self.bus.volts, self.solution.view.case, self.bus.tolerance)
        return c * self.solution.profile(self.name)

    @property
    def voltage(self) -> complex:
        """The voltage before the fault, or of the equivalent source, per unit."""
        return complex(self.before[self.solution.numbers[self.name]])

    @cached_property
    def units(self) -> dict[int, tuple[object, Numbers]]:
        """The response of each sequence network to 1 A into the bus, and its bus voltages."""
        found: dict[int, tuple[object, Numbers]] = {}
        for s, solution in self.solution.of.items():
            state = solution.unit(self.name)
            found[s] = state, solution.voltages(state)
        return found


def per_volt(z: Impedances, fault: Fault, ohms: float, of: str) -> Sequence:
    """The sequence currents per unit of voltage before the fault.

    Errors: NoUniqueSolutionError where the loop has no impedance at all.
    """
    columns = currents(
        fault.type, z, np.array([fault.impedance / ohms]), np.array([fault.ground / ohms])
    )
    require_bounded(columns, fault.type, [of])
    return Sequence(*(complex(column[0]) for column in columns))


def require_bounded(found: Currents, kind: str, buses: Many[str]) -> None:
    """Raise NoUniqueSolutionError where nothing limits a current."""
    bounded = np.isfinite(np.array(found)).all(axis=0)
    if not bounded.all():
        bus = buses[int(np.argmin(bounded))]
        message = f"the {kind} current at {bus} is not bounded: nothing in its loop limits it"
        raise NoUniqueSolutionError(Diagnostic("no-unique-solution", message))


class Faulted:
    """One fault at one bus. Currents are per unit out of the bus into the fault."""

    def __init__(self, at: AtBus, fault: Fault) -> None:
        self.at, self.fault, self.solution = at, fault, at.solution
        self.per_volt = per_volt(at.z, fault, at.ohms, at.name)
        self.current = Sequence(*(each * at.voltage for each in self.per_volt))
        self._partials: dict[str, Phases] = {}
        self._voltages: dict[str, Phases] = {}

    @property
    def by_number(self) -> dict[int, complex]:
        """The sequence currents by the numbers of the sequences."""
        return {0: self.current.zero, 1: self.current.positive, 2: self.current.negative}

    @property
    def phases(self) -> Phases:
        """The phase currents into the fault (A)."""
        return Phases(*(x * self.at.amperes for x in phase_currents(self.fault.type, self.current)))

    @cached_property
    def voltages(self) -> dict[int, Numbers]:
        """The sequence voltages of every bus, per unit, from its own no-load angle.

        Unearthed parts that the fault does not bring to earth are taken to float in the middle.
        """
        found = {s: -self.at.units[s][1] * i for s, i in self.by_number.items()}
        found[1] = found[1] + self.at.before
        ties = self.solution.of[0].ties
        if self.fault.type in EARTH_FAULTS and not ties.is_tied(self.at.name):
            own = self.solution.numbers[self.at.name]
            here = complex(found[1][own]), complex(found[2][own])
            rise = unearthed_rise(self.fault, *here, self.current.positive, self.at.ohms)
            levels = [ties.rise(bus, self.at.name) for bus in self.solution.buses]
            found[0] = found[0] + rise * np.array(levels)
        return found

    def delivered(self, item: str, sequence: int) -> complex:
        """The sequence current that an item delivers into its bus during the fault, per unit."""
        return self.through(self.solution.of[sequence].names.element(item), sequence)

    def through(self, name: str, sequence: int) -> complex:
        """The current of an element of a sequence network during the fault, per unit."""
        solution = self.solution.of[sequence]
        state, _ = self.at.units[sequence]
        found = -self.by_number[sequence] * solution.current(state, name)  # type: ignore[arg-type]
        if sequence == 1 and self.solution.view.basis == "superposition":
            found += solution.current(solution.before, name)
        return found

    def partial(self, item: str, bus: Bus) -> Phases:
        """The phase currents that an item delivers into its bus (A), at the bus's own level."""
        if item not in self._partials:
            of = Sequence(*(self.delivered(item, s) for s in (0, 1, 2)))
            unit = amperes_of(bus, self.solution.system.base)
            self._partials[item] = self.in_phases(of, bus.name, unit)
        return self._partials[item]

    def in_phases(self, of: Sequence, bus: str, unit: float) -> Phases:
        """Phase values of sequence values at a bus, from the no-load angle of the faulted one."""
        steps = self.solution.steps(bus, self.at.name)
        turned = Sequence(*(rotation(s, steps) * x for s, x in enumerate(of)))
        gross = sum(map(abs, turned))
        values = (0j if abs(x) <= CANCELLED * gross else x * unit for x in phases(turned))
        return Phases(*values)

    def bus_voltages(self, bus: str) -> Phases:
        """The phase voltages to earth of a bus during the fault (V)."""
        if bus not in self._voltages:
            self._voltages[bus] = self._voltages_of(bus)
        return self._voltages[bus]

    def _voltages_of(self, bus: str) -> Phases:
        place = self.solution.numbers[bus]
        unit = self.solution.system.buses[bus].volts / math.sqrt(3)
        of = Sequence(*(complex(self.voltages[s][place]) for s in (0, 1, 2)))
        found = self.in_phases(of, bus, unit)
        return across(self.fault, self.phases, found) if bus == self.at.name else found


def unearthed_rise(
    fault: Fault, positive: complex, negative: complex, through: complex, ohms: float
) -> complex:
    """V0 of an unearthed bus in an earth fault: so high that the faulted phases are at earth.

    From V1 and V2 there (per unit), I1 into the fault and the base impedance (ohm).
    """
    if fault.type == "line-line-ground":
        return positive - fault.impedance / ohms * through
    return -positive - negative


def across(fault: Fault, currents: Phases, found: Phases) -> Phases:
    """The faulted phases' voltages (V) from the fault itself, which keeps their digits."""
    own, ground, (a, b, c) = fault.impedance, fault.ground, currents
    if fault.type == "three-phase":
        return Phases(own * a, own * b, own * c)
    if fault.type == "line-ground":
        return found._replace(a=(own + ground) * a)
    if fault.type == "line-line-ground":
        return found._replace(b=own * b + ground * (b + c), c=own * c + ground * (b + c))
    return found._replace(c=found.b - own * b)


def scaled_fault(fault: Fault, solution: SystemSolution) -> Fault:
    """A fault at the frequency of a view."""
    factor = solution.view.reactances
    return Fault(fault.type, scaled(fault.impedance, factor), scaled(fault.ground, factor))
