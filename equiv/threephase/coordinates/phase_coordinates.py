"""The second method: the same faults in phase coordinates, with no symmetrical components.

P·i = Q·(T·v - e) for every branch and Kirchhoff's Tᵀ·i = j at every terminal and star point,
solved with the branch currents as unknowns and one factorisation, the nodes of `modes` at zero.
At a faulted bus it gives v = open - Z·i + Σ a·n, n the modes, and a fault is its own three
equations between v and i together with Kirchhoff's law for each mode.

Source: three-phase multiports: G. Kron, Tensor Analysis of Networks (1939), from memory.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import replace
from functools import cached_property
from typing import NamedTuple

import numpy as np

from equiv.equations.layout import Numbers
from equiv.threephase.cases import Phases
from equiv.threephase.coordinates.conductors import EARTH, Branch3, Conductors
from equiv.threephase.coordinates.modes import RANK, modes_of
from equiv.threephase.coordinates.windings import BALANCED
from equiv.threephase.model import OneLine, Shunt, View
from equiv.threephase.sequence.displacement import turn
from equiv.threephase.sequence.faulted import Fault
from equiv.threephase.sequence.sequences import amperes_of, ohms_of
from equiv.threephase.standard import voltage_factor

DENSE_UP_TO = 200
"""Unknowns up to which a dense factorisation is used."""
BLOCK = 8
"""Right-hand sides solved at once."""


class Again(NamedTuple):
    """A fault found again: phase values (A, V), from the no-load angle of the faulted bus."""

    currents: Phases
    voltages: Mapping[str, Phases]
    """At each bus."""
    delivered: Mapping[str, Phases]
    """What each item at one bus delivers into it."""


class UnsolvedError(Exception):
    """An impedance of 0 ohm to earth leaves currents that nothing determines in phases."""


class PhaseCoordinates:
    """A system in phase coordinates, factorised once, with a three-port at each faulted bus."""

    def __init__(self, system: OneLine, view: View, faults: Sequence[str]) -> None:
        self.system, self.view = system, view
        self.lines = Conductors(system, view)
        self.faults = tuple(faults)
        self.first = {bus: 1 + 3 * n for n, bus in enumerate(faults)}
        p, q, incidence, emfs = _stacked(self.lines.branches, self.lines.node_count)
        self.modes = modes_of(self.lines.branches, incidence)
        self.count = len(p)
        """Branch currents; behind them stand the node voltages."""
        self.modes_from = 1 + 3 * len(faults)
        self.x = self._solved(p, q, incidence, emfs)
        self.to_earth = self.modes.across.conj().T @ self.x[: self.count]
        """The currents to earth that Kirchhoff's law for each mode adds up."""
        self._profiles: dict[str, Numbers] = {}

    def _solved(self, p: Numbers, q: Numbers, incidence: Numbers, emfs: Numbers) -> Numbers:
        """The response to all EMFs (first), to 1 A into each phase of each bus, to each mode."""
        count, end = self.count, self.count + self.lines.node_count
        kept = np.setdiff1d(np.arange(end), count + self.modes.held)
        matrix = np.zeros((end, end), complex)
        matrix[:count, :count] = p
        matrix[:count, count:] = -q @ incidence
        matrix[count:, :count] = incidence.T
        ports = self.modes_from
        right = np.zeros((end, ports + len(self.modes.held)), complex)
        right[:count, 0] = -q @ emfs
        right[:count, ports:] = q @ self.modes.across
        for bus, column in self.first.items():
            for k, node in enumerate(self.lines.at(bus)):
                right[count + node, column + k] = 1
        x = np.zeros_like(right)
        x[kept] = _solve(matrix[np.ix_(kept, kept)], right[kept])
        x[count:, ports:] += self.modes.shapes
        return x

    def fault(self, bus: str, fault: Fault) -> Again:
        """A fault at a bus: its own equations, and Kirchhoff's law for each mode."""
        angle, here = turn(self.lines.angles[bus]), list(self.lines.at(bus))
        of_v, of_i = fault_equations(fault, ohms_of(self.system.buses[bus], self.system.base))
        profile = self._profile(bus)
        currents, state = self._imposed(bus, of_v, of_i, -of_v @ profile[here])
        state[self.count :][: len(profile)] += profile
        return self._again(currents / angle, bus, state / angle)

    @cached_property
    def idle(self) -> PhaseCoordinates:
        """The system without what stands at one bus."""
        items = {n: i for n, i in self.system.items.items() if not isinstance(i, Shunt)}
        return PhaseCoordinates(replace(self.system, items=items), self.view, self.faults)

    def _profile(self, bus: str) -> Numbers:
        """The voltages before a fault that no EMF makes: those of c·Un/√3 at the bus, no load."""
        if self.view.basis == "superposition" or self._floats(bus):
            return np.zeros(3 * len(self.system.buses), complex)
        if bus not in self._profiles:
            at = self.system.buses[bus]
            c = voltage_factor(at.volts, self.view.case, at.tolerance)
            driven = c * turn(self.lines.angles[bus]) * BALANCED
            _, state = self.idle._imposed(bus, np.eye(3), np.zeros((3, 3)), driven)
            self._profiles[bus] = state[self.idle.count :][: 3 * len(self.system.buses)]
        return self._profiles[bus]

    def _floats(self, bus: str) -> bool:
        """Whether nothing holds the voltages of a bus, not even those between its phases."""
        held = self.modes.shapes.shape[1] - self.modes.free
        seen = self._chosen(np.eye(3), list(self.lines.at(bus))).shape[1]
        return bool(seen - held > 1)

    def _imposed(
        self, bus: str, of_v: Numbers, of_i: Numbers, given: Numbers
    ) -> tuple[Numbers, Numbers]:
        """Currents i out of a bus, and the state, with of_v·v + of_i·i given at the bus."""
        here = list(self.lines.at(bus))
        chosen = self._chosen(of_v, here)
        ports, modes = slice(self.first[bus], self.first[bus] + 3), slice(self.modes_from, None)
        at_bus, law = self.x[self.count :][here], chosen.conj().T @ self.to_earth
        # unknown are the currents out of the bus and the modes
        matrix = np.block([
            [of_i - of_v @ at_bus[:, ports], of_v @ at_bus[:, modes] @ chosen],
            [(self.modes.shapes[here] @ chosen).conj().T - law[:, ports], law[:, modes] @ chosen],
        ])  # fmt: skip
        found = _solve_small(matrix, np.concatenate([given - of_v @ at_bus[:, 0], -law[:, 0]]))
        moved = chosen @ found[3:]
        state = self.x[:, 0] - self.x[:, ports] @ found[:3] + self.x[:, modes] @ moved
        return found[:3], state

    def _chosen(self, of_v: Numbers, here: Sequence[int]) -> Numbers:
        """The modes that a fault moves, in columns: all that are held, and of the free ones those
        that its equations see. Of the others Kirchhoff's law says nothing that they do not."""
        count, free = self.modes.shapes.shape[1], self.modes.free
        _, values, right = np.linalg.svd(of_v @ self.modes.shapes[here, :free])
        seen = right[: int((values > RANK).sum())].conj().T
        chosen = np.zeros((count, seen.shape[1] + count - free), seen.dtype)
        chosen[:free, : seen.shape[1]] = seen
        chosen[free:, seen.shape[1] :] = np.eye(count - free)
        return chosen

    def _again(self, currents: Numbers, bus: str, state: Numbers) -> Again:
        system = self.system
        unit = {name: amperes_of(each, system.base) for name, each in system.buses.items()}
        voltages = state[self.count :]
        return Again(
            Phases(*(currents * unit[bus]).tolist()),
            {
                name: Phases(*(voltages[list(self.lines.at(name))] * each.volts / 3**0.5).tolist())
                for name, each in system.buses.items()
            },
            {
                item: Phases(*(-state[row : row + 3] * unit[at]).tolist())
                for item, (at, row) in self.lines.shunts.items()
            },
        )


