"""Formulas of random networks, as text, against the network's textbook equations in fractions."""

import random
from fractions import Fraction
from typing import Any

import pytest
import sympy
from laws.formula_text import Names, Values, in_sympy, number
from laws.random_networks import Maker, quantities
from laws.tableau import Tableau

import equiv


def devices(maker: Maker, draw: random.Random) -> str:
    """Lines for one of each device, each tied to the network by resistors."""
    nodes = maker.nodes
    a, b, c, d = (draw.choice(nodes) for _ in range(4))
    form = draw.choice(["z", "y", "h", "abcd"])
    lines = [
        f"resistor T1 {a} da 1 ohm",
        "resistor T2 da gnd 1 ohm",
        "transformer TR +da -gnd +db -gnd ratio 2:1",
        f"resistor T3 db {b} 1 ohm",
        f"gyrator GY +db -gnd +dc -{c} r 3 ohm",
        "resistor T4 dc gnd 1 ohm",
        f"opamp U1 +{d} -de de",
        "resistor T5 de dc 1 ohm",
        "opamp U2 +de -df dg gain 100 rin 1 kohm rout 10 ohm",
        "resistor T6 df gnd 1 ohm",
        "resistor T7 dg df 1 ohm",
        f"twoport TW +dg -gnd +dh -gnd {form} 1 2 3 5",
        f"resistor T8 dh {a} 1 ohm",
    ]
    if maker.ac:
        lines += [
            f"inductor LA {b} gnd 1 H",
            "inductor LB di gnd 1 H",
            "resistor T9 di gnd 1 ohm",
            "coupling K1 LA LB M 0.5 H",
        ]
    return "\n".join(lines) + "\n"


def checked(network: equiv.Network, asked: list[str], seed: int, **options: Any) -> int:
    """Compare every coefficient of every source; how many were compared."""
    values, s = Values(seed), Fraction(random.Random(seed).randint(1, 50), 7)
    tableau = Tableau(network, values, s)
    result = equiv.superpose(network, *asked, symbolic=True, check="none", **options)
    assert all(check.passed for check in result.checks), result.checks
    data = result.data()
    names = Names(values, s)
    for name, text in data["where"]:
        names[name] = number(text, names)
    compared = 0
    solutions = {name: tableau.solved(name) for name in (s.name for s in network.sources)}
    for q in data["quantities"]:
        for term in q["frequencies"][0]["terms"]:
            solution = solutions[term["source"]]
            assert solution is not None
            expected = tableau.of(q["quantity"], solution)
            assert number(term["coefficient"]["formula"], names) == expected
            value = values(term["source"])
            assert number(term["contribution"]["formula"], names) == expected * value
            compared += 1
    return compared


@pytest.mark.parametrize("seed", range(8))
def test_formulas_at_dc(seed: int) -> None:
    maker = Maker(seed)
    assert checked(equiv.parse(maker.text), quantities(maker), seed)


@pytest.mark.parametrize("seed", range(600, 608))
def test_formulas_in_s(seed: int) -> None:
    maker = Maker(seed, ac=True)
    assert checked(equiv.parse(maker.text), quantities(maker), seed)


@pytest.mark.parametrize("seed", [0, 2, 3, 4, 5, 7, 8, 9, 10])
def test_formulas_of_every_kind_of_device(seed: int) -> None:
    maker = Maker(seed, ac=bool(seed % 2), controlled=seed % 3 == 0)
    text = maker.text + devices(maker, random.Random(seed))
    asked = ["V:dh", "I:TR", "I2:GY", f"V:{maker.nodes[1]}"]
    assert checked(equiv.parse(text), asked, seed) >= len(asked)


def port_values(data: dict[str, Any], names: Names) -> dict[str, Any]:
    """The numbers of the formulas of one port."""
    for name, text in data["where"]:
        names[name] = number(text, names)
    sides = {"thevenin": ("voltage", "impedance"), "norton": ("current", "admittance")}
    found = {}
    for side, (vector, matrix) in sides.items():
        if data[side]["exists"]:
            found[vector] = [number(v["formula"], names) for v in data[side][vector]]
            found[matrix] = [
                [number(v["formula"], names) for v in row] for row in data[side][matrix]
            ]
    return found


def loaded(network: equiv.Network, ports: list[str], seed: int) -> None:
    """The equivalent, and the network itself, under random loads: the same voltages."""
    values, s = Values(seed), Fraction(3, 7)
    found = equiv.port(network, *ports, symbolic=True)
    assert all(check.passed for check in found.checks)
    numbers = port_values(found.data(), Names(values, s))
    text = equiv.write(network)
    for number_, port in enumerate(ports):
        text += f"resistor LOAD{number_} {port.replace(',', ' ')} ?\n"
    full = Tableau(equiv.parse(text), values, s)
    volts = [Fraction(0)] * len(ports)
    for source in network.sources:
        solution = full.solved(source.name)
        assert solution is not None
        for p, port in enumerate(ports):
            volts[p] += values(source.name) * full.of(f"V:{port}", solution)
    amperes = [v / values(f"LOAD{p}") for p, v in enumerate(volts)]
    for p in range(len(ports)):
        z, y = numbers.get("impedance"), numbers.get("admittance")
        if z is not None:
            drop = sum(a * b for a, b in zip(z[p], amperes, strict=True))
            assert volts[p] == numbers["voltage"][p] - drop
        if y is not None:
            drawn = sum(a * b for a, b in zip(y[p], volts, strict=True))
            assert amperes[p] == numbers["current"][p] - drawn


