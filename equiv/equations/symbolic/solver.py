"""A network solved in symbols: what every source gives to a quantity, as formulas that are proved."""

from __future__ import annotations

from collections.abc import Collection, Sequence
from fractions import Fraction
from typing import Any

from flint import nmod

from equiv.elements.quantity import Quantity
from equiv.equations.layout import Layout
from equiv.equations.symbolic.amount import Amount, TooLargeError
from equiv.equations.symbolic.answer import Answer
from equiv.equations.symbolic.arithmetic import FORMULAS, S
from equiv.equations.symbolic.bordered import Bordered, Place, bordered
from equiv.equations.symbolic.compressed import compressed
from equiv.equations.symbolic.degree import degree_in_s
from equiv.equations.symbolic.expression import (
    ONE,
    ZERO,
    Expression,
    Name,
    Number,
    evaluated,
    number_of,
    power,
    product,
    quotient,
)
from equiv.equations.symbolic.family import Family, family
from equiv.equations.symbolic.forecast import forecast
from equiv.equations.symbolic.modular import PRIME, ModularSystem, Point, residue
from equiv.equations.symbolic.nesting import Where, expanded, nested, with_repeats_named
from equiv.equations.symbolic.numbers import Numbers
from equiv.equations.symbolic.sequence import sequence
from equiv.equations.symbolic.symbolised import NONE_SHARED, Shared, symbolised
from equiv.equations.symbolic.symbols import Named
from equiv.equations.system import Row, System
from equiv.errors import Diagnostic, UsageError
from equiv.network import Network

NESTED_UP_TO, NAMED_UP_TO, EXPANDED_UP_TO = 30, 300, 20_000
"""Terms up to which a formula is nested; nested with named brackets; kept as polynomials at all."""
_HELD = 10
"""How many times the budget may be held while a determinant grows."""
_NUMBERS = "numbers have no such bound"
ON_REQUEST = 200_000
"""Terms that are written out when that is asked for."""
MOST_SYMBOLS, MOST_UNKNOWNS = 200, 300

Observed = Quantity | Place
"""A voltage or current, or the voltage of two nodes by their numbers."""


