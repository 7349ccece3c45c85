"""Everything at once: node voltages, element voltages, currents and powers, and their balance."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, ClassVar, NamedTuple

from equiv.analyses.cautions import about_network, about_solver
from equiv.analyses.closing import closing_table
from equiv.analyses.exactness import exact_cells, exact_columns, exact_notes, exactly
from equiv.analyses.headings import at_words, frequency_words
from equiv.analyses.result import Caution, Check, Result, finite, pair
from equiv.analyses.superposition.terms import limit_of
from equiv.analyses.tables import Cell, Column, Row, Table
from equiv.elements.element import Frequency
from equiv.elements.quantity import Quantity
from equiv.equations.scalars import scalar
from equiv.equations.solution import CLEANED_UP_TO, Solver, State, all_on
from equiv.errors import Diagnostic, ExitStatus, NoUniqueSolutionError
from equiv.network import Network, Progress, no_progress


class ElementState(NamedTuple):
    """A terminal pair of an element: voltage (V), current (A) and absorbed power (VA)."""

    name: str
    kind: str
    pair: int
    voltage: complex | None
    current: complex | None
    power: complex | None


@dataclass(frozen=True)
class FrequencyState:
    """The state of a network at one frequency; None is a value that is not unique."""

    frequency: Frequency
    nodes: tuple[tuple[str, complex | None], ...]
    elements: tuple[ElementState, ...]
    balance: float


@dataclass(frozen=True)
class Solution(Result):
    """The whole state of a network at each of its frequencies. Phasors are rms."""

    command: ClassVar[str] = "solve"

    frequencies: tuple[FrequencyState, ...] = ()

    @property
    def first(self) -> FrequencyState:
        """The state at the file's frequency (or the lowest of the sources')."""
        own = self.network.frequency.omega
        return next((f for f in self.frequencies if f.frequency.omega == own), self.frequencies[0])

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """Nodes and elements at each frequency."""
        tables = [t for f in self.frequencies for t in _tables(self.network, f)]
        return (*tables, closing_table(self.network, self.checks, self.cautions))

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object; `frequencies` holds all of them where there are several."""
        data = _data(self.first)
        if len(self.frequencies) > 1:
            data["frequencies"] = [_data(f) for f in self.frequencies]
        return data


def solve(network: Network, progress: Progress = no_progress, *, exact: bool = False) -> Solution:
    """Every voltage, current and power of a network, all sources on.

    A x = B u, once for each frequency of the sources; power is V·I*, absorbed. With `exact` in
    rational arithmetic.

    Errors: NoUniqueSolutionError where all the sources together have no solution; UsageError where
    an exact result would need an irrational value.
    Sign convention: an element's voltage is first node over second, its current first to second.
    Source: C. W. Ho, A. E. Ruehli, P. A. Brennan (1975).
    """
    network = exactly(network, exact)
    states: list[FrequencyState] = []
    checks: list[Check] = []
    cautions: list[Caution] = about_network(network)
    refusal = ExitStatus.DONE
    for number, frequency in enumerate(network.frequencies):
        progress("solution", number, len(network.frequencies))
        solver, state = all_on(network, frequency, _form(network))
        solver.require_solution()
        found = _frequency_state(solver, state)
        if not any(value is not None for _, value in found.nodes) and found.nodes:
            raise NoUniqueSolutionError(
                [Diagnostic("no-unique-solution", reason) for reason in solver.reasons]
            )
        if solver.degenerate is not None:
            refusal = ExitStatus.NO_UNIQUE_SOLUTION
        states.append(found)
        name = f"power balance{at_words(frequency)}"
        checks.append(Check(name, found.balance, limit_of(network)))
        cautions += about_solver(solver)
    return Solution(
        network,
        checks=tuple(checks),
        cautions=tuple(dict.fromkeys(cautions)),
        refusal=refusal,
        frequencies=tuple(states),
    )


def _form(network: Network) -> str:
    """The branch-current form where its rounding is bounded; the quicker one elsewhere."""
    unknowns = len(network.nodes) + sum(len(e.pairs) for e in network.elements.values())
    return "branch-current" if unknowns <= CLEANED_UP_TO else "nodal"


