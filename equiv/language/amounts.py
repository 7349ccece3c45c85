"""Values as they are written: numbers with units, complex numbers, phasors, ratios, `?`.

What depends on parameters is a `Later` until they are known.
"""

from __future__ import annotations

from collections.abc import Callable
from decimal import Decimal
from fractions import Fraction
from typing import NamedTuple

from equiv.language.dimensions import DIMENSIONS, NO_DIMENSION, in_words, unit_of
from equiv.language.expressions import Expression, parse_expression
from equiv.language.mistakes import Mistake
from equiv.language.names import is_parameter
from equiv.language.numerals import NUMBER, UNITS, Numeral, bounded, decimal, numeral
from equiv.language.scope import Scope
from equiv.language.slips import number_meant
from equiv.language.words import Word, Words, closing
from equiv.units import (
    SYMBOL,
    UNIT_NAMES,
    Formula,
    Number,
    Phasor,
    Ratio,
    Rectangular,
    Value,
    as_rounded,
    exact,
    scale,
)

Place = tuple[int, int]


class Amount(NamedTuple):
    """A value in SI units, and its unit; None where the text names none."""

    value: Value
    unit: str | None = None


class Later(NamedTuple):
    """A value that is known when the parameters are."""

    evaluate: Callable[[Scope], Amount]


Written = Amount | Later
_ANGLES = ("deg", "rad", "°")
_NOTHING = Scope()


def read_amount(words: Words, wanted: str = "a value", hint: str | None = None) -> Written:
    """The value that stands next, with the words that belong to it."""
    start = words.taken
    word = words.take(wanted, hint)
    found: Written
    if word.text == "?":
        return Amount(SYMBOL)
    if (plain := numeral(word.text, word.at)) is not None:
        found = _plain(words, plain, word)
    elif is_parameter(word.text):
        found = Later(lambda scope: _parameter(scope, word))
    elif word.text[0] == "(" and _closes_with_unit(word.text):
        found = _bracketed(words, word, start)
    else:
        found = _composed(words, word, wanted, hint)
    if words.peek() in ("@", "∠"):
        return read_angle(words, found, words.stretch(start))
    return found


def _plain(words: Words, found: Numeral, word: Word) -> Written:
    """A number, whose unit may be the next word."""
    number, unit = found.number, found.unit
    if found.takes(words.peek()):
        unit, power = UNITS[words.take("a unit").text]
        number = scale(number, power)
    amount = Amount(bounded(number, word.place), unit)
    if word.text[0] == "R":
        # `R47` is 0.47 ohm by IEC 60062, unless a parameter has that name.
        return Later(lambda scope: _parameter(scope, word) if word.text in scope else amount)
    return amount


def _parameter(scope: Scope, word: Word) -> Amount:
    """The value of a parameter by its bare name."""
    parameter = scope.find(word.text, word.place)
    value = parameter.value
    if isinstance(value, Formula):
        value = value.value
    if parameter.top and isinstance(value, Decimal | Fraction):
        value = Formula(word.text, value)
    return Amount(value, parameter.unit or None)


def _closes_with_unit(text: str) -> bool:
    end = closing(text, 0) + 1
    return end == len(text) or text[end:] in UNITS


def _bracketed(words: Words, word: Word, start: int) -> Written:
    """An expression in parentheses, with the unit that stands behind it."""
    end = closing(word.text, 0)
    expression = parse_expression(word.text[1:end], word.at + 1)
    unit = word.text[end + 1 :]
    if not unit and words.peek() in UNITS:
        unit = words.take("a unit").text
    place = words.stretch(start)
    return _when_known(expression, unit, words.written(place), place)


def _when_known(expression: Expression, unit: str, text: str, place: Place) -> Written:
    """The expression's value: now, if it names no parameter."""
    if expression.names:
        return Later(lambda scope: _evaluated(expression, unit, text, place, scope))
    return _evaluated(expression, unit, text, place, _NOTHING)


def _evaluated(expression: Expression, unit: str, text: str, place: Place, scope: Scope) -> Amount:
    number, dimension, rounded = expression.evaluate(scope)
    name, power = UNITS.get(unit, (unit_of(dimension), 0))
    if unit and dimension != NO_DIMENSION and (power or DIMENSIONS[name] != dimension):
        raise Mistake(
            "wrong-dimension",
            f"the expression comes to {in_words(dimension)}; {unit} cannot follow",
            place,
        )
    result = bounded(scale(number, power), place)
    value = exact(Fraction(result))
    if rounded:
        value = as_rounded(value)
    kept = all(scope.find(n, place).top for n in expression.names)
    if kept and (expression.names or name not in DIMENSIONS):
        return Amount(Formula(text, value), name or None)
    return Amount(value, name or None)


