"""Port formulas as JSON: the objects of numbers, with a formula in each value."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, NamedTuple

from equiv.analyses.formulas.port_numbers import PortNumbers, SideNumbers
from equiv.analyses.formulas.ports import Entry, PortFormulas, Side
from equiv.analyses.formulas.told import Failing, InS
from equiv.analyses.formulas.values import Value, Where
from equiv.equations.symbolic.expression import names_in
from equiv.equations.symbolic.infix import text_of


def at_data(formulas: PortFormulas, at: PortNumbers) -> dict[str, Any]:
    """The JSON of the equivalents at one frequency."""
    opened, shorted = _Both(formulas.thevenin, at.thevenin), _Both(formulas.norton, at.norton)
    z, y = opened.matrix(), shorted.matrix()
    tests = [
        {"port": port.name, "kind": kind, "value": 1.0, "response": [row[p] for row in found]}
        for p, port in enumerate(formulas.ports)
        for kind, found in (("current", z), ("voltage", y))
        if found is not None
    ]
    terms = [
        {
            "source": formulas.solver.sources[k],
            "value": Value(formulas.solver.value(k), at.values[k]).data(),
            "voltage": opened.column(k),
            "current": shorted.column(k),
        }
        for k in at.chosen
    ]
    return {
        "ports": [{"name": p.name, "plus": p.plus, "minus": p.minus} for p in formulas.ports],
        "hertz": at.frequency.hertz,
        "thevenin": {"exists": formulas.thevenin is not None, "voltage": opened.vector(at.chosen),
                     "impedance": z, "reason": formulas.no_thevenin},
        "norton": {"exists": formulas.norton is not None, "current": shorted.vector(at.chosen),
                   "admittance": y, "reason": formulas.no_norton},
        "tests": tests,
        "terms": terms,
    }  # fmt: skip


class _Both(NamedTuple):
    """The formulas of one equivalent, and their numbers."""

    side: Side | None
    found: SideNumbers | None

    def matrix(self) -> list[list[dict[str, Any]]] | None:
        """Z or Y."""
        if self.side is None:
            return None
        found = self.found
        return [
            [_value(entry, found.matrix[p][q] if found else None) for q, entry in enumerate(row)]
            for p, row in enumerate(self.side.matrix)
        ]

    def vector(self, chosen: Sequence[int]) -> list[dict[str, Any]] | None:
        """The sum of the terms of the sources at a frequency, a port each."""
        if self.side is None:
            return None
        found = self.found
        return [
            _value(self.side.total(p, chosen), found.total(p, chosen) if found else None)
            for p in range(len(self.side.matrix))
        ]

    def column(self, source: int) -> list[dict[str, Any]] | None:
        """The terms of a source."""
        if self.side is None:
            return None
        found = self.found
        return [
            _value(row[source], found.terms[p][source] if found else None)
            for p, row in enumerate(self.side.terms)
        ]


def _value(entry: Entry, number: complex | None) -> dict[str, Any]:
    return Value(entry.whole, number).data()


def shared_data(
    formulas: PortFormulas, failing: Sequence[Failing], response: InS | None
) -> dict[str, Any]:
    """What is the same at all frequencies."""
    return {
        "denominators": [
            {
                "formula": text_of(a.denominator),
                "style": a.style,
                "terms": a.terms,
                "degree": a.degree,
            }
            for a in formulas.answers
        ],
        "fails": [f.data() for f in failing],
        **({"response": response.data()} if response else {}),
    }


def used_parts(formulas: PortFormulas) -> Where:
    """The named parts that the formulas in the JSON use, in order."""
    sides = [side for side in (formulas.thevenin, formulas.norton) if side is not None]
    written = [e.whole for side in sides for row in (*side.terms, *side.matrix) for e in row]
    used = {name for formula in written for name in names_in(formula)}
    used.update(name for a in formulas.answers for name in names_in(a.denominator))
    for name, part in reversed(formulas.where):
        if name in used:
            used.update(names_in(part))
    return [(name, part) for name, part in formulas.where if name in used]
