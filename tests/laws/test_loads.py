"""A load at a port must do what it does in the network itself, whatever the network is."""

import random
from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st
from laws.random_networks import Maker, seeded, seeds

import equiv


def port_of(maker: Maker, seed: int) -> tuple[random.Random, str, str]:
    """Two of the nodes that hang on each other by passive elements."""
    draw = random.Random(seed + 7)
    a, b = draw.sample(maker.nodes[:4], 2)
    return draw, a, b


@seeded
@given(seeds, st.booleans())
def test_a_load_is_what_it_is_in_the_file(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac)
    draw, a, b = port_of(maker, seed)
    ohms = f"{draw.uniform(1, 99):.3f}" + (f"{draw.uniform(-50, 50):+.3f}j" if ac else "")
    amperes = f"{draw.uniform(-2, 2):.3f} A"
    network = equiv.parse(maker.text)
    result = equiv.load_port(network, f"{a},{b}", f"{ohms} ohm", f"current {amperes}")
    assert result.exit_status == 0, result.checks
    lines = (f"{'impedance' if ac else 'resistor'} Load {a} {b} {ohms} ohm\n",
             f"current Load {a} > {b} {amperes}\n")  # fmt: skip
    for found, line in zip(result.first.states, lines, strict=True):
        solved = equiv.solve(equiv.parse(maker.text + line)).first
        load = next(e for e in solved.elements if e.name == "Load")
        size = abs(load.voltage) + 1e-9
        assert abs(found.point.voltage - load.voltage) <= 1e-7 * size
        assert abs(found.power - load.power) <= 1e-7 * (abs(load.power) + 1e-9)
        given_ = {e.name: -e.power for e in solved.elements}
        for source in found.proof.sources:
            assert source.delivered == pytest.approx(given_[source.name], rel=1e-7, abs=1e-9)


@seeded
@given(seeds, st.booleans())
def test_a_power_is_drawn_up_to_the_most_and_not_beyond(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac, controlled=False)
    draw, a, b = port_of(maker, seed)
    words = f" pf {draw.uniform(0.1, 1):.4f} {draw.choice(['lag', 'lead'])}" if ac else ""
    network = equiv.parse(maker.text)
    (none,) = equiv.load_port(network, f"{a},{b}", f"power 1e20 W{words}").first.states
    assert none.most is not None and none.most >= 0
    if none.most < 1e-12:
        return
    below, beyond = (f"power {none.most * part:.17g} W{words}" for part in (0.999, 1.001))
    high, low, refused = equiv.load_port(network, f"{a},{b}", below, beyond).first.states
    assert not refused.exists
    for found in (high, low):
        assert found.power.real == pytest.approx(none.most * 0.999, rel=1e-9)
        # the point lies on the line of the port
        ohms = complex(found.point.voltage / found.point.current)
        text = f"{ohms.real:.17g}{ohms.imag:+.17g}j" if ac else f"{ohms.real:.17g}"
        (same,) = equiv.load_port(network, f"{a},{b}", f"{text} ohm").first.states
        assert same.point.voltage == pytest.approx(found.point.voltage, rel=1e-7)


@seeded
@given(seeds)
def test_a_passive_network_is_never_more_than_efficient(seed: int) -> None:
    maker = Maker(seed, controlled=False)
    draw, a, b = port_of(maker, seed)
    result = equiv.load_port(equiv.parse(maker.text), f"{a},{b}", f"{draw.uniform(1, 99):.3f} ohm")
    (found,) = result.first.states
    assert found.efficiency.value is None or 0 <= found.efficiency.value <= 1 + 1e-12


@seeded
@given(seeds)
def test_intersections_with_a_curve_are_on_both(seed: int) -> None:
    maker = Maker(seed)
    draw, a, b = port_of(maker, seed)
    points = [(draw.uniform(-20, 20), draw.uniform(-3, 3)) for _ in range(8)]
    text = "voltage [V],current [A]\n" + "".join(f"{v!r},{i!r}\n" for v, i in points)
    network = equiv.parse(maker.text)
    states = equiv.load_port(network, f"{a},{b}", equiv.load_curve(text)).first.states
    e = equiv.port(network, f"{a},{b}").first
    voc, r = float(e.open_voltage[0]), float(e.impedance[0, 0])
    signs = [v + r * i - voc > 0 for v, i in points]
    crossings = sum(one != other for one, other in pairwise(signs))
    assert sum(s.exists for s in states) == crossings
