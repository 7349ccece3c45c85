"""Systems solved exactly, and what singular ones determine all the same.

What is singular is decided by ranks, and existence by products that are zero or not: nothing is
compared with a limit.
"""

from __future__ import annotations

from functools import cached_property

import numpy as np

from equiv.equations.degenerate import culprits_of
from equiv.equations.dense import matrix
from equiv.equations.exact.matrices import Matrix, null_space, rank_of
from equiv.equations.factor import IllConditionedError
from equiv.equations.layout import Numbers
from equiv.equations.system import Row, System
from equiv.errors import Diagnostic, UsageError

LARGEST = 1500
"""Unknowns up to which systems are solved exactly (some ten seconds)."""


class ExactFactor:
    """A regular matrix of exact numbers; each solve is exact."""

    def __init__(self, system: System) -> None:
        require_small(system)
        self._entries = matrix(system)
        self._straight = Matrix(self._entries)
        if not self._straight.regular:
            raise IllConditionedError

    @cached_property
    def _transposed(self) -> Matrix:
        return Matrix(self._entries.T)

    def solve(self, right: Numbers) -> Numbers:
        """x of A x = right."""
        return self._straight.solve(right)

    def solve_transposed(self, right: Numbers) -> Numbers:
        """x of Aᵀ x = right."""
        return self._transposed.solve(right)


def require_small(system: System) -> None:
    """Complain of a system that would take minutes."""
    if system.size > LARGEST:
        raise UsageError(
            Diagnostic(
                "too-large",
                f"exact results are for up to {LARGEST} unknowns; this network has {system.size}",
                hint="leave --exact out: floating point takes networks of any size",
            )
        )


class ExactDegenerate:
    """A singular system (branch-current form): null vectors, and a regular part of full rank.

    With left null vectors W and right null vectors N: sources u give a solution where Wᵀ B u = 0,
    and a quantity C x is unique where C N = 0.
    """

    def __init__(self, system: System) -> None:
        require_small(system)
        self.system = system
        a = matrix(system)
        self.right_null, self.left_null = null_space(a), null_space(a.T)
        self.nullity = self.right_null.shape[1]
        self._rows, self._columns = Matrix(a.T).reduced()[1], Matrix(a).reduced()[1]
        part = a[np.ix_(self._rows, self._columns)]
        self._straight, self._transposed = Matrix(part), Matrix(part.T)

    def solve(self, right: Numbers) -> Numbers:
        """A solution of the equations that do not contradict each other."""
        out = np.zeros(right.shape, object)
        out[self._columns] = self._straight.solve(right[self._rows])
        return out

    def solve_transposed(self, right: Numbers) -> Numbers:
        """A solution x of Aᵀ x = right."""
        out = np.zeros(right.shape, object)
        out[self._rows] = self._transposed.solve(right[self._columns])
        return out

    def consistent(self, u: Numbers) -> bool:
        """Whether these sources give a solution at all."""
        return not self._contradicted(u).any()

    def _contradicted(self, u: Numbers) -> Numbers:
        """Which left null vectors the sources contradict: Wᵀ B u is not zero."""
        return np.asarray((self.left_null.T @ self.system.excitation(u)) != 0, bool)

    def reaches(self, row: Row, u: Numbers) -> bool:
        """Whether a contradiction between these sources touches a quantity.

        It does unless some adjoint solution stands on none of the contradicted equations.
        """
        contradicted = self._contradicted(u)
        if not contradicted.any():
            return False
        involved = (self.left_null[:, contradicted] != 0).any(axis=1)
        null = self.left_null[involved]
        adjoint = self.solve_transposed(row.state)[involved]
        return rank_of(np.column_stack([null, adjoint])) > rank_of(null)

    def unique(self, row: Row) -> bool:
        """Whether a quantity is the same in every solution."""
        return not np.asarray(row.state @ self.right_null != 0, bool).any()

    def spread(self, row: Numbers, x: Numbers) -> Numbers:
        """What a quantity may take from rounding: nothing."""
        return np.zeros(x.shape[1:])

    def spreads(self, x: Numbers) -> Numbers:
        """The same for each unknown of one solution."""
        return np.zeros(len(x))

    def culprits(self) -> tuple[list[int], list[int]]:
        """The branches that the smallest null vector names (left or right), or the free nodes."""
        right, left = (np.asarray(n != 0, bool) for n in (self.right_null, self.left_null))
        return culprits_of(self.system, right, left)
