"""Which ports are meant."""

from __future__ import annotations

from collections.abc import Sequence

from equiv.elements.quantity import Quantity
from equiv.errors import Diagnostic, UsageError
from equiv.network import Network, Port


def chosen_ports(network: Network, ports: Sequence[str | Port]) -> tuple[Port, ...]:
    """The ports that were named (names, pairs `a,b`, or ports); all declared ones if none were."""
    if not ports:
        if not network.ports:
            raise UsageError(
                Diagnostic("no-port", "the file declares no port", hint="name two nodes: a,b")
            )
        return tuple(network.ports.values())
    chosen = tuple(p if isinstance(p, Port) else find_port(network, p) for p in ports)
    for number, p in enumerate(chosen):
        if p in chosen[:number]:
            raise UsageError(Diagnostic("same-port", f"the port {p.name} is named twice"))
    return chosen


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
