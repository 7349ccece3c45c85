"""The superposition as tables to be read and signed."""

from __future__ import annotations

from itertools import count

from equiv.analyses.exactness import exact_cells, exact_columns, exact_notes
from equiv.analyses.headings import frequency_words, name_of, titles_of
from equiv.analyses.result import Check
from equiv.analyses.superposition.power_tables import power_tables
from equiv.analyses.superposition.terms import (
    NOTABLE_CANCELLATION,
    TERM_LIMIT,
    FrequencyTerms,
    QuantityTerms,
    Term,
    limit_of,
)
from equiv.analyses.tables import Cell, Column, Measure, Row, Table
from equiv.network import Network
from equiv.units import say


def quantity_tables(
    network: Network, q: QuantityTerms, detail: bool, how: str, digits: int
) -> list[Table]:
    """A table a frequency, with the sub-circuits and the paths where they were asked for."""
    tables = []
    for at in q.frequencies:
        if at.refusal:
            title, subtitles = titles_of(network, q, at)
            tables.append(Table(title, subtitles, notes=(f"{at.refusal}.",), name=name_of(q, at)))
            continue
        if at.power:
            tables.extend(power_tables(network, q, at))
            continue
        tables.append(_term_table(network, q, at, how, digits))
        if any(term.paths for term in at.terms):
            tables.append(_paths_table(q, at))
        if detail:
            tables.extend(_detail_table(network, at, n, digits) for n in range(len(at.terms)))
    if q.rms is not None:
        tables.append(_rms_table(network, q))
    return tables


def _term_table(
    network: Network, q: QuantityTerms, at: FrequencyTerms, how: str, digits: int
) -> Table:
    title, subtitles = titles_of(network, q, at)
    dc = not at.frequency.omega
    columns = [
        Column("no.", key=True),
        Column("source", key=True),
        Column("value"),
        Column("coefficient"),
        Column("contribution", q.unit, repeat=True, family="term"),
        *exact_columns(network, ("exact", q.unit)),
        *([Column("direction")] if dc else []),
        Column("in-phase share", "%"),
        Column("running sum", q.unit, family="term"),
        Column("check", q.unit, family="term"),
    ]
    rows: list[Row] = []
    for number, term, running in zip(count(1), at.terms, at.running_sums, strict=False):
        exact = exact_cells(network, term.contribution)
        rows.append(_term_row((number, term, at.share(term), running), exact, dc))
        rows += [
            _member_row(part, exact_cells(network, part.contribution), dc) for part in term.parts
        ]
    blank: list[Cell] = [""] if dc else []
    total = at.total if at.complete else None
    way = [_direction(total)] if dc and total is not None else blank
    whole: Cell = 1.0 if at.complete and not at.cancels_to_nothing else ""
    sums = (_cell(total, dc), *exact_cells(network, total))
    rows.append(Row(("", "sum", "", "", *sums, *way, whole, "", ""), total=True))
    sums = (_cell(at.all_on, dc), *exact_cells(network, at.all_on))
    rows.append(Row(("", "all at once", "", "", *sums, *blank, "", "", ""), total=True))
    return Table(
        title,
        subtitles,
        tuple(columns),
        tuple(rows),
        (*_notes(network, q, at, how, digits), *exact_notes(rows)),
        name=name_of(q, at),
    )


def _term_row(
    numbered: tuple[int, Term, float | None, complex | None], exact: list[Cell], dc: bool
) -> Row:
    """A row from a term with its number, its share and the sum up to it."""
    number, term, share, running = numbered
    way = [_direction(term.contribution)] if dc else []
    value = "" if term.value is None else Measure(_real(term.value, dc), term.unit)
    coefficient: Cell = ""
    if term.coefficient is not None:
        coefficient = Measure(_real(term.coefficient, dc), _shown(term.coefficient_unit))
    elif term.kind != "group":
        coefficient = None
    return Row(
        (
            number, term.source, value, coefficient, _cell(term.contribution, dc), *exact, *way,
            share, _cell(running, dc), "" if _unchecked(term) else _cell(term.check, dc),
        )
    )  # fmt: skip


def _unchecked(term: Term) -> bool:
    return term.check is None and term.contribution is not None


def _member_row(part: Term, exact: list[Cell], dc: bool) -> Row:
    way = [_direction(part.contribution)] if dc else []
    assert part.value is not None
    coefficient = None if part.coefficient is None else _real(part.coefficient, dc)
    return Row(
        (
            "", part.source, Measure(_real(part.value, dc), part.unit),
            None if coefficient is None else Measure(coefficient, _shown(part.coefficient_unit)),
            _cell(part.contribution, dc), *exact, *way, "", "", "",
        ),
        level=1,
    )  # fmt: skip


def _shown(unit: str) -> str:
    return "" if unit == "1" else unit


def _real(value: complex, dc: bool) -> float | complex:
    return complex(value).real if dc else complex(value)


def _cell(value: complex | None, dc: bool) -> Cell:
    return None if value is None else _real(value, dc)


def _direction(value: complex | None) -> str:
    if value is None:
        return ""
    real = complex(value).real
    return "along" if real > 0 else "against" if real < 0 else "none"


