"""Values that are multiples of a file's parameters, so that one symbol stands for all of them.

The text is read again with other values of the parameters. Let b be a random point and t·b the same
with one parameter moved. A value f is a number times powers of them exactly if f(t·b) = t^k f(b) for
each of them: for random 61-bit fractions anything else agrees with a chance below 1e-16. Every way
in which a parameter comes into a value is seen, through a block's parameters and formulas too.
"""

from __future__ import annotations

import math
from collections.abc import Collection, Mapping, Sequence
from fractions import Fraction
from random import Random
from typing import Any, NamedTuple

from equiv.elements import Element
from equiv.equations.symbolic.symbolised import Multiple, Shared, listed_values
from equiv.equations.symbolic.symbols import nearest_number
from equiv.errors import Diagnostic, EquivError, UsageError
from equiv.network import Network
from equiv.units import Formula, Symbol, write_value

_MOST_POWER = 100
_BITS = 61
Point = Mapping[str, Fraction]


def shared(network: Network, names: Sequence[str], own: Collection[str]) -> Shared:
    """The parameters of these names, and the elements whose values are multiples of them.

    Arguments: the parameters; the elements that are symbols of their own, whatever they depend on.
    Errors: UsageError where a value or a frequency is made of them in another way.
    """
    parameters = {
        name: (network.given[name].unit, nearest_number(network.given[name].value))
        for name in names
    }
    probes = _probes(network, names)
    if any(probe.network.frequencies != network.frequencies for probe in probes):
        raise _frequency_moves(names)
    elements = {}
    for element in network.elements.values():
        if element.name in own or not _depends(element, network, probes):
            continue
        found = _multiples(element, names, probes)
        if found is None:
            raise _no_multiple(element, names)
        if _is_peak(element, network):
            raise _peak_of(element)
        elements[element.name] = found
    return Shared(parameters, elements)


class _Probe(NamedTuple):
    """The network at one point of its parameters."""

    at: Point
    network: Network

    def values(self, name: str) -> list[Fraction | Symbol | None]:
        """The numbers that an element has in formulas."""
        return listed_values(self.network, self.network.elements[name])


def _probes(network: Network, names: Sequence[str]) -> list[_Probe]:
    """The network at a random point, and with each of the parameters moved.

    Errors: UsageError where its text cannot be read with such values.
    """
    again = network.again
    if again is None or list(again({}).elements.values()) != list(network.elements.values()):
        raise _cannot_move(names, "the network was changed after it was read")
    # smaller values first: a coupling, for one, has a largest
    for low in (Fraction(1, 2), Fraction(1)):
        try:
            return [
                _Probe(at, again({n: _text(at[n], network.given[n].unit) for n in names}))
                for at in _points(network, names, low)
            ]
        except EquivError as error:
            reason = error.diagnostics[0].message
    raise _cannot_move(names, f"with other values the file is wrong: {reason}")


def _points(network: Network, names: Sequence[str], low: Fraction) -> list[Point]:
    random = Random(1)  # the same each time

    def near(value: Any) -> Fraction:
        # between 1.07 and 1.47: away from one, and below one for a half
        share = Fraction(random.getrandbits(_BITS), 2**_BITS)
        factor = low * (1 + (1 + 5 * share) / 13)
        return factor * (value if isinstance(value, Fraction) and value else 1)

    base = {name: near(nearest_number(network.given[name].value)) for name in names}
    return [base, *({**base, name: near(base[name])} for name in names)]


def _text(value: Fraction, unit: str) -> str:
    return f"({value.numerator}/{value.denominator}) {unit}"


def _depends(element: Element, network: Network, probes: Sequence[_Probe]) -> bool:
    """Whether a value of an element differs where the parameters do."""
    name = element.name
    values = listed_values(network, element)
    if None not in values:
        return any(probe.values(name) != values for probe in probes)
    said = [network.elements[n].value for n in (name, *element.links)]
    return any(
        [p.network.elements[n].value for n in (name, *element.links)] != said for p in probes
    )


def _multiples(
    element: Element, names: Sequence[str], probes: Sequence[_Probe]
) -> tuple[Multiple | None, ...] | None:
    """Each value of an element, None for a mere number; None where one is no multiple."""
    base, *moved = [probe.values(element.name) for probe in probes]
    found: list[Multiple | None] = []
    for number, value in enumerate(base):
        others = [values[number] for values in moved]
        if isinstance(value, Symbol):
            found.append(None)  # a symbol of its own
            continue
        if value is None:
            return None
        powers = {}
        for name, other, probe in zip(names, others, probes[1:], strict=True):
            power = _power(value, other, probe.at[name] / probes[0].at[name])
            if power is None:
                return None
            if power:
                powers[name] = power
        rest = value / math.prod(probes[0].at[n] ** p for n, p in powers.items())
        found.append(Multiple(rest, tuple(powers.items())) if powers else None)
    return tuple(found)


def _power(first: Fraction, second: Fraction | Symbol | None, times: Fraction) -> int | None:
    """The k for which second = times^k · first."""
    if first == second:
        return 0
    if not isinstance(second, Fraction) or not first or not second or (first > 0) != (second > 0):
        return None
    power = round(math.log(second / first) / math.log(times))
    fits = abs(power) <= _MOST_POWER and second == first * times**power
    return power if fits else None


def _is_peak(element: Element, network: Network) -> bool:
    at_dc = element.role != "source" or not network.frequency_of(element).omega
    return network.phasors == "peak" and not at_dc


def _no_multiple(element: Element, names: Collection[str]) -> UsageError:
    value = element.value
    text = f", {write_value(value, '')}," if isinstance(value, Formula) else ""
    return UsageError(
        Diagnostic(
            "not-a-multiple",
            f"the value of {element.name}{text} is no number times powers of {', '.join(names)}",
            hint=f"name {element.name} itself: it is a symbol of its own then",
        )
    )


def _peak_of(element: Element) -> UsageError:
    return UsageError(
        Diagnostic(
            "not-a-multiple",
            f"{element.name} is made of a parameter as a peak value, and results are rms values",
            hint=f"name {element.name} itself: it is a symbol of its own then",
        )
    )


def _frequency_moves(names: Collection[str]) -> UsageError:
    return UsageError(
        Diagnostic(
            "frequency-of-parameter",
            f"a frequency of the file depends on {', '.join(names)}; in formulas it is in s",
            hint="write the frequency as a number",
        )
    )


def _cannot_move(names: Collection[str], reason: str) -> UsageError:
    return UsageError(
        Diagnostic(
            "cannot-be-moved",
            f"{', '.join(names)} cannot be followed into the values: {reason}",
            hint="name the elements instead: each is a symbol of its own then",
        )
    )
