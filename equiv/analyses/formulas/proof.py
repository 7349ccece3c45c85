"""What proves formulas: the original equations at a random point, and the floating-point answer."""

from __future__ import annotations

from collections.abc import Sequence

from equiv.analyses.formulas.terms import AtFrequency
from equiv.analyses.formulas.told import Failing
from equiv.analyses.headings import at_words
from equiv.analyses.result import Caution, Check
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
    """The largest difference of a formula's number and the floating-point term, over Σ|term|.

    None where there is nothing to compare.
    """
    numeric = at.numeric
    if numeric is None or numeric.refusal:
        return None
    by_name = {term.source: term.contribution for term in numeric.terms}
    pairs = [
        (found, by_name.get(term.source))
        for term, found in zip(at.terms, at.contributions, strict=True)
        if found is not None and term.source not in at.floating
    ]
    differences = [abs(a - b) for a, b in pairs if b is not None]
    if not differences:
        return None
    off = max(differences)
    size = numeric.arithmetic_sum
    return Check(
        f"formulas of {name} against floating point{at_words(at.frequency)}",
        off / size if size else off,
        CLOSURE_LIMIT,
    )


def floating_numbers(what: str) -> Caution:
    """Formulas that are right but have no number, because a step of theirs divides by zero."""
    return Caution(
        "no-number",
        f"a step of the {what} divides by zero at the values of the file: the numbers are those "
        "of floating point, not compared with the formulas; these are proved at a random point",
    )


def of_failing(found: Sequence[Failing], name: str) -> list[Check]:
    """How many values that are told to have no solution have one, in the original equations."""
    told = [f for f in found if f.value is not None]
    if not told:
        return []
    return [
        Check(
            f"values said to leave {name} without a unique solution that do not, in the original "
            "equations at a random point",
            float(sum(not f.proved for f in told)),
            0.0,
        )
    ]
