"""Port equivalents as tables to be read and signed, and as JSON."""

from __future__ import annotations

from typing import Any

from equiv.analyses.exactness import exact_cells, exact_columns, exact_notes
from equiv.analyses.headings import at_words, frequency_words
from equiv.analyses.ports.proof import Equivalent
from equiv.analyses.result import pair
from equiv.analyses.tables import Cell, Column, Measure, Row, Table
from equiv.equations.layout import Numbers
from equiv.equations.scalars import scalar
from equiv.network import Network


def port_tables(network: Network, e: Equivalent) -> list[Table]:
    """Terms, equivalents, test sources, and the three-load proof."""
    tables = [_term_table(network, e, index) for index in range(len(e.ports))]
    tables.append(_equivalents_table(network, e))
    if e.thevenin or e.norton:
        tables.append(_tests_table(e))
    if e.loads:
        tables.append(_proof_table(e))
    return tables


def _number(e: Equivalent, value: Any) -> float | complex:
    return complex(value) if e.frequency.omega else complex(value).real


def _entry(e: Equivalent, matrix: Numbers | None, *index: int) -> Cell:
    return None if matrix is None else _number(e, matrix[index])


def _exact(matrix: Numbers | None, *index: int) -> complex | None:
    return None if matrix is None else scalar(matrix[index])


def _term(e: Equivalent, matrix: Numbers | None, port: int, source: int) -> Cell:
    return _entry(e, matrix, port, source) if e.alone[source] else None


def _term_table(network: Network, e: Equivalent, index: int) -> Table:
    port = e.ports[index]
    columns = (
        Column("no.", key=True),
        Column("source", key=True),
        Column("value"),
        Column("open-circuit voltage", "V", family="voltage"),
        Column(_short(e), "A", family="current"),
        *exact_columns(network, ("exact voltage", "V"), ("exact current", "A")),
    )
    rows = [Row(_source_cells(network, e, index, k)) for k in range(len(e.sources))]
    notes = [
        f"{name}: with it alone there is no solution, so it has no term."
        for k, name in enumerate(e.sources)
        if not e.alone[k]
    ]
    if len(e.ports) > 1:
        notes.append(
            "The voltage is with all these ports open, the current with all of them shorted at "
            "once: for the current of one fault, ask for its port alone."
        )
    both = (e.open_voltage, e.short_current)
    total = [_entry(e, vector, index) for vector in both]
    exact = exact_cells(network, *(_exact(vector, index) for vector in both))
    rows.append(Row(("", "all sources", "", *total, *exact), total=True))
    notes += exact_notes(rows)
    subtitles = (
        f"Port {port.name}: voltage of {port.plus} over {port.minus}, "
        f"current out of {port.plus} into the load",
        frequency_words(e.frequency),
    )
    return Table(
        network.title or "Port equivalent",
        subtitles,
        columns,
        tuple(rows),
        tuple(notes),
        name=f"{port.name}{at_words(e.frequency)}",
    )


def _source_cells(network: Network, e: Equivalent, port: int, source: int) -> tuple[Cell, ...]:
    """The cells of a source's terms at a port."""
    both = (e.voltages, e.currents)
    exact = (_exact(terms, port, source) if e.alone[source] else None for terms in both)
    return (
        source + 1,
        e.sources[source],
        value_cell(e, e.values[source]),
        *(_term(e, terms, port, source) for terms in both),
        *exact_cells(network, *exact),
    )


def _short(e: Equivalent) -> str:
    """What the short-circuit current is, where there are several ports."""
    return "short-circuit current" + (", all shorted" if len(e.ports) > 1 else "")


def value_cell(e: Equivalent, value: tuple[complex, str] | None) -> Cell:
    """A source's value; nothing for a group."""
    if value is None:
        return ""
    return Measure(_number(e, value[0]), "V" if value[1] == "V" else "A")


def _equivalents_table(network: Network, e: Equivalent) -> Table:
    complex_ = bool(e.frequency.omega)
    parts = (Column("real part"), Column("imaginary part")) if complex_ else ()
    columns = (
        Column("equivalent", key=True), Column("quantity", key=True), Column("value"), *parts,
        *exact_columns(network, ("exact", "")),
    )  # fmt: skip
    several = len(e.ports) > 1

    def row(equivalent: str, quantity: str, value: Any, unit: str) -> Row:
        if value is None:
            missing: list[Cell] = [None] * (3 if complex_ else 1)
            return Row((equivalent, quantity, *missing, *exact_cells(network, None)))
        number = _number(e, value)
        split: list[Cell] = []
        if complex_:
            split = [Measure(number.real, unit), Measure(number.imag, unit)]
        exact = exact_cells(network, scalar(value), unit=unit)
        return Row((equivalent, quantity, Measure(number, unit), *split, *exact))

    rows: list[Row] = []
    for name, column, first, unit, matrix, second, over in (
        ("Thevenin", e.open_voltage, "open-circuit voltage", "V", e.impedance, "impedance", "ohm"),
        ("Norton", e.short_current, _short(e), "A", e.admittance, "admittance", "S"),
    ):
        for p, port in enumerate(e.ports):
            at = f" of {port.name}" if several else ""
            rows.append(row(name, first + at, None if column is None else column[p], unit))
        for p, port in enumerate(e.ports):
            for q, other in enumerate(e.ports):
                at = f" {port.name}, {other.name}" if several else ""
                value = None if matrix is None else matrix[p, q]
                rows.append(row(name, second + at, value, over))
    if not e.thevenin and not e.norton:
        rows = []
    columns = columns if rows else ()
    return Table("Equivalents", (frequency_words(e.frequency),), columns, tuple(rows),
                 (*_existence_notes(e), *exact_notes(rows)),
                 name=f"equivalents{at_words(e.frequency)}")  # fmt: skip


