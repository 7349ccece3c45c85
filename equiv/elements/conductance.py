"""The kind `conductance`."""

from __future__ import annotations

from equiv.elements.element import Element, Field
from equiv.elements.laws import Across, Column, Pen, Through


class Conductance(Element):
    """A conductance.

    Written:  conductance NAME a b VALUE
    Equation: i = G·v
    Off:      it stays as it is.
    Notes:    0 S is open. A negative value is allowed, with a warning.
    Example:  conductance Gx a b 2 mS
    Source:   common practice.
    """

    __slots__ = ()

    kind = "conductance"
    fields = (Field("value", ("S",)),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(some.branch(), Across(some.pair(), some.value), Through(some.branch(), -1))

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        pen.current(some.branch(), Across(some.pair(), some.value))
