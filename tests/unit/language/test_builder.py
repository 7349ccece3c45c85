"""Networks made in code are the ones that the language would have given."""

from decimal import Decimal
from fractions import Fraction

import pytest

from equiv.elements import KINDS
from equiv.elements.quantity import Quantity
from equiv.errors import NetworkFileError, UsageError
from equiv.language import Builder, parse, write
from equiv.network import NOWHERE


def test_a_network_with_every_kind() -> None:
    built = (
        Builder(title='A "title" # here')
        .note("first")
        .ground("earth")
        .frequency("50 Hz")
        .phasors("peak")
        .given("tail", "12 mohm")
        .given("n", Fraction(1, 3))
        .resistor("R1", "a", "b", "4.7 kohm", tolerance="1%", label='the "load"')
        .resistor("R2", "a", "b", "(2*tail)")
        .conductance("G1", "a", "b", Decimal("0.002"))
        .inductor("L1", "a", "b", 0.1)
        .inductor("L2", "a", "b", 2, tolerance=0.05)
        .capacitor("C1", "a", "b", "100n")
        .impedance("Z1", "a", "b", 3 - 4j)
        .admittance("Y1", "a", "b", "1-3j mS")
        .voltage("Vs", "a", "earth", "24 V @ 30 deg", group="mains")
        .current("Is", "a", "b", 2, at="50 Hz")
        .vcvs("E1", "c", "earth", 50, senses="V:a,b")
        .vccs("G2", "c", "earth", "40 mS", senses=Quantity("V", ("a",)))
        .ccvs("H1", "d", "earth", 10, senses="I:R1")
        .cccs("F1", "d", "earth", 10, senses="I:Vs")
        .opamp("U1", "a", "b", "o")
        .opamp("U2", "a", "b", "o2", gain=2e5, rout="75 ohm")
        .transformer("T1", "a", "b", "c", "d", "10:1")
        .transformer("T2", "a", "b", "c", "d", 5)
        .coupling("M1", "L1", "L2", k=0.98)
        .gyrator("N1", "a", "b", "c", "d", "1 kohm")
        .short("S1", "a", "b")
        .open("S2", "a", "b")
        .twoport("B1", "a", "b", "c", "d", z=(10, 2, 2, 8))
        .find("V:c", "the output")
        .find("I2:T1")
        .port("OUT", "c", "earth")
        .network()
    )
    written = parse(
        """
        title "A \\"title\\" # here"
        note first
        ground earth
        frequency 50 Hz
        phasors peak
        given tail = 12 mohm
        given n = (1/3)
        resistor R1 a b 4.7 kohm tolerance 1% label "the \\"load\\""
        resistor R2 a b (2*tail)
        conductance G1 a b 2 mS
        inductor L1 a b 100 mH
        inductor L2 a b 2 H tolerance 5%
        capacitor C1 a b 100 nF
        impedance Z1 a b 3-4j ohm
        admittance Y1 a b 1-3j mS
        voltage Vs +a -earth 24 V @ 30 deg group mains
        current Is a > b 2 A at 50 Hz
        vcvs E1 +c -earth mu 50 senses V:a,b
        vccs G2 c > earth g 40 mS senses V:a
        ccvs H1 +d -earth r 10 senses I:R1
        cccs F1 d > earth beta 10 senses I:Vs
        opamp U1 +a -b o
        opamp U2 +a -b o2 gain 200000 rout 75 ohm
        transformer T1 +a -b +c -d ratio 10:1
        transformer T2 +a -b +c -d ratio 5:1
        coupling M1 L1 L2 k 0.98
        gyrator N1 +a -b +c -d r 1 kohm
        short S1 a b
        open S2 a b
        twoport B1 +a -b +c -d z 10 2 2 8
        find V:c "the output"
        find I2:T1
        port OUT +c -earth
        """
    )
    assert built == written
    assert {e.kind for e in built.elements.values()} == set(KINDS) - {"nport"}
    assert built.origin == NOWHERE and built.places == ()
    assert parse(write(built)) == built


def test_every_kind_is_a_method_with_its_help() -> None:
    builder = Builder()
    assert set(KINDS) <= set(dir(builder))
    for kind in KINDS:
        assert getattr(builder, kind).__doc__ == KINDS[kind].__doc__
    with pytest.raises(AttributeError, match="no kind of element called resistr"):
        builder.resistr("R1", "a", "b", 5)


HOSTILE = [
    "a b", "a\nend", "a#b", 'a"b', "", "-a", "+a", "a\\", "a\0", "a\u202e", "(a)", "a=b", "a,b",
    "a:", None, 5,
]  # fmt: skip


@pytest.mark.parametrize("name", HOSTILE)
def test_names_cannot_smuggle_anything_in(name: object) -> None:
    for call in (
        lambda b: b.resistor(name, "a", "b", 5),
        lambda b: b.resistor("R1", name, "b", 5),
        lambda b: b.voltage("V1", "a", "b", 5, group=name),
        lambda b: b.ground(name),
        lambda b: b.given(name, 5),
        lambda b: b.port("P", name, "a"),
        lambda b: b.vcvs("E1", "a", "b", 5, senses=name),
    ):
        with pytest.raises(UsageError):
            call(Builder())


@pytest.mark.parametrize("text", ["V:a b", "V:a\nend", 'V:a "x"', "V:a#b", "V:", "V", 5, None])
def test_quantities_cannot_smuggle_anything_in(text: object) -> None:
    with pytest.raises(UsageError):
        Builder().find(text)


@pytest.mark.parametrize(
    "value",
    [
        "5 ohm\nvoltage V1 +a -b 1", "5 ohm # x", '5 ohm label "x"', "5 group g", "", " ", "5 ohm \\",
        float("inf"), float("nan"), complex("nan"), Decimal("NaN"), True, None, [5], {}, "(", "5 ohm 6",
        "5 ohm tolerance 1%", "5 senses V:a",
    ],
)  # fmt: skip
def test_values_cannot_smuggle_anything_in(value: object) -> None:
    with pytest.raises(UsageError):
        Builder().resistor("R1", "a", "b", value)
    with pytest.raises(UsageError):
        Builder().given("a", value)
    with pytest.raises(UsageError):
        Builder().opamp("U1", "a", "b", "c", gain=(value, value))


@pytest.mark.parametrize("text", ["a\nb", "a\x1b[31m", "a\0", None, 5, "\u2028"])
def test_texts_cannot_smuggle_anything_in(text: object) -> None:
    for call in (
        lambda: Builder(title=text) if text is not None else Builder().title(text),
        lambda: Builder().note(text),
        lambda: Builder().resistor("R1", "a", "b", 5, label=text),
        lambda: Builder().find("V:a", text if text is not None else 7),
    ):
        with pytest.raises(UsageError):
            call()


def test_odd_texts_are_kept() -> None:
    title = ' back\\slash "quotes" # no comment \\'
    assert Builder(title=title).network().title == title


def test_errors_are_those_of_the_language() -> None:
    builder = Builder().resistor("R1", "a", "b", "5 V").vcvs("E", "c", "gnd", 2)
    with pytest.raises(NetworkFileError) as caught:
        builder.network()
    assert [d.code for d in caught.value.diagnostics] == ["wrong-unit", "missing-word"]
    assert caught.value.diagnostics[0].span.text == "resistor R1 a b 5 V"
