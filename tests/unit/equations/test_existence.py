"""When there is no unique solution: the culprits in words, and what is unique all the same."""

import random

import numpy as np
import pytest

import equiv
from equiv.equations.solution import Solver
from equiv.network import DC, Network


def reasons(text: str) -> tuple[str, ...]:
    return solver(text).reasons


def solver(text: str) -> Solver:
    network = equiv.parse(text)
    return Solver(network, network.frequencies[0])


@pytest.mark.parametrize(
    ("text", "words"),
    [
        (
            "voltage V1 +a -gnd 5 V\nvoltage V2 +a -gnd 3 V\nresistor R a gnd 1 ohm\n",
            "V1 and V2 form a loop of voltage sources whose voltages disagree by 2 V",
        ),
        (
            "voltage V1 +a -gnd 5 V\nshort S a gnd\n",
            "V1 and S form a loop of voltage sources and shorts whose voltages disagree by 5 V",
        ),
        (
            "voltage V +a -gnd 5 V\nresistor R a b 1 ohm\nshort S1 b gnd\nshort S2 b gnd\n",
            "S1 and S2 form a loop of shorts: how the current divides between them is not determined",
        ),
        (
            "current I1 gnd > a 1 A\ncurrent I2 a > gnd 3 A\nresistor R b gnd 1 ohm\n"
            "voltage V +b -gnd 1 V\n",
            "I1 and I2 form a cut-set of current sources around node a whose currents disagree by 2 A",
        ),
        (
            "voltage V +a -gnd 1 V\nresistor R b c 1 ohm\nresistor Q a gnd 1 ohm\n",
            "nodes b and c: nothing ties this part to gnd",
        ),
        (
            "voltage V +a -gnd 1 V\nopen O a b\nresistor Q a gnd 1 ohm\n",
            "node b: nothing ties this part to gnd (only O, which carries no current)",
        ),
        (
            "voltage V +a -gnd 1 V\ncapacitor C a b 1 uF\nresistor Q a gnd 1 ohm\n",
            "node b: nothing ties this part to gnd (only C, which carries no current)",
        ),
        (
            "frequency 1 rad/s\nvoltage V +a -gnd 1 V @ 0 deg\nresistor R a b 1 ohm\n"
            "inductor L c gnd 1 H\ncapacitor C c gnd 1 F\nopen O b c\nresistor Q b gnd 1 ohm\n",
            "L and C are in resonance without loss at this frequency",
        ),
    ],
)
def test_culprits_are_named(text: str, words: str) -> None:
    assert words in reasons(text)


def test_a_loop_through_several_nodes() -> None:
    text = (
        "voltage V1 +a -gnd 5 V\nvoltage V2 +b -a 1 V\nvoltage V3 +b -gnd 9 V\n"
        "resistor R b gnd 1 ohm\n"
    )
    assert reasons(text) == (
        "V1, V2 and V3 form a loop of voltage sources whose voltages disagree by 3 V",
    )


def test_the_singular_gain_is_named() -> None:
    # v = Is·R/(1 - g·R): no solution at g = 1/R
    text = "current Is gnd > a 1 A\nresistor R a gnd 4 ohm\nvccs G gnd > a g {} S senses V:a\n"
    assert solver(text.format("0.1")).reasons == ()
    (words,) = reasons(text.format("0.25"))
    assert words.startswith("the gain of G (g = 250 mS) makes the network singular")


def test_planted_loops_are_named_in_large_random_networks() -> None:
    draw = random.Random(5)
    for _ in range(8):
        count = draw.randint(20, 60)
        lines = [
            f"resistor R{i} n{i} n{draw.randrange(i) if i else 'x'} {draw.uniform(1, 9):.3f} ohm"
            for i in range(count)
        ]
        lines.append("resistor Rg nx gnd 1 ohm")
        a, b, c = draw.sample(range(count), 3)
        lines += [f"voltage P +n{a} -n{b} 1 V", f"voltage Q +n{b} -n{c} 1 V",
                  f"voltage S +n{a} -n{c} 5 V"]  # fmt: skip
        assert reasons("\n".join(lines)) == (
            "P, Q and S form a loop of voltage sources whose voltages disagree by 3 V",
        )


