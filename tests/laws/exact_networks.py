"""Random networks of every kind with rational values, and their own equations in fractions."""

from __future__ import annotations

from collections.abc import Iterator
from decimal import Decimal
from fractions import Fraction
from typing import Any

from laws.random_networks import Maker

from equiv.elements import Element
from equiv.network import Network
from equiv.units import Rectangular

OMEGA = 300
Complex = tuple[Fraction, Fraction]
Row = dict[tuple[str, Any], Complex]


class ExactMaker(Maker):
    """Values of few digits, complex ones by their parts, and one element of each device."""

    def __init__(self, seed: int, ac: bool = False) -> None:
        super().__init__(seed, ac)
        self.lines = [line.replace("50 Hz", f"{OMEGA} rad/s") for line in self.lines]
        self._devices()
        if ac:
            self._coupled()

    def _number(self, low: float, high: float) -> str:
        return f"{self.random.uniform(low, high):.2g}"

    def _phasor(self, unit: str) -> str:
        if not self.ac:
            return f"{self._number(-20, 20)} {unit}"
        return f"{self._number(1, 20)}-{self._number(1, 20)}j {unit}"

    def _hung(self) -> str:
        """A new node that hangs on two others by resistors."""
        others = self._two_nodes()
        node = self._new_node()
        for other in others:
            self.lines.append(
                f"resistor {self._name('Z')} {node} {other} {self._number(2, 50)} ohm"
            )
        return node

    def _device(self, words: str) -> None:
        kind, rest = words.split(" ", 1)
        self.lines.append(
            f"{kind} {self._name('T')} +{self._hung()} -gnd +{self._hung()} -gnd {rest}"
        )

    def _devices(self) -> None:
        self._device("transformer ratio 3:2")
        self._device(f"gyrator r {self._number(2, 9)} ohm")
        self._device("twoport z 10 2 3 8")
        self._device("twoport y 0.1 0.02 0.5 0.08")
        self._device("twoport h 100 0.01 5 0.02")
        self._device("twoport abcd 2 3 0.5 1.25")
        minus, out = self._hung(), self._hung()
        self.lines.append(f"resistor {self._name('Z')} {minus} {out} 7 ohm")
        self.lines.append(f"opamp {self._name('U')} +gnd -{minus} {out}")
        plus, out = self._hung(), self._hung()
        self.lines.append(
            f"opamp {self._name('U')} +{plus} -gnd {out} gain 3.5 rin 900 ohm rout 4 ohm"
        )

    def _coupled(self) -> None:
        for value, name in (("4 mH", "La"), ("9 mH", "Lb"), ("5 mH", "Lc"), ("6 mH", "Ld")):
            self.lines.append(f"inductor {name} {self._hung()} gnd {value}")
        self.lines += ["coupling Mab La Lb k 0.5", "coupling Mcd Lc Ld M 1.5 mH"]


def number(value: Any) -> Complex:
    """An exact value of an element."""
    if isinstance(value, Rectangular):
        return Fraction(value.re), Fraction(value.im)
    assert isinstance(value, Decimal | Fraction), value
    return Fraction(value), Fraction(0)


def _minus(x: Complex) -> Complex:
    return -x[0], -x[1]


ONE: Complex = (Fraction(1), Fraction(0))


