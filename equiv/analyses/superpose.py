"""Superposition: what each independent source gives to each quantity, proved."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any, ClassVar, Literal

from equiv.analyses.cautions import about_network
from equiv.analyses.closing import closing_table
from equiv.analyses.headings import at_words
from equiv.analyses.result import Caution, Check, Result
from equiv.analyses.superposition.data import quantity_data
from equiv.analyses.superposition.finder import TermFinder
from equiv.analyses.superposition.tables import askable, askable_tables, quantity_tables
from equiv.analyses.superposition.terms import (
    CLOSURE_LIMIT,
    NOTABLE_CANCELLATION,
    TERM_LIMIT,
    FrequencyTerms,
    QuantityTerms,
)
from equiv.analyses.tables import Table
from equiv.elements.quantity import Quantity
from equiv.errors import Diagnostic, ExitStatus, NoUniqueSolutionError
from equiv.language import quantity as read_quantity
from equiv.network import Find, Network, NodePair, Progress, no_progress

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


def superpose(
    network: Network,
    *quantities: str | Quantity,
    by: Literal["source", "group"] = "source",
    detail: bool = False,
    paths: bool = False,
    check: Checking = "auto",
    progress: Progress = no_progress,
) -> Superposition:
    """What each independent source gives to each quantity, with its sign, and the proof.

    h_qk = C_q A⁻¹ B_k + D_qk, contribution h_qk·u_k, their sum the quantity; every controlled
    source stays in place in every sub-circuit.

    Arguments: quantities as `I:R3` (the network's `find` statements if none are given); `by`
    "group" makes groups terms with their members below; `detail` keeps each sub-circuit's
    controlled sources for printing; `paths` splits terms by controlled source; `check` tells
    which terms are found again by the second method; `progress` is told of long work.
    Errors: NoUniqueSolutionError, UsageError.
    Sign convention: as the quantity says (`positive`); powers are absorbed.
    Source: superposition with dependent sources: W. M. Leach, On the application of superposition
    to dependent sources in circuit analysis (2009, from memory); C. W. Ho et al. (1975).
    """
    finds = _finds(network, quantities)
    if not finds:
        return Superposition(network)
    work = TermFinder(network, by, paths, check, progress)
    columns = [work.at(frequency, finds) for frequency in network.frequencies]
    tables = dict(zip(finds, zip(*columns, strict=True), strict=True))
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
    checks = [c for q in found for f in q.frequencies for c in _checks(q, f)]
    return Superposition(
        network,
        checks=(*checks, *work.checks),
        cautions=tuple(dict.fromkeys(cautions)),
        refusal=refusal,
        quantities=found,
        detail=detail,
        how_checked=work.how,
    )


def _finds(network: Network, quantities: Sequence[str | Quantity]) -> tuple[Find, ...]:
    if not quantities:
        return network.finds
    labels = {find.quantity: find.label for find in network.finds}
    asked = [read_quantity(q) if isinstance(q, str) else q for q in quantities]
    return tuple(Find(q, labels.get(q)) for q in dict.fromkeys(asked))


def _quantity(network: Network, find: Find, terms: Sequence[FrequencyTerms]) -> QuantityTerms:
    place, q = network.locate(find.quantity), find.quantity
    if isinstance(place, NodePair):
        positive = f"{place.first} over {place.second}"
    else:
        first, second = network.pair_nodes(place)
        words = {"V": f"{first} over {second}", "P": "absorbed"}
        positive = words.get(q.what, f"from {first} to {second} inside {place.element}")
    return QuantityTerms(q, find.label, q.unit, network.describe(q), positive, tuple(terms))


def _checks(q: QuantityTerms, at: FrequencyTerms) -> list[Check]:
    if at.refusal:
        return []
    name = f"{q.quantity}{at_words(at.frequency)}"
    checks = []
    if at.complete:
        checks.append(
            Check(f"sum against all sources at once, {name}", at.difference, CLOSURE_LIMIT)
        )
    if at.worst_term is not None:
        checks.append(Check(f"terms against sub-circuits, {name}", at.worst_term, TERM_LIMIT))
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
