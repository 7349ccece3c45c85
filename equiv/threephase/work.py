"""The work of a fault calculation: networks factorised once, then every bus and type."""

from __future__ import annotations

from collections.abc import Sequence
from contextlib import suppress
from functools import cached_property
from typing import NamedTuple

from equiv.analyses.result import Caution, Check
from equiv.errors import Diagnostic, DoesNotExistError, UsageError
from equiv.network import Progress
from equiv.threephase.cases import FaultCase, largest_phase
from equiv.threephase.casework import CaseMaker
from equiv.threephase.coordinates.phase_coordinates import PhaseCoordinates, UnsolvedError
from equiv.threephase.fault_cautions import CHECKED_UP_TO
from equiv.threephase.matrices import Matrices
from equiv.threephase.model import OneLine, View
from equiv.threephase.proof import checks_of
from equiv.threephase.relays import Place, RelayFinder
from equiv.threephase.sequence.connection import EARTH_FAULTS
from equiv.threephase.sequence.faulted import AtBus, Fault
from equiv.threephase.sequence.findings import no_earth_path
from equiv.threephase.sequence.solve import SystemSolution
from equiv.threephase.showing.setting import source_words
from equiv.threephase.showing.survey_tables import Survey
from equiv.threephase.standard import SLOW
from equiv.threephase.survey import OfType, cases_of, surveys_of

FULL_UP_TO = 100
"""Faulted buses up to which a result has voltages, partial currents and relays."""
_MANY = 8


class Asked(NamedTuple):
    """What was asked for."""

    system: OneLine
    view: View
    buses: tuple[str, ...]
    faults: Sequence[Fault]
    relays: tuple[Place, ...]
    by: str
    progress: Progress


class Found(NamedTuple):
    """The faults, and what proves them."""

    cases: Sequence[FaultCase]
    surveys: Sequence[Survey]
    checks: tuple[Check, ...]
    checked: bool
    """Whether the phase currents were found again in phase coordinates."""


class Work:
    """A system in the views that its faults need."""

    def __init__(self, asked: Asked) -> None:
        self.asked = asked
        self.full = len(asked.buses) <= FULL_UP_TO
        needs_injections = self.full or asked.view.basis != "superposition"
        faults = asked.buses if needs_injections else ()
        self.solution = SystemSolution(asked.system, asked.view, faults)
        self.skipped: frozenset[str] = frozenset()
        """Buses whose earth faults lack data."""

    @cached_property
    def slow(self) -> SystemSolution:
        """The same system at the frequency at which R/X is found for the peak."""
        view = self.asked.view._replace(reactances=SLOW)
        return SystemSolution(self.asked.system, view, self.asked.buses if self.full else ())

    def leave_out(self, named: bool, explicit: bool) -> tuple[Caution, ...]:
        """Leave out the earth faults that need zero-sequence data which are not there.

        Errors: DoesNotExistError where such a fault was asked for.
        """
        if not any(fault.type in EARTH_FAULTS for fault in self.asked.faults):
            return ()
        ties = self.solution.of[0].ties
        lacking = {
            bus: ties.lacking[ties.label[bus]]
            for bus in self.asked.buses
            if ties.label[bus] in ties.lacking
        }
        if not lacking:
            return ()
        self.skipped = frozenset(lacking)
        message = _lacking_words(lacking, len(self.asked.system.buses))
        if explicit and (named or len(lacking) == len(self.asked.buses)):
            raise DoesNotExistError(Diagnostic("no-zero-sequence", message, hint=_HINT))
        words = f"{message}: earth faults there are left out; {_HINT}"
        return (Caution("no-zero-sequence", words),)

    def _kept(self, bus: str, fault: Fault) -> bool:
        return not (fault.type in EARTH_FAULTS and bus in self.skipped)

    def few(self, survey: bool) -> Found:
        """Each fault in full."""
        asked, system = self.asked, self.asked.system
        again = None
        if len(system.buses) <= CHECKED_UP_TO:
            with suppress(UnsolvedError):
                again = PhaseCoordinates(system, asked.view, asked.buses)
        relays = [RelayFinder(self.solution, place) for place in asked.relays]
        reasons = no_earth_path(system, asked.view)
        maker = CaseMaker(self.solution, self.slow, relays, again, asked.by, reasons)
        cases: list[FaultCase] = []
        for done, bus in enumerate(asked.buses):
            asked.progress("faults", done, len(asked.buses))
            at, slow = AtBus(self.solution, bus), AtBus(self.slow, bus)
            cases += [
                maker.case(at, slow, fault) for fault in asked.faults if self._kept(bus, fault)
            ]
        asked.progress("faults", len(asked.buses), len(asked.buses))
        surveys = _columns(cases, asked.faults) if survey else ()
        return Found(
            cases,
            surveys,
            checks_of(system, asked.view.basis, cases, maker.apart, maker.bolted),
            again is not None,
        )

    def many(self) -> Found:
        """All the buses at once, each fault made when it is asked for."""
        asked = self.asked
        if asked.relays:
            message = f"relays are looked at for up to {FULL_UP_TO} buses; {len(asked.buses)} are asked for"
            hint = "name the buses that have the fault"
            raise UsageError(Diagnostic("too-many-buses", message, hint=hint))
        reasons = no_earth_path(asked.system, asked.view)
        matrices = Matrices(self.solution, self.slow, asked.buses, asked.by, asked.progress)
        types = [
            OfType(matrices, fault, [self._kept(bus, fault) for bus in asked.buses], reasons)
            for fault in asked.faults
        ]
        return Found(cases_of(types), surveys_of(types), matrices.checks(), False)


def _columns(cases: Sequence[FaultCase], faults: Sequence[Fault]) -> tuple[Survey, ...]:
    """The cases of each type side by side."""
    import numpy as np

    found = []
    for fault in faults:
        mine = [case for case in cases if case.type == fault.type]
        kinds = {source_words(term): term.kind for case in mine for term in case.terms}
        names = list(kinds)
        at = {name: n for n, name in enumerate(names)}
        terms = np.zeros((len(mine), len(names)), complex)
        for row, case in enumerate(mine):
            for term in case.terms:
                terms[row, at[source_words(term)]] += term.contribution
        if mine:
            found.append(
                Survey(
                    fault.type, mine[0].phase, [case.bus for case in mine], names,
                    np.array([case.total for case in mine]), terms,
                    [case.x_over_r for case in mine], [case.peak for case in mine],
                    np.array([case.earth for case in mine]),
                    [largest_phase(case.phases) for case in mine], list(kinds.values()),
                    [case.no_peak for case in mine],
                    [(case.bus, words) for case in mine for words in case.reasons],
                )
            )  # fmt: skip
    return tuple(found)


def _lacking_words(lacking: dict[str, str], count: int) -> str:
    items = list(dict.fromkeys(lacking.values()))
    named = ", ".join(items[:_MANY]) + (" and others" if len(items) > _MANY else "")
    buses = list(lacking)
    at = "every bus" if len(buses) == count else ", ".join(buses[:_MANY])
    more = f" and {len(buses) - _MANY} more" if at != "every bus" and len(buses) > _MANY else ""
    return f"no zero-sequence data for {named}, which earth-fault currents at {at}{more} need"


_HINT = "write x0 for a generator, z0 for a line, z0/z1 or level1 for an infeed"
