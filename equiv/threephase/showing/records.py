"""Faults as long tables for spreadsheets and programs: a row a term, a row a fault."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence

from equiv.analyses.result import Caution, Check
from equiv.analyses.tables import Cell, Column, Table
from equiv.threephase.cases import FaultCase, FaultTerm
from equiv.threephase.showing.study import Study
from equiv.threephase.showing.sums import sums_of

_KEYS = (Column("bus"), Column("type"))
_PARTIAL = tuple(Column(f"partial_{phase}", "A", family="complex") for phase in "abc")
_TERM = (
    Column("phase"),
    Column("source"),
    Column("kind"),
    Column("parallel"),
    Column("contribution", "A", family="complex"),
    Column("share", "%"),
    Column("gross_share", "%"),
    Column("running_sum", "A", family="complex"),
    Column("partial_bus"),
    *_PARTIAL,
)
_FAULT = (
    Column("level", "V"),
    Column("c"),
    *(Column(f"current_{phase}", "A", family="complex") for phase in "abc"),
    Column("earth", "A", family="complex"),
    *(Column(f"sequence_{n}", "A", family="complex") for n in "012"),
    *(Column(f"check_{phase}", "A", family="complex") for phase in "abc"),
    Column("x_over_r"),
    Column("peak_factor"),
    Column("peak", "A"),
    Column("asymmetrical_rms", "A"),
    Column("peak_reason"),
    Column("reason"),
)
_VOLTAGE = (
    Column("at"),
    *(Column(f"voltage_{phase}", "V", family="complex") for phase in "abc"),
)


def record_tables(
    cases: Iterable[FaultCase], study: Study, checks: Sequence[Check], cautions: Sequence[Caution]
) -> tuple[Table, ...]:
    """Terms, faults, relays and voltages where there are, the study, checks and cautions."""
    cases = list(cases)
    terms = [row for case in cases for row in _terms((case.bus, case.type), case, case.terms)]
    relays = [
        row
        for case in cases
        for relay in case.relays
        for row in _terms(
            (case.bus, case.type, relay.branch, relay.bus), case, relay.terms, relay.total
        )
    ]
    voltages = [
        (case.bus, case.type, bus, *phases)
        for case in cases
        for bus, phases in case.voltages.items()
    ]
    tables = [
        _table("terms", (*_KEYS, *_TERM), terms),
        _table("faults", (*_KEYS, *_FAULT), [_fault(case, study) for case in cases]),
    ]
    if relays:
        place = (Column("branch"), Column("relay_bus"))
        tables.append(_table("relay terms", (*_KEYS, *place, *_TERM), relays))
        tables.append(_relays(cases))
    if voltages:
        tables.append(_table("voltages", (*_KEYS, *_VOLTAGE), voltages))
    return (*tables, study.table(), *proof_tables(checks, cautions))


def proof_tables(checks: Sequence[Check], cautions: Sequence[Caution]) -> Iterator[Table]:
    """The checks and the cautions, a row each."""
    columns = (Column("check"), Column("value"), Column("limit"), Column("passed"))
    yield _table(
        "checks",
        columns,
        [(c.name, float(c.value), c.limit, "yes" if c.passed else "no") for c in checks],
    )
    yield _table(
        "cautions", (Column("code"), Column("caution")), [(c.code, c.message) for c in cautions]
    )


def _table(name: str, columns: tuple[Column, ...], rows: Iterable[Sequence[Cell]]) -> Table:
    return Table(name, (), columns, Table.rows_of(list(rows)), name=name)


def _terms(
    keys: tuple[str, ...],
    case: FaultCase,
    terms: Sequence[FaultTerm],
    total: complex | None = None,
) -> Iterator[tuple[Cell, ...]]:
    sums = sums_of(terms, case.total if total is None else total)
    for term, plain, running in zip(terms, sums.terms, sums.running_sums, strict=True):
        partial: tuple[Cell, ...] = term.partial or ("", "", "")
        yield (
            *keys, case.phase, term.source, term.kind, term.parallel, term.contribution, sums.share(plain),
            sums.gross_share(plain), running, term.partial_bus or "", *partial,
        )  # fmt: skip


def _fault(case: FaultCase, study: Study) -> tuple[Cell, ...]:
    check: tuple[Cell, ...] = case.check or ("", "", "")
    return (
        case.bus, case.type, case.volts, study.factors.get(case.bus, ""), *case.phases, case.earth, *case.sequence, *check,
        case.x_over_r, case.peak_factor, case.peak, case.asymmetrical_rms, case.no_peak,
        "; ".join(case.reasons),
    )  # fmt: skip


def _relays(cases: Iterable[FaultCase]) -> Table:
    columns = (
        *_KEYS,
        Column("branch"),
        Column("relay_bus"),
        Column("parallel"),
        *(Column(f"current_{phase}", "A", family="complex") for phase in "abc"),
        Column("infeed_factor", family="ratio"),
        Column("impedance", "ohm", family="complex"),
        Column("reason"),
    )
    rows = [
        (case.bus, case.type, relay.branch, relay.bus, relay.parallel, *relay.phases,
         relay.infeed_factor, relay.impedance, relay.blind)
        for case in cases
        for relay in case.relays
    ]  # fmt: skip
    return _table("relays", columns, rows)
