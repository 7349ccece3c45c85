"""Polynomials as short nested expressions: what several terms share is taken out before a bracket."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Mapping, Sequence
from functools import lru_cache, reduce
from math import gcd
from typing import Any

from equiv.equations.symbolic.expression import (
    ZERO,
    Expression,
    Name,
    Number,
    Power,
    Product,
    Sum,
    names_in,
    negated,
    number_of,
    parts_of,
    power,
    product,
    rebuilt,
    total,
)

Exponents = tuple[int, ...]
_LONG_NUMBER = 256
"""Bits of a coefficient beyond which no factors are looked for."""
Terms = Mapping[Exponents, int]


def nested(polynomial: Any, names: Sequence[str]) -> Expression:
    """A polynomial by its factors, each nested; powers of the last name (s) are collected."""
    if not polynomial:
        return ZERO
    content = int(polynomial.content())
    number, factors = _factors(polynomial / content)
    found: list[Expression] = [Number(int(number) * content)]
    for factor, exponent in factors:
        sign = 1 if factor.leading_coefficient() > 0 else -1
        found[0] = product(found[0], Number(sign**exponent))
        terms = {e: sign * int(c) for e, c in factor.to_dict().items()}
        found.append(power(_collected(terms, names), exponent))
    if _negative(found[0]) and len(found) > 1:
        found = _turned(found)
    found = [_positive_first(factor) for factor in found]
    # single symbols stand before brackets, in the order of the names
    found.sort(key=lambda f: (isinstance(_base(f), Sum), _place(_base(f), names)))
    return product(*found)


def _factors(polynomial: Any) -> tuple[int, list[tuple[Any, int]]]:
    """A number and factors with their powers; the polynomial itself where its numbers are long."""
    whole: list[tuple[Any, int]] = [(polynomial, 1)]
    if max(abs(int(c)) for c in polynomial.coeffs()).bit_length() > _LONG_NUMBER:
        return 1, whole
    try:
        number, factors = polynomial.factor()
    except OverflowError:  # the library orders factors by machine words
        return 1, whole
    return int(number), list(factors)


def _turned(factors: list[Expression]) -> list[Expression]:
    """-(a - b) as (b - a)."""
    for i, factor in enumerate(factors):
        if isinstance(factor, Sum) and any(map(_negative, factor.sum)):
            terms = sorted(map(negated, factor.sum), key=_negative)
            return [negated(factors[0]), *factors[1:i], Sum(tuple(terms)), *factors[i + 1 :]]
    return factors


def _positive_first(factor: Expression) -> Expression:
    """-a + b as b - a."""
    if isinstance(factor, Sum) and _negative(factor.sum[0]):
        return Sum(tuple(sorted(factor.sum, key=_negative)))
    return factor


def _negative(term: Expression) -> bool:
    return number_of(term)[0] < 0


def expanded(polynomial: Any, names: Sequence[str]) -> Expression:
    """A polynomial as the sum of its terms."""
    terms = [_monomial(e, int(c), names) for e, c in polynomial.to_dict().items()]
    return Sum(tuple(terms)) if len(terms) > 1 else total(terms)


def _base(factor: Expression) -> Expression:
    return factor.base if isinstance(factor, Power) else factor


def _place(factor: Expression, names: Sequence[str]) -> int:
    """The first of its names."""
    return min(map(names.index, names_in(factor)), default=-1)


def _collected(terms: Terms, names: Sequence[str]) -> Expression:
    """By falling powers of s, the coefficient of each nested."""
    degrees: dict[int, dict[Exponents, int]] = {}
    for exponents, number in terms.items():
        without = (*exponents[:-1], 0)
        degrees.setdefault(exponents[-1], {})[without] = number
    if len(degrees) == 1 and 0 in degrees:
        return _nested(dict(terms), names)
    s = Name(names[-1])
    return total(
        [
            product(_nested(degrees[degree], names), power(s, degree))
            for degree in sorted(degrees, reverse=True)
        ]
    )


def _nested(terms: dict[Exponents, int], names: Sequence[str]) -> Expression:
    """The symbol of most terms taken out of them, again and again."""
    if len(terms) == 1:
        ((exponents, number),) = terms.items()
        return _monomial(exponents, number, names)
    shared = reduce(gcd, terms.values())
    first = terms[max(terms)]
    shared = -shared if first < 0 else shared
    least = tuple(map(min, zip(*terms, strict=True)))
    rest = {
        tuple([e - low for e, low in zip(exponents, least, strict=True)]): number // shared
        for exponents, number in terms.items()
    }
    return product(_monomial(least, shared, names), _split(rest, names))


def _split(terms: dict[Exponents, int], names: Sequence[str]) -> Expression:
    counts = [sum(map(bool, column)) for column in zip(*terms, strict=True)]
    most = max(counts)
    if most < 2:
        ordered = sorted(terms, reverse=True)
        return total([_monomial(exponents, terms[exponents], names) for exponents in ordered])
    best = counts.index(most)
    inside = {e: c for e, c in terms.items() if e[best]}
    outside = {e: c for e, c in terms.items() if not e[best]}
    pieces = [_nested(inside, names)]
    rest = _nested(outside, names)
    pieces += rest.sum if isinstance(rest, Sum) else [rest]
    return _merged(pieces)


def _merged(pieces: Sequence[Expression]) -> Expression:
    """a·(…) + b·(…) with the same bracket as (a + b)·(…)."""
    uses = Counter(bracket for piece in pieces for bracket in set(_brackets(piece)))
    found: list[Expression] = []
    grouped: dict[Expression, list[Expression]] = {}
    for piece in pieces:
        best = max(_brackets(piece), key=uses.__getitem__, default=None)
        if best is None or uses[best] < 2:
            found.append(piece)
            continue
        if best not in grouped:
            found.append(best)
        factors = list(parts_of(piece))
        factors.remove(best)
        grouped.setdefault(best, []).append(product(*factors))
    return total(
        [product(total(grouped[piece]), piece) if piece in grouped else piece for piece in found]
    )


def _brackets(piece: Expression) -> list[Expression]:
    factors = piece.product if isinstance(piece, Product) else ()
    return [factor for factor in factors if isinstance(factor, Sum)]


@lru_cache(1024)
def _name(name: str) -> Name:
    """A name, once for the many terms that have it."""
    return Name(name)


def _monomial(exponents: Exponents, number: int, names: Sequence[str]) -> Expression:
    found: list[Expression] = [] if number == 1 else [Number(number)]
    for name, exponent in zip(names, exponents, strict=True):
        if exponent:
            found.append(_name(name) if exponent == 1 else Power(_name(name), int(exponent)))
    if len(found) > 1:
        return Product(tuple(found))
    return found[0] if found else Number(1)


Where = list[tuple[str, Expression]]


def with_repeats_named(
    expressions: Sequence[Expression], new_name: Callable[[], str]
) -> tuple[list[Expression], Where]:
    """Expressions in which brackets that occur again are named, and what the names stand for."""
    uses: Counter[Expression] = Counter()
    for expression in expressions:
        _count(expression, uses)
    known: dict[Expression, Expression] = {}
    where: Where = []

    def written(expression: Expression) -> Expression:
        if not parts_of(expression):
            return expression
        if expression in known:
            return known[expression]
        found = rebuilt(expression, [written(part) for part in parts_of(expression)])
        if isinstance(expression, Sum) and uses[expression] > 1:
            name = new_name()
            where.append((name, found))
            found = Name(name)
        known[expression] = found
        return found

    return [written(expression) for expression in expressions], where


def _count(expression: Expression, uses: Counter[Expression]) -> None:
    """How often each bracket is written out, if one that occurs again is written once."""
    if isinstance(expression, Sum):
        uses[expression] += 1
        if uses[expression] > 1:
            return
    for part in parts_of(expression):
        _count(part, uses)
