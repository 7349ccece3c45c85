"""What formulas tell: the value at which there is no solution, derivatives, and limits in s."""

from __future__ import annotations

from typing import Any, NamedTuple

from flint import fmpz_mpoly, fmpz_poly

from equiv.equations.symbolic.expression import (
    ZERO,
    Expression,
    Name,
    negated,
    power,
    product,
    quotient,
)
from equiv.equations.symbolic.family import Family
from equiv.equations.symbolic.nesting import nested

Names = list[str]


def degree(polynomial: fmpz_mpoly, symbol: int) -> int:
    """The degree in a symbol; 0 of the zero polynomial."""
    return int(polynomial.degrees()[symbol]) if polynomial else 0


def vanishing(polynomial: fmpz_mpoly, symbol: int, names: Names) -> Expression | None:
    """The value of a symbol at which a polynomial is zero; None unless it is linear in it.

    a + b·x = 0 at x = -a/b.
    """
    if degree(polynomial, symbol) != 1:
        return None
    slope = polynomial.derivative(symbol)
    rest = polynomial - slope * polynomial.context().gen(symbol)
    if not rest:
        return ZERO
    common = slope.gcd(rest)
    return quotient(negated(nested(rest / common, names)), nested(slope / common, names))


class Ratio(NamedTuple):
    """One polynomial over another."""

    top: fmpz_mpoly
    bottom: fmpz_mpoly

    def lowest(self) -> Ratio:
        """In lowest terms, with a denominator whose leading term is positive."""
        if not self.top:
            return Ratio(self.top, self.top + 1)
        common = self.top.gcd(self.bottom)
        if self.bottom.leading_coefficient() < 0:
            common = -common
        return Ratio(self.top / common, self.bottom / common)

    def written(self, names: Names) -> Expression:
        """As a nested expression."""
        found = self.lowest()
        return quotient(nested(found.top, names), nested(found.bottom, names))


def derivative(ratio: Ratio, symbol: int) -> Ratio:
    """(N/D)′ = (N′ D - N D′) / D²."""
    top, bottom = ratio
    slope = top.derivative(symbol) * bottom - top * bottom.derivative(symbol)
    return Ratio(slope, bottom * bottom).lowest()


class Limit(NamedTuple):
    """What a ratio is like at an end of s: an expression without s, times a power of s."""

    expression: Expression
    power: int

    def at_zero(self) -> Expression | None:
        """Its value as s → 0; None where it grows without bound."""
        return self._value(self.power)

    def at_infinity(self) -> Expression | None:
        """Its value as s → ∞; None where it grows without bound."""
        return self._value(-self.power)

    def _value(self, falling: int) -> Expression | None:
        if self.expression == ZERO or falling > 0:
            return ZERO
        return self.expression if falling == 0 else None

    def grown(self) -> Expression:
        """The expression with its power of s."""
        s = power(Name("s"), abs(self.power))
        if self.power < 0:
            return quotient(self.expression, s)
        return product(self.expression, s)


def limit(ratio: Ratio, names: Names, end: str) -> Limit:
    """The leading behaviour as s → 0 (`end` is "zero") or s → ∞ ("infinity")."""
    top, bottom = ratio.lowest()
    if not top:
        return Limit(ZERO, 0)
    choose = min if end == "zero" else max
    (low, over), (other, under) = (_at_degree(p, choose) for p in (top, bottom))
    return Limit(Ratio(over, under).written(names), low - other)


def _at_degree(polynomial: fmpz_mpoly, choose: Any) -> tuple[int, fmpz_mpoly]:
    """The lowest or highest degree in s that occurs, and its coefficient."""
    terms = polynomial.to_dict()
    found = choose(exponents[-1] for exponents in terms)
    kept = {(*e[:-1], 0): c for e, c in terms.items() if e[-1] == found}
    return int(found), polynomial.context().from_dict(kept)


def roots_in_s(polynomial: fmpz_mpoly) -> list[complex] | None:
    """The zeros in s (1/s), each as often as it occurs; None where other symbols are left.

    The zeros of a polynomial with whole coefficients, found with certain digits.
    """
    terms = polynomial.to_dict()
    if any(any(exponents[:-1]) for exponents in terms):
        return None
    coefficients = [0] * (max((e[-1] for e in terms), default=0) + 1)
    for exponents, number in terms.items():
        coefficients[exponents[-1]] = int(number)
    found: list[complex] = []
    roots: Any = fmpz_poly(coefficients).complex_roots()
    for root, times in roots:
        found += [complex(root)] * times
    return sorted(found, key=lambda z: (abs(z), z.real, z.imag))


def ratio_of(family: Family, number: int) -> Ratio:
    """N_k / D."""
    return Ratio(family.numerators[number], family.denominator)
