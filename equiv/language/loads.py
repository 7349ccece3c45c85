"""The words of loads that are put on a port: `8 ohm`, `short`, `current 2 A`, `power 50 W`."""

from __future__ import annotations

import math
from decimal import localcontext
from typing import NamedTuple

from equiv.elements.element import Frequency
from equiv.errors import UsageError
from equiv.language.fields import LaterValue, read_frequency, read_number
from equiv.language.mistakes import Mistake
from equiv.language.names import is_parameter
from equiv.language.numerals import EXACT, numeral
from equiv.language.readings import QUANTITIES, impossible, read_table
from equiv.language.reports import Argument, Reports
from equiv.language.scope import Scope
from equiv.language.words import Words
from equiv.units import Symbol, Value, as_number

KINDS = ("short", "open", "current", "power")
HINT = "a load is written 8 ohm, 4+3j ohm, short, open, current 2 A or power 50 W"


class Load(NamedTuple):
    """A load at a port; its current is counted out of the port's plus into the load.

    `value` is the impedance (ohm) of an `impedance`, the current (A, rms) of a `current`, the
    complex power taken (VA) of a `power`; a `curve` has its measured points (V, A) in order.
    """

    text: str
    kind: str
    """`impedance`, `short`, `open`, `current`, `power` or `curve`"""
    value: complex = 0.0
    at: Frequency | None = None
    """The frequency of a current, where it is said."""
    points: tuple[tuple[float, float], ...] = ()
    written: Value | None = None
    """The value of an impedance or a current, exact as it was written."""


def read_loads(text: str) -> tuple[Load, ...]:
    """The loads that a text names, one behind the other; `UsageError` if it cannot be read.

    A power is taken at unity power factor unless `pf 0.8 lag` or `pf 0.8 lead` stands behind it.
    """
    argument = Argument("load", 1, text)
    found: list[Load] = []
    try:
        with localcontext(EXACT):
            words = Words(argument)
            while words.peek():
                found.append(_load(words))
    except Mistake as mistake:
        reports = Reports()
        reports.add(mistake, argument)
        raise UsageError(reports.diagnostics()) from None
    return tuple(found)


def load_curve(text: str, name: str = "curve") -> Load:
    """A measured load curve from CSV text with a voltage and a current column, piecewise linear.

    Errors: NetworkFileError with every mistake of the text.
    """
    table = read_table(text, name, {q: QUANTITIES[q] for q in ("voltage", "current", "remark")})
    table.require("voltage", "current")
    voltages, currents = table.columns["voltage"], table.columns["current"]
    for cell in (*voltages, *currents):
        if isinstance(cell.value, complex) or cell.word:
            raise impossible("needs-real", "a load curve is of DC: real numbers only", cell.span)
    if len(voltages) < 2:
        raise impossible("too-few-readings", "a load curve needs two readings or more", table.head)
    points = zip(voltages, currents, strict=True)
    return Load(name, "curve", points=tuple((v.value.real, i.value.real) for v, i in points))


def _load(words: Words) -> Load:
    """`short` | `open` | `current` AMPERES [`at` FREQUENCY] | `power` WATTS [`pf` …] | OHMS."""
    start = words.taken
    first = words.peek()
    value: complex = 0.0
    number: Value | None = None
    at: Frequency | None = None
    kind = first if first in KINDS else "impedance"
    if kind == "impedance":
        _require_number(words)
        number = _value(words, "ohm", True, "a load")
    else:
        words.take("a load")
    if kind == "current":
        number = _value(words, "A", True, "a current, as in 2 A")
        at = _at(words)
    elif kind == "power":
        value = _power(words)
    if number is not None:
        value = as_number(number)
    return Load(words.written(words.stretch(start)), kind, value, at, written=number)


def _require_number(words: Words) -> None:
    """A word that is no number is none of a load's either."""
    word = words.next
    if word.text.lower().endswith(".csv"):
        message = f"{word.text} is a file: give its load curve by load_curve(text)"
        raise Mistake("not-a-load", message, word.place)
    if is_parameter(word.text) and numeral(word.text, word.at) is None:
        raise Mistake(
            "not-a-load", f"{word.text} is no load", word.place, hint=HINT, near=(word.text, KINDS)
        )


def _number(words: Words, unit: str, may_be_complex: bool, wanted: str) -> complex:
    return as_number(_value(words, unit, may_be_complex, wanted))


def _value(words: Words, unit: str, may_be_complex: bool, wanted: str) -> Value:
    place = words.next.place
    try:
        found = read_number(words, unit, may_be_complex, wanted, HINT)
    except Mistake as mistake:
        if mistake.hint is None:
            raise Mistake(mistake.code, str(mistake), mistake.place, hint=HINT) from None
        raise
    value = found.evaluate(Scope()) if isinstance(found, LaterValue) else found
    if isinstance(value, Symbol):
        raise Mistake("no-number", "a load needs a number; found ?", place)
    return value


def _at(words: Words) -> Frequency | None:
    if words.peek() != "at":
        return None
    words.take("at")
    found = read_frequency(words)
    return found if isinstance(found, Frequency) else found.evaluate(Scope())


def _power(words: Words) -> complex:
    """The complex power; it lags where the current does (a positive reactive power)."""
    real = _number(words, "W", False, "a power, as in 50 W").real
    if words.peek() != "pf":
        return real
    words.take("pf")
    place = words.next.place
    factor = _number(words, "", False, "a power factor, as in pf 0.8 lag").real
    if not 0 < factor <= 1:
        raise Mistake("bad-power-factor", "a power factor lies over 0 and up to 1", place)
    side = words.peek()
    if side in ("lag", "lead"):
        words.take("lag or lead")
    elif factor != 1:
        raise Mistake(
            "missing-word",
            "expected lag or lead behind the power factor",
            words.next.place,
            hint="lag where the current lags behind the voltage, as in: pf 0.8 lag",
        )
    if factor == 1:
        return real
    reactive = abs(real) * math.sqrt(1 - factor * factor) / factor
    return complex(real, reactive if side == "lag" else -reactive)
