"""Values as they were entered, exactly, and the numbers that they stand for."""

from __future__ import annotations

import math
from decimal import Decimal
from typing import NamedTuple

from equiv.threephase.standard import by_ratio
from equiv.units import Rectangular, Value, as_number

RELATIVE = ("%", "pu")
"""Units that need a base."""


class Entered(NamedTuple):
    """A value in SI units, and its unit; per cent and per unit are fractions of a base.

    Lengths are in m, what lines have per length in ohm/km and S/km.
    """

    value: Value
    unit: str = ""

    @property
    def number(self) -> complex:
        """The value as a number."""
        return complex(as_number(self.value))

    @property
    def real(self) -> float:
        """The value as a real number."""
        return self.number.real

    @property
    def is_complex(self) -> bool:
        """Whether it was entered as a complex number."""
        return isinstance(self.value, Rectangular)


class Earthing(NamedTuple):
    """How a star point is earthed: by an impedance (zero where solidly), or not at all."""

    impedance: Entered | None = None

    @property
    def ohms(self) -> complex | None:
        """The impedance between star point and earth (ohm); None where it is open."""
        return None if self.impedance is None else self.impedance.number


class Factor(NamedTuple):
    """A power factor; the current lags unless it leads."""

    cosphi: Entered
    leads: bool = False

    @property
    def angle(self) -> float:
        """The angle of the complex power (rad), positive where the current lags."""
        angle = math.acos(self.cosphi.real)
        return -angle if self.leads else angle


OPEN = Earthing()
SOLID = Earthing(Entered(Decimal(0), "ohm"))


def ohms(entered: Entered, volts: float, power: float) -> complex:
    """An impedance in ohm: per cent and per unit are of U²/S, U in V (line to line), S in VA."""
    return entered.number * (volts**2 / power if entered.unit in RELATIVE else 1.0)


def with_ratio(impedance: complex, x_over_r: Entered | None) -> complex:
    """A magnitude with its ratio X/R, a reactance alone where none is given; if complex, as it is."""
    if impedance.imag:
        return impedance
    return by_ratio(impedance.real, math.inf if x_over_r is None else x_over_r.real)


def scaled(impedance: complex, factor: float) -> complex:
    """An impedance (or admittance) at another frequency: L·ω and C·ω are multiplied by a factor.

    The reactance of a capacitor, which is negative, is divided by it.
    """
    if factor == 1.0:
        return impedance
    part = impedance.imag
    return complex(impedance.real, part * factor if part >= 0 else part / factor)


def apparent_power(
    rating: Entered, factor: Factor | None = None, efficiency: Entered | None = None
) -> float:
    """The rated apparent power (VA): S, or P/(η cos φ) where a power in W is entered."""
    if rating.unit != "W" or factor is None:
        return rating.real
    return rating.real / (factor.cosphi.real * (1.0 if efficiency is None else efficiency.real))


def source_voltage(voltage: Entered | None, base: float) -> complex | None:
    """An EMF (V, phase to neutral) from a line-to-line voltage, in per unit of a base (V)."""
    if voltage is None:
        return None
    return voltage.number * (base if voltage.unit in RELATIVE else 1.0) / math.sqrt(3)
