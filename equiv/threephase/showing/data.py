"""Faults as JSON: amperes at the bus's own voltage level, rms; voltages phase to earth."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import Any

from equiv.analyses.result import finite, pair
from equiv.threephase.cases import FaultCase, FaultTerm, Phases, Relay
from equiv.threephase.showing.study import Study
from equiv.threephase.showing.sums import sums_of
from equiv.threephase.words import NO_IMPEDANCE, NO_INFEED


def fault_data(cases: Iterable[FaultCase], study: Study) -> dict[str, Any]:
    """The `result` of the JSON object."""
    return {
        "basis": study.basis,
        "case": study.case,
        "study": study.data(),
        "faults": [_case(c) for c in cases],
    }


def _case(case: FaultCase) -> dict[str, Any]:
    return {
        "bus": case.bus,
        "type": case.type,
        "kilovolts": case.volts / 1e3,
        "phase": case.phase,
        "phases": _phases(case.phases),
        "earth": pair(case.earth),
        "sequence": dict(zip("012", map(pair, case.sequence), strict=True)),
        "x_over_r": None if case.x_over_r is None else finite(case.x_over_r),
        "x_over_r_reason": _no_ratio(case),
        "peak_factor": case.peak_factor,
        "peak": case.peak,
        "asymmetrical_rms": case.asymmetrical_rms,
        "peak_reason": case.no_peak or None,
        "terms": _terms(case.terms, case.total),
        "total": pair(case.total),
        "check": None if case.check is None else _phases(case.check),
        "voltages": _voltages(case.voltages),
        "relays": [_relay(relay) for relay in case.relays],
        "reasons": list(case.reasons),
    }


def _no_ratio(case: FaultCase) -> str | None:
    """Why there is no X/R."""
    if case.x_over_r is not None:
        return None
    return case.no_peak or "the fault loop has no resistance"


def _phases(phases: Phases) -> dict[str, Any]:
    return dict(zip("abc", map(pair, phases), strict=True))


def _voltages(voltages: Mapping[str, Phases]) -> dict[str, Any]:
    return {bus: _phases(phases) for bus, phases in voltages.items()}


def _terms(terms: Sequence[FaultTerm], total: complex) -> list[dict[str, Any]]:
    sums = sums_of(terms, total)
    return [
        {
            "source": term.source,
            "kind": term.kind,
            "members": list(term.members),
            "contribution": pair(term.contribution),
            "share": sums.share(plain),
            "gross_share": sums.gross_share(plain),
            "running_sum": pair(running),
            "partial": None if term.partial is None else _phases(term.partial),
            "partial_bus": term.partial_bus,
            "parallel": term.parallel,
        }
        for term, plain, running in zip(terms, sums.terms, sums.running_sums, strict=True)
    ]


def _relay(relay: Relay) -> dict[str, Any]:
    return {
        "branch": relay.branch,
        "bus": relay.bus,
        "phases": _phases(relay.phases),
        "terms": _terms(relay.terms, relay.total),
        "total": pair(relay.total),
        "infeed_factor": pair(relay.infeed_factor),
        "infeed_factor_reason": _reason(relay, relay.infeed_factor, NO_INFEED),
        "impedance": pair(relay.impedance),
        "impedance_reason": _reason(relay, relay.impedance, NO_IMPEDANCE),
        "parallel": relay.parallel,
    }


def _reason(relay: Relay, value: complex | None, words: str) -> str | None:
    """Why a relay has no such value."""
    return None if value is not None else relay.blind or words
