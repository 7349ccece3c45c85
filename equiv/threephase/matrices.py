"""What all faults at many buses are made of, per unit: held as matrices of buses and sources."""

from __future__ import annotations

from collections.abc import Sequence
from functools import cached_property

import numpy as np

from equiv.analyses.result import Check
from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.network import Progress
from equiv.threephase.grouping import Groups
from equiv.threephase.sequence.connection import Impedances
from equiv.threephase.sequence.networks import injection
from equiv.threephase.sequence.sequences import amperes_of, machines, ohms_of
from equiv.threephase.sequence.solve import INFINITE, SystemSolution
from equiv.threephase.standard import voltage_factor

BLOCK = 64
"""Sources whose terms are solved for between two reports of progress."""
SAMPLES = 8
"""Driving-point impedances of each sequence that are found again by solves."""
SAMPLE_LIMIT = 1e-9
SUM_LIMIT = 1e-9
_SEED = 20261201


class Matrices:
    """What all faults at some buses are made of, per unit."""

    def __init__(
        self, solution: SystemSolution, slow: SystemSolution, buses: Sequence[str], by: str,
        progress: Progress,
    ) -> None:  # fmt: skip
        self.solution, self.slow, self.buses = solution, slow, tuple(buses)
        system, view = solution.system, solution.view
        self.ohms = np.array([ohms_of(system.buses[bus], system.base) for bus in buses])
        self.amperes = np.array([amperes_of(system.buses[bus], system.base) for bus in buses])
        self.machines = machines(system, view)
        self.groups = Groups(system, [item.name for item in self.machines], by)
        self.z = self._impedances(solution, progress, "driving-point impedances")
        self.progress = progress
        self.superposed = view.basis == "superposition"
        self.shares = self._terms(progress) if self.superposed else {}
        self.delivered = {} if self.superposed else self._partials(progress)

    @cached_property
    def z_slow(self) -> Impedances:
        """The driving-point impedances at the frequency at which R/X is found for the peak."""
        return self._impedances(self.slow, self.progress, "impedances for the peak")

    @cached_property
    def voltages(self) -> Numbers:
        """The voltage at each bus before the fault, all EMFs at once."""
        system, view = self.solution.system, self.solution.view
        if self.superposed:
            positive = self.solution.of[1]
            numbers = [self.solution.numbers[bus] for bus in self.buses]
            return positive.voltages(positive.before)[numbers]
        at = [system.buses[bus] for bus in self.buses]
        c = np.array([voltage_factor(b.volts, view.case, b.tolerance) for b in at])
        return np.where(np.isfinite(self.z.positive), c, 0)

    def _impedances(self, solution: SystemSolution, progress: Progress, work: str) -> Impedances:
        found = []
        for done, s in enumerate((1, 2, 0)):
            progress(work, done, 3)
            of = solution.of[s]
            nodes = of.nodes[[solution.numbers[bus] for bus in self.buses]]
            z = np.full(len(nodes), INFINITE)
            if of.solver is not None and (nodes >= 0).any():
                z[nodes >= 0] = of.solver.driving_points(nodes[nodes >= 0])
            found.append(z)
        progress(work, 3, 3)
        return Impedances(*found)

    def _terms(self, progress: Progress) -> dict[str, Numbers]:
        """What each machine gives to the voltage before the fault: min(sources, buses) solves."""
        positive, emfs = self.solution.of[1], self.solution.emfs
        found = np.zeros((len(self.buses), len(self.machines)), complex)
        if positive.solver is None:
            return {"voltage": found}
        at = {item.name: n for n, item in enumerate(self.machines)}
        columns = [at[name] for name in emfs]
        sources = [positive.source(name) for name in emfs]
        numbers = [self.solution.numbers[bus] for bus in self.buses]
        values = positive.solver.u[sources]
        if len(emfs) <= len(self.buses):
            for start in range(0, len(emfs), BLOCK):
                progress("terms", start, len(emfs))
                some = slice(start, start + BLOCK)
                u = np.zeros((len(positive.solver.u), len(sources[some])), complex)
                u[sources[some], range(len(sources[some]))] = values[some]
                x = positive.solver.solutions(u)[: positive.solver.layout.node_count]
                known = np.vstack([x, np.zeros((1, x.shape[1]))])[positive.nodes[numbers]]
                found[:, columns[some]] = known
            return {"voltage": found}
        for row, bus in enumerate(self.buses):
            if positive.ties.is_tied(bus):
                h = positive.coefficients(positive.voltage(bus))
                found[row, columns] = h[sources] * values
        return {"voltage": found}

    def _partials(self, progress: Progress) -> dict[int, Numbers]:
        """What each machine delivers, in each sequence, for 1 A out of each bus."""
        found = {s: np.zeros((len(self.buses), len(self.machines)), complex) for s in (1, 2, 0)}
        for column, item in enumerate(self.machines):
            progress("partial currents", column, len(self.machines))
            for s, of in self.solution.of.items():
                name = of.names.element(item.name)
                if name not in of.of.network.elements:
                    continue
                h = of.coefficients(Quantity("I", (name,)))
                tied = [n for n, bus in enumerate(self.buses) if of.ties.is_tied(bus)]
                places = [of.source(injection(self.buses[n])) for n in tied]
                found[s][tied, column] = -h[places]
        return found

    def checks(self) -> tuple[Check, ...]:
        """Impedances found again by solves, and the sum of the terms against all EMFs at once."""
        worst = 0.0
        generator = np.random.default_rng(_SEED)
        for s, z in zip((1, 2, 0), self.z, strict=True):
            of = self.solution.of[s]
            finite = np.flatnonzero(np.isfinite(z))
            for n in generator.permutation(finite)[:SAMPLES].tolist():
                node = int(of.nodes[self.solution.numbers[self.buses[n]]])
                worst = max(worst, abs(of.driving_by_solve(node) - z[n]) / abs(z[n]))
        name = "driving-point impedances, eight drawn a sequence, against a solve each"
        found = [Check(name, float(worst), SAMPLE_LIMIT)]
        if self.superposed:
            shares = self.shares["voltage"]
            gross = np.abs(shares).sum(axis=1)
            off = np.abs(shares.sum(axis=1) - self.voltages)
            live = gross > 0
            off = np.divide(off, gross, out=np.zeros(len(off)), where=live)
            name = "sum of the terms against all EMFs at once, every bus"
            found.append(Check(name, float(off.max(initial=0.0)), SUM_LIMIT))
        return tuple(found)
