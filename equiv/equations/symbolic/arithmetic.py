"""The arithmetic in which the laws of a network make formulas."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import Any

import numpy as np

from equiv.elements import Element
from equiv.elements.element import Frequency
from equiv.equations.arithmetic import Numbers
from equiv.equations.symbolic.amount import Amount

S = Amount.of(1, s=1)
"""The complex frequency."""


class Formulas:
    """Values are exact numbers, or amounts of symbols, which stand in the network already."""

    dtype: Any = object

    def column(self, values: Iterable[Any], elements: Sequence[Element]) -> Numbers:
        """The values as they are."""
        return objects(values)

    def rounded(self, values: Sequence[complex], elements: Sequence[Element]) -> Numbers:
        """Not needed: what a file gives has been refused."""
        raise NotImplementedError

    def root(self, squares: Numbers, elements: Sequence[Element]) -> Numbers:
        """Not needed: a coupling has its mutual inductance as one symbol or number."""
        raise NotImplementedError

    def rms(self, peaks: Numbers, sources: Sequence[Element]) -> Numbers:
        """Not needed: sources are symbols, or numbers at DC."""
        raise NotImplementedError

    def s(self, frequency: Frequency) -> Any:
        """The symbol s, whatever the frequency."""
        return S


def objects(values: Iterable[Any]) -> Numbers:
    """An array of objects that stay what they are."""
    listed = list(values)
    array = np.empty(len(listed), object)
    for number, value in enumerate(listed):
        array[number] = value
    return array


FORMULAS = Formulas()
