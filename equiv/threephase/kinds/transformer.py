"""The kind `transformer`."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from equiv.threephase.declaring import IMPEDANCE, Field, Kind, Problem
from equiv.threephase.entered import RELATIVE, Earthing, Entered, scaled, with_ratio
from equiv.threephase.model import Bus, VectorGroup, View
from equiv.threephase.model import Transformer as TwoWindings
from equiv.threephase.standard import transformer_correction, voltage_factor
from equiv.threephase.vector_groups import turned
from equiv.threephase.words import level_words


@dataclass(frozen=True, kw_only=True)
class Transformer(Kind, TwoWindings):
    """A transformer with two windings.

    Written:  transformer NAME A > B S U1/U2 z % x/r R vector GROUP neutral1 EARTHING neutral2 EARTHING
    Equation: |Z| = z·U²/S
    Notes:    U1 and S are the ratings, U1 on the side of A. `vector` is written with the high side
              first, as on the plate, wherever A and B are. `neutral1` and `neutral2` are solid, open
              (where not given) or an impedance. z0 is that of one phase's windings, z where it is not
              given, with the ratio X/R of z. A z in ohm is seen from A's side. `tap 2.5%` raises U1
              by so much; z stays as it is entered, in per cent or in ohm. By IEC 60909-0 it is multiplied by K_T; the
              neutrals' impedances are not.
    Example:  transformer T1 GRID > MAIN 16 MVA 33/11 kV z 9.6% x/r 18 vector Dyn11 neutral2 solid
    Source:   IEC 60909-0:2016, 6.3; IEC 60076-1:2011, clause 7 (from memory).
    """

    kind = "transformer"
    connection = "A > B"
    fields = (
        Field("rated_power", ("VA",), needed=True),
        Field("rated_voltages", ("V",), form="voltages", needed=True),
        Field("z", IMPEDANCE, "z", complex=True, needed=True),
        Field("z0", IMPEDANCE, "z0", complex=True),
        Field("x_over_r", keyword="x/r"),
        Field("vector", keyword="vector", form="group", needed=True),
        Field("neutral1", ("ohm",), "neutral1", form="earthing", complex=True),
        Field("neutral2", ("ohm",), "neutral2", form="earthing", complex=True),
        Field("tap", ("%",), "tap", bounds="any"),
    )

    first: Bus
    second: Bus
    rated_power: Entered
    rated_voltages: tuple[Entered, Entered]
    z: Entered
    vector: VectorGroup
    """As on the plate: the high side first."""
    z0: Entered | None = None
    x_over_r: Entered | None = None
    neutral1: Earthing | None = None
    neutral2: Earthing | None = None
    tap: Entered | None = None

    @property
    def high_first(self) -> bool:
        """Whether the side named first has the higher voltage (or the same)."""
        first, second = self.rated_voltages
        return first.real >= second.real

    @property
    def group_of_windings(self) -> VectorGroup:  # type: ignore[override]
        return self.vector if self.high_first else turned(self.vector)

    @property
    def rated(self) -> tuple[float, float]:  # type: ignore[override]
        first, second = self._plate
        return first * self._tap, second

    @property
    def power(self) -> float:
        """The rated apparent power (VA) of one transformer."""
        return self.rated_power.real

    def series(self, sequence: int, view: View) -> complex:
        entered = self.z if sequence or self.z0 is None else self.z0
        first = (self.rated if entered.unit in RELATIVE else self._plate)[0]
        impedance = self._per_unit(entered) * first**2 / self.power * self._correction(view)
        return scaled(impedance, view.reactances) / self.count

    def neutral(self, side: int) -> complex | None:
        earthing = self.neutral1 if side == 1 else self.neutral2
        ohms = None if earthing is None else earthing.ohms
        return None if ohms is None else ohms / self.count

    def problems(self) -> Iterator[Problem]:
        group = self.group_of_windings
        for side, winding in ((1, group.first), (2, group.second)):
            if self.neutral(side) is not None and not winding.neutral_out:
                volts = level_words(self.rated_voltages[side - 1].real)
                message = (
                    f"neutral{side} is on the {volts} side of {self.name}, "
                    "which has no star point brought out"
                )
                hint = "an N in the vector group brings it out, as in Dyn11 or YNd1"
                yield Problem("no-star-point", message, f"neutral{side}", hint)
        if self.tap is not None and not -0.5 < self.tap.real < 0.5:
            yield Problem("bad-tap", "a tap lies within 50 % up or down", "tap")

    @property
    def _plate(self) -> tuple[float, float]:
        """The rated voltages (V) without the tap."""
        first, second = self.rated_voltages
        return first.real, second.real

    @property
    def _tap(self) -> float:
        return 1.0 if self.tap is None else 1.0 + self.tap.real

    def _per_unit(self, entered: Entered) -> complex:
        """An impedance in per unit of the rating, with its angle."""
        size = entered.number
        if entered.unit not in RELATIVE:
            size *= self.power / self._plate[0] ** 2
        return with_ratio(size, self.x_over_r)

    def _correction(self, view: View) -> float:
        """K_T, in the equivalent-source method."""
        if view.basis != "equivalent-source":
            return 1.0
        low = self.second if self.high_first else self.first
        c_max = voltage_factor(low.volts, "max", low.tolerance)
        return transformer_correction(c_max, self._per_unit(self.z).imag)
