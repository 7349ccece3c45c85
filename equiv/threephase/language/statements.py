"""The statements about a three-phase file: one handler each, whose docstring is its help."""

from __future__ import annotations

from collections.abc import Callable
from typing import NamedTuple, Protocol

from equiv.elements.element import Frequency
from equiv.language.blocks import Body
from equiv.language.definitions import define
from equiv.language.fields import read_frequency
from equiv.language.handlers import Reading, opened
from equiv.language.keywords import HANDLERS as OF_NETWORKS
from equiv.language.mistakes import Mistake
from equiv.language.words import Statement, Words
from equiv.threephase.entered import Entered
from equiv.threephase.language.drafts import require_bus_name
from equiv.threephase.language.quantities import (
    LaterEntered,
    Wanted,
    read_entered,
    read_power_amount,
)

Place = tuple[int, int]
VOLTS = Wanted("the nominal voltage", ("V",))
POWER = Wanted("the base power", ("VA",))
PREFAULT = Wanted("the voltage before the fault", ("pu", "%"))
TOLERANCE = Wanted("the supply's tolerance", ("%",))


class BusDraft(NamedTuple):
    """What a statement says about a bus."""

    name: str
    volts: Entered | LaterEntered
    tolerance: Entered | LaterEntered | None
    statement: Statement
    places: dict[str, Place]


class Said(NamedTuple):
    """Something that a file says once, and where."""

    value: Entered | LaterEntered
    statement: Statement
    place: Place


class SystemReading(Reading, Protocol):
    """What the handlers write into."""

    said: dict[str, Said]
    buses: list[BusDraft]


Handler = Callable[[SystemReading, Body, Statement], None]
HANDLERS: dict[str, Handler] = {name: OF_NETWORKS[name].read for name in ("title", "note", "read")}


def _register(name: str) -> Callable[[Handler], Handler]:
    def add(function: Handler) -> Handler:
        HANDLERS[name] = function
        return function

    return add


@_register("three-phase")
def three_phase(reading: SystemReading, body: Body, statement: Statement) -> None:
    """three-phase 50 Hz: this file describes a balanced three-phase system; its frequency."""
    words = opened(statement)
    place = words.next.place
    found = read_frequency(words)
    words.end(near=("Hz", "kHz", "rad/s"))
    if not isinstance(found, Frequency) or found.value <= 0:
        raise Mistake("bad-frequency", "expected a frequency, as in 50 Hz", place)
    value = Entered(found.value, found.unit)
    _once(reading, "three-phase", Said(value, statement, place))


@_register("base")
def base(reading: SystemReading, body: Body, statement: Statement) -> None:
    """base 10 MVA: the base power of per-unit values that have no rating of their own."""
    _one_value(reading, "base", POWER, statement)


@_register("prefault")
def prefault(reading: SystemReading, body: Body, statement: Statement) -> None:
    """prefault 1.05 pu: the voltage before the fault, of each bus's nominal; 1 pu if not said."""
    _one_value(reading, "prefault", PREFAULT, statement)


@_register("given")
def given(reading: SystemReading, body: Body, statement: Statement) -> None:
    """given NAME = VALUE: a parameter, to be used in values."""
    define(reading, body, statement, read_power_amount)


@_register("bus")
def bus(reading: SystemReading, body: Body, statement: Statement) -> None:
    """bus NAME 11 kV: a bus and its nominal voltage, line to line; below 1 kV optionally tolerance 10%."""
    words = opened(statement)
    places = {"name": words.next.place}
    name = require_bus_name(words)
    start = words.taken
    volts = read_entered(words, VOLTS)
    places["volts"] = words.stretch(start)
    tolerance = None
    if words.peek() == "tolerance":
        words.take("tolerance")
        start = words.taken
        tolerance = read_entered(words, TOLERANCE)
        places["tolerance"] = words.stretch(start)
    words.end(near=("tolerance",))
    reading.buses.append(BusDraft(name, volts, tolerance, statement, places))


def _one_value(reading: SystemReading, name: str, wanted: Wanted, statement: Statement) -> None:
    words: Words = opened(statement)
    value = read_entered(words, wanted)
    place = words.stretch(1)
    words.end()
    _once(reading, name, Said(value, statement, place))


def _once(reading: SystemReading, name: str, said: Said) -> None:
    first = reading.said.get(name)
    if first is not None:
        raise Mistake(
            "given-twice",
            f"{name} is given twice",
            said.place,
            related=((first.statement.span(first.place), "first given here"),),
        )
    reading.said[name] = said


STATEMENTS: dict[str, str] = {name: handler.__doc__ or "" for name, handler in HANDLERS.items()}
"""One line of help for each, from its handler."""
