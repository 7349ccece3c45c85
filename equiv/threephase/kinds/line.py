"""The kind `line`."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass, field

from equiv.threephase.declaring import Field, Kind, Problem
from equiv.threephase.entered import RELATIVE, Entered, ohms, scaled, with_ratio
from equiv.threephase.kinds.infeed import no_base
from equiv.threephase.model import Bus, Link, View

_SERIES = ("ohm/km", "ohm", "%", "pu")
_SHUNT = ("S/km", "S")


@dataclass(frozen=True, kw_only=True)
class Line(Kind, Link):
    """A cable or an overhead line.

    Written:  line NAME A > B LENGTH z1 OHMS/KM z0 OHMS/KM b1 S/KM b0 S/KM count N
    Equation: Z = z·length; half of j·b·length at each end
    Notes:    Without a length, z1 and z0 are in ohm (or per unit on the file's `base`) and b1 and
              b0 in S. `count` lines are in parallel. Without z0, earth faults beyond it have no
              answer. A real z1 is a resistance, unless x/r stands beside it. Resistances are taken as
              they are entered: at 20 degC for the largest currents, at the conductor's temperature
              at the end of the fault for the smallest. b1 is
              not in the equivalent-source method, b0 is.
    Example:  line C1 MAIN > PUMP 1.2 km z1 0.161+0.093j ohm/km z0 0.72+0.28j ohm/km count 2
    Source:   IEC 60909-0:2016, 6.4 (from memory).
    """

    kind = "line"
    connection = "A > B"
    fields = (
        Field("length", ("m",)),
        Field("z1", _SERIES, "z1", complex=True, needed=True),
        Field("z0", _SERIES, "z0", complex=True),
        Field("b1", _SHUNT, "b1", bounds="not negative"),
        Field("b0", _SHUNT, "b0", bounds="not negative"),
        Field("x_over_r", keyword="x/r"),
    )

    first: Bus
    second: Bus
    z1: Entered
    length: Entered | None = None
    z0: Entered | None = None
    b1: Entered | None = None
    b0: Entered | None = None
    x_over_r: Entered | None = None
    base: float | None = field(default=None, compare=False)

    @property
    def lacks_zero_sequence(self) -> bool:
        return self.z0 is None

    def series(self, sequence: int, view: View) -> complex | None:
        entered = self.z1 if sequence else self.z0
        if entered is None:
            return None
        whole = self._whole(entered)
        if self.x_over_r is not None:
            whole = with_ratio(whole, self.x_over_r)
        return scaled(whole, view.reactances) / self.count

    def charging(self, sequence: int, view: View) -> complex:
        entered = self.b1 if sequence else self.b0
        if entered is None or (sequence and view.basis == "equivalent-source"):
            return 0j
        return scaled(1j * self._whole(entered).real, view.reactances) * self.count

    def problems(self) -> Iterator[Problem]:
        for name in ("z1", "z0", "b1", "b0"):
            value = getattr(self, name)
            if value is None:
                continue
            if value.unit.endswith("/km") and self.length is None:
                message = f"{self.name} has a value per km and no length"
                hint = "the length stands behind the buses, as in: A > B 1.2 km"
                yield Problem("missing-length", message, name, hint)
            if value.unit in RELATIVE and self.base is None:
                yield no_base(self.name, name)

    def _whole(self, entered: Entered) -> complex:
        """What a value comes to over the whole length."""
        if entered.unit.endswith("/km"):
            assert self.length is not None
            return entered.number * self.length.real / 1e3
        return ohms(entered, self.first.volts, self.base or math.nan)
