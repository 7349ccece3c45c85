"""Matrices of exact numbers, solved and reduced by FLINT.

A complex matrix is the real one of twice the size, with [[re, -im], [im, re]] in the place of
each entry: its reduced echelon form is that of the complex matrix, written in the same way.
"""

from __future__ import annotations

from typing import Any

import numpy as np
from flint import fmpq_mat

from equiv.equations.arithmetic import Numbers
from equiv.equations.exact.number import ZERO, Exact


class Matrix:
    """A matrix of exact numbers, as FLINT has it."""

    def __init__(self, entries: Numbers) -> None:
        self.shape = entries.shape
        places = np.argwhere(np.asarray(entries != 0, bool)).tolist()
        numbers = [(i, j, Exact.of(entries[i, j])) for i, j in places]
        self.complex = any(x.im for _, _, x in numbers)
        side = 2 if self.complex else 1
        self.inner = fmpq_mat(side * self.shape[0], side * self.shape[1])
        for i, j, x in numbers:
            if not self.complex:
                self.inner[i, j] = x.re
                continue
            self.inner[2 * i, 2 * j] = self.inner[2 * i + 1, 2 * j + 1] = x.re
            self.inner[2 * i, 2 * j + 1], self.inner[2 * i + 1, 2 * j] = -x.im, x.im

    @property
    def regular(self) -> bool:
        """Whether a square matrix has an inverse."""
        return int(self.inner.rank()) == self.inner.nrows()

    def reduced(self) -> tuple[Numbers, list[int]]:
        """The rows of the reduced echelon form that are not zero, and their pivots' columns."""
        inner, rank = self.inner.rref()
        step = 2 if self.complex else 1
        table = inner.tolist()[: int(rank) : step]
        rows = [
            [Exact(row[j], -row[j + 1] if self.complex else ZERO) for j in range(0, len(row), step)]
            for row in table
        ]
        pivots = [next(j for j, x in enumerate(row) if x) for row in rows]
        return _array(rows, self.shape[1]), pivots

    def solve(self, right: Numbers) -> Numbers:
        """x of A x = right, for a vector or a matrix of columns."""
        columns = right if right.ndim == 2 else right[:, None]
        numbers = [[Exact.of(x) for x in row] for row in columns]
        count = columns.shape[1]
        if not numbers or not count:
            return np.zeros(right.shape, object)
        if self.complex:
            rows = [part for row in numbers for part in ([x.re for x in row], [x.im for x in row])]
        elif real := not any(x.im for row in numbers for x in row):
            rows = [[x.re for x in row] for row in numbers]
        else:
            rows = [[x.re for x in row] + [x.im for x in row] for row in numbers]
        inner = fmpq_mat(len(rows), len(rows[0]), _flat(rows))
        found = self.inner.solve(inner).tolist()
        if self.complex:
            pairs = list(zip(found[::2], found[1::2], strict=True))
        else:
            zeros = [ZERO] * count
            pairs = [(row[:count], zeros if real else row[count:]) for row in found]
        out = _array([list(map(Exact, re, im)) for re, im in pairs], count)
        return out if right.ndim == 2 else out[:, 0]


def _flat(rows: list[list[Any]]) -> list[Any]:
    return [x for row in rows for x in row]


def _array(rows: list[list[Exact]], columns: int) -> Numbers:
    out = np.empty((len(rows), columns), object)
    for i, row in enumerate(rows):
        out[i] = row
    return out


def null_space(entries: Numbers) -> Numbers:
    """The vectors n with A n = 0 as columns, each with a 1 of its own."""
    reduced, pivots = Matrix(entries).reduced()
    free = [j for j in range(entries.shape[1]) if j not in set(pivots)]
    out = np.zeros((entries.shape[1], len(free)), object)
    for number, j in enumerate(free):
        out[j, number] = Exact.of(1)
        out[pivots, number] = -reduced[:, j]
    return out


def rank_of(entries: Numbers) -> int:
    """The rank of a matrix."""
    matrix = Matrix(entries)
    return int(matrix.inner.rank()) // (2 if matrix.complex else 1)
