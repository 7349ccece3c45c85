"""A network's equations at many frequencies: the laws are affine in s, so two systems make all.

Every coefficient of a law is constant or proportional to s, so that A(s) = G + s C, and likewise
a quantity's row. They are read off, coefficient by coefficient, from the systems at s = 0 and 1
(rad/s), which loses no digits; a third system proves that the laws are affine. Small systems are
solved in stacks, large ones factorised again in the same pattern.

Source: C. W. Ho, A. E. Ruehli, P. A. Brennan (1975); solving in stacks is common practice.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from contextlib import suppress
from typing import NamedTuple

import numpy as np

from equiv.elements.quantity import Quantity
from equiv.equations.arithmetic import FLOATING
from equiv.equations.dense import balance
from equiv.equations.factor import DENSE_UP_TO, IllConditionedError
from equiv.equations.graph import findings
from equiv.equations.layout import Layout, Numbers
from equiv.equations.system import System
from equiv.network import Network, Progress, no_progress

STACK_BYTES = 512 * 1024
"""Of the matrices that are solved at once: they stay in the cache (measured)."""
FEWEST_IN_STACK = 8
WORST_IN_STACK = 1e6
"""Condition beyond which a point is left to a solver that balances and refines it."""
FEWEST_TO_ORDER = 4
"""Points from which it pays to find the order of elimination first, once for all of them."""
_REBALANCED = 4.0
"""The change of frequency after which a stack is balanced anew."""
_SEED = 20240903


class AffineRow(NamedTuple):
    """A quantity as y = (c0 + s c1) · x + source · u."""

    still: Numbers
    rising: Numbers
    source: Numbers


class Coefficients(NamedTuple):
    """What a unit of each source gives: points × quantities × sources, and where to believe it."""

    values: Numbers
    reliable: Numbers


class Batch:
    """A network's equations for every s = jω; `usable` tells whether they can be made so."""

    def __init__(self, network: Network, form: str = "nodal") -> None:
        self.usable = False
        # what a file gives at some frequencies is no law in s
        if any(element.table for element in network.elements.values()):
            return
        layout = Layout(network, FLOATING)
        systems = [System(layout, form, s) for s in (0.0, 1.0, 2.0)]
        self._systems = systems
        self.size, self.source_count = systems[1].size, systems[1].source_count
        self.usable = self.size > 0 and not findings(systems[1].laws) and self._is_affine()
        if not self.usable:
            return
        a = systems[0].a
        self._places = (a.rows, a.columns)
        self._still = a.values
        self._rising = systems[1].a.values - a.values
        self._b = systems[1].b

    @property
    def dense(self) -> bool:
        """Whether the system is small enough to be solved in stacks."""
        return self.size <= DENSE_UP_TO

    def _is_affine(self) -> bool:
        """Real laws whose three systems lie on a line, coefficient by coefficient."""
        one, two, three = (system.a for system in self._systems)
        if any(np.iscomplexobj(a.values) for a in (one, two, three)):
            return False
        if not (len(one.rows) == len(two.rows) == len(three.rows)):
            return False
        same = all(
            np.array_equal(a.rows, one.rows) and np.array_equal(a.columns, one.columns)
            for a in (two, three)
        )
        if not same:
            return False
        told = 2 * two.values - one.values
        return bool(np.allclose(told, three.values, rtol=1e-12, atol=0.0))

    def row(self, quantity: Quantity) -> AffineRow:
        """The row of a voltage or current quantity."""
        still, one = (system.row(quantity) for system in self._systems[:2])
        return AffineRow(still.state, one.state - still.state, one.source)

    def coefficients(
        self, omega: Numbers, rows: Sequence[AffineRow], progress: Progress = no_progress
    ) -> Coefficients:
        """The coefficients of every source on some quantities at each angular frequency (rad/s)."""
        values = np.zeros((len(omega), len(rows), self.source_count), complex)
        b = self._filled_right() if self.dense else None
        reliable = np.ones(len(omega), bool)
        work = self._stacked if self.dense else self._refactored
        for done, adjoint, good in work(omega, rows):
            progress("points", done.stop, len(omega))
            reliable[done] = good
            if b is not None:
                np.matmul(adjoint, b, out=values[done])
            else:
                given = adjoint[0][:, self._b.rows] * self._b.values
                np.add.at(values[done.start].T, self._b.columns, given.T)
        values += np.array([row.source for row in rows])
        return Coefficients(values, reliable)

    # Small systems: Aᵀ λ = c in stacks, with one more column that tells the condition.

    def _stacked(
        self, omega: Numbers, rows: Sequence[AffineRow]
    ) -> Iterator[tuple[slice, Numbers, Numbers]]:
        g, c = (self._filled(values).T for values in (self._still, self._rising))
        n = self.size
        high = max(FEWEST_IN_STACK, STACK_BYTES // (16 * n * n))
        stack = np.empty((min(high, len(omega)), n, n), complex)
        signs = np.random.default_rng(_SEED).choice([-1.0, 1.0], n)
        still = np.array([row.still for row in rows]).T
        rising = np.array([*(row.rising for row in rows), np.zeros(n)]).T
        for stretch, middle in _stretches(omega):
            after, before = balance(g + middle * c)
            scale = after[:, None] * before
            fixed, growing = g * scale, c * scale
            norms = _norm(fixed), _norm(growing)
            stack.real = fixed
            right: Numbers = np.column_stack((after[:, None] * still, signs))
            for start in range(stretch.start, stretch.stop, high):
                part = slice(start, min(start + high, stretch.stop))
                some = omega[part]
                np.multiply(some[:, None, None], growing, out=stack.imag[: len(some)])
                columns = right
                if rising.any():
                    columns = right + 1j * some[:, None, None] * (after[:, None] * rising)
                x = _solved(stack[: len(some)], columns)
                condition = (norms[0] + some * norms[1]) * np.abs(x[:, :, -1]).max(axis=1)
                good = condition <= WORST_IN_STACK
                yield part, x[:, :, :-1].transpose(0, 2, 1) * before, good

    def _filled_right(self) -> Numbers:
        out = np.zeros((self.size, self.source_count))
        np.add.at(out, (self._b.rows, self._b.columns), self._b.values)
        return out

    def _filled(self, values: Numbers) -> Numbers:
        out = np.zeros((self.size, self.size))
        np.add.at(out, self._places, values)
        return out

    # Large systems: the pattern is made once, and each point is one factorisation.

    def _refactored(
        self, omega: Numbers, rows: Sequence[AffineRow]
    ) -> Iterator[tuple[slice, Numbers, Numbers]]:
        from equiv.equations.pattern import Pattern

        pattern = Pattern(self._still, self._rising, self._places, self.size)
        if len(omega) >= FEWEST_TO_ORDER:
            with suppress(IllConditionedError):
                pattern.put_in_order(float(omega[len(omega) // 2]))
        order = pattern.order
        still, rising = (
            np.array([getattr(row, part)[order] for row in rows]).T for part in ("still", "rising")
        )
        for point, w in enumerate(omega.tolist()):
            right = still + 1j * w * rising
            x = np.full((1, len(rows), self.size), np.nan, complex)
            good = np.array([False])
            with suppress(IllConditionedError):
                factor = pattern.factor(w)
                found = factor.solve_transposed(right[:, 0] if len(rows) == 1 else right)
                x[0][:, order], good = found.T, np.array([True])
            yield slice(point, point + 1), x, good


def _stretches(omega: Numbers) -> Iterator[tuple[slice, float]]:
    """Stretches of points that one balance suits, and the frequency to balance at."""
    start = 0
    while start < len(omega):
        first, ahead = omega[start], omega[start:]
        far = (ahead > _REBALANCED * first) | (ahead * _REBALANCED < first)
        stop = start + (int(far.argmax()) if far.any() else len(ahead))
        yield slice(start, stop), float(np.sqrt(first * omega[stop - 1]))
        start = stop


def _norm(matrix: Numbers) -> float:
    return float(np.abs(matrix).sum(axis=1).max(initial=0.0))


def _solved(stack: Numbers, right: Numbers) -> Numbers:
    """The solutions of a stack; where one matrix is singular, it alone has none (not numbers)."""
    try:
        return np.asarray(np.linalg.solve(stack, right))
    except np.linalg.LinAlgError:
        if len(stack) == 1:
            return np.full((1, *right.shape[-2:]), np.nan, complex)
    half = len(stack) // 2
    parts = (right, right) if right.ndim == 2 else (right[:half], right[half:])
    return np.concatenate([_solved(stack[:half], parts[0]), _solved(stack[half:], parts[1])])
