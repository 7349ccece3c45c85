"""Complex numbers with rational parts, which take the place of Python's where results are exact."""

from __future__ import annotations

import math
from collections.abc import Callable
from decimal import Decimal
from fractions import Fraction
from math import isqrt
from operator import add, mul, sub, truediv
from typing import Any

import numpy as np
from flint import fmpq

_SMALLEST = 5e-324
ZERO = fmpq(0)


class Exact:
    """re + j·im with rational parts; + - * / and conjugation keep it exact.

    Whole numbers among floats (the 0.0 and 1.0 of a formula) are taken as exact. With any other
    float the result is an ordinary complex number: it does not pass for exact.
    """

    __slots__ = ("im", "re")

    def __init__(self, re: fmpq, im: fmpq = ZERO) -> None:
        self.re, self.im = re, im

    @classmethod
    def of(cls, value: Any) -> Exact:
        """A number as the exact number that it is, floats too."""
        if isinstance(value, Exact):
            return value
        if isinstance(value, int):
            return cls(fmpq(value))
        if isinstance(value, complex):
            return cls(rational(Fraction(value.real)), rational(Fraction(value.imag)))
        return cls(rational(Fraction(value)))

    @property
    def exact(self) -> str | list[str]:
        """The number as text: `60/11`, or both parts where it is complex."""
        return [str(self.re), str(self.im)] if self.im else str(self.re)

    @property
    def real(self) -> float:
        """The real part as a float."""
        return _float(self.re)

    @property
    def imag(self) -> float:
        """The imaginary part as a float."""
        return _float(self.im)

    def conjugate(self) -> Exact:
        """re - j·im."""
        return Exact(self.re, -self.im)

    def __complex__(self) -> complex:
        return complex(self.real, self.imag)

    def __float__(self) -> float:
        if self.im:
            raise TypeError(f"{self} is not real")
        return self.real

    def __bool__(self) -> bool:
        return bool(self.re) or bool(self.im)

    def __abs__(self) -> float:
        """The magnitude as a float; that of a number that is not zero is never 0."""
        size = math.hypot(self.real, self.imag)
        return max(size, _SMALLEST) if self else 0.0

    def __eq__(self, other: object) -> bool:
        if not isinstance(other, Exact | int | float | complex | Decimal | Fraction):
            return NotImplemented
        if isinstance(other, float | complex) and not math.isfinite(abs(other)):
            return False
        that = Exact.of(other)
        return bool(self.re == that.re and self.im == that.im)

    def __hash__(self) -> int:
        return hash(complex(self))

    def __neg__(self) -> Exact:
        return Exact(-self.re, -self.im)

    def __pos__(self) -> Exact:
        return self

    def __add__(self, other: Any) -> Any:
        that = _taken(other)
        if that is None:
            return _loosely(add, self, other)
        return Exact(self.re + that.re, self.im + that.im)

    __radd__ = __add__

    def __sub__(self, other: Any) -> Any:
        that = _taken(other)
        if that is None:
            return _loosely(sub, self, other)
        return Exact(self.re - that.re, self.im - that.im)

    def __rsub__(self, other: Any) -> Any:
        return -self + other

    def __mul__(self, other: Any) -> Any:
        that = _taken(other)
        if that is None:
            return _loosely(mul, self, other)
        if not self.im and not that.im:
            return Exact(self.re * that.re)
        return Exact(self.re * that.re - self.im * that.im, self.re * that.im + self.im * that.re)

    __rmul__ = __mul__

    def __truediv__(self, other: Any) -> Any:
        that = _taken(other)
        if that is None:
            return _loosely(truediv, self, other)
        if not that.im:
            return Exact(self.re / that.re, self.im / that.re)
        return self * Exact(that.re, -that.im) / Exact(that.re**2 + that.im**2)

    def __rtruediv__(self, other: Any) -> Any:
        that = _taken(other)
        return _loosely(truediv, other, self) if that is None else that / self

    def sqrt(self) -> Exact:
        """The square root of a number that is not negative.

        Errors: ValueError where it is irrational.
        """
        above, below = int(self.re.p), int(self.re.q)
        if not self.im and above >= 0:
            p, q = isqrt(above), isqrt(below)
            if p * p == above and q * q == below:
                return Exact(fmpq(p, q))
        raise ValueError(f"the square root of {self} is irrational")

    def __pow__(self, exponent: float) -> Exact:
        if exponent != 0.5:
            raise ValueError("of exact numbers only square roots are taken")
        return self.sqrt()

    def __repr__(self) -> str:
        return f"Exact({self.re}, {self.im})" if self.im else f"Exact({self.re})"


def rational(value: Fraction) -> fmpq:
    """A fraction as flint has it."""
    return fmpq(value.numerator, value.denominator)


def _float(value: fmpq) -> float:
    """The nearest float; infinite where it is too large for one."""
    try:
        return int(value.p) / int(value.q)
    except OverflowError:
        return math.inf if value > 0 else -math.inf


def _loosely(work: Callable[[Any, Any], Any], first: Any, second: Any) -> Any:
    """An operation with a number that is not exact; arrays do theirs entry by entry."""
    if isinstance(first, np.ndarray) or isinstance(second, np.ndarray):
        return NotImplemented
    return work(complex(first), complex(second))


def _taken(other: Any) -> Exact | None:
    """The other number of an operation; None where it is not exact."""
    if isinstance(other, Exact):
        return other
    if isinstance(other, int | Decimal | Fraction):
        return Exact.of(other)
    if isinstance(other, np.ndarray):
        return None
    number = complex(other)
    whole = number.real.is_integer() and number.imag.is_integer()
    return Exact.of(number) if whole else None
