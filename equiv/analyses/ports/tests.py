"""Test sources at ports: what a unit of each source gives there."""

from __future__ import annotations

from collections.abc import Sequence
from decimal import Decimal
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from equiv.elements import KINDS
from equiv.elements.element import Frequency, Options
from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.equations.scalars import like
from equiv.equations.solution import CLEANED_UP_TO, Solver
from equiv.errors import NoUniqueSolutionError
from equiv.network import Network, Port

MOST_SOURCES = 200
TEST = "test source at {}"
"""The name of a test source: no name of a file has blanks in it."""


def with_tests(
    network: Network, ports: Sequence[Port], frequency: Frequency, test: str | Sequence[str]
) -> tuple[Network, list[str]]:
    """The network with a unit test source at each port, and the test sources' names.

    `test` is "current" or "voltage", for all ports or for each.
    """
    options = Options(at=frequency)
    names = [TEST.format(p.name) for p in ports]
    elements = []
    for name, p, kind in zip(names, ports, _each(test, ports), strict=True):
        # a test current flows from minus to plus inside its source: out of it into plus
        ends = (p.minus, p.plus) if kind == "current" else (p.plus, p.minus)
        elements.append(KINDS[kind](name, ends, Decimal(1), options=options))
    return network.with_elements(elements), names


class Seen(NamedTuple):
    """What a unit of each source, then of each test source, gives at each port (a row a port).

    `response` is None where there is none, with the reason; `alone` tells which sources have a
    response without the others, `total` is the response to all of them.
    """

    response: Numbers | None
    reason: str | None
    alone: NDArray[np.bool_]
    total: Numbers | None
    solver: Solver | None


def seen(
    network: Network, ports: Sequence[Port], frequency: Frequency, test: str | Sequence[str]
) -> Seen:
    """The responses at ports that are open (test currents) or shorted (test voltages).

    With a test current the response is the port's voltage; with a test voltage it is the current
    out of `plus`. In a small network what is only rounding is zero.
    """
    tests = _each(test, ports)
    tested, names = with_tests(network, ports, frequency, tests)
    try:
        solver = Solver(tested, frequency, _form(tested))
        quantities = [
            Quantity("V", (p.plus, p.minus)) if kind == "current" else Quantity("I", (name,))
            for p, name, kind in zip(ports, names, tests, strict=True)
        ]
        fault = _fault(solver, quantities, len(ports))
        if fault is not None:
            reason = why_not_seen(network, ports, frequency, tests, fault)
            return Seen(None, reason, np.empty(0, bool), None, None)
        return _seen(solver, quantities, len(ports))
    except NoUniqueSolutionError as error:
        said = "; ".join(d.message for d in error.diagnostics)
        return Seen(None, f"with {_state(ports, tests)}, {said}", np.empty(0, bool), None, None)


def _form(network: Network) -> str:
    """The branch-current form where its rounding can be bounded; the quicker one elsewhere."""
    unknowns = len(network.nodes) + sum(len(e.pairs) for e in network.elements.values())
    return "branch-current" if unknowns <= CLEANED_UP_TO else "nodal"


def _seen(solver: Solver, quantities: Sequence[Quantity], tests: int) -> Seen:
    u = solver.u.copy()
    u[-tests:] = 1
    h = np.array([solver.coefficients(q) for q in quantities])
    total = h[:, :-tests] @ u[:-tests]
    rounds = solver.form == "branch-current" and not solver.network.exact
    if rounds and len(u) <= MOST_SOURCES:
        columns = np.diag(u)
        own = u.copy()
        own[-tests:] = 0
        limits = np.array([solver.rounding(q, np.column_stack([columns, own])) for q in quantities])
        h = np.where(np.abs(h * u) > limits[:, :-1], h, 0)
        total = np.where(np.abs(total) > limits[:, -1], total, 0)
    alone = np.array([solver.consistent(column) for column in np.diag(u)[:-tests]], bool)
    return Seen(h, None, alone, like(solver.network, total), solver)


def why_not_seen(
    network: Network, ports: Sequence[Port], frequency: Frequency, tests: Sequence[str], fault: str
) -> str:
    """Why there are no responses, in words that know nothing of test sources."""
    shorts = [
        KINDS["short"](f"the short across {p.name}", (p.plus, p.minus))
        for p, kind in zip(ports, tests, strict=True)
        if kind == "voltage"
    ]
    try:
        reasons = Solver(network.with_elements(shorts), frequency, "branch-current").reasons
    except NoUniqueSolutionError as error:
        reasons = tuple(d.message for d in error.diagnostics)
    if len(ports) == 1 and fault:
        answer, asked = ("voltage", "current") if tests[0] == "current" else ("current", "voltage")
        fixed = f"the network itself fixes the port's {asked}"
        said = fixed if fault == "fixed" else f"the network leaves the port's {answer} undecided"
        reasons = (said, *reasons)
    return f"with {_state(ports, tests)}, {'; '.join(reasons)}"


def responses(
    network: Network, ports: Sequence[Port], frequency: Frequency, test: str | Sequence[str]
) -> tuple[Numbers | None, str | None]:
    """A row a port: what a unit of each source, then of each test source, gives there.

    None, and the reason, where there is no response.
    """
    found = seen(network, ports, frequency, test)
    return found.response, found.reason


def _each(test: str | Sequence[str], ports: Sequence[Port]) -> Sequence[str]:
    return [test] * len(ports) if isinstance(test, str) else test


def _state(ports: Sequence[Port], tests: Sequence[str]) -> str:
    """`the port open`, or `IN open and OUT shorted`."""
    words = ["open" if kind == "current" else "shorted" for kind in tests]
    if len(set(words)) == 1:
        return f"the port {words[0]}"
    return " and ".join(f"{p.name} {word}" for p, word in zip(ports, words, strict=True))


def _fault(solver: Solver, quantities: Sequence[Quantity], tests: int) -> str | None:
    """What is wrong with the responses: `fixed`, `undecided`, or something else (empty).

    None where they are unique, and the sources and each test source have a solution.
    """
    if solver.degenerate is None:
        return None
    own = solver.u.copy()
    own[-tests:] = 0
    unique = all(map(solver.unique, quantities))
    sound = solver.consistent(own)
    tested = all(map(solver.consistent, np.eye(len(own))[-tests:]))
    if unique and sound and tested:
        return None
    return "" if not sound else "fixed" if unique else "undecided" if tested else ""
