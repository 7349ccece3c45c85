"""The formulas of a quantity's terms, and their numbers at each frequency."""

from __future__ import annotations

from dataclasses import dataclass

from equiv.analyses.formulas.told import Failing, InS
from equiv.analyses.formulas.values import Value, Where
from equiv.analyses.result import Check
from equiv.analyses.superposition.terms import FrequencyTerms
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
