"""Sweeps of random networks of all kinds: every point is what the other analyses give there."""

import random

import numpy as np
import pytest
from hypothesis import given, settings
from laws.random_networks import Maker, quantities, seeded, seeds

import equiv
from equiv.equations.batch import Batch
from equiv.equations.factor import DENSE_UP_TO

FEW = settings(seeded, max_examples=8)
FIXED = {"impedance": "resistor", "admittance": "conductance"}


def movable(maker: Maker) -> str:
    """The network with nothing that is known at one frequency only, and with devices in it."""
    lines = []
    for line in maker.lines:
        kind, *words = line.split()
        if kind in FIXED:
            number = words[3].replace("+", " ").replace("-", " ").split()[0]
            line = " ".join([FIXED[kind], *words[:3], number, *words[4:]])
        lines.append(line)
    a, b = maker.nodes[1], maker.nodes[2]
    lines += [
        f"inductor X1 {a} x1 3 mH", "resistor Y1 x1 gnd 20 ohm",
        f"inductor X2 {b} x2 7 mH", "resistor Y2 x2 gnd 15 ohm", "coupling K X1 X2 k 0.6",
        f"transformer T +{a} -gnd +t -gnd ratio 2:1", "resistor Yt t gnd 9 ohm",
        f"gyrator G +{b} -gnd +g -gnd r 5 ohm", "capacitor Yg g gnd 20 uF",
        f"opamp U +{a} -u u gain 100 rin 1 kohm rout 10 ohm", "resistor Yu u gnd 50 ohm",
        "short W u w", f"conductance Yw w {b} 3 mS",
    ]  # fmt: skip
    return "\n".join(lines) + "\n"


@FEW
@given(seeds)
def test_over_frequency_each_point_is_a_superposition(seed: int) -> None:
    maker = Maker(seed, ac=True)
    text, asked = movable(maker), quantities(maker)
    network = equiv.parse(text)
    assert Batch(network).usable
    found = equiv.sweep(network, *asked, start="3 Hz", stop="3 kHz", points=7, log=True)
    assert found.exit_status == 0
    for point in range(7):
        here = equiv.parse(text, frequency=found.axis.at(point))
        told = equiv.superpose(here, *asked, check="none")
        for curve, q in zip(found.curves, told.quantities, strict=True):
            at = q.frequencies[0]
            size = at.arithmetic_sum
            own = np.array([term.contribution for term in at.terms])
            assert np.abs(curve.terms[point] - own).max() <= 1e-10 * size
            assert abs(curve.total[point] - at.total) <= 1e-10 * size


@FEW
@given(seeds)
def test_over_frequency_each_point_is_a_port(seed: int) -> None:
    maker = Maker(seed, ac=True)
    text, port = movable(maker), ",".join(maker._two_nodes())
    found = equiv.sweep(equiv.parse(text), port, start="20 Hz", stop="2 kHz", points=4)
    (curve,) = found.curves
    assert curve.impedance is not None
    for point in range(4):
        told = equiv.port(equiv.parse(text, frequency=found.axis.at(point)), port).first
        assert told.impedance is not None and told.open_voltage is not None
        assert curve.impedance[point] == pytest.approx(complex(told.impedance[0, 0]), rel=1e-9)
        assert curve.total[point] == pytest.approx(
            complex(told.open_voltage[0]), rel=1e-9, abs=1e-12
        )


@FEW
@given(seeds)
def test_over_a_parameter_each_point_is_the_text_read_again(seed: int) -> None:
    maker = Maker(seed, ac=bool(seed % 2))
    a, b = maker.nodes[1], maker.nodes[2]
    text = maker.text + f"given x = 1 ohm\nresistor Swept {a} {b} (3*x+2 ohm)\n"
    asked = ["I:Swept", *quantities(maker)]
    found = equiv.sweep(equiv.parse(text), *asked, over="x", start=0, stop="9 ohm", points=4)
    for point in range(4):
        told = equiv.superpose(equiv.parse(text, given={"x": found.axis.at(point)}), *asked)
        for curve, q in zip(found.curves, told.quantities, strict=True):
            own = [term.contribution for term in q.frequencies[0].terms]
            assert curve.terms[point].tolist() == pytest.approx(own, rel=1e-9, abs=1e-12)


@pytest.mark.parametrize("points", [2, 9])
def test_a_large_network_is_what_a_solver_gives_point_by_point(points: int) -> None:
    draw = random.Random(7)
    lines = ["frequency 1 kHz", "voltage E +n0 -gnd 1 V", "current J gnd > n90 20 mA @ 50 deg"]
    for k in range(DENSE_UP_TO + 30):
        lines.append(f"resistor R{k} n{k} n{k + 1} {draw.uniform(1, 9):.4g} ohm")
        lines.append(f"capacitor C{k} n{k + 1} gnd {draw.uniform(1, 9):.4g} uF")
    lines.append("inductor L n150 gnd 1 mH")
    network = equiv.parse("\n".join(lines) + "\n")
    batch = Batch(network)
    assert batch.usable and not batch.dense
    asked = ["V:n40", "I:C70", "V:n100,n20"]
    found = equiv.sweep(network, *asked, start="10 Hz", stop="2 kHz", points=points)
    for point in range(points):
        here = found.axis.network(network, point)
        for curve, q in zip(
            found.curves, equiv.superpose(here, *asked, check="none").quantities, strict=True
        ):
            at = q.frequencies[0]
            own = np.array([term.contribution for term in at.terms])
            assert np.abs(curve.terms[point] - own).max() <= 1e-11 * at.arithmetic_sum


def test_what_loses_its_digits_in_the_nodal_form_is_solved_in_the_other() -> None:
    text = (
        "frequency 1 kHz\nvoltage E +a -gnd 1 V\nconductance Big a b 1e9 S\n"
        "resistor Small b gnd 1e12 ohm\ncapacitor C b gnd 1 fF\ncurrent J gnd > b 1 pA\n"
    )
    found = equiv.sweep(equiv.parse(text), "I:Small", "I:Big", start="1 Hz", stop="10 Hz", points=3)
    assert found.exit_status == 0
    omega = 2j * np.pi * found.axis.values
    small, big = found.curves
    np.testing.assert_allclose(small.total, np.full(3, 1e-12), rtol=1e-12)
    np.testing.assert_allclose(big.total, omega * 1e-15, rtol=1e-3)
