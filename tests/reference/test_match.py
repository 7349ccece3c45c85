"""Matches that are published, each with its source; met within half of the last printed digit
unless the source rounds on the way.
"""

import math

import pytest

import equiv

MHZ = 500e6
OMEGA = 2 * math.pi * MHZ


def thevenin(r: float, x: float = 0.0, volts: float = 10.0, hertz: float = MHZ) -> equiv.Network:
    return equiv.parse(
        f"frequency {hertz!r} Hz\nvoltage E +s -gnd {volts!r} V\n"
        f"impedance Zs s a {r!r}+{x!r}j ohm\nport P +a -gnd\n"
    )


def load_of(result, rule: str):
    return next(load for load in result.loads if load.rule == rule)


def parts_of(result, form: str) -> list[float]:
    found = [n.section for n in result.networks if n.section.words == form]
    assert len(found) == 1, [n.section.words for n in result.networks]
    return [part.value for part in found[0].parts]


@pytest.mark.parametrize(
    ("volts", "r", "x", "resistance", "power"),
    [(120, 15, 20, 25.0, 180.0), (60, 4, 3, 5.0, 200.0)],
    ids=["C01", "C04"],
)
def test_resistive_load(volts, r, x, resistance, power) -> None:
    """J. O. Bird, Electrical Circuit Theory and Technology, ch. 35 Examples 1 and 4, pp. 620-621."""
    result = equiv.match(thevenin(r, x, volts), "P", by="resistive")
    (load,) = result.loads
    assert load.impedance == pytest.approx(resistance) and load.power == pytest.approx(power)
    assert load.found == pytest.approx(power) and result.exit_status == 0


def test_conjugate_load() -> None:
    """C02: Bird, ch. 35 Example 2, p. 620; the efficiency is exactly 50 %."""
    (load,) = equiv.match(thevenin(15, 20, 120), "P", by="conjugate").loads
    assert load.impedance == pytest.approx(15 - 20j)
    assert load.power == pytest.approx(240.0) and load.efficiency == pytest.approx(0.5)


def test_resistive_thevenin_at_dc() -> None:
    """C05: Bird, ch. 35 Example 5, p. 622."""
    network = equiv.parse(
        "voltage E +s -gnd 20.0 V\nresistor R5 s a 5.0 ohm\nresistor R15 a gnd 15.0 ohm\n"
    )
    (load,) = equiv.match(network, "a,gnd").loads
    assert load.rule == "resistive" and load.impedance == pytest.approx(3.75)
    assert load.power == pytest.approx(15.0)


def test_reflected_load() -> None:
    """C07: Bird, ch. 35 Examples 7 and 9, pp. 624-625: 8:1 makes 448 ohm look like 7 ohm."""
    network = equiv.parse(
        "voltage E +s -gnd 240.0 V\nresistor R5 s p 5.0 ohm\n"
        "transformer T +p -gnd +q -gnd ratio 0.125\nresistor RL q gnd 1600.0 ohm\n"
    )
    state = equiv.solve(network).first
    found = {e.name: e for e in state.elements if e.pair == 0}
    assert found["R5"].current == pytest.approx(8.0)
    assert found["RL"].power == pytest.approx(1600.0)
    result = equiv.match(thevenin(7, 0, 240), "P", "448 ohm", by="ratio")
    assert load_of(result, "ratio").ratio == pytest.approx(1 / 8)
    assert load_of(result, "ratio").impedance == pytest.approx(7.0)


def test_matching_transformer() -> None:
    """C08: Bird, ch. 35 Example 10, p. 625: 20:1, 50 ohm, 11.25 mW."""
    load = load_of(equiv.match(thevenin(20000, 0, 30), "P", 50, by="ratio"), "ratio")
    assert load.ratio == pytest.approx(20.0)
    assert load.power == pytest.approx(0.01125) and load.found == pytest.approx(0.01125)


