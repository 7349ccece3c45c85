"""A load at a port as it was found: its point, its proof, its power and efficiency."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from typing import NamedTuple

from equiv.analyses.loading.points import Line, Point
from equiv.analyses.loading.proof import Proof, SourceState
from equiv.elements.element import Frequency
from equiv.equations.scalars import scalar
from equiv.language.loads import Load


class Efficiency(NamedTuple):
    """A fraction; where there is none, the reason."""

    value: float | None
    reason: str = ""


@dataclass(frozen=True)
class LoadState:
    """One point of a load (V, A, rms), or in `words` why there is none.

    `regulation` is (|Voc| - |V|)/|V|; `most` the largest power (W) where one is too large.
    """

    number: int
    load: Load
    words: str = ""
    which: str = ""
    """`1 of 2` where a load has several points."""
    point: Point | None = None
    proof: Proof | None = None
    regulation: float | None = None
    most: float | None = None

    @property
    def exists(self) -> bool:
        """Whether there is a point."""
        return self.point is not None

    @property
    def solution(self) -> str:
        """Which point it is, or why there is none."""
        return "; ".join(filter(None, (self.which, self.words)))

    @property
    def named(self) -> str:
        """The load, and which of its points."""
        return self.load.text + (f" ({self.which})" if self.which else "")

    @property
    def power(self) -> complex | None:
        """The complex power taken by the load (VA): v·i*."""
        if self.point is None:
            return None
        return scalar(self.point.voltage) * scalar(self.point.current).conjugate()

    @property
    def efficiency(self) -> Efficiency:
        """Power taken by the load over the power of the delivering independent sources."""
        if self.power is None or self.proof is None:
            return Efficiency(None, "there is no such point")
        return efficiency(self.power.real, _given(self.proof.sources))


@dataclass(frozen=True)
class PortLoads:
    """The loads of a port at one frequency."""

    line: Line
    states: tuple[LoadState, ...]

    @property
    def frequency(self) -> Frequency:
        """The frequency."""
        return self.line.frequency


class LoadTotal(NamedTuple):
    """A load over all frequencies: rms voltage (V) and current (A), power (W), or why not."""

    number: int
    load: Load
    voltage: float | None
    current: float | None
    power: float | None
    efficiency: Efficiency
    words: str


def largest(values: Sequence[float]) -> float:
    """The largest of some differences; not a number where one of them is not."""
    return math.nan if any(map(math.isnan, values)) else max(values)


def efficiency(taken: float, given: Sequence[tuple[str, float | None]]) -> Efficiency:
    """The power taken over the sum of what the sources give that deliver."""
    unknown = [name for name, power in given if power is None]
    if unknown:
        return Efficiency(None, f"the power of {' and '.join(unknown)} is not determined")
    delivered = math.fsum(power for _, power in given if power is not None and power > 0)
    size = math.fsum(abs(power) for _, power in given if power is not None)
    if taken < 0 and abs(taken) > 1e-12 * size:
        return Efficiency(None, "the load itself gives power")
    if delivered <= 1e-12 * abs(taken) or not delivered:
        return Efficiency(None, "no independent source delivers power")
    return Efficiency(max(0.0, taken) / delivered)


def _given(sources: Sequence[SourceState]) -> list[tuple[str, float | None]]:
    return [
        (s.name, None if s.delivered is None else s.delivered.real)
        for s in sources
        if s.role == "independent"
    ]


def total(number: int, load: Load, states: Sequence[LoadState]) -> LoadTotal:
    """A load over all frequencies; powers of different frequencies add, phasors do not."""
    missing = next((s.words for s in states if not s.exists), "")
    if missing:
        none = Efficiency(None, "the load has no point at one of the frequencies")
        return LoadTotal(number, load, None, None, None, none, missing)
    points = [s.point for s in states if s.point is not None]
    power = math.fsum(s.power.real for s in states if s.power is not None)
    given: dict[str, float | None] = {}
    for state in states:
        for name, part in _given(state.proof.sources if state.proof else ()):
            before = given.get(name, 0.0)
            given[name] = None if part is None or before is None else before + part
    return LoadTotal(
        number,
        load,
        math.hypot(*(abs(p.voltage) for p in points)),
        math.hypot(*(abs(p.current) for p in points)),
        power,
        efficiency(power, list(given.items())),
        "",
    )
