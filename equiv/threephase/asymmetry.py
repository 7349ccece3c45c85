"""The d.c. component of a fault current: X/R, peak and first cycle, where there is one."""

from __future__ import annotations

import math
from typing import NamedTuple

from equiv.threephase.standard import SLOW, asymmetry_factor, peak_factor

NO_RESISTANCE = 1e-12
"""A resistance (or a capacitive reactance) below this part of the impedance is none."""
CAPACITIVE = "the fault loop is capacitive, and this method has no peak then"
NO_CURRENT = "no current in the fault"


class Asymmetry(NamedTuple):
    """X/R, peak factor, peak and first-cycle rms (A); None where `reason` says why.

    Without a resistance X/R alone is None.
    """

    x_over_r: float | None
    peak_factor: float | None
    peak: float | None
    asymmetrical_rms: float | None
    reason: str = ""


def asymmetry(per_volt: complex, slow: complex, largest: float) -> Asymmetry:
    """What follows from the fault loop, whose I1 per volt is `per_volt`.

    `slow` is I1 per volt at 0.4 of the frequency, `largest` the largest phase current (A).
    Source: IEC 60909-0:2016, 8.1, method (c); IEEE Std 551 (from memory).
    """
    if not per_volt or not slow or not largest:
        return Asymmetry(None, None, None, None, NO_CURRENT)
    loop, slow_loop = 1 / per_volt, 1 / slow
    if _capacitive(loop) or _capacitive(slow_loop):
        return Asymmetry(None, None, None, None, CAPACITIVE)
    resistive = abs(loop.real) > NO_RESISTANCE * abs(loop)
    ratio = loop.imag / loop.real if resistive else None
    r_over_x = SLOW * slow_loop.real / slow_loop.imag if slow_loop.imag > 0 else math.inf
    kappa = peak_factor(r_over_x)
    first = asymmetry_factor(math.inf if ratio is None else ratio)
    return Asymmetry(ratio, kappa, kappa * math.sqrt(2) * largest, first * largest)


def _capacitive(loop: complex) -> bool:
    return loop.imag < -NO_RESISTANCE * abs(loop)
