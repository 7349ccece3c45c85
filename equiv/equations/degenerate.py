"""A system that is singular: what is determined all the same.

With left null vectors W (Wᵀ A = 0) and right null vectors N (A N = 0): sources u give a solution
where Wᵀ B u = 0, and a quantity y = C x is unique where C N = 0.

Source: G. H. Golub, C. F. Van Loan, Matrix Computations (4th ed., 2013), section 5.5.
"""

from __future__ import annotations

from typing import Protocol

import numpy as np
from numpy.typing import NDArray

from equiv.equations.dense import balance, matrix
from equiv.equations.layout import Numbers
from equiv.equations.system import Row, System

LARGEST = 2000
"""Unknowns up to which singular systems are decomposed."""
RANK_LIMIT = 1e-11
SUPPORT = 1e-8
"""What is smaller in a null vector, relative to its largest entry, is rounding."""
CONSISTENT = 1e-9


def echelon(vectors: Numbers) -> Numbers:
    """Another basis of the space of some columns, reduced so that each has a pivot of its own.

    Faults in parts that have nothing to do with each other then stand in different columns.
    """
    rows = vectors.T.copy()
    for number in range(len(rows)):
        flat = int(np.argmax(np.abs(rows[number:])))
        pivot, column = divmod(flat, rows.shape[1])
        rows[[number, number + pivot]] = rows[[number + pivot, number]]
        rows[number] /= rows[number, column]
        others = np.arange(len(rows)) != number
        rows[others] -= np.outer(rows[others, column], rows[number])
    rows[np.abs(rows) < SUPPORT * np.abs(rows).max(axis=1, initial=0.0, keepdims=True)] = 0
    return np.asarray(rows.T)


class OutOfRangeError(Exception):
    """The values are beyond what floating point can hold."""


class Decomposition(Protocol):
    """What a singular system still determines, whatever its arithmetic."""

    def solve(self, right: Numbers) -> Numbers:
        """A solution, of the part that has one."""

    def solve_transposed(self, right: Numbers) -> Numbers:
        """x of Aᵀ x = right."""

    def consistent(self, u: Numbers) -> bool:
        """Whether these sources give a solution at all."""

    def reaches(self, row: Row, u: Numbers) -> bool:
        """Whether a contradiction between these sources touches a quantity."""

    def unique(self, row: Row) -> bool:
        """Whether a quantity is the same in every solution."""

    def spread(self, row: Numbers, x: Numbers) -> Numbers:
        """What a quantity may take from the rounding of a solution."""

    def spreads(self, x: Numbers) -> Numbers:
        """The same for each unknown of one solution."""

    def culprits(self) -> tuple[list[int], list[int]]:
        """The branches that the smallest null vector names (left or right), or the free nodes."""


def decomposed(system: System) -> Decomposition:
    """The decomposition that suits a system's numbers.

    Errors: OutOfRangeError where floating point cannot hold the values.
    """
    if system.layout.network.exact:
        from equiv.equations.exact.factor import ExactDegenerate

        return ExactDegenerate(system)
    return Degenerate(system)


class Degenerate:
    """The singular value decomposition of a balanced singular system (branch-current form)."""

    def __init__(self, system: System) -> None:
        self.system = system
        a = matrix(system)
        self.rows, self.columns = balance(a)
        try:
            left, values, right = np.linalg.svd(a * self.rows[:, None] * self.columns)
        except np.linalg.LinAlgError:
            raise OutOfRangeError from None
        rank = int((values > RANK_LIMIT * values.max(initial=0.0)).sum())
        self.nullity = system.size - rank
        self.left_null = echelon(left[:, rank:].conj())
        self.right_null = echelon(right[rank:].conj().T)
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
        return not self._contradicted(u).any()

    def _contradicted(self, u: Numbers) -> NDArray[np.bool_]:
        """Which left null vectors the sources contradict: Wᵀ B u is not zero."""
        b = self.system.b
        pulls = np.zeros((len(u), self.nullity), self.left_null.dtype)
        weights = (self.rows[b.rows] * b.values)[:, None] * self.left_null[b.rows]
        np.add.at(pulls, b.columns, weights)
        parts = pulls * u[:, None]
        return np.asarray(np.abs(parts.sum(axis=0)) > CONSISTENT * np.abs(parts).sum(axis=0))

    def reaches(self, row: Row, u: Numbers) -> bool:
        """Whether a contradiction between these sources touches a quantity.

        A quantity keeps its value however the contradicted equations are mended if its adjoint
        solution does not stand on any of them.
        """
        contradicted = self._contradicted(u)
        if not contradicted.any():
            return False
        involved = np.abs(self.left_null[:, contradicted]).max(axis=1) > SUPPORT
        weight = np.abs(self.solve_transposed(row.state) / self.rows)
        return bool(weight[involved].max(initial=0.0) > SUPPORT * weight.max(initial=0.0))

    def unique(self, row: Row) -> bool:
        """Whether a quantity is the same in every solution."""
        scaled = self.columns * row.state
        off = np.abs(scaled @ self.right_null)
        return bool((off <= CONSISTENT * np.abs(scaled).max(initial=0.0)).all())

    def spread(self, row: Numbers, x: Numbers) -> Numbers:
        """What a quantity may take from the largest part of a balanced solution."""
        scaled = np.abs(x) / (self.columns if x.ndim == 1 else self.columns[:, None])
        return np.asarray(np.abs(self.columns * row).sum() * scaled.max(axis=0, initial=0.0))

    def spreads(self, x: Numbers) -> Numbers:
        """The same for each unknown of one solution."""
        return np.asarray(self.columns * (np.abs(x) / self.columns).max(initial=0.0))

    def culprits(self) -> tuple[list[int], list[int]]:
        """The branches that the smallest null vector names (left or right), or the free nodes.

        Free nodes: a right null vector without currents, so that nothing fixes these voltages.
        """
        return culprits_of(self.system, _large(self.right_null), _large(self.left_null))


def _large(vectors: Numbers) -> NDArray[np.bool_]:
    """Which entries of null vectors are more than rounding."""
    size = np.abs(vectors)
    return np.asarray(size > 1e-6 * size.max(axis=0, initial=0.0))


def culprits_of(
    system: System, right: NDArray[np.bool_], left: NDArray[np.bool_]
) -> tuple[list[int], list[int]]:
    """The branches that the smallest null vector names, or the free nodes.

    `right` and `left` tell where the null vectors, one a column, are not zero.
    """
    own = np.flatnonzero(system.unknown >= 0)
    places = system.unknown[own]
    best: list[int] = []
    for null in (right, left):
        for vector in null.T:
            named = own[vector[places]].tolist()
            if not named and null is right:
                return [], np.flatnonzero(vector[: system.layout.node_count]).tolist()
            if named and (not best or len(named) < len(best)):
                best = named
    return best, []
