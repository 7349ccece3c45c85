"""What the numbers of a network's equations are: an arithmetic, and the floating one.

Laws need no more of numbers than + - * / and a comparison with zero. An arithmetic makes the
numbers: arrays of floats here, arrays of Python objects where they are exact or symbolic.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from typing import Any, Protocol

import numpy as np
from numpy.typing import NDArray

from equiv.elements import Element
from equiv.elements.element import Frequency
from equiv.errors import Diagnostic, UsageError
from equiv.units import Symbol, as_number

Numbers = NDArray[Any]


class Arithmetic(Protocol):
    """Where the numbers of a network's equations come from."""

    @property
    def dtype(self) -> Any:
        """The type of arrays of real numbers: float, or object."""

    def column(self, values: Iterable[Any], elements: Sequence[Element]) -> Numbers:
        """The exact values of some elements as numbers."""

    def rounded(self, values: Sequence[complex], elements: Sequence[Element]) -> Numbers:
        """Numbers that files give to elements in floating point."""

    def root(self, squares: Numbers, elements: Sequence[Element]) -> Numbers:
        """The square roots of numbers that elements make."""

    def rms(self, peaks: Numbers, sources: Sequence[Element]) -> Numbers:
        """The rms values of sources from their peak values."""

    def s(self, frequency: Frequency) -> Any:
        """The complex frequency of the sinusoidal steady state: jω, and 0 at DC (rad/s)."""


class Floating:
    """Floating point: float64, and complex128 where a number is complex."""

    dtype: Any = float

    def column(self, values: Iterable[Any], elements: Sequence[Element]) -> Numbers:
        """Exact values as floats, or as complex numbers where one of them is complex."""
        values = list(values)
        try:
            return np.fromiter(map(float, values), float, len(values))
        except TypeError:
            require_values(values, elements)
            return np.array([as_number(value) for value in values])

    def rounded(self, values: Sequence[complex], elements: Sequence[Element]) -> Numbers:
        """The numbers as they are."""
        return np.array(values)

    def root(self, squares: Numbers, elements: Sequence[Element]) -> Numbers:
        """The square roots."""
        return np.asarray(squares**0.5)

    def rms(self, peaks: Numbers, sources: Sequence[Element]) -> Numbers:
        """The values over √2."""
        return np.asarray(peaks / math.sqrt(2))

    def s(self, frequency: Frequency) -> float | complex:
        """jω; 0 at DC, so that DC stays in real numbers."""
        return 1j * frequency.omega if frequency.omega else 0.0


FLOATING = Floating()


def require_values(values: Iterable[Any], elements: Sequence[Element]) -> None:
    """Complain of an element that is written with `?`."""
    for value, element in zip(values, elements, strict=True):
        if isinstance(value, Symbol):
            raise UsageError(_needs_value(element)) from None


def _needs_value(element: Element) -> Diagnostic:
    return Diagnostic(
        "no-value",
        f"{element.name} is written with `?` and has no number",
        hint=f"give {element.kind} {element.name} a value; superpose and port have results in "
        "symbols too (--symbolic)",
    )
