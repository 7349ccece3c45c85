"""Formulas as a sequence of named expressions, for networks whose expansion is too long to read.

Gauss's elimination on the bordered matrix with expressions for numbers: what is left in the row
of the quantity is the coefficient of each source. An entry is known to be zero by its value at a
random point modulo a large prime.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import NamedTuple

from equiv.equations.symbolic.amount import Part
from equiv.equations.symbolic.bordered import MARKER, Bordered
from equiv.equations.symbolic.expression import (
    ONE,
    ZERO,
    Expression,
    Name,
    Number,
    Power,
    Quotient,
    negated,
    number_of,
    power,
    product,
    quotient,
    total,
)
from equiv.equations.symbolic.modular import PRIME, Point


class Valued(NamedTuple):
    """An expression and its value at the random point."""

    expression: Expression
    value: int


class Eliminated(NamedTuple):
    """Named expressions in order, and the coefficient of every source."""

    where: list[tuple[str, Expression]]
    coefficients: list[Expression]


class SingularError(Exception):
    """There is no pivot: the denominator is zero whatever the values are."""


def sequence(
    matrix: Bordered, names: Sequence[str], point: Point, new_name: Callable[[], str]
) -> Eliminated:
    """The coefficients of all sources as named expressions.

    Errors: SingularError.
    """
    return _Elimination(matrix, names, point, new_name).done()


class _Elimination:
    def __init__(
        self, matrix: Bordered, names: Sequence[str], point: Point, new_name: Callable[[], str]
    ) -> None:
        self.names, self.point, self.new_name = names, point, new_name
        self.size, self.sources = matrix.size, matrix.sources
        self.where: list[tuple[str, Expression]] = []
        self.known: dict[Expression, str] = {}
        parts: dict[tuple[int, int], list[Valued]] = {}
        for entry in matrix.entries:
            if entry.drive == MARKER:
                continue
            column = entry.column if entry.drive is None else self.size + entry.drive
            parts.setdefault((entry.row, column), []).append(self._leaf(entry.part))
        self.rows: list[dict[int, Valued]] = [{} for _ in range(self.size + 1)]
        for (row, column), leaves in parts.items():
            value = sum(leaf.value for leaf in leaves) % PRIME
            if value:
                expression = total([leaf.expression for leaf in leaves])
                self.rows[row][column] = Valued(expression, value)

    def _leaf(self, part: Part) -> Valued:
        over = [power(Name(self.names[k]), p) for k, p in part.powers if p > 0]
        under = [power(Name(self.names[k]), -p) for k, p in part.powers if p < 0]
        top = product(Number(part.number), *over, *([power(Name("s"), part.s)] if part.s else []))
        return Valued(quotient(top, product(*under)), self.point.of_part(part))

    def done(self) -> Eliminated:
        """Every unknown eliminated; what is left in the last row."""
        waiting = set(range(self.size))
        for _ in range(self.size):
            row, column = self._pivot(waiting)
            waiting.remove(row)
            for other in [*waiting, self.size]:
                if column in self.rows[other]:
                    self._subtract(row, column, other)
        left = self.rows[self.size]
        found = [left.get(self.size + k) for k in range(self.sources)]
        return Eliminated(self.where, [ZERO if x is None else x.expression for x in found])

    def _pivot(self, waiting: set[int]) -> tuple[int, int]:
        """The entry that makes the least new ones (H. M. Markowitz, 1957)."""
        columns: dict[int, int] = {}
        for row in waiting:
            for column in self.rows[row]:
                columns[column] = columns.get(column, 0) + 1
        choices = [
            ((len(self.rows[row]) - 1) * (columns[column] - 1), not _plain(entry), row, column)
            for row in waiting
            for column, entry in self.rows[row].items()
            if column < self.size
        ]
        if not choices:
            raise SingularError
        *_, row, column = min(choices)
        return row, column

    def _subtract(self, row: int, column: int, other: int) -> None:
        """Other row minus so many times the pivot's row."""
        pivot, entries = self.rows[row][column], self.rows[other]
        first = entries.pop(column)
        ratio = first.value * pow(pivot.value, -1, PRIME) % PRIME
        times = self._named(Valued(quotient(first.expression, pivot.expression), ratio))
        for place, entry in self.rows[row].items():
            if place == column:
                continue
            old = entries.pop(place, Valued(ZERO, 0))
            value = (old.value - times.value * entry.value) % PRIME
            if value:
                less = negated(product(times.expression, entry.expression))
                entries[place] = self._named(Valued(total([old.expression, less]), value))

    def _named(self, entry: Valued) -> Valued:
        """A name for what is worth one, its sign outside."""
        number, size = number_of(entry.expression)
        short = isinstance(size, Name | Number | Power) or (
            isinstance(size, Quotient) and size.top == ONE and isinstance(size.bottom, Name)
        )
        if short:
            return entry
        negative = number < 0
        positive = negated(entry.expression) if negative else entry.expression
        name = self.known.get(positive)
        if name is None:
            name = self.known[positive] = self.new_name()
            self.where.append((name, positive))
        return Valued(negated(Name(name)) if negative else Name(name), entry.value)


def _plain(entry: Valued) -> bool:
    return isinstance(entry.expression, Number)
