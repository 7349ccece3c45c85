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
from equiv.equations.symbolic.determinant import Terms, determinant
from equiv.equations.system import Row, System

MARKER = -1
"""What marks the denominator, where sources are marked by their numbers."""


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

    def expanded(self, most_terms: int) -> Expansion:
        """The determinant, taken apart. Errors: TooLargeError."""
        keys = _Keys(self.entries)
        rows: list[dict[int, Terms]] = [{} for _ in range(self.size + 1)]
        for entry, number in zip(self.entries, self._whole_numbers(), strict=True):
            terms = rows[entry.row].setdefault(entry.column, {})
            key = keys.of(entry)
            terms[key] = terms.get(key, 0) + number
        matrix = [{c: terms for c, t in row.items() if (terms := _kept(t))} for row in rows]
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


def _kept(terms: Terms) -> Terms:
    return {key: number for key, number in terms.items() if number}


class _Keys:
    """The bits that occurrences and drives have in the keys of terms; the degree in s above."""

    def __init__(self, entries: Sequence[Entry]) -> None:
        found: dict[int, tuple[tuple[int, int], ...]] = {}
        drives: dict[int, None] = {}
        for entry in entries:
            if entry.part.powers:
                found.setdefault(entry.occurrence, entry.part.powers)
            if entry.drive is not None:
                drives.setdefault(entry.drive)
        self.powers = list(found.values())
        self._bit = {occurrence: 1 << i for i, occurrence in enumerate(found)}
        self._drive = {drive: 1 << (i + len(found)) for i, drive in enumerate(drives)}
        self.shift = len(found) + len(drives)
        self.mask = (1 << self.shift) - 1
        self.drives = {bit: drive for drive, bit in self._drive.items()}
        self.symbols = (1 << len(found)) - 1

    def of(self, entry: Entry) -> int:
        """The key of an entry."""
        key = entry.part.s << self.shift
        if entry.part.powers:
            key |= self._bit[entry.occurrence]
        return key if entry.drive is None else key | self._drive[entry.drive]


class Expansion(NamedTuple):
    """A bordered determinant: its terms, and what the bits of their keys mean."""

    keys: _Keys
    terms: Terms

    def parted(self) -> dict[int, Terms]:
        """The denominator (`MARKER`) and the numerator of each source, the markers taken off."""
        drives = self.keys.mask ^ self.keys.symbols
        parts: dict[int, Terms] = {drive: {} for drive in self.keys.drives.values()}
        for key, number in self.terms.items():
            mark = key & drives
            parts[self.keys.drives[mark]][key ^ mark] = number
        return parts

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
    entries = [
        entry
        for row, column, value in zip(*map(_listed, system.a), strict=True)
        for entry in _entries(row, column, value)
    ]
    for row, source, value in zip(*map(_listed, system.b), strict=True):
        entries += _entries(row, size, -value, source)
    for number, test in enumerate(tests, system.source_count):
        for node, sign in ((test.plus, -1), (test.minus, 1)):
            if node >= 0:
                entries += _entries(node, size, sign, number)
    for column, value in enumerate(observed.state):
        entries += _entries(size, column, value)
    for source, value in enumerate(observed.source):
        entries += _entries(size, size, value, source)
    entries += _entries(size, size, 1, MARKER)
    return Bordered(size, system.source_count + len(tests), entries)


def _listed(values: Any) -> list[Any]:
    return list(values.tolist())


def _entries(row: int, column: int, value: Any, drive: int | None = None) -> list[Entry]:
    """The terms of a value at a place."""
    if isinstance(value, Amount):
        return [
            Entry(row, column, occurrence, part, drive)
            for occurrence, part in value.parts.items()
            if part.number
        ]
    if not value:
        return []
    number = value if isinstance(value, int) else Fraction(value)
    return [Entry(row, column, -1, Part(number, (), 0), drive)]