def test_what_is_unique_is_given_beside_a_floating_part() -> None:
    text = (
        "voltage V +a -gnd 10 V\nresistor R1 a gnd 2 ohm\ntransformer T +a -gnd +s -t ratio 2:1\n"
        "resistor Load s t 5 ohm\n"
    )
    network = equiv.parse(text)
    result = equiv.superpose(network, "I:Load", "V:s,t")
    assert [q.frequencies[0].total for q in result.quantities] == pytest.approx([1, 5])
    assert result.exit_status == 0
    assert "not-unique" in {c.code for c in result.cautions}
    with pytest.raises(equiv.NoUniqueSolutionError, match="nodes s and t"):
        equiv.superpose(network, "V:s")
    some = equiv.superpose(network, "V:s", "I:Load")
    assert some.exit_status == 4 and [str(q.quantity) for q in some.quantities] == ["I:Load"]


def test_solve_gives_what_is_unique_and_says_so() -> None:
    text = "voltage V1 +a -gnd 5 V\nvoltage V2 +a -gnd 5 V\nresistor R a gnd 5 ohm\n"
    result = equiv.solve(equiv.parse(text))
    states = {e.name: e for e in result.first.elements}
    assert states["R"].current == pytest.approx(1)
    assert states["V1"].current is None and states["V1"].power is None
    assert states["V1"].voltage == pytest.approx(5)
    assert result.exit_status == 4


def test_large_singular_networks_are_refused_in_words() -> None:
    lines = ["voltage V1 +n0 -gnd 1 V", "voltage V2 +n0 -gnd 2 V"]
    for k in range(1500):
        lines += [f"resistor S{k} n{k} n{k + 1} 1 ohm", f"resistor P{k} n{k + 1} gnd 1 ohm"]
    with pytest.raises(equiv.NoUniqueSolutionError, match="V1 and V2 form a loop"):
        equiv.superpose(equiv.parse("\n".join(lines)), "V:n3")


def stiff(draw: random.Random, count: int) -> tuple[Network, list[float]]:
    """A chain whose conductances lie between 1e-12 and 1e9 S, and its exact node voltages."""
    from fractions import Fraction

    series = [Fraction(10) ** draw.choice([-9, -3, 0, 6, 12]) for _ in range(count)]
    lines = ["voltage V +n0 -gnd 1 V"]
    lines += [f"resistor R{k} n{k} n{k + 1} {float(r)!r} ohm" for k, r in enumerate(series)]
    lines.append(f"resistor Rend n{count} gnd 1e12 ohm")
    total = sum(series) + Fraction(10) ** 12
    left, volts = total, []
    for r in series:
        left -= r
        volts.append(float(left / total))
    return equiv.parse("\n".join(lines)), volts


def test_stiff_networks_keep_their_digits() -> None:
    draw = random.Random(11)
    taken_over = 0
    for count in (4, 9, 16, 220):
        network, volts = stiff(draw, count)
        solved = Solver(network, DC)
        taken_over += solved.took_over
        state = solved.state()
        assert solved.degenerate is None
        numbers = [solved.layout.node_number[f"n{k + 1}"] for k in range(count)]
        assert np.allclose(state.x[numbers], volts, rtol=1e-9, atol=0)
    assert taken_over


def test_a_current_that_the_nodal_form_loses_is_given_all_the_same() -> None:
    # 1 V across 1e-9 ohm and two branches of 1e12 ohm: the nodal form finds 1e9 * (1 - 1) A
    text = """
    voltage V +a -gnd 1 V
    resistor R1 a b 1e-9 ohm
    resistor R2 b gnd 1e12 ohm
    resistor R3 b c 1e12 ohm
    resistor R4 c gnd 1e-9 ohm
    """
    network = equiv.parse(text)
    result = equiv.superpose(network, "I:R1", "V:c")
    assert [q.frequencies[0].total.real for q in result.quantities] == pytest.approx(
        [2e-12, 1e-21], rel=1e-9
    )
    assert result.exit_status == 0
    assert "digits-lost" in {c.code for c in result.cautions}
    (state,) = [e for e in equiv.solve(network).first.elements if e.name == "R1"]
    assert state.current is not None and state.current.real == pytest.approx(2e-12, rel=1e-9)


def test_nothing_is_added_to_make_a_network_solvable() -> None:
    text = "current I gnd > a 1 uA\nresistor R b gnd 1 ohm\nvoltage V +b -gnd 1 V\n"
    with pytest.raises(equiv.NoUniqueSolutionError, match="I alone forms a cut-set") as caught:
        equiv.solve(equiv.parse(text))
    assert "disagree by 1 µA" in str(caught.value)
