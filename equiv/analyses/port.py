"""A network as seen from its ports: Thevenin and Norton equivalents by test sources, proved."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal
from typing import Any, ClassVar

import numpy as np

from equiv.analyses.cautions import about_network
from equiv.analyses.closing import closing_table
from equiv.analyses.headings import frequency_words
from equiv.analyses.port_proof import Equivalent, blackman, three_loads
from equiv.analyses.port_tables import port_data, port_tables
from equiv.analyses.result import Caution, Check, Result
from equiv.analyses.tables import Table
from equiv.analyses.terms import CLOSURE_LIMIT
from equiv.elements import KINDS
from equiv.elements.element import Frequency, Options
from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.equations.solution import Solver, source_values
from equiv.errors import Diagnostic, EquivError, ExitStatus, UsageError
from equiv.network import Network, Port, Progress, no_progress

TEST = "test source at {}"
"""The name of a test source: no name of a file has blanks in it."""


@dataclass(frozen=True)
class PortEquivalent(Result):
    """Equivalents of one or several ports, at each frequency of the sources.

    Voltages of `plus` over `minus` (V), currents out of `plus` into the load (A), rms.
    """

    command: ClassVar[str] = "port"

    equivalents: tuple[Equivalent, ...] = ()

    @property
    def first(self) -> Equivalent:
        """The equivalent at the file's frequency (or the lowest of the sources')."""
        own = self.network.frequency.omega
        return next((e for e in self.equivalents if e.frequency.omega == own), self.equivalents[0])

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """Terms, equivalents, test sources and proof, for each frequency."""
        tables = [t for e in self.equivalents for t in port_tables(self.network, e)]
        remark = (
            "An equivalent stands for the terminals alone: losses and efficiency inside it are "
            "not those of the network."
        )
        return (*tables, closing_table(self.network, self.checks, self.cautions, remark))

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object; `frequencies` holds all of them where there are several."""
        data = port_data(self.first)
        if len(self.equivalents) > 1:
            data["frequencies"] = [port_data(e) for e in self.equivalents]
        return data


def port(network: Network, *ports: str | Port, progress: Progress = no_progress) -> PortEquivalent:
    """The Thevenin and Norton equivalents of one port, or the coupled ones of several.

    1 A into each open port, the independent sources off, gives the columns of Z in
    v = Voc - Z·i; 1 V across each port, the others shorted, those of Y in i = Isc - Y·v.
    Controlled sources stay in place.

    Arguments: ports by their names or as `a,b` (all declared ports if none are given).
    Errors: UsageError for an unknown port; NoUniqueSolutionError.
    Sign convention: v is `plus` over `minus`, i flows out of `plus` into the load.
    Source: L. Thevenin, 1883; E. L. Norton, 1926; test sources: common practice.
    """
    chosen = chosen_ports(network, ports)
    equivalents: list[Equivalent] = []
    checks: list[Check] = []
    for number, frequency in enumerate(network.frequencies):
        progress("port equivalents", number, len(network.frequencies))
        found = equivalent(network, chosen, frequency)
        equivalents.append(found)
        checks += _checks(network, found)
    neither = any(not e.thevenin and not e.norton for e in equivalents)
    cautions = [*about_network(network), *(c for e in equivalents for c in _cautions(e))]
    return PortEquivalent(
        network,
        checks=tuple(checks),
        cautions=tuple(dict.fromkeys(cautions)),
        refusal=ExitStatus.DOES_NOT_EXIST if neither else ExitStatus.DONE,
        equivalents=tuple(equivalents),
    )


def chosen_ports(network: Network, ports: Sequence[str | Port]) -> tuple[Port, ...]:
    """The ports that were named (names, pairs `a,b`, or ports); all declared ones if none were."""
    if not ports:
        if not network.ports:
            raise UsageError(
                Diagnostic("no-port", "the file declares no port", hint="name two nodes: a,b")
            )
        return tuple(network.ports.values())
    return tuple(p if isinstance(p, Port) else find_port(network, p) for p in ports)


def find_port(network: Network, word: str) -> Port:
    """A declared port by its name, or the pair of nodes `a,b`.

    Errors: UsageError where there is no such port or node.
    """
    if word in network.ports:
        return network.ports[word]
    plus, comma, minus = word.partition(",")
    if not comma:
        known = ", ".join(network.ports) or "none is declared"
        raise UsageError(
            Diagnostic(
                "unknown-port",
                f"there is no port called {word}",
                hint=f"ports: {known}; or name two nodes: a,b",
            )
        )
    network.locate(Quantity("V", (plus, minus)))
    if plus == minus:
        raise UsageError(Diagnostic("same-node", f"the port {word} is one node twice"))
    return Port(word, plus, minus)


