"""Loads in exact numbers."""

from __future__ import annotations

from collections.abc import Sequence

from equiv.elements import KINDS
from equiv.equations.layout import arithmetic_of
from equiv.errors import Diagnostic, UsageError
from equiv.language.loads import Load
from equiv.network import Network

_WHY_NOT = {
    "power": "a constant power is met where a square root says, which is irrational as a rule",
    "curve": "the points of a curve were measured, and rounded",
}


def exact_loads(network: Network, loads: Sequence[Load]) -> list[Load]:
    """The loads, with exact values where the network's numbers are exact.

    Errors: UsageError for a load that has no exact point.
    """
    if not network.exact:
        return list(loads)
    return [_exact(network, load) for load in loads]


def _exact(network: Network, load: Load) -> Load:
    if load.kind in _WHY_NOT:
        message = f"no exact result: {load.text}: {_WHY_NOT[load.kind]}"
        hint = "exact loads are impedances, short, open and constant currents"
        raise UsageError(Diagnostic("irrational", message, hint=hint))
    if load.written is None:
        return load
    element = KINDS["impedance"](f"load {load.text}", ("", ""), load.written)
    (value,) = arithmetic_of(network).column([load.written], [element]).tolist()
    return load._replace(value=value)
