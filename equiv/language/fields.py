"""A value in its place: does its unit fit, may it be complex."""

from __future__ import annotations

from decimal import Decimal
from fractions import Fraction
from typing import NamedTuple

from equiv.elements.element import Field, Frequency
from equiv.elements.tabulated import Tabulated
from equiv.language.amounts import Amount, Later, Place, Written, read_amount, unit_words
from equiv.language.dimensions import PER_SECOND
from equiv.language.mistakes import Mistake
from equiv.language.scope import Scope
from equiv.language.words import Words
from equiv.units import Formula, Phasor, Ratio, Rectangular, Value

ONE = Decimal(1)


class LaterValue:
    """A value of an element that is known when the parameters are."""

    __slots__ = ("_later", "_place", "_text", "_unit", "may_be_complex")

    def __init__(
        self, later: Later, unit: str, may_be_complex: bool, place: Place, text: str
    ) -> None:
        self._later = later
        self._unit = unit
        self.may_be_complex = may_be_complex
        self._place = place
        self._text = text

    def evaluate(self, scope: Scope) -> Value:
        """The value, fitted to its place."""
        amount = self._later.evaluate(scope)
        return fit(amount, self._unit, self.may_be_complex, self._place, self._text)


class FileName(NamedTuple):
    """A file that gives the values: its name and place; the reader puts a table in its place."""

    name: str
    place: Place


FieldValue = Value | LaterValue | FileName | Tabulated


def read_field(words: Words, field: Field, hint: str) -> tuple[FieldValue, ...]:
    """The values of a field, from the words that stand next."""
    if field.form == "ratio":
        return (read_number(words, "ratio", False, "a ratio, as in 10:1", hint),)
    if field.form == "file":
        place = words.next.place
        return (FileName(words.text("a file's name"), place),)
    wanted = f"a value in {unit_words(field.units[0])}" if field.units[0] else "a number"
    return tuple(read_number(words, unit, field.complex, wanted, hint) for unit in field.units)


def read_number(
    words: Words, unit: str, may_be_complex: bool, wanted: str, hint: str | None = None
) -> Value | LaterValue:
    """One value in a unit (`ratio` for a ratio)."""
    start = words.taken
    written = read_amount(words, wanted, hint)
    if isinstance(written, Amount) and written[1] == unit and type(written[0]) is Decimal:
        return written[0]
    place = words.stretch(start)
    text = words.written(place)
    if isinstance(written, Later):
        return LaterValue(written, unit, may_be_complex, place, text)
    return fit(written, unit, may_be_complex, place, text)


def fit(amount: Amount, unit: str, may_be_complex: bool, place: Place, text: str) -> Value:
    """The value of an amount, which must be in the unit of its place."""
    value, found = amount
    if unit == "ratio":
        return _fit_ratio(value, found, place, text)
    if isinstance(value, Ratio):
        raise Mistake("wrong-value", f"found the ratio {text}, expected a number", place)
    if found is not None and found != unit:
        raise Mistake(
            "wrong-unit", f"found {text}{_said(text, found)}, expected {unit_words(unit)}", place
        )
    if isinstance(value, Rectangular | Phasor) and not may_be_complex:
        raise Mistake(
            "needs-real",
            f"found {text}, which is complex; expected a real number",
            place,
            hint="impedance and admittance take complex values" if unit in ("ohm", "S") else None,
        )
    return value


def _said(text: str, unit: str) -> str:
    """The unit, where the text does not show it."""
    return "" if text.endswith(unit) else f" in {unit_words(unit)}"


def _fit_ratio(value: Value, found: str | None, place: Place, text: str) -> Value:
    if found or isinstance(value, Rectangular | Phasor):
        raise Mistake("wrong-value", f"found {text}, expected a ratio such as 10:1", place)
    if (value.value if isinstance(value, Formula) else value) == 0:
        raise Mistake("zero-ratio", "a ratio has no zero in it", place)
    return value


def ratio_pair(value: Value) -> tuple[Value, Value]:
    """The two numbers of a ratio; `5` is 5:1."""
    return (value.first, value.second) if isinstance(value, Ratio) else (value, ONE)


class LaterFrequency:
    """A frequency that is known when the parameters are."""

    __slots__ = ("_later", "_place", "_text")

    def __init__(self, later: Later, place: Place, text: str) -> None:
        self._later = later
        self._place = place
        self._text = text

    def evaluate(self, scope: Scope) -> Frequency:
        """The frequency."""
        return _frequency(self._later.evaluate(scope), self._place, self._text)


def read_frequency(words: Words) -> Frequency | LaterFrequency:
    """A frequency, in Hz or rad/s."""
    start = words.taken
    written: Written = read_amount(words, "a frequency, as in 50 Hz")
    place = words.stretch(start)
    text = words.written(place)
    if isinstance(written, Later):
        return LaterFrequency(written, place, text)
    return _frequency(written, place, text)


def _frequency(amount: Amount, place: Place, text: str) -> Frequency:
    value, unit = amount
    if isinstance(value, Formula):
        value = value.value
    if unit == PER_SECOND:
        raise Mistake(
            "hertz-or-radians",
            f"{text} may be in Hz or in rad/s",
            place,
            hint="write the unit behind the parenthesis: (…) rad/s",
        )
    if unit not in (None, "Hz", "rad/s"):
        raise Mistake("wrong-unit", f"found {text}{_said(text, unit)}, expected Hz or rad/s", place)
    if not isinstance(value, Decimal | Fraction) or value < 0:
        raise Mistake(
            "bad-frequency", f"found {text}; a frequency is a number and not negative", place
        )
    return Frequency(value, unit or "Hz")
