"""Expressions in parentheses: exact fractions with their units, and nothing else.

An expression is turned once into a list of steps for a stack, which are then done for each
set of parameters; no step can reach anything but numbers.
"""

from __future__ import annotations

import re
from collections.abc import Callable
from fractions import Fraction
from typing import NamedTuple, Protocol

from equiv.language import functions
from equiv.language.dimensions import DIMENSIONS
from equiv.language.limits import MOST_DEPTH, MOST_DIGITS, MOST_EXPRESSION
from equiv.language.mistakes import Mistake
from equiv.language.numerals import UNITS, bounded, numeral
from equiv.language.operations import BINARY, Measure, Step, one_argument, within_bounds
from equiv.units import scale


class Parameters(Protocol):
    """Where the value of a parameter is looked up."""

    def measure(self, name: str, place: tuple[int, int]) -> Measure:
        """The parameter's value as a real number with its dimension."""


class Expression(NamedTuple):
    """The steps of an expression, and the parameters it names."""

    steps: tuple[Step, ...]
    names: frozenset[str]

    def evaluate(self, parameters: Parameters) -> Measure:
        """What the expression comes to."""
        stack: list[Measure] = []
        for step in self.steps:
            if step.number is not None:
                stack.append(step.number)
            elif step.what == "parameter":
                stack.append(parameters.measure(step.name, step.place))
            elif step.what in BINARY:
                second, first = stack.pop(), stack.pop()
                stack.append(within_bounds(BINARY[step.what](first, second, step), step))
            else:
                stack.append(within_bounds(one_argument(stack.pop(), step), step))
        return stack.pop()


_TOKEN = re.compile(
    r"\s*(?:(?P<number>(?:[0-9]+(?:\.[0-9]*)?|\.[0-9]+)(?:[eE][+-]?[0-9]+)?"
    r"(?:[^\W\d_Ω\u2126]*rad/s|[\w%Ω\u2126]*))|(?P<name>[^\W\d][\w.']*)|(?P<mark>[-+*/^()]))"
)
_UNIT_BEHIND = re.compile(r"[ \t]*([^\W\d]*rad/s|[^\W\d][\w.']*|Ω|\u2126)")
RESERVED = frozenset((*functions.FUNCTIONS, "sqrt", "pi"))


class _Parser:
    """Recursive descent over sums, products, signs, powers and atoms."""

    def __init__(self, text: str, offset: int) -> None:
        self.text = text
        self.offset = offset
        self.at = 0
        self.depth = 0
        self.steps: list[Step] = []
        self.token = ""
        self.place = (offset, 0)
        self.kind = ""
        self.advance()

    def advance(self) -> None:
        match = _TOKEN.match(self.text, self.at)
        if match is None:
            rest = self.text[self.at :]
            start = self.at + len(rest) - len(rest.lstrip())
            self.token, self.kind = self.text[start : start + 1], "end" if not rest.strip() else "?"
            self.place = (self.offset + start, 1)
            return
        self.kind = match.lastgroup or ""
        self.token = match[self.kind]
        start = match.start(self.kind)
        self.place = (self.offset + start, len(self.token))
        self.at = match.end()

    def wrong(self, wanted: str) -> Mistake:
        found = self.token or "the end of the expression"
        hint = {"*": "a power is written ^", ",": "a decimal point is written ."}.get(self.token)
        return Mistake("bad-expression", f"expected {wanted}; found {found}", self.place, hint=hint)

    def sum(self) -> None:
        self.deeper()
        self.product()
        while self.kind == "mark" and self.token in "+-":
            self.operator(self.product)
        self.depth -= 1

    def product(self) -> None:
        self.signed()
        while self.kind == "mark" and self.token in "*/":
            self.operator(self.signed)

    def operator(self, operand: Callable[[], None]) -> None:
        what, place = self.token, self.place
        self.advance()
        operand()
        self.steps.append(Step(what, place))

    def signed(self) -> None:
        negative, place = False, self.place
        while self.kind == "mark" and self.token in "+-":
            negative ^= self.token == "-"
            self.advance()
        self.power()
        if negative:
            self.steps.append(Step("negate", place))

    def power(self) -> None:
        self.atom()
        if self.kind == "mark" and self.token == "^":
            self.deeper()
            self.operator(self.signed)
            self.depth -= 1

    def deeper(self) -> None:
        self.depth += 1
        if self.depth > MOST_DEPTH:
            raise Mistake(
                "expression-too-deep",
                f"more than {MOST_DEPTH} parentheses or powers inside each other",
                self.place,
            )

    def atom(self) -> None:
        if self.kind == "number":
            self.number()
        elif self.kind == "name":
            self.name()
        elif self.token == "(":
            self.parenthesis()
        else:
            raise self.wrong("a number, a parameter or a parenthesis")

    def parenthesis(self) -> None:
        self.advance()
        self.sum()
        if self.token != ")":
            raise self.wrong("an operator or )")
        self.advance()

    def number(self) -> None:
        text, place = self.token, self.place
        found = numeral(text, place[0])
        if found is None:
            raise Mistake("bad-expression", f"{text} is not a number with a unit", place)
        number, unit = bounded(found.number, place, MOST_DIGITS), found.unit
        behind = _UNIT_BEHIND.match(self.text, self.at)
        if behind and found.takes(behind[1]):
            unit, power = UNITS[behind[1]]
            number = scale(number, power)
            self.at = behind.end()
        self.steps.append(Step("number", place, Measure(Fraction(number), DIMENSIONS[unit or ""])))
        self.advance()

    def name(self) -> None:
        name, place = self.token, self.place
        self.advance()
        if name == "pi":
            self.steps.append(Step("number", place, Measure(functions.PI, rounded=True)))
        elif name in RESERVED:
            if self.token != "(":
                raise self.wrong(f"( behind {name}")
            self.parenthesis()
            self.steps.append(Step(name, place))
        elif self.token == "(":
            raise Mistake(
                "unknown-function",
                f"there is no function called {name}",
                place,
                hint="there are sqrt, exp, log, sin and cos",
            )
        elif name in UNITS:
            raise Mistake("bad-expression", f"the unit {name} needs a number before it", place)
        else:
            self.steps.append(Step("parameter", place, name=name))


def parse_expression(text: str, at: int) -> Expression:
    """The expression between two parentheses; `at` is the offset of its text."""
    if len(text) > MOST_EXPRESSION:
        raise Mistake(
            "expression-too-long",
            f"the expression has {len(text)} characters; at most {MOST_EXPRESSION} are read",
            (at, len(text)),
        )
    parser = _Parser(text, at)
    parser.sum()
    if parser.kind != "end":
        raise parser.wrong("an operator or the end of the expression")
    names = frozenset(step.name for step in parser.steps if step.name)
    return Expression(tuple(parser.steps), names)
