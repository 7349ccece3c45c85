"""What is told of formulas beside themselves: when there is no solution, derivatives, the response."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from equiv.analyses.formulas.values import Value
from equiv.analyses.formulas.wanted import Wanted, symbol_of
from equiv.analyses.result import pair
from equiv.equations.symbolic.answer import Answer
from equiv.equations.symbolic.bordered import Place
from equiv.equations.symbolic.conditions import (
    Limit,
    Ratio,
    degree,
    derivative,
    limit,
    ratio_of,
    roots_in_s,
    vanishing,
)
from equiv.equations.symbolic.expression import (
    ONE,
    ZERO,
    Expression,
    collected,
    product,
    quotient,
    total,
)
from equiv.equations.symbolic.family import Family
from equiv.equations.symbolic.infix import text_of
from equiv.equations.symbolic.nesting import nested
from equiv.equations.symbolic.numbers import Numbers
from equiv.equations.symbolic.solver import FormulaSolver, Observed
from equiv.network import Network

MOST_GAINS = 3
_LONG = 160
"""Characters of a formula beyond which a sentence gives its number alone."""
MOST_TERMS = 3000
"""Terms of a derivative's polynomials; beyond that it is not worth its reading."""


@dataclass(frozen=True)
class Failing:
    """The value of a symbol at which D = 0 and there is no unique solution."""

    symbol: str
    value: Value | None
    reason: str = ""
    proved: bool = True
    """Whether the original equations, with that value, have no unique solution either."""

    def sentence(self, what: str, digits: int) -> str:
        """In words."""
        if self.value is None:
            return f"{what} for {self.symbol}: {self.reason}."
        text = text_of(self.value.expression)
        known = self.value.number
        number = "" if known is None else f"{known.real:.{digits}g}"
        if number and len(text) > _LONG:
            return f"{what} where {self.symbol} = {number} (its formula stands in --json)."
        same = known is None or number == text
        return f"{what} where {self.symbol} = {text}{'' if same else f' = {number}'}."

    def data(self) -> dict[str, Any]:
        """The JSON of it."""
        return {
            "symbol": self.symbol,
            "value": None if self.value is None else self.value.data(),
            "reason": self.reason or None,
        }


def failing(
    solver: FormulaSolver, answer: Answer, wanted: Wanted, numbers: Numbers | None
) -> list[Failing]:
    """For the symbol that was asked for; else for the gains in which D is linear."""
    if answer.family is None:
        reason = "the formula is not written out; name that element alone behind --symbolic"
        return [Failing(wanted.fails_for, None, reason)] if wanted.fails_for else []
    polynomial = answer.family.denominator
    if wanted.fails_for:
        chosen = [symbol_of(solver, wanted.fails_for)]
    else:
        gains = [i for i, named in enumerate(solver.named) if named.controlled]
        if not answer.exists or degree(polynomial, len(solver.named)):
            return []  # in s it would be a natural frequency, not a value of the gain
        chosen = [i for i in gains if degree(polynomial, i) == 1][:MOST_GAINS]
    return [_vanishing(solver, answer, symbol, numbers) for symbol in chosen]


def _vanishing(
    solver: FormulaSolver, answer: Answer, symbol: int, numbers: Numbers | None
) -> Failing:
    assert answer.family is not None
    name, polynomial = solver.names[symbol], answer.family.denominator
    found = vanishing(polynomial, symbol, solver.names)
    if found is None:
        power = degree(polynomial, symbol)
        reason = "D does not depend on it" if not power else f"D has its power {power}"
        return Failing(name, None, reason)
    proved = found == ZERO or solver.fails_at(symbol, found)
    return Failing(name, Value(found, numbers.of(found) if numbers else None), "", proved)


def slope(solver: FormulaSolver, answer: Answer, source: int, symbol: int) -> Expression | None:
    """The derivative of a source's contribution; None where it is too long to be told."""
    if answer.family is None:
        return None
    return slope_of(solver, ratio_of(answer.family, source), symbol, source)


