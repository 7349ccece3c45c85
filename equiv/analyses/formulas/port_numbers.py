"""The numbers of a port's formulas at one frequency, and what floating point says of them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from equiv.analyses.formulas.numbers import has_numbers, values_at
from equiv.analyses.formulas.ports import Matrix, PortFormulas, Side
from equiv.analyses.formulas.proof import floating_numbers
from equiv.analyses.headings import at_words
from equiv.analyses.ports.equivalent import equivalent
from equiv.analyses.ports.proof import Equivalent
from equiv.analyses.result import Caution, Check
from equiv.analyses.superposition.terms import CLOSURE_LIMIT
from equiv.elements.element import Frequency
from equiv.errors import NoUniqueSolutionError
from equiv.network import Network

Grid = tuple[tuple[complex | None, ...], ...]


@dataclass(frozen=True)
class SideNumbers:
    """The numbers of one equivalent: those of its terms, and its matrix."""

    terms: Grid
    matrix: Grid
    floating: bool = False
    """Whether the formulas have no number, though their symbols have: floating point's."""

    def total(self, port: int, chosen: Sequence[int]) -> complex | None:
        """The sum of a port's terms."""
        row = [self.terms[port][k] for k in chosen]
        known = [x for x in row if x is not None]
        return sum(known, 0j) if len(known) == len(row) else None


@dataclass(frozen=True)
class PortNumbers:
    """At one frequency: the sources there, the numbers of both equivalents; None where unknown."""

    frequency: Frequency
    chosen: tuple[int, ...]
    """The places of the sources that are at this frequency."""
    values: tuple[complex | None, ...]
    thevenin: SideNumbers | None
    norton: SideNumbers | None
    numeric: Equivalent | None
    cautions: tuple[Caution, ...] = ()


def port_numbers(network: Network, formulas: PortFormulas, frequency: Frequency) -> PortNumbers:
    """What the formulas come to at a frequency: phasors rms."""
    solver = formulas.solver
    numbers = values_at(network, solver, frequency, formulas.where)
    sources = network.sources
    chosen = [k for k, s in enumerate(sources) if network.frequency_of(s).same_as(frequency)]

    def grid(matrix: Matrix) -> Grid:
        return tuple(tuple(numbers.of(entry.whole) for entry in row) for row in matrix)

    def side(of: Side | None, which: str) -> SideNumbers | None:
        if of is None:
            return None
        found = SideNumbers(grid(of.terms), grid(of.matrix))
        return found if numeric is None else _complete(found, numeric, which, chosen)

    numeric: Equivalent | None = None
    cautions: list[Caution] = []
    if has_numbers(solver):
        try:
            numeric = equivalent(network, formulas.ports, frequency)
        except NoUniqueSolutionError as error:
            words = "; ".join(d.message for d in error.diagnostics)
            caution = Caution("no-unique-solution", f"with the values of the file: {words}")
            cautions = [caution]
    values = tuple(numbers.of(solver.value(k)) for k in range(len(sources)))
    thevenin, norton = side(formulas.thevenin, "Thevenin"), side(formulas.norton, "Norton")
    for name, found in (("Thevenin", thevenin), ("Norton", norton)):
        if found is not None and found.floating:
            cautions.append(floating_numbers(f"{name} formulas"))
    return PortNumbers(frequency, tuple(chosen), values, thevenin, norton, numeric, tuple(cautions))


def _complete(
    found: SideNumbers, numeric: Equivalent, which: str, chosen: Sequence[int]
) -> SideNumbers:
    """The numbers of floating point in place of those that the formulas do not have."""
    asked = [x for row in found.matrix for x in row]
    asked += [row[k] for row in found.terms for k in chosen]
    thevenin = which == "Thevenin"
    matrix = numeric.impedance if thevenin else numeric.admittance
    columns = numeric.voltages if thevenin else numeric.currents
    if matrix is None or columns is None or all(x is not None for x in asked):
        return found
    terms: list[list[complex | None]] = [[None] * len(row) for row in found.terms]
    for column, members in enumerate(numeric.members):
        if len(members) == 1:  # a group has no numbers of its members
            for p, row in enumerate(terms):
                row[members[0]] = complex(columns[p, column])
    grid = tuple(tuple(map(complex, row)) for row in matrix)
    return SideNumbers(tuple(map(tuple, terms)), grid, floating=True)


def port_checks(formulas: PortFormulas, at: PortNumbers) -> list[Check]:
    """The formulas' numbers against floating point, relative to the largest or to Σ|term|."""
    e = at.numeric
    if e is None:
        return []
    pairs = (
        ("Thevenin", at.thevenin, e.impedance, e.open_voltage, e.voltages),
        ("Norton", at.norton, e.admittance, e.short_current, e.currents),
    )
    checks = []
    for name, side, matrix, vector, terms in pairs:
        if side is None or side.floating or matrix is None or vector is None:
            continue
        found = [[_number(x) for x in row] for row in side.matrix]
        sums = [_number(side.total(p, at.chosen)) for p in range(len(formulas.ports))]
        size = 0.0 if terms is None else float(np.abs(terms.astype(complex)).sum())
        off = max(
            _relative(np.array(found) - matrix.astype(complex), matrix),
            _relative(np.array(sums) - vector.astype(complex), np.array([size])),
        )
        checks.append(
            Check(f"{name} formulas against floating point{at_words(at.frequency)}", off,
                  CLOSURE_LIMIT)
        )  # fmt: skip
    return checks


def _number(value: complex | None) -> complex:
    return complex("nan") if value is None else value


def _relative(off: np.ndarray, size: np.ndarray) -> float:
    largest = float(np.abs(size.astype(complex)).max(initial=0.0))
    worst = float(np.abs(off).max(initial=0.0))
    return worst / largest if largest else worst
