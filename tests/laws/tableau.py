"""A network solved by its own textbook equations in fractions, one law a kind, at one real s.

Nothing of the package's equations is used: Kirchhoff's law at every node, and a law for every
terminal pair, in the node voltages and all branch currents.
"""

from __future__ import annotations

from collections.abc import Callable
from fractions import Fraction

from equiv.network import Branch, Network, NodePair

Key = tuple[str, ...]
Equation = dict[Key, Fraction]
One = Fraction(1)


class Tableau:
    """`values(element, part)` gives the value of an element, with `part` where it has several."""

    def __init__(
        self, network: Network, values: Callable[[str, str], Fraction], s: Fraction
    ) -> None:
        self.network, self.values, self.s = network, values, s

    def solved(self, source: str) -> dict[Key, Fraction] | None:
        """Voltages ("V", node) and currents ("I", element, pair) of one unit of one source alone."""
        equations = [(self._at_node(node), Fraction(0)) for node in self.network.nodes]
        for element in self.network.elements.values():
            equations += [(law, Fraction(0)) for law in self._laws(element.name, source)]
            if element.name == source:
                equations[-1] = (equations[-1][0], One)
        return _gauss(equations)

    def of(self, what: str, solution: dict[Key, Fraction]) -> Fraction:
        """`V:a`, `V:a,b`, `I:R1` or `V:R1` of a solution."""
        from equiv import quantity

        place = self.network.locate(quantity(what))
        if isinstance(place, NodePair):
            ends = place.first, place.second
        elif what.startswith("I"):
            return solution["I", place.element, str(place.pair)]
        else:
            ends = self.network.pair_nodes(place)
        return solution.get(("V", ends[0]), Fraction(0)) - solution.get(("V", ends[1]), Fraction(0))

    def _at_node(self, node: str) -> Equation:
        sums: Equation = {}
        for element in self.network.elements.values():
            for pair in range(len(element.pairs)):
                first, second = self.network.pair_nodes(Branch(element.name, pair))
                for end, sign in ((first, One), (second, -One)):
                    if end == node:
                        key = ("I", element.name, str(pair))
                        sums[key] = sums.get(key, Fraction(0)) + sign
        return sums

    def _v(self, name: str, pair: int = 0, times: Fraction = One) -> Equation:
        first, second = self.network.pair_nodes(Branch(name, pair))
        return self._over(first, second, times)

    def _over(self, first: str, second: str, times: Fraction) -> Equation:
        return _sum({("V", first): times}, {("V", second): -times})

    def _i(self, name: str, pair: int = 0, times: Fraction = One) -> Equation:
        return {("I", name, str(pair)): times}

    def _sensed(self, name: str, times: Fraction) -> Equation:
        senses = self.network.elements[name].senses
        assert senses is not None
        place = self.network.locate(senses)
        if isinstance(place, NodePair):
            return self._over(place.first, place.second, times)
        if senses.what == "V":
            return self._v(place.element, place.pair, times)
        return self._i(place.element, place.pair, times)

    def _laws(self, name: str, on: str) -> list[Equation]:
        kind = self.network.elements[name].kind
        x = lambda part="": self.values(name, part)  # noqa: E731
        v, i, s = self._v, self._i, self.s
        match kind:
            case "resistor" | "impedance":
                return [_sum(v(name), i(name, 0, -x()))]
            case "conductance" | "admittance":
                return [_sum(i(name), v(name, 0, -x()))]
            case "inductor":
                return [_sum(v(name), i(name, 0, -s * x()), *self._mutual(name))]
            case "capacitor":
                return [_sum(i(name), v(name, 0, -s * x()))]
            case "voltage" | "short":
                return [v(name)]
            case "current" | "open":
                return [i(name)]
            case "vcvs" | "ccvs":
                return [_sum(v(name), self._sensed(name, -x()))]
            case "vccs" | "cccs":
                return [_sum(i(name), self._sensed(name, -x()))]
            case "transformer":
                return [_sum(v(name), v(name, 1, -x())), _sum(i(name, 0, x()), i(name, 1))]
            case "gyrator":
                return [_sum(v(name), i(name, 1, x())), _sum(v(name, 1), i(name, 0, -x()))]
            case "opamp":
                return self._opamp(name)
            case "twoport":
                return self._twoport(name)
        assert kind == "coupling", kind
        return []

    def _mutual(self, name: str) -> list[Equation]:
        found = []
        for element in self.network.elements.values():
            if element.kind == "coupling" and name in element.links:
                (other,) = set(element.links) - {name}
                found.append(self._i(other, 0, -self.s * self.values(element.name, "")))
        return found

    def _opamp(self, name: str) -> list[Equation]:
        given = self.network.elements[name].variant
        x = lambda part: self.values(name, part)  # noqa: E731
        entry = self._i(name)
        if "rin" in given:
            entry = _sum(self._v(name), self._i(name, 0, -x("rin")))
        if "gain" not in given:
            return [entry, self._v(name)]
        out = _sum(self._v(name, 1), self._v(name, 0, -x("gain")))
        if "rout" in given:
            out = _sum(out, self._i(name, 1, -x("rout")))
        return [entry, out]

    def _twoport(self, name: str) -> list[Equation]:
        (form,) = self.network.elements[name].variant
        x = lambda part: self.values(name, part)  # noqa: E731
        v, i = self._v, self._i
        if form == "abcd":
            return [
                _sum(v(name), v(name, 1, -x("a")), i(name, 1, x("b"))),
                _sum(i(name), v(name, 1, -x("c")), i(name, 1, x("d"))),
            ]
        left = {"z": (v, v), "y": (i, i), "h": (v, i)}[form]
        right = {"z": (i, i), "y": (v, v), "h": (i, v)}[form]
        return [
            _sum(
                left[k](name, k), *(right[j](name, j, -x(f"{form}{k + 1}{j + 1}")) for j in (0, 1))
            )
            for k in (0, 1)
        ]


def _sum(*parts: Equation) -> Equation:
    found: Equation = {}
    for part in parts:
        for key, value in part.items():
            found[key] = found.get(key, Fraction(0)) + value
    return found


def _gauss(equations: list[tuple[Equation, Fraction]]) -> dict[Key, Fraction] | None:
    """The one solution; None where there is none, or more than one. Grounds are left out."""
    keys = sorted({k for equation, _ in equations for k in equation} - {("V", "gnd")})
    rows = [
        [equation.get(key, Fraction(0)) for key in keys] + [right] for equation, right in equations
    ]
    if len(rows) != len(keys):
        return None
    for column in range(len(keys)):
        pivot = next((r for r in range(column, len(rows)) if rows[r][column]), None)
        if pivot is None:
            return None
        rows[column], rows[pivot] = rows[pivot], rows[column]
        scale = rows[column][column]
        rows[column] = [x / scale for x in rows[column]]
        for r, row in enumerate(rows):
            if r != column and row[column]:
                times = row[column]
                rows[r] = [a - times * b for a, b in zip(row, rows[column], strict=True)]
    return {key: row[-1] for key, row in zip(keys, rows, strict=True)}
