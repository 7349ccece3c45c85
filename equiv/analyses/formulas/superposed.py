"""Superposition as formulas: what each source gives to each quantity, in the elements' symbols."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Any, ClassVar, Literal, NamedTuple

from equiv.analyses.cautions import about_network
from equiv.analyses.closing import closing_table
from equiv.analyses.formulas.data import quantity_data
from equiv.analyses.formulas.legend import legend_of, symbols_data
from equiv.analyses.formulas.numbers import has_numbers, values_at
from equiv.analyses.formulas.proof import (
    against_numbers,
    at_random_point,
    floating_numbers,
    of_failing,
)
from equiv.analyses.formulas.tables import quantity_tables
from equiv.analyses.formulas.terms import (
    AtFrequency,
    FormulaTerm,
    QuantityFormulas,
    floating_terms,
)
from equiv.analyses.formulas.told import failing, in_s, slope, sum_of
from equiv.analyses.formulas.values import Value
from equiv.analyses.formulas.wanted import Wanted, symbol_of
from equiv.analyses.headings import positive_words
from equiv.analyses.result import Caution, Result
from equiv.analyses.superposition.term_maker import ratio_unit
from equiv.analyses.superposition.terms import FrequencyTerms, QuantityTerms
from equiv.analyses.tables import Table
from equiv.equations.symbolic.answer import Answer
from equiv.equations.symbolic.expression import Expression, collected, product, quotient, total
from equiv.equations.symbolic.infix import text_of
from equiv.equations.symbolic.numbers import Numbers
from equiv.equations.symbolic.sequence import SingularError
from equiv.equations.symbolic.solver import FormulaSolver
from equiv.errors import Diagnostic, EquivError, ExitStatus, NoUniqueSolutionError, UsageError
from equiv.network import Find, Network


@dataclass(frozen=True)
class FormulaSuperposition(Result):
    """The formulas of a network's quantities, with what proves them.

    `where` tells, in order, what the named parts in the formulas stand for.
    """

    command: ClassVar[str] = "superpose"

    quantities: tuple[QuantityFormulas, ...] = ()
    where: tuple[tuple[str, Expression], ...] = ()
    symbols: tuple[tuple[str, str], ...] = ()
    legend: tuple[str, ...] = ()

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """A table a quantity, the parts named in it, and what is told of its formula."""
        tables = [t for q in self.quantities for t in quantity_tables(self.network, q, digits)]
        shared = [check for check in self.checks if check.shared]
        last = closing_table(self.network, shared, self.cautions, *self.legend)
        return (*tables, last) if last.notes else tuple(tables)

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object: that of numbers, with a formula in each value."""
        return {
            "quantities": [quantity_data(q) for q in self.quantities],
            "where": [[name, text_of(part)] for name, part in self.where],
            "symbols": dict(self.symbols),
        }

    def to_sympy(self, quantity: int = 0) -> Any:
        """The formula of a quantity's total as a sympy expression, its named parts put in."""
        from equiv.equations.symbolic.sympy_form import with_parts

        q = self.quantities[quantity]
        return with_parts(q.total.expression, q.answer.where)


Numeric = Callable[[], Sequence[QuantityTerms]]


