"""The superposition as JSON."""

from __future__ import annotations

from typing import Any

from equiv.analyses.result import finite, pair
from equiv.analyses.superposition.terms import FrequencyTerms, QuantityTerms, Term


def quantity_data(q: QuantityTerms) -> dict[str, Any]:
    """The JSON of a quantity."""
    return {
        "quantity": str(q.quantity),
        "label": q.label,
        "unit": q.unit,
        "positive": q.positive,
        "frequencies": [_frequency_data(at) for at in q.frequencies],
        "rms": q.rms,
    }


def _frequency_data(at: FrequencyTerms) -> dict[str, Any]:
    if at.refusal:
        return {
            "hertz": at.frequency.hertz, "terms": [], "total": None, "all_on": None,
            "difference": None, "arithmetic_sum": None, "cancellation": None,
            "reason": at.refusal,
        }  # fmt: skip
    if at.power:
        power = at.power
        return {
            "hertz": at.frequency.hertz,
            "power": {
                "sources": list(power.sources),
                "own": [pair(p) for p in power.own],
                "cross": [[pair(c) for c in row] for row in power.cross],
                "total": pair(power.total),
                **({} if power.complete else {"reasons": list(power.reasons)}),
            },
            "all_on": pair(power.all_on),
            "difference": power.difference if power.complete else None,
        }
    rows = zip(at.terms, at.running_sums, strict=True)
    return {
        "hertz": at.frequency.hertz,
        "terms": [_term_data(at, term, running) for term, running in rows],
        # a term that does not exist leaves no sum, but the quantity itself is unique
        "total": pair(at.total),
        "all_on": pair(at.all_on),
        "difference": at.difference if at.complete else None,
        "arithmetic_sum": finite(at.arithmetic_sum) if at.complete else None,
        "cancellation": at.cancellation if at.complete else None,
    }


def _term_data(at: FrequencyTerms, term: Term, running: complex | None) -> dict[str, Any]:
    data: dict[str, Any] = {
        "source": term.source,
        "kind": term.kind,
        "members": list(term.members),
        "value": pair(term.value),
        "unit": term.unit or None,
        "coefficient": pair(term.coefficient),
        "coefficient_unit": term.coefficient_unit or None,
        "contribution": pair(term.contribution),
        "share": at.share(term),
        "gross_share": at.gross_share(term),
        "running_sum": pair(running),
        "check": pair(term.check),
        "controlled": [state.data() for state in term.controlled],
    }
    if term.reason:
        data["reason"] = term.reason
    if term.paths:
        through = [{"name": n, "part": pair(part)} for n, part in term.paths.through]
        data["paths"] = {"direct": pair(term.paths.direct), "through": through}
    return data
