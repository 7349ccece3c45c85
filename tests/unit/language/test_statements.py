"""The statements about the file, words and lines."""

from decimal import Decimal

import pytest

from equiv.elements.element import Frequency
from equiv.elements.quantity import Quantity
from equiv.errors import NetworkFileError, UsageError
from equiv.language import OPTIONS, STATEMENTS, parse
from equiv.network import DC, Find, Given, Port
from equiv.units import Formula, Rectangular

R = "resistor R1 a gnd 1 ohm\n"


def codes(text: str, **arguments: object) -> list[str]:
    """The codes of a text's errors, in their order."""
    with pytest.raises((NetworkFileError, UsageError)) as caught:
        parse(text, **arguments)
    return [d.code for d in caught.value.diagnostics]


def test_an_empty_text_is_an_empty_network() -> None:
    network = parse("\n  # nothing\n\n")
    assert not network.elements
    assert (network.title, network.ground, network.frequency) == ("", "gnd", DC)


def test_everything_about_the_file() -> None:
    network = parse(
        "title  Standby  supply\n"
        'note "quoted # and \\"so\\" on"\n'
        'note plain, with a "mark" # comment\n'
        "ground earth\nfrequency 314 rad/s\nphasors peak\n"
        "given Rs = 50 ohm\ngiven n = 5%\ngiven Z = 3-4j kohm\n"
        "voltage V1 +a -earth 5 V\nresistor R1 a earth Rs\n"
        'find V:a "the bus"\nfind I:R1\nport OUT +a -earth\n'
    )
    assert network.title == "Standby  supply"
    assert network.notes == ('quoted # and "so" on', 'plain, with a "mark"')
    assert network.ground == "earth"
    assert network.frequency == Frequency(Decimal(314), "rad/s")
    assert network.phasors == "peak"
    assert network.given == {
        "Rs": Given(Decimal(50), "ohm"),
        "n": Given(Decimal("0.05"), ""),
        "Z": Given(Rectangular(Decimal(3000), Decimal(-4000)), "ohm"),
    }
    assert network.finds == (
        Find(Quantity("V", ("a",)), "the bus"),
        Find(Quantity("I", ("R1",))),
    )
    assert network.ports == {"OUT": Port("OUT", "a", "earth")}


def test_continued_lines_crlf_and_byte_order_mark() -> None:
    text = (
        "\ufefftitle one \\\r\n  two\r\nresistor R1 a \\\r\n  b \\\r\n 4.7 kohm # c \\\r\n"
        "resistor R2 a gnd (1 + \\\r\n 2) # no\\\r\n"
    )
    network = parse(text)
    assert network.title == "one    two"
    assert network.elements["R1"].value == Decimal(4700)
    assert network.elements["R2"].value == Decimal(3)
    assert network.places == (("text", 3), ("text", 6))
    assert network.comments == {"R1": "c \\", "R2": "no\\"}


def test_a_mistake_on_a_continued_line_is_shown_there() -> None:
    with pytest.raises(NetworkFileError) as caught:
        parse("resistor R1 a b \\\n   \\\n   5 V\n")
    (diagnostic,) = caught.value.diagnostics
    assert diagnostic.span[:4] == ("text", 3, 4, 3)
    assert diagnostic.span.text == "   5 V"


def test_names_of_any_script() -> None:
    network = parse("resistor Ω1 nœud क्षि 5\nresistor 二 क्षि gnd 1\nfind V:nœud,क्षि\n")
    assert list(network.elements) == ["Ω1", "二"]
    # An accent of its own is the same as the letter that has it.
    assert parse("resistor R e\u0301 gnd 1\nfind V:\u00e9").finds


def test_comments_begin_after_a_blank_only() -> None:
    assert codes("resistor R#1 a b 5") == ["bad-name"]
    assert parse("resistor R1 a b 5 #x").comments == {"R1": "x"}


def test_givens_before_their_definition() -> None:
    network = parse("resistor R1 a gnd (2*b)\ngiven b = (a + 1 ohm)\ngiven a = 4 ohm")
    assert network.elements["R1"].value == Formula("(2*b)", Decimal(10))
    assert network.given["b"] == Given(Formula("(a + 1 ohm)", Decimal(5)), "ohm")
    assert list(network.given) == ["b", "a"]


