"""Expressions as ordinary text: + - * / **, names and parentheses."""

from __future__ import annotations

from fractions import Fraction

from equiv.equations.symbolic.expression import (
    Expression,
    Name,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    negated,
    number_of,
)

_SUM, _PRODUCT, _POWER = 1, 2, 3


def text_of(expression: Expression) -> str:
    """An expression with + - * / ** and parentheses, as any reader of expressions reads it."""
    return _text(expression, 0)


def _text(expression: Expression, level: int) -> str:
    match expression:
        case Number(value):
            return _number_text(value, level)
        case Name(name):
            return name
        case Power(base, exponent):
            return f"{_text(base, _POWER + 1)}**{exponent}"
        case Sum(terms):
            text = _text(terms[0], _SUM)
            for term in terms[1:]:
                sign, size = _signed(term)
                text += f" {sign} {_text(size, _SUM + 1)}"
            return f"({text})" if level > _SUM else text
        case Product(factors):
            return _product_text(factors, level)
        case Quotient(top, bottom):
            text = f"{_text(top, _PRODUCT)}/{_text(bottom, _PRODUCT + 1)}"
            return f"({text})" if level > _PRODUCT else text


def _number_text(value: Fraction | int, level: int) -> str:
    text = str(value)
    closed = value >= 0 and value.denominator == 1
    return text if closed or level < _PRODUCT else f"({text})"


def _product_text(factors: tuple[Expression, ...], level: int) -> str:
    first, *rest = factors
    if level <= _PRODUCT and all(type(factor) is Name for factor in factors):
        return "*".join([factor.name for factor in factors])  # type: ignore[union-attr]
    if isinstance(first, Number) and first.value == -1:
        text = "-" + "*".join(_text(factor, _PRODUCT) for factor in rest)
    elif isinstance(first, Number):
        number = str(first.value)
        text = "*".join([number, *(_text(factor, _PRODUCT) for factor in rest)])
    else:
        text = "*".join(_text(factor, _PRODUCT) for factor in factors)
    return f"({text})" if level > _PRODUCT or (text[0] == "-" and level > _SUM) else text


def _signed(term: Expression) -> tuple[str, Expression]:
    """The sign that stands before a term in a sum, and what stands behind it."""
    number, _ = number_of(term)
    return ("-", negated(term)) if number < 0 else ("+", term)
