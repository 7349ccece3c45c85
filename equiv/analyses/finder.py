"""Finding the terms: the solvers of each frequency, the plans of the terms, and their checks."""

from __future__ import annotations

from collections.abc import Sequence

from equiv.analyses.cautions import about_solver
from equiv.analyses.paths import paths_check, paths_of
from equiv.analyses.power import power_at
from equiv.analyses.result import Caution, Check
from equiv.analyses.subcircuits import (
    MOST_SOURCES,
    MOST_UNKNOWNS,
    Plan,
    SubCircuits,
    controlled_states,
    why_not,
)
from equiv.analyses.terms import CLOSURE_LIMIT, ControlledState, FrequencyTerms, Term
from equiv.elements.element import Frequency
from equiv.elements.quantity import Quantity
from equiv.equations.solution import Solver, State, all_on
from equiv.errors import Diagnostic
from equiv.network import Find, Network, Progress
from equiv.units import write_value


class TermFinder:
    """What is shared by all quantities: the solvers, the plans of the terms, what was found."""

    def __init__(
        self, network: Network, by: str, paths: bool, check: str, progress: Progress
    ) -> None:
        self.network, self.by, self.paths = network, by, paths
        self.check, self.progress = check, progress
        self.checks: list[Check] = []
        self.cautions: list[Caution] = []
        self.refusals: list[Diagnostic] = []
        self.how = "each"

    def at(self, frequency: Frequency, finds: Sequence[Find]) -> list[FrequencyTerms | None]:
        """The terms of every quantity at one frequency; None for one that is not unique.

        Where a term and its sub-circuit disagree, the nodal form has lost its digits and the
        branch-current form gives the terms.
        """
        self.progress("equations", 0, 1)
        solver, state = all_on(self.network, frequency)
        plans = self._plans(solver)
        subs = SubCircuits.solve(
            self.network, frequency, plans, self.check, solver.system.size, self.progress
        )
        self.how = subs.how
        found, checks = self._tables(solver, state, subs, finds)
        if solver.form == "nodal" and any(f and not f.agrees for f in found):
            solver = subs.second_solver
            solver.took_over = True
            state = solver.state()
            found, checks = self._tables(solver, state, subs, finds)
        balance = Check(
            f"power balance{at_words(frequency)}", state.balance(), CLOSURE_LIMIT, shared=True
        )
        self.checks += [*checks, balance]
        self.cautions += about_solver(solver)
        return found

    def _tables(
        self, solver: Solver, state: State, subs: SubCircuits, finds: Sequence[Find]
    ) -> tuple[list[FrequencyTerms | None], list[Check]]:
        """The terms of every quantity from one solver, and the checks of their paths."""
        controlled = self._controlled(solver, subs)
        out: list[FrequencyTerms | None] = []
        checks: list[Check] = []
        for q in (find.quantity for find in finds):
            if not self._is_unique(solver, q):
                out.append(None)
                continue
            if q.what == "P":
                out.append(power_at(solver, state, subs.plans, q))
                continue
            largest = state.largest(q.what)
            terms = self._terms(solver, subs, q, controlled)
            if self.paths:
                terms = paths_of(self.network, solver, q, terms, subs.plans)
                checks.append(paths_check(q, terms, largest))
            out.append(FrequencyTerms(solver.frequency, tuple(terms), state.of(q), largest=largest))
        return out, checks

    def _is_unique(self, solver: Solver, q: Quantity) -> bool:
        wanted = [q] if q.what != "P" else [q._replace(what="V"), q._replace(what="I")]
        if all(solver.unique(part) for part in wanted):
            return True
        reasons = "; ".join(solver.reasons)
        self.refusals.append(
            Diagnostic("no-unique-solution", f"{q} has no unique value: {reasons}")
        )
        return False

    def _plans(self, solver: Solver) -> list[Plan]:
        """One plan a source at this frequency, or a group where that is asked or rescues it."""
        here = [
            source.name
            for source in self.network.sources
            if _same(self.network.frequency_of(source), solver.frequency)
        ]
        number = solver.layout.source_number
        names: dict[str, tuple[str, ...]] = {}
        for name in here:
            group = self.network.elements[name].options.group
            if group and (self.by == "group" or self._rescues(solver, name, group)):
                names.setdefault(group, tuple(m for m in self.network.groups[group] if m in here))
            else:
                names[name] = (name,)
        plans = []
        for name, members in names.items():
            plans.append(Plan(name, members, [number[member] for member in members]))
        return plans

    def _rescues(self, solver: Solver, name: str, group: str) -> bool:
        """Whether a source alone has no solution but its group has."""
        if _has_solution(solver, (name,)):
            return False
        if not _has_solution(solver, self.network.groups[group]):
            return False
        self.cautions.append(
            Caution("group-term", f"{group} is one term: its members alone have no solution")
        )
        return True

    def _controlled(self, solver: Solver, subs: SubCircuits) -> list[tuple[ControlledState, ...]]:
        if not self.network.controlled:
            return [()] * len(subs.plans)
        few = len(subs.plans) <= MOST_SOURCES and solver.system.size <= MOST_UNKNOWNS
        found: list[tuple[ControlledState, ...]] = []
        for plan, state in zip(subs.plans, subs.states, strict=True):
            if state is None and few and _has_solution(solver, plan.members):
                state = solver.state(plan.alone(solver.u))
            found.append(controlled_states(self.network, state) if state else ())
        return found

    def _terms(
        self,
        solver: Solver,
        subs: SubCircuits,
        quantity: Quantity,
        controlled: list[tuple[ControlledState, ...]],
    ) -> list[Term]:
        reasons = [self._reason(solver, plan) for plan in subs.plans]
        bare = _Terms(solver, quantity)
        contributions = [bare.contribution(*pair) for pair in zip(subs.plans, reasons, strict=True)]
        checks = subs.checks(quantity, contributions)
        rows = zip(subs.plans, reasons, controlled, checks, strict=True)
        return [bare.term(*row) for row in rows]

    def _reason(self, solver: Solver, plan: Plan) -> str | None:
        """Why a term does not exist, or None where it does."""
        if _has_solution(solver, plan.members):
            return None
        return why_not(self.network, solver.frequency, plan.name)


