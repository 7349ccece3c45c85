"""Elements and their terminal pairs in words."""

from __future__ import annotations

from equiv.elements.element import Element
from equiv.elements.quantity import Quantity
from equiv.errors import Diagnostic
from equiv.units import write_value


def what_it_was(source: Element) -> str:
    """A source that is switched off."""
    value = write_value(source.value, source.fields[0].units[0])  # type: ignore[arg-type]
    at = source.options.at
    when = f" at {write_value(at.value, at.unit)}" if at else ""
    return f"was {source.kind} {value}{when}"


def which_pair(pair: int) -> str:
    """A terminal pair of an element that has several."""
    names = ("first terminal pair", "second terminal pair")
    return f" ({names[pair] if pair < len(names) else f'terminal pair {pair + 1}'})"


def no_such_pair(element: Element, quantity: Quantity) -> Diagnostic:
    """A quantity of a terminal pair that its element does not have."""
    count = len(element.pairs)
    return Diagnostic(
        "no-such-pair",
        f"{element.name} is a {element.kind} and has "
        + ("no terminal pair of its own" if count == 0 else f"{count} terminal pair(s)"),
        hint=f"{quantity} asks for pair {quantity.pair + 1}",
    )
