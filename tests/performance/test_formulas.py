"""Formulas against sympy's `solve` and `cancel` of the same equations, in one run."""

import itertools
import random
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
import sympy
from performance.measures import process_seconds, seconds

import equiv
from equiv.equations.symbolic.amount import Amount
from equiv.equations.symbolic.bordered import bordered
from equiv.equations.symbolic.compressed import compressed
from equiv.equations.symbolic.family import Family, family
from equiv.equations.symbolic.solver import FormulaSolver
from equiv.language import quantity

pytestmark = pytest.mark.performance
Report = Callable[[str, str, str, str], None]

BRIDGE = """
voltage Vs +a -gnd 10 V
resistor R1 a b 1 ohm
resistor R2 b gnd 2 ohm
resistor R3 a c 3 ohm
resistor R4 c gnd 4 ohm
resistor R5 b c 5 ohm
"""
FILTER = """
voltage Vs +in -gnd 1 V
resistor R1 in a 1 kohm
capacitor C1 a gnd 1 nF
resistor R2 a b 1 kohm
resistor R3 b c 1 kohm
capacitor C2 b out 1 nF
capacitor C3 c gnd 1 nF
opamp U +c -out out
"""
AMPLIFIER = """
voltage Vs +in -gnd 1 V
resistor Rs in b1 1 kohm
resistor rp1 b1 e1 1 kohm
vccs gm1 c1 > e1 g 40 mS senses V:b1,e1
resistor Re1 e1 gnd 100 ohm
resistor Rc1 c1 gnd 5 kohm
resistor rp2 c1 e2 1 kohm
vccs gm2 c2 > e2 g 40 mS senses V:c1,e2
resistor Re2 e2 gnd 100 ohm
resistor Rc2 c2 gnd 5 kohm
resistor ro2 c2 e2 50 kohm
resistor Rf c2 e1 10 kohm
resistor Rl c2 gnd 1 kohm
"""
FIVE = ["n1", "n2", "n3", "n4", "gnd"]
COMPLETE = "current J gnd > n1 1 A\n" + "".join(
    f"resistor R{i} {a} {b} 1 ohm\n" for i, (a, b) in enumerate(itertools.combinations(FIVE, 2))
)


def ladder(sections: int) -> str:
    """Series and shunt resistors by turns."""
    lines = ["voltage Vs +n0 -gnd 1 V"]
    for i in range(sections):
        lines += [f"resistor Ra{i} n{i} n{i + 1} 1 ohm", f"resistor Rb{i} n{i + 1} gnd 1 ohm"]
    return "\n".join([*lines, f"find V:n{sections}", ""])


CASES = {
    "a bridge": (BRIDGE, "I:R5", 80),
    "a three-pole active filter": (FILTER, "V:out", 80),
    "a two-stage amplifier": (AMPLIFIER, "V:c2", 300),
    "a ladder of 5 sections": (ladder(5), "V:n5", 200),
    "a complete graph of 5 nodes, a current into one": (COMPLETE, "V:n1", 1000),
}


def in_sympy(value: Any, names: list[str]) -> Any:
    """An entry of the equations as sympy's expression."""
    if not isinstance(value, Amount):
        return sympy.Integer(int(value))
    found = sympy.Integer(0)
    for part in value.parts.values():
        term = sympy.Rational(part.number.numerator, part.number.denominator)
        term *= sympy.Symbol("s") ** part.s
        for symbol, power in part.powers:
            term *= sympy.Symbol(names[symbol]) ** power
        found += term
    return found