def _frequency_state(solver: Solver, state: State) -> FrequencyState:
    nodes = solver.network.nodes
    voltages = [scalar(v) for v in state.x[: len(nodes)]]
    known = [solver.unique(Quantity("V", (n, solver.network.ground))) for n in nodes]
    elements = []
    for position, element in enumerate(solver.layout.elements):
        for index in range(len(element.pairs)):
            branch = int(solver.layout.first_branch[position]) + index
            v: complex | None = scalar(state.voltages[branch])
            i: complex | None = scalar(state.currents[branch])
            if not solver.unique(Quantity("V", element.pair_nodes(index, solver.network.ground))):
                v = None
            if not solver.unique(Quantity("I", (element.name,), index)):
                i = None
            power = None if v is None or i is None else v * i.conjugate()
            elements.append(ElementState(element.name, element.kind, index, v, i, power))
    pairs = tuple((n, v if k else None) for n, v, k in zip(nodes, voltages, known, strict=True))
    return FrequencyState(solver.frequency, pairs, tuple(elements), state.balance())


def _cell(value: complex | None, dc: bool) -> Cell:
    return None if value is None else value.real if dc else complex(value)


def _tables(network: Network, f: FrequencyState) -> list[Table]:
    return [_node_table(network, f), _element_table(network, f)]


def _node_table(network: Network, f: FrequencyState) -> Table:
    dc = not f.frequency.omega
    rows = tuple(Row((name, _cell(v, dc), *exact_cells(network, v))) for name, v in f.nodes)
    columns = (
        Column("node", key=True),
        Column("voltage", "V", family="voltage"),
        *exact_columns(network, ("exact", "V")),
    )
    return Table(
        network.title or "Solution",
        (f"Node voltages over {network.ground}", frequency_words(f.frequency)),
        columns,
        rows,
        tuple(exact_notes(rows)),
        name=f"nodes{at_words(f.frequency)}",
    )


def _element_table(network: Network, f: FrequencyState) -> Table:
    dc = not f.frequency.omega
    units = (("exact voltage", "V"), ("exact current", "A"), ("exact power", "W" if dc else "VA"))
    columns = (
        Column("element", key=True),
        *([Column("kind")] if dc else []),
        Column("voltage", "V"),
        Column("current", "A"),
        Column("power absorbed", "W", family="power"),
        *([] if dc else [Column("reactive power", "var", family="power")]),
        Column("role"),
        *exact_columns(network, *units),
    )
    rows = tuple(Row(_element_cells(network, e, dc)) for e in f.elements)
    note = "Voltage: first node over second. Current: first node to second inside the element."
    return Table(
        "Elements",
        (frequency_words(f.frequency),),
        columns,
        rows,
        (note, *exact_notes(rows)),
        name=f"elements{at_words(f.frequency)}",
    )


def _element_cells(network: Network, e: ElementState, dc: bool) -> tuple[Cell, ...]:
    return (
        f"{e.name} (pair {e.pair + 1})" if e.pair else e.name,
        *([e.kind] if dc else []),
        _cell(e.voltage, dc),
        _cell(e.current, dc),
        None if e.power is None else e.power.real,
        *([] if dc else [None if e.power is None else e.power.imag]),
        _role(e),
        *exact_cells(network, e.voltage, e.current, e.power),
    )


def _role(e: ElementState) -> str:
    if e.power is None:
        return ""
    size = abs(e.voltage or 0) * abs(e.current or 0)
    if abs(e.power.real) <= 1e-12 * size or not size:
        return ""
    return "absorbs" if e.power.real > 0 else "delivers"


def _data(f: FrequencyState) -> dict[str, Any]:
    rows: dict[str, dict[str, Any]] = {}
    powers: dict[str, complex | None] = {}
    for e in f.elements:
        values = {"voltage": pair(e.voltage), "current": pair(e.current)}
        if e.pair == 0:
            powers[e.name] = e.power
            rows[e.name] = {"name": e.name, "kind": e.kind, **values, "power": None}
        else:
            rows[e.name].update({f"{key}{e.pair + 1}": value for key, value in values.items()})
            before = powers[e.name]
            powers[e.name] = None if before is None or e.power is None else before + e.power
    for name, power in powers.items():
        rows[name]["power"] = pair(power)
    return {
        "hertz": f.frequency.hertz,
        "nodes": {name: pair(v) for name, v in f.nodes},
        "elements": list(rows.values()),
        "power_balance": finite(f.balance),
    }
