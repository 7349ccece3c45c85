"""How many terms a formula will have, before it is made."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

from flint import fmpq_mat

from equiv.equations.symbolic.amount import Amount
from equiv.equations.symbolic.numbers import as_fmpq
from equiv.equations.system import System


def forecast(system: System) -> int | None:
    """How many terms the denominator has; known beforehand where all values are R, L or C.

    Every term of such a determinant has the coefficient ±1 and they have one sign, so that
    with all symbols at 1 it counts them.
    """
    plain = {"resistor", "conductance", "inductor", "capacitor", "voltage", "current",
             "short", "open"}  # fmt: skip
    elements: list[Any] = list(system.layout.network.elements.values())
    if not all(e.kind in plain for e in elements):
        return None
    parts = [e.value.only for e in elements if e.role == "passive" and isinstance(e.value, Amount)]
    symbols = [power for part in parts for power in part.powers]
    if any(part.number != 1 for part in parts) or len(set(symbols)) != len(parts):
        return None
    size = system.size
    table = [Fraction(0)] * (size * size)
    for row, column, value in zip(*(x.tolist() for x in system.a), strict=True):
        table[row * size + column] += _with_ones(value)
    return abs(int(fmpq_mat(size, size, list(map(as_fmpq, table))).det().p)) if size else 1


def _with_ones(value: Any) -> Fraction:
    if isinstance(value, Amount):
        return Fraction(sum(part.number for part in value.parts.values()))
    return Fraction(value)
