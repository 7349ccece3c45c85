"""A network laid out in columns: node numbers, branches, and values of each kind side by side."""

from __future__ import annotations

from collections import defaultdict
from functools import cached_property
from itertools import compress
from typing import Any

import numpy as np
from numpy.typing import NDArray

from equiv.elements import Element
from equiv.elements.element import GROUND, Parameters
from equiv.elements.quantity import Quantity
from equiv.equations.arithmetic import FLOATING, Arithmetic
from equiv.equations.arithmetic import Numbers as Numbers
from equiv.network import Branch, Network, NodePair

Integers = NDArray[np.int64]
Pair = tuple[Integers, Integers]


class Layout:
    """Numbers for the nodes and branches of a network. The ground is node -1.

    The values are in the arithmetic that is given, else in the one that the network asks for.
    """

    def __init__(self, network: Network, arithmetic: Arithmetic | None = None) -> None:
        self.network = network
        self.arithmetic = arithmetic or arithmetic_of(network)
        self.elements: list[Element] = list(network.elements.values())
        self.node_number: dict[str, int] = {name: i for i, name in enumerate(network.nodes)}
        self.node_number[network.ground] = GROUND
        self.node_count = len(network.nodes)
        self.source_names = [e.name for e in network.sources]
        self._lay_out()

    def _lay_out(self) -> None:
        members = self._members()
        counts = np.empty(len(self.elements), dtype=np.int64)
        for numbers in members.values():
            counts[numbers] = len(self.elements[numbers[0]].pairs)
        self.first_branch: Integers = np.concatenate(([0], np.cumsum(counts)))
        self.branch_count = int(self.first_branch[-1])
        self.tail = np.full(self.branch_count, GROUND)
        self.head = np.full(self.branch_count, GROUND)
        self.columns = [self._column(variant, group) for (_, variant), group in members.items()]

    def _members(self) -> dict[tuple[type[Element], tuple[str, ...]], list[int]]:
        """The elements of each kind and variant; only kinds with several values have variants."""
        kinds: defaultdict[type[Element], list[int]] = defaultdict(list)
        for number, element in enumerate(self.elements):
            kinds[type(element)].append(number)
        members: dict[tuple[type[Element], tuple[str, ...]], list[int]] = {}
        for kind, numbers in kinds.items():
            if not isinstance(self.elements[numbers[0]].value, Parameters):
                members[kind, ()] = numbers
                continue
            for number in numbers:
                members.setdefault((kind, self.elements[number].variant), []).append(number)
        return members

    def _column(self, variant: tuple[str, ...], numbers: list[int]) -> ElementColumn:
        elements = [self.elements[i] for i in numbers]
        first = self.first_branch[numbers]
        for index, ends in enumerate(elements[0].pairs):
            for end, where in zip(ends, (self.tail, self.head), strict=True):
                if end != GROUND:
                    where[first + index] = self._node_numbers([e.nodes[end] for e in elements])
        return ElementColumn(self, elements, variant, first)

    def _node_numbers(self, names: list[str]) -> Integers:
        return np.fromiter(map(self.node_number.__getitem__, names), np.int64, len(names))

    @cached_property
    def element_number(self) -> dict[str, int]:
        """The position of each element by its name."""
        return {name: i for i, name in enumerate(self.network.elements)}

    @cached_property
    def source_number(self) -> dict[str, int]:
        """The position of each independent source by its name."""
        return {name: i for i, name in enumerate(self.source_names)}

    @cached_property
    def element_of_branch(self) -> Integers:
        """The element that each branch belongs to."""
        counts = np.diff(self.first_branch)
        return np.repeat(np.arange(len(self.elements)), counts)

    def branch_of(self, place: Branch) -> int:
        """The number of a branch."""
        return int(self.first_branch[self.element_number[place.element]]) + place.pair

    def nodes_of(self, quantity: Quantity) -> tuple[int, int]:
        """The two nodes of a voltage quantity."""
        place = self.network.locate(quantity)
        if isinstance(place, NodePair):
            return self.node_number[place.first], self.node_number[place.second]
        branch = self.branch_of(place)
        return int(self.tail[branch]), int(self.head[branch])

    def branch_of_quantity(self, quantity: Quantity) -> int:
        """The branch of a current quantity."""
        place = self.network.locate(quantity)
        assert isinstance(place, Branch)
        return self.branch_of(place)


