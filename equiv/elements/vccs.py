"""The kind `vccs`."""

from __future__ import annotations

from equiv.elements.element import Field
from equiv.elements.laws import Across, Column, Pen, Through
from equiv.elements.source import Source


class VoltageControlledCurrentSource(Source):
    """A current source controlled by a voltage.

    Written:  vccs NAME a > b g VALUE senses V:p,n
    Equation: i(from a to b inside it) = g · v(p over n)
    Off:      never switched off with the independent sources.
    Notes:    g is a transconductance.
    Example:  vccs Gm1 c > e g 40 mS senses V:b,e
    Source:   common practice.
    """

    __slots__ = ()

    kind = "vccs"
    role = "controlled"
    connection = "a > b"
    output = "I"
    senses_what = "V"
    fields = (Field("value", ("S",), keyword="g", complex=True),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(some.branch(), Through(some.branch()), Across(some.sensed_pair, -some.value))

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        pen.current(some.branch(), Across(some.sensed_pair, some.value))
