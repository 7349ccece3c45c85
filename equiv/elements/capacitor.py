"""The kind `capacitor`."""

from __future__ import annotations

from equiv.elements.element import Element, Field
from equiv.elements.laws import Across, Column, Pen, Through


class Capacitor(Element):
    """A capacitance.

    Written:  capacitor NAME a b VALUE
    Equation: i = s·C·v with s = jω
    Off:      it stays as it is.
    Notes:    Open at DC.
    Example:  capacitor C1 a b 100 nF
    Source:   common practice.
    """

    __slots__ = ()

    kind = "capacitor"
    fields = (Field("value", ("F",)),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        charge = some.s * some.value
        pen.equation(some.branch(), Across(some.pair(), charge), Through(some.branch(), -1))

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        pen.current(some.branch(), Across(some.pair(), some.s * some.value))