class Tableau:
    """Kirchhoff's laws and each element's own law, with every current an unknown."""

    def __init__(self, network: Network) -> None:
        self.network = network
        self.omega = Fraction(network.frequency.value)
        self.rows: list[tuple[Row, Complex]] = []
        currents: dict[str, Row] = {node: {} for node in network.nodes}
        for e in network.elements.values():
            for k in range(len(e.pairs)):
                first, second = e.pair_nodes(k, network.ground)
                for node, sign in ((first, ONE), (second, _minus(ONE))):
                    if node != network.ground:
                        _add(currents[node], ("i", (e.name, k)), sign)
        self.rows += [(row, (Fraction(0), Fraction(0))) for row in currents.values()]
        for e in network.elements.values():
            if e.kind != "coupling":
                self.rows += [(row, right) for row, right in self._laws(e)]

    def voltage(self, e: Element, pair: int, factor: Complex) -> Row:
        first, second = e.pair_nodes(pair, self.network.ground)
        return self.across(first, second, factor)

    def across(self, first: str, second: str, factor: Complex) -> Row:
        row: Row = {}
        for node, sign in ((first, factor), (second, _minus(factor))):
            if node != self.network.ground:
                _add(row, ("v", node), sign)
        return row

    def _laws(self, e: Element) -> Iterator[tuple[Row, Complex]]:
        zero: Complex = (Fraction(0), Fraction(0))
        i = [("i", (e.name, k)) for k in range(len(e.pairs))]
        if e.kind in ("resistor", "impedance"):
            yield _sum(self.voltage(e, 0, ONE), {i[0]: _minus(number(e.value))}), zero
        elif e.kind in ("conductance", "admittance"):
            yield _sum(self.voltage(e, 0, number(e.value)), {i[0]: _minus(ONE)}), zero
        elif e.kind == "capacitor":
            y = (Fraction(0), self.omega * Fraction(e.value))  # type: ignore[arg-type]
            yield _sum(self.voltage(e, 0, y), {i[0]: _minus(ONE)}), zero
        elif e.kind == "inductor":
            yield _sum(self.voltage(e, 0, ONE), *self._flux(e)), zero
        elif e.kind == "voltage":
            yield self.voltage(e, 0, ONE), number(e.value)
        elif e.kind == "current":
            yield {i[0]: ONE}, number(e.value)
        elif e.kind == "gyrator":
            r = number(e.value)
            yield _sum(self.voltage(e, 0, ONE), {i[1]: r}), zero
            yield _sum(self.voltage(e, 1, ONE), {i[0]: _minus(r)}), zero
        elif e.role == "controlled":
            yield self._controlled(e), zero
        else:
            for row in self._device(e):
                yield row, zero

    def _flux(self, e: Element) -> Iterator[Row]:
        """-jω times the flux of an inductor, with what others couple into it."""
        yield {("i", (e.name, 0)): (Fraction(0), -self.omega * Fraction(e.value))}  # type: ignore[arg-type]
        mutual = {"Mab": Fraction(3, 1000), "Mcd": Fraction(3, 2000)}  # 0.5·√(4·9) mH, 1.5 mH
        for c in self.network.elements.values():
            if c.kind == "coupling" and e.name in c.links:
                other = next(name for name in c.links if name != e.name)
                yield {("i", (other, 0)): (Fraction(0), -self.omega * mutual[c.name])}

    def _controlled(self, e: Element) -> Row:
        assert e.senses is not None
        gain = _minus(number(e.value))
        if e.senses.what == "I":
            sensed: Row = {("i", (e.senses.names[0], e.senses.pair)): gain}
        else:
            first, second = e.senses.names
            sensed = self.across(first, second, gain)
        output = self.voltage(e, 0, ONE) if e.output == "V" else {("i", (e.name, 0)): ONE}
        return _sum(output, sensed)

    def _device(self, e: Element) -> list[Row]:
        values: Any = dict(e.value.items)  # type: ignore[union-attr]
        v = [lambda f, k=k: self.voltage(e, k, f) for k in (0, 1)]
        i = [lambda f, k=k: {("i", (e.name, k)): f} for k in (0, 1)]
        if e.kind == "transformer":
            n1, n2 = map(number, values["ratio"])
            return [_sum(v[0](n2), v[1](_minus(n1))), _sum(i[0](n1), i[1](n2))]
        if e.kind == "opamp":
            return self._opamp(values, v, i)
        ((form, four),) = values.items()
        a, b, c, d = (_minus(number(x)) for x in four)
        left, right = {
            "z": ((v[0], v[1]), (i[0], i[1])),
            "y": ((i[0], i[1]), (v[0], v[1])),
            "h": ((v[0], i[1]), (i[0], v[1])),
            "abcd": ((v[0], i[0]), (v[1], lambda f: i[1](_minus(f)))),
        }[form]
        return [
            _sum(left[0](ONE), right[0](a), right[1](b)),
            _sum(left[1](ONE), right[0](c), right[1](d)),
        ]

    @staticmethod
    def _opamp(values: Any, v: Any, i: Any) -> list[Row]:
        if "gain" not in values:
            return [i[0](ONE), v[0](ONE)]
        gain, rin, rout = (_minus(number(values[n][0])) for n in ("gain", "rin", "rout"))
        return [_sum(v[0](ONE), i[0](rin)), _sum(v[1](ONE), v[0](gain), i[1](rout))]

    def solve(self) -> dict[tuple[str, Any], Complex]:
        """Every unknown, by elimination in fractions."""
        unknowns = list(dict.fromkeys(key for row, _ in self.rows for key in row))
        place = {key: k for k, key in enumerate(unknowns)}
        size = len(unknowns)
        assert len(self.rows) == size
        table: list[dict[int, Fraction]] = []
        for row, (re, im) in self.rows:
            upper, lower = {2 * size: re}, {2 * size: im}
            for key, (a, b) in row.items():
                x, y = 2 * place[key], 2 * place[key] + 1
                upper |= {x: a, y: -b}
                lower |= {x: b, y: a}
            table += [{k: f for k, f in one.items() if f} for one in (upper, lower)]
        found = eliminate(table, 2 * size)
        return {key: (found[2 * k], found[2 * k + 1]) for key, k in place.items()}


def _add(row: Row, key: tuple[str, Any], factor: Complex) -> None:
    re, im = row.get(key, (Fraction(0), Fraction(0)))
    row[key] = (re + factor[0], im + factor[1])


def _sum(*rows: Row) -> Row:
    out: Row = {}
    for row in rows:
        for key, factor in row.items():
            _add(out, key, factor)
    return out


def eliminate(table: list[dict[int, Fraction]], size: int) -> list[Fraction]:
    """Gauss and Jordan on sparse rows; column `size` is the right-hand side."""
    rows = [dict(row) for row in table]
    pivots: dict[int, dict[int, Fraction]] = {}
    while rows:
        # the shortest row next, so that little fills in
        rows.sort(key=len, reverse=True)
        row = rows.pop()
        column = min((k for k in row if k < size), default=None)
        assert column is not None, "singular"
        pivot = row[column]
        row = {k: f / pivot for k, f in row.items()}
        for other in (*rows, *pivots.values()):
            factor = other.get(column)
            if factor:
                for k, f in row.items():
                    value = other.get(k, Fraction(0)) - factor * f
                    if value:
                        other[k] = value
                    else:
                        other.pop(k, None)
        pivots[column] = row
    return [pivots[k].get(size, Fraction(0)) for k in range(size)]
