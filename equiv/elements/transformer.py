"""The kind `transformer`."""

from __future__ import annotations

from equiv.elements.element import Element, Field
from equiv.elements.laws import Across, Column, Pen, Through


class Transformer(Element):
    """An ideal transformer.

    Written:  transformer NAME +p -q +s -t ratio n1:n2
    Equation: v1/v2 = n1/n2 and n1·i1 + n2·i2 = 0
    Off:      it stays as it is.
    Notes:    V and I of it are those of the first pair; V2 and I2 those of the second.
    Example:  transformer T1 +p -q +s -t ratio 10:1
    Source:   common practice.
    """

    __slots__ = ()

    kind = "transformer"
    role = "device"
    connection = "+p -q +s -t"
    pairs = ((0, 1), (2, 3))
    fields = (Field("ratio", ("", ""), keyword="ratio", form="ratio"),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        n1, n2 = some.parameter("ratio", 0), some.parameter("ratio", 1)
        first, second = some.branch(0), some.branch(1)
        pen.equation(first, Across(some.pair(0), n2), Across(some.pair(1), -n1))
        pen.equation(second, Through(first, n1), Through(second, n2))
