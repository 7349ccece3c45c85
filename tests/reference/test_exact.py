"""Exact values of published and classical networks, digit for digit; sources beside each."""

import itertools
import math
import re
import tomllib
from fractions import Fraction
from pathlib import Path
from typing import Any

import pytest

import equiv
from equiv.network import Network


def fraction(value: Any) -> Fraction:
    assert isinstance(value.exact, str)
    return Fraction(value.exact)


def terms(network: Network, quantity: str) -> dict[str, Fraction]:
    result = equiv.superpose(network, quantity, exact=True)
    assert result.exit_status == 0
    at = result.quantities[0].frequencies[0]
    assert at.difference == 0 and at.worst_term == 0
    return {**{t.source: fraction(t.contribution) for t in at.terms}, "sum": fraction(at.total)}


def resistance(text: str, pair: str) -> Fraction:
    result = equiv.port(equiv.parse(text), pair, exact=True)
    assert all(check.value == 0 for check in result.checks)
    assert result.first.impedance is not None
    return fraction(result.first.impedance[0, 0])


def test_contributions_of_a_ccvs_network() -> None:
    """Alexander and Sadiku, Fundamentals of Electric Circuits, Example 4.4: 52/17, -60/17, -8/17 A."""
    network = equiv.parse(
        "current I4 gnd > t 4.0 A\nresistor R3 t p 3.0 ohm\nresistor R5 p gnd 5.0 ohm\n"
        "resistor R2 t r 2.0 ohm\nresistor R1 p x 1.0 ohm\n"
        "ccvs Rm +r -x r -5.0 ohm senses I:R5\nresistor R4 r w 4.0 ohm\n"
        "voltage V20 +w -gnd -20.0 V\n"
    )
    found = terms(network, "I:R5")
    assert found == {"I4": Fraction(52, 17), "V20": Fraction(-60, 17), "sum": Fraction(-8, 17)}


@pytest.mark.parametrize("bits", [4, 8, 12])
def test_weights_of_an_r_2r_ladder(bits: int) -> None:
    """Each bit of an R-2R ladder, open at its end, gives Vref/2^(bits - k) (common practice)."""
    lines = ["resistor Rt n0 gnd 20 kohm"]
    for k in range(bits):
        lines += [f"voltage B{k} +b{k} -gnd 1 V", f"resistor S{k} b{k} n{k} 20 kohm"]
        if k:
            lines.append(f"resistor R{k} n{k - 1} n{k} 10 kohm")
    found = terms(equiv.parse("\n".join(lines) + "\n"), f"V:n{bits - 1}")
    assert found["sum"] == 1 - Fraction(1, 2**bits)
    for k in range(bits):
        assert found[f"B{k}"] == Fraction(1, 2 ** (bits - k))


@pytest.mark.parametrize("sections", [1, 2, 5, 30])
def test_ladder_of_unit_resistors_is_a_ratio_of_fibonacci_numbers(sections: int) -> None:
    """n sections of series 1 and shunt 1 ohm: F(2n + 1)/F(2n) ohm (classical, from memory)."""
    text = "".join(
        f"resistor S{i} n{i} n{i + 1} 1 ohm\nresistor P{i} n{i + 1} gnd 1 ohm\n"
        for i in range(sections)
    )
    numbers = [0, 1]
    for _ in range(2 * sections):
        numbers.append(numbers[-1] + numbers[-2])
    assert resistance(text, "n0,gnd") == Fraction(numbers[-1], numbers[-2])


def test_cube_of_unit_resistors() -> None:
    """Edge 7/12, face diagonal 3/4, body diagonal 5/6 ohm (classical, from memory)."""
    edges = [(a, b) for a, b in itertools.combinations(range(8), 2) if (a ^ b) in (1, 2, 4)]
    text = "".join(
        f"resistor R{i} {'gnd' if not a else f'n{a}'} n{b} 1 ohm\n"
        for i, (a, b) in enumerate(edges)
    )
    found = [resistance(text, f"n{far},gnd") for far in (1, 3, 7)]
    assert found == [Fraction(7, 12), Fraction(3, 4), Fraction(5, 6)]


@pytest.mark.parametrize("d", ["1e-3", "1e-12", "-0.25"])
def test_bridge_with_one_deviating_arm(d: str) -> None:
    """A quarter bridge gives V·d/(4 + 2·d) (common practice), however small d is."""
    network = equiv.parse(
        f"given d = {d}\nvoltage V +s -gnd 5 V\nresistor A s p 350 ohm\nresistor B p gnd 350 ohm\n"
        "resistor C s q 350 ohm\nresistor D q gnd (350 ohm * (1 + d))\n"
    )
    size = Fraction(d)
    assert terms(network, "V:q,p")["sum"] == 5 * size / (4 + 2 * size)


