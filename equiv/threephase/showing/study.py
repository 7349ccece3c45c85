"""Which study a result is, for its CSV and JSON: what its tables say in their headings."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, NamedTuple

from equiv.analyses.result import pair
from equiv.analyses.tables import Column, Table

if TYPE_CHECKING:
    from equiv.threephase.fault import FaultResult

_ANGLES = "from the no-load voltage of phase a of the faulted bus"


class Study(NamedTuple):
    """What all faults of a result have in common."""

    title: str
    types: tuple[str, ...]
    basis: str
    case: str
    hertz: float
    prefault: float | None
    """Where no EMF is given, per unit of the nominal; None where c takes its place."""
    factors: dict[str, float]
    """The voltage factor c of each bus, in the equivalent-source basis."""
    fault_impedance: complex
    ground_impedance: complex
    notes: tuple[str, ...]

    def data(self) -> dict[str, Any]:
        """The study as JSON."""
        found = self._asdict() | {
            "fault_impedance": pair(self.fault_impedance),
            "ground_impedance": pair(self.ground_impedance),
            "angles": _ANGLES,
            "types": list(self.types),
            "notes": list(self.notes),
        }
        del found["factors"]
        if self.prefault is None:
            return found | {"prefault_reason": "c is in place of it", "c": self.factors}
        return found

    def table(self) -> Table:
        """The study as a row of CSV; c stands with each fault."""
        columns = (
            Column("title"), Column("types"), Column("basis"), Column("case"),
            Column("frequency", "Hz"), Column("prefault"),
            Column("fault_impedance", "ohm", family="complex"),
            Column("ground_impedance", "ohm", family="complex"),
            Column("angles"), Column("notes"),
        )  # fmt: skip
        row = (
            self.title, "; ".join(self.types), self.basis, self.case, self.hertz,
            "" if self.prefault is None else self.prefault, self.fault_impedance,
            self.ground_impedance, _ANGLES, "; ".join(self.notes),
        )  # fmt: skip
        return Table("study", (), columns, Table.rows_of([row]), name="study")


def study_of(result: FaultResult, factors: dict[str, float]) -> Study:
    """The study that a result is; `factors` are the voltage factors of its buses."""
    system = result.network
    superposed = result.basis == "superposition"
    return Study(
        system.title, result.types, result.basis, result.case, system.hertz,
        system.prefault if superposed else None, factors,
        result.fault_impedance, result.ground_impedance, system.notes,
    )  # fmt: skip
