"""The kind `load`."""

from __future__ import annotations

import cmath
import math
from dataclasses import dataclass

from equiv.threephase.declaring import Field, Kind
from equiv.threephase.entered import Earthing, Entered, Factor, scaled
from equiv.threephase.model import Bus, Shunt, View


@dataclass(frozen=True, kw_only=True)
class Load(Kind, Shunt):
    """A load of constant impedance, balanced.

    Written:  load NAME BUS S|P cosphi C neutral EARTHING
    Equation: Z = Un²/S*, S = P + jQ at nominal voltage
    Notes:    cosphi is 1 where it is not given, and lags unless `lead` stands behind it. It has a path
              for zero-sequence current only where its star point is earthed (`neutral`). It is not in
              the equivalent-source method.
    Example:  load Lighting BOARD 380 kW cosphi 0.94
    Source:   common practice.
    """

    kind = "load"
    fields = (
        Field("power", ("VA", "W"), needed=True),
        Field("cosphi", ("", "%"), "cosphi", form="factor", bounds="up to one"),
        Field("neutral_earthing", ("ohm",), "neutral", form="earthing", complex=True),
    )

    bus: Bus
    power: Entered
    cosphi: Factor | None = None
    neutral_earthing: Earthing | None = None

    def series(self, sequence: int, view: View) -> complex | None:
        if not sequence and self.neutral() is None:
            return None
        angle = 0.0 if self.cosphi is None else self.cosphi.angle
        apparent = self.power.real / (math.cos(angle) if self.power.unit == "W" else 1.0)
        impedance = cmath.rect(self.bus.volts**2 / apparent, angle)
        return scaled(impedance, view.reactances) / self.count

    def neutral(self) -> complex | None:
        earthing = None if self.neutral_earthing is None else self.neutral_earthing.ohms
        return None if earthing is None else earthing / self.count

    def stays(self, view: View) -> bool:
        return view.basis != "equivalent-source"