class Case:
    """The equations of a network, for both."""

    def __init__(self, text: str, asked: str) -> None:
        self.network, self.quantity = equiv.parse(text), quantity(asked)
        self.solver = FormulaSolver(self.network)
        system, names = self.solver.system, self.solver.names
        self.row = self.solver.row(self.quantity)
        self.unknowns = sympy.symbols(f"x0:{system.size}")
        self.equations = [sympy.Integer(0)] * system.size
        for row, column, value in zip(*(t.tolist() for t in system.a), strict=True):
            self.equations[row] += in_sympy(value, names) * self.unknowns[column]
        for row, source, value in zip(*(t.tolist() for t in system.b), strict=True):
            name = sympy.Symbol(self.solver.sources[source])
            self.equations[row] -= in_sympy(value, names) * name

    def ours(self) -> Family:
        """From the equations to numerator and denominator without common factors."""
        matrix = compressed(bordered(self.solver.system, self.row))
        return family(matrix.expanded(10**6), len(self.solver.named), matrix.sources)

    def whole(self) -> Any:
        """From the network to the nested formula."""
        return FormulaSolver(self.network).answer(self.quantity)

    def theirs(self) -> Any:
        """The same equations by `solve`, and the asked quantity by `cancel`.

        Its cache is emptied first: a formula is asked for once, in a process of its own.
        """
        sympy.core.cache.clear_cache()
        (solution,) = sympy.solve(self.equations, self.unknowns, dict=True)
        state = enumerate(self.row.state)
        names = self.solver.names
        asked = sum(in_sympy(x, names) * solution[self.unknowns[i]] for i, x in state if x != 0)
        return sympy.cancel(asked)


@pytest.mark.parametrize("name", CASES)
def test_against_solve_and_cancel(name: str, report: Report) -> None:
    text, asked, target = CASES[name]
    case = Case(text, asked)
    theirs = case.theirs()
    slow = seconds(case.theirs, 3)
    fast, whole = seconds(case.ours, 200), seconds(case.whole, 20)
    found = case.ours()
    symbols = {f"x{i}": sympy.Symbol(n) for i, n in enumerate(case.solver.names[:-1])}
    symbols["s"] = sympy.Symbol("s")
    ratio = _polynomial(found.numerators[0], symbols) / _polynomial(found.denominator, symbols)
    source = sympy.Symbol(case.solver.sources[0])
    assert sympy.cancel(ratio * source - theirs) == 0
    report(
        f"the formula of {name} against `sympy.solve` and `cancel` of the same equations",
        f"≥ {target} ×", f"{slow / fast:.0f} ×",
        f"{1e3 * slow:.0f} ms / {1e3 * fast:.2f} ms ({1e3 * whole:.1f} ms from network to "
        "nested formula)",
    )  # fmt: skip
    assert slow / fast >= target


def _polynomial(found: Any, symbols: dict[str, Any]) -> Any:
    names = [symbols[str(g)] for g in found.context().names()]
    terms = [int(c) * sympy.prod(n**e for n, e in zip(names, es, strict=True))
             for es, c in found.to_dict().items()]  # fmt: skip
    return sympy.Add(*terms)


@pytest.mark.parametrize(
    ("sections", "options", "target"),
    [(10, [], 1.0), (10, ["--expand"], 1.0), (12, [], 10.0), (12, ["--expand"], 10.0)],
)
def test_ladders_as_processes(
    sections: int, options: list[str], target: float, report: Report, tmp_path: Path
) -> None:
    path = tmp_path / "ladder.equiv"
    path.write_text(ladder(sections))
    words = [sys.executable, "-m", "equiv", "superpose", str(path), *options, "--symbolic"]
    took = process_seconds(words, 3)
    how = (
        "written out, `--expand`" if options else "as the default, a sequence of named expressions"
    )
    report(
        f"a ladder of {sections} sections, all symbols, the whole process: {how}",
        f"≤ {target:.0f} s", f"{took:.2f} s", "start-up, formula, both proofs, text",
    )  # fmt: skip
    assert took <= target


def test_few_symbols_in_a_network_of_numbers(report: Report) -> None:
    draw = random.Random(1)
    lines = ["voltage Vs +n0 -gnd 1 V"]
    lines += [f"resistor R{i} n{i} n{i + 1} {draw.randint(1, 99) / 10} ohm" for i in range(55)]
    for i in range(80):
        a, b = draw.sample(range(56), 2)
        lines.append(f"resistor S{i} n{a} n{b} {draw.randint(1, 99) / 10} ohm")
    network = equiv.parse("\n".join([*lines, "resistor X n55 gnd 1 ohm", ""]))
    chosen, asked = {"R3", "R20", "S4", "S50", "X", "R44"}, quantity("V:n30")
    assert FormulaSolver(network, chosen).system.size == 57
    took = seconds(lambda: FormulaSolver(network, chosen).answer(asked), 10)
    report(
        "57 unknowns with 6 symbols, from network to formula", "≤ 50 ms", f"{1e3 * took:.0f} ms",
        f"{len(network.elements)} elements, 64 terms",
    )  # fmt: skip
    assert took <= 0.05
