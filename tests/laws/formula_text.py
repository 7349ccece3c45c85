"""Formulas as text, read as the ordinary infix expressions that they are."""

import ast
import random
from fractions import Fraction
from operator import add, mul, sub, truediv
from typing import Any

import sympy


class Values:
    """Random fractions for every value, by element and part and by name in formulas."""

    def __init__(self, seed: int) -> None:
        self.random, self.known = random.Random(seed), {}

    def __call__(self, element: str, part: str = "") -> Fraction:
        name = f"{element}_{part}" if part else element
        if name not in self.known:
            sign = self.random.choice((1, 1, -1))
            self.known[name] = sign * Fraction(
                self.random.randint(1, 99), self.random.randint(1, 9)
            )
        return self.known[name]


class Names(dict[str, Any]):
    """Names in a formula, with their values."""

    def __init__(self, values: Values, s: Fraction) -> None:
        super().__init__(s=s)
        self.values_of = values

    def __missing__(self, name: str) -> Fraction:
        return self.values_of(name)


OPERATORS = {ast.Add: add, ast.Sub: sub, ast.Mult: mul, ast.Div: truediv}


def number(text: str, names: Names) -> Fraction:
    """What a formula comes to, read as the ordinary infix expression that it is."""

    def value(node: ast.expr) -> Fraction:
        match node:
            case ast.Constant(int(whole)):
                return Fraction(whole)
            case ast.Name(name):
                return names[name]
            case ast.UnaryOp(ast.USub(), operand):
                return -value(operand)
            case ast.BinOp(left, ast.Pow(), ast.Constant(int(exponent))):
                return value(left) ** exponent
            case ast.BinOp(left, operator, right):
                return OPERATORS[type(operator)](value(left), value(right))
        raise AssertionError(ast.dump(node))

    return value(ast.parse(text, mode="eval").body)


def in_sympy(text: str) -> Any:
    """A formula built from Python's own reading of it."""
    operators = {ast.Add: add, ast.Sub: sub, ast.Mult: mul, ast.Div: truediv}

    def value(node: ast.expr) -> Any:
        match node:
            case ast.Constant(int(whole)):
                return sympy.Integer(whole)
            case ast.Name(name):
                return sympy.Symbol(name)
            case ast.UnaryOp(ast.USub(), operand):
                return -value(operand)
            case ast.BinOp(left, ast.Pow(), ast.Constant(int(exponent))):
                return value(left) ** exponent
            case ast.BinOp(left, operator, right):
                return operators[type(operator)](value(left), value(right))
        raise AssertionError(ast.dump(node))

    return value(ast.parse(text, mode="eval").body)
