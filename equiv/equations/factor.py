"""What the analyses need of an arithmetic: to factorise once, and to solve either way.

A factorisation refuses (IllConditionedError) where it cannot vouch for its digits; nothing is
ever added to a matrix to make it solvable.
"""

from __future__ import annotations

from typing import Protocol

from equiv.equations.layout import Numbers
from equiv.equations.system import System

DENSE_UP_TO = 150
"""Unknowns up to which a dense factorisation is the faster one (measured)."""
WORST_CONDITION = 1e13
"""Beyond this condition fewer than three digits are left."""


class IllConditionedError(Exception):
    """The matrix is singular, or so near to it that its solution has no digits."""


class Factor(Protocol):
    """A factorised matrix."""

    def solve(self, right: Numbers) -> Numbers:
        """x of A x = right; `right` is a vector, or a matrix of columns."""

    def solve_transposed(self, right: Numbers) -> Numbers:
        """x of Aᵀ x = right (not conjugated)."""


def factorise(system: System) -> Factor:
    """The factorisation that suits a system's numbers and size."""
    if system.layout.network.exact:
        from equiv.equations.exact.factor import ExactFactor

        return ExactFactor(system)
    if system.size <= DENSE_UP_TO:
        from equiv.equations.dense import DenseFactor

        return DenseFactor(system)
    from equiv.equations.sparse import SparseFactor

    return SparseFactor(system)