def arithmetic_of(network: Network) -> Arithmetic:
    """The arithmetic that a network asks for."""
    if network.exact:
        from equiv.equations.exact.arithmetic import EXACT, NEAREST

        return NEAREST if network.arithmetic == "nearest" else EXACT
    return FLOATING


class ElementColumn:
    """Elements of one kind and variant side by side: what a law is written for."""

    s: Any = 0.0

    def __init__(
        self, layout: Layout, elements: list[Element], variant: tuple[str, ...], first: Integers
    ) -> None:
        self.layout, self.elements, self.variant, self.first = layout, elements, variant, first
        self.kind = type(elements[0]) if elements else Element
        self._tabulated: tuple[float, list[tuple[complex, ...]]] | None = None
        """What files give, at the frequency (Hz) that was asked for last."""

    def branch(self, number: int = 0) -> Integers:
        """The elements' branches."""
        return self.first + number

    def pair(self, number: int = 0) -> Pair:
        """The nodes of a terminal pair, first and second."""
        branches = self.first + number
        return self.layout.tail[branches], self.layout.head[branches]

    @cached_property
    def value(self) -> Numbers:
        """The values, in the kind's SI unit."""
        return self.layout.arithmetic.column([e[2] for e in self.elements], self.elements)

    def parameter(self, name: str, index: int = 0) -> Numbers:
        """A named value of kinds that have several."""
        values = []
        for element in self.elements:
            assert isinstance(element.value, Parameters)
            values.append(element.value[name][index])
        return self.layout.arithmetic.column(values, self.elements)

    def root(self, squares: Numbers) -> Numbers:
        """The square roots of numbers, one an element."""
        return self.layout.arithmetic.root(squares, self.elements)

    @property
    def source(self) -> Integers:
        """Which independent source each element is."""
        numbers = self.layout.source_number
        return np.array([numbers[e.name] for e in self.elements], dtype=np.int64)

    @property
    def sensed_pair(self) -> Pair:
        """The nodes whose voltage each element senses."""
        pairs = [self.layout.nodes_of(e.senses) for e in self.elements if e.senses]
        first, second = np.array(pairs, dtype=np.int64).reshape(-1, 2).T
        return first, second

    @property
    def sensed_branch(self) -> Integers:
        """The branch whose current each element senses."""
        branches = [self.layout.branch_of_quantity(e.senses) for e in self.elements if e.senses]
        return np.array(branches, dtype=np.int64)

    @property
    def reference(self) -> Numbers:
        """The reference resistance of parameters s that files give (ohm)."""
        references = [e.table.reference for e in self.elements if e.table]
        return self.layout.arithmetic.rounded(references, self.elements)

    def entry(self, row: int, column: int) -> Numbers:
        """A parameter that files give at some frequencies, at this one."""
        s = complex(self.s)
        assert not s.real, "files give parameters on the imaginary axis only"
        hertz = s.imag / (2 * np.pi)
        if self._tabulated is None or self._tabulated[0] != hertz:
            tables = {id(e.table): e.table for e in self.elements if e.table}
            known = {key: table.at(hertz) for key, table in tables.items()}
            self._tabulated = hertz, [known[id(e.table)] for e in self.elements]
        ports = int(self.variant[-1])
        entries = [matrix[row * ports + column] for matrix in self._tabulated[1]]
        return self.layout.arithmetic.rounded(entries, self.elements)

    def linked(self, number: int) -> tuple[Integers, Numbers]:
        """Branches and values of the elements that a coupling joins."""
        partners = [self.layout.network.elements[e.links[number]] for e in self.elements]
        branches = [self.layout.branch_of(Branch(p.name, 0)) for p in partners]
        values = self.layout.arithmetic.column([p.value for p in partners], partners)
        return np.array(branches, dtype=np.int64), values

    def split(self, chosen: Any) -> tuple[ElementColumn, ElementColumn]:
        """The elements for which `chosen` is true, and the others."""
        return self._part(chosen), self._part(~chosen)

    def _part(self, chosen: Any) -> ElementColumn:
        if chosen.all():
            return self
        part = ElementColumn(
            self.layout, list(compress(self.elements, chosen)), self.variant, self.first[chosen]
        )
        part.s = self.s
        return part
