"""The laws of a whole network, written by its kinds: terms in columns, each with its branch."""

from __future__ import annotations

from typing import Any, NamedTuple

import numpy as np
from numpy.typing import NDArray

from equiv.elements.laws import Across, Drive, Term, Through
from equiv.equations.layout import Integers, Layout, Numbers

EMPTY = np.empty(0, dtype=np.int64)


class Terms(NamedTuple):
    """Terms of one sort: the branch whose law they are in, what they are about, coefficients."""

    branch: Integers
    first: Integers
    second: Integers
    coefficient: Numbers


class Laws:
    """Every branch's law: `is_equation` tells equations (sum = 0) from given currents."""

    def __init__(self, layout: Layout, form: str, s: Any) -> None:
        self.layout, self.form, self.s = layout, form, s
        self.is_equation: NDArray[np.bool_] = np.zeros(layout.branch_count, dtype=bool)
        self._across: list[Terms] = []
        self._through: list[Terms] = []
        self._drive: list[Terms] = []
        for column in layout.columns:
            column.s = s
            if form == "nodal":
                column.kind.nodal(column, self)
            else:
                column.kind.law(column, self)
        self.across = _joined(self._across)
        self.through = _joined(self._through)
        self.drive = _joined(self._drive)

    def equation(self, branch: Integers, *terms: Term) -> None:
        """The sum of the terms is zero; the branch's current is an unknown."""
        self.is_equation[branch] = True
        self.add(branch, *terms)

    def current(self, branch: Integers, *terms: Term) -> None:
        """The branch's current is the sum of the terms."""
        self.add(branch, *terms)

    def add(self, branch: Integers, *terms: Term) -> None:
        """Terms in the law of a branch."""
        for term in terms:
            coefficient = _spread(term.coefficient, len(branch))
            if isinstance(term, Across):
                first, second = term.pair
                self._across.append(Terms(branch, first, second, coefficient))
            elif isinstance(term, Through):
                self._through.append(Terms(branch, term.branch, EMPTY, coefficient))
            else:
                assert isinstance(term, Drive)
                self._drive.append(Terms(branch, term.source, EMPTY, coefficient))


def _spread(coefficient: Any, count: int) -> Numbers:
    return np.broadcast_to(np.asarray(coefficient), (count,))


def _joined(parts: list[Terms]) -> Terms:
    if not parts:
        return Terms(EMPTY, EMPTY, EMPTY, np.empty(0))
    branch, first, second, coefficient = (
        np.concatenate(columns) for columns in zip(*parts, strict=True)
    )
    return Terms(branch, first, second, coefficient)
