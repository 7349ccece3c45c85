"""Dense floating-point arithmetic, for small systems."""

from __future__ import annotations

from typing import Any

import numpy as np

from equiv.equations.factor import WORST_CONDITION, IllConditionedError
from equiv.equations.layout import Numbers
from equiv.equations.system import System


def matrix(system: System) -> Numbers:
    """The matrix A of a system, filled in."""
    a = np.zeros((system.size, system.size), system.dtype)
    np.add.at(a, (system.a.rows, system.a.columns), system.a.values)
    return a


def gross_matrix(system: System) -> Numbers:
    """Σ|entry| for each place of A: an entry that is small by cancelling has lost its digits."""
    a = np.zeros((system.size, system.size))
    np.add.at(a, (system.a.rows, system.a.columns), np.abs(system.a.values))
    return a


def balance(a: Numbers) -> tuple[Numbers, Numbers]:
    """Powers of two for rows and columns that bring the largest entry of each near one."""
    size = np.abs(a)
    rows, columns = np.ones(a.shape[0]), np.ones(a.shape[1])
    for _ in range(2):
        # the square root shares the correction between rows and columns
        by_row, by_column = size.max(axis=1, initial=0.0), size.max(axis=0, initial=0.0)
        rows *= (r := _inverse_power(np.sqrt(by_row)))
        columns *= (c := _inverse_power(np.sqrt(by_column)))
        size = size * r[:, None] * c
    return rows, columns


def _inverse_power(values: Numbers) -> Numbers:
    """The power of two nearest to 1/value: scaling by it does not round."""
    safe = np.where((values > 0) & np.isfinite(values), values, 1.0)
    return np.exp2(-np.round(np.log2(safe)))


class DenseFactor:
    """A balanced dense matrix, solved by LAPACK with one step of refinement."""

    def __init__(self, system: System, strict: bool = True) -> None:
        self.a = matrix(system)
        self.rows, self.columns = balance(self.a)
        self.scaled = self.a * self.rows[:, None] * self.columns
        gross = gross_matrix(system) * self.rows[:, None] * self.columns
        condition = self._condition(gross, componentwise=not strict)
        if not condition <= WORST_CONDITION:
            raise IllConditionedError

    def _condition(self, gross: Numbers, componentwise: bool) -> float:
        """1-norm condition of the balanced matrix, or the radius of |A⁻¹||A|.

        |A| is taken before entries cancel, as far as rounding goes. The latter does not change with any scaling of rows and columns: it tells a stiff network
        from a singular one (F. L. Bauer, 1966; R. D. Skeel, 1979).
        """
        if not self.a.size:
            return 1.0
        try:
            inverse = np.linalg.inv(self.scaled)
        except np.linalg.LinAlgError:
            return float("inf")
        if not np.isfinite(inverse).all():
            return float("inf")
        if not componentwise:
            return float(np.linalg.norm(gross, 1) * np.linalg.norm(inverse, 1))
        product = np.abs(inverse) @ gross
        vector = np.ones(len(product))
        radius = 1.0
        for _ in range(30):
            vector = product @ vector
            radius = float(vector.max())
            vector = vector / radius
        return radius

    def solve(self, right: Numbers) -> Numbers:
        """x of A x = right."""
        return self._refined(self.scaled, self.a, self.rows, self.columns, right)

    def solve_transposed(self, right: Numbers) -> Numbers:
        """x of Aᵀ x = right."""
        return self._refined(self.scaled.T, self.a.T, self.columns, self.rows, right)

    @staticmethod
    def _refined(scaled: Numbers, a: Numbers, before: Any, after: Any, right: Numbers) -> Numbers:
        before, after = (v if right.ndim == 1 else v[:, None] for v in (before, after))
        try:
            x = after * np.linalg.solve(scaled, before * right)
            rest = right - a @ x
            return np.asarray(x + after * np.linalg.solve(scaled, before * rest))
        except np.linalg.LinAlgError:
            raise IllConditionedError from None
