"""Port formulas as tables, and as JSON."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from equiv.analyses.formulas.port_numbers import PortNumbers, SideNumbers
from equiv.analyses.formulas.ports import Entry, PortFormulas
from equiv.analyses.formulas.response_table import response_table
from equiv.analyses.formulas.tables import DIRECTION, length_words, where_table
from equiv.analyses.formulas.told import Failing, InS
from equiv.analyses.formulas.values import cell_of
from equiv.analyses.headings import frequency_words
from equiv.analyses.tables import Cell, Column, Measure, Row, Table
from equiv.equations.symbolic.expression import Name, quotient
from equiv.network import Network


def port_tables(
    network: Network,
    formulas: PortFormulas,
    numbers: Sequence[PortNumbers],
    failing: Sequence[Failing],
    response: InS | None,
    digits: int,
) -> list[Table]:
    """Terms of each port, the equivalents, the named parts, the response in s."""
    tables = []
    for p in range(len(formulas.ports)):
        if formulas.solver.sources:
            tables += _term_tables(network, formulas, numbers, p)
    tables.append(_equivalents_table(network, formulas, numbers, failing, digits))
    if formulas.where:
        terms = [a.terms for a in formulas.answers if a.terms is not None]
        degrees = [a.degree for a in formulas.answers if a.degree is not None]
        length = length_words(max(terms, default=None), max(degrees, default=None))
        tables.append(where_table(formulas.where, _named(formulas), length))
    if response:
        tables.append(response_table(response, f"the voltage of {_named(formulas)}", digits))
    return tables


def _named(formulas: PortFormulas) -> str:
    return ", ".join(port.name for port in formulas.ports)


def _term_tables(
    network: Network, formulas: PortFormulas, numbers: Sequence[PortNumbers], p: int
) -> list[Table]:
    """The terms of a port; where both equivalents have one numerator they share a table."""
    port = formulas.ports[p]
    subtitles = (
        f"Port {port.name}: voltage of {port.plus} over {port.minus}, current out of {port.plus} "
        "into the load",
        "Formulas in the values of the elements",
    )
    title = network.title or "Port equivalent in symbols"
    sides = [("open-circuit voltage", "V", formulas.thevenin, "thevenin"),
             ("short-circuit current", "A", formulas.norton, "norton")]  # fmt: skip
    if len(formulas.ports) == 1 and len(formulas.answers) == 1:
        return [_shared_table(title, subtitles, formulas, numbers)]
    tables = []
    for words, unit, side, which in sides:
        if side is None:
            continue
        columns = [Column("no.", key=True), Column("source", key=True), Column(words)]
        rows = [
            [k + 1, name, cell_of(entry.short)]
            for k, (name, entry) in enumerate(
                zip(formulas.solver.sources, side.terms[p], strict=True)
            )
        ]
        tables.append(
            _with_numbers(title, subtitles, columns, rows, [(which, unit)], numbers, p,
                          f"{port.name} {words}")
        )  # fmt: skip
    return tables


def _shared_table(
    title: str, subtitles: tuple[str, ...], formulas: PortFormulas, numbers: Sequence[PortNumbers]
) -> Table:
    """One port: the parts of Nv, which is over D the voltage and over Nz the current."""
    side = formulas.thevenin or formulas.norton
    columns = [Column("no.", key=True), Column("source", key=True), Column("part of Nv")]
    entries: Sequence[Entry] = side.terms[0] if side else ()
    rows = [
        [k + 1, name, cell_of(entry.top)]
        for k, (name, entry) in enumerate(zip(formulas.solver.sources, entries, strict=False))
    ]
    wanted = [("thevenin", "V")] if formulas.thevenin else []
    wanted += [("norton", "A")] if formulas.norton else []
    name = f"terms of {formulas.ports[0].name}"
    return _with_numbers(title, subtitles, columns, rows, wanted, numbers, 0, name)


def _with_numbers(
    title: str,
    subtitles: tuple[str, ...],
    columns: list[Column],
    rows: list[list[Any]],
    wanted: Sequence[tuple[str, str]],
    numbers: Sequence[PortNumbers],
    p: int,
    name: str,
) -> Table:
    """The table with a column of numbers for each frequency and side."""
    sums: list[Cell] = ["", "sum", *[""] * (len(columns) - 2)]
    some = False
    for at in numbers:
        for which, unit in wanted:
            side: SideNumbers | None = getattr(at, which)
            if side is None or not any(x is not None for x in side.terms[p]) or not at.chosen:
                continue
            some = True
            what = "voltage" if unit == "V" else "current"
            when = f" at {frequency_words(at.frequency, '')}" if len(numbers) > 1 else ""
            columns.append(Column(f"{what}{when}", unit, family=what))
            for k, row in enumerate(rows):
                row.append(_cell(at, side.terms[p][k]) if k in at.chosen else "")
            sums.append(_cell(at, side.total(p, at.chosen)))
    made = [Row(tuple(row)) for row in rows]
    if some:
        made.append(Row(tuple(sums), total=True))
    return Table(title, subtitles, tuple(columns), tuple(made), (DIRECTION,), name=name)


def _cell(at: PortNumbers, value: complex | None) -> Cell:
    if value is None:
        return None
    return complex(value) if at.frequency.omega else complex(value).real


def _equivalents_table(
    network: Network,
    formulas: PortFormulas,
    numbers: Sequence[PortNumbers],
    failing: Sequence[Failing],
    digits: int,
) -> Table:
    known = [at for at in numbers if at.thevenin or at.norton]
    columns = (
        Column("quantity", key=True),
        Column("formula"),
        *(Column(_heading(at, len(known))) for at in known),
    )
    rows = []
    for words, unit, which, of in _quantities(formulas):
        _, short = of
        cells: list[Cell] = []
        for at in known:
            value = which(at)
            number = None if value is None else _cell(at, value)
            cells.append(None if number is None else Measure(number, unit))  # type: ignore[arg-type]
        rows.append(Row((words, cell_of(short), *cells)))
    notes = [
        *_existence(formulas),
        *(f.sentence("No Thevenin equivalent", digits) for f in failing),
    ]
    subtitles = ("Formulas in the values of the elements",)
    if any(at.frequency.omega for at in known):
        subtitles = ("Formulas in s; numbers at s = jω, phasors are rms",)
    return Table("Equivalents", subtitles, columns if rows else (), tuple(rows), tuple(notes),
                 name="equivalents")  # fmt: skip


def _heading(at: PortNumbers, count: int) -> str:
    return f"at {frequency_words(at.frequency, '')}" if count > 1 else "value"


def _quantities(formulas: PortFormulas) -> list[tuple[str, str, Any, tuple[Entry, Any]]]:
    """Every quantity of the equivalents: words, unit, its number's finder, its formula."""
    found: list[tuple[str, str, Any, tuple[Entry, Any]]] = []
    several = len(formulas.ports) > 1
    shared = not several and len(formulas.answers) == 1
    pairs = (
        ("thevenin", formulas.thevenin, "open-circuit voltage", "V", "impedance", "ohm"),
        ("norton", formulas.norton, "short-circuit current", "A", "admittance", "S"),
    )
    for which, side, first, unit, second, over in pairs:
        if side is None:
            continue
        for p, port in enumerate(formulas.ports):
            of = f" of {port.name}" if several else ""
            total = side.total(p)
            if formulas.solver.sources:
                short = quotient(Name("Nv"), total.under) if shared else total.short
                found.append((first + of, unit, _total(which, p), (total, short)))
        for p, port in enumerate(formulas.ports):
            for q, other in enumerate(formulas.ports):
                of = f" {port.name}, {other.name}" if several else ""
                entry = side.matrix[p][q]
                found.append((second + of, over, _matrix(which, p, q), (entry, entry.short)))
    return found


def _total(which: str, p: int) -> Any:
    return lambda at: getattr(at, which) and getattr(at, which).total(p, at.chosen)


def _matrix(which: str, p: int, q: int) -> Any:
    return lambda at: getattr(at, which) and getattr(at, which).matrix[p][q]


def _existence(formulas: PortFormulas) -> list[str]:
    notes = []
    if formulas.no_thevenin and formulas.no_thevenin == formulas.no_norton:
        return [f"There is neither a Thevenin nor a Norton equivalent: {formulas.no_norton}."]
    if formulas.no_thevenin:
        notes.append(f"There is no Thevenin equivalent: {formulas.no_thevenin}.")
    if formulas.no_norton:
        notes.append(f"There is no Norton equivalent: {formulas.no_norton}.")
    if not notes:
        shared = len(formulas.ports) == 1 and len(formulas.answers) == 1
        which = "D or Nz" if shared else "one of the denominators"
        notes.append(f"Both equivalents exist, but for values at which {which} is zero.")
    return notes
