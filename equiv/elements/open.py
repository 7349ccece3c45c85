"""The kind `open`."""

from __future__ import annotations

from equiv.elements.element import Element
from equiv.elements.laws import Column, Pen, Through


class Open(Element):
    """No connection; its voltage can be asked for.

    Written:  open NAME a b
    Equation: i = 0
    Off:      it stays as it is.
    Notes:    It stands where a current source was switched off.
    Example:  open S2 a b
    Source:   common practice.
    """

    __slots__ = ()

    kind = "open"

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(some.branch(), Through(some.branch()))

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        pen.current(some.branch())
