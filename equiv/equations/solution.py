"""A network solved at one frequency: coefficients of its sources, and states of all of it."""

from __future__ import annotations

from collections.abc import Callable
from typing import TypeVar

import numpy as np

from equiv.elements.element import Frequency
from equiv.elements.quantity import Quantity
from equiv.equations import words
from equiv.equations.degenerate import (
    LARGEST,
    Decomposition,
    OutOfRangeError,
    decomposed,
)
from equiv.equations.dense import DenseFactor
from equiv.equations.factor import Factor, IllConditionedError, factorise
from equiv.equations.graph import findings
from equiv.equations.layout import Integers, Layout, Numbers
from equiv.equations.scalars import like, scalar
from equiv.equations.sources import source_values as source_values
from equiv.equations.state import BALANCE, EPSILON, ROUNDINGS
from equiv.equations.state import State as State
from equiv.equations.system import Row, System
from equiv.errors import Diagnostic, NoUniqueSolutionError
from equiv.network import Network

T = TypeVar("T")


class Solver:
    """The equations of a network at one frequency, factorised once.

    `form` is "nodal" or "branch-current". Where the nodal form has lost its digits the
    branch-current form takes over (`took_over`); where that is singular too, what is determined
    all the same is still given, and `reasons` say in words what is wrong.

    Errors: NoUniqueSolutionError where the network is singular and too large to decompose.
    """

    def __init__(self, network: Network, frequency: Frequency, form: str = "nodal") -> None:
        self.network, self.frequency, self.form = network, frequency, form
        self.layout = Layout(network)
        self.s = self.layout.arithmetic.s(frequency)
        self.u = source_values(network, frequency)
        self.system = System(self.layout, form, self.s)
        self.took_over = False
        self.degenerate: Decomposition | None = None
        self.reasons: tuple[str, ...] = ()
        self._absolute_inverse: Numbers | None = None
        found = findings(self.system.laws)
        if found:
            self.reasons = tuple(words.of_finding(f, self.layout, self.u) for f in found)
            self._decompose()
            return
        try:
            self._factor: Factor = factorise(self.system)
        except IllConditionedError:
            self._take_over()

    def _take_over(self) -> None:
        """From the nodal form to the branch-current form; from there to the singular case.

        What is exact loses no digits, so that its nodal form is singular only with the other.
        """
        if self.network.exact:
            self._decompose()
            return
        self.took_over, self.form = True, "branch-current"
        self.system = System(self.layout, self.form, self.s)
        try:
            if self.system.size <= LARGEST:
                self._factor = DenseFactor(self.system, strict=False)
            else:
                from equiv.equations.sparse import SparseFactor

                self._factor = SparseFactor(self.system, strict=False)
        except IllConditionedError:
            self._decompose()

    def _decompose(self) -> None:
        if self.form != "branch-current":
            self.form = "branch-current"
            self.system = System(self.layout, self.form, self.s)
        if self.system.size > LARGEST:
            raise NoUniqueSolutionError(self._complaints())
        try:
            self.degenerate = decomposed(self.system)
        except OutOfRangeError:
            raise NoUniqueSolutionError(_OUT_OF_RANGE) from None
        self._factor = self.degenerate
        if not self.reasons:
            branches, nodes = self.degenerate.culprits()
            of = words.of_nodes(nodes, self.layout) if nodes else None
            self.reasons = (of or words.of_branches(branches, self.layout),)

    def _complaints(self) -> list[Diagnostic]:
        reasons = self.reasons or ("the network's equations are singular",)
        return [Diagnostic("no-unique-solution", reason) for reason in reasons]

    def _solved(self, how: str, right: Numbers) -> Numbers:
        try:
            solution: Numbers = getattr(self._factor, how)(right)
            if not self.network.exact and not np.isfinite(solution).all():
                raise NoUniqueSolutionError(_OUT_OF_RANGE)
            return solution
        except IllConditionedError:
            if self.took_over:
                raise NoUniqueSolutionError(self._complaints()) from None
        raise _TakenOverError

    def _retry(self, work: Callable[[], T]) -> T:
        """Do some work; once more in the branch-current form if the nodal one loses its digits."""
        try:
            return work()
        except _TakenOverError:
            self._take_over()
            return work()

    def row(self, quantity: Quantity) -> Row:
        """The row of a voltage or current quantity."""
        return self.system.row(quantity)

    def unique(self, quantity: Quantity) -> bool:
        """Whether a quantity is the same in every solution of the network."""
        return self.degenerate is None or self.degenerate.unique(self.row(quantity))

    def consistent(self, u: Numbers) -> bool:
        """Whether these values of the sources give a solution."""
        return self.degenerate is None or self.degenerate.consistent(u)

    def determines(self, quantity: Quantity, u: Numbers) -> bool:
        """Whether these sources give a quantity a value.

        They do even where they contradict each other, in a part that does not touch it.
        """
        if self.degenerate is None or self.degenerate.consistent(u):
            return True
        return not self.degenerate.reaches(self.row(quantity), u)

    def require_unique(self, quantity: Quantity) -> None:
        """Raise NoUniqueSolutionError where a quantity is not determined."""
        if not self.unique(quantity):
            message = f"{quantity} has no unique value: {'; '.join(self.reasons)}"
            raise NoUniqueSolutionError(Diagnostic("no-unique-solution", message))

    def coefficients(self, quantity: Quantity) -> Numbers:
        """What one unit of each source gives to a voltage or current (one transposed solve).

        The coefficient of a source that alone has no solution has no meaning; ask `consistent`.
        """

        def work() -> Numbers:
            row = self.row(quantity)
            adjoint = self._solved("solve_transposed", row.state)
            return like(self.network, self.system.gather(row, adjoint))

        return self._retry(work)

    def state(self, u: Numbers | None = None) -> State:
        """The solution for given values of the sources (all of them on, if none are given).

        In the branch-current form of a small network what is only rounding is made zero; what is
        exact has no rounding.
        """
        values = self.u if u is None else u

        def work() -> State:
            x = self._solved("solve", self.system.excitation(values))
            rounds = self.form == "branch-current" and not self.network.exact
            if rounds and self.system.size <= CLEANED_UP_TO:
                x = self._cleaned(x, values)
            return State(self.system, x, values)

        return self._retry(work)

    def _cleaned(self, x: Numbers, u: Numbers) -> Numbers:
        """The solution with zeros for unknowns that are not above their rounding."""
        if self._absolute_inverse is None:
            self._absolute_inverse = np.abs(self._solved("solve", np.eye(self.system.size)))
        bound = self._absolute_inverse @ self.system.magnitudes(x, u)
        bound = bound + EPSILON * np.abs(x).max(initial=0.0)
        if self.degenerate is not None:
            bound = bound + self.degenerate.spreads(x)
        return np.where(np.abs(x) > ROUNDINGS * EPSILON * bound, x, 0)

    def solutions(self, columns: Numbers) -> Numbers:
        """The unknowns for each column of source values, solved in blocks."""
        return self._retry(lambda: self._solved("solve", self.system.excitation(columns)))

    def response(self, right: Numbers) -> Numbers:
        """x of A x = right."""
        return self._retry(lambda: self._solved("solve", right))

    def driving_points(self, nodes: Integers) -> Numbers:
        """The driving-point impedance of each of many nodes over the ground, together."""

        def work() -> Numbers:
            lu = getattr(self._factor, "lu", None)
            if lu is not None:
                from equiv.equations.diagonal import inverse_diagonal

                return inverse_diagonal(lu, nodes)
            unit = np.eye(self.system.size)[:, nodes]
            return np.asarray((unit * self._solved("solve", unit)).sum(axis=0))

        return self._retry(work)

    def values(self, quantity: Quantity, columns: Numbers) -> list[complex]:
        """A voltage or current for each column of source values, solved in blocks."""

        def work() -> Numbers:
            row = self.row(quantity)
            x = self._solved("solve", self.system.excitation(columns))
            return np.asarray(row.state @ x + row.source @ columns)

        return [scalar(value) for value in self._retry(work)]

    def rounding(self, quantity: Quantity, columns: Numbers) -> Numbers:
        """What rounding alone can make of a quantity, for each column of source values.

        |λ|ᵀ(|A||x| + |B||u|) times a few units of the last digit, λ the adjoint solution: the
        forward bound of a solution that is backward stable row by row (N. J. Higham, Accuracy
        and Stability of Numerical Algorithms, 2nd ed., 2002, section 7.2). Nothing, where
        numbers are exact.
        """
        if self.network.exact:
            return np.zeros(columns.shape[1])

        def work() -> Numbers:
            row = self.row(quantity)
            adjoint = np.abs(self._solved("solve_transposed", row.state))
            x = self._solved("solve", self.system.excitation(columns))
            size, state = np.abs(x), np.abs(row.state)
            bound = adjoint @ self.system.magnitudes(x, columns) + state @ size
            # one refinement leaves the square of the rounding of the largest unknown
            bound = bound + EPSILON * state.sum() * size.max(axis=0, initial=0.0)
            if self.degenerate is not None:
                bound = bound + self.degenerate.spread(row.state, x)
            return np.asarray(ROUNDINGS * EPSILON * bound)

        return self._retry(work)

    def require_solution(self) -> None:
        """Raise NoUniqueSolutionError where all the sources together have no solution."""
        if not self.consistent(self.u):
            raise NoUniqueSolutionError(self._complaints())


_OUT_OF_RANGE = Diagnostic(
    "out-of-range",
    "the network's values are beyond what floating point can hold",
    hint="values between 1e-100 and 1e100 are safe",
)
CLEANED_UP_TO = 500
"""Unknowns up to which the rounding of each is bounded (by an inverse)."""


def all_on(network: Network, frequency: Frequency, form: str = "nodal") -> tuple[Solver, State]:
    """All sources at once, in the nodal form unless its powers do not balance.

    Where they contradict each other the state is the nearest one; ask `determines`.
    """
    solver = Solver(network, frequency, form)
    state = solver.state()
    if solver.form == "nodal" and not state.balance() <= BALANCE:
        solver = Solver(network, frequency, "branch-current")
        state = solver.state()
    return solver, state


class _TakenOverError(Exception):
    """The nodal form has lost its digits in a solve."""
