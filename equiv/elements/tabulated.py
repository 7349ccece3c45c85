"""Parameters that a file gives at some frequencies, and the law of the kinds that have them."""

from __future__ import annotations

from bisect import bisect_left
from decimal import Decimal
from math import isqrt
from typing import Any, NamedTuple

from equiv.elements.laws import Across, Column, Pen, Term, Through
from equiv.errors import Diagnostic, UsageError
from equiv.units import write_value

SAME_FREQUENCY = 1e-9
"""Relative distance within which a frequency is a point of the file."""
_REAL = 1e-9
"""Imaginary parts at 0 Hz, of the largest entry, that are taken for rounding."""

DRIVEN_BY_CURRENT = {"h": (True, False), "g": (False, True)}
"""Which ports of a two-port have their current on the right-hand side of h and g."""


class Tabulated(NamedTuple):
    """z, y, h, g (SI units) or s of a many-port at ascending frequencies, each row by row.

    `file` is named relative to the network's folder; `reference` (ohm) is that of s at every port.
    """

    file: str
    form: str
    reference: float
    hertz: tuple[float, ...]
    matrices: tuple[tuple[complex, ...], ...]

    @property
    def ports(self) -> int:
        """The number of ports."""
        return isqrt(len(self.matrices[0]))

    @property
    def variant(self) -> tuple[str, str]:
        """What decides the form of the law."""
        return self.form, str(self.ports)

    def between(self, hertz: float) -> tuple[int, float]:
        """The point at or below a frequency, and how far on to the next one it lies (0 to 1).

        Errors: UsageError outside the file's points.
        """
        points = self.hertz
        after = bisect_left(points, hertz * (1 - SAME_FREQUENCY))
        if after < len(points) and abs(points[after] - hertz) <= SAME_FREQUENCY * hertz:
            return after, 0.0
        if not 0 < after < len(points):
            raise UsageError(self._outside(hertz))
        low, high = points[after - 1], points[after]
        return after - 1, (hertz - low) / (high - low)

    def at(self, hertz: float) -> tuple[complex, ...]:
        """The parameters at a frequency: those of its point, or linear between two points.

        Errors: UsageError outside the file's points, or where 0 Hz has complex parameters.
        """
        point, on = self.between(hertz)
        found = self.matrices[point]
        if on:
            after = self.matrices[point + 1]
            found = tuple(a + on * (b - a) for a, b in zip(found, after, strict=True))
        return found if hertz else self._real(found)

    def between_words(self, hertz: float) -> str | None:
        """The two points that a frequency lies between, in words; None where it is a point."""
        point, on = self.between(hertz)
        return " and ".join(map(_in_hertz, self.hertz[point : point + 2])) if on else None

    def _real(self, found: tuple[complex, ...]) -> tuple[complex, ...]:
        largest = max(map(abs, found))
        if any(abs(x.imag) > _REAL * largest for x in found):
            message = f"{self.file} has complex parameters at 0 Hz; at DC every value is real"
            raise UsageError(Diagnostic("complex-at-dc", message))
        return tuple(x.real for x in found)

    def _outside(self, hertz: float) -> Diagnostic:
        low, high = _in_hertz(self.hertz[0]), _in_hertz(self.hertz[-1])
        points = f"from {low} to {high}" if len(self.hertz) > 1 else f"at {low} only"
        if not hertz:
            message = f"{self.file} has no point at 0 Hz, and DC is not guessed from the others"
        else:
            message = f"{self.file} gives no parameters at {_in_hertz(hertz)}"
        return Diagnostic(
            "outside-file", message, hint=f"it gives them {points}: choose a frequency there"
        )


def _in_hertz(hertz: float) -> str:
    return write_value(Decimal(f"{hertz:.9g}"), "Hz")


def law(some: Column, pen: Pen) -> None:
    """The parameters' own equations, an equation a port; nothing is divided.

    z: v = z·i; y: i = y·v; h: (v1, i2) = h·(i1, v2); g: (i1, v2) = g·(v1, i2);
    s: (1 - s)·v = (1 + s)·R·i, which follows from b = s·a with a, b = (v ± R·i)/(2·√R).
    Source: K. Kurokawa, Power waves and the scattering matrix (1965), for a real R (from memory).
    """
    _, form, ports = some.variant
    for row in range(int(ports)):
        terms: list[Term] = []
        if form == "s":
            for k in range(int(ports)):
                unit, entry = int(row == k), some.entry(row, k)
                terms.append(Across(some.pair(k), unit - entry))
                terms.append(Through(some.branch(k), -(unit + entry) * some.reference))
        else:
            driven = DRIVEN_BY_CURRENT.get(form, (form == "z",) * int(ports))
            terms.append(_term(some, row, not driven[row], 1))
            terms += [_term(some, k, driven[k], -some.entry(row, k)) for k in range(int(ports))]
        pen.equation(some.branch(row), *terms)


def nodal(some: Column, pen: Pen) -> None:
    """The same in nodal form, where y gives the currents."""
    _, form, ports = some.variant
    if form != "y":
        law(some, pen)
        return
    for row in range(int(ports)):
        terms = [Across(some.pair(k), some.entry(row, k)) for k in range(int(ports))]
        pen.current(some.branch(row), *terms)


def _term(some: Column, port: int, current: bool, coefficient: Any) -> Term:
    if current:
        return Through(some.branch(port), coefficient)
    return Across(some.pair(port), coefficient)
