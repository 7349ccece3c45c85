"""What a port does under given loads, each proved in the original network with the load on it."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import groupby
from typing import Any, ClassVar

from equiv.analyses.cautions import about_network
from equiv.analyses.closing import closing_table
from equiv.analyses.exactness import exactly
from equiv.analyses.headings import frequency_words
from equiv.analyses.loading.exact_loads import exact_loads
from equiv.analyses.loading.points import Line, Point, points
from equiv.analyses.loading.proof import prove, same, why_none
from equiv.analyses.loading.state import LoadState, LoadTotal, PortLoads, largest, total
from equiv.analyses.loading.tables import load_data, load_tables, total_data, total_table
from equiv.analyses.port import equivalent, find_port
from equiv.analyses.result import Caution, Check, Result
from equiv.analyses.superposition.terms import limit_of
from equiv.analyses.tables import Table
from equiv.elements.element import Frequency
from equiv.errors import Diagnostic, ExitStatus, UsageError
from equiv.language.loads import HINT, Load, read_loads
from equiv.network import Network, Port, Progress, no_progress

_NO_PORT = Port("", "", "")


@dataclass(frozen=True)
class LoadedPort(Result):
    """A port under several loads, at each frequency of the sources.

    Voltages of `plus` over `minus` (V), currents out of `plus` into the load (A), rms.
    """

    command: ClassVar[str] = "load"

    port: Port = _NO_PORT
    frequencies: tuple[PortLoads, ...] = ()
    totals: tuple[LoadTotal, ...] = ()

    @property
    def first(self) -> PortLoads:
        """The loads at the file's frequency (or the lowest of the sources')."""
        own = self.network.frequency
        return next((f for f in self.frequencies if same(f.frequency, own)), self.frequencies[0])

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """The loads and the sources at each frequency, and over all of them."""
        tables = [
            table
            for number, f in enumerate(self.frequencies)
            for table in load_tables(self.network, self.port, f, with_notes=number == 0)
        ]
        if self.totals:
            tables.append(total_table(self.port, self.totals))
        shared = [check for check in self.checks if check.shared]
        return (*tables, closing_table(self.network, shared, self.cautions))

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object; `frequencies` holds all of them where there are several."""
        data = load_data(self.port, self.first)
        if len(self.frequencies) > 1:
            data["frequencies"] = [load_data(self.port, f) for f in self.frequencies]
            data["totals"] = [total_data(t) for t in self.totals]
        return data


def load(
    network: Network,
    port: str | Port,
    *values: str | Load,
    exact: bool = False,
    progress: Progress = no_progress,
) -> LoadedPort:
    """What a port does under given loads: voltage, current, power, regulation, efficiency.

    v = Voc - Z·i (or i = Isc - Y·v) met by v = Zl·i, i = Il, v·i* = S or a measured curve; each
    point is proved by the original network with the load on it. It is `equiv.load_port`.

    Arguments: the port by its name or as `a,b`; loads in words (`8 ohm`, `4+3j ohm`, `short`,
    `open`, `current 2 A`, `power 50 W`, `power 50 W pf 0.8 lag`), or of `equiv.load_curve`;
    `exact` for rational arithmetic (of impedances and currents).
    Errors: UsageError for an unknown port, for a load that cannot be read, or that an exact result
    cannot take. A load that has no
    point is a row that says why; the exit status is 5 where none has any.
    Sign convention: v is `plus` over `minus`, i flows out of `plus` into the load.
    Source: L. Thevenin, 1883; regulation and efficiency: common practice.
    """
    at = port if isinstance(port, Port) else find_port(network, port)
    network = exactly(network, exact)
    loads = exact_loads(network, _loads(values))
    found = []
    for number, frequency in enumerate(network.frequencies):
        progress("loads", number, len(network.frequencies))
        line = Line.of(equivalent(network, (at,), frequency))
        states = [
            state for k, one in enumerate(loads) for state in _states(network, at, line, k + 1, one)
        ]
        found.append(PortLoads(line, tuple(states)))
    nothing = not any(state.exists for f in found for state in f.states)
    totals = _totals(found, loads) if len(found) > 1 else ()
    return LoadedPort(
        network,
        checks=tuple(check for f in found for check in _checks(network, f)),
        cautions=tuple(dict.fromkeys([*about_network(network), *_cautions(at, found)])),
        refusal=ExitStatus.DOES_NOT_EXIST if nothing else ExitStatus.DONE,
        port=at,
        frequencies=tuple(found),
        totals=totals,
    )


