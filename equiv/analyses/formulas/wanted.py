"""Which formulas are wanted: what are symbols, and what is to be told of them."""

from __future__ import annotations

from collections.abc import Collection, Sequence
from typing import NamedTuple

from equiv.analyses.formulas.shared import shared
from equiv.equations.symbolic.solver import FormulaSolver
from equiv.equations.symbolic.symbolised import NONE_SHARED, Shared
from equiv.errors import Diagnostic, UsageError, nearest
from equiv.network import Network

Chosen = bool | str | Sequence[str]
"""True for all elements, or names: a list, or one text with commas."""


class Wanted(NamedTuple):
    """What was asked for besides the formulas themselves."""

    symbolic: Chosen = True
    expand: bool = False
    fails_for: str | None = None
    derivative: str | None = None

    def solver(self, network: Network) -> FormulaSolver:
        """The network in these symbols. Errors: UsageError for an unknown name."""
        chosen, parameters = self._names(network)
        if network.phasors == "peak" and chosen is not None:
            # a magnitude is rms in results: a written number would be taken for one
            chosen = {*chosen, *(source.name for source in network.sources)}
        found = FormulaSolver(network, chosen, parameters, self.expand)
        for name in filter(None, (self.fails_for, self.derivative)):
            symbol_of(found, name)
        return found

    def _names(self, network: Network) -> tuple[set[str] | None, Shared]:
        if isinstance(self.symbolic, bool) or not self.symbolic:
            return None, NONE_SHARED
        words = self.symbolic.split(",") if isinstance(self.symbolic, str) else self.symbolic
        names = list(dict.fromkeys(word.strip() for word in words if word.strip()))
        for name in names:
            _require(network, name)
        parameters = [n for n in names if n not in network.elements]
        return set(names), shared(network, parameters, names) if parameters else NONE_SHARED


def _require(network: Network, name: str) -> None:
    element = network.elements.get(name)
    if element is None and name not in network.given:
        raise UsageError(
            Diagnostic(
                "unknown-name",
                f"there is no element and no parameter called {name}, to be a symbol",
                hint=nearest(name, [*network.elements, *network.given])
                or "names behind --symbolic are separated by commas; without any, all are symbols",
            )
        )
    if element is not None and element.value is None:
        message = f"{name} is a {element.kind} and has no value that could be a symbol"
        raise UsageError(Diagnostic("no-value", message))


def symbol_of(solver: FormulaSolver, name: str) -> int:
    """The number of the symbol of an element (or by its name in formulas).

    Errors: UsageError where there is none, or where it is s.
    """
    number = solver.made.symbols.find(name)
    if number is None:
        number = solver.made.symbols.of_element(name)
    if number is None:
        raise UsageError(
            Diagnostic(
                "not-a-symbol",
                f"{name} is not a symbol of these formulas",
                hint=nearest(name, solver.names[:-1]) or f"symbols: {_few(solver.names[:-1])}",
            )
        )
    return number


def _few(names: Collection[str], most: int = 12) -> str:
    listed = list(names)
    return ", ".join(listed[:most]) + (" …" if len(listed) > most else "") or "none"
