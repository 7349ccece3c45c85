"""The frequencies that are asked for, and a network at one of them."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal

from equiv.elements.element import Frequency, Parameters
from equiv.errors import Diagnostic, UsageError
from equiv.language import frequency as read_frequency
from equiv.language.resolve import is_fixed
from equiv.network import Network
from equiv.units import Value, is_complex

Given = str | int | float | Decimal | Frequency
"""A frequency in hertz, in words (`1 MHz`, `300 rad/s`), or as it stands in a network."""


def frequencies_of(given: Sequence[Given]) -> tuple[Frequency, ...]:
    """The frequencies, ascending, each once."""
    found = {f.omega: f for f in map(_frequency, given)}
    return tuple(found[omega] for omega in sorted(found))


def spread(first: Given, last: Given, points: int, logarithmic: bool = False) -> list[Frequency]:
    """Frequencies from one to another at equal distances, or at equal ratios.

    Errors: UsageError for fewer than two points, or ends that do not rise (from above 0 for
    ratios).
    """
    start, stop = _frequency(first), _frequency(last)
    low, high = start.hertz, stop.hertz
    if points < 2 or not low < high or (logarithmic and not low):
        above = " above 0 Hz" if logarithmic else ""
        message = f"expected two or more points between two frequencies{above}, the lower one first"
        raise UsageError(Diagnostic("bad-range", message))
    steps = [k / (points - 1) for k in range(1, points - 1)]
    if logarithmic:
        inner = [low * math.exp(t * math.log(high / low)) for t in steps]
    else:
        inner = [low + t * (high - low) for t in steps]
    return [start, *(Frequency(Decimal(repr(f))) for f in inner), stop]


def _frequency(given: Given) -> Frequency:
    if isinstance(given, Frequency):
        return given
    if isinstance(given, str):
        return read_frequency(given)
    number = given if isinstance(given, Decimal) else Decimal(repr(given))
    if not number.is_finite() or number < 0:
        message = f"expected a frequency in hertz, not negative; found {given}"
        raise UsageError(Diagnostic("bad-frequency", message))
    return Frequency(number)


def network_at(network: Network, frequency: Frequency) -> Network:
    """The network with its own frequency replaced; sources with one of their own keep it.

    Errors: UsageError where an element is known at the file's frequency only, or where a value
    is complex at DC.
    """
    if math.isclose(network.frequency.omega, frequency.omega, rel_tol=1e-12):
        return network
    for element in network.elements.values():
        if is_fixed(element):
            message = f"{element.name} is known at the file's frequency only"
            hint = "an inductor or capacitor is known at every frequency"
            raise UsageError(Diagnostic("fixed-frequency", message, hint=hint))
        if (
            not frequency.omega
            and not element.options.at
            and any(map(is_complex, _values(element)))
        ):
            message = f"{element.name} has a complex value; at DC every value is real"
            raise UsageError(Diagnostic("complex-at-dc", message))
    return replace(network, frequency=frequency)


def _values(element: object) -> list[Value]:
    value = getattr(element, "value", None)
    if isinstance(value, Parameters):
        return [v for _, values in value.items for v in values]
    return [] if value is None else [value]
