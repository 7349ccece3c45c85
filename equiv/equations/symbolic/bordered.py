"""The bordered matrix, whose determinant carries a quantity's denominator and every numerator.

With A x = B u, y = C x + D u:

    det [[A, -B u], [C, D u + w]] = det A · (w + C A⁻¹ B u + D u)

so that the terms with the marker w are the common denominator, and those with u_k the numerator
of source k. A test current into a port is one source more; it gives the port's impedance.

Source: the bordered determinant is common practice (Cramer's rule; I. Schur, 1917, from memory).
"""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from math import lcm
from typing import Any, NamedTuple

from equiv.equations.symbolic.amount import Amount, Part
from equiv.equations.symbolic.determinant import Terms, cleared, determinant
from equiv.equations.system import Row, System

MARKER = -1
"""What marks the denominator, where sources are marked by their numbers."""


_MANY = 4
"""Nodes from which it may be worth while to look at the reference node's equation."""


class Entry(NamedTuple):
    """A term of the matrix: its place, its occurrence, and what stands there."""

    row: int
    column: int
    occurrence: int
    part: Part
    drive: int | None = None
    """The source (or `MARKER`) that it belongs to, in the last column."""


class Place(NamedTuple):
    """Two nodes that a test current flows out of and into: from `minus`, through it, to `plus`."""

    plus: int
    minus: int


class Bordered(NamedTuple):
    """The entries of a bordered matrix with `size` unknowns and `sources` columns of sources."""

    size: int
    sources: int
    entries: list[Entry]
    nodes: int = 0
    """How many of the first rows are Kirchhoff's current law at all nodes but the reference."""

    def expanded(self, most_terms: int) -> Expansion:
        """The determinant, taken apart. Errors: TooLargeError."""
        keys = _Keys(self.entries)
        rows: list[dict[int, Terms]] = [{} for _ in range(self.size + 1)]
        for entry, number in zip(self.entries, self._whole_numbers(), strict=True):
            row, column, occurrence, part, drive = entry
            key = part.s << keys.shift | keys.bit(occurrence, 0) | keys.mark(drive, 0)
            terms = rows[row].setdefault(column, {})
            terms[key] = terms.get(key, 0) + number
        matrix = [{c: terms for c, t in row.items() if (terms := cleared(t))} for row in rows]
        if self.nodes >= _MANY:
            _put_reference(matrix, self.nodes)
        return Expansion(keys, determinant(matrix, keys.mask, most_terms))

    def _whole_numbers(self) -> list[int]:
        """The numbers of the entries, each row by its least common denominator."""
        scale = [1] * (self.size + 1)
        whole = True
        for entry in self.entries:
            below = entry.part.number.denominator
            if below != 1:
                whole = False
                scale[entry.row] = lcm(scale[entry.row], below)
        if whole:
            return [entry.part.number.numerator for entry in self.entries]
        return [int(e.part.number * scale[e.row]) for e in self.entries]


def _put_reference(rows: list[dict[int, Terms]], nodes: int) -> None:
    """The current law at the reference node in place of the longest at another node.

    It is their sum but for the sign, and a row plus all the others leaves a determinant as it is.
    It is short where each node is joined to most others, for the reference has no voltage.
    """
    found: dict[int, Terms] = {}
    for row in rows[:nodes]:
        for column, entry in row.items():
            into = found.setdefault(column, {})
            for key, number in entry.items():
                into[key] = into.get(key, 0) + number
    reference = {column: terms for column, t in found.items() if (terms := cleared(t))}
    lengths = [sum(map(len, row.values())) for row in rows[:nodes]]
    longest = max(lengths)
    if sum(map(len, reference.values())) < longest:
        rows[lengths.index(longest)] = reference


class _Keys:
    """The bits that occurrences and drives have in the keys of terms; the degree in s above."""

    def __init__(self, entries: Sequence[Entry]) -> None:
        found = {e.occurrence: e.part.powers for e in entries if e.part.powers}
        drives = dict.fromkeys(e.drive for e in entries if e.drive is not None)
        self.powers = list(found.values())
        self.bit = {occurrence: 1 << i for i, occurrence in enumerate(found)}.get
        """The bit of an occurrence."""
        marks: dict[int | None, int] = {d: 1 << i for i, d in enumerate(drives, len(found))}
        self.mark = marks.get
        """The bit of a drive."""
        self.shift = len(found) + len(drives)
        self.mask = (1 << self.shift) - 1
        self.drives = {1 << i: drive for i, drive in enumerate(drives, len(found))}
        self.symbols = (1 << len(found)) - 1


class Expansion(NamedTuple):
    """A bordered determinant: its terms, and what the bits of their keys mean."""

    keys: _Keys
    terms: Terms

    def parted(self) -> dict[int, Terms]:
        """The denominator (`MARKER`) and the numerator of each source, the markers taken off."""
        drives = self.keys.mask ^ self.keys.symbols
        parts: dict[int, Terms] = {mark: {} for mark in self.keys.drives}
        for key, number in self.terms.items():
            mark = key & drives
            parts[mark][key ^ mark] = number
        return {drive: parts[mark] for mark, drive in self.keys.drives.items()}

    def exponents(self, key: int, count: int) -> tuple[int, ...]:
        """The powers of the symbols in a term, that of s last; they may be negative."""
        powers = [0] * count
        powers.append(key >> self.keys.shift)
        for bit, own in enumerate(self.keys.powers):
            if key >> bit & 1:
                for symbol, power in own:
                    powers[symbol] += power
        return tuple(powers)


def bordered(system: System, observed: Row, tests: Sequence[Place] = ()) -> Bordered:
    """The bordered matrix of a quantity's row; test currents are the last sources."""
    size = system.size
    entries: list[Entry] = []
    for row, column, value in zip(*map(_listed, system.a), strict=True):
        _put(entries, row, column, value)
    for row, source, value in zip(*map(_listed, system.b), strict=True):
        _put(entries, row, size, -value, source)
    for number, test in enumerate(tests, system.source_count):
        for node, sign in ((test.plus, -1), (test.minus, 1)):
            if node >= 0:
                _put(entries, node, size, sign, number)
    for column, value in enumerate(observed.state):
        _put(entries, size, column, value)
    for source, value in enumerate(observed.source):
        _put(entries, size, size, value, source)
    _put(entries, size, size, 1, MARKER)
    sources = system.source_count + len(tests)
    return Bordered(size, sources, entries, system.layout.node_count)


def _listed(values: Any) -> list[Any]:
    return list(values.tolist())


def _put(entries: list[Entry], row: int, column: int, value: Any, drive: int | None = None) -> None:
    """The terms of a value at a place."""
    if isinstance(value, Amount):
        for occurrence, part in value.parts.items():
            if part.number:
                entries.append(Entry(row, column, occurrence, part, drive))
    elif value:
        number = value if isinstance(value, int) else Fraction(value)
        entries.append(Entry(row, column, -1, Part(number, (), 0), drive))