def fault_equations(fault: Fault, base: float) -> tuple[Numbers, Numbers]:
    """M and N of M·v + N·i = 0, the phase voltages to earth and currents into a fault."""
    own, ground = fault.impedance / base, fault.ground / base
    if fault.type == "three-phase":
        return np.eye(3), -own * np.eye(3)
    if fault.type == "line-ground":
        return np.diag([1, 0, 0]), np.diag([-own - ground, 1, 1])
    if fault.type == "line-line":
        m = np.array([[0, 0, 0], [0, 1, -1], [0, 0, 0]])
        return m, np.array([[1, 0, 0], [0, -own, 0], [0, 1, 1]])
    legs = np.array([[1, 0, 0], [0, -own - ground, -ground], [0, -ground, -own - ground]])
    return np.diag([0, 1, 1]), legs


def _stacked(
    branches: Iterable[Branch3], node_count: int
) -> tuple[Numbers, Numbers, Numbers, Numbers]:
    """P and Q of all the branches, their incidence with the nodes, and their EMFs."""
    branches = list(branches)
    count = sum(len(branch.p) for branch in branches)
    p, q = (np.zeros((count, count), complex) for _ in range(2))
    incidence = np.zeros((count, node_count))
    emfs = np.zeros(count, complex)
    at = 0
    for branch in branches:
        rows = slice(at, at := at + len(branch.p))
        p[rows, rows], q[rows, rows], emfs[rows] = branch.p, branch.q, branch.emf
        for column, node in enumerate(branch.nodes):
            if node != EARTH:
                incidence[rows, node] += branch.incidence[:, column]
    return p, q, incidence, emfs


def _solve_small(matrix: Numbers, right: Numbers) -> Numbers:
    """x of matrix·x = right with rows of one size, refined once."""
    sizes = np.abs(matrix).max(axis=1)
    a, b = matrix / sizes[:, None], right / sizes
    x = np.linalg.solve(a, b)
    return np.asarray(x + np.linalg.solve(a, b - a @ x))


def _solve(matrix: Numbers, right: Numbers) -> Numbers:
    """x of matrix·x = right, refined once."""
    if len(matrix) <= DENSE_UP_TO:
        try:
            x = np.linalg.solve(matrix, right)
        except np.linalg.LinAlgError:
            raise UnsolvedError from None
        return np.asarray(x + np.linalg.solve(matrix, right - matrix @ x))
    import scipy.sparse as sparse
    from scipy.sparse.linalg import splu

    a = sparse.csc_matrix(matrix)
    try:
        factor = splu(a)
    except RuntimeError:
        raise UnsolvedError from None
    blocks = []
    for start in range(0, right.shape[1], BLOCK):
        some = np.asfortranarray(right[:, start : start + BLOCK])
        x = factor.solve(some)
        blocks.append(x + factor.solve(np.asfortranarray(some - a @ x)))
    return np.hstack(blocks)
