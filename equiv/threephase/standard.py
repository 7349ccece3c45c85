"""The factors of IEC 60909-0, and of first-cycle duty by North American practice.

Sources: IEC 60909-0:2016, clauses 5 and 6 and table 1 (from memory); IEEE Std 551 (from memory).
"""

from __future__ import annotations

import cmath
import math

LOW_VOLTAGE = 1000.0
"""The highest nominal voltage (V, line to line) that counts as low voltage."""
SLOW = 0.4
"""Part of the system's frequency at which R/X is found for the peak: 20 Hz of 50 Hz."""


def voltage_factor(volts: float, case: str, tolerance: float = 0.06) -> float:
    """The factor c for a nominal voltage (V, line to line): the source at the fault is c·Un/√3.

    Above 1 kV 1.10 (`max`) and 1.00 (`min`); low voltage 1.05 and 0.95 where the supply's
    tolerance is 6 %, 1.10 and 0.90 where it is 10 %. Source: IEC 60909-0:2016, table 1.
    """
    if volts > LOW_VOLTAGE:
        return 1.10 if case == "max" else 1.00
    if tolerance > 0.06:
        return 1.10 if case == "max" else 0.90
    return 1.05 if case == "max" else 0.95


def transformer_correction(c_max: float, reactance: float) -> float:
    """K_T = 0.95 c_max / (1 + 0.6 x_T), c_max that of the low-voltage side, x_T per unit.

    Source: IEC 60909-0:2016, 6.3.3, network transformers.
    """
    return 0.95 * c_max / (1 + 0.6 * reactance)


def generator_correction(
    c_max: float, nominal: float, rated: float, reactance: float, cosphi: float
) -> float:
    """K_G = (Un/UrG) · c_max / (1 + x"d sin φ), voltages in V, x"d per unit.

    Source: IEC 60909-0:2016, 6.6.1, generators without a unit transformer.
    """
    return nominal / rated * c_max / (1 + reactance * math.sin(math.acos(cosphi)))


def peak_factor(r_over_x: float) -> float:
    """κ = 1.02 + 0.98 exp(-3 R/X): the peak is κ·√2 times the rms value.

    Source: IEC 60909-0:2016, 8.1.
    """
    return 1.02 + 0.98 * math.exp(-3 * r_over_x)


def equivalent_frequency(hertz: float) -> float:
    """The frequency at which R/X is found for the peak: 20 Hz at 50 Hz, 24 Hz at 60 Hz.

    Source: IEC 60909-0:2016, 8.1, method (c).
    """
    return SLOW * hertz


def asymmetry_factor(x_over_r: float, cycles: float = 0.5) -> float:
    """rms of the current with its direct component over the symmetrical rms, after some cycles.

    √(1 + 2 exp(-4π·cycles/(X/R))). Source: IEEE Std 551 (from memory).
    """
    return math.sqrt(1 + 2 * math.exp(-4 * math.pi * cycles / x_over_r)) if x_over_r > 0 else 1.0


def by_ratio(magnitude: float, x_over_r: float) -> complex:
    """The impedance of a magnitude (ohm) with a ratio X/R; infinite: a reactance alone."""
    return cmath.rect(magnitude, math.atan(x_over_r) if math.isfinite(x_over_r) else math.pi / 2)
