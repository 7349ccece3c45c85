"""The kind `resistor`."""

from __future__ import annotations

from equiv.elements.element import Element, Field
from equiv.elements.laws import Across, Column, Pen, Through


class Resistor(Element):
    """A resistance.

    Written:  resistor NAME a b VALUE
    Equation: v = R·i
    Off:      it stays as it is.
    Notes:    0 ohm is a short. A negative value is allowed, with a warning.
    Example:  resistor R1 a b 4.7 kohm
    Source:   G. S. Ohm, 1827 (common practice).
    """

    __slots__ = ()

    kind = "resistor"
    fields = (Field("value", ("ohm",)),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(some.branch(), Across(some.pair()), Through(some.branch(), -some.value))

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        shorts, others = some.split(some.value == 0)
        pen.equation(shorts.branch(), Across(shorts.pair()))
        pen.current(others.branch(), Across(others.pair(), 1 / others.value))
