"""What can be asked or sensed: a voltage, a current or a power, by the names it is about."""

from __future__ import annotations

from typing import NamedTuple


class Quantity(NamedTuple):
    """`V:a`, `V:a,b`, `V:R3`, `I:R3`, `P:R3`; `V2:T1` and `I2:T1` are the second terminal pair."""

    what: str
    names: tuple[str, ...]
    pair: int = 0

    def __str__(self) -> str:
        number = str(self.pair + 1) if self.pair else ""
        return f"{self.what}{number}:{','.join(self.names)}"

    @property
    def unit(self) -> str:
        """The SI unit of the quantity."""
        return {"V": "V", "I": "A", "P": "W"}[self.what]

    def renamed(self, rename: dict[str, str]) -> Quantity:
        """The same quantity of things that have other names."""
        return self._replace(names=tuple(rename.get(name, name) for name in self.names))
