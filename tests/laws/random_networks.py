"""Random networks as text: connected, with every kind of controlled source, at DC or AC."""

from __future__ import annotations

import random

from hypothesis import settings
from hypothesis import strategies as st

seeds = st.integers(min_value=0, max_value=10**9)
seeded = settings(derandomize=True, max_examples=25, deadline=None)


class Maker:
    """Writes a network statement by statement; every node hangs on the ground by resistors."""

    def __init__(self, seed: int, ac: bool = False, controlled: bool = True) -> None:
        self.random = random.Random(seed)
        self.ac = ac
        self.lines = ["frequency 50 Hz"] if ac else []
        self.count = 0
        self.nodes = ["gnd"]
        self.sensible: list[str] = []
        self.sources: list[str] = []
        for _ in range(self.random.randint(3, 6)):
            self._branch(self.random.choice(self.nodes), self._new_node())
        for _ in range(self.random.randint(1, 4)):
            self._branch(*self._two_nodes())
        for _ in range(self.random.randint(2, 4)):
            self._source()
        if controlled:
            self._controlled()

    @property
    def text(self) -> str:
        """The network."""
        return "\n".join(self.lines) + "\n"

    def _name(self, kind: str) -> str:
        self.count += 1
        return f"{kind}{self.count}"

    def _new_node(self) -> str:
        self.nodes.append(f"n{len(self.nodes)}")
        return self.nodes[-1]

    def _two_nodes(self) -> list[str]:
        return self.random.sample(self.nodes, 2)

    def _number(self, low: float, high: float) -> str:
        return f"{self.random.uniform(low, high):.4g}"

    def _branch(self, a: str, b: str) -> None:
        kinds = ["resistor", "conductance"]
        if self.ac:
            kinds += ["inductor", "capacitor", "impedance", "admittance"]
        kind = self.random.choice(kinds)
        name = self._name("Z")
        value = {
            "resistor": f"{self._number(1, 100)} ohm",
            "conductance": f"{self._number(10, 500)} mS",
            "inductor": f"{self._number(5, 200)} mH",
            "capacitor": f"{self._number(20, 400)} uF",
            "impedance": f"{self._number(1, 50)}+{self._number(1, 50)}j ohm",
            "admittance": f"{self._number(10, 90)}-{self._number(10, 90)}j mS",
        }[kind]
        self.lines.append(f"{kind} {name} {a} {b} {value}")
        self.sensible.append(name)

    def _phasor(self, unit: str) -> str:
        value = f"{self.random.choice(['', '-'])}{self._number(1, 20)} {unit}"
        return f"{value} @ {self._number(-180, 180)} deg" if self.ac else value

    def _source(self) -> None:
        a, b = self._two_nodes()
        if self.random.random() < 0.5:
            name, inner = self._name("J"), None
            self.lines.append(f"current {name} {a} > {b} {self._phasor('A')}")
        else:
            name, inner = self._name("E"), self._new_node()
            self.lines.append(f"voltage {name} +{inner} -{a} {self._phasor('V')}")
            self.lines.append(f"resistor {self._name('Z')} {inner} {b} {self._number(1, 30)} ohm")
        self.sources.append(name)
        self.sensible.append(name)

    def _controlled(self) -> None:
        for kind in ("vcvs", "vccs", "ccvs", "cccs"):
            a, b = self._two_nodes()
            name = self._name("D")
            senses = (
                f"V:{','.join(self._two_nodes())}"
                if kind[0] == "v"
                else f"I:{self.random.choice(self.sensible)}"
            )
            if kind.endswith("vs"):
                inner = self._new_node()
                word = (
                    f"mu {self._number(-3, 3)}"
                    if kind == "vcvs"
                    else f"r {self._number(-9, 9)} ohm"
                )
                self.lines.append(f"{kind} {name} +{inner} -{a} {word} senses {senses}")
                self.lines.append(
                    f"resistor {self._name('Z')} {inner} {b} {self._number(5, 60)} ohm"
                )
            else:
                word = (
                    f"g {self._number(-40, 40)} mS"
                    if kind == "vccs"
                    else f"beta {self._number(-2, 2)}"
                )
                self.lines.append(f"{kind} {name} {a} > {b} {word} senses {senses}")
            self.sensible.append(name)


def quantities(maker: Maker) -> list[str]:
    """A voltage, a node pair, and currents of some elements."""
    names = maker.random.sample(maker.sensible, min(3, len(maker.sensible)))
    return [f"V:{maker.nodes[1]}", f"V:{','.join(maker._two_nodes())}", *(f"I:{n}" for n in names)]
