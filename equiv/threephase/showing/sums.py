"""The terms of a fault current as the terms of any other quantity: shares and running sums."""

from __future__ import annotations

from collections.abc import Sequence

from equiv.analyses.superposition.terms import FrequencyTerms, Term
from equiv.network import DC
from equiv.threephase.cases import FaultTerm


def sums_of(terms: Sequence[FaultTerm], total: complex) -> FrequencyTerms:
    """Shares, running sums and cancellation of the terms; `total` is found without them."""
    plain = [
        Term(
            source=t.source, kind=t.kind, members=t.members, value=None, unit="",
            coefficient=None, coefficient_unit="", contribution=t.contribution,
        )
        for t in terms
    ]  # fmt: skip
    return FrequencyTerms(DC, tuple(plain), total)
