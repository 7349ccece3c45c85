"""Superposition: what each independent source gives to each quantity, proved."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any, ClassVar, Literal, overload

from equiv.analyses.cautions import about_network
from equiv.analyses.closing import closing_table
from equiv.analyses.exactness import exactly
from equiv.analyses.formulas.kinds import require_plain, require_symbolic
from equiv.analyses.headings import at_words, positive_words
from equiv.analyses.result import Caution, Check, Result
from equiv.analyses.superposition.data import quantity_data
from equiv.analyses.superposition.finder import TermFinder
from equiv.analyses.superposition.tables import askable, askable_tables, quantity_tables
from equiv.analyses.superposition.terms import (
    NOTABLE_CANCELLATION,
    TERM_LIMIT,
    FrequencyTerms,
    QuantityTerms,
    limit_of,
)
from equiv.analyses.tables import Table
from equiv.elements.quantity import Quantity
from equiv.errors import Diagnostic, ExitStatus, NoUniqueSolutionError
from equiv.language import quantity as read_quantity
from equiv.network import Find, Network, Progress, no_progress

if TYPE_CHECKING:
    from equiv.analyses.formulas.superposed import FormulaSuperposition

Checking = Literal["auto", "all", "none"]


@dataclass(frozen=True)
class Superposition(Result):
    """The term-by-term tables of a network, with what proves them."""

    command: ClassVar[str] = "superpose"

    quantities: tuple[QuantityTerms, ...] = ()
    detail: bool = False
    how_checked: str = ""

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """A table a quantity and frequency; on request one a sub-circuit, and one of paths."""
        if not self.quantities:
            return askable_tables(self.network)
        tables: list[Table] = []
        for q in self.quantities:
            tables.extend(quantity_tables(self.network, q, self.detail, self.how_checked, digits))
        # what the terms cost by cancelling stands under their own table
        cautions = [c for c in self.cautions if c.code != "cancellation"]
        shared = [check for check in self.checks if check.shared]
        tables.append(closing_table(self.network, shared, cautions))
        return tuple(tables)

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        data: dict[str, Any] = {"quantities": [quantity_data(q) for q in self.quantities]}
        if not self.quantities:
            data["askable"] = [word for word, _ in askable(self.network)]
        return data


@overload
def superpose(
    network: Network,
    *quantities: str | Quantity,
    by: Literal["source", "group"] = "source",
    detail: bool = False,
    paths: bool = False,
    check: Checking = "auto",
    exact: bool = False,
    symbolic: None = None,
    progress: Progress = no_progress,
) -> Superposition: ...


@overload
def superpose(
    network: Network,
    *quantities: str | Quantity,
    by: Literal["source", "group"] = "source",
    detail: bool = False,
    paths: bool = False,
    check: Checking = "auto",
    exact: bool = False,
    symbolic: bool | str | Sequence[str] | None = None,
    expand: bool = False,
    fails_for: str | None = None,
    derivative: str | None = None,
    progress: Progress = no_progress,
) -> Superposition | FormulaSuperposition: ...


def superpose(
    network: Network,
    *quantities: str | Quantity,
    by: Literal["source", "group"] = "source",
    detail: bool = False,
    paths: bool = False,
    check: Checking = "auto",
    exact: bool = False,
    symbolic: bool | str | Sequence[str] | None = None,
    expand: bool = False,
    fails_for: str | None = None,
    derivative: str | None = None,
    progress: Progress = no_progress,
) -> Superposition | FormulaSuperposition:
    """What each independent source gives to each quantity, with its sign, and the proof.

    h_qk = C_q A⁻¹ B_k + D_qk, contribution h_qk·u_k, their sum the quantity; every controlled
    source stays in place in every sub-circuit.

    Arguments: quantities as `I:R3` (the network's `find` statements if none are given); `by`
    "group" makes groups terms with their members below; `detail` keeps each sub-circuit's
    controlled sources for printing; `paths` splits terms by controlled source; `check` tells
    which terms are found again by the second method; `exact` makes all of it rational, and the
    differences 0; `symbolic` gives formulas in the elements' names (True: all; else the named
    ones) and in s, `expand` written out whatever their length, with the value of `fails_for` at
    which there is no solution and the derivative with respect to `derivative`; `progress` is
    told of long work.
    Errors: NoUniqueSolutionError; UsageError, also where an exact result would need an irrational
    value.
    Sign convention: as the quantity says (`positive`); powers are absorbed.
    Source: superposition with dependent sources: W. M. Leach, On the application of superposition
    to dependent sources in circuit analysis (2009, from memory); C. W. Ho et al. (1975).
    """
    if symbolic is not None and symbolic is not False:
        require_plain(detail=detail, paths=paths, exact=exact)
        wanted = (symbolic, expand, fails_for, derivative)
        return _in_symbols(network, quantities, wanted, by, check, progress)
    require_symbolic(expand=expand, fails_for=bool(fails_for), derivative=bool(derivative))
    network = exactly(network, exact)
    finds = _finds(network, quantities)
    if not finds:
        return Superposition(network)
    work = TermFinder(network, by, paths, check, progress)
    columns = [work.at(frequency, finds) for frequency in network.frequencies]
    tables = dict(zip(finds, zip(*columns, strict=True), strict=True))
    return _put_together(network, work, tables, detail)


def _put_together(
    network: Network,
    work: TermFinder,
    tables: Mapping[Find, Sequence[FrequencyTerms]],
    detail: bool,
) -> Superposition:
    """The result of the terms of each quantity, with its checks and cautions.

    Errors: NoUniqueSolutionError where no quantity has a value at any frequency.
    """
    refusals = [f.refusal for terms in tables.values() for f in terms if f.refusal]
    found = tuple(
        _quantity(network, find, terms)
        for find, terms in tables.items()
        if not all(f.refusal for f in terms)
    )
    if not found:
        raise NoUniqueSolutionError([Diagnostic("no-unique-solution", r) for r in refusals])
    cautions = [Caution("no-unique-solution", refusal) for refusal in refusals]
    cautions += [*about_network(network, [q.heading for q in found]), *work.cautions]
    refusal = ExitStatus.NO_UNIQUE_SOLUTION if refusals else ExitStatus.DONE
    if not refusal and any(not f.complete for q in found for f in q.frequencies):
        refusal = ExitStatus.DOES_NOT_EXIST
    cautions += [c for q in found for f in q.frequencies for c in _cancellation(q, f)]
    checks = [c for q in found for f in q.frequencies for c in _checks(network, q, f)]
    return Superposition(
        network,
        checks=(*checks, *work.checks),
        cautions=tuple(dict.fromkeys(cautions)),
        refusal=refusal,
        quantities=found,
        detail=detail,
        how_checked=work.how,
    )


def _in_symbols(
    network: Network,
    quantities: Sequence[str | Quantity],
    wanted: tuple[bool | str | Sequence[str], bool, str | None, str | None],
    by: Literal["source", "group"],
    check: Checking,
    progress: Progress,
) -> Superposition | FormulaSuperposition:
    """The formulas of what was asked for, and their numbers by the way of this module."""
    from equiv.analyses.formulas.superposed import superposed
    from equiv.analyses.formulas.wanted import Wanted

    finds = _finds(network, quantities)
    without: tuple[str, ...] = ()
    if not quantities:
        kept = tuple(find for find in finds if find.quantity.what != "P") or finds
        without = tuple(str(find.quantity) for find in finds if find not in kept)
        finds = kept
    if not finds:
        return Superposition(network)

    def numeric() -> tuple[QuantityTerms, ...]:
        asked = [find.quantity for find in finds]
        return superpose(network, *asked, by=by, check=check, progress=progress).quantities

    return superposed(network, finds, Wanted(*wanted), by, numeric, without)


def _finds(network: Network, quantities: Sequence[str | Quantity]) -> tuple[Find, ...]:
    if not quantities:
        return network.finds
    labels = {find.quantity: find.label for find in network.finds}
    asked = [read_quantity(q) if isinstance(q, str) else q for q in quantities]
    return tuple(Find(q, labels.get(q)) for q in dict.fromkeys(asked))


def _quantity(network: Network, find: Find, terms: Sequence[FrequencyTerms]) -> QuantityTerms:
    q = find.quantity
    positive = positive_words(network, q)
    return QuantityTerms(q, find.label, q.unit, network.describe(q), positive, tuple(terms))


def _checks(network: Network, q: QuantityTerms, at: FrequencyTerms) -> list[Check]:
    if at.refusal:
        return []
    name = f"{q.quantity}{at_words(at.frequency)}"
    checks = []
    if at.complete:
        words = f"sum against all sources at once, {name}"
        checks.append(Check(words, at.difference, limit_of(network)))
    if at.worst_term is not None:
        words = f"terms against sub-circuits, {name}"
        checks.append(Check(words, at.worst_term, limit_of(network, TERM_LIMIT)))
    return checks


def _cancellation(q: QuantityTerms, at: FrequencyTerms) -> list[Caution]:
    if at.power or not at.complete or not at.arithmetic_sum:
        return []
    if at.terms_cancel:
        return [Caution("cancellation", f"the terms of {q.quantity} cancel: their sum is zero")]
    if (at.cancellation or 0) <= NOTABLE_CANCELLATION:
        return []
    return [
        Caution(
            "cancellation",
            f"the terms of {q.quantity} cancel: they add to {at.cancellation:.3g} times the total, "
            f"which costs {at.digits_lost:.1f} digits",
        )
    ]
