"""Blocks: local names, parameters, nesting, limits."""

from decimal import Decimal

import pytest

from equiv.elements.quantity import Quantity
from equiv.errors import NetworkFileError
from equiv.language import parse
from equiv.units import Formula

STAGE = """
block stage (in out) r=2*1 gm
  resistor Rin in gnd r
  resistor Ro out x 1 kohm
  vccs G out > gnd g gm senses V:in
  cccs F out > gnd beta 2 senses I:Rin
  short S x gnd
end
""".replace("r=2*1", "r=(2*R0)")


def codes(text: str) -> list[str]:
    """The codes of a text's errors."""
    with pytest.raises(NetworkFileError) as caught:
        parse(text)
    return [d.code for d in caught.value.diagnostics]


def test_names_nodes_and_parameters_of_instances() -> None:
    network = parse(
        f"use stage A (a b) gm=40 mS\ngiven R0 = 5 ohm\n{STAGE}"
        "use stage B (b c) r=7 kohm gm=(2*R0/R0) find V:A.x".replace(" find", "\nfind")
    )
    assert list(network.elements) == [
        f"{i}.{e}" for i in "AB" for e in ("Rin", "Ro", "G", "F", "S")
    ]
    a, b = network.elements["A.Rin"], network.elements["B.Rin"]
    assert (a.nodes, a.value) == (("a", "gnd"), Decimal(10))
    assert (b.nodes, b.value) == (("b", "gnd"), Decimal(7000))
    assert network.elements["B.Ro"].nodes == ("c", "B.x")
    assert network.elements["A.G"].senses == Quantity("V", ("a",))
    assert network.elements["B.F"].senses == Quantity("I", ("B.Rin",))
    assert network.elements["B.G"].value == Decimal(2)
    assert network.places[5] == ("text", 5)


def test_elements_stand_where_the_instance_stands() -> None:
    network = parse(
        "resistor R1 a gnd 1\nuse b X (a)\nresistor R2 a gnd 1\n"
        "block b (p)\nresistor R p gnd 1\nend\n"
    )
    assert list(network.elements) == ["R1", "X.R", "R2"]


def test_blocks_in_blocks_see_the_parameters_around_them() -> None:
    network = parse(
        "block outer (p) r\n  given half = (r/2)\n  block inner (q) n=3\n"
        "    resistor R q gnd (half*n)\n  end\n  use inner X (p)\n  use inner Y (m) n=4\nend\n"
        "use outer A (a) r=10 ohm\nuse outer B (a) r=20 ohm\n"
    )
    values = {name: e.value for name, e in network.elements.items()}
    assert values == {"A.X.R": 15, "A.Y.R": 20, "B.X.R": 30, "B.Y.R": 40}
    assert network.elements["A.Y.R"].nodes == ("A.m", "gnd")


def test_a_block_in_a_block_cannot_be_used_outside() -> None:
    text = "block outer (p)\nblock inner (q)\nend\nend\nuse inner X (a)\n"
    assert codes(text) == ["unknown-block"]


def test_a_parameter_of_the_file_keeps_its_name_inside() -> None:
    network = parse("given R0 = 5 ohm\nblock b (p)\nresistor R p gnd (2*R0)\nend\nuse b X (a)")
    assert network.elements["X.R"].value == Formula("(2*R0)", Decimal(10))
    hidden = parse("given r = 5\nblock b (p) r=6\nresistor R p gnd r\nend\nuse b X (a)")
    assert hidden.elements["X.R"].value == Decimal(6)


def test_another_ground() -> None:
    network = parse("ground earth\nblock b (p)\nresistor R p earth 1\nend\nuse b X (a)")
    assert network.elements["X.R"].nodes == ("a", "earth")


def test_a_voltage_of_a_local_element_is_sensed() -> None:
    network = parse(
        "block b (p)\nresistor R p gnd 1\nvcvs E +q -gnd mu 2 senses V:R\n"
        "vcvs F +s -gnd mu 2 senses V:q,p\nend\nuse b X (a)"
    )
    assert network.elements["X.E"].senses == Quantity("V", ("X.R",))
    assert network.elements["X.F"].senses == Quantity("V", ("X.q", "a"))


def test_couplings_inside() -> None:
    network = parse(
        "block b (p q)\ninductor L1 p gnd 1\ninductor L2 q gnd 1\ncoupling M L1 L2 k 1\nend\n"
        "use b X (a b)"
    )
    assert network.elements["X.M"].links == ("X.L1", "X.L2")


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("block a (p)\nuse a X (p)\nend\nuse a Y (n)", ["circular-block"]),
        ("block a (p)\nuse a X (p)\nend", ["circular-block"]),
        ("block a (p)\nuse b X (p)\nend", ["unknown-block"]),
        ("block a (p)\nresistor R p gnd 5 V\nend", ["wrong-unit"]),
        ("block a (p)\nresistor R p gnd r\nend\nuse a X (n)\nuse a Y (n)", ["unknown-parameter"]),
        ("block a (p) r\nresistor R p gnd r\nend\nuse a X (n) r=5 V", ["wrong-unit"]),
        ("block a (p) r=(q) q=(r)\nend\nuse a X (n)", ["circular-parameters"]),
        ("block a (p) r r=5\nend", ["given-twice"]),
        ("block a (p) r\ngiven r = 5\nend", ["given-twice"]),
        ("block a (p)\nend\nuse a X (n) r=5", ["unknown-parameter"]),
        ("block a (p)\nend\nuse a X (n) r=5 r=6", ["given-twice"]),
        ("block a (p)\nend\nuse a X (n) r 5", ["missing-equals"]),
        ("block a (p)\nend\nuse a X n", ["missing-parentheses"]),
        ("block a (p)\nnonsense\nend\nuse a X (n)", ["unknown-keyword"]),
        ("block a (p)\nend\nend", ["end-without-block"]),
        ("block a (p) 5\nend", ["bad-name"]),
        ("block a (p,q)\nend", ["bad-name"]),
    ],
)
def test_mistakes(text: str, expected: list[str]) -> None:
    assert codes(text) == expected


def test_a_block_may_be_empty_and_unused() -> None:
    assert not parse("block a ()\nend\nuse a X ()\n").elements


def test_many_elements_are_refused_before_they_are_made() -> None:
    doubled = "".join(
        f"block b{n} (p)\nuse b{n + 1} X (p)\nuse b{n + 1} Y (p)\nend\n" for n in range(30)
    )
    text = f"{doubled}block b30 (p)\nresistor R p gnd 1\nend\nuse b0 X (a)"
    assert codes(text) == ["too-many-elements"]
