"""A random point modulo a large prime: where formulas are proved, and zeros are known for zeros."""

from __future__ import annotations

import random
from collections.abc import Iterable, Sequence
from fractions import Fraction
from typing import Any

from flint import nmod, nmod_mat

from equiv.elements import Element
from equiv.elements.element import Frequency
from equiv.equations.arithmetic import Numbers
from equiv.equations.layout import Layout
from equiv.equations.symbolic.amount import Amount, Part
from equiv.equations.symbolic.arithmetic import Formulas, objects
from equiv.equations.system import System
from equiv.network import Network

PRIME = 2**61 - 1
"""A formula that is wrong passes at a random point with a probability of its degree over this."""
SEED = 20261201


class Point:
    """Values of the symbols, and of s, modulo the prime; the same every time."""

    def __init__(self, count: int) -> None:
        source = random.Random(SEED)
        self.values = [source.randrange(1, PRIME) for _ in range(count)]
        self.s = source.randrange(1, PRIME)

    def at(self, symbol: int, value: int) -> Point:
        """The same point with another value of one symbol."""
        found = Point(len(self.values))
        found.values[symbol] = value
        return found

    def of_part(self, part: Part) -> int:
        """The value of a term."""
        value = residue(part.number) * pow(self.s, part.s, PRIME)
        for symbol, exponent in part.powers:
            value = value * pow(self.values[symbol], exponent, PRIME) % PRIME
        return value % PRIME

    def of(self, value: Any) -> int:
        """The value of an amount, or of a number."""
        if isinstance(value, Amount):
            return sum(map(self.of_part, value.parts.values())) % PRIME
        return residue(Fraction(value))

    def by_name(self, names: Sequence[str]) -> dict[str, nmod]:
        """The values by the names of the symbols, s too."""
        named = zip(names, [*self.values, self.s], strict=True)
        return {name: nmod(value, PRIME) for name, value in named}


def residue(number: Fraction | int) -> int:
    """An exact number modulo the prime."""
    return number.numerator * pow(number.denominator, -1, PRIME) % PRIME


class _AtPoint(Formulas):
    """Amounts of a symbolised network as numbers at a point."""

    def __init__(self, point: Point) -> None:
        self.point = point

    def column(self, values: Iterable[Any], elements: Sequence[Element]) -> Numbers:
        """The values at the point."""
        return objects(nmod(self.point.of(value), PRIME) for value in values)

    def s(self, frequency: Frequency) -> Any:
        """s at the point."""
        return nmod(self.point.s, PRIME)


class ModularSystem:
    """The original equations at a point, in branch-current form, solved exactly.

    The form is not the one that formulas are made from, so that they share no matrix.
    """

    def __init__(self, network: Network, point: Point) -> None:
        arithmetic = _AtPoint(point)
        self.system = System(Layout(network, arithmetic), "branch-current", nmod(point.s, PRIME))
        size = self.system.size
        table = [[0] * size for _ in range(size)]
        for row, column, value in zip(*(x.tolist() for x in self.system.a), strict=True):
            table[row][column] = (table[row][column] + int(value)) % PRIME
        self.matrix = nmod_mat(table, PRIME) if size else None

    def solved(self, right: Sequence[Sequence[int]]) -> list[list[int]] | None:
        """x of A x = b for each right-hand side; None where A is singular at the point."""
        if self.matrix is None or not right:
            return [[] for _ in right]
        columns = [[column[row] % PRIME for column in right] for row in range(self.system.size)]
        try:
            found = self.matrix.solve(nmod_mat(columns, PRIME))
        except ZeroDivisionError:
            return None
        return [[int(x) for x in column] for column in zip(*found.tolist(), strict=True)]

    @property
    def singular(self) -> bool:
        """Whether there is no unique solution."""
        return self.matrix is not None and int(self.matrix.det()) == 0

    def excitations(self) -> list[list[int]]:
        """B, a column a source."""
        columns = [[0] * self.system.size for _ in range(self.system.source_count)]
        for row, source, value in zip(*(x.tolist() for x in self.system.b), strict=True):
            columns[source][row] = (columns[source][row] + int(value)) % PRIME
        return columns
