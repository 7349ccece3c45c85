"""The kind `generator`."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass
from typing import ClassVar

from equiv.threephase.declaring import IMPEDANCE, Field, Kind, Problem
from equiv.threephase.entered import (
    Earthing,
    Entered,
    Factor,
    apparent_power,
    ohms,
    scaled,
    source_voltage,
)
from equiv.threephase.model import Bus, Shunt, View
from equiv.threephase.standard import generator_correction, voltage_factor
from equiv.threephase.words import level_words

FIELDS = (
    Field("rated_power", ("VA",), needed=True),
    Field("rated_voltage", ("V",), needed=True),
    Field("x1", IMPEDANCE, "x1", needed=True),
    Field("x2", IMPEDANCE, "x2"),
    Field("x0", IMPEDANCE, "x0"),
    Field("x_over_r", keyword="x/r"),
    Field("cosphi", ("", "%"), "cosphi", form="factor", bounds="up to one"),
    Field("neutral_earthing", ("ohm",), "neutral", form="earthing", complex=True),
    Field("voltage", ("pu", "%", "V"), "voltage", complex=True),
)
COMMON_COSPHI = 0.8


@dataclass(frozen=True, kw_only=True)
class Generator(Kind, Shunt):
    """A synchronous generator: an EMF behind its subtransient reactance.

    Written:  generator NAME BUS S U x1 X x2 X x0 X x/r R cosphi C neutral EARTHING voltage E
    Equation: Z1 = R + j·x"d, Z2 = R + j·x2, Z0 = R + j·x0, R = x"d/(x/r)
    Notes:    x1 is x"d; x2 is x1 where it is not given. Reactances are in % or pu of the machine's
              own rating, or in ohm. Without x/r the impedance is a reactance alone. `neutral` is
              solid, open (where it is not given) or an impedance; with a neutral that is earthed
              and no x0, earth faults that it reaches have no answer. By IEC 60909-0 all three are
              multiplied by K_G, with cosphi 0.8 where it is not given (common practice); the
              neutral's impedance is not. `voltage` is the EMF, in pu of the rated voltage or in kV
              line to line; its angle counts from the bus's no-load angle.
    Example:  generator G1 BOARD 2.5 MVA 11 kV x1 14% x2 16% x0 5% x/r 30 neutral 18 ohm
    Source:   IEC 60909-0:2016, 6.6 (from memory).
    """

    kind = "generator"
    grouped = True
    fields: ClassVar[tuple[Field, ...]] = FIELDS

    bus: Bus
    rated_power: Entered
    rated_voltage: Entered
    x1: Entered
    x2: Entered | None = None
    x0: Entered | None = None
    x_over_r: Entered | None = None
    cosphi: Factor | None = None
    neutral_earthing: Earthing | None = None
    voltage: Entered | None = None

    @property
    def drives(self) -> bool:
        return True

    @property
    def power(self) -> float:
        """The rated apparent power (VA) of one machine."""
        return apparent_power(self.rated_power)

    @property
    def lacks_zero_sequence(self) -> bool:
        return self.x0 is None and self.neutral() is not None

    def series(self, sequence: int, view: View) -> complex | None:
        entered = {1: self.x1, 2: self.x2 or self.x1, 0: self.x0}[sequence]
        if entered is None:
            return None
        first = self._reactance(self.x1)
        resistance = 0.0 if self.x_over_r is None else first / self.x_over_r.real
        impedance = complex(resistance, self._reactance(entered)) * self._correction(view)
        return scaled(impedance, view.reactances) / self.count

    def neutral(self) -> complex | None:
        earthing = None if self.neutral_earthing is None else self.neutral_earthing.ohms
        return None if earthing is None else earthing / self.count

    def emf(self, view: View) -> complex | None:
        return source_voltage(self.voltage, self.rated_voltage.real)

    def problems(self) -> Iterator[Problem]:
        yield from rated_apart(self, self.rated_voltage, self.bus)

    def _reactance(self, entered: Entered) -> float:
        return ohms(entered, self.rated_voltage.real, self.power).real

    def _correction(self, view: View) -> float:
        """K_G, in the equivalent-source method."""
        if view.basis != "equivalent-source":
            return 1.0
        c_max = voltage_factor(self.bus.volts, "max", self.bus.tolerance)
        rated = self.rated_voltage.real
        per_unit = self._reactance(self.x1) * self.power / rated**2
        cosphi = COMMON_COSPHI if self.cosphi is None else math.cos(self.cosphi.angle)
        return generator_correction(c_max, self.bus.volts, rated, per_unit, cosphi)


MOST_APART = 0.25
"""How far the rated voltage of a machine may be from its bus's."""


def rated_apart(item: Shunt, rated: Entered, bus: Bus) -> Iterator[Problem]:
    """That a machine cannot be meant for its bus's voltage."""
    if abs(rated.real / bus.volts - 1) > MOST_APART:
        message = (
            f"{item.name} is rated {level_words(rated.real)}, and {bus.name} is at "
            f"{level_words(bus.volts)}"
        )
        hint = "a transformer stands between different voltages"
        yield Problem("wrong-voltage", message, "rated_voltage", hint)
