"""Values that are multiples of a file's parameters, so that one symbol stands for all of them."""

from __future__ import annotations

from collections.abc import Collection
from decimal import Decimal
from fractions import Fraction
from typing import NamedTuple

from equiv.elements import Element
from equiv.equations.symbolic.symbols import Multiple, Shared, nearest_number
from equiv.errors import Diagnostic, UsageError
from equiv.language.expressions import parse_expression
from equiv.language.mistakes import Mistake
from equiv.language.operations import BINARY, Measure, Step, one_argument
from equiv.network import Network
from equiv.units import Formula, Value

_MOST_POWER = 100


class _NoMultiple(Exception):  # noqa: N818 (it only says that a value is no product)
    pass


class _Powers(NamedTuple):
    """A number times powers of parameters."""

    number: Measure
    powers: dict[str, int]


def shared(network: Network, names: Collection[str]) -> Shared:
    """The parameters of these names, and the elements whose values are multiples of them.

    Errors: UsageError where a value is made of one in another way.
    """
    parameters = {
        name: (network.given[name].unit, nearest_number(network.given[name].value))
        for name in names
    }
    elements = {}
    for element in network.elements.values():
        if not isinstance(element.value, Formula):
            continue
        try:
            found = _of_text(element.value.text, network, names)
        except (_NoMultiple, Mistake):
            if not _mentions(element.value.text, network, names):
                continue
            raise _no_multiple(element, names) from None
        if found.powers:
            powers = tuple(found.powers.items())
            elements[element.name] = Multiple(found.number.number, powers)
    return Shared(parameters, elements)


def _mentions(text: str, network: Network, names: Collection[str]) -> bool:
    """Whether a value depends on one of the parameters."""
    found = parse_expression(text, 0).names
    if found & set(names):
        return True
    values = (network.given[n].value for n in found if n in network.given)
    return any(isinstance(v, Formula) and _mentions(v.text, network, names) for v in values)


def _of_text(text: str, network: Network, names: Collection[str]) -> _Powers:
    stack: list[_Powers] = []
    for step in parse_expression(text, 0).steps:
        if step.number is not None:
            stack.append(_Powers(step.number, {}))
        elif step.what == "parameter":
            stack.append(_parameter(step.name, network, names))
        elif step.what in BINARY:
            second, first = stack.pop(), stack.pop()
            stack.append(_binary(first, second, step))
        else:
            stack.append(_single(stack.pop(), step))
    return stack.pop()


def _parameter(name: str, network: Network, names: Collection[str]) -> _Powers:
    if name in names:
        return _Powers(Measure(Fraction(1)), {name: 1})
    value: Value = network.given[name].value
    if isinstance(value, Formula):
        return _of_text(value.text, network, names)
    if not isinstance(value, Decimal | Fraction):
        raise _NoMultiple
    return _Powers(Measure(Fraction(value)), {})


def _binary(first: _Powers, second: _Powers, step: Step) -> _Powers:
    """The operation with units left out: the file has been read, and they fit."""
    plain = step
    if step.what in "+-":
        if not second.number.number:
            return first
        if first.number.number and first.powers != second.powers:
            raise _NoMultiple
        return _Powers(BINARY[step.what](_bare(first), _bare(second), plain), second.powers)
    if step.what in "*/":
        sign = 1 if step.what == "*" else -1
        powers = dict(first.powers)
        for name, power in second.powers.items():
            powers[name] = powers.get(name, 0) + sign * power
        number = BINARY[step.what](_bare(first), _bare(second), plain)
        return _Powers(number, {n: p for n, p in powers.items() if p})
    if second.powers:
        raise _NoMultiple
    exponent = second.number.number
    if first.powers and (exponent.denominator != 1 or abs(exponent) > _MOST_POWER):
        raise _NoMultiple
    number = BINARY[step.what](_bare(first), _bare(second), plain)
    return _Powers(number, {n: p * int(exponent) for n, p in first.powers.items()})


def _single(value: _Powers, step: Step) -> _Powers:
    if value.powers and step.what != "negate":
        raise _NoMultiple
    return _Powers(one_argument(_bare(value), step), value.powers)


def _bare(value: _Powers) -> Measure:
    return Measure(value.number.number, rounded=value.number.rounded)


def _no_multiple(element: Element, names: Collection[str]) -> UsageError:
    assert isinstance(element.value, Formula)
    return UsageError(
        Diagnostic(
            "not-a-multiple",
            f"the value of {element.name}, {element.value.text}, is no number times powers of "
            f"{', '.join(names)}",
            hint=f"name {element.name} itself: it is a symbol of its own then",
        )
    )
