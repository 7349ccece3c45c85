"""The sub-circuit of one source or group, as a network that runs as it is."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, ClassVar

from equiv.analyses.result import Result
from equiv.analyses.tables import Table
from equiv.language import write
from equiv.network import Network

_EMPTY = Network({})


@dataclass(frozen=True)
class Isolation(Result):
    """A source's sub-circuit: the network, and what was switched off."""

    command: ClassVar[str] = "isolate"

    source: str = ""
    subcircuit: Network = _EMPTY

    @property
    def off(self) -> list[tuple[str, str, str]]:
        """Name, kind before and kind after of each source that was switched off."""
        before, after = self.network.elements, self.subcircuit.elements
        return [
            (s.name, s.kind, after[s.name].kind)
            for s in self.network.sources
            if before[s.name] != after[s.name]
        ]

    def plain_text(self) -> str:
        """The sub-circuit in the network language."""
        return write(self.subcircuit)

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """The text of the sub-circuit."""
        return (Table(f"Sub-circuit of {self.source}", text=self.plain_text(), name="sub-circuit"),)

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        return {
            "source": self.source,
            "members": list(self.network.members(self.source)),
            "off": [{"name": n, "was": was, "becomes": now} for n, was, now in self.off],
            "network": self.plain_text(),
        }


def isolate(network: Network, source: str) -> Isolation:
    """The sub-circuit of one independent source (or group), the others switched off.

    Voltage sources become shorts and current sources opens of the same name, with a comment on
    each; every controlled source stays.

    Errors: UsageError where there is no such source or group.
    """
    return Isolation(network, source=source, subcircuit=network.isolate(source))
