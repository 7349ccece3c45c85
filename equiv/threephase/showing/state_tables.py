"""What a fault does elsewhere, as tables: partial currents of the sources, voltages of the buses."""

from __future__ import annotations

from equiv.analyses.tables import Column, Table
from equiv.threephase.cases import FaultCase, Phases
from equiv.threephase.showing.setting import Setting, name_of, place_words, source_words
from equiv.threephase.words import fault_words, level_words

MOST_VOLTAGES = 24
"""Buses whose voltages are shown in a table; the lowest where there are more."""


def partials_table(setting: Setting, case: FaultCase) -> Table:
    """What each source delivers from its own terminals, in each phase."""
    columns = (
        Column("source", key=True),
        Column("at", key=True),
        *(Column(f"phase {phase}", "A", family="part") for phase in "abc"),
    )
    rows = [
        (source_words(term), place_words(term, setting.levels), *term.partial)
        for term in case.terms
        if term.partial is not None
    ]
    notes = (
        "Out of each source's terminals into its bus, at its own level; the shifts of the vector "
        "groups are in the angles.",
    )
    return Table("Partial currents in the three phases", (fault_words(case),), columns,
                 Table.rows_of(rows), notes, name=name_of(case, "partial currents"))  # fmt: skip


def voltages_table(setting: Setting, case: FaultCase) -> Table:
    """Each bus's phase voltages to earth; the lowest where there are many buses."""
    columns = (
        Column("bus", key=True),
        Column("level", key=True),
        *(Column(f"phase {phase}", "V", family="u") for phase in "abc"),
    )
    buses = list(case.voltages)
    notes = ["Phase to earth, during the fault."]
    if len(buses) > MOST_VOLTAGES:
        lowest = sorted(buses, key=lambda bus: _depth(case.voltages[bus], setting.levels[bus]))
        kept = {case.bus, *lowest[:MOST_VOLTAGES]}
        notes.append(f"The {len(kept)} lowest of {len(buses)} buses; --json has them all.")
        buses = [bus for bus in buses if bus in kept]
    rows = [(bus, level_words(setting.levels[bus]), *case.voltages[bus]) for bus in buses]
    return Table("Bus voltages during the fault", (fault_words(case),), columns,
                 Table.rows_of(rows), tuple(notes), name=name_of(case, "voltages"))  # fmt: skip


def _depth(phases: Phases, volts: float) -> float:
    return min(map(abs, phases)) / volts
