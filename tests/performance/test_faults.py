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


def test_survey_of_every_bus(report: Report) -> None:
    from equiv.equations.sparse import SparseFactor
    from equiv.network import no_progress
    from equiv.threephase.cases import TYPES
    from equiv.threephase.loading import require_system
    from equiv.threephase.model import View
    from equiv.threephase.sequence.faulted import Fault
    from equiv.threephase.work import Asked, Work

    system = require_system(equiv.parse(grid_system(BUSES)))
    faults = [Fault(kind) for kind in TYPES]
    made = Work(Asked(system, View(), tuple(system.buses), faults, (), "source", no_progress))
    solvers = [of.of[s].solver for of in (made.solution, made.slow) for s in (1, 2, 0)]

    def work() -> None:
        """Six factorisations, impedances, terms, and the columns of four types."""
        for solver in solvers:
            assert solver is not None
            solver._factor = SparseFactor(solver.system)
        found = made.many()
        assert [len(survey.totals) for survey in found.surveys] == [BUSES] * 4

    took, factors, whole = float("inf"), float("inf"), float("inf")
    solves = [float("inf")] * 3
    for turn in range(ROUNDS):  # in turns, so that all see the same machine
        took = min(took, seconds(work, 1))
        one_factors, one_solves = one_by_one(solvers[:3])
        factors = min(factors, one_factors)
        solves = list(map(min, solves, one_solves))
        if turn < 2:
            whole = min(whole, seconds(lambda: equiv.fault(system), 1))
    in_three, in_one = (0.7 * BUSES * s + factors for s in (sum(solves), solves[0]))
    made_of = (
        f"{took:.2f} s; 3 F {factors:.2f} s, S {1e3 * sum(solves):.2f} ms in all three, "
        f"{1e3 * solves[0]:.2f} ms in the positive one; `equiv.fault` with the making of its six "
        f"networks {whole:.2f} s"
    )
    what = f"{BUSES:,} buses, four types of fault at each and their terms, against 0.7 n S + 3 F"
    report(
        f"{what}, S a solve in each of the three networks",
        "≤ 1 ×",
        f"{took / in_three:.2f} ×",
        made_of,
    )
    report(
        f"{what}, were S one of these solves alone",
        "(no target)",
        f"{took / in_one:.2f} ×",
        made_of,
    )
    assert took <= in_three
