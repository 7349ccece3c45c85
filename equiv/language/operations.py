"""What the steps of an expression do: exact arithmetic with dimensions, within bounds."""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction
from typing import NamedTuple

from equiv.language import functions
from equiv.language.dimensions import NO_DIMENSION, Dimension, in_words
from equiv.language.limits import MOST_BITS
from equiv.language.mistakes import Mistake

_LARGEST_TRIED = 64
"""The largest exponent for which a power of a fraction is tried for a rational number."""


class Measure(NamedTuple):
    """An exact number and its dimension; a number without one may be added to any.

    `rounded` where it stands for an irrational number.
    """

    number: Fraction
    dimension: Dimension = NO_DIMENSION
    rounded: bool = False


class Step(NamedTuple):
    """A number or a parameter put on the stack, or an operation on what lies on it."""

    what: str
    """`number`, `parameter`, an operator, `negate` or a function's name"""
    place: tuple[int, int]
    number: Measure | None = None
    name: str = ""


def within_bounds(measure: Measure, step: Step) -> Measure:
    number = measure.number
    if max(number.numerator.bit_length(), number.denominator.bit_length()) > MOST_BITS:
        raise Mistake("number-too-large", "the result has too many digits", step.place)
    return measure


def _sum(first: Measure, second: Measure, step: Step) -> Measure:
    sign = 1 if step.what == "+" else -1
    number, rounded = first.number + sign * second.number, first.rounded or second.rounded
    if first.dimension == second.dimension or second.dimension == NO_DIMENSION:
        return Measure(number, first.dimension, rounded)
    if first.dimension == NO_DIMENSION:
        return Measure(number, second.dimension, rounded)
    word = "add" if sign > 0 else "subtract"
    raise Mistake(
        "wrong-dimension",
        f"cannot {word} {in_words(first.dimension)} and {in_words(second.dimension)}",
        step.place,
    )


def _product(first: Measure, second: Measure, step: Step) -> Measure:
    dimension = tuple(a + b for a, b in zip(first.dimension, second.dimension, strict=True))
    return Measure(first.number * second.number, dimension, first.rounded or second.rounded)


def _quotient(first: Measure, second: Measure, step: Step) -> Measure:
    if second.number == 0:
        raise Mistake("division-by-zero", "the divisor is zero", step.place)
    dimension = tuple(a - b for a, b in zip(first.dimension, second.dimension, strict=True))
    return Measure(first.number / second.number, dimension, first.rounded or second.rounded)


def _power(base: Measure, exponent: Measure, step: Step) -> Measure:
    if exponent.dimension != NO_DIMENSION:
        raise Mistake(
            "wrong-dimension",
            f"an exponent is a number without a unit; found {in_words(exponent.dimension)}",
            step.place,
        )
    if exponent.number == Fraction(1, 2):
        return _root(base, step)
    if exponent.number.denominator != 1:
        _require_no_dimension(base, step)
        result = _computed(lambda: functions.power(base.number, exponent.number), step)
        p, q = exponent.number.numerator, exponent.number.denominator
        same = base.number**p == result**q if max(abs(p), q) <= _LARGEST_TRIED else False
        return Measure(result, rounded=base.rounded or exponent.rounded or not same)
    n = exponent.number.numerator
    bits = max(base.number.numerator.bit_length(), base.number.denominator.bit_length()) - 1
    if bits * abs(n) > MOST_BITS or abs(n) > MOST_BITS:
        raise Mistake("number-too-large", "the power has too many digits", step.place)
    if base.number == 0 and n < 0:
        raise Mistake("division-by-zero", "zero has no negative power", step.place)
    rounded = base.rounded or exponent.rounded
    return Measure(base.number**n, tuple(a * n for a in base.dimension), rounded)


BINARY: dict[str, Callable[[Measure, Measure, Step], Measure]] = {
    "+": _sum, "-": _sum, "*": _product, "/": _quotient, "^": _power,
}  # fmt: skip


def one_argument(argument: Measure, step: Step) -> Measure:
    if step.what == "negate":
        return Measure(-argument.number, argument.dimension, argument.rounded)
    if step.what == "sqrt":
        return _root(argument, step)
    _require_no_dimension(argument, step)
    result = _computed(lambda: functions.FUNCTIONS[step.what](argument.number), step)
    # of a rational number all four are irrational, but for exp 0, log 1, sin 0 and cos 0
    known = argument.number == (1 if step.what == "log" else 0)
    return Measure(result, rounded=argument.rounded or not known)


def _root(argument: Measure, step: Step) -> Measure:
    if any(a % 2 for a in argument.dimension):
        raise Mistake(
            "wrong-dimension",
            f"the square root of {in_words(argument.dimension)} has no unit",
            step.place,
        )
    number = _computed(lambda: functions.square_root(argument.number), step)
    rounded = argument.rounded or number**2 != argument.number
    return Measure(number, tuple(a // 2 for a in argument.dimension), rounded)


def _computed(function: Callable[[], Fraction], step: Step) -> Fraction:
    try:
        return function()
    except ValueError as error:
        raise Mistake("no-such-value", str(error), step.place) from None


def _require_no_dimension(argument: Measure, step: Step) -> None:
    if argument.dimension != NO_DIMENSION:
        what = f"{step.what} takes" if step.what != "^" else "such a power is taken of"
        raise Mistake(
            "wrong-dimension",
            f"{what} a number without a unit; found {in_words(argument.dimension)}",
            step.place,
        )
