"""The kind `motor`."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from equiv.threephase.declaring import Field, Kind, Problem
from equiv.threephase.entered import (
    Entered,
    Factor,
    apparent_power,
    scaled,
    source_voltage,
    with_ratio,
)
from equiv.threephase.kinds.generator import rated_apart
from equiv.threephase.model import Bus, Shunt, View


@dataclass(frozen=True, kw_only=True)
class Motor(Kind, Shunt):
    """An asynchronous motor, known by its starting current.

    Written:  motor NAME BUS P|S U cosphi C efficiency E start RATIO x/r R
    Equation: |Z1| = U²/S / start, S = P/(efficiency·cosphi), Z2 = Z1
    Notes:    `start` is the locked-rotor current over the rated current. A power in W is that of
              the shaft. There is no path for zero-sequence current. It is not in the smallest fault
              currents. Without x/r the impedance is a reactance alone. `voltage` is the EMF, as a
              generator's.
    Example:  motor M1 BOARD 560 kW 6.6 kV cosphi 0.88 efficiency 95% start 5.8 x/r 8 count 3
    Source:   IEC 60909-0:2016, 6.7 (from memory).
    """

    kind = "motor"
    grouped = True
    fields = (
        Field("rated_power", ("W", "VA"), needed=True),
        Field("rated_voltage", ("V",), needed=True),
        Field("cosphi", ("", "%"), "cosphi", form="factor", bounds="up to one"),
        Field("efficiency", ("", "%"), "efficiency", bounds="up to one"),
        Field("start", keyword="start", needed=True),
        Field("x_over_r", keyword="x/r"),
        Field("voltage", ("pu", "%", "V"), "voltage", complex=True),
    )

    bus: Bus
    rated_power: Entered
    rated_voltage: Entered
    start: Entered
    cosphi: Factor | None = None
    efficiency: Entered | None = None
    x_over_r: Entered | None = None
    voltage: Entered | None = None

    @property
    def drives(self) -> bool:
        return True

    @property
    def power(self) -> float:
        """The rated apparent power (VA) of one motor, as it takes it."""
        return apparent_power(self.rated_power, self.cosphi, self.efficiency)

    def series(self, sequence: int, view: View) -> complex | None:
        if not sequence:
            return None
        size = self.rated_voltage.real**2 / self.power / self.start.real
        return scaled(with_ratio(size, self.x_over_r), view.reactances) / self.count

    def emf(self, view: View) -> complex | None:
        return source_voltage(self.voltage, self.rated_voltage.real)

    def stays(self, view: View) -> bool:
        return view.case != "min"

    def problems(self) -> Iterator[Problem]:
        yield from rated_apart(self, self.rated_voltage, self.bus)
        yield from unrated(self.name, self.rated_power, self.cosphi, self.efficiency)


def unrated(
    name: str, power: Entered, cosphi: Factor | None, efficiency: Entered | None
) -> Iterator[Problem]:
    """That a shaft power does not give a rated current by itself."""
    missing = [n for n, v in (("cosphi", cosphi), ("efficiency", efficiency)) if v is None]
    if power.unit == "W" and missing:
        verb = "are" if len(missing) > 1 else "is"
        words = f"{' and '.join(missing)} {verb} missing"
        message = f"{name} is rated by its shaft power, and {words}"
        hint = "as in: 560 kW 6.6 kV cosphi 0.88 efficiency 95%; or give its rating in kVA"
        yield Problem("missing-rating", message, "rated_power", hint)
