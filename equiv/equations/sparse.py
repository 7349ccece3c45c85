"""Sparse floating-point arithmetic, for large systems."""

from __future__ import annotations

from typing import Self

import numpy as np
import scipy.sparse as sparse
from scipy.sparse.linalg import splu

from equiv.equations.factor import WORST_CONDITION, IllConditionedError
from equiv.equations.layout import Numbers
from equiv.equations.system import System

BLOCK = 8
"""Right-hand sides solved at once (measured: 0.57 of a single solve each)."""
ORDERING = "MMD_AT_PLUS_A"
_SMALL_PANEL_BELOW = 300_000
_EPSILON = 2.0**-53
_SEED = 20240902


class SparseFactor:
    """A sparse matrix factorised by SuperLU, with one step of refinement always.

    The ordering and the symmetric mode were measured: without symmetric mode the same ordering
    can be 75 times slower, and threshold 0 in symmetric mode is unsafe.
    """

    def __init__(self, system: System, strict: bool = True) -> None:
        entries = (system.a.values.astype(system.dtype), (system.a.rows, system.a.columns))
        self._factorise(sparse.csc_matrix(entries, shape=(system.size, system.size)), strict)
        if strict and not self._condition(system) <= WORST_CONDITION:
            raise IllConditionedError

    @classmethod
    def of_matrix(cls, a: sparse.csc_matrix, ordered: bool = False) -> Self:
        """The factorisation of a matrix that is put together already, and perhaps in order.

        Its condition is not looked at.
        """
        factor = cls.__new__(cls)
        factor._factorise(a, True, "NATURAL" if ordered else ORDERING)
        return factor

    @property
    def order(self) -> Numbers:
        """The unknowns in the order of elimination."""
        return np.argsort(self.lu.perm_c)

    def _factorise(self, a: sparse.csc_matrix, strict: bool, ordering: str = ORDERING) -> None:
        self.a = a
        self.transposed = a.T
        panel = {"panel_size": 1} if a.shape[0] < _SMALL_PANEL_BELOW else {}
        options = (
            {
                "permc_spec": ordering,
                "diag_pivot_thresh": 0.1,
                "options": {"SymmetricMode": True},
                **panel,
            }
            if strict
            else {"permc_spec": "COLAMD", "diag_pivot_thresh": 1.0}
        )
        try:
            self.lu = splu(self.a, **options)
        except RuntimeError:
            raise IllConditionedError from None

    def _condition(self, system: System) -> float:
        """A lower bound of the balanced matrix's condition, from one solve with random signs.

        Refinement alone would not see it: where widely different conductances were added, the
        matrix has lost their digits and is solved accurately all the same.
        """
        size = np.abs(self.a)
        scale = 1 / np.sqrt(np.maximum(size.max(axis=1).toarray().ravel(), 1e-300))
        signs = np.random.default_rng(_SEED).choice([-1.0, 1.0], len(scale))
        inverse = self.lu.solve((signs / scale).astype(self.a.dtype)) / scale
        # Σ|entry| before entries cancel, as far as rounding goes
        gross = np.abs(system.a.values) * scale[system.a.columns]
        sums = np.bincount(system.a.rows, weights=gross, minlength=len(scale))
        norm = float((scale * sums).max(initial=0.0))
        return norm * float(np.abs(inverse).max(initial=0.0))

    def solve(self, right: Numbers) -> Numbers:
        """x of A x = right."""
        return self._refined("N", self.a, right)

    def solve_transposed(self, right: Numbers) -> Numbers:
        """x of Aᵀ x = right."""
        return self._refined("T", self.transposed, right)

    def _refined(self, which: str, a: Numbers, right: Numbers) -> Numbers:
        right = right.astype(np.result_type(right, self.a.dtype))
        if np.iscomplexobj(right) and not np.iscomplexobj(self.a):
            return np.asarray(
                self._refined(which, a, right.real) + 1j * self._refined(which, a, right.imag)
            )
        if right.ndim == 2:
            blocks = [
                self._one(which, a, np.asfortranarray(right[:, i : i + BLOCK]))
                for i in range(0, right.shape[1], BLOCK)
            ]
            return np.concatenate(blocks, axis=1) if blocks else right
        return self._one(which, a, right)

    def _one(self, which: str, a: Numbers, right: Numbers) -> Numbers:
        x = self.lu.solve(right, which)
        change = self.lu.solve(right - a @ x, which)
        # the first correction, against the solution, is about the condition times the rounding
        size, lost = np.abs(x).max(initial=0.0), np.abs(change).max(initial=0.0)
        if not lost <= WORST_CONDITION * _EPSILON * size:
            raise IllConditionedError
        return np.asarray(x + change)
