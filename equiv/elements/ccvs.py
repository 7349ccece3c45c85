"""The kind `ccvs`."""

from __future__ import annotations

from equiv.elements.element import Field
from equiv.elements.laws import Across, Column, Pen, Through
from equiv.elements.source import Source


class CurrentControlledVoltageSource(Source):
    """A voltage source controlled by a current.

    Written:  ccvs NAME +a -b r VALUE senses I:ELEMENT
    Equation: v(a over b) = r · i(ELEMENT)
    Off:      never switched off with the independent sources.
    Notes:    r is a transresistance. Any element's current may be sensed.
    Example:  ccvs Rm1 +x -gnd r 10 ohm senses I:R3
    Source:   common practice.
    """

    __slots__ = ()

    kind = "ccvs"
    role = "controlled"
    connection = "+a -b"
    output = "V"
    senses_what = "I"
    fields = (Field("value", ("ohm",), keyword="r", complex=True),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(some.branch(), Across(some.pair()), Through(some.sensed_branch, -some.value))
