"""The band of a matching network between its half-power points, found in the network itself."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from typing import NamedTuple

from equiv.analyses.matching.ladder import Ladder
from equiv.analyses.matching.source import TURN, OverFrequency

REACH = 1000.0
"""How many times the match frequency, up and down, a half-power point is looked for."""
_FIRST, _GROWTH = 1e-5, 1.25
_HALF = 0.5


class Band(NamedTuple):
    """Frequencies (Hz) where the load's power is half of that at the match; None: none in reach."""

    low: float | None
    high: float | None

    @property
    def width(self) -> float | None:
        """The bandwidth (Hz)."""
        return None if self.low is None or self.high is None else self.high - self.low

    def covers(self, low: float, high: float) -> bool:
        """Whether a band that is needed lies within."""
        return (self.low or 0.0) <= low and high <= (self.high or math.inf)


def half_power_band(over: OverFrequency, ladder: Ladder, load: complex) -> Band:
    """From the match outwards to the first frequency, each way, with half the load's power.

    The source network has its own frequency dependence; the load is held constant.
    """
    middle = over.source.frequency.hertz
    start = _power(over, ladder, load, middle)
    if not start:
        return Band(None, None)

    def excess(shift: float) -> float | None:
        power = _power(over, ladder, load, middle * math.exp(shift))
        return None if power is None else power / start - _HALF

    edges = [_edge(excess, sign) for sign in (-1, 1)]
    low, high = (None if edge is None else middle * math.exp(edge) for edge in edges)
    return Band(low, high)


def _power(over: OverFrequency, ladder: Ladder, load: complex, hertz: float) -> float | None:
    seen = over.at(hertz)
    return None if seen is None else ladder.load_power(hertz * TURN, *seen, load)


def _shifts() -> Iterator[float]:
    shift = _FIRST
    while shift < math.log(REACH):
        yield shift
        shift *= _GROWTH
    yield math.log(REACH)


def _edge(excess: Callable[[float], float | None], sign: int) -> float | None:
    """The first shift on a side where the excess is zero."""
    inside, above = 0.0, _HALF
    for shift in _shifts():
        value = excess(sign * shift)
        if value is None:
            continue
        if value <= 0:
            return _root(excess, (inside, above), (sign * shift, value))
        inside, above = sign * shift, value
    return None


def _root(
    excess: Callable[[float], float | None], one: tuple[float, float], two: tuple[float, float]
) -> float:
    """The zero between two shifts: false position, halving the weight of an end that stays."""
    (a, fa), (b, fb) = one, two
    side = 0
    for _ in range(100):
        c = (a * fb - b * fa) / (fb - fa)
        fc = excess(c)
        if fc is None or abs(fc) <= 1e-11 or c in (a, b):
            return c
        if (fc > 0) == (fa > 0):
            a, fa = c, fc
            fb = fb / 2 if side == -1 else fb
            side = -1
        else:
            b, fb = c, fc
            fa = fa / 2 if side == 1 else fa
            side = 1
    return c
