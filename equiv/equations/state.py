"""One solution of a network's equations."""

from __future__ import annotations

from functools import cached_property

import numpy as np

from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.equations.scalars import scalar
from equiv.equations.system import System

BALANCE = 1e-9
"""The limit of a power balance."""
EPSILON = 2.0**-53
ROUNDINGS = 32
"""Units of the last digit that rounding may cost a solution."""


class State:
    """One solution: node voltages over ground (V) and branch currents (A), phasors rms."""

    def __init__(self, system: System, x: Numbers, u: Numbers) -> None:
        self.system, self.x, self.u = system, x, u

    @cached_property
    def currents(self) -> Numbers:
        """Every branch's current."""
        return self.system.currents(self.x, self.u)

    @cached_property
    def voltages(self) -> Numbers:
        """Every branch's voltage."""
        return self.system.voltages(self.x)

    def of(self, quantity: Quantity) -> complex:
        """A voltage or current of this solution."""
        row = self.system.row(quantity)
        return scalar(row.state @ self.x + row.source @ self.u)

    def largest(self, what: str) -> float:
        """The largest voltage (V) or current (A) of any branch."""
        values = self.voltages if what == "V" else self.currents
        return float(np.abs(values).max(initial=0.0))

    def balance(self) -> float:
        """|Σ v·i*| / Σ|v·i*| over all branches (B. D. H. Tellegen, 1952); 0 where nothing flows."""
        powers = self.voltages * np.conj(self.currents)
        size, off = float(np.abs(powers).sum()), float(abs(powers.sum()))
        if off <= BALANCE * size:
            return off / size if size else 0.0
        # where no power flows at all, rounding is judged by what the currents were made of
        gross = float(self.system.gross_powers(self.x, self.u).sum())
        return off / gross if off <= ROUNDINGS * EPSILON * gross else off / size
