"""The kind `admittance`."""

from __future__ import annotations

from equiv.elements.element import Element, Field
from equiv.elements.laws import Across, Column, Pen, Through


class Admittance(Element):
    """A complex admittance, known at the file's frequency only.

    Written:  admittance NAME a b VALUE
    Equation: i = Y·v
    Off:      it stays as it is.
    Example:  admittance Y1 a b 1-3j mS
    Source:   common practice.
    """

    __slots__ = ()

    kind = "admittance"
    fields = (Field("value", ("S",), complex=True),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(some.branch(), Across(some.pair(), some.value), Through(some.branch(), -1))

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        pen.current(some.branch(), Across(some.pair(), some.value))
