"""The kind `synchronous-motor`."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from equiv.threephase.declaring import Field, Problem
from equiv.threephase.entered import Entered, apparent_power
from equiv.threephase.kinds.generator import FIELDS, Generator
from equiv.threephase.kinds.motor import unrated
from equiv.threephase.model import View


@dataclass(frozen=True, kw_only=True)
class SynchronousMotor(Generator):
    """A synchronous motor, which feeds a fault as a generator does.

    Written:  synchronous-motor NAME BUS S|P U x1 X x2 X x0 X x/r R cosphi C efficiency E neutral EARTHING
    Equation: Z1 = R + j·x"d, Z2 = R + j·x2, Z0 = R + j·x0, R = x"d/(x/r)
    Notes:    As a generator. A power in W is that of the shaft: S = P/(efficiency·cosphi). It is
              not in the smallest fault currents.
    Example:  synchronous-motor M7 BOARD 1.8 MW 11 kV cosphi 0.9 lead efficiency 96% x1 18% x/r 25
    Source:   IEC 60909-0:2016, 6.7 (from memory).
    """

    kind = "synchronous-motor"
    fields = (
        FIELDS[0]._replace(units=("VA", "W")),
        *FIELDS[1:],
        Field("efficiency", ("", "%"), "efficiency", bounds="up to one"),
    )

    efficiency: Entered | None = None

    @property
    def power(self) -> float:
        return apparent_power(self.rated_power, self.cosphi, self.efficiency)

    def stays(self, view: View) -> bool:
        return view.case != "min"

    def problems(self) -> Iterator[Problem]:
        yield from super().problems()
        yield from unrated(self.name, self.rated_power, self.cosphi, self.efficiency)
