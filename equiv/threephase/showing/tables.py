"""One fault as tables to be read and signed."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from equiv.analyses.result import Check
from equiv.analyses.superposition.terms import NOTABLE_CANCELLATION
from equiv.analyses.tables import Cell, Column, Measure, Row, Table
from equiv.threephase.cases import STAR_POINT, FaultCase, FaultTerm, Phases
from equiv.threephase.showing.setting import Setting, name_of, place_words, source_words
from equiv.threephase.showing.state_tables import partials_table, voltages_table
from equiv.threephase.showing.sums import sums_of
from equiv.threephase.words import (
    NETWORK_WORDS,
    STAR_POINT_WORDS,
    basis_words,
    fault_words,
    impedance_words,
    level_words,
    phase_of,
    residual,
)

AGREEMENT = 1e-9
"""How far phase currents may be from those in phase coordinates, relative to the largest."""


def case_tables(setting: Setting, case: FaultCase, digits: int) -> Iterator[Table]:
    """Currents, peak, the term-by-term table, partial currents, voltages."""
    yield _currents(setting, case, digits)
    if any(case.phases):
        yield _peak(setting, case)
    yield term_table(setting, case)
    if case.type != "three-phase" and any(term.partial for term in case.terms):
        yield partials_table(setting, case)
    if case.voltages:
        yield voltages_table(setting, case)


def _currents(setting: Setting, case: FaultCase, digits: int) -> Table:
    check = case.check
    zero, positive, negative = case.sequence
    again: Sequence[Cell] = ("",) * 4 if check is None else (*check, residual(check))
    rows: list[tuple[Cell, Cell, Cell]] = [
        ("phase a", case.phases.a, again[0]),
        ("phase b", case.phases.b, again[1]),
        ("phase c", case.phases.c, again[2]),
        ("to earth, 3·I0", case.earth, again[3]),
        ("positive sequence", positive, ""),
        ("negative sequence", negative, ""),
        ("zero sequence", zero, ""),
    ]
    columns = (
        Column("current into the fault", key=True),
        Column("value", "A", family="i"),
        Column("check in phase coordinates", "A", family="i"),
    )
    shown = 2 if check is None else 3
    notes = [f"{reason[0].upper()}{reason[1:]}." for reason in case.reasons]
    if check is not None and any(case.phases):  # a current of zero has no relative difference
        off = disagreement(case.phases, check)
        name = "difference of phase currents and phase coordinates, relative"
        notes.append(Check(name, off, AGREEMENT).sentence())
    return Table(
        setting.title or "Fault currents",
        (
            fault_words(case),
            impedance_words(
                case.type, setting.fault_impedance, setting.ground_impedance, digits),
            basis_words(setting.basis, setting.case) + setting.source_words(case),
            *setting.before,
            f"{setting.hertz}, phasors are rms; currents at {level_words(case.volts)}; angles "
            f"count from the no-load voltage of phase a at {case.bus}",
        ),
        columns[:shown],
        Table.rows_of([row[:shown] for row in rows]),
        tuple(notes),
        name=name_of(case, "currents"),
    )  # fmt: skip


def disagreement(found: Phases, again: Phases) -> float:
    """The largest difference of phase currents, relative to the largest (not zero)."""
    off = max(abs(a - b) for a, b in zip(found, again, strict=True))
    return off / max(map(abs, found))


def _peak(setting: Setting, case: FaultCase) -> Table:
    rows: list[list[Cell]] = [
        ["X/R of the fault loop", _measure(case.x_over_r, ""),
         f"with the fault's impedance, {setting.hertz}"],
        ["peak factor", _measure(case.peak_factor, ""),
         f"1.02 + 0.98 exp(-3 R/X), R/X by the {setting.slow} method (IEC 60909-0)"],
        ["peak current", _measure(case.peak, "A"), "peak factor · √2 · largest phase current"],
        ["first-cycle rms", _measure(case.asymmetrical_rms, "A"),
         "√(1 + 2 exp(-2π R/X)) · largest phase current: half a cycle, with its d.c. component"],
    ]  # fmt: skip
    columns = (Column("peak and first cycle", key=True), Column("value"), Column("how"))
    return Table("Peak and first cycle", (), columns, Table.rows_of(rows), _no_peak(case),
                 name=name_of(case, "peak"))  # fmt: skip


def _measure(value: float | None, unit: str) -> Cell:
    return None if value is None else Measure(value, unit)


def _no_peak(case: FaultCase) -> tuple[str, ...]:
    return (f"{case.no_peak[0].upper()}{case.no_peak[1:]}.",) if case.no_peak else ()


def term_table(setting: Setting, case: FaultCase) -> Table:
    """The terms of the fault current beside the partial currents of their sources."""
    return Table(
        f"{setting.term.capitalize()}s in the fault current of phase {case.phase}",
        (f"{fault_words(case)}; positive out of the phase into the fault",),
        *columns_and_rows(case.terms, case.total, case.phase, setting),
        tuple(_term_notes(setting, case)),
        name=name_of(case, "terms"),
    )


def columns_and_rows(
    terms: Sequence[FaultTerm], total: complex, phase: str, setting: Setting
) -> tuple[tuple[Column, ...], tuple[Row, ...]]:
    """No., source, term, shares, running sum; partial current and its place."""
    sums = sums_of(terms, total)
    partials = any(term.partial for term in terms)
    columns = [
        Column("no.", key=True),
        Column("source", key=True),
        Column(setting.term, "A", repeat=True, family="term"),
        Column("in-phase share", "%"),
        Column("gross share", "%"),
        Column("running sum", "A", family="term"),
    ]
    if partials:
        columns += [Column(f"partial current, phase {phase}", "A", family="part"), Column("at")]
    rows = []
    for number, (term, plain) in enumerate(zip(terms, sums.terms, strict=True), 1):
        row: list[Cell] = [
            number, source_words(term), term.contribution, sums.share(plain), sums.gross_share(plain),
            sums.running_sums[number - 1],
        ]  # fmt: skip
        rows.append(
            Row((*row, *_partial_cells(term, phase, setting.levels))) if partials else Row((*row,))
        )
    blank = ["", ""] if partials else []
    whole: Cell = "" if sums.cancels_to_nothing else 1.0
    rows.append(Row(("", "sum", sums.total, whole, "", "", *blank), total=True))
    rows.append(Row(("", "all at once", total, "", "", "", *blank), total=True))
    return tuple(columns), tuple(rows)


def _partial_cells(term: FaultTerm, phase: str, levels: dict[str, float]) -> list[Cell]:
    if term.partial is None:
        return ["", "several buses" if term.kind == "group" else ""]
    return [phase_of(term.partial, phase), place_words(term, levels)]


def _term_notes(setting: Setting, case: FaultCase) -> Iterator[str]:
    yield sum_note(case.terms, case.total)
    yield from setting.together(member for term in case.terms for member in term.members)
    if setting.basis == "equivalent-source":
        yield (
            "Contribution: what of the source's partial current goes into the fault, at "
            f"{level_words(case.volts)}. Partial current: what it delivers from its own terminals "
            "during the fault, at its own level."
        )
        if any(term.kind == STAR_POINT for term in case.terms):
            yield STAR_POINT_WORDS
        if any(term.kind == "network" for term in case.terms):
            yield NETWORK_WORDS
        return
    yield (
        f"Term: what the source's EMF drives through the fault in phase {case.phase}, every other "
        f"EMF off, at {level_words(case.volts)}. Partial current: what the source delivers from "
        "its own terminals during the fault, at its own level."
    )
    yield (
        "The two are the same only where no load, no line charging and no unequal EMFs intervene"
        + _how_near(setting, case)
    )


def sum_note(terms: Sequence[FaultTerm], total: complex) -> str:
    """The check of the terms' sum, and what it costs where they cancel."""
    sums = sums_of(terms, total)
    words = Check("difference of sum and all at once, relative", sums.difference, AGREEMENT)
    if (sums.cancellation or 0) <= NOTABLE_CANCELLATION:
        return words.sentence()
    return (
        f"{words.sentence()}. The terms cancel: their magnitudes add to "
        f"{sums.cancellation:.3g} times the total."
    )


def _how_near(setting: Setting, case: FaultCase) -> str:
    """How far terms and partial currents of a three-phase fault are apart, levels allowed for."""
    if case.type != "three-phase":
        return (
            ", and in an unbalanced fault only where a source has the same share in every "
            "sequence and no vector group lies between."
        )
    apart = [
        (abs(abs(t.contribution) - abs(t.partial.a) * setting.levels[t.partial_bus] / case.volts),
         t.source)
        for t in case.terms
        if t.partial is not None and t.partial_bus is not None
    ]  # fmt: skip
    if not apart or not case.total:
        return "."
    most, source = max(apart)
    part = most / abs(case.total)
    if part < 1e-6:
        return ": here they are the same, by the ratio of the nominal voltages."
    return (
        f": here they are up to {100 * part:.2g} % of the fault current apart ({source}), by the "
        "ratio of the nominal voltages."
    )