def equivalent(network: Network, ports: tuple[Port, ...], frequency: Frequency) -> Equivalent:
    """The equivalents of some ports at one frequency (see `port`); not proved yet."""
    number = len(ports)
    sources = [s.name for s in network.sources]
    u = source_values(network, frequency)
    open_h, no_thevenin = _responses(network, ports, frequency, "current")
    short_h, no_norton = _responses(network, ports, frequency, "voltage")
    z = y = voltages = currents = None
    if open_h is not None:
        z, voltages = open_h[:, -number:], open_h[:, :-number] * u
    if short_h is not None:
        y, currents = -short_h[:, -number:], short_h[:, :-number] * u
    here = [k for k, s in enumerate(network.sources) if _at(network.frequency_of(s), frequency)]
    return Equivalent(
        ports=ports,
        frequency=frequency,
        sources=tuple(sources[k] for k in here),
        values=tuple((complex(u[k]), network.sources[k].output) for k in here),
        impedance=z,
        admittance=y,
        voltages=None if voltages is None else voltages[:, here],
        currents=None if currents is None else currents[:, here],
        no_thevenin=no_thevenin,
        no_norton=no_norton,
    )


def _at(one: Frequency, other: Frequency) -> bool:
    return abs(one.omega - other.omega) <= 1e-12 * max(one.omega, other.omega)


def _responses(
    network: Network, ports: tuple[Port, ...], frequency: Frequency, test: str
) -> tuple[Numbers | None, str | None]:
    """A row a port: what a unit of each source, then of each test source, gives there.

    With test currents the ports are open and the response is a voltage; with test voltages they
    are shorted and it is the current out of `plus`. None, and the reason, where there is none.
    """
    tested, what = with_tests(network, ports, frequency, test)
    words = "open" if test == "current" else "shorted"
    try:
        solver = Solver(tested, frequency)
        quantities = [
            Quantity("V", (p.plus, p.minus)) if test == "current" else Quantity("I", (name,))
            for p, name in zip(ports, what, strict=True)
        ]
        if not _determined(solver, quantities, len(ports)):
            return None, f"with the port {words}, {'; '.join(solver.reasons)}"
        return np.array([solver.coefficients(q) for q in quantities]), None
    except EquivError as error:
        return None, f"with the port {words}, {'; '.join(d.message for d in error.diagnostics)}"


def with_tests(
    network: Network, ports: Sequence[Port], frequency: Frequency, test: str
) -> tuple[Network, list[str]]:
    """The network with a unit test source at each port, and the test sources' names."""
    options = Options(at=frequency)
    names = [TEST.format(p.name) for p in ports]
    kind = KINDS[test]
    # a test current flows from minus to plus inside its source: out of it into plus
    ends = [(p.minus, p.plus) if test == "current" else (p.plus, p.minus) for p in ports]
    elements = [
        kind(name, nodes, Decimal(1), options=options)
        for name, nodes in zip(names, ends, strict=True)
    ]
    return network.with_elements(elements), names


def _determined(solver: Solver, quantities: Sequence[Quantity], tests: int) -> bool:
    """Whether the responses are unique, and the sources and each test source have a solution."""
    if solver.degenerate is None:
        return True
    own = solver.u.copy()
    own[-tests:] = 0
    tries = [own, *np.eye(len(own))[-tests:]]
    return all(map(solver.unique, quantities)) and all(map(solver.consistent, tries))


def _checks(network: Network, e: Equivalent) -> list[Check]:
    where = f" at {frequency_words(e.frequency, '')}" if e.frequency.omega else ""
    checks = []
    if e.thevenin and e.norton:
        checks.append(Check(f"Norton against Thevenin{where}", e.disagreement, CLOSURE_LIMIT))
    if e.thevenin or e.norton:
        off = three_loads(network, e)
        if off is not None:
            checks.append(Check(f"three loads{where}", off, CLOSURE_LIMIT))
    off = blackman(network, e, with_tests)
    if off is not None:
        checks.append(Check(f"Blackman's formula{where}", off, CLOSURE_LIMIT))
    return checks


def _cautions(e: Equivalent) -> list[Caution]:
    least = e.least_resistance
    # without a Thevenin form a conductance of zero is an ideal current source: nothing to warn of
    if least is None or least > 0 or (least == 0 and not e.thevenin):
        return []
    what = "resistance" if e.thevenin else "conductance"
    return [
        Caution(
            "resistance-not-positive",
            f"the {what} of {e.named} is {'zero' if least == 0 else 'negative'}: this is legal, "
            "but the operating point with a load may not be stable",
        )
    ]
