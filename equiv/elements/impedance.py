"""The kind `impedance`."""

from __future__ import annotations

from equiv.elements.element import Element, Field
from equiv.elements.laws import Across, Column, Pen, Through


class Impedance(Element):
    """A complex impedance, known at the file's frequency only.

    Written:  impedance NAME a b VALUE
    Equation: v = Z·i
    Off:      it stays as it is.
    Notes:    0 ohm is a short.
    Example:  impedance Z1 a b 0.5+2.1j ohm
    Source:   common practice.
    """

    __slots__ = ()

    kind = "impedance"
    fields = (Field("value", ("ohm",), complex=True),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(some.branch(), Across(some.pair()), Through(some.branch(), -some.value))

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        shorts, others = some.split(some.value == 0)
        pen.equation(shorts.branch(), Across(shorts.pair()))
        pen.current(others.branch(), Across(others.pair(), 1 / others.value))
