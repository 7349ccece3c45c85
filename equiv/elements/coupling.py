"""The kind `coupling`."""

from __future__ import annotations

from equiv.elements.element import Element, Field
from equiv.elements.laws import Column, Pen, Through


class Coupling(Element):
    """A magnetic coupling of two inductors.

    Written:  coupling NAME L1 L2 k VALUE, or coupling NAME L1 L2 M VALUE
    Equation: v1 = s·L1·i1 + s·M·i2, v2 = s·M·i1 + s·L2·i2, M = k·√(L1·L2)
    Off:      it stays as it is.
    Notes:    The dots are at the inductors' first nodes.
    Example:  coupling M12 L1 L2 k 0.98
    Source:   common practice.
    """

    __slots__ = ()

    kind = "coupling"
    role = "device"
    connection = "L1 L2"
    pairs = ()
    rule = "one"
    fields = (
        Field("k", ("",), keyword="k"),
        Field("M", ("H",), keyword="M"),
    )

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        (first, l1), (second, l2) = some.linked(0), some.linked(1)
        if "M" in some.variant:
            mutual = some.parameter("M")
        else:
            mutual = some.parameter("k") * some.root(l1 * l2)
        pen.add(first, Through(second, -some.s * mutual))
        pen.add(second, Through(first, -some.s * mutual))