def superposed(
    network: Network,
    finds: Sequence[Find],
    wanted: Wanted,
    by: Literal["source", "group"],
    numeric: Numeric,
    without: Sequence[str] = (),
) -> FormulaSuperposition:
    """The formulas of some quantities (see `equiv.superpose`); `without` are left out, and told."""
    for find in finds:
        if find.quantity.what == "P":
            raise UsageError(
                Diagnostic(
                    "no-formula",
                    f"{find.quantity} is a power: it is no sum of terms, and has no formula here",
                    hint="ask for its voltage and its current",
                )
            )
    solver = wanted.solver(network)
    numbers, cautions, refusal = _numbers(solver, numeric)
    maker = _Maker(network, solver, wanted, by)
    found = [maker.quantity(find, numbers[k] if numbers else None) for k, find in enumerate(finds)]
    where = dict(pair for q in found for pair in q.named)
    lost = {str(q.quantity) for q in found for at in q.frequencies if at.floating}
    if without:
        words = f"{', '.join(without)}: a power is no sum of terms and has no formula here"
        cautions.append(Caution("no-formula", words))
    cautions += [floating_numbers(f"formulas of {name}") for name in sorted(lost)]
    return FormulaSuperposition(
        network,
        checks=tuple(check for q in found for check in q.checks),
        cautions=(*about_network(network, [q.heading for q in found]), *cautions),
        refusal=refusal,
        quantities=tuple(found),
        where=tuple(where.items()),
        symbols=symbols_data(solver),
        legend=tuple(legend_of(solver)),
    )


def _numbers(
    solver: FormulaSolver, numeric: Numeric
) -> tuple[Sequence[QuantityTerms] | None, list[Caution], ExitStatus]:
    """The floating-point answer, where every symbol has a value and there is one."""
    if not has_numbers(solver):
        return None, [], ExitStatus.DONE
    try:
        return numeric(), [], ExitStatus.DONE
    except NoUniqueSolutionError as error:
        words = "; ".join(d.message for d in error.diagnostics)
        caution = Caution("no-unique-solution", f"with the values of the file: {words}")
        return None, [caution], ExitStatus.NO_UNIQUE_SOLUTION


class _Term(NamedTuple):
    """A source or a group: its name, and the numbers of its members."""

    name: str
    members: tuple[int, ...]


