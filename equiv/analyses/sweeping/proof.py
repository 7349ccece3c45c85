"""What proves a sweep: some of its points solved again, each as a network of its own."""

from __future__ import annotations

import random
from collections.abc import Callable, Sequence
from dataclasses import replace

import numpy as np

from equiv.analyses.result import Check
from equiv.analyses.superposition.subcircuits import MOST_SOURCES, MOST_UNKNOWNS
from equiv.analyses.superposition.terms import CLOSURE_LIMIT, FLOOR, TERM_LIMIT
from equiv.analyses.sweeping.curves import Curve
from equiv.analyses.sweeping.points import with_tests
from equiv.elements.element import Frequency
from equiv.elements.quantity import Quantity
from equiv.equations.factor import DENSE_UP_TO
from equiv.equations.layout import Numbers
from equiv.equations.solution import Solver, State
from equiv.errors import EquivError
from equiv.network import Network

SAMPLE, LARGE_SAMPLE = 7, 3
_SEED = 20240904

Place = Callable[[int], tuple[Network, Frequency]]
"""The network and the frequency of the sources at a point."""


def sample(curves: Sequence[Curve], unknowns: int) -> list[int]:
    """Both ends and some drawn points, of those that have a value."""
    known = np.flatnonzero(np.any([curve.exists for curve in curves], axis=0)).tolist()
    most = SAMPLE if unknowns <= DENSE_UP_TO else LARGE_SAMPLE
    if len(known) <= most:
        return known
    inner = random.Random(_SEED).sample(known[1:-1], most - 2)
    return sorted([known[0], *inner, known[-1]])


class Proof:
    """The sampled points in branch-current form: each term, each impedance, all sources at once.

    What is not above its rounding there is zero; a term that is zero at every sampled point is
    taken to be zero, so that its rounding does not pass for a result.
    """

    def __init__(self, curves: Sequence[Curve], place: Place, points: Sequence[int]) -> None:
        self.off_terms = self.off_sums = 0.0
        self.proved = 0
        self._zeros = [np.zeros(len(c.sources)) for c in curves]
        for point in points:
            network, frequency = place(point)
            try:
                tested = with_tests(network, [c.asked for c in curves])
                solver = Solver(tested, frequency, "branch-current")
                state = solver.state()
            except EquivError:
                continue
            self.proved += 1
            for curve, zeros in zip(curves, self._zeros, strict=True):
                if curve.exists[point]:
                    self._compare(curve, zeros, _Again(curve, solver, state), point)
        cleaned = zip(curves, self._zeros, strict=True)
        self.curves = tuple(_cleaned(curve, zeros) for curve, zeros in cleaned)

    def checks(self, where: str) -> list[Check]:
        """The worst of all curves and points."""
        if not self.proved:
            return []
        many = f"{self.proved} of {len(self.curves[0].total)} points{where}"
        return [
            Check(f"terms against the branch-current form, {many}", self.off_terms, TERM_LIMIT),
            Check(f"sums against all sources at once, {many}", self.off_sums, CLOSURE_LIMIT),
        ]

    def _compare(self, curve: Curve, zeros: Numbers, again: _Again, point: int) -> None:
        own, told, bound = curve.terms[point], again.terms, again.bounds[:-1]
        # a bound that was passed once is no bound of zero
        zeros[:] = np.where(np.abs(told) <= bound, np.maximum(zeros, bound), np.inf)
        there = np.isfinite(own) & ((np.abs(own) > bound) | (np.abs(told) > bound))
        size = np.maximum(np.abs(own), np.abs(told))
        size = np.maximum(size, FLOOR * again.size)[there]
        off = np.abs(own - told)[there] / size
        self.off_terms = max(self.off_terms, float(off.max(initial=0.0)))
        if curve.impedance is not None:
            z, rounding = again.impedance()
            ours = complex(curve.impedance[point])
            if max(abs(z), abs(ours)) > rounding:
                self.off_terms = max(self.off_terms, abs(z - ours) / max(abs(z), abs(ours)))
        total = complex(curve.total[point])
        size_of_sum = max(again.size, abs(again.whole))
        if max(abs(total), abs(again.whole)) > again.bounds[-1]:
            self.off_sums = max(self.off_sums, abs(total - again.whole) / size_of_sum)


class _Again:
    """A curve's numbers at a point by the other form; `bounds` are their rounding, sum last."""

    def __init__(self, curve: Curve, solver: Solver, state: State) -> None:
        self.solver = solver
        self.numbers = solver.layout.source_number
        self.chosen = [self.numbers[name] for name in curve.sources]
        self.asked = curve.asked
        self.terms: Numbers = np.zeros(len(self.chosen), complex)
        self.bounds: Numbers = np.zeros(len(self.chosen) + 1)
        self.whole, self.size = 0j, 0.0
        if not curve.is_power:
            (part,) = self.asked.parts
            self.terms, self.bounds = self._terms(part), self._bounds(part)
            self.whole, self.size = state.of(part), float(np.abs(self.terms).sum())
            return
        parts = self.asked.parts
        for v, i in zip(parts[::2], parts[1::2], strict=True):
            volts, amperes = self._terms(v), self._terms(i)
            self.terms = self.terms + volts * amperes.conj()
            self.whole += state.of(v) * state.of(i).conjugate()
            size = float(np.abs(volts).sum() * np.abs(amperes).sum())
            # a product is only rounding where one of its factors is
            v_off, i_off = self._bounds(v), self._bounds(i)
            self.bounds = self.bounds + v_off * (np.abs(amperes).sum() + i_off)
            self.bounds = self.bounds + i_off * np.abs(volts).sum()
            self.size += size

    def _terms(self, part: Quantity) -> Numbers:
        h = self.solver.coefficients(part)
        return np.asarray(h[self.chosen] * self.solver.u[self.chosen])

    def _bounds(self, part: Quantity) -> Numbers:
        """What rounding can make of each term, and of their sum; zeros where there are too many."""
        many = len(self.chosen)
        if many > MOST_SOURCES or self.solver.system.size > MOST_UNKNOWNS:
            return np.zeros(many + 1)
        columns = np.zeros((len(self.solver.u), many + 1), complex)
        columns[self.chosen, range(many)] = self.solver.u[self.chosen]
        columns[:, -1] = self.solver.u
        return self.solver.rounding(part, columns)

    def impedance(self) -> tuple[complex, float]:
        """The port's impedance, and what rounding can make of it."""
        (part,) = self.asked.parts
        number = self.numbers[self.asked.test]
        unit = np.zeros((len(self.solver.u), 1), complex)
        unit[number] = 1.0
        z = complex(self.solver.coefficients(part)[number])
        if self.solver.system.size > MOST_UNKNOWNS:
            return z, 0.0
        return z, float(self.solver.rounding(part, unit)[0])


def _cleaned(curve: Curve, zeros: Numbers) -> Curve:
    """The curve without the rounding of terms that are zero."""
    small = np.isfinite(zeros) & (zeros > 0)
    if not small.any():
        return curve
    limit = np.where(small, zeros, 0.0)
    noise = np.abs(curve.terms) <= limit
    terms = np.where(noise, 0.0, curve.terms)
    if curve.is_power:
        return replace(curve, terms=terms)
    whole = np.isfinite(curve.terms).all(axis=1)
    total = np.where(whole & noise.any(axis=1), terms.sum(axis=1), curve.total)
    return replace(curve, terms=terms, total=total)