def _notes(
    network: Network, q: QuantityTerms, at: FrequencyTerms, how: str, digits: int
) -> list[str]:
    notes = [f"{term.source}: no term; {term.reason}" for term in at.terms if term.reason]
    if at.complete:
        words = "difference of sum and all at once, relative"
        notes.append(Check(words, at.difference, limit_of(network)).sentence())
    else:
        notes.append("A term does not exist, so there is no sum; all sources at once do.")
    if at.worst_term is not None:
        words = "largest difference of a term and its check"
        notes.append(Check(words, at.worst_term, limit_of(network, TERM_LIMIT)).sentence())
    notes.append(f"Check: {how}.")
    if at.complete:
        notes.append(f"Arithmetic sum of the magnitudes: {say(at.arithmetic_sum, q.unit, digits)}.")
    if at.terms_cancel:
        notes.append(
            "The terms cancel: their sum is below the closure limit, so shares mean nothing."
        )
    elif at.complete and (at.cancellation or 0) > NOTABLE_CANCELLATION:
        notes.append(
            f"The terms cancel: their magnitudes add to {at.cancellation:.3g} times the total, "
            f"which costs {at.digits_lost:.1f} digits."
        )
    return notes


def _paths_table(q: QuantityTerms, at: FrequencyTerms) -> Table:
    dc = not at.frequency.omega
    names = next(tuple(n for n, _ in t.paths.through) for t in at.terms if t.paths)
    columns = (
        Column("no.", key=True),
        Column("source", key=True),
        Column("direct", q.unit, family="term"),
        *(Column(f"through {name}", q.unit, family="term") for name in names),
        Column("sum of paths", q.unit, family="term"),
    )
    rows = []
    for number, term in enumerate(at.terms, 1):
        if term.paths is None:
            continue
        parts = [_real(part, dc) for _, part in term.paths.through]
        rows.append(
            Row((number, term.source, _real(term.paths.direct, dc), *parts,
                 _real(term.paths.total, dc)))
        )  # fmt: skip
    notes = (
        "Direct: every controlled source dead. Through a controlled source: what its output in "
        "the sub-circuit gives with the other controlled sources dead.",
    )
    return Table(f"Paths of the terms of {q.quantity}", (frequency_words(at.frequency),), columns,
                 tuple(rows), notes, name=f"paths of {name_of(q, at)}")  # fmt: skip


def _detail_table(network: Network, at: FrequencyTerms, index: int, digits: int) -> Table:
    """A sub-circuit in sentences that a reviewer can tick."""
    term = at.terms[index]
    off = [s for s in network.sources if s.name not in term.members]
    shorted = ", ".join(s.name for s in off if s.output == "V") or "nothing"
    opened = ", ".join(s.name for s in off if s.output == "I") or "nothing"
    notes = [f"[ ] shorted: {shorted}", f"[ ] opened: {opened}"]
    for state in term.controlled:
        element = network.elements[state.name]
        first, second = element.pair_nodes(0, network.ground)
        marks = f"{first} over {second}" if element.output == "V" else f"from {first} to {second}"
        sensed = say(_real(state.sensed, not at.frequency.omega), state.sensed_unit, digits)
        output = say(_real(state.output, not at.frequency.omega), state.unit, digits)
        verdict = (
            "reversed: what it senses is opposite to its reference direction"
            if state.reversed
            else "as marked"
            if state.sensed
            else "dead: it senses nothing"
        )
        notes.append(
            f"[ ] {state.name} ({state.kind}) senses {state.senses} = {sensed} and gives {output}, "
            f"{marks}; {verdict}"
        )
    if not network.controlled:
        notes.append("[ ] no controlled sources")
    elif not term.controlled:
        notes.append("The controlled sources' states were not found (too many sub-circuits).")
    title = f"Sub-circuit {index + 1} of {len(at.terms)}: {term.source} alone"
    return Table(title, (frequency_words(at.frequency),), notes=tuple(notes), name="sub-circuit")


def _rms_table(network: Network, q: QuantityTerms) -> Table:
    columns = (Column("frequency", key=True), Column("rms", q.unit, family="rms"))
    if q.quantity.what == "P":
        columns = (Column("frequency", key=True), Column("mean power", q.unit, family="rms"))
        rows = [Row((frequency_words(f.frequency, ""), f.total.real)) for f in q.frequencies]
        note = "Powers of different frequencies add: their cross terms are zero in the mean."
    else:
        rows = [Row((frequency_words(f.frequency, ""), abs(f.total))) for f in q.frequencies]
        note = "Phasors of different frequencies are never added: the rms over all is the root of the sum of squares."
    rows.append(Row(("over all", q.rms), total=True))
    return Table(f"{q.heading[0].upper()}{q.heading[1:]} ({q.quantity}), over all frequencies",
                 (), columns, tuple(rows), (note,), name=f"rms of {q.quantity}")  # fmt: skip


def askable(network: Network) -> list[tuple[str, str]]:
    """Every quantity of nodes and elements, and what it is."""
    words = (("V", "voltage of"), ("I", "current in"), ("P", "power absorbed by"))
    return [
        *((f"V:{node}", f"voltage of node {node} over {network.ground}") for node in network.nodes),
        *(
            (f"{what}:{e.name}", f"{word} {e.kind} {e.name}")
            for e in network.elements.values()
            if e.pairs
            for what, word in words
        ),
    ]


def askable_tables(network: Network) -> tuple[Table, ...]:
    """What can be asked of a network, where nothing was."""
    if not network.elements:
        return (Table("The network is empty: nothing can be asked.", name="quantities"),)
    notes = ("Also V:a,b for the voltage of node a over node b; V2: and I2: for second pairs.",)
    columns = (Column("quantity", key=True), Column("what it is"))
    rows = Table.rows_of(askable(network))
    return (Table("What can be asked", (), columns, rows, notes, name="quantities"),)
