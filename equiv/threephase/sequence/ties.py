"""Which buses a sequence network ties to its reference, and how the others hang together."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from typing import NamedTuple

from equiv.threephase.sequence.sequences import Charging, Missing, Part, Series, ToEarth

SAME = 1e-9
"""Ratios around a loop that agree so far carry no current of their own."""


class Ties(NamedTuple):
    """The parts of a sequence network: a label and a relative voltage for each bus."""

    label: Mapping[str, str]
    """The bus that a part is called by."""
    level: Mapping[str, float]
    """The voltage of a bus, relative to others of its part, when no current flows."""
    tied: frozenset[str]
    """The labels of the parts with a path to the reference."""
    lacking: Mapping[str, str]
    """An item without zero-sequence data, for the labels of parts that need them."""

    def is_tied(self, bus: str) -> bool:
        """Whether a bus has a path to the reference."""
        return self.label[bus] in self.tied

    def rise(self, bus: str, other: str) -> float:
        """The voltage of a bus of an untied part, per volt of another; 0 in different parts."""
        if self.label[bus] != self.label[other] or self.is_tied(other):
            return 0.0
        return self.level[bus] / self.level[other]


def ties_of(buses: Iterable[str], parts: Iterable[Part]) -> Ties:
    """The parts of a sequence network.

    A part is tied where an impedance or an admittance leads to the reference, or where the ideal
    ratios around a loop disagree: the windings then drive a current through the earth.
    """
    parts = list(parts)
    label, level, loops = _spread(list(buses), parts)
    tied = {label[bus] for bus in loops}
    tied |= {label[part.bus] for part in parts if isinstance(part, ToEarth | Charging)}
    lacking: dict[str, str] = {}
    for part in parts:
        if isinstance(part, Missing):
            for bus in part.buses:
                lacking.setdefault(label[bus], part.item.name)
    return Ties(label, level, frozenset(tied), lacking)


def _spread(
    buses: list[str], parts: list[Part]
) -> tuple[dict[str, str], dict[str, float], list[str]]:
    """Labels and levels, and a bus of each loop whose ratios disagree."""
    near: dict[str, list[tuple[str, float]]] = {bus: [] for bus in buses}
    for part in parts:
        if isinstance(part, Series):
            near[part.first].append((part.second, 1 / part.ratio))
            near[part.second].append((part.first, part.ratio))
        elif isinstance(part, Missing) and len(part.buses) == 2:
            first, second = part.buses
            near[first].append((second, 1.0))
            near[second].append((first, 1.0))
    label: dict[str, str] = {}
    level: dict[str, float] = {}
    loops = []
    for start in buses:
        if start in label:
            continue
        label[start], level[start] = start, 1.0
        queue = [start]
        for bus in queue:
            for other, ratio in near[bus]:
                if other not in label:
                    label[other], level[other] = start, level[bus] * ratio
                    queue.append(other)
                elif not math.isclose(level[other], level[bus] * ratio, rel_tol=SAME):
                    loops.append(bus)
    return label, level, loops
