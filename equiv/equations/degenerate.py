"""A system that is singular: what is determined all the same.

With left null vectors W (Wᵀ A = 0) and right null vectors N (A N = 0): sources u give a solution
where Wᵀ B u = 0, and a quantity y = C x is unique where C N = 0.

Source: G. H. Golub, C. F. Van Loan, Matrix Computations (4th ed., 2013), section 5.5.
"""

from __future__ import annotations

import numpy as np

from equiv.equations.dense import balance, matrix
from equiv.equations.layout import Numbers
from equiv.equations.system import Row, System

LARGEST = 2000
"""Unknowns up to which singular systems are decomposed."""
RANK_LIMIT = 1e-11
CONSISTENT = 1e-9


class Degenerate:
    """The singular value decomposition of a balanced singular system (branch-current form)."""

    def __init__(self, system: System) -> None:
        self.system = system
        a = matrix(system)
        self.rows, self.columns = balance(a)
        left, values, right = np.linalg.svd(a * self.rows[:, None] * self.columns)
        rank = int((values > RANK_LIMIT * values.max(initial=0.0)).sum())
        self.nullity = system.size - rank
        self.left_null = left[:, rank:].conj()
        self.right_null = right[rank:].conj().T
        self._left, self._values, self._right = left[:, :rank], values[:rank], right[:rank]

    def solve(self, right: Numbers) -> Numbers:
        """The solution of least balanced norm (of the part that has one)."""
        before, after = (v if right.ndim == 1 else v[:, None] for v in (self.rows, self.columns))
        inner = self._left.conj().T @ (before * right)
        inner = inner / (self._values if right.ndim == 1 else self._values[:, None])
        return np.asarray(after * (self._right.conj().T @ inner))

    def solve_transposed(self, right: Numbers) -> Numbers:
        """x of Aᵀ x = right, of least balanced norm."""
        before, after = (v if right.ndim == 1 else v[:, None] for v in (self.columns, self.rows))
        inner = self._right.conj() @ (before * right)
        inner = inner / (self._values if right.ndim == 1 else self._values[:, None])
        return np.asarray(after * (self._left.conj() @ inner))

    def consistent(self, u: Numbers) -> bool:
        """Whether these sources give a solution at all."""
        size = self.rows * self.system.excitation(np.abs(u)).__abs__()
        right = self.rows * self.system.excitation(u)
        off = np.abs(self.left_null.T @ right)
        return bool((off <= CONSISTENT * max(np.abs(size).max(initial=0.0), 1e-300)).all())

    def unique(self, row: Row) -> bool:
        """Whether a quantity is the same in every solution."""
        scaled = self.columns * row.state
        off = np.abs(scaled @ self.right_null)
        return bool((off <= CONSISTENT * np.abs(scaled).max(initial=0.0)).all())

    def culprits(self) -> tuple[list[int], list[int]]:
        """The branches that the smallest null vector names (left or right), or the free nodes.

        Free nodes: a right null vector without currents, so that nothing fixes these voltages.
        """
        own = np.flatnonzero(self.system.unknown >= 0)
        places = self.system.unknown[own]
        nodes = self.system.layout.node_count
        best: list[int] = []
        for null in (self.right_null, self.left_null):
            for vector in null.T:
                large = np.abs(vector) > 1e-6 * np.abs(vector).max()
                named = own[large[places]].tolist()
                if not named and null is self.right_null:
                    return [], np.flatnonzero(large[:nodes]).tolist()
                if named and (not best or len(named) < len(best)):
                    best = named
        return best, []
