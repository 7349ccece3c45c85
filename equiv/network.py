"""A network: elements between nodes, with what is asked of it. Immutable."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass, field, replace
from decimal import Decimal
from functools import cached_property, partial
from operator import methodcaller
from typing import NamedTuple

from equiv.elements import Element
from equiv.elements.element import Frequency, Parameters
from equiv.elements.quantity import Quantity
from equiv.elements.words import no_such_pair, what_it_was, which_pair
from equiv.errors import Diagnostic, UsageError, nearest
from equiv.units import Value

DC = Frequency(Decimal(0))


class Find(NamedTuple):
    """A quantity that the network is about, with its label."""

    quantity: Quantity
    label: str | None = None


class Port(NamedTuple):
    """A named terminal pair."""

    name: str
    plus: str
    minus: str


class Given(NamedTuple):
    """A parameter: its value as written (exact) and its SI unit."""

    value: Value
    unit: str


class Origin(NamedTuple):
    """Where a network was read from: the file's own name and the digest of its bytes."""

    name: str | None = None
    sha256: str | None = None


NOWHERE = Origin()
Again = Callable[[Mapping[str, str]], "Network"]


class NodePair(NamedTuple):
    """The voltage of the first node over the second."""

    first: str
    second: str


class Branch(NamedTuple):
    """A terminal pair of an element."""

    element: str
    pair: int


