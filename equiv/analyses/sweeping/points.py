"""The values of a sweep: in stacks where the laws allow it, else point by point."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal

import numpy as np

from equiv.analyses.sweeping.axis import Axis
from equiv.analyses.sweeping.curves import Asked
from equiv.elements import KINDS
from equiv.elements.element import Frequency
from equiv.equations.batch import Batch
from equiv.equations.layout import Numbers
from equiv.equations.solution import Solver, State, all_on, source_values
from equiv.errors import EquivError
from equiv.network import Network, Progress

NOT_A_NUMBER = complex("nan")


@dataclass
class Values:
    """The terms, totals and impedances of everything asked, filled point by point."""

    terms: Numbers
    """Asked × points × sources."""
    totals: Numbers
    impedances: Numbers
    reasons: list[dict[int, str]]

    @classmethod
    def empty(cls, asked: int, points: int, sources: int) -> Values:
        """Nothing is known yet."""
        shape = (asked, points)
        return cls(
            np.full((*shape, sources), NOT_A_NUMBER),
            np.full(shape, NOT_A_NUMBER),
            np.full(shape, NOT_A_NUMBER),
            [{} for _ in range(asked)],
        )

    def refuse(self, point: int, reason: str) -> None:
        """No value of anything at a point."""
        for reasons in self.reasons:
            reasons[point] = reason


def with_tests(network: Network, asked: Sequence[Asked]) -> Network:
    """The network with a dead test source at each port, from minus to plus inside itself."""
    tests = [
        KINDS["current"](a.test, (a.port.minus, a.port.plus), Decimal(0)) for a in asked if a.port
    ]
    return network.with_elements(tests) if tests else network


def in_stacks(
    network: Network, axis: Axis, asked: Sequence[Asked], values: Values,
    names: Sequence[str], form: str, progress: Progress,
) -> Numbers:  # fmt: skip
    """Fill in what the affine equations give over frequency; which points are left to do."""
    left = np.ones(len(axis.values), bool)
    tested = with_tests(network, asked)
    batch = Batch(tested, form)
    if not batch.usable:
        return left
    order = {s.name: k for k, s in enumerate(tested.sources)}
    chosen = [order[name] for name in names]
    u = source_values(tested, network.frequency)[chosen]
    if network.phasors == "peak" and not network.frequency.omega:
        u = u / np.sqrt(2)  # the file's own frequency is 0 Hz, where a peak is no peak
    points = np.flatnonzero(axis.omega > 0)
    parts = [[batch.row(q) for q in a.parts] for a in asked]
    found = batch.coefficients(axis.omega[points], [r for rows in parts for r in rows], progress)
    good = points[found.reliable]
    left[good] = False
    at = 0
    for number, (a, rows) in enumerate(zip(asked, parts, strict=True)):
        h = found.values[found.reliable, at : at + len(rows)]
        at += len(rows)
        terms = h[:, :, chosen] * u
        _put(values, number, good, terms, terms.sum(axis=2))
        if a.port:
            values.impedances[number, good] = h[:, 0, order[a.test]]
    return left


def _put(values: Values, number: int, points: Numbers, terms: Numbers, sums: Numbers) -> None:
    """Terms of a quantity, or of the voltages and currents of a power (points × parts × …)."""
    if terms.shape[1] == 1:
        values.terms[number, points], values.totals[number, points] = terms[:, 0], sums[:, 0]
        return
    own = terms[:, ::2] * terms[:, 1::2].conj()
    values.terms[number, points] = own.sum(axis=1)
    values.totals[number, points] = (sums[:, ::2] * sums[:, 1::2].conj()).sum(axis=1)


def one_point(
    network: Network, frequency: Frequency, asked: Sequence[Asked], values: Values,
    names: Sequence[str], form: str, point: int,
) -> None:  # fmt: skip
    """Fill in a point by a solver of its own; where there is no value, the reason in words."""
    try:
        solver, state = all_on(with_tests(network, asked), frequency, form)
        for number, a in enumerate(asked):
            reason = _fill(solver, state, a, names, values, number, point)
            if reason is not None:
                values.reasons[number][point] = reason
    except EquivError as error:
        values.refuse(point, "; ".join(d.message for d in error.diagnostics))


def _fill(
    solver: Solver, state: State, a: Asked, names: Sequence[str], values: Values,
    number: int, point: int,
) -> str | None:  # fmt: skip
    """The numbers of one thing at a point, or why it has none."""
    reasons = "; ".join(solver.reasons)
    if not all(map(solver.unique, a.parts)):
        return f"with the port open, {reasons}" if a.port else f"no unique value: {reasons}"
    if not _determines(solver, a, solver.u):
        return f"with the port open, {reasons}" if a.port else f"no value: {reasons}"
    chosen = [solver.layout.source_number[name] for name in names]
    # a source that alone has no solution has no term
    alone = np.array([_determines(solver, a, _alone(solver, k)) for k in chosen], bool)
    h = np.array([solver.coefficients(q) for q in a.parts])
    terms = np.where(alone, h[:, chosen] * solver.u[chosen], NOT_A_NUMBER)
    whole = terms.sum(axis=1) if alone.all() else np.array([state.of(q) for q in a.parts])
    if a.port:
        test = solver.layout.source_number[a.test]
        if not _determines(solver, a, _alone(solver, test, 1.0)):
            return f"with the port open, {reasons}"
        values.impedances[number, point] = h[0, test]
    _put(values, number, np.array([point]), terms[None], whole[None])
    return None


def _alone(solver: Solver, source: int, value: complex | None = None) -> Numbers:
    """The sources' values with all but one at zero."""
    u = np.zeros(len(solver.u), complex)
    u[source] = solver.u[source] if value is None else value
    return u


def _determines(solver: Solver, a: Asked, u: Numbers) -> bool:
    return solver.degenerate is None or all(solver.determines(part, u) for part in a.parts)