@pytest.mark.parametrize("seed", range(6))
def test_ports_under_random_loads(seed: int) -> None:
    maker = Maker(seed, ac=bool(seed % 2))
    network = equiv.parse(maker.text)
    first, second = maker.nodes[1], maker.nodes[2]
    loaded(network, [f"{first},gnd"], seed)
    loaded(network, [f"{first},gnd", f"{second},gnd"], seed)


ONLY = {
    "Norton only": (
        "current J gnd > a 1 A\nresistor R b gnd 1 ohm\nvccs g a > gnd g 1 S senses V:b\n",
        (False, True),
    ),
    "Thevenin only": ("voltage V +a -gnd 1 V\nresistor R a gnd 1 ohm\n", (True, False)),
    "neither": ("opamp U +a -gnd out\nresistor R out gnd 1 ohm\n", (False, False)),
    "both": ("voltage V +b -gnd 1 V\nresistor R a b 1 ohm\n", (True, True)),
}


@pytest.mark.parametrize("name", ONLY)
def test_existence_is_read_off_the_triple(name: str) -> None:
    text, exists = ONLY[name]
    found = equiv.port(equiv.parse(text), "a,gnd", symbolic=True)
    data = found.data()
    assert (data["thevenin"]["exists"], data["norton"]["exists"]) == exists
    assert found.exit_status == (0 if any(exists) else 5)
    assert all(check.passed for check in found.checks)
    numeric = equiv.port(equiv.parse(text), "a,gnd").data()
    assert (numeric["thevenin"]["exists"], numeric["norton"]["exists"]) == exists


@pytest.mark.parametrize("seed", range(6))
def test_nothing_is_common_to_all_polynomials(seed: int) -> None:
    maker = Maker(seed)
    # a part that the asked quantity does not see would be a factor of everything
    text = maker.text + "voltage EX +x1 -gnd 1 V\nresistor X1 x1 x2 ?\nresistor X2 x2 gnd ?\n"
    found = equiv.superpose(equiv.parse(text), f"V:{maker.nodes[1]}", symbolic=True)
    data = found.data()
    names = {name: None for name, _ in data["where"]}
    formula = data["quantities"][0]["denominator"]["formula"]
    assert "X1" not in formula and "X2" not in formula
    if not names:
        tops = [sympy.fraction(sympy.together(in_sympy(t["coefficient"]["formula"])))[0]
                for t in data["quantities"][0]["frequencies"][0]["terms"]]  # fmt: skip
        bottom = sympy.expand(in_sympy(formula))
        assert sympy.gcd_list([bottom, *map(sympy.expand, tops)]).is_number


@pytest.mark.parametrize("style", [{}, {"expand": True}])
@pytest.mark.parametrize("seed", [1, 4])
def test_against_solve_and_cancel(seed: int, style: dict[str, bool]) -> None:
    """The same equations, written by hand here, by sympy."""
    draw = random.Random(seed)
    text = "voltage Vs +a -gnd 1 V\n"
    r = sympy.symbols("R0:5")
    ends = [("a", "b"), ("b", "c"), ("b", "gnd"), ("c", "gnd"), ("a", "c")]
    draw.shuffle(ends)
    text += "".join(f"resistor R{i} {p} {q} ?\n" for i, (p, q) in enumerate(ends))
    text += "cccs F gnd > c beta ? senses I:R0\n"
    v = {"a": sympy.Symbol("Vs"), "gnd": 0, "b": sympy.Symbol("b"), "c": sympy.Symbol("c")}
    currents = [(v[p] - v[q]) / r[i] for i, (p, q) in enumerate(ends)]
    sums = dict.fromkeys("bc", 0)
    for i, (p, q) in enumerate(ends):
        for node, sign in ((p, 1), (q, -1)):
            if node in sums:
                sums[node] += sign * currents[i]
    sums["c"] -= sympy.Symbol("F") * currents[0]
    (solution,) = sympy.solve(list(sums.values()), [v["b"], v["c"]], dict=True)
    found = equiv.superpose(equiv.parse(text), "V:c", symbolic=True, **style)
    assert sympy.cancel(found.to_sympy() - solution[v["c"]]) == 0


def test_one_symbol_for_several_elements() -> None:
    text = """
        given R = 1 kohm
        given k = 3
        voltage Vs +a -gnd 1 V
        resistor R1 a b R
        resistor R2 b gnd (R/k + 0 ohm)
        vcvs E +c -gnd mu (k*k) senses V:b
        resistor R3 c gnd (2*R)
        find I:R3
        """
    found = equiv.superpose(equiv.parse(text), symbolic="R,k").to_sympy()
    r, k = sympy.symbols("R k")
    # v(b) = 1/(1 + k), v(c) = k^2·v(b)
    assert sympy.cancel(found - k**2 / (1 + k) / (2 * r)) == 0


def test_the_derivative_is_that_of_the_formula() -> None:
    text = "voltage Vs +a -gnd 10 V\nresistor R1 a b 1 ohm\nresistor R2 b gnd 3 ohm\n"
    found = equiv.superpose(equiv.parse(text), "V:b", symbolic=True, derivative="R1")
    data = found.data()["quantities"][0]["derivatives"]
    r1, r2, vs = sympy.symbols("R1 R2 Vs")
    assert sympy.cancel(in_sympy(data[0]["formula"]) + vs * r2 / (r1 + r2) ** 2) == 0
    assert data[0]["re"] == data[-1]["re"] == -10 * 3 / 16
    own = equiv.superpose(equiv.parse(text), "V:b", symbolic=True, derivative="Vs")
    formula = own.data()["quantities"][0]["derivatives"][0]["formula"]
    assert sympy.cancel(in_sympy(formula) - r2 / (r1 + r2)) == 0
