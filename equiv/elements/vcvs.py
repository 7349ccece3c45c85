"""The kind `vcvs`."""

from __future__ import annotations

from equiv.elements.element import Field
from equiv.elements.laws import Across, Column, Pen
from equiv.elements.source import Source


class VoltageControlledVoltageSource(Source):
    """A voltage source controlled by a voltage.

    Written:  vcvs NAME +a -b mu VALUE senses V:p,n
    Equation: v(a over b) = mu · v(p over n)
    Off:      never switched off with the independent sources.
    Notes:    The gain mu (or μ) has no unit.
    Example:  vcvs Av1 +o -gnd mu 50 senses V:p,n
    Source:   common practice.
    """

    __slots__ = ()

    kind = "vcvs"
    role = "controlled"
    connection = "+a -b"
    output = "V"
    senses_what = "V"
    fields = (Field("value", ("",), keyword="mu", aliases=("μ", "µ"), complex=True),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(some.branch(), Across(some.pair()), Across(some.sensed_pair, -some.value))
