"""The branches of each sequence network, per unit on the system's base power.

1 V is the nominal phase voltage of a bus, 1 A the base current at its voltage. Angles count from
the no-load angle of each bus, so that no vector group stands in the branches.

Source: IEC 60909-0:2016, 6.3 and table 3 (zero-sequence paths of windings), from memory.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import NamedTuple

from equiv.threephase.entered import scaled
from equiv.threephase.model import Bus, Item, Link, OneLine, Shunt, Transformer, View

SAME_RATIO = 1e-12
"""Ratios that differ by less are those of the buses."""


class Series(NamedTuple):
    """An impedance between two buses; behind it an ideal ratio v(first)/v(second)."""

    item: Item
    first: str
    second: str
    impedance: complex
    ratio: float = 1.0


class ToEarth(NamedTuple):
    """An impedance between a bus and the reference, with an EMF behind it."""

    item: Item
    bus: str
    impedance: complex
    emf: complex | None = None


class Charging(NamedTuple):
    """An admittance at the end (1 or 2) of a line."""

    item: Item
    bus: str
    end: int
    admittance: complex


class Missing(NamedTuple):
    """An item without zero-sequence data, where there would be a path."""

    item: Item
    buses: tuple[str, ...]


Part = Series | ToEarth | Charging | Missing


def ohms_of(bus: Bus, base: float) -> float:
    """The base impedance (ohm) of a bus."""
    return bus.volts**2 / base


def amperes_of(bus: Bus, base: float) -> float:
    """The base current (A) of a bus."""
    return base / (math.sqrt(3) * bus.volts)


def there(system: OneLine, view: View) -> Iterator[Item]:
    """The items that are there in a view."""
    for item in system.items.values():
        if not isinstance(item, Shunt) or item.stays(view):
            yield item


def machines(system: OneLine, view: View) -> list[Shunt]:
    """The items with an EMF that are there in a view."""
    return [item for item in there(system, view) if isinstance(item, Shunt) and item.drives]


def parts(system: OneLine, view: View, sequence: int) -> Iterator[Part]:
    """The branches of one sequence network."""
    for item in there(system, view):
        if isinstance(item, Shunt):
            yield from _of_shunt(item, system, view, sequence)
        elif isinstance(item, Link):
            yield from _of_link(item, system, view, sequence)
        elif isinstance(item, Transformer):
            if sequence:
                yield _through(item, system, item.series(sequence, view))
            else:
                yield from _zero_of_transformer(item, system, view)


def _of_shunt(item: Shunt, system: OneLine, view: View, sequence: int) -> Iterator[Part]:
    own, base = item.series(sequence, view), ohms_of(item.bus, system.base)
    if sequence == 0:
        neutral = item.neutral()
        if item.lacks_zero_sequence:
            yield Missing(item, (item.bus.name,))
            return
        if own is None or neutral is None:
            return
        own += 3 * scaled(neutral, view.reactances)
    if own is not None:
        yield ToEarth(item, item.bus.name, own / base, emf(item, system, view, sequence))


def emf(item: Shunt, system: OneLine, view: View, sequence: int = 1) -> complex | None:
    """The EMF of a machine or infeed per unit; None where there is none."""
    if sequence != 1 or not item.drives or view.basis != "superposition":
        return None
    given = item.emf(view)
    return system.prefault if given is None else given * math.sqrt(3) / item.bus.volts


def _of_link(item: Link, system: OneLine, view: View, sequence: int) -> Iterator[Part]:
    own, base = item.series(sequence, view), ohms_of(item.first, system.base)
    if own is None:
        yield Missing(item, (item.first.name, item.second.name))
        return
    yield Series(item, item.first.name, item.second.name, own / base)
    charging = item.charging(sequence, view) * base / 2
    if charging:
        yield Charging(item, item.first.name, 1, charging)
        yield Charging(item, item.second.name, 2, charging)


def ratio_of(item: Transformer) -> float:
    """v(first)/v(second) of a transformer at no load, per unit; 1 where it is that of the buses."""
    ratio = item.rated[0] / item.first.volts * item.second.volts / item.rated[1]
    return 1.0 if abs(ratio - 1) <= SAME_RATIO else ratio


def _through(item: Transformer, system: OneLine, ohms: complex) -> Series:
    per_unit = ohms / ohms_of(item.first, system.base)
    return Series(item, item.first.name, item.second.name, per_unit, ratio_of(item))


def _zero_of_transformer(item: Transformer, system: OneLine, view: View) -> Iterator[Part]:
    """Where zero-sequence current passes: through YNyn, to earth beside a delta or in a zigzag.

    An earthed star needs a winding on the same limbs that can carry the opposite ampere-turns;
    a zigzag winding has it in itself, and gives none to another.
    """
    group = item.group_of_windings
    connections = (group.first.connection, group.second.connection)
    neutrals = (item.neutral(1), item.neutral(2))
    own, ratio = item.series(0, view), item.rated[1] / item.rated[0]
    first, second = (None if n is None else 3 * scaled(n, view.reactances) for n in neutrals)
    if connections == ("Y", "Y"):
        if first is not None and second is not None:
            yield _through(item, system, own + first + second / ratio**2)
        return
    for bus, winding, other, earthing in (
        (item.first, *connections, first),
        (item.second, *connections[::-1], second),
    ):
        if earthing is not None and (winding == "Z" or (winding, other) == ("Y", "D")):
            ohms = own if bus is item.first else own * ratio**2
            yield ToEarth(item, bus.name, (ohms + earthing) / ohms_of(bus, system.base))
