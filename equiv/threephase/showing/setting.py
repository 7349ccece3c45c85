"""What all faults of a result have in common, and the names of rows and places in their tables."""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Iterable, Iterator, Sequence
from typing import NamedTuple

from equiv.equations.words import listed
from equiv.threephase.cases import STAR_POINT, FaultCase, FaultTerm
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

    counts: dict[str, int]
    """How many there are of each item of which there are several in parallel."""
    before: tuple[str, ...] = ()
    """The voltage before the fault, in words, where it is not the nominal one."""

    def together(self, names: Iterable[str]) -> Iterator[str]:
        """That what several items in parallel give is that of all of them."""
        several = [name for name in names if name in self.counts]
        if several:
            words = (f"{name}: {self.counts[name]} in parallel together" for name in several)
            yield f"{'; '.join(words)}."

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

    def factor_words(self, buses: Sequence[str]) -> str:
        """The voltage factors c of a survey: `; c = 1.10 at 110 kV and 20 kV, 1.05 at 400 V`."""
        levels: dict[float, dict[str, list[str]]] = {}
        for bus in buses if self.factors else ():
            level = level_words(self.levels[bus])
            levels.setdefault(self.factors[bus], {}).setdefault(level, []).append(bus)
        # one level may have two factors, by the tolerance of its supply: then its buses are named
        seen = Counter(level for at in levels.values() for level in at)
        parts = [
            f"{c:.2f} at " + listed(
                [f"{level} ({listed(on)})" if seen[level] > 1 else level for level, on in at.items()]
            )
            for c, at in levels.items()
        ]  # fmt: skip
        return f"; c = {', '.join(parts)}" if parts else ""


def name_of(case: FaultCase, what: str) -> str:
    """What tells a table from the others of a result."""
    return f"{what}, {case.type} at {case.bus}"


def source_words(term: FaultTerm) -> str:
    """The name of a row: of a transformer that earths it is its star point that gives."""
    return f"{term.source} star point" if term.kind == STAR_POINT else term.source


def place_words(term: FaultTerm, levels: dict[str, float]) -> str:
    """Bus and level of a partial current: `MAIN, 6.6 kV`."""
    if term.partial_bus is None:
        return ""
    return f"{term.partial_bus}, {level_words(levels[term.partial_bus])}"