def test_a_balanced_bridge_gives_nothing_at_all() -> None:
    network = equiv.parse(
        "voltage V +s -gnd 5 V\nresistor A s p 0.1 ohm\nresistor B p gnd 0.3 ohm\n"
        "resistor C s q 0.7 ohm\nresistor D q gnd 2.1 ohm\nresistor E p q 3 ohm\n"
    )
    assert terms(network, "I:E")["sum"] == 0


def test_bridged_t_null_at_its_frequency() -> None:
    """A twin-T of R, R, R/2 and C, C, 2C passes nothing at ω = 1/(R·C) (classical, from memory)."""
    network = equiv.parse(
        "frequency 5000 rad/s\nvoltage V +a -gnd 1 V\n"
        "resistor R1 a p 1 kohm\nresistor R2 p b 1 kohm\ncapacitor C3 p gnd 400 nF\n"
        "capacitor C1 a q 200 nF\ncapacitor C2 q b 200 nF\nresistor R3 q gnd 500 ohm\n"
        "resistor Rload b gnd 12 kohm\n"
    )
    assert terms(network, "V:b")["sum"] == 0


def test_complex_power_of_a_series_circuit() -> None:
    """V = 10, Z = 3 + j4: I = 6/5 - j8/5 A and S = 12 + j16 VA (closed form)."""
    network = equiv.parse(
        "frequency 1000 rad/s\nvoltage V +a -gnd 10 V\nresistor R a b 3 ohm\ninductor L b gnd 4 mH\n"
    )
    state = equiv.solve(network, exact=True).first
    of = {e.name: e for e in state.elements}
    assert of["R"].current.exact == ["6/5", "-8/5"]
    assert (of["R"].power.exact, of["L"].power.exact) == ("12", ["0", "16"])
    assert state.balance == 0


def test_samples_at_dc_are_exact_and_close() -> None:
    """Every sample whose values are rational has a closure that is literally zero."""
    done = 0
    for path in sorted((Path(__file__).resolve().parents[2] / "samples").glob("*.equiv")):
        network = equiv.load(path)
        if not isinstance(network, equiv.Network):  # a three-phase system
            continue
        if not all(f.omega == 0 for f in network.frequencies) or not network.finds:
            continue
        result = equiv.superpose(network, exact=True)
        assert all(c.value == 0 and c.limit == 0 for c in result.checks), path
        near = equiv.superpose(network)
        for one, other in zip(result.quantities, near.quantities, strict=True):
            value, float_ = one.frequencies[0].total, other.frequencies[0].total
            assert math.isclose(complex(value).real, float_.real, rel_tol=1e-9, abs_tol=1e-12)
        done += 1
    assert done >= 4


PUBLISHED = tomllib.loads(Path(__file__).with_name("published.toml").read_text(encoding="utf-8"))[
    "case"
]
RATIONAL = [case for case in PUBLISHED if not re.search(r"frequency .*Hz", case["network"])]


@pytest.mark.parametrize("case", RATIONAL, ids=[case["id"] for case in RATIONAL])
def test_published_networks_are_exact_to_their_last_printed_digit(case: dict[str, Any]) -> None:
    network = equiv.parse(case["network"])
    for expect in case["expect"]:
        found = printed(network, expect)
        text = expect["value"]
        limit = max(half_last_digit(text), expect.get("rtol", 0) * abs(float(text)))
        assert abs(found - float(text)) <= limit


def printed(network: Network, expect: dict[str, Any]) -> float:
    """The exact value of what was printed; every check of the result is literally nothing."""
    what, target = expect["what"], expect["target"]
    if what in ("total", "magnitude", "term", "power"):
        result = equiv.superpose(network, target, exact=True)
        at = result.quantities[0].frequencies[0]
        value = at.total
        if what == "term":
            value = next(t.number for t in at.terms if t.source == expect["source"])
    else:
        result = equiv.port(network, target, exact=True)
        e = result.first
        value = {
            "impedance": lambda: e.impedance[0, 0],
            "voltage": lambda: e.open_voltage[0],
            "current": lambda: e.short_current[0],
        }[what]()
    assert result.checks and all(c.value == 0 and c.limit == 0 for c in result.checks)
    number = float(fraction(value))
    return abs(number) if what == "magnitude" else number


def half_last_digit(text: str) -> float:
    """Half of the last digit of a number as it was printed."""
    mantissa, _, exponent = text.partition("e")
    decimals = len(mantissa.partition(".")[2])
    return 0.5 * 10.0 ** (int(exponent or 0) - decimals) * (1 + 1e-9)