def test_l_for_a_complex_load() -> None:
    """C09: D. M. Pozar, Microwave Engineering, Example 5.1, p. 254."""
    result = equiv.match(thevenin(100), "P", "200-100j ohm", by="l")
    assert len(result.networks) == 2
    inductance, capacitance = parts_of(result, "series L, shunt C")
    assert inductance * 1e9 == pytest.approx(38.985, abs=5e-4)
    assert capacitance * 1e12 == pytest.approx(0.923, abs=5e-4)
    capacitance, inductance = parts_of(result, "series C, shunt L")
    assert inductance * 1e9 == pytest.approx(46.139, abs=5e-4)
    assert capacitance * 1e12 == pytest.approx(2.599, abs=5e-4)


def test_two_sections() -> None:
    """C11: D. K. Misra, Radio-Frequency and Microwave Communication Circuits, Ex. 6.7, p. 212.

    The book rounds the resistance in the middle to 173.2 ohm (173.205 gives Q = 1.5699).
    """
    result = equiv.match(thevenin(600), "P", 50, by="two-section")
    assert len(result.networks) == 4
    for network in result.networks:
        assert network.section.q == pytest.approx(1.569778, rel=1e-4)
    c1, l1, c2, l2 = parts_of(result, "shunt C, series L, shunt C, series L")
    found = [OMEGA * l1, 1 / (OMEGA * c1), OMEGA * l2, 1 / (OMEGA * c2)]
    assert found == pytest.approx([271.8856, 382.2196, 78.4857, 110.3386], rel=1e-4)


def test_l_in_two_forms() -> None:
    """C12: Misra, Example 6.8, p. 213."""
    result = equiv.match(thevenin(50), "P", "10+10j ohm", by="l")
    assert [n.section.q for n in result.networks if n.section.words.startswith("shunt")] == [
        pytest.approx(2.0)
    ] * 2
    capacitance, inductance = parts_of(result, "shunt C, series L")
    assert inductance == pytest.approx(3.1831e-09, abs=5e-14)
    assert capacitance == pytest.approx(1.2732e-11, abs=5e-16)
    inductance, capacitance = parts_of(result, "shunt L, series C")
    assert capacitance == pytest.approx(1.061e-11, abs=5e-15)
    assert inductance == pytest.approx(7.9577e-09, abs=5e-14)


def test_l_between_resistances() -> None:
    """C15: baltic-lab.com/2013/04/l-network-impedance-matching (the page cuts digits off)."""
    result = equiv.match(thevenin(75), "P", 1000, by="l")
    inductance, capacitance = parts_of(result, "series L, shunt C")
    assert OMEGA * inductance == pytest.approx(263, rel=0.003)
    assert 1 / (OMEGA * capacitance) == pytest.approx(284, rel=0.003)


def test_t_at_a_loaded_q() -> None:
    """C17: C. Bowick, RF Circuit Design, Example 4-5 (from memory; the book rounds Q2 to 4.4)."""
    result = equiv.match(thevenin(10), "P", 50, by="t", q=10)
    assert len(result.networks) == 4
    first, shunt, last = parts_of(result, "series L, shunt C, series L")
    assert OMEGA * first == pytest.approx(100, rel=1e-9)
    assert OMEGA * last == pytest.approx(220, rel=0.006)
    assert OMEGA * shunt == pytest.approx(1 / 101 + 1 / 230, rel=0.006)


def test_pi_at_a_loaded_q() -> None:
    """The dual of the T above, by hand: Rv = 1000/(1 + 15²), Q2 = √(100/Rv - 1)."""
    result = equiv.match(thevenin(100), "P", 1000, by="pi", q=15)
    assert len(result.networks) == 4
    near, series, far = parts_of(result, "shunt C, series L, shunt C")
    virtual = 1000 / 226
    q = math.sqrt(100 / virtual - 1)
    assert 1 / (OMEGA * far) == pytest.approx(1000 / 15)
    assert 1 / (OMEGA * near) == pytest.approx(100 / q)
    assert OMEGA * series == pytest.approx((15 + q) * virtual)


def test_quarter_wave_line() -> None:
    """Z0 = √(R·RL): 50 ohm to 100 ohm by 70.71 ohm (D. M. Pozar, ch. 5, from memory)."""
    (network,) = equiv.match(thevenin(50), "P", 100, by="quarter-wave").networks
    assert [p.value for p in network.section.parts] == [pytest.approx(70.7107, abs=5e-5)]
    low, high = network.band
    assert low is None and high is None  # at worst 50 ohm into 100 ohm: -0.5 dB
