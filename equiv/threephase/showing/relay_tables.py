"""What a relay sees, as tables: its current term by term, infeed, apparent impedance."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from equiv.analyses.tables import Cell, Column, Table
from equiv.equations.words import listed
from equiv.threephase.cases import FaultCase, Relay
from equiv.threephase.showing.setting import Setting
from equiv.threephase.showing.tables import columns_and_rows, sum_note
from equiv.threephase.words import (
    LOOP_WORDS,
    NO_IMPEDANCE,
    NO_INFEED,
    TYPE_WORDS,
    fault_words,
    level_words,
    ohms,
    residual,
)
from equiv.units import say


def relay_tables(setting: Setting, case: FaultCase, relay: Relay, digits: int) -> Iterator[Table]:
    """The relay's phase currents, and its terms with infeed factor and apparent impedance."""
    where = _where(setting, relay)
    name = f"{case.type} at {case.bus}, {relay.branch} at {relay.bus}"
    yield Table(
        f"What a relay in {relay.branch} at {relay.bus} sees",
        (fault_words(case), where),
        (Column("current into the branch", key=True), Column("value", "A")),
        Table.rows_of(
            [
                *((f"phase {p}", i) for p, i in zip("abc", relay.phases, strict=True)),
                ("residual, 3·I0", residual(relay.phases)),
            ]
        ),
        tuple(_relay_notes(case, relay, digits)),
        name=f"relay currents, {name}",
    )
    columns, rows = columns_and_rows(relay.terms, relay.total, case.phase, setting)
    yield Table(
        f"Terms of the relay's current in phase {case.phase}",
        (fault_words(case), where),
        columns,
        rows,
        _term_notes(setting, relay),
        name=f"relay terms, {name}",
    )


def _where(setting: Setting, relay: Relay) -> str:
    level = level_words(setting.levels[relay.bus])
    one = f", one of {relay.parallel} in parallel" if relay.parallel > 1 else ""
    return f"Into {relay.branch}{one}, at {relay.bus} ({level}), positive from {relay.bus} into it"


def relay_surveys(setting: Setting, cases: Sequence[FaultCase]) -> Iterator[Table]:
    """A table a relay and type: what it sees of a fault at each bus."""
    for kind in dict.fromkeys(case.type for case in cases):
        mine = [case for case in cases if case.type == kind]
        for number, first in enumerate(mine[0].relays):
            yield _relay_survey(setting, [(case, case.relays[number]) for case in mine], first)


def _relay_survey(setting: Setting, seen: Sequence[tuple[FaultCase, Relay]], relay: Relay) -> Table:
    kind = seen[0][0].type
    columns = (
        Column("fault at", key=True),
        *(Column(f"phase {phase}", "A", family="i") for phase in "abc"),
        Column("residual, 3·I0", "A", family="i"),
        Column("infeed factor"),
        Column("apparent impedance", "ohm"),
    )
    rows: list[list[Cell]] = [
        [case.bus, *map(abs, each.phases), abs(residual(each.phases)),
         _size(each.infeed_factor), _size(each.impedance)]
        for case, each in seen
    ]  # fmt: skip
    where: dict[str, list[str]] = {}
    for case, each in seen:
        if each.blind:
            where.setdefault(each.blind, []).append(case.bus)
    notes = (
        f"Magnitudes. Impedance: {LOOP_WORDS[kind]}. Angles and terms: name the bus, or --json.",
        *(
            f"No factor and no impedance, fault at {listed(at)}: {why}."
            for why, at in where.items()
        ),
    )
    name = f"relay survey, {kind}, {relay.branch} at {relay.bus}"
    return Table(
        f"What a relay in {relay.branch} at {relay.bus} sees",
        (f"{TYPE_WORDS[kind][0]} at each bus{TYPE_WORDS[kind][1]}", _where(setting, relay)),
        columns,
        Table.rows_of(rows),
        notes,
        name=name,
    )


def _size(value: complex | None) -> float | None:
    return None if value is None else abs(value)


def _term_notes(setting: Setting, relay: Relay) -> tuple[str, ...]:
    if setting.basis == "equivalent-source":
        return ("The one source at the fault drives all of it: every EMF is zero.",)
    return (
        sum_note(relay.terms, relay.total),
        "What each EMF alone drives through the branch during the fault; what it drives through "
        "it without a fault is in it, so terms may cancel.",
    )


def _relay_notes(case: FaultCase, relay: Relay, digits: int) -> Iterator[str]:
    factor, impedance = relay.infeed_factor, relay.impedance
    if relay.blind:
        yield f"No infeed factor and no apparent impedance: {relay.blind}."
        return
    if factor is None:
        yield f"Infeed factor: none, since {NO_INFEED}."
    else:
        yield (
            f"Infeed factor: {say(factor, '', digits)} (fault-path current over the relay's, "
            f"phase {case.phase}, at the relay's level)."
        )
    if impedance is None:
        yield f"Apparent impedance: none, since {NO_IMPEDANCE}."
        return
    yield (
        f"Apparent impedance: {ohms(impedance, digits)}, {say(impedance, 'ohm', digits)}: "
        f"{LOOP_WORDS[case.type]}, at {relay.bus}."
    )
