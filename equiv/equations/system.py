"""The system A x = B u, y = C x + D u that the laws of a network make.

x holds the node voltages (V, over ground) and the branch currents that are unknowns (A, first
node to second inside the element); u the independent sources, one column of B each.

In nodal form a branch whose current follows from voltages has no unknown of its own, unless its
current is sensed. In branch-current form every branch has one, and nothing is divided.

Source: C. W. Ho, A. E. Ruehli, P. A. Brennan, The modified nodal approach to network analysis,
IEEE Trans. Circuits and Systems 22 (1975).
"""

from __future__ import annotations

from typing import Any, NamedTuple

import numpy as np

from equiv.elements.quantity import Quantity
from equiv.equations.laws import Laws, Terms
from equiv.equations.layout import Integers, Layout, Numbers


class Triplets(NamedTuple):
    """Entries of a sparse matrix that add where they meet."""

    rows: Integers
    columns: Integers
    values: Numbers


class Row(NamedTuple):
    """A quantity as a row of C and D: y = state · x + source · u."""

    state: Numbers
    source: Numbers


class System:
    """A network's equations in one form at one frequency."""

    def __init__(self, layout: Layout, form: str = "nodal", s: Any = 0.0) -> None:
        self.layout, self.form, self.s = layout, form, s
        self.laws = Laws(layout, form, s)
        self.real = layout.arithmetic.dtype
        self.dtype = np.result_type(
            self.real, self.laws.across.coefficient, self.laws.through.coefficient
        )
        has_unknown = self.laws.is_equation.copy()
        has_unknown[self.laws.through.first] = True
        self.unknown = np.where(has_unknown, layout.node_count + np.cumsum(has_unknown) - 1, -1)
        self.size = layout.node_count + int(has_unknown.sum())
        self.source_count = len(layout.source_names)
        self.a = self._left()
        self.b = self._right()

    def _left(self) -> Triplets:
        laws, unknown, layout = self.laws, self.unknown, self.layout
        own = np.flatnonzero(unknown >= 0)
        given = own[~laws.is_equation[own]]
        one = np.ones(len(own), self.real)
        parts = [
            (layout.tail[own], unknown[own], one),
            (layout.head[own], unknown[own], -one),
            (unknown[given], unknown[given], np.ones(len(given), self.real)),
        ]
        for terms, columns in self._columns():
            for rows, sign, chosen in self._rows_of(terms):
                values = sign * terms.coefficient[chosen]
                for column, factor in columns:
                    parts.append((rows, column[chosen], factor * values))
        return _triplets(parts)

    def _columns(self) -> list[tuple[Terms, list[tuple[Integers, int]]]]:
        """The columns that each sort of term stands in, with their signs."""
        across, through = self.laws.across, self.laws.through
        return [
            (across, [(across.first, 1), (across.second, -1)]),
            (through, [(self.unknown[through.first], 1)]),
        ]

    def _rows_of(self, terms: Terms) -> list[tuple[Integers, int, Integers]]:
        """The rows that terms stand in: their branch's own, or Kirchhoff's at both its nodes."""
        layout, unknown = self.layout, self.unknown
        branch = terms.branch
        equation = self.laws.is_equation[branch]
        own = unknown[branch] >= 0
        in_equation = np.flatnonzero(equation)
        in_given = np.flatnonzero(~equation & own)
        in_nodes = np.flatnonzero(~own)
        return [
            (unknown[branch[in_equation]], 1, in_equation),
            (unknown[branch[in_given]], -1, in_given),
            (layout.tail[branch[in_nodes]], 1, in_nodes),
            (layout.head[branch[in_nodes]], -1, in_nodes),
        ]

    def _right(self) -> Triplets:
        drive = self.laws.drive
        parts = []
        for rows, sign, chosen in self._rows_of(drive):
            parts.append((rows, drive.first[chosen], -sign * drive.coefficient[chosen]))
        return _triplets(parts)

    def excitation(self, u: Numbers) -> Numbers:
        """B u for one vector of sources, or for each column of several."""
        out = np.zeros((self.size, *u.shape[1:]), np.result_type(self.dtype, u))
        values = self.b.values if u.ndim == 1 else self.b.values[:, None]
        np.add.at(out, self.b.rows, values * u[self.b.columns])
        return out

    def gather(self, row: Row, adjoint: Numbers) -> Numbers:
        """The coefficient of every source on a quantity: adjoint · B + D."""
        out = row.source.astype(np.result_type(self.dtype, adjoint, row.source))
        np.add.at(out, self.b.columns, adjoint[self.b.rows] * self.b.values)
        return out

    def row(self, quantity: Quantity) -> Row:
        """The row of a voltage or current quantity."""
        if quantity.what == "I":
            return self.current_row(self.layout.branch_of_quantity(quantity))
        ends = self.layout.nodes_of(quantity)
        if self.form == "branch-current":
            by_law = self._by_law(*ends)
            if by_law is not None:
                return by_law
        return self.voltage_row(*ends)

    def _by_law(self, first: int, second: int) -> Row | None:
        """The voltage of two nodes as R·i of a resistor that joins them, if one does.

        A difference of node voltages would lose the digits of a small one.
        """
        tail, head = self.layout.tail, self.layout.head
        for one, other, sign in ((first, second, 1), (second, first, -1)):
            for branch in np.flatnonzero((tail == one) & (head == other)).tolist():
                impedance = self._impedance(branch)
                if impedance is not None:
                    row = self.current_row(branch)
                    return Row(sign * impedance * row.state, sign * impedance * row.source)
        return None

    def _impedance(self, branch: int) -> Any:
        """z of a branch whose whole law is y·v = z·y·i with some y that is not zero."""
        across, through = self.laws.across, self.laws.through
        a, t = (np.flatnonzero(terms.branch == branch) for terms in (across, through))
        if len(a) != 1 or len(t) != 1 or np.any(self.laws.drive.branch == branch):
            return None
        same = across.first[a[0]] == self.layout.tail[branch]
        own = same and across.second[a[0]] == self.layout.head[branch]
        if not own or through.first[t[0]] != branch or not across.coefficient[a[0]]:
            return None
        return -through.coefficient[t[0]] / across.coefficient[a[0]]

    def voltage_row(self, first: int, second: int) -> Row:
        """The voltage of one node over another (-1 is the ground)."""
        row = Row(np.zeros(self.size, self.dtype), np.zeros(self.source_count, self.real))
        if first >= 0:
            row.state[first] += 1
        if second >= 0:
            row.state[second] -= 1
        return row

    def current_row(self, branch: int) -> Row:
        """The current of a branch, first node to second inside it."""
        row = Row(np.zeros(self.size + 1, self.dtype), np.zeros(self.source_count, self.real))
        if self.unknown[branch] >= 0:
            row.state[self.unknown[branch]] = 1
            return Row(row.state[:-1], row.source)
        for terms, columns in self._columns():
            chosen = np.flatnonzero(terms.branch == branch)
            for column, factor in columns:
                # the ground is column -1: the last place, which is dropped
                np.add.at(row.state, column[chosen], factor * terms.coefficient[chosen])
        drive = self.laws.drive
        chosen = np.flatnonzero(drive.branch == branch)
        np.add.at(row.source, drive.first[chosen], drive.coefficient[chosen])
        return Row(row.state[:-1], row.source)

    def currents(self, x: Numbers, u: Numbers) -> Numbers:
        """Every branch's current from a solution (A)."""
        out = np.zeros(self.layout.branch_count, np.result_type(x, u, self.dtype))
        grounded = np.append(x, 0)
        drive = self.laws.drive
        for terms, columns in self._columns():
            for column, factor in columns:
                np.add.at(out, terms.branch, factor * terms.coefficient * grounded[column])
        np.add.at(out, drive.branch, drive.coefficient * u[drive.first])
        own = self.unknown >= 0
        out[own] = x[self.unknown[own]]
        return out

    def gross_powers(self, x: Numbers, u: Numbers) -> Numbers:
        """Every branch's Σ|voltage of a node| · Σ|term of the current| (VA), nothing cancelled."""
        currents = np.zeros(self.layout.branch_count)
        grounded, drive = np.abs(np.append(x, 0)), self.laws.drive
        for terms, columns in self._columns():
            for column, _ in columns:
                np.add.at(currents, terms.branch, np.abs(terms.coefficient) * grounded[column])
        np.add.at(currents, drive.branch, np.abs(drive.coefficient * u[drive.first]))
        own = self.unknown >= 0
        currents[own] = grounded[self.unknown[own]]
        nodes = np.append(grounded[: self.layout.node_count], 0)
        return np.asarray((nodes[self.layout.tail] + nodes[self.layout.head]) * currents)

    def voltages(self, x: Numbers) -> Numbers:
        """Every branch's voltage from a solution, first node over second (V)."""
        grounded = np.append(x[: self.layout.node_count], 0)
        return np.asarray(grounded[self.layout.tail] - grounded[self.layout.head])

    def magnitudes(self, x: Numbers, u: Numbers) -> Numbers:
        """|A||x| + |B||u|: what rounding in the equations is proportional to."""
        out = np.zeros((self.size, *x.shape[1:]))
        size, drive = np.abs(x), np.abs(u)
        across = (slice(None),) + (None,) * (x.ndim - 1)
        np.add.at(out, self.a.rows, np.abs(self.a.values)[across] * size[self.a.columns])
        np.add.at(out, self.b.rows, np.abs(self.b.values)[across] * drive[self.b.columns])
        return out


def _triplets(parts: list[tuple[Integers, Integers, Numbers]]) -> Triplets:
    """The entries that are not in the ground's row or column."""
    if not parts:
        empty = np.empty(0, dtype=np.int64)
        return Triplets(empty, empty, np.empty(0))
    rows, columns, values = (np.concatenate(part) for part in zip(*parts, strict=True))
    kept = (rows >= 0) & (columns >= 0)
    return Triplets(rows[kept], columns[kept], values[kept])
