"""The kind `capacitor-bank`."""

from __future__ import annotations

from dataclasses import dataclass

from equiv.threephase.declaring import Field, Kind
from equiv.threephase.entered import Earthing, Entered, scaled
from equiv.threephase.model import Bus, Shunt, View


@dataclass(frozen=True, kw_only=True)
class CapacitorBank(Kind, Shunt):
    """A bank of capacitors in star or delta.

    Written:  capacitor-bank NAME BUS Q U neutral EARTHING
    Equation: Z = -j·U²/Q
    Notes:    U is the voltage that Q is rated at, the bus's nominal one where it is not given. Its star
              point is open unless `neutral` says how it is earthed. It is not in the
              equivalent-source method.
    Example:  capacitor-bank C3 BOARD 600 kvar
    Source:   common practice.
    """

    kind = "capacitor-bank"
    fields = (
        Field("power", ("var",), needed=True),
        Field("rated_voltage", ("V",)),
        Field("neutral_earthing", ("ohm",), "neutral", form="earthing", complex=True),
    )

    bus: Bus
    power: Entered
    rated_voltage: Entered | None = None
    neutral_earthing: Earthing | None = None

    def series(self, sequence: int, view: View) -> complex | None:
        if not sequence and self.neutral() is None:
            return None
        volts = self.bus.volts if self.rated_voltage is None else self.rated_voltage.real
        reactance = -(volts**2) / self.power.real
        return scaled(complex(0.0, reactance), view.reactances) / self.count

    def neutral(self) -> complex | None:
        earthing = None if self.neutral_earthing is None else self.neutral_earthing.ohms
        return None if earthing is None else earthing / self.count

    def stays(self, view: View) -> bool:
        return view.basis != "equivalent-source"
