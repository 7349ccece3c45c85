"""The three sequence networks of a one-line diagram, as ordinary networks per unit.

Nodes are the buses, `MAIN.1`, `MAIN.2`, `MAIN.0`; elements bear the names of their items, a
source `G1` its own, its impedances `G1.1`, `G1.2`, `G1.0`. An impedance to the reference is
counted from there to the bus: its current is what the item delivers.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping
from decimal import Decimal
from typing import Any, NamedTuple

from equiv.elements import KINDS, Element
from equiv.elements.element import NO_OPTIONS, Frequency, Options, Parameters
from equiv.network import Network
from equiv.threephase.model import OneLine, View
from equiv.threephase.sequence.sequences import Charging, Missing, Part, Series, ToEarth, parts
from equiv.threephase.sequence.ties import Ties, ties_of
from equiv.units import Rectangular

REFERENCE = "gnd"
NAMES = {1: "positive", 2: "negative", 0: "zero"}


class Names(NamedTuple):
    """What the nodes and elements of one sequence are called."""

    sequence: int
    dot: str = "."
    """Between a name and what is added to it; more dots where names have some already."""

    def node(self, bus: str) -> str:
        """The node of a bus."""
        return f"{bus}{self.dot}{self.sequence}"

    def element(self, item: str) -> str:
        """The impedance of an item."""
        return f"{item}{self.dot}{self.sequence}"

    def ratio(self, item: str) -> str:
        """The ideal transformer of an item, and the node before it."""
        return f"{self.element(item)}{self.dot}ratio"

    def charging(self, item: str, end: int) -> str:
        """The admittance at an end of a line."""
        return f"{self.element(item)}{self.dot}{end}"

    def emf(self, item: str) -> str:
        """The node between an EMF and its impedance."""
        return f"{item}{self.dot}emf"


def names_of(system: OneLine, sequence: int) -> Names:
    """Names that no two things of a system share."""
    dot = "."
    while any(dot in name for name in (*system.items, *system.buses)):
        dot += "."
    return Names(sequence, dot)


class SequenceNetwork(NamedTuple):
    """One sequence of a system: its branches, its network, and what is tied to the reference."""

    names: Names
    parts: tuple[Part, ...]
    ties: Ties
    network: Network


def sequence_network(
    system: OneLine, view: View, sequence: int, faults: Iterable[str] = ()
) -> SequenceNetwork:
    """The positive (1), negative (2) or zero (0) sequence network, per unit on `system.base`.

    1 V is the nominal phase voltage of a bus, 1 A the base current there. Parts that nothing
    ties to the reference are left out. At each bus of `faults` (that is not left out) there is a
    current source of 0 A into it, called `fault BUS`.

    Source: C. L. Fortescue (1918); one network a sequence: common practice.
    """
    branches = tuple(parts(system, view, sequence))
    ties, names = ties_of(system.buses, branches), names_of(system, sequence)
    elements: dict[str, Element] = {}
    for part in branches:
        for element in elements_of(part, names, ties):
            elements[element.name] = element
    for bus in faults:
        if ties.is_tied(bus):
            elements[injection(bus)] = made(
                "current", injection(bus), (REFERENCE, names.node(bus)), Decimal(0)
            )
    title = f"{system.title}: {NAMES[sequence]} sequence" if system.title else NAMES[sequence]
    frequency = Frequency(Decimal(repr(system.hertz)))
    return SequenceNetwork(
        names, branches, ties, Network(elements, title=title, frequency=frequency)
    )


def injection(bus: str) -> str:
    """The name of the current source at a bus where a fault is looked at."""
    return f"fault {bus}"


def elements_of(
    part: Part, names: Names, ties: Ties, reference: str = REFERENCE
) -> Iterator[Element]:
    """The elements of one branch; none where its part is not tied to the reference."""
    if isinstance(part, Missing) or not ties.is_tied(_bus_of(part)):
        return
    item = part.item.name
    if isinstance(part, Charging):
        nodes = (names.node(part.bus), reference)
        yield made("admittance", names.charging(item, part.end), nodes, number(part.admittance))
    elif isinstance(part, ToEarth):
        start = reference
        if part.emf is not None:
            start = names.emf(item)
            options = Options(group=part.item.group)
            yield made("voltage", item, (start, reference), number(part.emf), options)
        nodes = (start, names.node(part.bus))
        yield made("impedance", names.element(item), nodes, number(part.impedance))
    else:
        yield from _series(part, names, reference)


def _bus_of(part: Series | ToEarth | Charging) -> str:
    return part.first if isinstance(part, Series) else part.bus


def _series(part: Series, names: Names, reference: str) -> Iterator[Element]:
    name = names.element(part.item.name)
    first, second = names.node(part.first), names.node(part.second)
    if part.ratio == 1.0:
        yield made("impedance", name, (first, second), number(part.impedance))
        return
    inner = names.ratio(part.item.name)
    yield made("impedance", name, (first, inner), number(part.impedance))
    ratio = Parameters((("ratio", (Decimal(repr(part.ratio)), Decimal(1))),))
    yield made("transformer", inner, (inner, reference, second, reference), ratio)


def made(
    kind: str, name: str, nodes: tuple[str, ...], value: Any = None, options: Options = NO_OPTIONS
) -> Element:
    """An element of a kind."""
    return KINDS[kind](name, nodes, value, options=options)


def number(value: complex) -> Decimal | Rectangular:
    """A float's exact shortest decimal, as a value of the language."""
    re, im = (Decimal(repr(float(part))) for part in (complex(value).real, complex(value).imag))
    return Rectangular(re, im) if im else re


def three_networks(
    system: OneLine, view: View, faults: Iterable[str] = ()
) -> Mapping[int, SequenceNetwork]:
    """The positive, negative and zero sequence networks, by number."""
    buses = tuple(faults)
    return {s: sequence_network(system, view, s, buses) for s in (1, 2, 0)}
