"""The derivatives of a port's equivalents with respect to one symbol."""

from __future__ import annotations

from typing import NamedTuple

from equiv.analyses.formulas.ports import PortFormulas
from equiv.analyses.formulas.told import slope_of, sum_of
from equiv.analyses.formulas.values import Value, cell_of
from equiv.analyses.tables import Column, Row, Table
from equiv.equations.symbolic.conditions import Ratio
from equiv.equations.symbolic.expression import Expression
from equiv.equations.symbolic.numbers import Numbers
from equiv.errors import Diagnostic, UsageError


class PortSlopes(NamedTuple):
    """A symbol, its unit, and a derivative a quantity; None where it is too long to be told."""

    symbol: str
    unit: str
    found: dict[str, Value | None]

    def data(self) -> dict[str, object]:
        """The JSON of it."""
        return {what: None if v is None else v.data() for what, v in self.found.items()}

    def table(self) -> Table:
        """A row a quantity."""
        columns = (
            Column("quantity", key=True), Column("derivative"), Column("unit"), Column("value"),
        )  # fmt: skip
        rows = []
        for what, value in self.found.items():
            words, unit = _QUANTITIES[what]
            per = f"{unit}/{self.unit}" if self.unit else unit
            text = "too long" if value is None else cell_of(value.expression)
            number = None if value is None or value.number is None else value.number.real
            rows.append(Row((words, text, per, number)))
        return Table("Derivatives of the equivalents", (f"With respect to {self.symbol}",),
                     columns, tuple(rows), name="derivatives")  # fmt: skip


_QUANTITIES = {
    "voltage": ("open-circuit voltage", "V"),
    "impedance": ("impedance", "ohm"),
    "current": ("short-circuit current", "A"),
    "admittance": ("admittance", "S"),
}


def port_slopes(formulas: PortFormulas, symbol: int, numbers: Numbers | None) -> PortSlopes:
    """The derivatives of Nv/D, Nz/D, Nv/Nz and D/Nz, of those that exist.

    Errors: UsageError for several ports.
    """
    if len(formulas.ports) > 1:
        message = "derivatives are given for one port, and there are several"
        raise UsageError(
            Diagnostic("one-port-only", message, hint="name one port, or leave --derivative out")
        )
    named = formulas.solver.named[symbol]
    found = {
        what: None if slope is None else Value(slope, numbers.of(slope) if numbers else None)
        for what, slope in _slopes(formulas, symbol).items()
    }
    return PortSlopes(named.name, named.unit, found)


def _slopes(formulas: PortFormulas, symbol: int) -> dict[str, Expression | None]:
    solver = formulas.solver
    answer = formulas.answers[0] if len(formulas.answers) == 1 else None
    family = None if answer is None else answer.family
    found: dict[str, Expression | None] = {}
    for side, vector, matrix in (
        (formulas.thevenin, "voltage", "impedance"), (formulas.norton, "current", "admittance"),
    ):  # fmt: skip
        if side is None:
            continue
        if family is None:
            found |= {vector: None, matrix: None}
            continue
        *sources, nz = family.numerators
        thevenin = side is formulas.thevenin
        above, under = (nz, family.denominator) if thevenin else (family.denominator, nz)
        if sources:
            parts = [slope_of(solver, Ratio(n, under), symbol, k) for k, n in enumerate(sources)]
            found[vector] = sum_of(parts)
        found[matrix] = slope_of(solver, Ratio(above, under), symbol)
    return found
