"""A three-phase system as text: what `read` makes of it is the same system again."""

from __future__ import annotations

from collections.abc import Iterator
from decimal import Decimal
from typing import Any

from equiv.language.writer import (
    written_name,
    written_quoted,
    written_text,
    written_value,
)
from equiv.threephase.declaring import Kind
from equiv.threephase.entered import Earthing, Entered, Factor
from equiv.threephase.model import Bus, Item, Link, OneLine, Shunt, Transformer, VectorGroup
from equiv.threephase.vector_groups import write_group
from equiv.units import Formula, Number, Phasor, Ratio, Rectangular, Symbol, Value, scale

_WIDEST = 28
"""Columns are aligned up to this width; a longer word pushes the rest of its line out."""


def write_system(system: OneLine) -> str:
    """The canonical text of a three-phase system.

    Errors: UsageError for a system, made in code, that has names or texts which the language
    cannot hold.
    """
    head = [
        *([f"title        {written_text(system.title)}"] if system.title else []),
        *(f"note         {written_text(note)}" for note in system.notes),
        f"three-phase  {_plain(system.hertz, 'Hz')}",
        *([f"base         {_plain(system.base, 'VA')}"] if _needs_base(system) else []),
        *([f"prefault     {_plain(system.prefault, 'pu')}"] if system.prefault != 1.0 else []),
    ]
    given = [
        f"given        {written_name(name)} = {written_value(value, unit)}"
        for name, (value, unit) in system.given.items()
    ]
    buses = _aligned([list(_bus(bus)) for bus in system.buses.values()])
    items = _aligned([list(_item(item)) for item in system.items.values()])
    sections = [head, given, buses, items]
    return "\n\n".join("\n".join(lines) for lines in sections if lines) + "\n"


def _plain(number: float, unit: str) -> str:
    """A number that is kept as a float, to its last digit."""
    return write_entered(Entered(Decimal(repr(float(number))), unit))


def _needs_base(system: OneLine) -> bool:
    stated = any(getattr(item, "base", None) is not None for item in system.items.values())
    return stated or system.base != 100e6


def _bus(bus: Bus) -> Iterator[str]:
    volts, tolerance = bus.written.get("volts"), bus.written.get("tolerance")
    yield "bus"
    yield written_name(bus.name)
    yield write_entered(volts) if volts else _plain(bus.volts, "V")
    if tolerance is not None or bus.tolerance != 0.06:
        yield f"tolerance {write_entered(tolerance) if tolerance else _plain(bus.tolerance, '%')}"


def _item(item: Item) -> Iterator[str]:
    """Kind, name, buses, and everything else."""
    assert isinstance(item, Kind)
    yield item.kind
    yield written_name(item.name)
    if isinstance(item, Shunt):
        yield written_name(item.bus.name)
    elif isinstance(item, Link | Transformer):
        yield f"{written_name(item.first.name)} > {written_name(item.second.name)}"
    words = []
    ordered = [*item.positional, *item.by_keyword.values()]
    for field in ordered:
        value = getattr(item, field.name)
        if value is not None:
            words.append(f"{field.keyword} {_value(value)}".strip())
    if item.count != 1:
        words.append(f"count {item.count}")
    if item.group is not None:
        words.append(f"group {written_name(item.group)}")
    if item.label is not None:
        words.append(f"label {written_quoted(item.label)}")
    yield "  ".join(words)


def _value(value: Any) -> str:
    """A value in the words of the language."""
    if isinstance(value, Entered):
        return write_entered(value)
    if isinstance(value, Earthing):
        if value.impedance is None:
            return "open"
        solid = value.impedance == Earthing(Entered(Decimal(0), "ohm")).impedance
        return "solid" if solid else write_entered(value.impedance)
    if isinstance(value, Factor):
        return write_entered(value.cosphi) + (" lead" if value.leads else "")
    if isinstance(value, VectorGroup):
        return write_group(value)
    return _sides(*value)


def _sides(first: Entered, second: Entered) -> str:
    """The rated voltages of both sides."""
    one, two = write_entered(first), write_entered(second)
    number, unit = one.split()
    return f"{number}/{two}" if two.endswith(f" {unit}") else f"{number}{unit}/{two}"


def _aligned(rows: list[list[str]]) -> list[str]:
    """Rows of words in columns."""
    widths = [
        max((len(row[i]) for row in rows if len(row) > i and len(row[i]) <= _WIDEST), default=0)
        for i in range(4)
    ]
    return [
        "  ".join(word.ljust(width) for word, width in zip(row, widths, strict=False)).rstrip()
        for row in rows
    ]


def write_entered(entered: Entered) -> str:
    """A value with its unit, as it is read."""
    value, unit = entered
    if isinstance(value, Formula):
        return written_value(value, unit)
    if isinstance(value, Phasor):
        angle = written_value(value.angle, "")
        size = write_entered(Entered(value.magnitude, unit))
        return f"{size} @ {angle} {'deg' if value.degrees else 'rad'}"
    if isinstance(value, Rectangular):
        parts = Rectangular(*(scale(part, 2 if unit == "%" else 0) for part in value))
        return f"{written_value(parts, '')} {unit}".rstrip()
    if unit in ("%", "pu", "m", ""):
        assert not isinstance(value, Ratio | Symbol)
        return _write_plain(value, unit)
    return written_value(value, unit)


def _write_plain(value: Value, unit: str) -> str:
    """A real number in a unit that takes no prefixes."""
    power, shown = {"%": (2, "%"), "m": (-3, " km"), "pu": (0, " pu"), "": (0, "")}[unit]
    number: Number = value  # type: ignore[assignment]
    return f"{written_value(scale(number, power), '')}{shown}"
