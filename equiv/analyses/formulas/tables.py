"""Formulas as tables to be read: a term a source over one denominator, numbers beside them."""

from __future__ import annotations

from collections.abc import Sequence

from equiv.analyses.formulas.response_table import response_table
from equiv.analyses.formulas.terms import AtFrequency, FormulaTerm, QuantityFormulas
from equiv.analyses.formulas.values import Where, cell_of
from equiv.analyses.headings import frequency_words
from equiv.analyses.tables import Cell, Column, Row, Table
from equiv.equations.symbolic.expression import Expression, names_in, quotient
from equiv.network import Network

DIRECTION = "Each term is one source's alone; every controlled source stays in place."


def quantity_tables(network: Network, q: QuantityFormulas, digits: int) -> list[Table]:
    """The terms; the named parts; the response in s; the derivatives."""
    tables = [_term_table(network, q, digits)]
    named = q.answer.all_where
    if named:
        tables.append(where_table(named, str(q.quantity), length_words(q.answer.terms, q.degree)))
    if q.response:
        tables.append(response_table(q.response, str(q.quantity), digits))
    if q.slopes:
        tables.append(_slope_table(q))
    return tables


def _term_table(network: Network, q: QuantityFormulas, digits: int) -> Table:
    known = [at for at in q.frequencies if at.known]
    columns = (
        Column("no.", key=True),
        Column("source", key=True),
        Column("term"),
        *(Column(_heading(at, len(known)), q.unit, family="term") for at in known),
    )
    rows = [
        Row((k, term.source, cell_of(_short(q, term)), *_numbers(known, term)))
        for k, term in enumerate(q.terms, 1)
    ]
    sums = [_real(at, at.total) for at in known]
    if known:
        rows.append(Row(("", "sum", "", *sums), total=True))
        at_once = [_real(at, at.numeric.all_on) if at.numeric else None for at in known]
        if any(at.numeric for at in known):
            rows.append(Row(("", "all at once", "", *at_once), total=True))
    heading = q.heading[0].upper() + q.heading[1:]
    labels = (q.label[0].upper() + q.label[1:],) if q.label else ()
    notes = [
        DIRECTION,
        *(c.sentence() for c in q.checks),
        *(f.sentence("No unique solution", digits) for f in q.failing),
    ]
    return Table(
        network.title or "Superposition in symbols",
        (*labels, f"{heading} ({q.quantity})", *_frequencies(q)),
        columns,
        tuple(rows),
        tuple(notes),
        name=str(q.quantity),
    )


def _frequencies(q: QuantityFormulas) -> tuple[str, ...]:
    first = q.frequencies[0].frequency
    parts = [q.total.expression, q.answer.denominator, *(part for _, part in q.answer.where)]
    in_s = any("s" in names_in(part) for part in parts)
    words = "Formulas in the values of the elements"
    if len(q.frequencies) > 1 or not first.omega:
        return (words + (" and s" if in_s else ""),)
    if not in_s:
        return (f"{words}; numbers at {frequency_words(first)}",)
    return (f"Formulas in s; numbers at s = jω, {frequency_words(first)}",)


def _heading(at: AtFrequency, count: int) -> str:
    return f"at {frequency_words(at.frequency, '')}" if count > 1 else "contribution"


def _short(q: QuantityFormulas, term: FormulaTerm) -> Expression:
    return quotient(term.top, q.answer.under)


def _numbers(known: Sequence[AtFrequency], term: FormulaTerm) -> list[Cell]:
    cells: list[Cell] = []
    for at in known:
        if term in at.terms:
            cells.append(_real(at, at.contributions[at.terms.index(term)]))
        else:
            cells.append("")
    return cells


def _real(at: AtFrequency, value: complex | None) -> Cell:
    if value is None:
        return None
    return complex(value) if at.frequency.omega else complex(value).real


def length_words(terms: int | None, degree: int | None) -> str:
    """How long the formula is, in words."""
    if terms is None:
        degree_words = f" The degree in s is {degree}." if degree else ""
        return f"Written out, it would have more terms than are counted.{degree_words}"
    count = f"{terms:,}".replace(",", " ") + (" terms" if terms != 1 else " term")
    in_s = f", and the degree {degree} in s" if degree else ""
    return f"Written out, the longest of its polynomials has {count}{in_s}."


def where_table(named: Where, of: str, length: str) -> Table:
    """What the names in formulas stand for."""
    rows = tuple(Row((name, cell_of(expression))) for name, expression in named)
    columns = (Column("name", key=True), Column("stands for"))
    return Table(f"Where, in {of}", (), columns, rows, (length,), name=f"where of {of}")


def _slope_table(q: QuantityFormulas) -> Table:
    at = q.frequencies[0]
    names = [*(term.source for term in q.terms), "sum"]
    columns = (Column("source", key=True), Column("derivative"), Column("value"))
    rows = []
    for name, found in zip(names, q.slopes, strict=True):
        number: Cell = None if found is None else _real(at, found.number)
        text: Cell = "" if name == "sum" and found else "too long"
        if found is not None and name != "sum":
            text = cell_of(q.answer.with_denominator_named(found.expression))
        rows.append(Row((name, text, number), total=name == "sum"))
    title = f"Derivatives of the terms of {q.quantity}"
    return Table(title, (q.slope_words,), columns, tuple(rows), name=f"derivatives of {q.quantity}")
