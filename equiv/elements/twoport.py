"""The kind `twoport`."""

from __future__ import annotations

from equiv.elements import tabulated
from equiv.elements.element import Element, Field
from equiv.elements.laws import Across, Column, Pen, Through


class TwoPort(Element):
    """A two-port by its parameters.

    Written:  twoport NAME +a -b +c -d z|y|h|abcd VALUE VALUE VALUE VALUE, or … file "x.s2p"
    Equation: z: v = z·i; y: i = y·v; h: (v1, i2) = h·(i1, v2); abcd: (v1, i1) = abcd·(v2, -i2)
    Off:      it stays as it is.
    Notes:    Row by row, each in its SI unit; both currents are counted into the first nodes.
              Complex parameters hold at the file's frequency only; those of a Touchstone file
              (z, y, h, g or s) at its points, and between them as `nport` says.
    Example:  twoport B1 +a -b +c -d z 10 2 2 8
    Source:   IEC 60050-131 (two-port parameters), common practice.
    """

    __slots__ = ()

    kind = "twoport"
    role = "device"
    connection = "+a -b +c -d"
    pairs = ((0, 1), (2, 3))
    rule = "one"
    fields = (
        Field("z", ("ohm",) * 4, keyword="z", complex=True),
        Field("y", ("S",) * 4, keyword="y", complex=True),
        Field("h", ("ohm", "", "", "S"), keyword="h", complex=True),
        Field("abcd", ("", "ohm", "S", ""), keyword="abcd", complex=True),
        Field("file", ("",), keyword="file", form="file"),
    )

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        if some.variant[0] == "file":
            tabulated.law(some, pen)
            return
        (form,) = some.variant
        a, b, c, d = (some.parameter(form, index) for index in range(4))
        v1, v2 = some.pair(0), some.pair(1)
        i1, i2 = some.branch(0), some.branch(1)
        if form == "z":
            pen.equation(i1, Across(v1), Through(i1, -a), Through(i2, -b))
            pen.equation(i2, Across(v2), Through(i1, -c), Through(i2, -d))
        elif form == "y":
            pen.equation(i1, Through(i1), Across(v1, -a), Across(v2, -b))
            pen.equation(i2, Through(i2), Across(v1, -c), Across(v2, -d))
        elif form == "h":
            pen.equation(i1, Across(v1), Through(i1, -a), Across(v2, -b))
            pen.equation(i2, Through(i2), Through(i1, -c), Across(v2, -d))
        else:
            pen.equation(i1, Across(v1), Across(v2, -a), Through(i2, b))
            pen.equation(i2, Through(i1), Across(v2, -c), Through(i2, d))

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        if some.variant[0] == "file":
            tabulated.nodal(some, pen)
            return
        if some.variant != ("y",):
            cls.law(some, pen)
            return
        a, b, c, d = (some.parameter("y", index) for index in range(4))
        v1, v2 = some.pair(0), some.pair(1)
        pen.current(some.branch(0), Across(v1, a), Across(v2, b))
        pen.current(some.branch(1), Across(v1, c), Across(v2, d))
