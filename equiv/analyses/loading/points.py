"""Where a port's line v = Voc - Z·i and a load meet: no point, one, two, or more on a curve."""

from __future__ import annotations

import math
from typing import Any, NamedTuple

from equiv.analyses.ports.proof import Equivalent
from equiv.elements.element import Frequency
from equiv.equations.scalars import scalar
from equiv.language.loads import Load
from equiv.units import is_exact, say

_ZERO = 1e-12
"""What is this small against its own parts is a zero that rounding has blurred."""
_DOUBLE = 1e-13
"""A discriminant this small (against the square it is taken from) is that of a double root."""

Numeral = float | complex


class Point(NamedTuple):
    """Voltage of plus over minus (V) and current out of plus into the load (A), rms."""

    voltage: Numeral
    current: Numeral


class Found(NamedTuple):
    """The points of a load; where there is none, `words` say why, and `most` what there would be.

    `most` is the largest power (W) that can be drawn where a power is too large.
    """

    points: tuple[Point, ...] = ()
    words: str = ""
    most: float | None = None


class Line(NamedTuple):
    """A port at one frequency: v = voc - z·i and i = isc - y·v; a pair is None if there is none."""

    frequency: Frequency
    voc: Numeral | None
    z: Numeral | None
    isc: Numeral | None
    y: Numeral | None
    no_thevenin: str
    no_norton: str

    @classmethod
    def of(cls, e: Equivalent) -> Line:
        """The line of an equivalent of one port; real at DC."""
        voc, isc = e.open_voltage, e.short_current

        def number(value: Any) -> Numeral | None:
            if value is None:
                return None
            return scalar(value) if e.frequency.omega or is_exact(value) else scalar(value).real

        return cls(
            e.frequency,
            number(None if voc is None else voc[0]),
            number(None if e.impedance is None else e.impedance[0, 0]),
            number(None if isc is None else isc[0]),
            number(None if e.admittance is None else e.admittance[0, 0]),
            e.no_thevenin or "",
            e.no_norton or "",
        )

    @property
    def dc(self) -> bool:
        """Whether the numbers are real."""
        return not self.frequency.omega


def points(line: Line, load: Load) -> Found:
    """The points at which a load and a port's line meet.

    Sign convention: current out of plus into the load; a power is taken where it is positive.
    """
    if line.voc is None and line.isc is None:
        return Found(words=f"none: the port has no equivalent: {line.no_thevenin}")
    if line.dc and load.value.imag:
        return Found(words="none: at DC a load is a real number")
    value = load.value.real if line.dc and not is_exact(load.value) else load.value
    if load.kind == "impedance":
        return _impedance(line, value) if value else _short(line)
    if load.kind == "short":
        return _short(line)
    if load.kind == "open":
        return _open(line)
    if load.kind == "current":
        return _current(line, value)
    if load.kind == "power":
        return _power(line, value)
    return _curve(line, load.points)


def _none(reason: str) -> Found:
    return Found(words=f"none: {reason}")


def _impedance(line: Line, load: Numeral) -> Found:
    if line.voc is None or line.z is None:
        assert line.isc is not None and line.y is not None
        whole = 1 + line.y * load
        if _vanishes(whole, max(1.0, abs(line.y * load))):
            return _cancelling(line.isc)
        voltage = line.isc * load / whole
        return Found((Point(voltage, line.isc / whole),))
    whole = line.z + load
    if _vanishes(whole, max(abs(line.z), abs(load))):
        return _cancelling(line.voc)
    current = line.voc / whole
    return Found((Point(load * current, current),))


def _vanishes(total: Numeral, size: float) -> bool:
    """Whether a sum is nothing, as far as rounding goes."""
    return not total if is_exact(total) else abs(total) <= _ZERO * size


def _cancelling(drive: Numeral) -> Found:
    fits = "no current fits" if abs(drive) else "any current fits"
    return _none(f"the load and the port's own impedance add to zero: {fits}")


def _short(line: Line) -> Found:
    if line.isc is None:
        return _none(line.no_norton)
    return Found((Point(line.isc * 0.0, line.isc),))


def _open(line: Line) -> Found:
    if line.voc is None:
        return _none(line.no_thevenin)
    return Found((Point(line.voc, line.voc * 0.0),))


def _current(line: Line, current: Numeral) -> Found:
    if line.voc is not None and line.z is not None:
        return Found((Point(line.voc - line.z * current, current),))
    assert line.isc is not None
    given = say(line.isc, "A")
    if _vanishes(line.isc - current, abs(line.isc)):
        return _none(f"the port gives {given} at any voltage, so that no voltage is determined")
    return _none(f"the port gives {given} whatever its voltage")