class FormulaSolver:
    """The equations of a network in the symbols of its elements and s.

    Arguments: the elements (or all) that are symbols; whether formulas are to be written out.
    Errors: UsageError for too many symbols or unknowns, or parameters that only a file knows.
    """

    def __init__(
        self,
        network: Network,
        chosen: Collection[str] | None = None,
        shared: Shared = NONE_SHARED,
        expand: bool = False,
        beside: FormulaSolver | None = None,
    ) -> None:
        _within("nodes", len(network.nodes), MOST_UNKNOWNS, _NUMBERS)
        self.made = symbolised(network, chosen, shared)
        self.chosen = set(network.elements) if chosen is None else set(chosen)
        self.shared, self.expand = shared, expand
        self.named: list[Named] = self.made.symbols.listed
        _within("symbols", len(self.named), MOST_SYMBOLS, "name fewer elements")
        self.layout = Layout(self.made.network, FORMULAS)
        self.system = System(self.layout, "nodal", S)
        _within("unknowns", self.system.size, MOST_UNKNOWNS, _NUMBERS)
        self.names = [*(n.name for n in self.named), "s"]
        self.point = Point(len(self.named))
        self._proof: ModularSystem | None = None
        self._denominators: dict[Expression, tuple[str, Expression]] = {}
        self._counters: dict[str, int] = {}
        if beside is not None:  # one name must not stand for two things
            self._denominators, self._counters = beside._denominators, beside._counters
            self.made.symbols.share_names(beside.made.symbols)

    def beside(self, network: Network) -> FormulaSolver:
        """A solver of the network with more elements, in the same symbols and other part names."""
        return FormulaSolver(network, self.chosen, self.shared, self.expand, self)

    @property
    def sources(self) -> list[str]:
        """The independent sources."""
        return self.layout.source_names

    def value(self, source: int, without: int | None = None) -> Expression:
        """The value of a source: its symbol or its number; on request without one symbol."""
        parts = list(self.made.sources[source].parts.values())
        if not parts:
            return ZERO
        (part,) = parts
        kept = [(Name(self.names[k]), p) for k, p in part.powers if k != without]
        over = [power(name, p) for name, p in kept if p > 0]
        under = [power(name, -p) for name, p in kept if p < 0]
        return quotient(product(Number(part.number), *over), product(*under))

    def row(self, observed: Observed, system: System | None = None) -> Row:
        """The row of a quantity."""
        system = system or self.system
        if isinstance(observed, Place):
            return system.voltage_row(observed.plus, observed.minus)
        return system.row(observed)

    def answer(self, observed: Observed, tests: Sequence[Place] = ()) -> Answer:
        """The coefficients of all sources, in the style that their length asks for."""
        matrix = compressed(bordered(self.system, self.row(observed), tests))
        expected = forecast(self.system)
        most = ON_REQUEST if self.expand else EXPANDED_UP_TO
        found = self._polynomials(matrix, most, expected)
        if found is None:
            if self.expand:
                raise _too_long(expected)
            return self._sequence(matrix, None, expected)
        terms = found.longest
        if self.expand or (terms > NAMED_UP_TO and not found.denominator):
            trees = [expanded(p, self.names) for p in found.all]
            return self._written("expanded", trees, found, terms)
        if terms > NAMED_UP_TO:
            return self._sequence(matrix, found, terms)
        trees = [nested(p, self.names) for p in found.all]
        return self._written("nested" if terms <= NESTED_UP_TO else "named", trees, found, terms)

    def family_of(self, observed: Observed, tests: Sequence[Place] = ()) -> Family | None:
        """The polynomials alone; None where they have too many terms."""
        matrix = compressed(bordered(self.system, self.row(observed), tests))
        return self._polynomials(matrix, EXPANDED_UP_TO, forecast(self.system))

    def _polynomials(self, matrix: Bordered, most: int, expected: int | None) -> Family | None:
        if expected is not None and expected > most:
            return None
        try:
            expansion = matrix.expanded(_HELD * most)
        except TooLargeError:
            return None
        if len(expansion.terms) > most * (matrix.sources + 1):
            return None
        found = family(expansion, len(self.named), matrix.sources)
        return found if found.longest <= most else None

    def _written(self, style: str, trees: list[Expression], found: Family, terms: int) -> Answer:
        where: Where = []
        if style == "named":
            trees, where = with_repeats_named(trees, lambda: self.new_name("k"))
        denominator, *numerators = trees
        name = ""
        if len(found.denominator) > NAMED_UP_TO:
            name = self.made.symbols.new_name("D") if self._denominators else "D"
            self._denominators[Name(name)] = name, denominator
        elif len(found.denominator) > 1:
            number, plain = number_of(denominator)
            name, known = self._denominators.get(plain, ("", denominator))
            if not name:
                name = self.made.symbols.new_name("D") if self._denominators else "D"
                self._denominators[plain] = name, denominator
            elif known != denominator:
                # the same but for a number: one denominator for both
                times = Number(Fraction(number_of(known)[0]) / number)
                numerators = [product(times, numerator) for numerator in numerators]
                denominator = known
        return Answer(style, denominator, tuple(numerators), tuple(where), found, terms, name)

    def _sequence(self, matrix: Bordered, found: Family | None, terms: int | None) -> Answer:
        where, coefficients = sequence(matrix, self.names, self.point, lambda: self.new_name("x"))
        degree = degree_in_s(matrix, self.point) if found is None else None
        return Answer("sequence", ONE, tuple(coefficients), tuple(where), found, terms, "", degree)

    def new_name(self, letter: str) -> str:
        """A name for a part: a letter and the next number."""
        self._counters[letter] = self._counters.get(letter, 0) + 1
        return self.made.symbols.new_name(f"{letter}{self._counters[letter]}")

    def disagreements(self, answer: Answer, observed: Observed, tests: Sequence[Place] = ()) -> int:
        """At how many sources the formulas are not what the original equations give."""
        fractions = [(top, answer.denominator) for top in answer.numerators]
        return self.differing(fractions, answer.all_where, observed, tests)

    def differing(
        self,
        fractions: Sequence[tuple[Expression, Expression]],
        where: Where,
        observed: Observed,
        tests: Sequence[Place] = (),
    ) -> int:
        """How many coefficients (above, below) differ from those of the original equations.

        Both are taken at one random point modulo 2⁶¹ - 1; the equations in branch-current form.
        """
        if self._proof is None:
            self._proof = ModularSystem(self.made.network, self.point)
        proof = self._proof
        right = [*proof.excitations(), *(_injected(test, proof.system.size) for test in tests)]
        solutions = proof.solved(right)
        if solutions is None:
            return len(right)
        row = self.row(observed, proof.system)
        own = [self.point.of(x) if isinstance(x, Amount) else int(x) for x in row.source]
        state = [int(x) for x in row.state]
        values = self.point.by_name(self.names)
        known: dict[int, Any] = {}
        for name, expression in where:
            values[name] = known[id(expression)] = _modular(expression, values)
        wrong = 0
        for number, (solution, (top, bottom)) in enumerate(zip(solutions, fractions, strict=True)):
            direct = own[number] if number < len(own) else 0
            expected = sum(a * b for a, b in zip(state, solution, strict=True)) + direct
            if id(bottom) not in known:  # one denominator for all of them, as a rule
                known[id(bottom)] = _modular(bottom, values)
            above, below = _modular(top, values), known[id(bottom)]
            wrong += int(above - below * nmod(expected % PRIME, PRIME)) != 0 or not int(below)
        return wrong

    def fails_at(self, symbol: int, value: Expression) -> bool:
        """Whether the original equations have no solution with that value of a symbol.

        All others are at the random point.
        """
        found = int(_modular(value, self.point.by_name(self.names)))
        return ModularSystem(self.made.network, self.point.at(symbol, found)).singular

    def numbers(self, s: complex = 0j, values: dict[str, complex] | None = None) -> Numbers:
        """The values of the symbols at one s, with other ones for some of them."""
        return Numbers(self.named, s, values)


def _modular(expression: Expression, values: dict[str, Any]) -> Any:
    return evaluated(expression, values, lambda x: nmod(residue(x), PRIME))


def _injected(test: Place, size: int) -> list[int]:
    column = [0] * size
    if test.plus >= 0:
        column[test.plus] += 1
    if test.minus >= 0:
        column[test.minus] -= 1
    return column


def _within(what: str, count: int, most: int, hint: str) -> None:
    if count > most:
        message = f"the network has {count} {what}; formulas are made for up to {most}"
        raise UsageError(Diagnostic("too-large-for-formulas", message, hint=hint))


def _too_long(expected: int | None) -> UsageError:
    count = f"{expected:,}".replace(",", " ") if expected else f"more than {ON_REQUEST}"
    return UsageError(
        Diagnostic(
            "too-many-terms",
            f"written out, the formula has {count} terms; up to {ON_REQUEST} are",
            hint="without --expand it is a sequence of named expressions",
        )
    )
