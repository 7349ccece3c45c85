"""The sequence networks solved: what a fault at a bus sees, and what it does everywhere."""

from __future__ import annotations

from collections.abc import Sequence as Many
from dataclasses import replace
from functools import cached_property

import numpy as np

from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.equations.solution import Solver, State
from equiv.network import Branch
from equiv.threephase.model import OneLine, Shunt, View
from equiv.threephase.sequence.connection import Impedances
from equiv.threephase.sequence.displacement import no_load_angles
from equiv.threephase.sequence.networks import (
    REFERENCE,
    SequenceNetwork,
    injection,
    sequence_network,
    three_networks,
)

KEEPS_DIGITS_UP_TO = 100
"""Buses up to which the branch-current form is solved: it keeps the digits of weak ties, such as
the charging of an unearthed network, which the nodal form adds to admittances of lines."""
INFINITE = complex(float("inf"))


class SequenceSolution:
    """One sequence network, factorised once. Voltages are over the reference, per unit."""

    def __init__(self, of: SequenceNetwork, buses: Many[str], form: str) -> None:
        self.of, self.names, self.ties = of, of.names, of.ties
        self.solver = Solver(of.network, of.network.frequency, form) if of.network.nodes else None
        numbers = self.solver.layout.node_number if self.solver else {}
        self.nodes = np.array([numbers.get(self.names.node(bus), -1) for bus in buses])

    @cached_property
    def before(self) -> State | None:
        """The solution before the fault: every EMF, no fault current."""
        return self.solver.state() if self.solver else None

    def coefficients(self, quantity: Quantity) -> Numbers:
        """What one unit of each source gives to a quantity (one transposed solve)."""
        assert self.solver is not None
        return self.solver.coefficients(quantity)

    def source(self, name: str) -> int:
        """The number of a source."""
        assert self.solver is not None
        return self.solver.layout.source_number[name]

    def unit(self, bus: str) -> State | None:
        """The response to 1 A into a bus (one direct solve); None where it is not tied."""
        if self.solver is None or not self.ties.is_tied(bus):
            return None
        u = np.zeros(len(self.solver.u))
        u[self.source(injection(bus))] = 1.0
        return self.solver.state(u)

    def voltage(self, bus: str) -> Quantity:
        """The voltage of a bus over the reference."""
        return Quantity("V", (self.names.node(bus), REFERENCE))

    def driving(self, bus: str) -> complex:
        """The driving-point impedance at a bus; infinite where it is not tied."""
        if self.solver is None or not self.ties.is_tied(bus):
            return INFINITE
        coefficients = self.coefficients(self.voltage(bus))
        return complex(coefficients[self.source(injection(bus))])

    def driving_by_solve(self, node: int) -> complex:
        """The driving-point impedance of a node by a solve of its own."""
        assert self.solver is not None
        row = self.solver.system.voltage_row(node, -1)
        return complex(row.state @ self.solver.response(row.state))

    def voltages(self, state: State | None) -> Numbers:
        """The voltage of every bus in a solution; 0 in parts that are not tied."""
        if state is None:
            return np.zeros(len(self.nodes), complex)
        assert self.solver is not None
        x = np.append(state.x[: self.solver.layout.node_count], 0)
        return np.asarray(x.astype(complex)[self.nodes])

    def current(self, state: State | None, element: str) -> complex:
        """The current of an element, first node to second; 0 for one that is left out."""
        if state is None or self.solver is None or element not in self.of.network.elements:
            return 0j
        branch = self.solver.layout.branch_of(Branch(element, 0))
        return complex(state.currents[branch])


class SystemSolution:
    """A system in one view, its three sequence networks factorised once each."""

    def __init__(self, system: OneLine, view: View, faults: Many[str]) -> None:
        self.system, self.view, self.faults = system, view, tuple(faults)
        self.buses = tuple(system.buses)
        self.angles = no_load_angles(system)
        self.form = "branch-current" if len(self.buses) <= KEEPS_DIGITS_UP_TO else "nodal"
        self.networks = three_networks(system, view, faults)
        self.of = {
            s: SequenceSolution(network, self.buses, self.form)
            for s, network in self.networks.items()
        }

    @cached_property
    def numbers(self) -> dict[str, int]:
        """The position of each bus."""
        return {bus: n for n, bus in enumerate(self.buses)}

    @cached_property
    def emfs(self) -> tuple[str, ...]:
        """The items with an EMF, in the order of the file."""
        sources = self.networks[1].network.sources
        return tuple(s.name for s in sources if s.output == "V")

    @cached_property
    def idle(self) -> SequenceSolution:
        """The positive sequence without machines: tied only where ratios around a loop disagree."""
        items = {n: i for n, i in self.system.items.items() if not isinstance(i, Shunt)}
        system = replace(self.system, items=items)
        network = sequence_network(system, self.view, 1, self.faults)
        return SequenceSolution(network, self.buses, self.form)

    def profile(self, bus: str) -> Numbers:
        """The voltage of every bus per volt at one, where that drives and no machine takes current.

        It is what the ratios on the way make of it; 0 where no machine is.
        """
        if not self.of[1].ties.is_tied(bus):
            return np.zeros(len(self.buses))
        ties = self.idle.ties
        if not ties.is_tied(bus):
            return np.array([ties.rise(other, bus) for other in self.buses])
        found = self.idle.voltages(self.idle.unit(bus))
        return np.asarray(found / found[self.numbers[bus]])

    def steps(self, bus: str, fault: str) -> int:
        """How far a bus leads the faulted one at no load, in steps of 30 degrees."""
        return self.angles[bus] - self.angles[fault]

    def impedances(self, buses: Many[str], rather: complex | None = None) -> Impedances:
        """Driving-point impedances at some buses, per unit; `rather` where Z1 is known."""
        columns = [
            np.array([
                rather if s == 1 and rather is not None else self.of[s].driving(bus)
                for bus in buses
            ])
            for s in (1, 2, 0)
        ]  # fmt: skip
        return Impedances(*columns)
