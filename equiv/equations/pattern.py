"""G + s C for many s in one sparse pattern, whose order of elimination is found once."""

from __future__ import annotations

import numpy as np
import scipy.sparse as sparse

from equiv.equations.factor import WORST_CONDITION, IllConditionedError
from equiv.equations.layout import Integers, Numbers
from equiv.equations.sparse import SparseFactor

_STEP = 2.0
"""The change of frequency after which the condition is looked at again."""
_SEED = 20240902

Places = tuple[Integers, Integers]


class Pattern:
    """The matrices of a system at every s = jω; unknowns stand in the order of elimination."""

    def __init__(self, still: Numbers, rising: Numbers, places: Places, size: int) -> None:
        self.size = size
        self._fill(still, rising, places)
        self.order = np.arange(size)

    def put_in_order(self, w: float) -> None:
        """Find the order of elimination, which the pattern alone decides, at one frequency."""
        order = SparseFactor.of_matrix(self._matrix_at(w)).order
        number = np.argsort(order)
        columns = np.repeat(np.arange(self.size), np.diff(self._matrix.indptr))
        self._fill(self._g, self._c, (number[self._matrix.indices], number[columns]))
        self.order = self.order[order]
        self._in_order = True

    def _fill(self, still: Numbers, rising: Numbers, places: Places) -> None:
        """Both matrices added up in one pattern of compressed columns."""
        ones = np.ones(len(places[0]), complex)
        self._matrix = sparse.csc_matrix((ones, places), shape=(self.size, self.size))
        columns = np.repeat(np.arange(self.size), np.diff(self._matrix.indptr))
        keys = columns * self.size + self._matrix.indices
        there = np.searchsorted(keys, places[1] * self.size + places[0])
        self._g, self._c = np.zeros(len(keys)), np.zeros(len(keys))
        np.add.at(self._g, there, still)
        np.add.at(self._c, there, rising)
        self._looked_at, self._vouched, self._in_order = -1.0, True, False

    def _matrix_at(self, w: float) -> sparse.csc_matrix:
        """The one matrix, with the numbers of a frequency in it."""
        self._matrix.data.real = self._g
        self._matrix.data.imag = w * self._c
        return self._matrix

    def factor(self, w: float) -> SparseFactor:
        """The factorisation at a frequency; good until the next one is made.

        Digits that widely different values cost are lost at neighbouring frequencies too, so that
        the condition is looked at in steps; a singular point between them shows in refinement.
        Errors: IllConditionedError where it cannot vouch for its digits.
        """
        factor = SparseFactor.of_matrix(self._matrix_at(w), self._in_order)
        near = w / _STEP <= self._looked_at <= w * _STEP
        if not near:
            self._vouched = self._condition(factor, w) <= WORST_CONDITION
            self._looked_at = w
        if not self._vouched:
            raise IllConditionedError
        return factor

    def _condition(self, factor: SparseFactor, w: float) -> float:
        """A lower bound of the balanced matrix's condition, as in `SparseFactor`."""
        shape, places = self._matrix.shape, (self._matrix.indices, self._matrix.indptr)
        size = sparse.csc_matrix((np.abs(self._g) + w * np.abs(self._c), *places), shape)
        scale = 1 / np.sqrt(np.maximum(size.max(axis=1).toarray().ravel(), 1e-300))
        signs = np.random.default_rng(_SEED).choice([-1.0, 1.0], self.size)
        inverse = factor.lu.solve((signs / scale).astype(complex)) / scale
        norm = float((scale * (size @ scale)).max(initial=0.0))
        return norm * float(np.abs(inverse).max(initial=0.0))
