"""What all faults of a result have in common, and the names of rows and places in their tables."""

from __future__ import annotations

import math
from typing import NamedTuple

from equiv.threephase.cases import FaultCase, FaultTerm
from equiv.threephase.words import level_words
from equiv.units import say


class Setting(NamedTuple):
    """What all faults of a result have in common, for their headings."""

    title: str
    hertz: str
    slow: str
    """The frequency at which R/X is found for the peak."""
    basis: str
    case: str
    fault_impedance: complex
    ground_impedance: complex
    levels: dict[str, float]
    """Nominal voltage (V, line to line) of each bus."""
    factors: dict[str, float]
    """The voltage factor c of each bus, where the source is at the fault."""

    @property
    def term(self) -> str:
        """What a row of the term-by-term table is in this basis."""
        return "term" if self.basis == "superposition" else "contribution"

    def source_words(self, case: FaultCase) -> str:
        """The voltage of the source at a fault, where there is one."""
        c = self.factors.get(case.bus)
        if c is None:
            return ""
        return f"; c = {c:.2f}, c·Un/√3 = {say(c * case.volts / math.sqrt(3), 'V')}"


def name_of(case: FaultCase, what: str) -> str:
    """What tells a table from the others of a result."""
    return f"{what}, {case.type} at {case.bus}"


def source_words(term: FaultTerm) -> str:
    """The name of a row: of a transformer that earths it is its star point that gives."""
    return f"{term.source} star point" if term.kind == "earthing" else term.source


def place_words(term: FaultTerm, levels: dict[str, float]) -> str:
    """Bus and level of a partial current: `MAIN, 6.6 kV`."""
    if term.partial_bus is None:
        return ""
    return f"{term.partial_bus}, {level_words(levels[term.partial_bus])}"