class _Terms:
    """Terms of one quantity, from its coefficients."""

    def __init__(self, solver: Solver, quantity: Quantity) -> None:
        self.solver, self.quantity = solver, quantity
        self.coefficients = solver.coefficients(quantity)

    def contribution(self, plan: Plan, reason: str | None) -> complex | None:
        """coefficient × value, summed over the members."""
        if reason is not None:
            return None
        return complex(self.coefficients[plan.numbers] @ self.solver.u[plan.numbers])

    def term(
        self,
        plan: Plan,
        reason: str | None,
        controlled: tuple[ControlledState, ...],
        check: complex | None,
    ) -> Term:
        """The term of a source or a group."""
        if plan.members == (plan.name,):
            return self._of_source(plan.name, reason, controlled, check)
        alone = (
            None if _has_solution(self.solver, (m,)) else "has no solution alone"
            for m in plan.members
        )
        parts = tuple(map(self._of_source, plan.members, alone))
        return Term(
            source=plan.name, kind="group", members=plan.members, value=None, unit="",
            coefficient=None, coefficient_unit="", contribution=self.contribution(plan, reason),
            check=check, controlled=controlled, reason=reason, parts=parts,
        )  # fmt: skip

    def _of_source(
        self,
        name: str,
        reason: str | None,
        controlled: tuple[ControlledState, ...] = (),
        check: complex | None = None,
    ) -> Term:
        source, k = self.solver.network.elements[name], self.solver.layout.source_number[name]
        unit = "V" if source.output == "V" else "A"
        h, u = complex(self.coefficients[k]), complex(self.solver.u[k])
        exists = reason is None
        return Term(
            source=name, kind=source.kind, members=(name,), value=u, unit=unit,
            coefficient=h if exists else None,
            coefficient_unit=_ratio_unit(self.quantity.unit, unit),
            contribution=h * u if exists else None,
            check=check if exists else None, controlled=controlled, reason=reason,
        )  # fmt: skip


def _has_solution(solver: Solver, members: tuple[str, ...]) -> bool:
    """Whether the network has a solution with these sources alone."""
    if solver.degenerate is None:
        return True
    numbers = [solver.layout.source_number[m] for m in members]
    return solver.consistent(Plan("", members, numbers).alone(solver.u))


def _ratio_unit(over: str, under: str) -> str:
    return {("A", "V"): "S", ("V", "A"): "ohm"}.get((over, under), "1")


def _same(one: Frequency, other: Frequency) -> bool:
    return abs(one.omega - other.omega) <= 1e-12 * max(one.omega, other.omega)


def at_words(frequency: Frequency) -> str:
    return f" at {write_value(frequency.value, frequency.unit)}" if frequency.omega else ""
