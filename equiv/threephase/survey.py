"""Faults at many buses: a factor a bus for each type, on matrices that all types share.

A case or a table is made when it is asked for, so that 10 000 buses fit into memory.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from functools import cached_property
from typing import Any, overload

import numpy as np

from equiv.equations.layout import Numbers
from equiv.threephase.cases import FaultCase, FaultTerm, Phases
from equiv.threephase.cases import Sequence as SequenceValues
from equiv.threephase.casework import REMAINDER, slow_peak_factor, why, x_over_r
from equiv.threephase.matrices import Matrices
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
from equiv.threephase.standard import asymmetry_factor


class OfType:
    """Faults of one type at all the buses."""

    def __init__(
        self, of: Matrices, fault: Fault, keep: Sequence[bool], reasons: Mapping[str, str]
    ) -> None:
        self.of, self.fault, self.reasons = of, fault, reasons
        self.rows = np.flatnonzero(keep)
        """The buses that have an answer."""
        self.per_volt = currents(
            fault.type, of.z, fault.impedance / of.ohms, fault.ground / of.ohms
        )
        require_bounded(self.per_volt, fault.type, of.buses)
        slow = scaled_fault(fault, of.slow)
        self.slow = currents(fault.type, of.z_slow, slow.impedance / of.ohms, slow.ground / of.ohms)
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

    def phases(self, row: int) -> tuple[Phases, SequenceValues]:
        """Phase and sequence currents (A) at a bus."""
        unit = complex(self.of.voltages[row]) * float(self.of.amperes[row])
        of = SequenceValues(*(complex(column[row]) * unit for column in self.per_volt))
        return phase_currents(self.fault.type, of), of

    def ratio_and_peak(self, row: int) -> tuple[float | None, float, float, float]:
        """X/R, peak factor, peak current and asymmetrical rms at a bus."""
        one = complex(self.per_volt.positive[row])
        ratio = x_over_r(1 / one if one else None)
        kappa = slow_peak_factor(complex(self.slow.positive[row]))
        largest = max(map(abs, self.phases(row)[0]))
        asymmetrical = asymmetry_factor(math.inf if ratio is None else ratio) * largest
        return ratio, kappa, kappa * math.sqrt(2) * largest, asymmetrical

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
            terms.append(FaultTerm("earthing and network", (), left, kind="network"))
        ratio, kappa, peak, asymmetrical = self.ratio_and_peak(row)
        reasons = why(self.reasons, bus.name, fault.type, complex(of.voltages[row]), of.z.of(row))
        return FaultCase(
            bus.name, fault.type, bus.volts, phases, 3 * sequence.zero, sequence, ratio, kappa,
            peak, asymmetrical, tuple(terms), total, reasons=reasons,
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
        found = [self.ratio_and_peak(row) for row in rows.tolist()]
        names = [heading.name for heading in of.groups.headings]
        terms, totals = self.terms(rows), self.totals(rows)
        left = totals - terms.sum(axis=1)
        if not of.superposed and np.any(np.abs(left) > REMAINDER * np.abs(totals)):
            names.append("earthing and network")
            terms = np.column_stack([terms, left])
        phase = "a" if self.fault.type in ("three-phase", "line-ground") else "b"
        return Survey(
            self.fault.type, phase, [of.buses[row] for row in rows.tolist()], names, totals, terms,
            [each[0] for each in found], [each[2] for each in found],
        )  # fmt: skip


class SurveyCases(Sequence[FaultCase]):
    """The cases of a survey, bus by bus and type by type, each made when it is asked for."""

    def __init__(self, types: Sequence[OfType]) -> None:
        self.types = tuple(types)
        keyed = ((row, n) for n, of in enumerate(types) for row in of.rows.tolist())
        self._order = sorted(keyed)

    def __len__(self) -> int:
        return len(self._order)

    @overload
    def __getitem__(self, index: int) -> FaultCase: ...
    @overload
    def __getitem__(self, index: slice) -> Sequence[FaultCase]: ...
    def __getitem__(self, index: Any) -> Any:
        if isinstance(index, slice):
            return [self[n] for n in range(*index.indices(len(self)))]
        row, number = self._order[index]
        return self.types[number].case(row)

    def __iter__(self) -> Iterator[FaultCase]:
        return (self.types[number].case(row) for row, number in self._order)


class Surveys(Sequence[Survey]):
    """A survey a type, each made when it is asked for."""

    def __init__(self, types: Sequence[OfType]) -> None:
        self.types = tuple(types)

    def __len__(self) -> int:
        return len(self.types)

    @overload
    def __getitem__(self, index: int) -> Survey: ...
    @overload
    def __getitem__(self, index: slice) -> Sequence[Survey]: ...
    def __getitem__(self, index: Any) -> Any:
        if isinstance(index, slice):
            return [of.survey() for of in self.types[index]]
        return self.types[index].survey()
