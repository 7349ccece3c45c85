"""Values that can be calculated with and are hardly meant. The limits are common practice."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from itertools import islice

from equiv.analyses.result import Caution
from equiv.equations.words import listed
from equiv.threephase.entered import Entered, ohms
from equiv.threephase.kinds.generator import Generator
from equiv.threephase.kinds.line import Line
from equiv.threephase.model import Item, OneLine, Shunt, Transformer, View
from equiv.threephase.words import level_words

MOST_EMF_OFF = 0.2
"""How far an EMF, or the voltage before the fault, may be from nominal."""
MOST_SUSCEPTANCE = 1e-6
"""Of a line, in S/m: even a cable of high capacitance has a third of it."""
MOST_SUBTRANSIENT = 2.0
"""Of a machine's own rating."""
USUAL_HERTZ = ((50.0, 50.0), (60.0, 60.0), (16.6, 16.8))

_MANY = 20
_ROUNDING = 1e-12
"""A resistance below this part of its impedance is what a ratio X/R without end leaves."""


def implausible(system: OneLine) -> tuple[Caution, ...]:
    """What is hardly meant in the values of a system."""
    items = system.items.values()
    each = (found for finder in (_emf, _susceptance, _subtransient) for found in finder(items))
    return (*_of_file(system), *islice(each, _MANY), *_reactances_alone(items))


def _of_file(system: OneLine) -> Iterator[Caution]:
    """The frequency, and the voltage before the fault."""
    if not any(low <= system.hertz <= high for low, high in USUAL_HERTZ):
        words = f"{system.hertz:g} Hz is none of the usual frequencies: 50, 60 and 16.7 Hz"
        yield Caution("doubtful-frequency", words)
    if abs(system.prefault - 1) > MOST_EMF_OFF + 1e-9:
        words = f"the voltage before the fault is {system.prefault:.4g} pu of nominal"
        yield Caution("doubtful-prefault", words)


def _emf(items: Iterable[Item]) -> Iterator[Caution]:
    for item in items:
        emf = item.emf(View()) if isinstance(item, Shunt) else None
        if emf is None or not isinstance(item, Shunt):
            continue
        part = abs(emf) * math.sqrt(3) / item.bus.volts
        if abs(part - 1) > MOST_EMF_OFF + 1e-9:
            where = f"{item.bus.name} ({level_words(item.bus.volts)})"
            words = f"the voltage of {item.name} is {part:.4g} of the nominal one of {where}"
            yield Caution("doubtful-emf", words)


def _susceptance(items: Iterable[Item]) -> Iterator[Caution]:
    for item in items:
        if not isinstance(item, Line):
            continue
        for name in ("b1", "b0"):
            found = _per_metre(getattr(item, name), item)
            if found > MOST_SUSCEPTANCE:
                words = (
                    f"{name} of {item.name} is {found * 1e9:.4g} uS/km; "
                    "cables have up to some 300 uS/km"
                )
                yield Caution("doubtful-susceptance", words)


def _per_metre(entered: Entered | None, line: Line) -> float:
    if entered is None:
        return 0.0
    if entered.unit == "S/km":
        return entered.real / 1e3
    return 0.0 if line.length is None else entered.real / line.length.real


def _subtransient(items: Iterable[Item]) -> Iterator[Caution]:
    for item in items:
        if not isinstance(item, Generator):
            continue
        base = item.rated_voltage.real**2 / item.power
        part = ohms(item.x1, item.rated_voltage.real, item.power).real / base
        if part > MOST_SUBTRANSIENT:
            words = f'x1 of {item.name}, its x"d, is {part:.4g} pu of its rating'
            yield Caution("doubtful-reactance", words)


def _reactances_alone(items: Iterable[Item]) -> Iterator[Caution]:
    """Sources and transformers without resistance, of which x/r was not said."""
    names = [item.name for item in items if _lacks_resistance(item)]
    if names:
        words = f"no x/r for {listed(names)}: a reactance alone, so peaks come out too high"
        yield Caution("no-resistance", words)


def _lacks_resistance(item: Item) -> bool:
    if not (isinstance(item, Transformer) or (isinstance(item, Shunt) and item.drives)):
        return False
    entered = getattr(item, "z", None) or getattr(item, "z1", None)
    if getattr(item, "x_over_r", None) is not None or (entered and entered.is_complex):
        return False
    found = item.series(1, View())
    return found is not None and abs(found.real) <= _ROUNDING * abs(found)
