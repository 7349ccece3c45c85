"""The formulas of a quantity's terms, and their numbers at each frequency."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from equiv.analyses.formulas.told import Failing, InS
from equiv.analyses.formulas.values import Value, Where
from equiv.analyses.result import Check
from equiv.analyses.superposition.terms import FrequencyTerms, Term
from equiv.elements.element import Frequency
from equiv.elements.quantity import Quantity
from equiv.equations.symbolic.answer import Answer
from equiv.equations.symbolic.expression import Expression


@dataclass(frozen=True)
class FormulaTerm:
    """What one source (or group) gives, as formulas: `top` over the quantity's denominator."""

    source: str
    kind: str
    members: tuple[str, ...]
    numbers: tuple[int, ...]
    """The members' places among the sources."""
    unit: str
    coefficient_unit: str
    value: Expression | None
    coefficient: Expression | None
    top: Expression
    contribution: Expression


@dataclass(frozen=True)
class AtFrequency:
    """The numbers of the formulas at one frequency; None where a symbol has no value.

    `numeric` is the floating-point answer, where there is one.
    """

    frequency: Frequency
    terms: tuple[FormulaTerm, ...]
    values: tuple[complex | None, ...]
    coefficients: tuple[complex | None, ...]
    contributions: tuple[complex | None, ...]
    total: complex | None
    numeric: FrequencyTerms | None
    floating: frozenset[str] = frozenset()
    """Sources whose formulas have no number here, though their symbols have: floating point's."""

    @property
    def known(self) -> bool:
        """Whether there are numbers."""
        return any(c is not None for c in self.contributions)


@dataclass(frozen=True)
class QuantityFormulas:
    """The formulas of a quantity: a term a source, one denominator, and what is told of them."""

    quantity: Quantity
    label: str | None
    unit: str
    heading: str
    positive: str
    answer: Answer
    terms: tuple[FormulaTerm, ...]
    total: Value
    frequencies: tuple[AtFrequency, ...]
    checks: tuple[Check, ...]
    failing: tuple[Failing, ...] = ()
    slopes: tuple[Value | None, ...] = ()
    """The derivative of each term, and of the total last, with respect to one symbol."""
    slope_words: str = ""
    response: InS | None = None
    degree: int | None = None
    """The degree of the denominator in s."""

    @property
    def named(self) -> Where:
        """The named parts that its formulas use."""
        return self.answer.used


def floating_terms(
    terms: Sequence[FormulaTerm],
    contributions: Sequence[complex | None],
    numeric: FrequencyTerms | None,
) -> dict[str, Term]:
    """The floating-point terms of formulas that have no number: a step of theirs divides by zero."""
    if numeric is None or numeric.refusal:
        return {}
    by_name = {term.source: term for term in numeric.terms if term.contribution is not None}
    return {
        term.source: by_name[term.source]
        for term, found in zip(terms, contributions, strict=True)
        if found is None and term.source in by_name
    }
