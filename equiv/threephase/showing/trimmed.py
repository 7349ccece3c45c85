"""Terms of very many faults: the largest of each, and the others in one row."""

from __future__ import annotations

import heapq
from collections.abc import Iterable, Iterator, Sequence

from equiv.threephase.cases import FaultCase, FaultTerm

MOST_TERMS = 500_000
"""Terms that are given one by one; a spreadsheet holds 1 048 576 rows."""


def kept_terms(cases: Sequence[FaultCase]) -> int | None:
    """How many terms each fault keeps; None where there is room for all."""
    if not cases or len(cases) * len(cases[0].terms) <= MOST_TERMS:
        return None
    return max(1, MOST_TERMS // len(cases) - 1)


def trimmed(cases: Iterable[FaultCase], kept: int | None) -> Iterator[FaultCase]:
    """The cases with so many of their largest terms, and one of kind `others` for the rest."""
    for case in cases:
        yield case if kept is None or len(case.terms) <= kept + 1 else _trimmed(case, kept)


def _trimmed(case: FaultCase, kept: int) -> FaultCase:
    numbers = range(len(case.terms))
    largest = set(heapq.nlargest(kept, numbers, lambda n: abs(case.terms[n].contribution)))
    rest = [term for n, term in enumerate(case.terms) if n not in largest]
    others = FaultTerm(
        "others",
        tuple(member for term in rest for member in term.members),
        sum((term.contribution for term in rest), 0j),
        kind="others",
    )
    return case._replace(terms=(*(case.terms[n] for n in sorted(largest)), others))


def trimmed_words(kept: int) -> str:
    """What a reader is told of it."""
    return (
        f"so many faults have too many terms to be given one by one: the {kept} largest of each "
        "stand alone, and others is the sum of the rest; name buses, or one type, for all of them"
    )
