"""A fault result as a whole: which tables it has, and what stands at their end."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING, Any

from equiv.analyses.result import Caution
from equiv.analyses.tables import Table
from equiv.threephase.showing.data import fault_data
from equiv.threephase.showing.records import record_tables
from equiv.threephase.showing.relay_tables import relay_surveys, relay_tables
from equiv.threephase.showing.setting import Setting
from equiv.threephase.showing.study import study_of
from equiv.threephase.showing.survey_tables import survey_table
from equiv.threephase.showing.tables import case_tables
from equiv.threephase.showing.trimmed import kept_terms, trimmed, trimmed_words
from equiv.threephase.standard import equivalent_frequency, voltage_factor
from equiv.threephase.words import before_words

if TYPE_CHECKING:
    from equiv.threephase.fault import FaultResult

_MOST_LABELS = 20


def fault_tables(result: FaultResult, digits: int) -> tuple[Table, ...]:
    """Each fault in full where buses were named; else a table a type over all buses."""
    return (*_tables(result, setting_of(result), digits), closing(result))


def _tables(result: FaultResult, setting: Setting, digits: int) -> Iterator[Table]:
    if len(result.surveys):
        yield from (survey_table(setting, survey, digits) for survey in result.surveys)
        yield from relay_surveys(setting, result.cases)
        return
    for case in result.cases:
        yield from case_tables(setting, case, digits)
        for relay in case.relays:
            yield from relay_tables(setting, case, relay, digits)


def setting_of(result: FaultResult) -> Setting:
    """What the faults have in common."""
    system = result.network
    return Setting(
        system.title, system.frequency_words, f"{equivalent_frequency(system.hertz):g} Hz",
        result.basis, result.case, result.fault_impedance, result.ground_impedance,
        {bus.name: bus.volts for bus in system.buses.values()}, _factors(result),
        {item.name: item.count for item in system.items.values() if item.count > 1},
        before_words(system) if result.basis == "superposition" else (),
    )  # fmt: skip


def _factors(result: FaultResult) -> dict[str, float]:
    """The voltage factor c of each bus, where the source is at the fault."""
    if result.basis == "superposition":
        return {}
    buses = result.network.buses.values()
    return {bus.name: voltage_factor(bus.volts, result.case, bus.tolerance) for bus in buses}


def closing(result: FaultResult) -> Table:
    """Checks of all faults, cautions, what the sources are called, the file's notes."""
    system = result.network
    # in full, a fault says under its own table what terms and partial currents are
    said = () if len(result.surveys) else ("partial-currents",)
    cautions = [c for c in result.cautions if c.code not in said]
    labels = [f"{item.name}: {item.label}" for item in system.items.values() if item.label]
    notes = (
        *(check.sentence() for check in result.checks),
        *(f"Caution: {caution.message}" for caution in cautions),
        *([f"Items. {'; '.join(labels[:_MOST_LABELS])}."] if labels else []),
        *(f"Note: {note}" for note in system.notes),
    )
    return Table("Checks, cautions and notes", notes=notes, name="checks")


def fault_records(result: FaultResult) -> tuple[Table, ...]:
    """A row a term, a row a fault: for spreadsheets and programs."""
    kept = kept_terms(result.cases)
    more = () if kept is None else (Caution("largest-terms", trimmed_words(kept)),)
    return record_tables(
        trimmed(result.cases, kept),
        study_of(result, _factors(result)),
        result.checks,
        (*result.cautions, *more),
    )


def result_data(result: FaultResult) -> dict[str, Any]:
    """The `result` of the JSON object."""
    cases = trimmed(result.cases, kept_terms(result.cases))
    return fault_data(cases, study_of(result, _factors(result)))