def test_given_values_are_replaced() -> None:
    text = "given a = 4 ohm\ngiven b = (2*a)\ngiven n = 3\nresistor R1 x gnd b\n"
    network = parse(text, given={"a": "5"})
    assert network.given["a"] == Given(Decimal(5), "ohm")
    assert network.elements["R1"].value == Formula("b", Decimal(10))
    assert parse(text, given={"a": "5 kohm"}).given["a"].value == Decimal(5000)
    assert parse(text, given={"a": "(n*2)"}).given["a"].value == Formula("(n*2)", Decimal(6))
    assert parse(text, given={"b": "7 ohm"}).elements["R1"].value == Formula("b", Decimal(7))
    assert codes(text, given={"a": "5 V"}) == ["wrong-unit"]
    assert codes(text, given={"a": "5 ohm 6"}) == ["extra-word"]
    assert codes(text, given={"a": "(b)"}) == ["circular-parameters"]
    assert codes(text, given={"A": "5"}) == ["unknown-given"]
    with pytest.raises(UsageError):
        parse(text, given={"a": "x"})


def test_frequency_is_replaced() -> None:
    text = "frequency 50 Hz\nvoltage V1 +a -gnd 1 V\ncapacitor C1 a gnd 1 uF\n"
    assert parse(text, frequency="60 Hz").frequency == Frequency(Decimal(60))
    assert parse(text, frequency="1 krad/s").frequency == Frequency(Decimal(1000), "rad/s")
    assert parse(R, frequency="60").frequency == Frequency(Decimal(60))
    assert codes(text, frequency="60 V") == ["wrong-unit"]
    fixed = text + "impedance Z1 a gnd 3+4j ohm\n"
    assert parse(fixed, frequency="50 Hz").frequency == Frequency(Decimal(50))
    with pytest.raises(UsageError) as caught:
        parse(fixed, frequency="60 Hz")
    assert [d.code for d in caught.value.diagnostics] == ["fixed-frequency"]
    # A file that names no frequency takes the one that is given.
    assert parse("impedance Z1 a gnd 3+4j ohm", frequency="60 Hz").elements


def test_a_frequency_by_a_parameter() -> None:
    text = "given f0 = 50 Hz\nfrequency f0\nvoltage V1 +a -gnd 1 V at (3*f0) Hz\n" + R
    network = parse(text)
    assert network.frequency == Frequency(Decimal(50))
    assert network.elements["V1"].options.at == Frequency(Decimal(150))


def test_options() -> None:
    network = parse(
        'voltage V1 +a -gnd 5 V tolerance ±1% group g label "L" at 0 Hz\n'
        "voltage V2 +b -gnd 5 V tolerance +-0.5%\nvoltage V3 +c -gnd 5 V tolerance 2 %".replace(
            "2 %", "2%"
        )
    )
    v1, v2, v3 = (e.options for e in network.elements.values())
    assert v1 == ("L", "g", Decimal("0.01"), Frequency(Decimal(0)))
    assert (v2.tolerance, v3.tolerance) == (Decimal("0.005"), Decimal("0.02"))


def test_every_error_is_told_in_the_order_of_the_lines() -> None:
    assert codes("find V:x\nresistor\nnonsense\ngiven a = b\n" + R) == [
        "unknown-name", "missing-word", "unknown-keyword", "unknown-parameter",
    ]  # fmt: skip


def test_what_a_broken_statement_may_define_is_not_missed() -> None:
    assert codes("resistor R3 a bus 5 V\nfind I:R3\nfind V:bus\nport P +bus -gnd\n") == [
        "wrong-unit"
    ]
    assert codes("use nothing X (a)\nfind V:X.out\nfind I:X.R1") == ["unknown-block"]
    assert codes("given a = 5 ohn\nresistor R1 n gnd a\nfind I:R1") == [
        "extra-word", "unknown-parameter",
    ]  # fmt: skip


def test_help_is_one_line_each() -> None:
    assert {"title", "note", "ground", "frequency", "phasors", "given", "find", "port"} <= set(
        STATEMENTS
    )
    for name, text in {**STATEMENTS, **OPTIONS}.items():
        assert text.startswith(name) and "\n" not in text and text.endswith((".", ")."))


def test_sources_at_the_file_s_own_frequency_go_with_impedances() -> None:
    text = "frequency 50 Hz\nimpedance Z1 a gnd 3+4j ohm\nvoltage V1 +a -gnd 1 V at "
    assert parse(f"{text} 50 Hz").elements
    assert parse(f"{text} (100*pi) rad/s").elements
    assert codes(f"{text} 60 Hz") == ["fixed-frequency"]


def test_a_phasor_in_a_file_without_frequency_needs_one_of_its_own() -> None:
    assert parse("voltage V1 +a -gnd 1 V @ 30 deg at 50 Hz").elements
    assert codes("voltage V1 +a -gnd 1 V @ 30 deg") == ["complex-at-dc"]
    assert codes("vcvs E1 +a -gnd mu 1+2j senses V:a") == ["complex-at-dc"]
    assert parse("impedance Z1 a gnd 5+0j ohm").elements
