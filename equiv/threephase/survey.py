"""Faults at many buses: a factor a bus for each type, on matrices that all types share.

A case or a table is made when it is asked for, so that 10 000 buses fit into memory.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping, Sequence
from functools import cached_property
from typing import Generic, TypeVar, overload

import numpy as np

from equiv.equations.layout import Numbers
from equiv.threephase.asymmetry import Asymmetry, asymmetry
from equiv.threephase.cases import (
    STARS_AND_NETWORK,
    FaultCase,
    FaultTerm,
    Phases,
    largest_phase,
    phase_of_terms,
)
from equiv.threephase.cases import Sequence as SequenceValues
from equiv.threephase.contributions import REMAINDER
from equiv.threephase.matrices import Matrices
from equiv.threephase.reasons import why
from equiv.threephase.sequence.connection import (
    EARTH_FAULTS,
    currents,
    phase_currents,
    term_weights,
)
from equiv.threephase.sequence.connection import phases as phases_of
from equiv.threephase.sequence.faulted import (
    Fault,
    across,
    require_bounded,
    scaled_fault,
    unearthed_rise,
)
from equiv.threephase.showing.survey_tables import Survey

_K = TypeVar("_K")
_T = TypeVar("_T")


class TermsOfType:
    """The currents of faults of one type at all the buses, and their terms."""

    def __init__(self, of: Matrices, fault: Fault) -> None:
        self.of, self.fault = of, fault
        self.per_volt = currents(
            fault.type, of.z, fault.impedance / of.ohms, fault.ground / of.ohms
        )
        require_bounded(self.per_volt, fault.type, of.buses)
        self.weights = term_weights(fault.type)

    @cached_property
    def factor(self) -> Numbers:
        """The current (A) of the phase that the terms are about, per volt before the fault."""
        found = sum(w * i for w, i in zip(self.weights, self.per_volt, strict=True))
        return np.asarray(found * self.of.amperes)

    def terms(self, rows: Numbers) -> Numbers:
        """The terms (A) of each source or group at some buses."""
        of = self.of
        if of.superposed:
            return of.groups.summed(self.factor[rows, None] * of.shares["voltage"][rows])
        found = np.zeros((len(rows), len(of.machines)), complex)
        for s in (0, 1, 2):
            drawn = self.weights[s] * self.per_volt[s] * of.voltages * of.amperes
            found += drawn[rows, None] * of.delivered[s][rows]
        return of.groups.summed(found)

    def totals(self, rows: Numbers) -> Numbers:
        """The current (A) of the phase that the terms are about."""
        return np.asarray((self.factor * self.of.voltages)[rows])


class OfType(TermsOfType):
    """Faults of one type at all the buses: cases and columns."""

    def __init__(
        self, of: Matrices, fault: Fault, keep: Sequence[bool], reasons: Mapping[str, str]
    ) -> None:
        super().__init__(of, fault)
        self.reasons = reasons
        self.rows = np.flatnonzero(keep)
        """The buses that have an answer."""
        slow = scaled_fault(fault, of.slow)
        self.slow = currents(fault.type, of.z_slow, slow.impedance / of.ohms, slow.ground / of.ohms)

    @cached_property
    def currents(self) -> tuple[Numbers, Numbers]:
        """Phase and sequence currents (A): three rows, a column a bus."""
        of = self.of
        sequence = np.array([column * of.voltages * of.amperes for column in self.per_volt])
        found = phase_currents(self.fault.type, SequenceValues(*sequence))
        return np.array([phase + np.zeros(len(of.buses)) for phase in found]), sequence

    @cached_property
    def largest(self) -> Numbers:
        """The largest phase current (A) at each bus."""
        return np.asarray(np.abs(self.currents[0]).max(axis=0))

    def phases(self, row: int) -> tuple[Phases, SequenceValues]:
        """Phase and sequence currents (A) at a bus."""
        phases, sequence = (of[:, row].tolist() for of in self.currents)
        return Phases(*phases), SequenceValues(*sequence)

    def asymmetry(self, row: int) -> Asymmetry:
        """X/R, peak factor, peak current and first-cycle rms at a bus."""
        one, slow = self.per_volt.positive[row], self.slow.positive[row]
        return asymmetry(complex(one), complex(slow), float(self.largest[row]))

    def why(self, row: int) -> tuple[str, ...]:
        """Why the current at a bus is zero, if it is."""
        of = self.of
        voltage, bus = complex(of.voltages[row]), of.buses[row]
        return why(self.reasons, bus, self.fault.type, voltage, of.z.of(row))

    def case(self, row: int) -> FaultCase:
        """The fault at one bus: its currents and its terms."""
        of, fault = self.of, self.fault
        bus = of.solution.system.buses[of.buses[row]]
        phases, sequence = self.phases(row)
        at = np.array([row])
        total = complex(self.totals(at)[0])
        terms = list(of.groups.of_headings(self.terms(at)[0]))
        left = total - sum(term.contribution for term in terms)
        if not of.superposed and abs(left) > REMAINDER * abs(total):
            terms.append(FaultTerm(STARS_AND_NETWORK, (), left, kind="network"))
        first = self.asymmetry(row)
        return FaultCase(
            bus.name, fault.type, bus.volts, phases, 3 * sequence.zero, sequence,
            *first[:4], tuple(terms), total, reasons=self.why(row), no_peak=first.reason,
            voltages={bus.name: self._voltages(row, phases)},
        )  # fmt: skip

    def _voltages(self, row: int, currents_: Phases) -> Phases:
        """The phase voltages to earth of the faulted bus during the fault (V)."""
        of, fault = self.of, self.fault
        unit = complex(of.voltages[row])
        z = SequenceValues(of.z.zero[row], of.z.positive[row], of.z.negative[row])
        zero, positive, negative = (
            -z_s * complex(i[row]) * unit if np.isfinite(z_s) else 0j
            for z_s, i in zip(z, self.per_volt, strict=True)
        )
        positive += unit
        if fault.type in EARTH_FAULTS and not np.isfinite(z.zero):
            through = complex(self.per_volt.positive[row]) * unit
            zero = unearthed_rise(fault, positive, negative, through, float(of.ohms[row]))
        volts = of.solution.system.buses[of.buses[row]].volts / math.sqrt(3)
        found = phases_of(SequenceValues(zero, positive, negative))
        return across(fault, currents_, Phases(*(complex(volts * v) for v in found)))

    def survey(self) -> Survey:
        """All the buses as columns."""
        of, rows = self.of, self.rows
        found = [self.asymmetry(row) for row in rows.tolist()]
        phases, sequence = (of_all[:, rows] for of_all in self.currents)
        names = [heading.name for heading in of.groups.headings]
        kinds = [heading.kind for heading in of.groups.headings]
        terms, totals = self.terms(rows), self.totals(rows)
        left = totals - terms.sum(axis=1)
        if not of.superposed and np.any(np.abs(left) > REMAINDER * np.abs(totals)):
            names.append(STARS_AND_NETWORK)
            kinds.append("network")
            terms = np.column_stack([terms, left])
        phase = phase_of_terms(self.fault.type)
        zero = rows[totals == 0].tolist()
        reasons = [(of.buses[row], words) for row in zero for words in self.why(row)]
        return Survey(
            self.fault.type, phase, [of.buses[row] for row in rows.tolist()], names, totals, terms,
            [each.x_over_r for each in found], [each.peak for each in found],
            3 * sequence[0], [largest_phase(Phases(*each)) for each in phases.T.tolist()], kinds,
            [each.reason for each in found], reasons,
        )  # fmt: skip


class WhenAsked(Sequence[_T], Generic[_K, _T]):
    """What is made of each of some keys, each time that it is asked for."""

    def __init__(self, keys: Sequence[_K], make: Callable[[_K], _T]) -> None:
        self._keys, self._make = keys, make

    def __len__(self) -> int:
        return len(self._keys)

    @overload
    def __getitem__(self, index: int) -> _T: ...
    @overload
    def __getitem__(self, index: slice) -> Sequence[_T]: ...
    def __getitem__(self, index: int | slice) -> _T | Sequence[_T]:
        if isinstance(index, slice):
            return WhenAsked(self._keys[index], self._make)
        return self._make(self._keys[index])


def cases_of(types: Sequence[OfType]) -> Sequence[FaultCase]:
    """The cases of surveys, bus by bus and type by type."""
    keys = sorted((row, n) for n, of in enumerate(types) for row in of.rows.tolist())
    return WhenAsked(keys, lambda key: types[key[1]].case(key[0]))


def surveys_of(types: Sequence[OfType]) -> Sequence[Survey]:
    """A survey a type."""
    return WhenAsked(types, OfType.survey)
