"""A matching network in preferred values: every neighbouring pair, ranked, with its yield."""

from __future__ import annotations

from itertools import product
from typing import NamedTuple

import numpy as np

from equiv.analyses.matching.ladder import Ladder, return_loss
from equiv.analyses.matching.source import TURN, OverFrequency
from equiv.analyses.preferred import Series, neighbours

SEED = 20250301
SAMPLES = 4000


class Wanted(NamedTuple):
    """What a matching network must do, and what its parts are made in.

    `return_loss` (dB) is what a made network must have, over the `band` (Hz, around the match
    frequency) if there is one; `tolerance` is the fraction that a part's value may be off.
    """

    series: Series | None = None
    tolerance: float = 0.0
    return_loss: float = 10.0
    band: float | None = None

    def span(self, hertz: float) -> tuple[float, float] | None:
        """The lowest and highest frequency of the band (Hz)."""
        return None if self.band is None else (hertz - self.band / 2, hertz + self.band / 2)

    def frequencies(self, hertz: float) -> tuple[float, ...]:
        """Where the return loss counts: at the match, and at both ends of the band."""
        span = self.span(hertz)
        return (hertz,) if span is None else (span[0], hertz, span[1])


NOTHING_WANTED = Wanted()


class Preferred(NamedTuple):
    """Values for the parts, the least return loss over the band, the loss and the yield.

    `loss_db` is what the load takes less than the available power at the match frequency.
    """

    values: tuple[float, ...]
    return_loss_db: float
    loss_db: float
    yielded: float


def preferred_values(
    over: OverFrequency, ladder: Ladder, load: complex, wanted: Wanted
) -> tuple[Preferred, ...]:
    """Every choice of the preferred values next to the exact ones, best return loss first."""
    assert wanted.series is not None
    choices = np.array(
        list(
            product(
                *(
                    (p.value,) if p.kind == "line" else neighbours(p.value, wanted.series)
                    for p in ladder.parts
                )
            )
        )
    )
    least = least_return_loss(over, ladder, load, wanted, choices)
    hertz = over.source.frequency.hertz
    _, share = ladder.response(
        hertz * TURN, over.source.impedance, load, list(np.atleast_2d(choices).T)
    )
    yields = [_yield(over, ladder, load, wanted, values) for values in choices]
    found = [
        Preferred(tuple(map(float, values)), float(rl), float(-10 * np.log10(s)), y)
        for values, rl, s, y in zip(choices, least, share, yields, strict=True)
    ]
    return tuple(sorted(found, key=lambda p: (-p.return_loss_db, p.values)))


def least_return_loss(
    over: OverFrequency, ladder: Ladder, load: complex, wanted: Wanted, values: np.ndarray
) -> np.ndarray:
    """The least return loss (dB) over the band, for each row of part values."""
    least = np.full(len(values), np.inf)
    for hertz in wanted.frequencies(over.source.frequency.hertz):
        seen = over.at(hertz)
        if seen is None:  # the open port has no solution there: nothing is matched
            return np.zeros(len(values))
        reflection, _ = ladder.response(hertz * TURN, seen[1], load, list(values.T))
        least = np.minimum(least, return_loss(reflection))
    return least


def _yield(
    over: OverFrequency, ladder: Ladder, load: complex, wanted: Wanted, values: np.ndarray
) -> float:
    """The fraction of networks made with these parts that has the return loss that is wanted.

    Values are drawn evenly within the tolerance, with the same seed each time; a line is exact.
    """
    draw = np.random.default_rng(SEED)
    off = draw.uniform(-wanted.tolerance, wanted.tolerance, (SAMPLES, len(values)))
    off[:, [p.kind == "line" for p in ladder.parts]] = 0.0
    made = least_return_loss(over, ladder, load, wanted, values * (1 + off))
    return float(np.mean(made >= wanted.return_loss))
