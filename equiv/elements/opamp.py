"""The kind `opamp`."""

from __future__ import annotations

from equiv.elements.element import GROUND, Element, Field
from equiv.elements.laws import Across, Column, Pen, Term, Through


class OperationalAmplifier(Element):
    """An operational amplifier, ideal or with a finite gain.

    Written:  opamp NAME +p -n out [gain VALUE] [rin VALUE] [rout VALUE]
    Equation: ideal: v(p over n) = 0; with a gain: v(out) = gain · v(p over n) behind rout
    Off:      it stays as it is.
    Notes:    Its output is over ground. V and I of it are those of its input pair; V2 and I2 those
              of its output, the current counted from out to ground inside it.
    Example:  opamp U1 +p -n out gain 200000 rin 2 Mohm rout 75 ohm
    Source:   ideal element (nullor): B. D. H. Tellegen, 1954.
    """

    __slots__ = ()

    kind = "opamp"
    role = "device"
    connection = "+p -n out"
    pairs = ((0, 1), (2, GROUND))
    rule = "any"
    fields = (
        Field("gain", ("",), keyword="gain"),
        Field("rin", ("ohm",), keyword="rin"),
        Field("rout", ("ohm",), keyword="rout"),
    )

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        entry = some.branch(0)
        if "rin" in some.variant:
            rin = some.parameter("rin")
            pen.equation(entry, Across(some.pair(0)), Through(entry, -rin))
        else:
            pen.equation(entry, Through(entry))
        cls._output(some, pen)

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        entry = some.branch(0)
        if "rin" in some.variant:
            shorts, others = some.split(some.parameter("rin") == 0)
            pen.equation(shorts.branch(0), Across(shorts.pair(0)))
            pen.current(others.branch(0), Across(others.pair(0), 1 / others.parameter("rin")))
        else:
            pen.current(entry)
        cls._output(some, pen)

    @classmethod
    def _output(cls, some: Column, pen: Pen) -> None:
        exit_ = some.branch(1)
        if "gain" not in some.variant:
            pen.equation(exit_, Across(some.pair(0)))
            return
        terms: list[Term] = [
            Across(some.pair(1)),
            Across(some.pair(0), -some.parameter("gain")),
        ]
        if "rout" in some.variant:
            terms.append(Through(exit_, -some.parameter("rout")))
        pen.equation(exit_, *terms)
