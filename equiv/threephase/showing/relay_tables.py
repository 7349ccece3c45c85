"""What a relay sees, as tables: its current term by term, infeed, apparent impedance."""

from __future__ import annotations

from collections.abc import Iterator

from equiv.analyses.tables import Column, Table
from equiv.threephase.cases import FaultCase, Relay
from equiv.threephase.showing.setting import Setting
from equiv.threephase.showing.tables import columns_and_rows, sum_note
from equiv.threephase.words import LOOP_WORDS, fault_words, level_words, ohms, residual
from equiv.units import say

_TERMS = {
    "superposition": (
        "What each EMF alone drives through the branch during the fault; what it drives through "
        "it without a fault is in it, so terms may cancel."
    ),
    "equivalent-source": "The one source at the fault drives all of it: every EMF is zero.",
}


def relay_tables(setting: Setting, case: FaultCase, relay: Relay, digits: int) -> Iterator[Table]:
    """The relay's phase currents, and its terms with infeed factor and apparent impedance."""
    level = level_words(setting.levels[relay.bus])
    where = f"Into {relay.branch} at {relay.bus} ({level}), positive from {relay.bus} into it"
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
        (sum_note(relay.terms, relay.total), _TERMS[setting.basis]),
        name=f"relay terms, {name}",
    )


def _relay_notes(case: FaultCase, relay: Relay, digits: int) -> Iterator[str]:
    factor, impedance = relay.infeed_factor, relay.impedance
    if factor is None:
        yield "Infeed factor: none, since the relay sees no current."
    else:
        yield (
            f"Infeed factor: {say(factor, '', digits)} (fault-path current over the relay's, "
            f"phase {case.phase}, at the relay's level)."
        )
    if impedance is None:
        yield "Apparent impedance: none, since the current of its loop is zero."
        return
    yield (
        f"Apparent impedance: {ohms(impedance, digits)}, {say(impedance, 'ohm', digits)}: "
        f"{LOOP_WORDS[case.type]}, at {relay.bus}."
    )
