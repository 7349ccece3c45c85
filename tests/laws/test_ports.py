"""A port's equivalent must behave as its network, whatever is connected."""

import random

from hypothesis import given
from hypothesis import strategies as st
from laws.random_networks import Maker, seeded, seeds

import equiv


def close(one: complex, other: complex, size: float = 0.0) -> None:
    assert abs(one - other) <= 1e-7 * max(abs(one), abs(other), size, 1e-9)


@seeded
@given(seeds, st.booleans())
def test_equivalent_is_the_network_under_any_load(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac)
    draw = random.Random(seed + 1)
    a, b = draw.sample(maker.nodes, 2)
    result = equiv.port(equiv.parse(maker.text), f"{a},{b}")
    assert all(check.passed for check in result.checks), result.checks
    e = result.first
    assert e.impedance is not None and e.open_voltage is not None
    z, voc = complex(e.impedance[0, 0]), complex(e.open_voltage[0])
    for _ in range(3):
        r = round(draw.uniform(0.5, 200), 3)
        loaded = equiv.parse(maker.text + f"resistor Load {a} {b} {r} ohm\n")
        current = equiv.superpose(loaded, "I:Load").quantities[0].frequencies[0].total
        close(current * (z + r), voc, abs(voc))


@seeded
@given(seeds, st.booleans())
def test_norton_is_thevenin(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac)
    e = equiv.port(equiv.parse(maker.text), f"{maker.nodes[1]},gnd").first
    assert e.impedance is not None and e.admittance is not None
    assert e.open_voltage is not None and e.short_current is not None
    close(complex(e.impedance[0, 0]) * complex(e.admittance[0, 0]), 1)
    close(complex(e.open_voltage[0]), complex(e.impedance[0, 0] * e.short_current[0]))


@seeded
@given(seeds, st.booleans())
def test_reciprocity_without_controlled_sources(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac, controlled=False)
    draw = random.Random(seed + 2)
    p, q = (",".join(draw.sample(maker.nodes, 2)) for _ in range(2))
    if p == q:
        return
    z = equiv.port(equiv.parse(maker.text), p, q).first.impedance
    assert z is not None
    close(complex(z[0, 1]), complex(z[1, 0]), abs(z[0, 0]))


@seeded
@given(seeds)
def test_blackman_holds_with_one_controlled_source(seed: int) -> None:
    maker = Maker(seed, controlled=False)
    a, b = maker.random.sample(maker.nodes, 2)
    text = maker.text + f"vccs G1 {a} > {b} g 15 mS senses V:{maker.nodes[1]}\n"
    result = equiv.port(equiv.parse(text), f"{maker.nodes[2]},gnd")
    checks = {check.name: check for check in result.checks}
    assert checks["Blackman's formula"].passed, checks
