"""The kind `reactor`."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass, field

from equiv.threephase.declaring import IMPEDANCE, Field, Kind, Problem
from equiv.threephase.entered import RELATIVE, Entered, ohms, scaled
from equiv.threephase.kinds.infeed import no_base
from equiv.threephase.model import Bus, Link, View


@dataclass(frozen=True, kw_only=True)
class Reactor(Kind, Link):
    """A current-limiting reactor in series, one coil a phase.

    Written:  reactor NAME A > B x OHMS x/r R, or reactor NAME A > B CURRENT x PERCENT x/r R
    Equation: Z = X/(x/r) + j·X; in per cent of Un/(√3·In)
    Notes:    The current is the rated one. x0 is x where it is not given: coils that are not
              coupled. A per-unit value without a rated current is on the file's `base`.
    Example:  reactor Tie BOARD_A > BOARD_B 1.2 kA x 6% x/r 70
    Source:   IEC 60909-0:2016, 6.5 (from memory).
    """

    kind = "reactor"
    connection = "A > B"
    fields = (
        Field("current", ("A",)),
        Field("x", IMPEDANCE, "x", needed=True),
        Field("x0", IMPEDANCE, "x0"),
        Field("x_over_r", keyword="x/r"),
    )

    first: Bus
    second: Bus
    x: Entered
    current: Entered | None = None
    x0: Entered | None = None
    x_over_r: Entered | None = None
    base: float | None = field(default=None, compare=False)

    def series(self, sequence: int, view: View) -> complex | None:
        volts = self.first.volts
        power = self.base if self.current is None else math.sqrt(3) * volts * self.current.real
        reactance = self.x if sequence else self.x0 or self.x
        size = ohms(reactance, volts, power or math.nan).real
        ratio = math.inf if self.x_over_r is None else self.x_over_r.real
        resistance = ohms(self.x, volts, power or math.nan).real / ratio
        return scaled(complex(resistance, size), view.reactances) / self.count

    def problems(self) -> Iterator[Problem]:
        for name in ("x", "x0"):
            value = getattr(self, name)
            if value and value.unit in RELATIVE and self.base is None and self.current is None:
                yield no_base(self.name, name)
