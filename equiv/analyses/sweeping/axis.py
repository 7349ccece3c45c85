"""What a sweep goes over: the file's frequency or one of its parameters, and the points of it."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from decimal import Decimal
from fractions import Fraction
from functools import cached_property

import numpy as np

from equiv.elements.element import Frequency
from equiv.equations.layout import Numbers
from equiv.errors import Diagnostic, UsageError, nearest
from equiv.language import value as read_value
from equiv.language.resolve import is_fixed
from equiv.network import Network
from equiv.units import Formula, Number, as_number, exact, write_value

FREQUENCY = "frequency"
MOST_POINTS = 1_000_000
_MOST_NAMED = 12
_WHOLE = 2**53
"""Whole numbers below it are floats exactly."""

End = str | int | float | Decimal | Fraction
"""An end of a sweep: text with a unit, or a number in the SI unit."""


@dataclass(frozen=True)
class Axis:
    """The points of a sweep in an SI unit (`Hz` or `rad/s` for a frequency), with exact ends."""

    name: str
    unit: str
    first: Number
    last: Number
    points: int
    log: bool

    @property
    def is_frequency(self) -> bool:
        """Whether the file's frequency is moved, rather than a parameter."""
        return self.name == FREQUENCY

    @property
    def words(self) -> str:
        """What is moved, in words."""
        return FREQUENCY if self.is_frequency else f"parameter {self.name}"

    @cached_property
    def values(self) -> Numbers:
        """The points as floats: each the nearest to what it is exactly."""
        if self.log:
            ends = [math.log10(float(end)) for end in (self.first, self.last)]
            inner = _rounded(10.0 ** np.linspace(ends[0], ends[1], self.points))
            return np.array([float(self.first), *inner[1:-1], float(self.last)])
        low, step = Fraction(self.first), self._step
        scale = math.lcm(low.denominator, step.denominator)
        start, rise = int(low * scale), int(step * scale)
        if max(abs(start), abs(start + rise * self.points), scale) < _WHOLE:
            return (start + rise * np.arange(self.points)) / scale
        return np.array([float(self.exact(k)) for k in range(self.points)])

    @property
    def _step(self) -> Fraction:
        return (Fraction(self.last) - Fraction(self.first)) / (self.points - 1)

    def exact(self, index: int) -> Number:
        """A point: equal steps exactly; equal ratios to twelve digits, so that 10 and 100 are 10
        and 100."""
        if index in (0, self.points - 1):
            return self.last if index else self.first
        if self.log:
            return Decimal(repr(float(self.values[index])))
        return exact(Fraction(self.first) + self._step * index)

    @cached_property
    def omega(self) -> Numbers:
        """The points of a frequency in rad/s."""
        return self.values * (1.0 if self.unit == "rad/s" else Frequency(Decimal(1)).omega)

    def at(self, index: int) -> str:
        """A point as text with its unit."""
        return write_value(self.exact(index), self.unit)

    def network(self, network: Network, index: int) -> Network:
        """The network at a point.

        Errors: those of reading a file, where the value of a parameter makes it wrong.
        """
        if self.is_frequency:
            return replace(network, frequency=Frequency(self.exact(index), self.unit))
        assert network.again is not None
        return network.again({self.name: self.at(index)})


def _rounded(values: Numbers) -> Numbers:
    """Positive numbers rounded to twelve digits."""
    scale = 10.0 ** (11 - np.floor(np.log10(values)))
    return np.asarray(np.round(values * scale) / scale)


def axis(network: Network, over: str, start: End, stop: End, points: int, log: bool) -> Axis:
    """The axis that was asked for.

    Errors: UsageError for an unknown parameter, ends that cannot be, or a network that cannot
    be moved that way.
    """
    if over == FREQUENCY:
        _require_movable(network)
        texts = [str(end).strip() for end in (start, stop)]
        unit = "rad/s" if any(text.endswith("rad/s") for text in texts) else "Hz"
    else:
        unit = _parameter_unit(network, over)
    first, last = (_end(end, unit) for end in (start, stop))
    if not 2 <= points <= MOST_POINTS:
        raise _wrong(f"a sweep has from 2 to {MOST_POINTS} points; found {points}")
    if first == last:
        raise _wrong(f"the sweep begins and ends at {write_value(first, unit)}")
    if over == FREQUENCY and min(first, last) < 0:
        raise _wrong("a frequency is not negative")
    if log and (first <= 0 or last <= 0):
        raise _wrong("a logarithmic sweep goes from one positive value to another",
                     "leave out --log to include zero")  # fmt: skip
    return Axis(over, unit, first, last, points, log)


def _end(end: End, unit: str) -> Number:
    found = read_value(str(end), unit, may_be_complex=False)
    number = found.value if isinstance(found, Formula) else found
    if not isinstance(number, Decimal | Fraction):
        raise _wrong(f"a sweep goes from one number to another; found {end}")
    return number


def _parameter_unit(network: Network, over: str) -> str:
    if over not in network.given:
        known = ", ".join([*network.given][:_MOST_NAMED]) or "none"
        raise UsageError(
            Diagnostic(
                "unknown-given",
                f"the file has no parameter called {over}",
                hint=nearest(over, [*network.given, FREQUENCY])
                or f"its parameters: {known}; or sweep over {FREQUENCY}",
            )
        )
    given = network.given[over]
    if isinstance(as_number(given.value), complex):
        raise _wrong(f"{over} is complex; a sweep moves a real number")
    _require_text(network, over)
    return given.unit


def _require_text(network: Network, over: str) -> None:
    """A parameter is moved by reading the text again: it must give this very network."""
    again = network.again({}) if network.again is not None else None
    if again is None or _circuit(again) != _circuit(network):
        raise _wrong(
            f"{over} cannot be moved: the network was changed after it was read",
            "sweep the network that equiv.load or equiv.parse gives",
        )


def _circuit(network: Network) -> tuple[object, ...]:
    """What decides the numbers; titles and remarks do not."""
    elements = list(network.elements.values())
    return elements, network.ground, network.frequency, network.phasors


def _require_movable(network: Network) -> None:
    fixed = [element.name for element in network.elements.values() if is_fixed(element)]
    if not fixed:
        return
    named = ", ".join(fixed[:_MOST_NAMED]) + (", …" if len(fixed) > _MOST_NAMED else "")
    verb = "is" if len(fixed) == 1 else "are"
    raise UsageError(
        Diagnostic(
            "fixed-frequency",
            f"{named} {verb} known at the file's frequency only, so that it cannot be swept",
            hint="impedance, admittance and complex values hold at one frequency; resistors, "
            "inductors and capacitors at every one",
        )
    )


def _wrong(message: str, hint: str | None = None) -> UsageError:
    return UsageError(Diagnostic("wrong-sweep", message, hint=hint))
