"""The kind `current`."""

from __future__ import annotations

from equiv.elements.element import Field
from equiv.elements.laws import Column, Drive, Pen, Through
from equiv.elements.source import Source


class Current(Source):
    """An independent current source.

    Written:  current NAME a > b VALUE
    Equation: i(from a to b inside it) = the value
    Off:      an open of the same name.
    Notes:    A magnitude is rms unless the file says `phasors peak`.
    Example:  current Is a > b 2 A
    Source:   common practice.
    """

    __slots__ = ()

    kind = "current"
    role = "source"
    connection = "a > b"
    output = "I"
    fields = (Field("value", ("A",), complex=True),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(some.branch(), Through(some.branch()), Drive(some.source, -1))

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        pen.current(some.branch(), Drive(some.source))
