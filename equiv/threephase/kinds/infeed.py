"""The kind `infeed`."""

from __future__ import annotations

import cmath
import math
from collections.abc import Iterator
from dataclasses import dataclass, field

from equiv.threephase.declaring import IMPEDANCE, Field, Kind, Problem
from equiv.threephase.entered import RELATIVE, Entered, ohms, scaled, source_voltage, with_ratio
from equiv.threephase.model import Bus, Shunt, View
from equiv.threephase.standard import by_ratio, voltage_factor


@dataclass(frozen=True, kw_only=True)
class Infeed(Kind, Shunt):
    """A supply from outside the system, known by its short-circuit level or its impedance.

    Written:  infeed NAME BUS level LEVEL x/r R z0/z1 K, or infeed NAME BUS z1 OHMS z0 OHMS
    Equation: |Z1| = Un²/S"k (times c by IEC 60909-0), Z2 = Z1
    Notes:    `level` and `level1` are the three-phase and the line-to-earth fault levels, in MVA
              or kA. Without x/r the impedance is a reactance alone, unless it is entered as complex.
              The zero sequence is given by `z0/z1`, by `level1` or by `z0`, its angle by `x0/r0`
              (else that of x/r); without any, earth faults that it reaches have no answer.
              `voltage 1.02 pu @ 0 deg` is the EMF, in per unit of the bus's nominal voltage or in kV
              line to line; its angle counts from the bus's no-load angle. z1 and z0 in per unit are
              on the file's `base`.
    Example:  infeed Utility GRID level 900 MVA x/r 12 z0/z1 1.3
    Source:   IEC 60909-0:2016, 6.2 (from memory).
    """

    kind = "infeed"
    grouped = True
    fields = (
        Field("level", ("VA", "A"), "level"),
        Field("level1", ("VA", "A"), "level1"),
        Field("x_over_r", keyword="x/r"),
        Field("z0_over_z1", keyword="z0/z1"),
        Field("x0_over_r0", keyword="x0/r0"),
        Field("z1", IMPEDANCE, "z1", complex=True),
        Field("z0", IMPEDANCE, "z0", complex=True),
        Field("voltage", ("pu", "%", "V"), "voltage", complex=True),
    )

    bus: Bus
    level: Entered | None = None
    level1: Entered | None = None
    x_over_r: Entered | None = None
    z0_over_z1: Entered | None = None
    x0_over_r0: Entered | None = None
    z1: Entered | None = None
    z0: Entered | None = None
    voltage: Entered | None = None
    base: float | None = field(default=None, compare=False)

    @property
    def drives(self) -> bool:
        return True

    @property
    def lacks_zero_sequence(self) -> bool:
        return self.z0_over_z1 is None and self.level1 is None and self.z0 is None

    def series(self, sequence: int, view: View) -> complex | None:
        positive = self._positive(view)
        impedance = positive if sequence else self._zero(positive, view)
        return None if impedance is None else scaled(impedance, view.reactances) / self.count

    def neutral(self) -> complex | None:
        return None if self.lacks_zero_sequence else 0j

    def emf(self, view: View) -> complex | None:
        return source_voltage(self.voltage, self.bus.volts)

    def problems(self) -> Iterator[Problem]:
        if (self.level is None) == (self.z1 is None):
            message = "an infeed has either a short-circuit level or z1"
            hint = "as in: level 900 MVA x/r 12, or: z1 0.4+3.6j ohm"
            yield Problem("wrong-choice", message, "level" if self.level else "", hint)
        zeros = [n for n in ("z0", "level1", "z0_over_z1") if getattr(self, n) is not None]
        if len(zeros) > 1:
            yield Problem("wrong-choice", "the zero sequence is given twice", zeros[-1])
        for name in ("z1", "z0"):
            value = getattr(self, name)
            if value is not None and value.unit in RELATIVE and self.base is None:
                yield no_base(self.name, name)
        if self.level1 is not None and (self.level or self.base or not _relative(self.z1)):
            yield from self._too_high()

    def _positive(self, view: View) -> complex:
        if self.level is None:
            return self._entered(self.z1)
        size = self._factor(view) * self.bus.volts**2 / self._power(self.level)
        return with_ratio(size, self.x_over_r)

    def _zero(self, positive: complex, view: View) -> complex | None:
        ratio = self.x0_over_r0
        if self.z0 is not None:
            return with_ratio(self._entered(self.z0), ratio or self.x_over_r)
        if self.z0_over_z1 is not None:
            times = self.z0_over_z1.real
            if ratio is None:
                return times * positive
            return by_ratio(times * abs(positive), ratio.real)
        if self.level1 is None:
            return None
        # c goes with both levels or with none: z1 in ohm is not multiplied by it
        whole = self._loop_of_level1() * (1.0 if self.level is None else self._factor(view))
        turn = cmath.phase(positive) if ratio is None else math.atan(ratio.real)
        return cmath.rect(_remainder(whole, 2 * positive, turn), turn)

    def _loop_of_level1(self) -> float:
        """|Z1 + Z2 + Z0| (ohm) of the line-to-earth level, without c."""
        assert self.level1 is not None
        return 3 * self.bus.volts**2 / self._power(self.level1)

    def _entered(self, value: Entered | None) -> complex:
        assert value is not None
        found = ohms(value, self.bus.volts, self.base or math.nan)
        return with_ratio(found, self.x_over_r)

    def _factor(self, view: View) -> float:
        if view.basis != "equivalent-source":
            return 1.0
        return voltage_factor(self.bus.volts, view.case, self.bus.tolerance)

    def _power(self, level: Entered) -> float:
        return level.real * (math.sqrt(3) * self.bus.volts if level.unit == "A" else 1.0)

    def _too_high(self) -> Iterator[Problem]:
        if self.level is None and self.z1 is None:
            return
        if self._loop_of_level1() < 2 * abs(self._positive(View())):
            message = "level1 is so high that z0 were negative"
            hint = "the line-to-earth level is at most one and a half times the three-phase one"
            yield Problem("bad-level", message, "level1", hint)


def _relative(value: Entered | None) -> bool:
    return value is not None and value.unit in RELATIVE


def _remainder(whole: float, part: complex, turn: float) -> float:
    """The magnitude m at an angle so that |part + m∠turn| is `whole`."""
    along = part.real * math.cos(turn) + part.imag * math.sin(turn)
    across = abs(part) ** 2 - along**2
    return math.sqrt(max(whole**2 - across, 0.0)) - along


def no_base(name: str, value: str) -> Problem:
    """That a per-unit value cannot be turned into ohms."""
    return Problem(
        "unknown-base",
        f"{name} has no rating that its per-unit {value} could be on",
        value,
        "say the base of the file, as in: base 100 MVA, or give the value in ohm",
    )