def _composed(words: Words, word: Word, wanted: str, hint: str | None) -> Written:
    """A ratio or a complex number, which is one word: `10:1`, `3-4j`, `4j`, `(1/3):2`."""
    text = word.text
    middle = _atom_end(text, 0)
    if middle is None:
        raise _not_a_value(word, wanted, hint)
    mark = text[middle : middle + 1]
    if mark == "j":
        return _complex(words, word, None, (0, middle), 1)
    start = middle + 1
    end = None if text[start : start + 1] in ("+", "-") else _atom_end(text, start)
    if mark == ":" and end == len(text):
        return _ratio(word, middle)
    if mark and mark in "+-" and end is not None and text[end : end + 1] == "j":
        return _complex(words, word, (0, middle), (start, end), -1 if mark == "-" else 1)
    raise _not_a_number(word) or _unknown_unit(text[middle:], word.at + middle)


def _ratio(word: Word, middle: int) -> Written:
    def joined(first: Number, second: Number, unit: str | None) -> Amount:
        if not first or not second:
            raise Mistake("zero-ratio", "a ratio has no zero in it", word.place)
        return Amount(Ratio(first, second), "")

    second = _atom(word, middle + 1, len(word.text))
    return _joined(_atom(word, 0, middle), second, word.place, joined)


def _complex(words: Words, word: Word, real: Place | None, imaginary: Place, sign: int) -> Written:
    """A complex number by the ends of its parts; its unit is attached or the next word."""
    start = imaginary[1] + 1
    onto = word.text[start:]
    if not onto and words.peek() in UNITS:
        onto = words.take("a unit").text
    if onto and onto not in UNITS:
        raise _not_a_number(word) or _unknown_unit(onto, word.at + start)
    unit, power = UNITS[onto] if onto else (None, 0)

    def joined(first: Number, second: Number, _: str | None) -> Amount:
        re = bounded(scale(first, power), word.place)
        im = bounded(scale(sign * second, power), word.place)
        return Amount(Rectangular(re, im), unit)

    first = _atom(word, *real) if real else Amount(Decimal(0))
    return _joined(first, _atom(word, *imaginary), word.place, joined)


def _atom_end(text: str, start: int) -> int | None:
    """Where the number or parenthesis that begins at `start` ends."""
    if text[start : start + 1] == "(":
        return closing(text, start) + 1
    match = NUMBER.match(text, start)
    return match.end() if match else None


def _atom(word: Word, start: int, end: int) -> Written:
    """A bare number, or an expression in parentheses."""
    text, place = word.text[start:end], (word.at + start, end - start)
    if text[0] != "(":
        return Amount(bounded(decimal(text, place), place))
    return _when_known(parse_expression(text[1:-1], place[0] + 1), "", text, place)


def read_angle(words: Words, magnitude: Written, place: Place) -> Written:
    """The angle behind a magnitude: `120 V @ -30 deg`."""
    words.take("@")
    word = words.take("an angle, as in: @ -30 deg")
    end = _atom_end(word.text, 0)
    measure = word.text[end:]
    if end is not None and not measure and words.peek() in _ANGLES:
        measure = words.take("deg or rad").text
    if end is None or measure not in ("", *_ANGLES):
        raise Mistake(
            "bad-angle",
            f"expected an angle; found {word.text}",
            word.place,
            hint=number_meant(word.text) or "write it as: @ -30 deg, or in radians: @ 0.5 rad",
        )
    degrees = measure != "rad"

    def joined(size: Number, turn: Number, unit: str | None) -> Amount:
        return Amount(Phasor(size, turn, degrees), unit)

    return _joined(magnitude, _atom(word, 0, end), place, joined)


def _joined(
    first: Written,
    second: Written,
    place: Place,
    join: Callable[[Number, Number, str | None], Amount],
) -> Written:
    """A value made of two, when both are known."""

    def evaluate(scope: Scope) -> Amount:
        one, two = (p.evaluate(scope) if isinstance(p, Later) else p for p in (first, second))
        return join(_real(one.value, place), _real(two.value, place), one.unit)

    if isinstance(first, Later) or isinstance(second, Later):
        return Later(evaluate)
    return evaluate(_NOTHING)


def _real(value: Value, place: Place) -> Number:
    """A value that must be one real number."""
    if isinstance(value, Formula):
        return value.value
    if isinstance(value, Decimal | Fraction):
        return value
    raise Mistake("needs-real", "this part of the value must be one real number", place)


def _not_a_value(word: Word, wanted: str, hint: str | None) -> Mistake:
    if word.text[0] in "−–":
        hint = "the minus sign is written -"
    return Mistake("not-a-value", f"expected {wanted}; found {word.text}", word.place, hint=hint)


def _not_a_number(word: Word) -> Mistake | None:
    """That a number is written in a way that is not read, such as `0,4`."""
    hint = number_meant(word.text)
    message = f"{word.text} is not a number"
    return Mistake("not-a-value", message, word.place, hint=hint) if hint else None


def _unknown_unit(text: str, at: int) -> Mistake:
    hint = None
    if "j" in text:
        hint = "a complex number is written without blanks: 3-4j ohm"
    elif text[0] == "K":
        hint = "kilo is written with a small k"
    return Mistake(
        "unknown-unit",
        f"{text} is not a unit",
        (at, len(text)),
        hint=hint,
        near=(text, UNITS),
    )


def unit_words(unit: str | None) -> str:
    """A unit in words: `ohms`."""
    return UNIT_NAMES.get(unit or "", unit or "")
