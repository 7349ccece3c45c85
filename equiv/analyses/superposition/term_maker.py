"""The terms of one quantity, made from its coefficients and checked by the sub-circuits."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import replace

import numpy as np

from equiv.analyses.headings import at_words
from equiv.analyses.superposition.subcircuits import (
    MOST_SOURCES,
    MOST_UNKNOWNS,
    Plan,
    SubCircuits,
    why_not,
)
from equiv.analyses.superposition.terms import ControlledState, Term
from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.equations.scalars import scalar
from equiv.equations.solution import Solver, State
from equiv.network import Network

Rounding = Callable[[Quantity], Numbers]


class TermMaker:
    """Terms of one quantity, from its coefficients.

    `rounding` tells what rounding can make of each term, and of all sources at once (last): a
    value within it is zero.
    """

    def __init__(self, solver: Solver, quantity: Quantity, rounding: Rounding | None) -> None:
        self.solver, self.quantity = solver, quantity
        self.rounding = None if rounding is None else rounding(quantity)
        self.coefficients = solver.coefficients(quantity)

    def all_on(self, state: State) -> complex:
        """The quantity with all sources on."""
        found = self._cleaned(state.of(self.quantity), -1)
        return 0.0 if found is None else found

    def terms(
        self,
        subs: SubCircuits,
        reasons: Sequence[str | None],
        controlled: Sequence[tuple[ControlledState, ...]],
    ) -> list[Term]:
        """The term of each plan, with what its sub-circuit gives as its check."""
        contributions = [
            self._cleaned(self.contribution(plan, reason), number)
            for number, (plan, reason) in enumerate(zip(subs.plans, reasons, strict=True))
        ]
        checks = [
            self._cleaned(check, number)
            for number, check in enumerate(subs.checks(self.quantity, contributions))
        ]
        rows = zip(subs.plans, reasons, contributions, controlled, checks, strict=True)
        return [self.term(*row) for row in rows]

    def numbers(self, plans: Sequence[Plan]) -> list[complex]:
        """The contribution of each plan, whether it exists or not."""
        values = (self.contribution(plan, None) for plan in plans)
        found = (self._cleaned(value, k) for k, value in enumerate(values))
        return [0j if value is None else value for value in found]

    def _cleaned(self, value: complex | None, number: int) -> complex | None:
        if value is None or self.rounding is None:
            return value
        return 0j if 0 < abs(value) <= self.rounding[number] else value

    def contribution(self, plan: Plan, reason: str | None) -> complex | None:
        """coefficient × value, summed over the members."""
        if reason is not None:
            return None
        return scalar(self.coefficients[plan.numbers] @ self.solver.u[plan.numbers])

    def term(
        self,
        plan: Plan,
        reason: str | None,
        contribution: complex | None,
        controlled: tuple[ControlledState, ...],
        check: complex | None,
    ) -> Term:
        """The term of a source or a group."""
        if plan.members == (plan.name,):
            term = self._of_source(plan.name, reason, controlled, check)
            return term if term.contribution == contribution else self._zero(term)
        alone = (
            None if has_solution(self.solver, (m,)) else "has no solution alone"
            for m in plan.members
        )
        parts = tuple(map(self._of_source, plan.members, alone))
        return Term(
            source=plan.name, kind="group", members=plan.members, value=None, unit="",
            coefficient=None, coefficient_unit="", contribution=contribution,
            check=check, controlled=controlled, reason=reason, parts=parts,
        )  # fmt: skip

    @staticmethod
    def _zero(term: Term) -> Term:
        """A term that is only rounding."""
        return replace(term, coefficient=0j, contribution=0j)

    def _of_source(
        self,
        name: str,
        reason: str | None,
        controlled: tuple[ControlledState, ...] = (),
        check: complex | None = None,
    ) -> Term:
        source, k = self.solver.network.elements[name], self.solver.layout.source_number[name]
        unit = "V" if source.output == "V" else "A"
        h, u = scalar(self.coefficients[k]), scalar(self.solver.u[k])
        exists = reason is None
        return Term(
            source=name, kind=source.kind, members=(name,), value=u, unit=unit,
            coefficient=h if exists else None,
            coefficient_unit=ratio_unit(self.quantity.unit, unit),
            contribution=h * u if exists else None,
            check=check if exists else None, controlled=controlled, reason=reason,
        )  # fmt: skip


class Existence:
    """Whether quantities and terms exist at one frequency, and why not, in words."""

    def __init__(self, network: Network, solver: Solver, plans: Sequence[Plan]) -> None:
        self.network, self.solver, self.plans = network, solver, plans
        self._why: dict[str, str] = {}

    def refusal(self, quantity: Quantity) -> str | None:
        """Why a quantity has no value with all sources on; None where it has one."""
        solver = self.solver
        parts = _linear_parts(self.network, quantity)
        if all(map(solver.unique, parts)):
            if all(solver.determines(part, solver.u) for part in parts):
                return None
            what = "has no value"
        else:
            what = "has no unique value"
        where = at_words(solver.frequency) or (
            " at DC" if len(self.network.frequencies) > 1 else ""
        )
        return f"{quantity} {what}{where}: {'; '.join(solver.reasons)}"

    def reasons(self, quantity: Quantity) -> list[str | None]:
        """Why each term does not exist; None where it does."""
        if self.solver.degenerate is None:
            return [None] * len(self.plans)
        parts = _linear_parts(self.network, quantity)
        return [self._reason(plan, parts) for plan in self.plans]

    def _reason(self, plan: Plan, parts: Sequence[Quantity]) -> str | None:
        u = plan.alone(self.solver.u)
        if all(self.solver.determines(part, u) for part in parts):
            return None
        if plan.name not in self._why:
            self._why[plan.name] = why_not(self.network, self.solver.frequency, plan.name)
        return self._why[plan.name]


def _linear_parts(network: Network, quantity: Quantity) -> list[Quantity]:
    """The voltages and currents that a quantity is made of."""
    if quantity.what != "P":
        return [quantity]
    pairs = range(len(network.elements[quantity.names[0]].pairs))
    return [Quantity(what, quantity.names, pair) for pair in pairs for what in "VI"]


def has_solution(solver: Solver, members: Sequence[str]) -> bool:
    """Whether the network has a solution with these sources alone."""
    if solver.degenerate is None:
        return True
    numbers = [solver.layout.source_number[m] for m in members]
    return solver.consistent(Plan("", tuple(members), numbers).alone(solver.u))


def rounding_of(solver: Solver, plans: Sequence[Plan], quantity: Quantity) -> Numbers:
    """What rounding can make of each term, and of all sources at once (last).

    Where there are many, each term has a part of what all of them have.
    """
    if len(plans) > MOST_SOURCES or solver.system.size > MOST_UNKNOWNS:
        whole = float(solver.rounding(quantity, solver.u[:, None])[0])
        return np.append(np.full(len(plans), whole / max(1, len(plans))), whole)
    columns = [plan.alone(solver.u) for plan in plans]
    return solver.rounding(quantity, np.stack([*columns, solver.u], axis=1))


_RATIO_UNITS = {("A", "V"): "S", ("V", "A"): "ohm"}


def ratio_unit(over: str, under: str) -> str:
    """The SI unit of a coefficient; 1 for a pure number."""
    return _RATIO_UNITS.get((over, under), "1")
