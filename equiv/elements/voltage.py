"""The kind `voltage`."""

from __future__ import annotations

from equiv.elements.element import Field
from equiv.elements.laws import Across, Column, Drive, Pen
from equiv.elements.source import Source


class Voltage(Source):
    """An independent voltage source.

    Written:  voltage NAME +a -b VALUE
    Equation: v(a over b) = the value
    Off:      a short of the same name.
    Notes:    A magnitude is rms unless the file says `phasors peak`.
    Example:  voltage Vs +a -b 24 V
    Source:   common practice.
    """

    __slots__ = ()

    kind = "voltage"
    role = "source"
    connection = "+a -b"
    output = "V"
    fields = (Field("value", ("V",), complex=True),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(some.branch(), Across(some.pair()), Drive(some.source, -1))
