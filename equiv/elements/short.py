"""The kind `short`."""

from __future__ import annotations

from equiv.elements.element import Element
from equiv.elements.laws import Across, Column, Pen


class Short(Element):
    """A wire whose current can be asked for and sensed.

    Written:  short NAME a b
    Equation: v = 0
    Off:      it stays as it is.
    Notes:    It stands where a voltage source was switched off.
    Example:  short S1 a b
    Source:   common practice.
    """

    __slots__ = ()

    kind = "short"

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(some.branch(), Across(some.pair()))
