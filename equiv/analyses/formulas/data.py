"""Formulas as JSON: the objects of numbers, with a formula in each value."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import accumulate
from typing import Any

from equiv.analyses.formulas.terms import AtFrequency, QuantityFormulas
from equiv.analyses.formulas.values import Value
from equiv.analyses.result import finite, pair
from equiv.analyses.superposition.terms import FrequencyTerms, Term
from equiv.equations.symbolic.expression import Expression, quotient, total
from equiv.equations.symbolic.infix import text_of


def quantity_data(q: QuantityFormulas) -> dict[str, Any]:
    """The JSON of a quantity."""
    data: dict[str, Any] = {
        "quantity": str(q.quantity),
        "label": q.label,
        "unit": q.unit,
        "positive": q.positive,
        "frequencies": [_frequency_data(q, at) for at in q.frequencies],
        "rms": None,
        "style": q.answer.style,
        "denominator": {
            "formula": text_of(q.answer.denominator), "terms": q.answer.terms, "degree": q.degree,
        },
        "fails": [f.data() for f in q.failing],
    }  # fmt: skip
    if q.slopes:
        data["derivatives"] = [None if s is None else s.data() for s in q.slopes]
    if q.response:
        data["response"] = q.response.data()
    return data


def _frequency_data(q: QuantityFormulas, at: AtFrequency) -> dict[str, Any]:
    numeric = at.numeric if at.numeric is not None and not at.numeric.refusal else None
    sums = _running(q, [term.top for term in at.terms])
    known = _sums(at.contributions)
    by_name = {term.source: term for term in numeric.terms} if numeric else {}
    total_formula = sums[-1] if sums else total([])
    return {
        "hertz": at.frequency.hertz,
        "terms": [
            _term_data(at, k, Value(sums[k], known[k]), by_name.get(term.source), numeric)
            for k, term in enumerate(at.terms)
        ],
        "total": Value(total_formula, at.total).data(),
        "all_on": pair(numeric.all_on) if numeric else None,
        "difference": _difference(at, numeric),
        "arithmetic_sum": finite(numeric.arithmetic_sum) if numeric else None,
        "cancellation": numeric.cancellation if numeric and numeric.complete else None,
        **({"reason": at.numeric.refusal} if at.numeric and at.numeric.refusal else {}),
    }


def _running(q: QuantityFormulas, tops: Sequence[Expression]) -> list[Expression]:
    return [quotient(total(tops[: k + 1]), q.answer.bottom) for k in range(len(tops))]


def _sums(parts: Sequence[complex | None]) -> list[complex | None]:
    if any(part is None for part in parts):
        return [None] * len(parts)
    return list(accumulate(complex(part) for part in parts if part is not None))


def _difference(at: AtFrequency, numeric: FrequencyTerms | None) -> float | None:
    """The sum of the formulas' numbers against all sources at once in floating point."""
    if numeric is None or at.total is None:
        return None
    off = abs(at.total - numeric.all_on)
    return off / numeric.arithmetic_sum if numeric.arithmetic_sum else off


def _term_data(
    at: AtFrequency, k: int, running: Value, numeric: Term | None, whole: FrequencyTerms | None
) -> dict[str, Any]:
    term = at.terms[k]
    value, coefficient = (
        None if expression is None else Value(expression, number).data()
        for expression, number in (
            (term.value, at.values[k]), (term.coefficient, at.coefficients[k]),
        )
    )  # fmt: skip
    shares = (None, None)
    if numeric is not None and whole is not None:
        shares = whole.share(numeric), whole.gross_share(numeric)  # type: ignore[assignment]
    return {
        "source": term.source,
        "kind": term.kind,
        "members": list(term.members),
        "value": value,
        "unit": term.unit or None,
        "coefficient": coefficient,
        "coefficient_unit": term.coefficient_unit or None,
        "contribution": Value(term.contribution, at.contributions[k]).data(),
        "share": shares[0],
        "gross_share": shares[1],
        "running_sum": running.data(),
        "check": pair(numeric.check) if numeric else None,
        "controlled": [state.data() for state in numeric.controlled] if numeric else [],
        **({"reason": numeric.reason} if numeric and numeric.reason else {}),
    }
