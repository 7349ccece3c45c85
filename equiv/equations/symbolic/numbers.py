"""Formulas as numbers: exact at DC, and with many more digits than a float's elsewhere."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction
from typing import Any

from flint import acb, arb, ctx, fmpq

from equiv.equations.symbolic.expression import Expression, evaluated
from equiv.equations.symbolic.symbols import Named

BITS = 400
"""Of the arithmetic off DC: cancellation may cost nearly all of them and leave a float."""
_WORTHLESS = 1e-12
_LARGEST = 1e300


def as_fmpq(number: Fraction | int) -> fmpq:
    """An exact number in the arithmetic's own form."""
    return fmpq(number.numerator, number.denominator)


class Numbers:
    """The values of the symbols at one s; those that have none are left out."""

    def __init__(
        self,
        named: Sequence[Named],
        s: complex = 0j,
        values: Mapping[str, complex] | None = None,
    ) -> None:
        given = {n.name: n.number for n in named if n.number is not None}
        given.update(values or {})
        self.exact = s == 0 and all(isinstance(x, Fraction) for x in given.values())
        self.values: dict[str, Any] = {}
        with ctx.workprec(BITS):
            self.values = {name: self._number(x) for name, x in given.items()}
            self.values["s"] = self._number(s if s else Fraction(0))

    def _number(self, value: Any) -> Any:
        if self.exact:
            return as_fmpq(value)
        if isinstance(value, Fraction | int):
            return acb(arb(as_fmpq(value)))
        value = complex(value)
        return acb(value.real, value.imag)

    def name(self, where: Sequence[tuple[str, Expression]]) -> None:
        """Give the named parts their values."""
        for name, expression in where:
            if name not in self.values:
                found = self._evaluated(expression)
                if found is not None:
                    self.values[name] = found

    def of(self, expression: Expression) -> complex | None:
        """What an expression comes to; None where a symbol has no value, or it has none."""
        found = self._evaluated(expression)
        return None if found is None else _nearest(found)

    def _evaluated(self, expression: Expression) -> Any:
        with ctx.workprec(BITS):
            try:
                return evaluated(expression, self.values, self._number)
            except (KeyError, ZeroDivisionError):
                return None


def _nearest(value: Any) -> complex | None:
    if isinstance(value, fmpq):
        try:
            return complex(int(value.p) / int(value.q))
        except OverflowError:
            return None
    if not value.is_finite():
        return None
    found = complex(value)
    radius = float(value.real.rad()) + float(value.imag.rad())
    if radius > _WORTHLESS * max(abs(found), 1 / _LARGEST):
        return 0j if abs(found) < radius < _WORTHLESS else None
    return found
