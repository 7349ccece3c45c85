"""The kind `inductor`."""

from __future__ import annotations

from equiv.elements.element import Element, Field
from equiv.elements.laws import Across, Column, Pen, Through


class Inductor(Element):
    """An inductance.

    Written:  inductor NAME a b VALUE
    Equation: v = s·L·i with s = jω
    Off:      it stays as it is.
    Notes:    A short at DC.
    Example:  inductor L1 a b 10 mH
    Source:   common practice.
    """

    __slots__ = ()

    kind = "inductor"
    fields = (Field("value", ("H",)),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(
            some.branch(),
            Across(some.pair()),
            Through(some.branch(), -some.s * some.value),
        )