def slope_of(
    solver: FormulaSolver, ratio: Ratio, symbol: int, source: int | None = None
) -> Expression | None:
    """The derivative of a ratio, times a source's value; None where it is too long to be told."""
    powers = {} if source is None else dict(solver.made.sources[source].only.powers)
    if symbol in powers:
        # u = c·x^p of a shared parameter, or the source's own symbol
        value = Ratio(ratio.top * ratio.top.context().gen(symbol) ** max(powers[symbol], 0),
                      ratio.bottom * ratio.top.context().gen(symbol) ** max(-powers[symbol], 0))  # fmt: skip
        rest = solver.value(source, without=symbol) if source is not None else ONE
    else:
        value, rest = ratio, ONE if source is None else solver.value(source)
    found = derivative(value, symbol)
    if max(len(found.top), len(found.bottom)) > MOST_TERMS:
        return None
    top, bottom = nested(found.top, solver.names), nested(found.bottom, solver.names)
    return quotient(collected(product(rest, top)), bottom)


@dataclass(frozen=True)
class Response:
    """A coefficient as a function of s: its ends, its zeros (1/s); None where they are not known."""

    source: str
    at_zero: Limit
    at_infinity: Limit
    zeros: tuple[complex, ...] | None

    def data(self) -> dict[str, Any]:
        """The JSON of it."""
        return {
            "source": self.source,
            "dc": _limit_data(self.at_zero.at_zero(), self.at_zero),
            "infinity": _limit_data(self.at_infinity.at_infinity(), self.at_infinity),
            "zeros": None if self.zeros is None else [pair(z) for z in self.zeros],
        }


def _limit_data(value: Expression | None, behaviour: Limit) -> dict[str, Any] | None:
    if value is None:
        return {"re": None, "im": None, "formula": None, "grows_as": text_of(behaviour.grown())}
    return Value(value).data()


@dataclass(frozen=True)
class InS:
    """The responses of all sources, and their common poles (1/s)."""

    rows: tuple[Response, ...]
    poles: tuple[complex, ...] | None

    def data(self) -> dict[str, Any]:
        """The JSON of it."""
        poles = None if self.poles is None else [pair(z) for z in self.poles]
        return {"poles": poles, "terms": [row.data() for row in self.rows]}


def in_s(
    network: Network,
    solver: FormulaSolver,
    answer: Answer,
    observed: Observed,
    named: Sequence[str],
    tests: Sequence[Place] = (),
) -> InS | None:
    """Poles, zeros and ends of the coefficients; None where s does not occur."""
    family = answer.family
    last = len(solver.named)
    if family is None or not any(degree(p, last) for p in family.all) or not answer.exists:
        return None
    numeric = _numeric(network, observed, tests)
    rows = []
    for number, name in enumerate(named):
        ratio = ratio_of(family, number)
        zeros = None
        if numeric is not None:
            zeros = roots_in_s(numeric.numerators[number])
        rows.append(
            Response(
                name,
                limit(ratio, solver.names, "zero"),
                limit(ratio, solver.names, "infinity"),
                None if zeros is None else tuple(zeros),
            )
        )
    poles = None
    if numeric is not None and numeric.denominator:
        poles = roots_in_s(numeric.denominator)
    return InS(tuple(rows), None if poles is None else tuple(poles))


def _numeric(network: Network, observed: Observed, tests: Sequence[Place]) -> Family | None:
    """The same with exact numbers for all symbols but s."""
    plain = FormulaSolver(network, chosen=())
    if any(not named.source for named in plain.named):
        return None
    return plain.family_of(observed, tests)


def sum_of(parts: Sequence[Expression | None]) -> Expression | None:
    """The sum of expressions that are all there."""
    known = [part for part in parts if part is not None]
    return total(known) if len(known) == len(parts) else None
