"""What proves formulas: the original equations at a random point, and the floating-point answer."""

from __future__ import annotations

from collections.abc import Sequence

from equiv.analyses.formulas.terms import AtFrequency
from equiv.analyses.headings import at_words
from equiv.analyses.result import Check
from equiv.analyses.superposition.terms import CLOSURE_LIMIT
from equiv.equations.symbolic.answer import Answer
from equiv.equations.symbolic.bordered import Place
from equiv.equations.symbolic.solver import FormulaSolver, Observed


def at_random_point(
    solver: FormulaSolver,
    answer: Answer,
    observed: Observed,
    name: str,
    tests: Sequence[Place] = (),
) -> Check:
    """How many formulas differ from the original equations at a random point mod 2⁶¹ - 1."""
    wrong = solver.disagreements(answer, observed, tests)
    return Check(
        f"formulas of {name} that differ from the original equations at a random point "
        "modulo 2^61 - 1",
        float(wrong),
        0.0,
    )


def against_numbers(at: AtFrequency, name: str) -> Check | None:
    """The largest difference of a formula's number and the floating-point term, over Σ|term|."""
    numeric = at.numeric
    if numeric is None or numeric.refusal:
        return None
    by_name = {term.source: term.contribution for term in numeric.terms}
    pairs = [
        (found, by_name[term.source])
        for term, found in zip(at.terms, at.contributions, strict=True)
        if found is not None and by_name.get(term.source) is not None
    ]
    off = max((abs(a - b) for a, b in pairs if b is not None), default=0.0)
    size = numeric.arithmetic_sum
    return Check(
        f"formulas of {name} against floating point{at_words(at.frequency)}",
        off / size if size else off,
        CLOSURE_LIMIT,
    )
