"""One number out of an array, as the analyses and their results have it."""

from __future__ import annotations

from collections.abc import Sequence
from decimal import Decimal
from fractions import Fraction
from typing import Any, cast

import numpy as np

from equiv.equations.arithmetic import Numbers
from equiv.network import Network
from equiv.units import Rectangular, Value, exact, is_exact


def scalar(value: Any) -> complex:
    """A number as a Python complex one; an exact one stays as it is and behaves like one.

    A whole number comes from an array of exact ones, for floats are never whole numbers there.
    """
    if is_exact(value):
        return cast(complex, value)
    if type(value) is int:
        from equiv.equations.exact.number import Exact

        return cast(complex, Exact.of(value))
    return complex(value)


def zero_like(value: complex) -> complex:
    """Zero, exact where another number is."""
    return scalar(0) if is_exact(value) else 0j


def vector(values: Sequence[complex]) -> Numbers:
    """Numbers as a complex array; as an array of objects where they are exact."""
    if any(map(is_exact, values)):
        out = np.empty(len(values), object)
        out[:] = values
        return out
    return np.array(values, dtype=complex)


def in_floats(numbers: Numbers) -> Numbers:
    """An array of exact numbers as complex floats; one of floats as it is."""
    return numbers.astype(complex) if numbers.dtype == object else numbers


def solved(a: Numbers, right: Numbers) -> Numbers:
    """x of A x = right for a small full matrix, exactly where its numbers are exact.

    Errors: numpy.linalg.LinAlgError where it is singular.
    """
    if object not in (a.dtype, right.dtype):
        return np.asarray(np.linalg.solve(a, right))
    from equiv.equations.exact.matrices import Matrix

    matrix = Matrix(a)
    if not matrix.regular:
        raise np.linalg.LinAlgError("singular matrix")
    return matrix.solve(right)


def like(network: Network, numbers: Numbers) -> Numbers:
    """Numbers as the exact ones that they are, where a network's numbers are exact."""
    if not network.exact:
        return numbers
    from equiv.equations.exact.number import Exact

    out = np.empty(numbers.shape, object)
    out.ravel()[:] = [Exact.of(x) for x in numbers.ravel().tolist()]
    return out


def written(number: Any) -> Value:
    """A number as the value of an element."""
    if is_exact(number):
        re, im = (Fraction(int(part.p), int(part.q)) for part in (number.re, number.im))
        return Rectangular(exact(re), exact(im)) if im else exact(re)
    if isinstance(number, complex):
        return Rectangular(Decimal(number.real), Decimal(number.imag))
    return Decimal(number)
