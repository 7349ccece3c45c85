"""The kind `cccs`."""

from __future__ import annotations

from equiv.elements.element import Field
from equiv.elements.laws import Column, Pen, Through
from equiv.elements.source import Source


class CurrentControlledCurrentSource(Source):
    """A current source controlled by a current.

    Written:  cccs NAME a > b beta VALUE senses I:ELEMENT
    Equation: i(from a to b inside it) = beta · i(ELEMENT)
    Off:      never switched off with the independent sources.
    Notes:    The gain beta (or β) has no unit. Any element's current may be sensed.
    Example:  cccs Bi1 c > e beta 120 senses I:R3
    Source:   common practice.
    """

    __slots__ = ()

    kind = "cccs"
    role = "controlled"
    connection = "a > b"
    output = "I"
    senses_what = "I"
    fields = (Field("value", ("",), keyword="beta", aliases=("β",), complex=True),)

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        pen.equation(
            some.branch(),
            Through(some.branch()),
            Through(some.sensed_branch, -some.value),
        )

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        pen.current(some.branch(), Through(some.sensed_branch, some.value))
