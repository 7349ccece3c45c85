"""What is doubtful in a network, and what there is in it."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any, ClassVar

from equiv.analyses.cautions import DUTY, about_network
from equiv.analyses.headings import frequency_words
from equiv.analyses.result import Caution, Result
from equiv.analyses.tables import Column, Row, Table
from equiv.elements import Element
from equiv.elements.element import Frequency, Parameters
from equiv.equations.solution import Solver
from equiv.equations.words import listed
from equiv.errors import ExitStatus, NoUniqueSolutionError
from equiv.network import Network
from equiv.units import SYMBOL, Symbol, as_number, write_value

_MANY = 20


@dataclass(frozen=True)
class Report(Result):
    """Counts of what is in a network; the doubts are its cautions."""

    command: ClassVar[str] = "check"

    counts: tuple[tuple[str, int], ...] = ()

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """What there is, and what is doubtful."""
        rows = [Row((what, number)) for what, number in self.counts]
        doubts = tuple(f"Doubtful: {caution.message}" for caution in self.cautions)
        verdict = "Nothing is wrong or doubtful." if not doubts else ""
        if self.refusal:
            verdict = "The network has no unique solution for all that is asked of it."
        frequencies = ", ".join(frequency_words(f, "") for f in self.network.frequencies)
        return (
            Table(
                self.network.title or "Network",
                (f"Frequencies: {frequencies}",),
                (Column("what", key=True), Column("number")),
                tuple(rows),
                tuple(filter(None, (*doubts, verdict))),
                name="counts",
            ),
        )

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        return {
            "counts": dict(self.counts),
            "hertz": [f.hertz for f in self.network.frequencies],
            "solvable": not self.refusal,
        }


def check(network: Network) -> Report:
    """What is doubtful in a network that was read without errors, and counts of what is in it.

    Errors: none; a network without a unique solution is reported as such (`refusal`).
    """
    doubts = list(_doubts(network))
    unsolvable = False
    symbols = [e.name for e in network.elements.values() if _has_symbol(e)]
    if symbols:
        words = f"{listed(symbols)} written with `?`: a numeric result asks for a value"
        doubts.append(Caution("symbol", words))
    else:
        for frequency in network.frequencies:
            found, bad = _solvability(network, frequency)
            doubts += found
            unsolvable |= bad
        doubts += [caution for caution in about_network(network) if caution != DUTY]
    return Report(
        network,
        cautions=tuple(dict.fromkeys(doubts)),
        refusal=ExitStatus.NO_UNIQUE_SOLUTION if unsolvable else ExitStatus.DONE,
        counts=_counts(network),
    )


def _counts(network: Network) -> tuple[tuple[str, int], ...]:
    kinds = Counter(e.kind for e in network.elements.values())
    return (
        ("nodes besides the ground", len(network.nodes)),
        ("elements", len(network.elements)),
        *sorted(kinds.items()),
        ("independent sources", len(network.sources)),
        ("controlled sources", len(network.controlled)),
        ("groups of sources", len(network.groups)),
        ("ports", len(network.ports)),
        ("quantities to find", len(network.finds)),
    )


def _has_symbol(element: Element) -> bool:
    if isinstance(element.value, Symbol):
        return True
    items = getattr(element.value, "items", ())
    return any(value == SYMBOL and isinstance(value, Symbol) for _, vs in items for value in vs)


def _doubts(network: Network) -> Iterator[Caution]:
    if not network.sources:
        yield Caution("no-source", "there is no independent source: every quantity is zero")
    touched = Counter(node for e in network.elements.values() for node in e.nodes)
    ends = {node for e in network.elements.values() if len(e.nodes) == 3 for node in e.nodes}
    if network.ground not in touched and not ends:
        yield Caution("no-ground", f"nothing is connected to the ground, {network.ground}")
    asked = {n for p in network.ports.values() for n in (p.plus, p.minus)}
    asked |= {n for f in network.finds for n in f.quantity.names}
    asked |= {n for e in network.elements.values() if e.senses for n in e.senses.names}
    loose = [n for n, times in touched.items() if times == 1 and n not in asked | {network.ground}]
    for node in loose[:_MANY]:
        yield Caution("loose-node", f"node {node} has one connection only")
    yield from _odd_elements(network)
    negative = [e for e in network.elements.values() if not _has_symbol(e) and _is_negative(e)]
    for e in negative[:_MANY]:
        value = write_value(e.value, e.fields[0].units[0])  # type: ignore[arg-type]
        yield Caution("negative-value", f"{e.name} is a negative {e.kind}: {value}")


def _odd_elements(network: Network) -> Iterator[Caution]:
    """Elements that are allowed and hardly meant."""
    for e in network.elements.values():
        if len(e.nodes) == 2 and e.nodes[0] == e.nodes[1]:
            yield Caution("same-node", f"{e.name} has both its ends at node {e.nodes[0]}")
        if e.kind == "opamp" and e.variant and "gain" not in e.variant:
            words = f"{e.name} has {' and '.join(e.variant)} but no gain: an ideal one has neither"
            yield Caution("no-gain", words)
        if e.senses is not None and e.senses.what == "I" and e.senses.pair == 0:
            sensed = network.elements[e.senses.names[0]]
            if sensed.kind == "opamp" and "rin" not in sensed.variant:
                words = f"{e.name} senses the input current of {sensed.name}, which is always zero"
                yield Caution("senses-nothing", f"{words}; its output is I2:{sensed.name}")


def _is_negative(element: Element) -> bool:
    value = element.value
    if element.role != "passive" or value is None or isinstance(value, Parameters):
        return False
    return complex(as_number(value)).real < 0


def _solvability(network: Network, frequency: Frequency) -> tuple[list[Caution], bool]:
    """Doubts about existence at one frequency, and whether something asked has no answer."""
    try:
        solver = Solver(network, frequency)
    except NoUniqueSolutionError as error:
        return [Caution(d.code, d.message) for d in error.diagnostics], True
    doubts = [Caution("no-unique-solution", reason) for reason in solver.reasons]
    asked = [find.quantity for find in network.finds]
    parts = [q._replace(what=what) for q in asked for what in ("VI" if q.what == "P" else q.what)]
    bad = [q for q in parts if not solver.unique(q)]
    everything = not asked and solver.degenerate is not None
    impossible = not solver.consistent(solver.u)
    return doubts, bool(bad) or impossible or everything