load_port = load
"""The library's name for it: `equiv.load` reads a file."""


def _loads(values: Sequence[str | Load]) -> list[Load]:
    """The loads in their order; words that stand side by side are read as one text."""
    found: list[Load] = []
    for words, group in groupby(values, key=lambda value: isinstance(value, str)):
        if words:
            found += read_loads(" ".join(map(str, group)))
        else:
            found += (value for value in group if isinstance(value, Load))
    if not found:
        raise UsageError(Diagnostic("no-load", "there is no load to put on the port", hint=HINT))
    return found


def _states(network: Network, port: Port, line: Line, number: int, load: Load) -> list[LoadState]:
    """The points of a load at one frequency, or one row that says why there is none."""
    here, refused = _here(network, line.frequency, load)
    if refused:
        return [LoadState(number, load, words=f"none: {refused}")]
    found = points(line, here)
    if not found.points:
        reason = ""
        if load.kind in ("open", "short"):
            reason = why_none(network, port, line.frequency, load.kind)
        words = f"none: {reason}" if reason else found.words
        return [LoadState(number, load, words=words, most=found.most)]
    states = []
    for which, point in enumerate(found.points):
        proof = prove(network, port, line, here, point)
        if isinstance(proof, str):
            states.append(LoadState(number, load, words=f"none: {proof}"))
            continue
        of = len(found.points)
        name = f"{which + 1} of {of}" if of > 1 else ""
        states.append(
            LoadState(number, load, found.words, name, point, proof, _regulation(line, point))
        )
    return states


def _here(network: Network, frequency: Frequency, load: Load) -> tuple[Load, str]:
    """The load as it is at one frequency of the network, or why it is none there."""
    several = len(network.frequencies) > 1
    if load.kind == "curve" and (several or frequency.omega):
        return load, "a load curve is of DC alone"
    if load.kind == "power" and several:
        return load, "a constant power ties the frequencies to each other: not a linear load"
    if load.kind == "current":
        at = load.at or network.frequency
        if not any(same(at, f) for f in network.frequencies):
            return load, f"the network has no source at {frequency_words(at, '')}"
        # by superposition: at the other frequencies a current source is off
        return (load if same(at, frequency) else Load(load.text, "open")), ""
    if load.value.imag and several and not same(frequency, network.frequency):
        own = frequency_words(network.frequency, "")
        return load, f"a complex load is known at the file's frequency ({own}) only"
    return load, ""


def _regulation(line: Line, point: Point) -> float | None:
    """(|Voc| - |V|)/|V|; None where one of them is not there."""
    if line.voc is None or not abs(point.voltage):
        return None
    return float((abs(line.voc) - abs(point.voltage)) / abs(point.voltage))


def _totals(found: Sequence[PortLoads], loads: Sequence[Load]) -> tuple[LoadTotal, ...]:
    """Every load over all frequencies; phasors of different frequencies are not added."""
    return tuple(
        total(k + 1, load, [s for f in found for s in f.states if s.number == k + 1])
        for k, load in enumerate(loads)
    )


def _checks(network: Network, found: PortLoads) -> list[Check]:
    where = f" at {frequency_words(found.frequency, '')}" if found.frequency.omega else ""
    checks = []
    for state in found.states:
        if state.proof is not None:
            name = f"equivalent against the network with {state.named}{where}"
            checks.append(Check(name, state.proof.difference, limit_of(network)))
    worst = [s.proof.balance for s in found.states if s.proof is not None]
    if worst:
        name = f"power balance, loaded{where}"
        checks.append(Check(name, largest(worst), limit_of(network), shared=True))
    return checks


def _cautions(port: Port, found: Sequence[PortLoads]) -> list[Caution]:
    cautions = []
    for f in found:
        least = f.line.z if f.line.z is not None else f.line.y
        if least is not None and least.real < 0:
            what = "resistance" if f.line.z is not None else "conductance"
            cautions.append(
                Caution(
                    "resistance-not-positive",
                    f"the {what} of {port.name} is negative: this is legal, but the operating "
                    "point with a load may not be stable",
                )
            )
        if any(s.load.kind == "power" and s.which for s in f.states):
            cautions.append(
                Caution(
                    "two-solutions",
                    "a constant power has two points: that of the higher voltage comes first and "
                    "is the usual working point; the other one draws more current",
                )
            )
    return cautions
