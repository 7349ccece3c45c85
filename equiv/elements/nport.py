"""The kind `nport`."""

from __future__ import annotations

from equiv.elements import tabulated
from equiv.elements.element import Element, Field
from equiv.elements.laws import Column, Pen


class ManyPort(Element):
    """A network of any number of ports by its parameters from a Touchstone file.

    Written:  nport NAME +a -b +c -d … file "x.s3p"
    Equation: z: v = z·i; y: i = y·v; s: (1 - s)·v = (1 + s)·R·i, R the file's reference
    Off:      it stays as it is.
    Notes:    A pair of nodes for each port of the file, in its order; currents are counted into
              the first nodes. The file is named relative to this one's folder. Between two points
              of the file the parameters are taken linear in frequency, real and imaginary parts
              each; outside its points there are none, and DC needs a point at 0 Hz. V and I of it
              are those of the first pair; V2 and I2 of the second, V3 and I3 of the third.
    Example:  nport N1 +a -gnd +b -gnd +c -gnd file "splitter.s3p"
    Source:   Touchstone File Format Specification, version 1.1 (IBIS Open Forum).
    """

    __slots__ = ()

    kind = "nport"
    role = "device"
    connection = "+a -b …"
    fields = (Field("file", ("",), keyword="file", form="file"),)

    @property
    def pairs(self) -> tuple[tuple[int, int], ...]:  # type: ignore[override]
        """Two nodes each, as many as the statement names: an element's own, not its kind's."""
        return tuple((k, k + 1) for k in range(0, len(self.nodes), 2))

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        tabulated.law(some, pen)

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        tabulated.nodal(some, pen)
