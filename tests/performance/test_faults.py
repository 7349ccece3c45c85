"""Faults at every bus of a large system, against solves of the same matrices one by one."""

from collections.abc import Callable
from typing import Any

import numpy as np
import pytest
from performance.grids import grid_system
from performance.measures import seconds

import equiv

pytestmark = pytest.mark.performance
Report = Callable[[str, str, str, str], None]
BUSES = 10_000
ROUNDS = 5


def one_by_one(solvers: list[Any]) -> tuple[float, list[float]]:
    """The time of the factorisations, all together, and of a solve in each."""
    from equiv.equations.sparse import SparseFactor

    solves = []
    factors = 0.0
    for solver in solvers:
        factors += seconds(lambda s=solver: SparseFactor(s.system), 1)
        lu = SparseFactor(solver.system).lu
        right = np.zeros(solver.system.size, complex)
        right[solver.system.size // 2] = 1
        solves.append(seconds(lambda f=lu, r=right: f.solve(r), 15))
    return factors, solves


class Everything:
    """A large system, and its work with factorisations that are made anew each time."""

    def __init__(self) -> None:
        from equiv.network import no_progress
        from equiv.threephase.cases import TYPES
        from equiv.threephase.loading import require_system
        from equiv.threephase.model import View
        from equiv.threephase.sequence.faulted import Fault
        from equiv.threephase.work import Asked, Work

        self.system = require_system(equiv.parse(grid_system(BUSES)))
        self.buses, self.faults = tuple(self.system.buses), [Fault(kind) for kind in TYPES]
        asked = Asked(self.system, View(), self.buses, self.faults, (), "source", no_progress)
        self.made = Work(asked)
        self.three, slow = (
            [of.of[s].solver for s in (1, 2, 0)] for of in (self.made.solution, self.made.slow)
        )
        self.six = [*self.three, *slow]

    def survey(self) -> None:
        """Six factorisations, impedances, terms, and the columns of four types."""
        factorise(self.six)
        found = self.made.many()
        assert [len(survey.totals) for survey in found.surveys] == [BUSES] * 4

    def terms(self) -> None:
        """Three factorisations, driving-point impedances, and the terms, bus by source."""
        from equiv.network import no_progress
        from equiv.threephase.matrices import Matrices
        from equiv.threephase.survey import TermsOfType

        factorise(self.three)
        made = self.made
        of = Matrices(made.solution, made.slow, self.buses, "source", no_progress)
        every = np.arange(BUSES)
        for fault in self.faults:
            assert TermsOfType(of, fault).terms(every).shape == (BUSES, len(of.machines))


def factorise(solvers: list[Any]) -> None:
    from equiv.equations.sparse import SparseFactor

    for solver in solvers:
        solver._factor = SparseFactor(solver.system)


def test_survey_of_every_bus(report: Report) -> None:
    everything = Everything()
    survey, terms, factors, whole = (float("inf"),) * 4
    solves = [float("inf")] * 3
    for turn in range(ROUNDS):  # in turns, so that all see the same machine
        survey = min(survey, seconds(everything.survey, 1))
        terms = min(terms, seconds(everything.terms, 1))
        one_factors, one_solves = one_by_one(everything.three)
        factors = min(factors, one_factors)
        solves = list(map(min, solves, one_solves))
        if turn < 2:
            whole = min(whole, seconds(lambda: equiv.fault(everything.system), 1))
    in_three, in_one = (0.7 * BUSES * s + factors for s in (sum(solves), solves[0]))
    made_of = (
        f"3 F {factors:.2f} s, S {1e3 * sum(solves):.2f} ms in all three, "
        f"{1e3 * solves[0]:.2f} ms in the positive one"
    )
    rows = (
        ("and their terms", survey, f"`equiv.fault` with the making of its networks {whole:.2f} s"),
        ("the matrix of terms alone: without R/X for the peak, which has networks of its own",
         terms, "three factorisations, driving-point impedances, terms bus by source"),
    )  # fmt: skip
    for words, took, more in rows:
        what = f"{BUSES:,} buses, four types of fault at each, {words}, against 0.7 n S + 3 F"
        made = f"{took:.2f} s; {made_of}; {more}"
        target = "≤ 1 ×" if took is survey else "(no target)"
        report(f"{what}, S a solve in each of the three networks", target,
               f"{took / in_three:.2f} ×", made)  # fmt: skip
        report(f"{what}, were S one of these solves alone", "(no target)",
               f"{took / in_one:.2f} ×", made)  # fmt: skip
    assert survey <= in_three
