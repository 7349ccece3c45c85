"""Faults at many buses: one table a type, buses against sources."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import NamedTuple

import numpy as np

from equiv.analyses.tables import Cell, Column, Table
from equiv.equations.layout import Numbers
from equiv.equations.words import listed
from equiv.threephase.cases import STAR_POINT, STARS_AND_NETWORK
from equiv.threephase.reasons import gathered
from equiv.threephase.showing.setting import Setting
from equiv.threephase.words import (
    NETWORK_WORDS,
    STAR_POINT_WORDS,
    STARS_AND_NETWORK_WORDS,
    TYPE_WORDS,
    basis_words,
    impedance_words,
    level_words,
    sentence,
)

MOST_SHOWN = 4
"""Sources that have a column of their own; the others are added where there are more."""
BOTH = "line-line-ground"
"""The type whose phase currents differ from each other and from the current to earth."""
_FAULT_CURRENT = {
    "three-phase": "Fault current: of phase a; b and c are as large.",
    "line-ground": "Fault current: of phase a, all of it to earth, 3·I0.",
    "line-line": "Fault current: of phase b, back through c.",
    BOTH: "Fault current: of phase b. Peak: in the larger one of b and c, named beside it.",
}
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
    peaks: Sequence[float | None]
    earth: Numbers
    """The current to earth (A), 3·I0."""
    peak_phases: Sequence[str]
    """The phase with the largest current, of which the peak is."""
    kinds: Sequence[str]
    """The kind of each source: of the item, `group`, `star point` or `network`."""
    no_peaks: Sequence[str]
    """Why there is no peak, in words; empty where there is."""
    reasons: Sequence[tuple[str, str]]
    """At which buses a current is zero, and why."""


def survey_table(setting: Setting, survey: Survey, digits: int) -> Table:
    """Magnitudes at every bus: the fault current, the terms of sources, X/R and peak."""
    if len(survey.sources) > MOST_COMPARED:
        middle, cells, notes = _by_bus(survey)
    else:
        middle, cells, notes = _by_source(survey)
    totals, earth = np.abs(survey.totals).tolist(), np.abs(survey.earth).tolist()
    both = survey.type == BOTH
    rows: list[list[Cell]] = [
        [bus, level_words(setting.levels[bus]), totals[n], *([earth[n]] if both else []),
         *cells[n], survey.x_over_r[n], survey.peaks[n],
         *([survey.peak_phases[n]] if both else [])]
        for n, bus in enumerate(survey.buses)
    ]  # fmt: skip
    columns = (
        Column("bus", key=True),
        Column("level", key=True),
        Column("fault current", "A", family="i"),
        *([Column("earth, 3·I0", "A", family="i")] if both else []),
        *middle,
        Column("X/R"),
        Column("peak", "A", family="i"),
        *([Column("in")] if both else []),
    )
    name, phases = TYPE_WORDS[survey.type]
    return Table(
        setting.title or "Fault currents",
        (
            f"{name} at each bus{phases}",
            impedance_words(survey.type, setting.fault_impedance, setting.ground_impedance, digits),
            basis_words(setting.basis, setting.case) + setting.factor_words(survey.buses),
            *setting.before,
            f"{setting.hertz}, rms; at the level of each bus",
        ),
        columns,
        Table.rows_of(rows),
        (*_about(setting, survey), *notes, *_more(setting, survey)),
        name=f"survey, {survey.type}",
    )


def _about(setting: Setting, survey: Survey) -> Iterator[str]:
    """What the columns are."""
    yield (
        f"{_FAULT_CURRENT[survey.type]} Magnitudes of each source's {setting.term} in it: as "
        "phasors they add to it. Angles and partial currents: --as csv or --json."
    )


def _more(setting: Setting, survey: Survey) -> Iterator[str]:
    """What some of the rows and columns need."""
    yield from _kind_notes(survey)
    yield from setting.together(survey.sources)
    yield from _no_peak_notes(survey)
    yield from map(sentence, gathered(survey.reasons))


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
        f"Of {_counted(survey)} the {len(shown)} that give most have a column; others is the "
        f"phasor sum of the other {len(rest)}, which --as csv and --json give one by one."
    )
    return columns, np.column_stack([parts, others]).tolist(), [note]


def _largest(survey: Survey) -> tuple[list[int], list[int]]:
    """The sources with the largest terms against the fault currents, and the others."""
    count = len(survey.sources)
    most = MOST_SHOWN - 2 * (survey.type == BOTH)  # which has two more columns
    if count <= most + 1:
        return list(range(count)), []
    totals = np.abs(survey.totals)
    weights = np.where(totals > 0, 1 / np.where(totals > 0, totals, 1), 0)
    order = np.argsort(-(weights @ np.abs(survey.terms)), kind="stable")
    return sorted(map(int, order[:most])), sorted(map(int, order[most:]))


def _counted(survey: Survey) -> str:
    """What the columns could be: `4 sources, 3 star points and the network`."""
    stars, network = survey.kinds.count(STAR_POINT), "network" in survey.kinds
    sources = len(survey.kinds) - stars - network
    parts = [f"{sources} {'source' if sources == 1 else 'sources'}"]
    if stars:
        parts.append(f"{stars} {STAR_POINT if stars == 1 else 'star points'}")
    together = STARS_AND_NETWORK in survey.sources
    return listed(
        [*parts, *([STARS_AND_NETWORK if together else "the network"] if network else [])]
    )


def _kind_notes(survey: Survey) -> Iterator[str]:
    if STAR_POINT in survey.kinds:
        yield STAR_POINT_WORDS
    if STARS_AND_NETWORK in survey.sources:
        yield STARS_AND_NETWORK_WORDS
    elif "network" in survey.kinds:
        yield NETWORK_WORDS


def _no_peak_notes(survey: Survey) -> Iterator[str]:
    """Where there is no peak, and why."""
    where: dict[str, list[str]] = {}
    for bus, why in zip(survey.buses, survey.no_peaks, strict=True):
        if why:
            where.setdefault(why, []).append(bus)
    for why, buses in where.items():
        yield f"No X/R and no peak at {listed(buses)}: {why}."


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
        f"There are {_counted(survey)}: at each bus the one that gives most, and the "
        "phasor sum of the others. --as csv and --json give them one by one, as far as half a "
        "million terms go."
    )
    return columns, cells, [note]
