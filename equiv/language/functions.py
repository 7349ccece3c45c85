"""The functions of expressions: exact where that is possible, otherwise to 40 digits.

The trigonometric series is the one of the Python documentation's recipes for `decimal`.
"""

from __future__ import annotations

from collections.abc import Callable
from decimal import Context, Decimal, localcontext
from fractions import Fraction
from math import isqrt

_DIGITS = 40
_ROUND = Context(prec=_DIGITS, Emax=999_999, Emin=-999_999)
_GUARDED = Context(prec=_DIGITS + 30, Emax=999_999, Emin=-999_999)
_LARGEST_EXPONENT = 700
_LARGEST_ANGLE = 10**20
_PI_DIGITS = "3.14159265358979323846264338327950288419716939937510582097494459230781640628620899"
_PI = Decimal(_PI_DIGITS)
PI = Fraction(_ROUND.plus(_PI))


def _decimal(number: Fraction) -> Decimal:
    return _GUARDED.divide(Decimal(number.numerator), Decimal(number.denominator))


def _rounded(number: Decimal) -> Fraction:
    return Fraction(_ROUND.plus(number))


def square_root(number: Fraction) -> Fraction:
    """The square root; exact for the square of a fraction."""
    if number < 0:
        raise ValueError("a negative number has no real square root")
    above, below = isqrt(number.numerator), isqrt(number.denominator)
    if above**2 == number.numerator and below**2 == number.denominator:
        return Fraction(above, below)
    return _rounded(_GUARDED.sqrt(_decimal(number)))


def exponential(number: Fraction) -> Fraction:
    """e to a power."""
    if abs(number) > _LARGEST_EXPONENT:
        raise ValueError(f"exp is calculated up to {_LARGEST_EXPONENT}")
    return _rounded(_GUARDED.exp(_decimal(number)))


def logarithm(number: Fraction) -> Fraction:
    """The natural logarithm."""
    if number <= 0:
        raise ValueError("log is defined for positive numbers")
    return _rounded(_GUARDED.ln(_decimal(number)))


def power(base: Fraction, exponent: Fraction) -> Fraction:
    """A positive number to a power that is not whole."""
    if base <= 0:
        raise ValueError("a power that is not whole is defined for positive numbers")
    whole = _GUARDED.multiply(_GUARDED.ln(_decimal(base)), _decimal(exponent))
    if abs(whole) > _LARGEST_EXPONENT:
        raise ValueError("the power is too large or too small")
    return _rounded(_GUARDED.exp(whole))


def sine(number: Fraction) -> Fraction:
    """The sine of an angle in radians."""
    return _rounded(_series(_reduced(number), 1))


def cosine(number: Fraction) -> Fraction:
    """The cosine of an angle in radians."""
    return _rounded(_series(_reduced(number), 0))


def _reduced(angle: Fraction) -> Decimal:
    """The angle within a turn."""
    if abs(angle) > _LARGEST_ANGLE:
        raise ValueError("the angle is too large")
    return _decimal(angle % (2 * Fraction(_PI)))


def _series(x: Decimal, order: int) -> Decimal:
    """The power series of the cosine (from order 0) or of the sine (from order 1)."""
    with localcontext(_GUARDED):
        term = total = x if order else Decimal(1)
        previous = None
        while total != previous:
            previous = total
            order += 2
            term = -term * x * x / (order * (order - 1))
            total += term
        return total


FUNCTIONS: dict[str, Callable[[Fraction], Fraction]] = {
    "exp": exponential,
    "log": logarithm,
    "sin": sine,
    "cos": cosine,
}
