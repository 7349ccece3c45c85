"""What is doubtful in a network or a three-phase system, and what there is in it."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass
from typing import Any, ClassVar

from equiv.analyses.check import Report
from equiv.analyses.check import check as check_network
from equiv.analyses.result import Result
from equiv.analyses.tables import Column, Table
from equiv.network import Network
from equiv.threephase.kinds import KINDS
from equiv.threephase.model import OneLine, Shunt
from equiv.threephase.plausible import implausible
from equiv.threephase.sequence.findings import doubts
from equiv.threephase.words import before_words, level_words


@dataclass(frozen=True)
class SystemReport(Result):
    """Counts of what is in a three-phase system; the doubts are its cautions."""

    command: ClassVar[str] = "check"

    counts: tuple[tuple[str, int], ...] = ()
    hertz: float = 0.0
    levels: tuple[float, ...] = ()
    """The nominal voltages of the buses (V), from the highest."""
    prefault: float = 1.0
    """The voltage before the fault where no EMF is given, per unit of the nominal."""
    before: tuple[str, ...] = ()
    """The same in words, where it is not the nominal one and some EMF follows from it."""

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """What there is, and what is doubtful."""
        words = tuple(f"Doubtful: {caution.message}" for caution in self.cautions)
        levels = ", ".join(level_words(volts) for volts in self.levels)
        return (
            Table(
                self.network.title or "Three-phase system",
                (f"Three-phase, {self.hertz:g} Hz; voltage levels: {levels}", *self.before),
                (Column("what", key=True), Column("number")),
                Table.rows_of(self.counts),
                words or ("Nothing is wrong or doubtful.",),
                name="counts",
            ),
        )

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        return {
            "counts": dict(self.counts),
            "hertz": [self.hertz],
            "kilovolts": [volts / 1e3 for volts in self.levels],
            "prefault": self.prefault,
        }


def check(network: Network | OneLine) -> Report | SystemReport:
    """What is doubtful in a network or a three-phase system, and counts of what is in it.

    Errors: none; a network without a unique solution is reported as such (`refusal`).
    """
    if isinstance(network, Network):
        return check_network(network)
    return SystemReport(
        Network({}, network.title, network.notes, origin=network.origin),
        cautions=(*doubts(network), *implausible(network)),
        counts=_counts(network),
        hertz=network.hertz,
        levels=tuple(sorted({bus.volts for bus in network.buses.values()}, reverse=True)),
        prefault=network.prefault,
        before=before_words(network),
    )


def _counts(system: OneLine) -> tuple[tuple[str, int], ...]:
    kinds = Counter(item.kind for item in system.items.values())
    sources = [i for i in system.items.values() if isinstance(i, Shunt) and i.drives]
    return (
        ("buses", len(system.buses)),
        ("items", len(system.items)),
        *((kind, kinds[kind]) for kind in KINDS if kinds[kind]),
        ("sources", len(sources)),
        ("groups of sources", len({item.group for item in sources if item.group})),
    )
