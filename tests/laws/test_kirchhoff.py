"""Kirchhoff's, Tellegen's and the elements' own laws, from the solved values alone."""

import cmath
from collections import defaultdict

from hypothesis import given
from hypothesis import strategies as st
from laws.random_networks import Maker, seeded, seeds

import equiv
from equiv.analyses.solve import ElementState

# One of each kind that the random networks lack, hung on the network's first nodes.
DEVICES = """
opamp U1 +n1 -u1 u2
resistor Ru u2 u1 3 kohm
resistor Rv u1 gnd 1 kohm
opamp U2 +n2 -w1 w2 gain 5000 rin 20 kohm rout 60 ohm
resistor Rw w2 w1 2 kohm
resistor Rx w1 gnd 1 kohm
transformer T1 +n1 -gnd +t1 -gnd ratio 3:2
resistor Rt t1 gnd 40 ohm
gyrator Y1 +n2 -gnd +g1 -gnd r 70 ohm
resistor Rg g1 gnd 90 ohm
twoport B1 +n1 -gnd +b1 -gnd z 30 5 7 20
resistor Rb b1 gnd 12 ohm
twoport B2 +n2 -gnd +b2 -gnd y 0.03 -0.01 0.02 0.05
resistor Rc b2 gnd 15 ohm
twoport B3 +n1 -gnd +b3 -gnd h 50 0.1 3 0.02
resistor Rd b3 gnd 25 ohm
twoport B4 +n2 -gnd +b4 -gnd abcd 2 30 0.05 1.5
resistor Re b4 gnd 35 ohm
short S1 n1 s1
resistor Rs s1 gnd 55 ohm
open O1 n1 n2
"""
COILS = """
inductor La n1 gnd 30 mH
inductor Lb lb gnd 50 mH
resistor Rl lb gnd 18 ohm
coupling Mk La Lb k 0.9
inductor Lc n2 gnd 20 mH
inductor Ld ld gnd 20 mH
resistor Rm ld gnd 18 ohm
coupling Mm Lc Ld M 12 mH
"""


def solved(
    seed: int, ac: bool
) -> tuple[equiv.Network, dict[str, list[ElementState]], dict[str, complex]]:
    network = equiv.parse(Maker(seed, ac).text + DEVICES + (COILS if ac else ""))
    state = equiv.solve(network).first
    by_name: dict[str, list[ElementState]] = defaultdict(list)
    for element in state.elements:
        by_name[element.name].append(element)
    nodes = {name: value for name, value in state.nodes if value is not None}
    return network, by_name, {**nodes, "gnd": 0j}


@seeded
@given(seeds, st.booleans())
def test_currents_into_every_node_add_to_zero(seed: int, ac: bool) -> None:
    network, states, nodes = solved(seed, ac)
    sums: dict[str, complex] = defaultdict(complex)
    sizes: dict[str, float] = defaultdict(float)
    for element in network.elements.values():
        for index, state in enumerate(states[element.name]):
            assert state.current is not None
            first, second = element.pair_nodes(index, "gnd")
            assert state.voltage is not None
            assert abs(state.voltage - (nodes[first] - nodes[second])) <= 1e-9 * (
                abs(nodes[first]) + abs(nodes[second]) + 1e-12
            )
            for node, sign in ((first, 1), (second, -1)):
                sums[node] += sign * state.current
                sizes[node] += abs(state.current)
    for node in sums:
        assert abs(sums[node]) <= 1e-9 * max(sizes[node], 1e-9), node


@seeded
@given(seeds, st.booleans())
def test_powers_add_to_zero(seed: int, ac: bool) -> None:
    _, states, _ = solved(seed, ac)
    powers = [s.voltage * s.current.conjugate() for rows in states.values() for s in rows]  # type: ignore[operator,union-attr]
    assert abs(sum(powers)) <= 1e-9 * sum(map(abs, powers))


