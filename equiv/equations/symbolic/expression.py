"""Expressions as trees: how formulas are written, evaluated, and handed to other forms."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import reduce
from operator import add, mul
from typing import Any, TypeVar, Union

Kind = TypeVar("Kind")


def _remembered(kind: type[Kind]) -> type[Kind]:
    """A kind of tree that works out its hash once: trees are looked up by themselves."""
    fresh = kind.__hash__

    def known(self: Any) -> int:
        found: int | None = self.__dict__.get("_hash")
        if found is None:
            found = self.__dict__["_hash"] = fresh(self)
        return found

    kind.__hash__ = known  # type: ignore[method-assign]
    return kind


@_remembered
@dataclass(frozen=True)
class Number:
    """An exact number."""

    value: Fraction | int


@_remembered
@dataclass(frozen=True)
class Name:
    """A symbol, s, or a named part."""

    name: str


@_remembered
@dataclass(frozen=True)
class Power:
    """A name to a whole power of two or more."""

    base: Expression
    exponent: int


@_remembered
@dataclass(frozen=True)
class Sum:
    """A sum of two or more."""

    sum: tuple[Expression, ...]


@_remembered
@dataclass(frozen=True)
class Product:
    """A product of two or more."""

    product: tuple[Expression, ...]


@_remembered
@dataclass(frozen=True)
class Quotient:
    """One over another."""

    top: Expression
    bottom: Expression


Expression = Union[Number, Name, Power, Sum, Product, Quotient]  # noqa: UP007 (recursive)
ZERO, ONE = Number(0), Number(1)


def total(terms: Sequence[Expression]) -> Expression:
    """The sum of any number of terms, its numbers added up behind the others."""
    number: Fraction | int = 0
    kept: list[Expression] = []
    for term in terms:
        for part in term.sum if isinstance(term, Sum) else (term,):
            if isinstance(part, Number):
                number += part.value
            else:
                kept.append(part)
    if number or not kept:
        kept.append(Number(number))
    return kept[0] if len(kept) == 1 else Sum(tuple(kept))


def product(*factors: Expression) -> Expression:
    """The product of any number of factors, its number first; quotients become one quotient."""
    number: Fraction | int = 1
    above: list[Expression] = []
    below: list[Expression] = []
    for factor in factors:
        for part in factor.product if isinstance(factor, Product) else (factor,):
            if isinstance(part, Number):
                number *= part.value
            elif isinstance(part, Quotient):
                above.append(part.top)
                below.append(part.bottom)
            else:
                above.append(part)
    if below:
        return quotient(product(Number(number), *above), product(*below))
    if number == 0 or not above:
        return Number(number)
    if number != 1:
        above.insert(0, Number(number))
    return above[0] if len(above) == 1 else Product(tuple(above))


def quotient(top: Expression, bottom: Expression) -> Expression:
    """One over another, its sign outside and its numbers above; over 1 it is itself."""
    if isinstance(top, Quotient) or isinstance(bottom, Quotient):
        up, down = _over(top), _over(bottom)
        return quotient(product(up.top, down.bottom), product(up.bottom, down.top))
    (number, above), (other, below) = number_of(top), number_of(bottom)
    above, below = _cancelled(above, below)
    value = Fraction(number) / other
    if value == 0 or (below == ONE and (value.denominator == 1 or above == ONE)):
        return product(Number(value), above)
    size = product(Number(abs(value.numerator)), above)
    under = product(Number(value.denominator), below)
    found = Quotient(size, under)
    return Product((Number(-1), found)) if value < 0 else found


def _cancelled(top: Expression, bottom: Expression) -> tuple[Expression, Expression]:
    """Both without the factors that are the same above and below."""
    if isinstance(bottom, Sum) and not any(isinstance(f, Sum) for f in (top, *parts_of(top))):
        return top, bottom
    above, below = _powers(top), _powers(bottom)
    common = {base: min(p, below[base]) for base, p in above.items() if base in below}
    if not common:
        return top, bottom
    left, under = (
        product(*(power(base, p - common.get(base, 0)) for base, p in powers.items()))
        for powers in (above, below)
    )
    return left, under


def collected(expression: Expression) -> Expression:
    """Equal factors as one power, above and below."""
    if isinstance(expression, Quotient):
        return quotient(collected(expression.top), collected(expression.bottom))
    return product(*(power(base, p) for base, p in _powers(expression).items()))


def _powers(expression: Expression) -> dict[Expression, int]:
    """The factors of a product, each with its power."""
    found: dict[Expression, int] = {}
    for factor in expression.product if isinstance(expression, Product) else (expression,):
        base, times = (factor.base, factor.exponent) if isinstance(factor, Power) else (factor, 1)
        found[base] = found.get(base, 0) + times
    found.pop(ONE, None)
    return found


def _over(expression: Expression) -> Quotient:
    return expression if isinstance(expression, Quotient) else Quotient(expression, ONE)


def number_of(expression: Expression) -> tuple[Fraction | int, Expression]:
    """The number before an expression, and the rest of it."""
    match expression:
        case Number(value):
            return value, ONE
        case Product((Number(value), *rest)):
            return value, rest[0] if len(rest) == 1 else Product(tuple(rest))
    return 1, expression


def with_name(expression: Expression, known: Expression, name: str) -> Expression:
    """An expression with a name in place of another one, wherever that is a part of it."""
    if expression == known:
        return Name(name)
    parts = [with_name(part, known, name) for part in parts_of(expression)]
    return rebuilt(expression, parts)


def rebuilt(expression: Expression, parts: Sequence[Expression]) -> Expression:
    """The same kind of expression of other parts."""
    match expression:
        case Sum():
            return Sum(tuple(parts))
        case Product():
            return Product(tuple(parts))
        case Quotient():
            return Quotient(parts[0], parts[1])
        case Power():
            return Power(parts[0], expression.exponent)
    return expression


def negated(expression: Expression) -> Expression:
    """Minus an expression."""
    number, rest = number_of(expression)
    return product(Number(-number), rest)


def power(base: Expression, exponent: int) -> Expression:
    """A whole power that is not negative."""
    if exponent == 0:
        return ONE
    return base if exponent == 1 else Power(base, exponent)


def parts_of(expression: Expression) -> tuple[Expression, ...]:
    """What an expression is put together from."""
    match expression:
        case Sum(terms):
            return terms
        case Product(factors):
            return factors
        case Quotient(top, bottom):
            return top, bottom
        case Power(base, _):
            return (base,)
    return ()


def names_in(expression: Expression) -> Iterator[str]:
    """Every name in an expression."""
    if isinstance(expression, Name):
        yield expression.name
    for part in parts_of(expression):
        yield from names_in(part)


def evaluated(
    expression: Expression, values: Mapping[str, Any], number: Callable[[Any], Any]
) -> Any:
    """What an expression comes to, in any numbers that can + - * / and be made of fractions.

    Errors: KeyError for a name without a value; ZeroDivisionError.
    """
    kind = type(expression)
    if kind is Name:
        return values[expression.name]  # type: ignore[union-attr]
    if kind is Product:
        return reduce(mul, _each(expression.product, values, number))  # type: ignore[union-attr]
    if kind is Sum:
        return reduce(add, _each(expression.sum, values, number))  # type: ignore[union-attr]
    match expression:
        case Number(value):
            return number(value)
        case Power(base, exponent):
            return reduce(mul, [evaluated(base, values, number)] * exponent)
        case Quotient(top, bottom):
            return evaluated(top, values, number) / evaluated(bottom, values, number)


def _each(
    parts: tuple[Expression, ...], values: Mapping[str, Any], number: Callable[[Any], Any]
) -> list[Any]:
    """What the parts come to; names, which are most of them, are looked up at once."""
    return [
        values[part.name] if type(part) is Name else evaluated(part, values, number)
        for part in parts
    ]
