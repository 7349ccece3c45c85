"""The parameters of ports as tables, and as JSON."""

from __future__ import annotations

from typing import Any

from equiv.analyses.exactness import exact_cells, exact_columns, exact_notes
from equiv.analyses.headings import frequency_words
from equiv.analyses.ports.forms import PortForm, unit_of
from equiv.analyses.ports.proof import Equivalent
from equiv.analyses.ports.tables import value_cell
from equiv.analyses.result import pair
from equiv.analyses.tables import Cell, Column, Measure, Row, Table
from equiv.equations.scalars import scalar
from equiv.network import Network
from equiv.units import say

_INTO = "currents j into the ports (j = -i of the equivalents)"


def form_tables(network: Network, e: Equivalent, form: PortForm) -> list[Table]:
    """The parameters, and the source vector term by term."""
    return [_parameter_table(network, e, form), _source_table(network, e, form)]


def equation(form: PortForm) -> str:
    """What the parameters relate: `(v1, j2) = h·(j1, v2) + sources`."""
    left, right = (", ".join(side) for side in form.sides)
    if len(form.sides.left) > 1:
        left, right = f"({left})", f"({right})"
    return f"{left} = {form.form}·{right} + sources"


def _number(e: Equivalent, value: Any) -> float | complex:
    return complex(value) if e.frequency.omega else complex(value).real


def _port_words(e: Equivalent, form: PortForm) -> tuple[str, ...]:
    """What the numbers of the ports mean, and the waves of s."""
    ports = [f"port {k}: {p.name}, {p.plus} over {p.minus}" for k, p in enumerate(e.ports, 1)]
    words = "; ".join(ports)
    words = words[0].upper() + words[1:]
    if form.form != "s":
        return words, _INTO[0].upper() + _INTO[1:]
    alike = len(set(form.references)) == 1
    refs = ", ".join(say(float(r), "ohm") for r in form.references[: 1 if alike else None])
    return (
        words,
        f"Waves a into the ports, b out of them: a, b = (v ± R·j)/(2·√R), R = {refs}",
        f"|a|² and |b|² are powers in watts; {_INTO}",
    )


def _parameter_table(network: Network, e: Equivalent, form: PortForm) -> Table:
    complex_ = bool(e.frequency.omega)
    split = (Column("real part"), Column("imaginary part")) if complex_ else ()
    columns = (
        Column("parameter", key=True), Column("gives", key=True), Column("from"), Column("value"),
        *split, *exact_columns(network, ("exact", "")),
    )  # fmt: skip
    assert form.parameters is not None
    rows = []
    units = form.units()
    for r, left in enumerate(form.sides.left):
        for c, right in enumerate(form.sides.right):
            number = _number(e, form.parameters[r, c])
            cells: list[Cell] = [Measure(number, units[r][c])]
            if complex_:
                cells += [Measure(number.real, units[r][c]), Measure(number.imag, units[r][c])]
            cells += exact_cells(network, scalar(form.parameters[r, c]), unit=units[r][c])
            rows.append(Row((parameter_name(form, r, c), left, right, *cells)))
    title = network.title or "Port parameters"
    subtitles = (*_port_words(e, form), f"{equation(form)}; {frequency_words(e.frequency)}")
    notes = tuple(exact_notes(rows))
    return Table(title, subtitles, columns, tuple(rows), notes, name="parameters")


def parameter_name(form: PortForm, row: int, column: int) -> str:
    """`h21`, or `A` to `D` of a chain matrix; a comma where ports have two digits."""
    if form.form == "abcd":
        return "ABCD"[2 * row + column]
    comma = "," if len(form.sides.left) > 9 else ""
    return f"{form.form}{row + 1}{comma}{column + 1}"


def _source_table(network: Network, e: Equivalent, form: PortForm) -> Table:
    assert form.terms is not None and form.sources is not None
    left = form.sides.left
    columns = (
        Column("no.", key=True), Column("source", key=True), Column("value"),
        *(Column(name, unit_of(name), family=name[0]) for name in left),
        *exact_columns(network, *((f"exact {name}", unit_of(name)) for name in left)),
    )  # fmt: skip
    rows = [
        Row(
            (
                k + 1, name, value_cell(e, value),
                *(_number(e, form.terms[r, k]) for r in range(len(left))),
                *exact_cells(network, *map(scalar, form.terms[:, k])),
            )
        )
        for k, (name, value) in enumerate(zip(e.sources, e.values, strict=True))
    ]  # fmt: skip
    sums = (
        *(_number(e, x) for x in form.sources),
        *exact_cells(network, *map(scalar, form.sources)),
    )
    rows.append(Row(("", "sum", "", *sums), total=True))
    zero = ", ".join(form.sides.right)
    notes = (
        f"What stands on the left with {zero} at zero, from each source and in sum.",
        *exact_notes(rows),
    )
    return Table("Source vector", (frequency_words(e.frequency),), columns, tuple(rows), notes,
                 name="sources")  # fmt: skip


def form_data(e: Equivalent, form: PortForm) -> dict[str, Any]:
    """The keys that a form adds to the JSON of an equivalent."""
    assert form.parameters is not None and form.terms is not None and form.sources is not None
    return {
        "form": form.form,
        "reference": list(map(float, form.references)) if form.form == "s" else None,
        "equation": equation(form),
        "currents": "into the ports",
        "units": form.units(),
        "parameters": [[pair(scalar(x)) for x in row] for row in form.parameters],
        "sources": [pair(scalar(x)) for x in form.sources],
        "source_units": [unit_of(name) for name in form.sides.left],
        "source_terms": [
            {"source": name, "sources": [pair(scalar(x)) for x in form.terms[:, k]]}
            for k, name in enumerate(e.sources)
        ],
    }
