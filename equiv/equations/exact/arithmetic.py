"""Rational arithmetic: a network's values as the exact numbers that its text says."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from decimal import Decimal
from fractions import Fraction
from typing import Any

import numpy as np

from equiv.elements import Element
from equiv.elements.element import Frequency
from equiv.equations.arithmetic import Numbers, require_values
from equiv.equations.exact.number import Exact, rational
from equiv.errors import Diagnostic, UsageError
from equiv.units import Formula, Phasor, Ratio, Rectangular, Rounded, Value, as_number, write_value

_QUARTER_TURNS = ((1, 0), (0, 1), (-1, 0), (0, -1))


class Rational:
    """Complex numbers with rational parts.

    What is irrational is refused, naming the element, or (`nearest`) taken as the rational
    number that its float is.
    """

    dtype: Any = object

    def __init__(self, nearest: bool = False) -> None:
        self.nearest = nearest

    def column(self, values: Iterable[Any], elements: Sequence[Element]) -> Numbers:
        """Exact values as they are.

        Errors: UsageError for an irrational one.
        """
        values = list(values)
        require_values(values, elements)
        return _array([self._number(v, e) for v, e in zip(values, elements, strict=True)])

    def _number(self, value: Value, element: Element) -> Exact:
        why = irrational(value)
        if why is None:
            return _exact(value)
        if not self.nearest:
            raise UsageError(_irrational(f"{element.name} {why}"))
        return Exact.of(as_number(value))

    def rounded(self, values: Sequence[complex], elements: Sequence[Element]) -> Numbers:
        """Numbers that files give: refused, for they were rounded when they were read."""
        if not self.nearest:
            for element in elements:
                words = f"{element.name} takes its parameters from a file, as rounded numbers"
                raise UsageError(_irrational(words))
        return _array([Exact.of(complex(value)) for value in values])

    def root(self, squares: Numbers, elements: Sequence[Element]) -> Numbers:
        """The square roots, where they are rational."""
        return _array([self._root(s, e) for s, e in zip(squares, elements, strict=True)])

    def _root(self, square: Exact, element: Element) -> Exact:
        try:
            return square.sqrt()
        except ValueError:
            if self.nearest:
                return Exact.of(square.real**0.5)
            first, second = element.links
            words = f"{element.name} has M = k·√({first}·{second}), and this root is irrational"
            raise UsageError(_irrational(words, "give M itself")) from None

    def rms(self, peaks: Numbers, sources: Sequence[Element]) -> Numbers:
        """Peak values over √2, which is irrational."""
        for peak, source in zip(peaks, sources, strict=True):
            if peak and not self.nearest:
                words = f"{source.name} is a peak value (phasors peak): its rms value is over √2"
                raise UsageError(_irrational(f"{words}, which is irrational", "write rms values"))
        return _array([Exact.of(peak.real / 2**0.5) + Exact.of(1j) * Exact.of(peak.imag / 2**0.5)
                       for peak in peaks])  # fmt: skip

    def s(self, frequency: Frequency) -> Exact:
        """jω, for ω written in rad/s; 0 at DC."""
        if not frequency.value:
            return Exact.of(0)
        rounded = isinstance(frequency.value, Rounded)
        if frequency.unit != "Hz" and not rounded:
            return Exact(rational(Fraction(0)), rational(Fraction(frequency.value)))
        if not self.nearest:
            at = write_value(frequency.value, frequency.unit)
            what = "its formula" if rounded else "the angular frequency ω = 2π·f"
            hint = "write the frequency in rad/s, or ask for formulas with --symbolic"
            raise UsageError(_irrational(f"at {at} {what} is irrational", hint))
        return Exact.of(1j * frequency.omega)


EXACT = Rational()
NEAREST = Rational(nearest=True)


def _array(numbers: Sequence[Exact]) -> Numbers:
    out = np.empty(len(numbers), object)
    out[:] = numbers
    return out


def _irrational(words: str, hint: str = "") -> Diagnostic:
    return Diagnostic(
        "irrational",
        f"no exact result: {words}",
        hint=hint or "leave --exact out, or write a rational value in its place",
    )


def irrational(value: Value) -> str | None:
    """Why a value is not rational, in words that follow the element's name; None where it is."""
    if isinstance(value, Formula):
        value = value.value
    parts = value if isinstance(value, Rectangular | Phasor | Ratio) else (value,)
    if any(isinstance(part, Rounded) for part in parts):
        return "has a formula whose value is irrational (a root, exp, log, sin, cos or pi)"
    if isinstance(value, Phasor) and value.magnitude and not _at_quarter_turn(value):
        measure = "deg" if value.degrees else "rad"
        return f"has the angle {value.angle} {measure}, whose sine or cosine is irrational"
    return None


def _at_quarter_turn(phasor: Phasor) -> bool:
    """Whether sine and cosine are both rational (I. Niven, Irrational Numbers, 1956)."""
    return Fraction(phasor.angle) % 90 == 0 if phasor.degrees else not phasor.angle


def _exact(value: Any) -> Exact:
    if isinstance(value, Formula):
        value = value.value
    if isinstance(value, Rectangular):
        return Exact(_rational(value.re), _rational(value.im))
    if isinstance(value, Phasor):
        size = _rational(value.magnitude)
        turn = int(Fraction(value.angle) // 90) % 4 if value.degrees else 0
        re, im = _QUARTER_TURNS[turn]
        return Exact(re * size, im * size)
    if isinstance(value, Ratio):
        return Exact(_rational(value.first) / _rational(value.second))
    return Exact(_rational(value))


def _rational(number: Decimal | Fraction) -> Any:
    return rational(Fraction(number))
