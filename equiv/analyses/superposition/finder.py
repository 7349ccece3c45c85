"""Finding the terms: the solvers of each frequency, the plans of the terms, and their checks."""

from __future__ import annotations

from collections.abc import Sequence
from functools import partial

from equiv.analyses.cautions import about_solver
from equiv.analyses.headings import at_words
from equiv.analyses.result import Caution, Check
from equiv.analyses.superposition.arbiter import (
    MOST_WORK,
    Methods,
    decide,
    exact_solver,
    in_floats,
    may_decide,
)
from equiv.analyses.superposition.paths import paths_check, paths_of
from equiv.analyses.superposition.power import power_at
from equiv.analyses.superposition.subcircuits import (
    MOST_SOURCES,
    MOST_UNKNOWNS,
    Plan,
    SubCircuits,
    controlled_states,
)
from equiv.analyses.superposition.term_maker import Existence, TermMaker, has_solution, rounding_of
from equiv.analyses.superposition.terms import ControlledState, FrequencyTerms, limit_of
from equiv.elements.element import Frequency
from equiv.equations.solution import Solver, State, all_on
from equiv.network import Find, Network, Progress


class TermFinder:
    """What is shared by all quantities: the solvers, the plans of the terms, what was found."""

    def __init__(
        self, network: Network, by: str, paths: bool, check: str, progress: Progress
    ) -> None:
        self.network, self.by, self.paths = network, by, paths
        self.check, self.progress = check, progress
        self.checks: list[Check] = []
        self.cautions: list[Caution] = []
        self.how = self._how_decided = ""

    def at(self, frequency: Frequency, finds: Sequence[Find]) -> list[FrequencyTerms]:
        """The terms of every quantity at one frequency, or the reason why it has no value.

        Where a term and its sub-circuit disagree, exact arithmetic decides; in a network that is
        too large for it the branch-current form gives the terms.
        """
        self.progress("equations", 0, 1)
        solver, state = all_on(self.network, frequency)
        subs = SubCircuits.solve(
            self.network, frequency, self._plans(solver), self.check, solver, self.progress
        )
        first = solver
        found, checks = self._tables(solver, state, subs, finds)
        # where what they give is in doubt, values that are only rounding must not pass for results
        if solver.degenerate is not None or not all(f.agrees for f in found):
            quick = self.check == "none" and solver.system.size > MOST_UNKNOWNS
            if solver.form == "nodal" and not quick:
                solver = subs.second_solver
                state = solver.state()
            before = found
            found, checks = self._tables(solver, state, subs, finds, clean=True)
            decided = None
            if _lost_digits(before, found):
                decided = self._decided(first, subs, finds, (before, found))
                solver.took_over |= decided is None
            found, checks = decided or (found, checks)
        self.how = subs.how_in_words + (", as the terms were" if solver.took_over else "")
        self.how += self._how_decided
        where = at_words(frequency)
        balance = Check(
            f"power balance{where}", state.balance(), limit_of(self.network), shared=True
        )
        self.checks += [*checks, balance] if solver.consistent(solver.u) else checks
        self.cautions += about_solver(solver)
        return found

    def _decided(
        self,
        solver: Solver,
        subs: SubCircuits,
        finds: Sequence[Find],
        methods: tuple[Sequence[FrequencyTerms], Sequence[FrequencyTerms]],
    ) -> tuple[list[FrequencyTerms], list[Check]] | None:
        """The terms by exact arithmetic, where one of the two methods has lost its digits."""
        if not may_decide(self.network, solver):
            return None
        exact = exact_solver(solver)
        state = exact.state()
        true, checks = self._tables(exact, state, subs, finds)
        verdict = decide(Methods(*methods, true, solver.form))
        if verdict is None:
            return None
        self.cautions.append(Caution("digits-lost", verdict.words))
        if not verdict.both or len(subs.plans) * exact.system.size > MOST_WORK:
            return verdict.found, checks
        again = SubCircuits.solve(
            exact.network, solver.frequency, subs.plans, self.check, exact, self.progress
        )
        true, _ = self._tables(exact, state, again, finds)
        self._how_decided = ", in exact arithmetic"
        return [in_floats(at, [t.check for t in at.terms]) for at in true], checks

    def _tables(
        self,
        solver: Solver,
        state: State,
        subs: SubCircuits,
        finds: Sequence[Find],
        clean: bool = False,
    ) -> tuple[list[FrequencyTerms], list[Check]]:
        """The terms of every quantity from one solver, and the checks of their paths."""
        controlled = self._controlled(solver, subs)
        existence = Existence(self.network, solver, subs.plans)
        out: list[FrequencyTerms] = []
        checks: list[Check] = []
        for q in (find.quantity for find in finds):
            refusal = existence.refusal(q)
            if refusal is not None:
                out.append(FrequencyTerms(solver.frequency, (), 0j, refusal=refusal))
                continue
            rounding = partial(rounding_of, solver, subs.plans) if clean else None
            if q.what == "P":
                out.append(power_at(solver, state, subs.plans, existence, rounding, q))
                continue
            maker = TermMaker(solver, q, rounding)
            terms = maker.terms(subs, existence.reasons(q), controlled)
            if self.paths:
                terms = paths_of(solver.network, solver, q, terms, subs.plans)
                checks.append(paths_check(self.network, q, terms))
            out.append(FrequencyTerms(solver.frequency, tuple(terms), maker.all_on(state)))
        return out, checks

    def _plans(self, solver: Solver) -> list[Plan]:
        """One plan a source at this frequency, or a group where that is asked or rescues it."""
        sources = self.network.sources
        here = [s for s in sources if self.network.frequency_of(s).same_as(solver.frequency)]
        members: dict[str, list[str]] = {}
        for source in here:
            if source.options.group:
                members.setdefault(source.options.group, []).append(source.name)
        whole = {
            g
            for g, names in members.items()
            if self.by == "group" or self._rescues(solver, g, names)
        }
        number = solver.layout.source_number
        plans: dict[str, Plan] = {}
        for source in here:
            group = source.options.group
            name = group if group in whole and group else source.name
            names = tuple(members[name]) if name == group else (name,)
            if name not in plans:
                plans[name] = Plan(name, names, [number[n] for n in names])
        return list(plans.values())

    def _rescues(self, solver: Solver, group: str, members: Sequence[str]) -> bool:
        """Whether some of a group's members alone have no solution but the group has."""
        if all(has_solution(solver, (name,)) for name in members):
            return False
        if not has_solution(solver, members):
            return False
        words = f"{group} is one term: its members alone have no solution"
        self.cautions.append(Caution("group-term", words))
        return True

    def _controlled(self, solver: Solver, subs: SubCircuits) -> list[tuple[ControlledState, ...]]:
        """The controlled sources in each sub-circuit that has a solution."""
        if not self.network.controlled:
            return [()] * len(subs.plans)
        few = len(subs.plans) <= MOST_SOURCES and solver.system.size <= MOST_UNKNOWNS
        found: list[tuple[ControlledState, ...]] = []
        for plan, state in zip(subs.plans, subs.states, strict=True):
            if not has_solution(solver, plan.members):
                state = None
            elif state is None and few:
                state = solver.state(plan.alone(solver.u))
            found.append(controlled_states(self.network, state) if state else ())
        return found


def _lost_digits(before: Sequence[FrequencyTerms], after: Sequence[FrequencyTerms]) -> bool:
    """Whether a doubtful quantity was more than the rounding of a zero."""
    pairs = zip(before, after, strict=True)
    return any(not one.agrees and other.arithmetic_sum > 0 for one, other in pairs)
