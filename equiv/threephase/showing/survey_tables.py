"""Faults at many buses: one table a type, buses against sources."""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np

from equiv.analyses.tables import Cell, Column, Table
from equiv.equations.layout import Numbers
from equiv.threephase.showing.setting import Setting
from equiv.threephase.words import TYPE_WORDS, basis_words, impedance_words, level_words

MOST_SHOWN = 4
"""Sources that have a column of their own; the others are added where there are more."""
MOST_COMPARED = 12
"""Sources up to which those that give most are the same at most buses."""


class Survey(NamedTuple):
    """Faults of one type: at each bus the current, its terms, and what follows from them."""

    type: str
    phase: str
    buses: Sequence[str]
    sources: Sequence[str]
    totals: Numbers
    """The current (A) of `phase` at each bus."""
    terms: Numbers
    """What each source (column) gives to it."""
    x_over_r: Sequence[float | None]
    peaks: Sequence[float]


def survey_table(setting: Setting, survey: Survey, digits: int) -> Table:
    """Magnitudes at every bus: the fault current, the terms of sources, X/R and peak."""
    if len(survey.sources) > MOST_COMPARED:
        middle, cells, notes = _by_bus(survey)
    else:
        middle, cells, notes = _by_source(survey)
    totals = np.abs(survey.totals).tolist()
    rows: list[list[Cell]] = [
        [bus, level_words(setting.levels[bus]), totals[n], *cells[n],
         survey.x_over_r[n], survey.peaks[n]]
        for n, bus in enumerate(survey.buses)
    ]  # fmt: skip
    columns = (
        Column("bus", key=True),
        Column("level", key=True),
        Column("fault current", "A", family="i"),
        *middle,
        Column("X/R"),
        Column("peak", "A", family="i"),
    )
    about = (
        f"Magnitudes of each source's {setting.term} in phase {survey.phase}: as phasors they add "
        "to the fault current. Angles and partial currents: --as csv or --json."
    )
    name, phases = TYPE_WORDS[survey.type]
    return Table(
        setting.title or "Fault currents",
        (
            f"{name} at each bus{phases}",
            impedance_words(survey.type, setting.fault_impedance, setting.ground_impedance, digits),
            basis_words(setting.basis, setting.case),
            f"{setting.hertz}, rms; at the level of each bus",
        ),
        columns,
        Table.rows_of(rows),
        (about, *notes),
        name=f"survey, {survey.type}",
    )


def _by_source(survey: Survey) -> tuple[list[Column], list[list[Cell]], list[str]]:
    """A column a source; where there are many the largest, and the others together."""
    shown, rest = _largest(survey)
    columns = [Column(survey.sources[k], "A", family="i") for k in shown]
    parts = np.abs(survey.terms[:, shown])
    if not rest:
        return columns, parts.tolist(), []
    columns.append(Column("others", "A", family="i"))
    others = np.abs(survey.terms[:, rest].sum(axis=1))
    note = (
        f"The {MOST_SHOWN} sources that give most have a column; others is the phasor sum of the "
        f"other {len(rest)}, which --as csv and --json give one by one."
    )
    return columns, np.column_stack([parts, others]).tolist(), [note]


def _largest(survey: Survey) -> tuple[list[int], list[int]]:
    """The sources with the largest terms against the fault currents, and the others."""
    count = len(survey.sources)
    if count <= MOST_SHOWN + 1:
        return list(range(count)), []
    totals = np.abs(survey.totals)
    weights = np.where(totals > 0, 1 / np.where(totals > 0, totals, 1), 0)
    order = np.argsort(-(weights @ np.abs(survey.terms)), kind="stable")
    return sorted(map(int, order[:MOST_SHOWN])), sorted(map(int, order[MOST_SHOWN:]))


def _by_bus(survey: Survey) -> tuple[list[Column], list[list[Cell]], list[str]]:
    """At each bus the source that gives most, by name, and the others together."""
    rows = np.arange(len(survey.buses))
    largest = np.argmax(np.abs(survey.terms), axis=1)
    own = survey.terms[rows, largest]
    others = np.abs(survey.terms.sum(axis=1) - own).tolist()
    columns = [
        Column("largest source"),
        Column("gives", "A", family="i"),
        Column("others", "A", family="i"),
    ]
    sizes = np.abs(own).tolist()
    cells: list[list[Cell]] = [
        [survey.sources[k], size, other]
        for k, size, other in zip(largest.tolist(), sizes, others, strict=True)
    ]
    note = (
        f"There are {len(survey.sources)} sources: at each bus the one that gives most, and the "
        "phasor sum of the others. --as csv and --json give them one by one, as far as half a "
        "million terms go."
    )
    return columns, cells, [note]
