"""Classical exact results (ladders, lattices, null networks); sources beside each, from memory."""

import itertools
import math

import pytest

import equiv


def resistance(text: str, pair: str) -> float:
    impedance = equiv.port(equiv.parse(text), pair).first.impedance
    assert impedance is not None
    return float(impedance[0, 0].real)


def total(text: str, quantity: str) -> complex:
    result = equiv.superpose(equiv.parse(text), quantity)
    assert result.exit_status == 0
    return result.quantities[0].frequencies[0].total


def name(node: int) -> str:
    return f"n{node}" if node else "gnd"


@pytest.mark.parametrize(("far", "value"), [(1, 7 / 12), (3, 3 / 4), (7, 5 / 6)])
def test_cube_of_unit_resistors(far: int, value: float) -> None:
    """K01: edge 7/12, face diagonal 3/4, body diagonal 5/6 ohm (classical, from memory)."""
    edges = [(a, b) for a, b in itertools.combinations(range(8), 2) if (a ^ b) in (1, 2, 4)]
    assert len(edges) == 12
    text = "".join(f"resistor R{i} {name(a)} {name(b)} 1 ohm\n" for i, (a, b) in enumerate(edges))
    assert resistance(text, f"{name(far)},gnd") == pytest.approx(value, rel=1e-12)


def test_infinite_ladder_is_the_golden_ratio() -> None:
    """K02: sixty sections of series 1 and shunt 1 ohm come to (1 + sqrt 5)/2 (from memory)."""
    text = "".join(
        f"resistor S{i} n{i} n{i + 1} 1 ohm\nresistor P{i} n{i + 1} gnd 1 ohm\n" for i in range(60)
    )
    assert resistance(text, "n0,gnd") == pytest.approx((1 + math.sqrt(5)) / 2, rel=1e-10)


def test_foster_sum_on_a_given_graph() -> None:
    """K04: R. M. Foster, 1949: the edge resistances of a connected unit graph add to n - 1."""
    edges = [
        (1, 0), (2, 1), (3, 1), (3, 2), (4, 1), (4, 3), (5, 2), (5, 4), (6, 0), (6, 1), (6, 2),
        (6, 3), (6, 4), (6, 5), (7, 0), (7, 1), (7, 6), (8, 0), (8, 3), (8, 7),
    ]  # fmt: skip
    text = "".join(f"resistor R{i} {name(a)} {name(b)} 1 ohm\n" for i, (a, b) in enumerate(edges))
    assert sum(resistance(text, f"{name(a)},{name(b)}") for a, b in edges) == pytest.approx(8)


def test_bit_weights_of_a_ladder_converter() -> None:
    """B17: an 8-bit R-2R ladder: output resistance R, weights 2^-(N-k) (from memory)."""
    bits = 8
    text = "resistor Rend n0 gnd 2 ohm\n"
    for k in range(bits):
        text += f"voltage B{k} +b{k} -gnd 1 V\nresistor A{k} b{k} n{k} 2 ohm\n"
        if k:
            text += f"resistor S{k} n{k - 1} n{k} 1 ohm\n"
    assert resistance(text, "n7,gnd") == pytest.approx(1, rel=1e-12)
    result = equiv.superpose(equiv.parse(text), "V:n7")
    at = result.quantities[0].frequencies[0]
    weights = [t.number.real for t in at.terms]
    assert weights == pytest.approx([2.0 ** (k - bits) for k in range(bits)], rel=1e-12)
    assert at.total.real == pytest.approx(0.99609375, rel=1e-12)


TWIN_T = """
frequency {w} rad/s
voltage E +i -gnd 1 V @ 0 deg
resistor R1 i p 10 kohm
resistor R2 p o 10 kohm
capacitor C3 p gnd 20 nF
capacitor C1 i q 10 nF
capacitor C2 q o 10 nF
resistor R3 q gnd 5 kohm
"""


def test_twin_t_null() -> None:
    """B22: no transmission at ω = 1/(RC), full transmission at DC (from memory)."""
    assert abs(total(TWIN_T.format(w=10000), "V:o")) < 1e-12
    direct = TWIN_T.replace("frequency {w} rad/s\n", "").replace(" @ 0 deg", "")
    result = equiv.superpose(equiv.parse(direct), "V:o")
    assert result.quantities[0].frequencies[0].total == pytest.approx(1, rel=1e-12)
    assert 10000 / (2 * math.pi) == pytest.approx(1591.549, abs=5e-4)


def test_bridged_t_notch() -> None:
    """B23: ω0 = 1/(C sqrt(R1 R2)), depth 2 R1/(2 R1 + R2) (from memory)."""
    r1, r2, c = 1000.0, 9000.0, 1e-8
    w = 1 / (c * math.sqrt(r1 * r2))
    text = """
    frequency {w!r} rad/s
    voltage E +i -gnd 1 V @ 0 deg
    capacitor C1 i m 10 nF
    capacitor C2 m o 10 nF
    resistor R1 m gnd 1 kohm
    resistor R2 i o 9 kohm
    """
    assert abs(total(text.format(w=w), "V:o")) == pytest.approx(0.181818182, abs=5e-10)
    assert w / (2 * math.pi) == pytest.approx(5305.164770, abs=5e-7)
    for nearby in (0.98 * w, 1.02 * w):
        assert abs(total(text.format(w=nearby), "V:o")) > 0.181818182


def test_delta_and_star_are_the_same_three_terminal_network() -> None:
    """B13: J. O. Bird, Electrical Circuit Theory and Technology, ch. 34, Examples 1 and 6."""
    delta = "frequency 50 Hz\nimpedance ZA b gnd {} ohm\nimpedance ZB a b {} ohm\nimpedance ZC a gnd {} ohm\n"
    star = "frequency 50 Hz\nimpedance Z1 a m {} ohm\nimpedance Z2 b m {} ohm\nimpedance Z3 gnd m {} ohm\n"

    def seen(text: str) -> list[complex]:
        z = equiv.port(equiv.parse(text), "a,gnd", "b,gnd").first.impedance
        assert z is not None
        return [complex(x) for x in z.ravel()]

    # Z1 = ZA·ZB/S is at the node that ZA and ZB share, and so on round
    for za, zb, zc, z1, z2, z3 in [
        ("20", "10+10j", "0-20j", "4+8j", "8-4j", "4-12j"),
        ("10+7.5j", "30-40j", "20+15j", "10", "20", "0+5j"),
    ]:
        assert seen(delta.format(za, zb, zc)) == pytest.approx(
            seen(star.format(z2, z1, z3)), rel=1e-12
        )
