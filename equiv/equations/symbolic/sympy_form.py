"""Expressions in sympy, and in LaTeX through it: the only module that imports it."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from typing import Any

from equiv.equations.symbolic.expression import (
    ONE,
    Expression,
    Name,
    Number,
    Power,
    Product,
    Quotient,
    Sum,
    names_in,
)


def to_sympy(expression: Expression, symbols: Mapping[str, Any] | None = None) -> Any:
    """The expression as sympy's, built from its parts; no text is read."""
    import sympy

    def build(part: Expression) -> Any:
        match part:
            case Number(value):
                return sympy.Rational(value.numerator, value.denominator)
            case Name(name):
                return (symbols or {}).get(name) or sympy.Symbol(name)
            case Power(base, exponent):
                return sympy.Pow(build(base), exponent)
            case Sum(terms):
                return sympy.Add(*map(build, terms))
            case Product(factors):
                return sympy.Mul(*map(build, factors))
            case Quotient(top, bottom):
                return sympy.Mul(build(top), sympy.Pow(build(bottom), -1))

    return build(expression)


def with_parts(expression: Expression, where: Sequence[tuple[str, Expression]]) -> Any:
    """The expression in sympy with its named parts put in."""
    known: dict[str, Any] = {}
    for name, part in where:
        known[name] = to_sympy(part, known)
    return to_sympy(expression, known)


def latex_of(expression: Expression) -> str:
    """The expression as LaTeX for math mode, in the order in which it is written.

    Names in formulas are letters, digits and underscores only, so that nothing in them is markup.
    """
    import sympy

    names = {sympy.Symbol(name): _latex_name(name) for name in names_in(expression)}
    return str(sympy.latex(_unevaluated(expression), order="none", symbol_names=names))


_NAME = re.compile("([A-Za-z]+)([0-9]*)")
_GREEK = frozenset(
    {
        "alpha", "beta", "gamma", "delta", "epsilon", "zeta", "eta", "theta", "iota", "kappa",
        "lambda", "mu", "nu", "xi", "pi", "rho", "sigma", "tau", "upsilon", "phi", "chi", "psi",
        "omega", "Gamma", "Delta", "Theta", "Lambda", "Xi", "Pi", "Sigma", "Upsilon", "Phi",
        "Psi", "Omega",
    }
)  # fmt: skip


def _latex_name(name: str) -> str:
    """A name in LaTeX: R1 with an index, Rload upright, a Greek letter as one.

    No two names look the same: one with an underscore is upright as a whole.
    """
    match = _NAME.fullmatch(name)
    if match is None:
        return rf"\mathrm{{{name.replace('_', chr(92) + '_')}}}"
    word, index = match.groups()
    if word in _GREEK:
        word = rf"\{word}"
    elif len(word) > 1:
        word = rf"\mathrm{{{word}}}"
    return f"{word}_{{{index}}}" if index else word


def _unevaluated(expression: Expression) -> Any:
    import sympy

    match expression:
        case Number(value):
            return sympy.Rational(value.numerator, value.denominator)
        case Name(name):
            return sympy.Symbol(name)
        case Power(base, exponent):
            return sympy.Pow(_unevaluated(base), exponent, evaluate=False)
        case Sum(terms):
            return sympy.Add(*map(_unevaluated, terms), evaluate=False)
        case Product(factors):
            return sympy.Mul(*map(_unevaluated, factors), evaluate=False)
        case Quotient(top, bottom):
            under = sympy.Pow(_unevaluated(bottom), -1, evaluate=False)
            if top == ONE:
                return under
            return sympy.Mul(_unevaluated(top), under, evaluate=False)
