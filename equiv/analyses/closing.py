"""The last table of a result: its checks, its cautions, and the network's own notes."""

from __future__ import annotations

from collections.abc import Iterable

from equiv.analyses import exactness
from equiv.analyses.result import Caution, Check
from equiv.analyses.tables import Table
from equiv.network import Network

_MOST_LABELS = 20


def closing_table(
    network: Network, checks: Iterable[Check], cautions: Iterable[Caution], *remarks: str
) -> Table:
    """What proves the result, what to know before relying on it, and what the file notes."""
    labels = [f"{e.name}: {e.options.label}" for e in network.sources if e.options.label]
    notes = [
        *(check.sentence() for check in checks),
        *remarks,
        *exactness.remarks(network),
        *(f"Caution: {caution.message}" for caution in cautions),
        *([f"Sources. {'; '.join(labels[:_MOST_LABELS])}."] if labels else []),
        *(f"Note: {note}" for note in network.notes),
    ]
    return Table("Checks, cautions and notes", notes=tuple(notes), name="checks")