def _existence_notes(e: Equivalent) -> list[str]:
    """Which equivalents exist, and why not."""
    notes = []
    if e.no_thevenin:
        notes.append(f"There is no Thevenin equivalent: {e.no_thevenin}.")
    if e.no_norton:
        notes.append(f"There is no Norton equivalent: {e.no_norton}.")
    if e.thevenin and e.norton:
        notes.append("Both equivalents exist.")
    if not e.thevenin and not e.norton and len(e.ports) > 1:
        notes.append(
            "Each port alone may have an equivalent: ask for them one at a time, or for a "
            "mixed form (--form h)."
        )
    return notes


def tests_of(e: Equivalent) -> list[tuple[int, str, list[complex]]]:
    """Each test source used: its port, `current` or `voltage`, and the response at every port."""
    found: list[tuple[int, str, list[complex]]] = []
    for p in range(len(e.ports)):
        if e.impedance is not None:
            found.append((p, "current", [scalar(z) for z in e.impedance[:, p]]))
        if e.admittance is not None:
            found.append((p, "voltage", [scalar(y) for y in e.admittance[:, p]]))
    return found


def _tests_table(e: Equivalent) -> Table:
    columns = (Column("test source", key=True), Column("response"), Column("at port"))
    rows = []
    for p, kind, response in tests_of(e):
        port = e.ports[p]
        if kind == "current":
            what, unit = f"1 A into {port.plus}, out of {port.minus}", "V"
        else:
            what, unit = f"1 V of {port.plus} over {port.minus}", "A"
        for q, value in enumerate(response):
            rows.append(Row((what, Measure(_number(e, value), unit), e.ports[q].name)))
    notes = (
        "Independent sources off, controlled sources in place. A response in A is the current "
        "into the port; the other ports are open for 1 A and shorted for 1 V.",
    )
    return Table(
        "Test sources",
        (frequency_words(e.frequency),),
        columns,
        tuple(rows),
        notes,
        name=f"tests{at_words(e.frequency)}",
    )


def _proof_table(e: Equivalent) -> Table:
    columns = (
        Column("load", key=True),
        Column("port"),
        Column("voltage in the network", "V", family="voltage"),
        Column("of the equivalent", "V", family="voltage"),
        Column("difference", "V", exponent=True),
    )
    rows = [
        Row(
            (
                Measure(_number(e, test.load), "ohm"), e.ports[p].name, _number(e, found),
                _number(e, told), abs(found - told),
            )
        )
        for test in e.loads
        for p, (found, told) in enumerate(zip(test.network, test.equivalent, strict=True))
    ]  # fmt: skip
    feeds = e.open_voltage if e.thevenin else e.short_current
    fed = "" if feeds is not None and abs(feeds).max() > 0 else ", with 1 A fed in beside it"
    notes = (f"Each load is put across every port of the original network{fed}.",)
    return Table(
        "Proof by three loads",
        (frequency_words(e.frequency),),
        columns,
        tuple(rows),
        notes,
        name=f"loads{at_words(e.frequency)}",
    )


def port_data(e: Equivalent) -> dict[str, Any]:
    """The JSON of an equivalent."""
    vectors = [e.open_voltage, e.short_current]
    voltage, current = (None if v is None else [pair(scalar(x)) for x in v] for v in vectors)
    impedance, admittance = (
        None if m is None else [[pair(scalar(x)) for x in row] for row in m]
        for m in (e.impedance, e.admittance)
    )
    return {
        "ports": [{"name": p.name, "plus": p.plus, "minus": p.minus} for p in e.ports],
        "hertz": e.frequency.hertz,
        "thevenin": {"exists": e.thevenin, "voltage": voltage, "impedance": impedance,
                     "reason": e.no_thevenin},
        "norton": {"exists": e.norton, "current": current, "admittance": admittance,
                   "reason": e.no_norton},
        "tests": [
            {"port": e.ports[p].name, "kind": kind, "value": 1.0,
             "response": [pair(value) for value in response]}
            for p, kind, response in tests_of(e)
        ],
        "terms": [
            {"source": name,
             "voltage": _column(e, e.voltages, k), "current": _column(e, e.currents, k)}
            for k, name in enumerate(e.sources)
        ],
    }  # fmt: skip


def _column(e: Equivalent, terms: Numbers | None, source: int) -> list[Any] | None:
    """The JSON of a source's terms at every port; None where they do not exist."""
    if terms is None or not e.alone[source]:
        return None
    return [pair(scalar(x)) for x in terms[:, source]]
