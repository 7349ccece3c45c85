"""The kind `gyrator`."""

from __future__ import annotations

from equiv.elements.element import Element, Field
from equiv.elements.laws import Across, Column, Pen, Through


class Gyrator(Element):
    """A gyrator.

    Written:  gyrator NAME +a -b +c -d r VALUE
    Equation: v1 = -r·i2 and v2 = r·i1
    Off:      it stays as it is.
    Notes:    V and I of it are those of the first pair; V2 and I2 those of the second.
    Example:  gyrator N1 +a -b +c -d r 1 kohm
    Source:   B. D. H. Tellegen, The gyrator, a new electric network element, 1948.
    """

    __slots__ = ()

    kind = "gyrator"
    role = "device"
    connection = "+a -b +c -d"
    pairs = ((0, 1), (2, 3))
    fields = (Field("value", ("ohm",), keyword="r"),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        first, second = some.branch(0), some.branch(1)
        pen.equation(first, Across(some.pair(0)), Through(second, some.value))
        pen.equation(second, Across(some.pair(1)), Through(first, -some.value))

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        nulls, others = some.split(some.value == 0)
        cls.law(nulls, pen)
        pen.current(others.branch(0), Across(others.pair(1), 1 / others.value))
        pen.current(others.branch(1), Across(others.pair(0), -1 / others.value))
