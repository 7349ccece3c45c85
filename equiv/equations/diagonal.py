"""The diagonal of an inverse from sparse triangular factors, without a solve for each entry.

With P A Q = L U, entry b of the diagonal is (U⁻ᵀ e)·(L⁻¹ e') for the unit vectors that the
permutations make of b. The columns of L⁻¹ and U⁻ᵀ are nearly all zero: column j has entries only
at the ancestors of j in the elimination tree. They are found level by level from its roots,

    column j of L⁻¹ = e_j - Σ over i > j of (column i of L⁻¹)·L_ij.

Source: elimination trees: J. W. H. Liu, The role of elimination trees in sparse factorization,
SIAM J. Matrix Anal. Appl. 11 (1990); sparse inverses: K. Takahashi et al. (1973), from memory.
"""

from __future__ import annotations

import itertools
from typing import Any

import numpy as np
import scipy.sparse as sparse

from equiv.equations.layout import Integers, Numbers

_SYMMETRIC = 1e-12


def inverse_diagonal(lu: Any, places: Integers) -> Numbers:
    """(A⁻¹)_bb for each place b, from SuperLU's factors of A."""
    lower, upper = lu.L.tocsc(), lu.U.tocsc()
    pivots = upper.diagonal()
    other = (upper.T @ sparse.diags(1 / pivots)).tocsc()
    first = unit_lower_inverse(lower)
    symmetric = np.array_equal(lu.perm_r, lu.perm_c) and _same(lower, other)
    second = first if symmetric else unit_lower_inverse(other)
    ours, theirs = lu.perm_r[places], lu.perm_c[places]
    product = first[:, ours].multiply(second[:, theirs])
    return np.asarray(product.T @ (1 / pivots)).ravel()


def _same(one: Any, other: Any) -> bool:
    rest = abs(one - other)
    return bool(rest.nnz == 0 or rest.max() <= _SYMMETRIC)


def unit_lower_inverse(lower: Any) -> Any:
    """The inverse of a lower triangular matrix (CSC) with ones on its diagonal, as CSC."""
    size = lower.shape[0]
    below = sparse.tril(lower, -1, format="csc")
    order, starts = _levels(below)
    at = np.empty(size, np.int64)
    at[order] = np.arange(size)
    # columns in the order in which they are found; rows keep their numbers
    pointers = np.zeros(size + 1, np.int64)
    store = _Store(lower.dtype)
    for begin, end in itertools.pairwise(starts):
        columns = order[begin:end]
        mine = below[:, columns]
        unit = sparse.csc_matrix(
            (np.ones(len(columns)), columns, np.arange(len(columns) + 1)), (size, len(columns))
        )
        found = unit
        if mine.nnz:
            used, where = np.unique(mine.indices, return_inverse=True)
            factors = sparse.csc_matrix((mine.data, where, mine.indptr), (len(used), len(columns)))
            known = store.columns(pointers, at[used], size)
            found = (unit - known @ factors).tocsc()
        store.add(found.indices, found.data)
        pointers[begin + 1 : end + 1] = pointers[begin] + found.indptr[1:]
    indices, data = store.all()
    return sparse.csc_matrix((data, indices, pointers), (size, size))[:, at]


class _Store:
    """Entries of columns one after the other, in arrays that grow by doubling."""

    def __init__(self, dtype: Any) -> None:
        self.count = 0
        self.indices = np.empty(1024, np.int64)
        self.data = np.empty(1024, dtype)

    def add(self, indices: Integers, data: Numbers) -> None:
        """Further columns' rows and values."""
        need = self.count + len(indices)
        if need > len(self.indices):
            room = max(need, 2 * len(self.indices))
            self.indices = np.resize(self.indices, room)
            self.data = np.resize(self.data, room)
        self.indices[self.count : need] = indices
        self.data[self.count : need] = data
        self.count = need

    def columns(self, pointers: Integers, chosen: Integers, size: int) -> Any:
        """Some of the columns as a matrix."""
        begin, lengths = pointers[chosen], pointers[chosen + 1] - pointers[chosen]
        ends = np.concatenate(([0], np.cumsum(lengths)))
        places = np.arange(ends[-1]) + np.repeat(begin - ends[:-1], lengths)
        return sparse.csc_matrix(
            (self.data[places], self.indices[places], ends), (size, len(chosen))
        )

    def all(self) -> tuple[Integers, Numbers]:
        """All the rows and values."""
        return self.indices[: self.count], self.data[: self.count]


def _levels(below: Any) -> tuple[Integers, list[int]]:
    """Columns in an order in which each follows those it needs, and where each level begins."""
    size = below.shape[0]
    level = [0] * size
    indptr, indices = below.indptr.tolist(), below.indices.tolist()
    for j in range(size - 1, -1, -1):
        needed = indices[indptr[j] : indptr[j + 1]]
        if needed:
            level[j] = 1 + max(map(level.__getitem__, needed))
    found = np.array(level, np.int64)
    order = np.argsort(found, kind="stable")
    counts = np.bincount(found) if size else np.zeros(0, np.int64)
    return order, [0, *np.cumsum(counts).tolist()]
