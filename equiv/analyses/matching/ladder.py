"""A matching network by its chain matrix, between a port's equivalent and a load.

Source: chain (abcd) parameters in cascade: D. M. Pozar, Microwave Engineering, ch. 4; reflection
between complex impedances: K. Kurokawa, Power waves and the scattering matrix, IEEE Trans.
Microwave Theory Tech. 13 (1965) (from memory).
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, NamedTuple

import numpy as np

from equiv.analyses.matching.sections import Part


class Losses(NamedTuple):
    """The Q of real coils and capacitors at the match frequency; None is lossless.

    A coil has a constant resistance in series, ωL/Q; a capacitor a constant conductance across
    it, ωC/Q.
    """

    inductor_q: float | None = None
    capacitor_q: float | None = None

    @property
    def any(self) -> bool:
        """Whether some parts are lossy."""
        return self.inductor_q is not None or self.capacitor_q is not None

    def resistance(self, inductance: Any, omega: float) -> Any:
        """The series resistance of a coil (ohm)."""
        return omega * inductance / self.inductor_q if self.inductor_q else 0.0

    def conductance(self, capacitance: Any, omega: float) -> Any:
        """The parallel conductance of a capacitor (S)."""
        return omega * capacitance / self.capacitor_q if self.capacitor_q else 0.0


LOSSLESS = Losses()


class Ladder(NamedTuple):
    """Parts between port and load, made for an angular frequency (rad/s)."""

    parts: tuple[Part, ...]
    omega: float
    losses: Losses = LOSSLESS

    @property
    def values(self) -> tuple[float, ...]:
        """The values of the parts."""
        return tuple(part.value for part in self.parts)

    def chain(self, omega: float, values: Sequence[Any]) -> tuple[Any, Any, Any, Any]:
        """A, B, C, D at a frequency, for other values of the parts (numbers or arrays)."""
        a, b, c, d = 1 + 0j, 0j, 0j, 1 + 0j
        for part, value in zip(self.parts, values, strict=True):
            if part.kind == "line":
                # its length is a quarter wave at the match frequency, and grows with frequency
                turn = np.pi / 2 * omega / self.omega
                cos, sin = np.cos(turn), 1j * np.sin(turn)
                a, b = a * cos + b * sin / value, a * sin * value + b * cos
                c, d = c * cos + d * sin / value, c * sin * value + d * cos
            elif part.position == "series":
                z = self._immittance(part, omega, value)
                b, d = b + a * z, d + c * z
            else:
                y = self._immittance(part, omega, value)
                a, c = a + b * y, c + d * y
        return a, b, c, d

    def _immittance(self, part: Part, omega: float, value: Any) -> Any:
        """The impedance of a part in series, the admittance of one in shunt."""
        if part.kind == "inductor":
            z = self.losses.resistance(value, self.omega) + 1j * omega * value
            return z if part.position == "series" else 1 / z
        y = self.losses.conductance(value, self.omega) + 1j * omega * value
        return 1 / y if part.position == "series" else y

    def response(
        self, omega: float, z: complex, load: complex, values: Sequence[Any] | None = None
    ) -> tuple[Any, Any]:
        """Reflection at the port, and load power over the power available there.

        Γ = (Zin - Z*)/(Zin + Z); power |IL|²·Re ZL over |Voc|²/(4 Re Z).
        """
        a, b, c, d = self.chain(omega, self.values if values is None else values)
        voltage, current = a * load + b, c * load + d  # at the port, for 1 A in the load
        whole = voltage + z * current
        reflection = (voltage - np.conj(z) * current) / whole
        return reflection, 4 * z.real * load.real / np.abs(whole) ** 2

    def load_power(self, omega: float, voc: complex, z: complex, load: complex) -> float:
        """The power in the load (W) for a port of this open voltage and impedance."""
        a, b, c, d = self.chain(omega, self.values)
        current = voc / (a * load + b + z * (c * load + d))
        return float(abs(current) ** 2 * load.real)


def return_loss(reflection: Any) -> Any:
    """-20 log10 |Γ| (dB): infinite for a perfect match."""
    with np.errstate(divide="ignore"):
        return -20 * np.log10(np.abs(reflection))