class _Maker:
    """Makes the formulas of one quantity after the other."""

    def __init__(self, network: Network, solver: FormulaSolver, wanted: Wanted, by: str) -> None:
        self.network, self.solver, self.wanted = network, solver, wanted
        self.terms = self._terms(by)
        self.frequencies = network.frequencies

    def _terms(self, by: str) -> list[_Term]:
        found: dict[str, list[int]] = {}
        for k, source in enumerate(self.network.sources):
            group = source.options.group if by == "group" else None
            found.setdefault(group or source.name, []).append(k)
        return [_Term(name, tuple(members)) for name, members in found.items()]

    def quantity(self, find: Find, numeric: QuantityTerms | None) -> QuantityFormulas:
        """The formulas of a quantity, their numbers and their checks."""
        network, q = self.network, find.quantity
        answer = self._answer(find)
        rows = [self._term(answer, term, q.unit) for term in self.terms]
        numbers = [self._values(answer, k) for k in range(len(self.frequencies))]
        at = [
            self._at(rows, k, numbers[k], None if numeric is None else numeric.frequencies[k])
            for k in range(len(self.frequencies))
        ]
        proof = at_random_point(self.solver, answer, q, str(q))
        checks = [proof, *(c for k in at if (c := against_numbers(k, str(q))) is not None)]
        first = numbers[0] if not self.frequencies[0].omega else None
        fails = failing(self.solver, answer, self.wanted, first)
        checks += of_failing(fails, str(q))
        tops = [self._top(answer, term) for term in self.terms]
        named = [str(network.sources[k].name) for k in range(len(network.sources))]
        return QuantityFormulas(
            quantity=q, label=find.label, unit=q.unit, heading=network.describe(q),
            positive=positive_words(network, q), answer=answer, terms=tuple(rows),
            total=Value(quotient(total(tops), answer.denominator)),
            frequencies=tuple(at), checks=tuple(checks),
            failing=tuple(fails),
            slopes=self._slopes(answer, first),
            slope_words=self._slope_words(q.unit),
            response=in_s(network, self.solver, answer, q, named),
            degree=answer.degree,
        )  # fmt: skip

    def _answer(self, find: Find) -> Answer:
        try:
            answer = self.solver.answer(find.quantity)
        except SingularError:
            answer = None
        if answer is None or not answer.exists:
            raise NoUniqueSolutionError(
                Diagnostic(
                    "no-unique-solution",
                    f"{find.quantity} has no formula: D = 0 whatever the values are"
                    f"{reasons(self.network)}",
                )
            )
        return answer

    def _top(self, answer: Answer, term: _Term) -> Expression:
        tops = [product(self.solver.value(k), answer.numerators[k]) for k in term.members]
        return total(list(map(collected, tops)))

    def _term(self, answer: Answer, term: _Term, unit: str) -> FormulaTerm:
        sources = [self.network.sources[k] for k in term.members]
        single = len(sources) == 1 and sources[0].name == term.name
        own = "V" if sources[0].output == "V" else "A"
        top = self._top(answer, term)
        return FormulaTerm(
            source=term.name,
            kind=sources[0].kind if single else "group",
            members=tuple(s.name for s in sources),
            numbers=term.members,
            unit=own if single else "",
            coefficient_unit=ratio_unit(unit, own) if single else "",
            value=self.solver.value(term.members[0]) if single else None,
            coefficient=quotient(answer.numerators[term.members[0]], answer.bottom)
            if single
            else None,
            top=top,
            contribution=quotient(top, answer.bottom),
        )

    def _values(self, answer: Answer, k: int) -> Numbers:
        return values_at(self.network, self.solver, self.frequencies[k], answer.all_where)

    def _at(
        self,
        rows: Sequence[FormulaTerm],
        k: int,
        numbers: Numbers,
        numeric: FrequencyTerms | None,
    ) -> AtFrequency:
        frequency = self.frequencies[k]
        here = [
            all(
                self.network.frequency_of(self.network.sources[m]).same_as(frequency)
                for m in row.numbers
            )
            for row in rows
        ]
        chosen = [row for row, is_here in zip(rows, here, strict=True) if is_here]
        contributions = [numbers.of(row.contribution) for row in chosen]
        coefficients = [
            None if r.coefficient is None else numbers.of(r.coefficient) for r in chosen
        ]
        floating = floating_terms(chosen, contributions, numeric)
        for place, row in enumerate(chosen):
            if row.source in floating:
                coefficients[place] = floating[row.source].coefficient
                contributions[place] = floating[row.source].contribution
        known = [c for c in contributions if c is not None]
        return AtFrequency(
            frequency=frequency,
            terms=tuple(chosen),
            values=tuple(None if r.value is None else numbers.of(r.value) for r in chosen),
            coefficients=tuple(coefficients),
            contributions=tuple(contributions),
            total=sum(known, 0j) if len(known) == len(contributions) else None,
            numeric=numeric,
            floating=frozenset(floating),
        )

    def _slope_words(self, unit: str) -> str:
        if self.wanted.derivative is None:
            return ""
        named = self.solver.named[symbol_of(self.solver, self.wanted.derivative)]
        per = f", in {unit} per {named.unit}" if named.unit else f", in {unit}"
        return f"With respect to {named.name}{per}"

    def _slopes(self, answer: Answer, numbers: Numbers | None) -> tuple[Value | None, ...]:
        """The derivative of every term, and of the total last."""
        if self.wanted.derivative is None:
            return ()
        symbol = symbol_of(self.solver, self.wanted.derivative)
        found = [
            sum_of([slope(self.solver, answer, k, symbol) for k in term.members])
            for term in self.terms
        ]
        return tuple(
            None if part is None else Value(part, numbers.of(part) if numbers else None)
            for part in [*found, sum_of(found)]
        )


def reasons(network: Network) -> str:
    """Why a network has no solution whatever its values are, where its numbers show it."""
    from equiv.equations.solution import Solver

    try:
        solver = Solver(network, network.frequencies[0])
    except EquivError:
        return ""
    return f": {'; '.join(solver.reasons)}" if solver.reasons else ""
