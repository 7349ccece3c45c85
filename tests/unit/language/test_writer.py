"""The canonical text."""

from dataclasses import replace
from decimal import Decimal
from fractions import Fraction

import pytest

from equiv.elements import KINDS
from equiv.elements.element import Options
from equiv.elements.quantity import Quantity
from equiv.errors import UsageError
from equiv.language import parse, value, write
from equiv.network import Find, Network, Port
from equiv.units import Formula, Rectangular

TEXT = """\
title  Standby supply
note   cable data from the installation record
frequency 50 Hz

given  tail = 12 mohm

voltage   Vmain   +m    -gnd   240 V @ 30 deg  group standby  tolerance 1%
resistor  Rmain    m    bus    38 mohm
ccvs      Droop   +g2   -m     r 20 mohm  senses I:Rmain
resistor  Rtie     g2   bus    (4*tail)  # to be measured
resistor  Rcable   bus  pump   tail  label "the cable"
vccs      G1       bus  > gnd  g 2 mS  senses V:pump
opamp     U1      +bus  -pump  out  gain 200000
short     Fault    pump gnd

find  I:Fault  "fault current"
port  PANEL  +pump -gnd
"""


def test_canonical_text_is_kept_to_the_letter() -> None:
    assert write(parse(TEXT)) == TEXT


def test_a_switched_off_sub_circuit_reads_back() -> None:
    network = parse(TEXT + "voltage Vgen +g2 -gnd 5 V\n").isolate("Vgen")
    assert parse(write(network)) == network
    assert "short     Vmain" in write(network)


@pytest.mark.parametrize(
    "text",
    [
        "given L = 1 mH\ngiven C = 1 uF\ngiven w0 = (1/sqrt(L*C)) rad/s\nresistor R1 a b (w0*L)\n",
        "given a = 3 ohm\ngiven square = (2*a*a)\nresistor R1 x y (square/a)\n",
        "given odd = (2 V * 3 V)\nresistor R1 x y (odd/6 V^2)\n".replace("/6 V^2", "/(6 V)/1 A"),
        "frequency 50 Hz\ngiven E = 120 V @ 30 deg\nvoltage V1 +a -b E\n",
        "given turns = 20:3\ntransformer T1 +a -b +c -d ratio turns\n",
        "frequency (100/3) Hz\nvoltage V1 +a -b 1 V at (1/3) rad/s\n",
        "given r = (1/3)\nresistor R1 a b (r*1 kohm)\nresistor R2 a b 1e-20 ohm\n",
        "title  ' odd # title\nresistor R1 a b 1e30\n",
        'title "# odd"\nnote "x \\\\"\nresistor R1 a b -0.0000000123 mohm\n',
        "resistor R1 a b (1/7) ohm\nresistor R2 a b (22.5/7.25)\n",
    ],
)
def test_reads_back(text: str) -> None:
    network = parse(text)
    assert parse(write(network)) == network
    assert write(parse(write(network))) == write(network)


def test_comments_are_one_line_and_cannot_escape() -> None:
    network = replace(parse("resistor R1 a b 1"), comments={"R1": "two\nlines \x1b[31m # and \\"})
    assert write(network) == "resistor  R1   a b  1 ohm  # two lines [31m # and \\\n"
    assert write(parse(write(network))) == write(network)


def made(name: str = "R1", node: str = "a", value: object = Decimal(1), **more: object) -> Network:
    """A network made in code."""
    options = more.pop("options", Options())
    element = KINDS["resistor"](name, (node, "gnd"), value, options=options)
    return replace(Network({name: element}), **more)


@pytest.mark.parametrize(
    "network",
    [
        made(name="R 1"),
        made(name="R1\nend"),
        made(node="a#"),
        made(node=""),
        made(value=Decimal("inf")),
        made(value=Rectangular(Decimal("nan"), Decimal(1))),
        made(value=Formula("(1)\nend", Decimal(1))),
        made(value=Formula("1 # x", Decimal(1))),
        made(title="\n"),
        made(title="a\tb"),
        made(notes=("\x00",)),
        made(ground="g d"),
        made(options=Options(label="a\nb")),
        made(options=Options(group="a b")),
        made(finds=(Find(Quantity("V", ("a b",))),)),
        made(ports={"P": Port("P", "a", "-")}),
    ],
)
def test_what_cannot_be_written_is_refused(network: Network) -> None:
    with pytest.raises(UsageError) as caught:
        write(network)
    assert [d.code for d in caught.value.diagnostics] == ["cannot-write"]


def test_values_of_arguments() -> None:
    assert value("4.7 kohm", "ohm") == Decimal(4700)
    assert value("(1/3)", "ohm") == Fraction(1, 3)
    assert value("R47", "ohm") == Decimal("0.47")
    assert value("3-4j", "ohm") == Rectangular(Decimal(3), Decimal(-4))
    for text in ("5 V", "", "5 ohm 6", "x", "(x)", '"', "3-4j ohm @"):
        with pytest.raises(UsageError):
            value(text, "ohm")
    with pytest.raises(UsageError):
        value("3-4j", "ohm", may_be_complex=False)