def _power(line: Line, power: Numeral) -> Found:
    """Points with v·i* = power; where there are two, that of the higher voltage first."""
    if line.voc is not None and line.z is not None:
        drive, own, wanted = line.voc, line.z, power
    else:
        assert line.isc is not None and line.y is not None
        drive, own, wanted = line.isc, line.y, power.conjugate()
    roots = _draws(drive, own, wanted)
    found = []
    for root in roots:
        other = wanted / root.conjugate() if root else drive
        found.append(Point(other, root) if line.voc is not None else Point(root, other))
    if found:
        return Found(tuple(sorted(found, key=lambda p: -abs(p.voltage))))
    if not abs(wanted):
        return _none("the port gives nothing at all, so that any current fits")
    if not line.dc and not abs(drive):
        return _none("the port has no source of its own, and nothing would fix a phase")
    most = _most(drive, own, wanted)
    what = "can be drawn" if power.real > 0 else "can be fed in"
    return Found(words=f"none: at most {say(most, 'W')} {what}", most=most)


def _draws(drive: Numeral, own: Numeral, wanted: Numeral) -> list[Numeral]:
    """Every x with (drive - own·x)·x* = wanted.

    Real: own·x² - drive·x + wanted = 0. Complex: with m = |x|², x* = (wanted + own·m)/drive and
    |own|²·m² + (2 Re(wanted·own*) - |drive|²)·m + |wanted|² = 0.
    """
    if not isinstance(own, complex):
        return list(_real_roots(own, -drive.real, wanted.real))
    if not abs(drive):
        return [0j] if not abs(wanted) else []
    middle = 2 * (wanted * own.conjugate()).real - abs(drive) ** 2
    sizes = [m for m in _real_roots(abs(own) ** 2, middle, abs(wanted) ** 2) if m >= 0]
    return [((wanted + own * m) / drive).conjugate() for m in sizes]


def _real_roots(a: float, b: float, c: float) -> tuple[float, ...]:
    """The roots of a·x² + b·x + c without loss of digits; a double one once."""
    if a == 0:
        return (-c / b,) if b else ()
    discriminant = b * b - 4 * a * c
    if abs(discriminant) <= _DOUBLE * b * b:
        return (-b / (2 * a),)
    if discriminant < 0:
        return ()
    q = -(b + math.copysign(math.sqrt(discriminant), b)) / 2
    return (q / a, c / q)


def _most(drive: Numeral, own: Numeral, wanted: Numeral) -> float:
    """The largest |power| (W) at the angle of `wanted`: |drive|²/(2(|u||own| + Re(u·own*)))."""
    if not abs(drive):
        return 0.0
    unit = complex(wanted) / abs(wanted.real)
    return float(abs(drive) ** 2 / (2 * (abs(unit) * abs(own) + (unit * own.conjugate()).real)))


def _curve(line: Line, curve: tuple[tuple[float, float], ...]) -> Found:
    """Every point of a piecewise linear curve on the port's line, in the curve's order."""
    off = [_off(line, v, i) for v, i in curve]
    found: list[Point] = []
    along = False
    for k in range(len(curve)):
        if off[k] == 0:
            found.append(Point(*curve[k]))
            along = along or (k > 0 and off[k - 1] == 0 and curve[k] != curve[k - 1])
        elif k + 1 < len(curve) and off[k + 1] and (off[k] < 0) != (off[k + 1] < 0):
            part = off[k] / (off[k] - off[k + 1])
            (v0, i0), (v1, i1) = curve[k], curve[k + 1]
            found.append(Point(v0 + part * (v1 - v0), i0 + part * (i1 - i0)))
    distinct = tuple(dict.fromkeys(found))
    if distinct:
        words = "a part of the curve lies on the load line: its ends are given" if along else ""
        return Found(distinct, words)
    low, high = min(v for v, _ in curve), max(v for v, _ in curve)
    return _none(
        f"the load line does not meet the curve, which was measured from {say(low, 'V')} "
        f"to {say(high, 'V')}"
    )


def _off(line: Line, v: float, i: float) -> float:
    """How far a point is off the port's line; exactly 0 where only rounding keeps it off."""
    if line.voc is not None and line.z is not None:
        parts = (v, line.z.real * i, -line.voc.real)
    else:
        assert line.isc is not None and line.y is not None
        parts = (i, line.y.real * v, -line.isc.real)
    total = math.fsum(parts)
    return 0.0 if abs(total) <= _ZERO * max(map(abs, parts)) else total


def reactive(power: complex) -> float:
    """The reactive power (var) of a complex power; 0 where only rounding gives one."""
    return 0.0 if abs(power.imag) <= _ZERO * abs(power) else power.imag


def power_factor(power: complex) -> float | None:
    """P/|S|; None where nothing flows."""
    return None if not abs(power) else power.real / abs(power)


def leans(power: complex) -> str:
    """Whether a load's current `lags` behind its voltage or `leads` it, by its reactive power."""
    if not reactive(power):
        return ""
    return "lags" if power.imag > 0 else "leads"