@seeded
@given(seeds, st.booleans())
def test_every_element_obeys_its_own_law(seed: int, ac: bool) -> None:
    network, states, nodes = solved(seed, ac)
    s = 2j * cmath.pi * 50 if ac else 0
    pair = {
        name: tuple(x for r in rows for x in (r.voltage, r.current))
        for name, rows in states.items()
    }

    def is_zero(*terms: complex) -> None:  # against volts and amperes of about ten
        size = max(abs(t) for t in terms)
        assert abs(sum(terms)) <= 1e-8 * max(size, 1e-3), terms

    for e in network.elements.values():
        if not e.pairs:
            continue
        x = pair[e.name]
        value = (
            None if e.value is None or e.rule != "all" or e.kind == "transformer" else complex_of(e)
        )
        sensed = 0j
        if e.senses is not None:
            names = e.senses.names
            if e.senses.what == "I":
                sensed = pair[names[0]][1]
            else:
                sensed = nodes[names[0]] - (nodes[names[1]] if len(names) == 2 else 0)
        match e.kind:
            case "resistor" | "impedance":
                is_zero(x[0], -value * x[1])
            case "conductance" | "admittance":
                is_zero(value * x[0], -x[1])
            case "capacitor":
                is_zero(s * value * x[0], -x[1])
            case "voltage":
                is_zero(x[0], -value)
            case "current":
                is_zero(x[1], -value)
            case "vcvs" | "ccvs":
                is_zero(x[0], -value * sensed)
            case "vccs" | "cccs":
                is_zero(x[1], -value * sensed)
            case "short":
                assert abs(x[0]) < 1e-9
            case "open":
                assert abs(x[1]) < 1e-9
            case "inductor" if e.name[0] == "Z":
                is_zero(x[0], -s * value * x[1])
    assert abs(pair["U1"][0]) < 1e-9 and abs(pair["U1"][1]) < 1e-9
    v1, i1, v2, i2 = pair["U2"]
    is_zero(v1, -20e3 * i1)
    is_zero(v2, -5000 * v1, -60 * i2)
    v1, i1, v2, i2 = pair["T1"]
    is_zero(2 * v1, -3 * v2)
    is_zero(3 * i1, 2 * i2)
    v1, i1, v2, i2 = pair["Y1"]
    is_zero(v1, 70 * i2)
    is_zero(v2, -70 * i1)
    v1, i1, v2, i2 = pair["B1"]
    is_zero(v1, -30 * i1, -5 * i2)
    is_zero(v2, -7 * i1, -20 * i2)
    v1, i1, v2, i2 = pair["B2"]
    is_zero(i1, -0.03 * v1, 0.01 * v2)
    is_zero(i2, -0.02 * v1, -0.05 * v2)
    v1, i1, v2, i2 = pair["B3"]
    is_zero(v1, -50 * i1, -0.1 * v2)
    is_zero(i2, -3 * i1, -0.02 * v2)
    v1, i1, v2, i2 = pair["B4"]
    is_zero(v1, -2 * v2, 30 * i2)
    is_zero(i1, -0.05 * v2, 1.5 * i2)
    if ac:
        m = 0.9 * (0.03 * 0.05) ** 0.5
        (va, ia), (vb, ib) = pair["La"], pair["Lb"]
        is_zero(va, -s * 0.03 * ia, -s * m * ib)
        is_zero(vb, -s * 0.05 * ib, -s * m * ia)
        (vc, ic), (vd, id_) = pair["Lc"], pair["Ld"]
        is_zero(vc, -s * 0.02 * ic, -s * 0.012 * id_)
        is_zero(vd, -s * 0.02 * id_, -s * 0.012 * ic)


def complex_of(element: object) -> complex:
    """The value of an element, by Python's own arithmetic on what was written."""
    value = element.value  # type: ignore[attr-defined]
    if hasattr(value, "magnitude"):
        return cmath.rect(float(value.magnitude), float(value.angle) * cmath.pi / 180)
    if hasattr(value, "re"):
        return complex(float(value.re), float(value.im))
    return complex(float(value))