@dataclass(frozen=True, eq=False)
class Network:
    """Elements by name, in the order of the file, and what the file says about them.

    Nothing changes a network; `isolate`, `replacing` and `with_elements` give new ones.
    """

    elements: Mapping[str, Element]
    title: str = ""
    notes: tuple[str, ...] = ()
    ground: str = "gnd"
    frequency: Frequency = DC
    phasors: str = "rms"
    """`rms` or `peak`: what the magnitude of a source in `elements` means."""
    given: Mapping[str, Given] = field(default_factory=dict)
    finds: tuple[Find, ...] = ()
    ports: Mapping[str, Port] = field(default_factory=dict)
    comments: Mapping[str, str] = field(default_factory=dict)
    """A remark on an element, written behind its statement."""
    places: tuple[tuple[str, int], ...] = ()
    """File and line of each element, in the order of `elements`; empty if not from text."""
    origin: Origin = NOWHERE
    arithmetic: str = "floating"
    """`floating`, `exact`, or `nearest`: rational, irrational numbers by their floats."""
    again: Again | None = field(default=None, repr=False)
    """Reads it again with other values of its parameters (as text); None if not from text."""

    def __eq__(self, other: object) -> bool:
        """Same elements and statements; places, origin, comments and arithmetic do not count."""
        if not isinstance(other, Network):
            return NotImplemented
        return self._content() == other._content()

    def __hash__(self) -> int:
        return hash((self.title, self.ground, len(self.elements)))

    def _content(self) -> tuple[object, ...]:
        return (
            list(self.elements.values()), self.title, self.notes, self.ground, self.frequency,
            self.phasors, dict(self.given), self.finds, dict(self.ports),
        )  # fmt: skip

    @property
    def exact(self) -> bool:
        """Whether the numbers of its solution are rational."""
        return self.arithmetic != "floating"

    @cached_property
    def nodes(self) -> tuple[str, ...]:
        """Every node but the ground, in the order in which the elements name them."""
        seen = dict.fromkeys([node for e in self.elements.values() for node in e.nodes])
        for port in self.ports.values():
            seen.setdefault(port.plus)
            seen.setdefault(port.minus)
        seen.pop(self.ground, None)
        return tuple(seen)

    @cached_property
    def node_set(self) -> frozenset[str]:
        """Every node, the ground too."""
        return frozenset((*self.nodes, self.ground))

    @cached_property
    def sources(self) -> tuple[Element, ...]:
        """The independent sources, in the order of the file."""
        return tuple(e for e in self.elements.values() if e.role == "source")

    @cached_property
    def controlled(self) -> tuple[Element, ...]:
        """The controlled sources, in the order of the file."""
        return tuple(e for e in self.elements.values() if e.role == "controlled")

    @cached_property
    def tabulated(self) -> tuple[Element, ...]:
        """The elements whose parameters come from a file."""
        return tuple(
            e for e in self.elements.values() if isinstance(e.value, Parameters) and e.table
        )

    @cached_property
    def groups(self) -> Mapping[str, tuple[str, ...]]:
        """The members of each group of sources."""
        members: dict[str, list[str]] = {}
        for source in self.sources:
            if source.options.group:
                members.setdefault(source.options.group, []).append(source.name)
        return {group: tuple(names) for group, names in members.items()}

    def frequency_of(self, source: Element) -> Frequency:
        """The frequency a source is at: its own (`at`), or the file's."""
        return source.options.at or self.frequency

    @cached_property
    def frequencies(self) -> tuple[Frequency, ...]:
        """The frequencies of the sources, ascending; the file's where there is no source."""
        found: list[Frequency] = []
        written = dict.fromkeys(self.frequency_of(source) for source in self.sources)
        for at in sorted(written, key=lambda at: at.omega):
            if not found or not at.same_as(found[-1]):
                found.append(at)
        return tuple(found) or (self.frequency,)

    @cached_property
    def place_of(self) -> Mapping[str, tuple[str, int]]:
        """File and line of each element that came from text."""
        return dict(zip(self.elements, self.places, strict=False))

    def members(self, name: str) -> tuple[str, ...]:
        """The sources that a name stands for: itself, or the members of the group."""
        element = self.elements.get(name)
        if element is not None and element.role == "source":
            return (name,)
        if name in self.groups:
            return self.groups[name]
        raise UsageError(self._not_a_source(name, element))

    def _not_a_source(self, name: str, element: Element | None) -> Diagnostic:
        known = ", ".join([s.name for s in self.sources[:12]] + list(self.groups)[:12])
        if element is not None:
            message = f"{name} is a {element.kind}, not an independent source"
        else:
            message = f"there is no source and no group called {name}"
        return Diagnostic("not-a-source", message, hint=f"sources and groups: {known or 'none'}")

    def isolate(self, name: str) -> Network:
        """The sub-circuit of one source or group: every other independent source switched off.

        A voltage source becomes a short and a current source an open of the same name, so that
        its current or voltage can still be asked for and sensed. Controlled sources stay.
        """
        kept = set(self.members(name))
        off = [s for s in self.sources if s.name not in kept]
        remarks = {s.name: f"switched off: {what_it_was(s)}" for s in off}
        quiet = self.replacing({s.name: s.switched_off() for s in off})
        title = f"{self.title} ({name} alone)" if self.title else f"{name} alone"
        return replace(quiet, title=title, comments={**self.comments, **remarks})

    def replacing(self, elements: Mapping[str, Element]) -> Network:
        """The network with some elements replaced by others under the same names."""
        again = _then(self.again, methodcaller("replacing", elements))
        return replace(self, elements={**self.elements, **elements}, again=again)

    def with_elements(self, elements: Iterable[Element]) -> Network:
        """The network with more elements."""
        more = {e.name: e for e in elements}
        again = _then(self.again, methodcaller("with_elements", tuple(more.values())))
        return replace(self, elements={**self.elements, **more}, places=(), again=again)

    def locate(self, quantity: Quantity) -> NodePair | Branch:
        """What a quantity is about: two nodes, or a terminal pair of an element."""
        names = quantity.names
        if quantity.what == "V" and len(names) == 2:
            self._require(names, self.node_set, "node")
            return NodePair(*names)
        (name,) = names
        element = self.elements.get(name)
        if quantity.what == "V" and quantity.pair == 0 and name in self.node_set:
            if element is not None:
                raise UsageError(_two_meanings(name))
            return NodePair(name, self.ground)
        if element is None:
            wanted = "node or element" if quantity.what == "V" else "element"
            pool = [*self.elements, *self.node_set] if quantity.what == "V" else self.elements
            self._require(names, pool, wanted)
            raise AssertionError  # _require has raised
        if quantity.pair >= len(element.pairs):
            raise UsageError(no_such_pair(element, quantity))
        return Branch(name, quantity.pair)

    @staticmethod
    def _require(names: Iterable[str], pool: Iterable[str], wanted: str) -> None:
        for name in names:
            if name not in pool:
                message = f"there is no {wanted} called {name}"
                raise UsageError(Diagnostic("unknown-name", message, hint=nearest(name, pool)))

    def describe(self, quantity: Quantity) -> str:
        """A quantity in words with its reference direction."""
        place = self.locate(quantity)
        if isinstance(place, NodePair):
            if place.second == self.ground and len(quantity.names) == 1:
                return f"voltage of {place.first} over {place.second}"
            return f"voltage of {place.first} over {place.second}, positive where {place.first} is higher"
        first, second = self.pair_nodes(place)
        which = "" if len(self.elements[place.element].pairs) < 2 else which_pair(place.pair)
        if quantity.what == "V":
            return (
                f"voltage of {place.element}{which}, positive where {first} is higher than {second}"
            )
        if quantity.what == "I":
            return f"current in {place.element}{which}, positive from {first} to {second}"
        return f"power absorbed by {place.element}"

    def pair_nodes(self, branch: Branch) -> tuple[str, str]:
        """The names of the nodes of a terminal pair."""
        return self.elements[branch.element].pair_nodes(branch.pair, self.ground)


def _then(again: Again | None, change: Callable[[Network], Network]) -> Again | None:
    """Reading again, and making a change to what was read."""
    return None if again is None else partial(_changed, again, change)


def _changed(
    again: Again, change: Callable[[Network], Network], given: Mapping[str, str]
) -> Network:
    return change(again(given))


def _two_meanings(name: str) -> Diagnostic:
    return Diagnostic(
        "two-meanings",
        f"{name} is both a node and an element",
        hint=f"write V:{name},NODE for the node's voltage over another node",
    )


Progress = Callable[[str, int, int], None]
"""What a long calculation tells: the work in words, how much is done, how much there is."""


def no_progress(work: str, done: int, total: int) -> None:
    """Tell nobody."""
