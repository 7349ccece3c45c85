"""Unknowns that numbers alone decide, taken out before a determinant is expanded.

Each occurrence o of symbols is σ_o u_o v_oᵀ. With w_o = σ_o v_oᵀ x as an unknown more,

    A₀ x + Σ u_o w_o = B u,    w_o - σ_o v_oᵀ x = 0

symbols stand in as few rows as there are occurrences; the rows of numbers are solved in rational
arithmetic, and a small matrix is left whose determinant is the same but for a number.
"""

from __future__ import annotations

from collections.abc import Iterable
from fractions import Fraction

from flint import fmpq, fmpq_mat

from equiv.equations.symbolic.amount import Part
from equiv.equations.symbolic.bordered import Bordered, Entry

MOST_OCCURRENCES = 13
_WORTH = 2
_SMALL = 8
"""Unknowns below which the determinant is as quick as it is."""


class _RankOne:
    """An occurrence: its symbols, a column u over the rows, a row v over the columns."""

    def __init__(self, entries: list[Entry]) -> None:
        self.occurrence, self.part = entries[0].occurrence, entries[0].part
        first = entries[0]
        found: dict[tuple[int, int], Fraction] = {}
        for e in entries:
            place = e.row, e.column
            found[place] = found.get(place, Fraction(0)) + e.part.number
        self.v = {c: x for (r, c), x in found.items() if r == first.row}
        self.u = {r: x / self.v[first.column] for (r, c), x in found.items() if c == first.column}
        places = {(r, c): x * y for r, x in self.u.items() for c, y in self.v.items()}
        self.is_one = {p: x for p, x in found.items() if x} == {
            p: x for p, x in places.items() if x
        }


def compressed(matrix: Bordered) -> Bordered:
    """A smaller bordered matrix with the same determinant but for a number; itself where none is."""
    if matrix.size < _SMALL:
        return matrix
    groups: dict[int, list[Entry]] = {}
    numbers: list[Entry] = []
    for entry in matrix.entries:
        if entry.part.powers or entry.part.s:
            groups.setdefault(entry.occurrence, []).append(entry)
        else:
            numbers.append(entry)
    few = len(groups) <= min(MOST_OCCURRENCES, matrix.size // _WORTH)
    if not few or any(e.drive is not None for group in groups.values() for e in group):
        return matrix
    ones = [_RankOne(group) for group in groups.values()]
    return _solved(matrix, numbers, ones) if all(o.is_one for o in ones) else matrix


def _solved(matrix: Bordered, numbers: list[Entry], ones: list[_RankOne]) -> Bordered:
    n, k = matrix.size, len(ones)
    drives = list(dict.fromkeys(e.drive for e in numbers if e.drive is not None))
    wide = n + k
    column_of_drive = {drive: wide + i for i, drive in enumerate(drives)}
    rows: list[dict[int, Fraction]] = [{} for _ in range(n + 1)]
    for e in numbers:
        column = e.column if e.drive is None else column_of_drive[e.drive]
        rows[e.row][column] = rows[e.row].get(column, Fraction(0)) + e.part.number
    for number, one in enumerate(ones):
        for row, value in one.u.items():
            rows[row][n + number] = rows[row].get(n + number, Fraction(0)) + value
    width = wide + len(drives)
    table, rank = fmpq_mat(n, width, _flat(rows[:n], width)).rref()
    solved = _pivots(table, rank)
    if rank < n or any(column >= wide for column in solved):
        return matrix
    reduce = _Reduced(table, solved, width)
    free = [c for c in range(wide) if c not in solved]
    place = {c: i for i, c in enumerate(free)} | dict.fromkeys(range(wide, width), k)
    drive_of = {column: drive for drive, column in column_of_drive.items()}
    entries: list[Entry] = []

    def put(row: int, values: dict[int, Fraction], one: _RankOne | None) -> None:
        for column, value in reduce(values).items():
            part = Part(value, (), 0) if one is None else one.part._replace(number=value)
            entries.append(
                Entry(row, place[column], -1 if one is None else one.occurrence, part,
                      drive_of.get(column))
            )  # fmt: skip

    for number, one in enumerate(ones):
        put(number, {n + number: Fraction(1)}, None)
        put(number, {c: -x for c, x in one.v.items()}, one)
    put(k, rows[n], None)
    return Bordered(k, matrix.sources, entries)


def _flat(rows: Iterable[dict[int, Fraction]], width: int) -> list[fmpq]:
    zero = fmpq(0)
    flat = []
    for row in rows:
        listed = [zero] * width
        for column, value in row.items():
            listed[column] = fmpq(value.numerator, value.denominator)
        flat += listed
    return flat


def _pivots(table: fmpq_mat, rank: int) -> dict[int, int]:
    """The row that each column was solved by."""
    found, column = {}, 0
    for row in range(rank):
        while not table[row, column]:
            column += 1
        found[column] = row
    return found


class _Reduced:
    """Rows with the solved unknowns put in."""

    def __init__(self, table: fmpq_mat, solved: dict[int, int], width: int) -> None:
        self.table, self.solved = table, solved
        self.left = [c for c in range(width) if c not in solved]

    def _row(self, row: int) -> dict[int, Fraction]:
        entries = ((c, self.table[row, c]) for c in self.left)
        return {c: Fraction(int(x.p), int(x.q)) for c, x in entries if x}

    def __call__(self, values: dict[int, Fraction]) -> dict[int, Fraction]:
        found: dict[int, Fraction] = {}
        for column, value in values.items():
            # A solved unknown is minus the rest of its row.
            row = self.solved.get(column)
            known = {} if row is None else self._row(row)
            rest = {column: value} if row is None else {c: -x * value for c, x in known.items()}
            for c, x in rest.items():
                found[c] = found.get(c, Fraction(0)) + x
        return {c: x for c, x in found.items() if x}
