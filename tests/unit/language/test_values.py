"""Every way to write a value comes to the exact number that it stands for."""

from decimal import Decimal, localcontext
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st
from unit.language.generated import seeded

from equiv.errors import NetworkFileError
from equiv.language import parse
from equiv.units import SYMBOL, Formula, Phasor, Rectangular, write_number, write_value

AC = "frequency 50 Hz\n"


def value(text: str, kind: str = "resistor", ends: str = "a b", before: str = ""):
    """The value of an element that is written with a text."""
    return parse(f"{before}\n{kind} X1 {ends} {text}\n").elements["X1"].value


def code(text: str, kind: str = "resistor", ends: str = "a b", before: str = "") -> str:
    """The code of the one error that a value gives."""
    with pytest.raises(NetworkFileError) as caught:
        value(text, kind, ends, before)
    (diagnostic,) = caught.value.diagnostics
    return diagnostic.code


@pytest.mark.parametrize(
    ("text", "ohms"),
    [
        ("4.7 kohm", "4700"),
        ("4.7kohm", "4700"),
        ("4.7kΩ", "4700"),
        ("4.7 k\u2126", "4700"),
        ("4700", "4700"),
        ("1e3 ohm", "1000"),
        ("1E3", "1000"),
        (".5 ohm", "0.5"),
        ("5. ohm", "5"),
        ("-3 ohm", "-3"),
        ("+3 ohm", "3"),
        ("4k7", "4700"),
        ("4k7 ohm", "4700"),
        ("4k7ohm", "4700"),
        ("2R2", "2.2"),
        ("R47", "0.47"),
        ("47R", "47"),
        ("10k", "10000"),
        ("2M2", "2200000"),
        ("3m3", "0.0033"),
        ("12 mohm", "0.012"),
        ("12 Mohm", "12000000"),
        ("3 µohm", "0.000003"),
        ("3 μohm", "0.000003"),
        ("3 uohm", "0.000003"),
        ("1 Tohm", "1e12"),
        ("1 fohm", "1e-15"),
        ("0", "0"),
        ("1.2345678901234567890123456789012345678901234567890123456789 kohm",
         "1234.5678901234567890123456789012345678901234567890123456789"),
    ],
)  # fmt: skip
def test_resistances(text: str, ohms: str) -> None:
    found = value(text)
    assert found == Decimal(ohms)
    assert isinstance(found, Decimal)


@pytest.mark.parametrize(
    ("kind", "text", "number"),
    [
        ("capacitor", "100n", "1e-7"),
        ("capacitor", "4u7", "4.7e-6"),
        ("capacitor", "100 nF", "1e-7"),
        ("capacitor", "2p2F", "2.2e-12"),
        ("inductor", "10 mH", "0.01"),
        ("conductance", "2 mS", "0.002"),
        ("conductance", "2 mmho", "0.002"),
    ],
)
def test_other_units(kind: str, text: str, number: str) -> None:
    assert value(text, kind) == Decimal(number)


def test_no_context_of_the_caller_rounds_a_value() -> None:
    digits = "123456789" * 10
    with localcontext() as context:
        context.prec = 3
        found = value(f"1.{digits} kohm")
        many = parse("\n".join(f"resistor R{n} a b 1.{digits} kohm" for n in range(100)))
    assert found == Decimal(f"1{digits[:3]}.{digits[3:]}")
    assert {e.value for e in many.elements.values()} == {found}


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("3-4j ohm", Rectangular(Decimal(3), Decimal(-4))),
        ("3-4johm", Rectangular(Decimal(3), Decimal(-4))),
        ("0.5+2.1j kohm", Rectangular(Decimal(500), Decimal(2100))),
        ("-4j", Rectangular(Decimal(0), Decimal(-4))),
        ("1e-3+2e3j", Rectangular(Decimal("0.001"), Decimal(2000))),
        ("(1/3)-(2/7)j ohm", Rectangular(Fraction(1, 3), Fraction(-2, 7))),
        ("120 ohm @ -30 deg", Phasor(Decimal(120), Decimal(-30))),
        ("120 ∠ 30", Phasor(Decimal(120), Decimal(30))),
        ("120∠30°", Phasor(Decimal(120), Decimal(30))),
        ("120ohm@-30deg", Phasor(Decimal(120), Decimal(-30))),
        ("1.2 kohm @ 0.5 rad", Phasor(Decimal(1200), Decimal("0.5"), False)),
        ("(2*3) ohm @ (30/7) deg", Phasor(Decimal(6), Fraction(30, 7))),
        ("5 ohm", Decimal(5)),
        ("?", SYMBOL),
    ],
)
def test_complex_values(text: str, expected: object) -> None:
    assert value(text, "impedance", before=AC) == expected


def test_complex_values_with_parameters() -> None:
    before = AC + "given n = 3\ngiven Z = 3+4j ohm\n"
    assert value("Z", "impedance", before=before) == Rectangular(Decimal(3), Decimal(4))
    assert value("(2*n) @ 30 deg", "impedance", before=before) == Phasor(Decimal(6), Decimal(30))
    assert value("(n)+(2*n)j", "impedance", before=before) == Rectangular(Decimal(3), Decimal(6))


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("tail", Formula("tail", Decimal("0.012"))),
        ("(4*tail)", Formula("(4*tail)", Decimal("0.048"))),
        ("( 2 *  tail + 10 ohm )", Formula("( 2 * tail + 10 ohm )", Decimal("10.024"))),
        ("(tail/7)", Formula("(tail/7)", Fraction(3, 1750))),
        ("(2*n) kohm", Formula("(2*n) kohm", Decimal(6000))),
        ("n", Formula("n", Decimal(3))),
        ("(3/7) ohm", Fraction(3, 7)),
        ("(3/4) kohm", Decimal(750)),
        ("(2 + 3)", Decimal(5)),
        ("(1/G)", Formula("(1/G)", Decimal(500))),
        ("(2^0.5*2^0.5*1 ohm)", None),
    ],
)
def test_formulas(text: str, expected: object) -> None:
    before = "given tail = 12 mohm\ngiven n = 3\ngiven G = 2 mS\n"
    found = value(text, before=before)
    if expected is not None:
        assert found == expected and type(found) is type(expected)
    else:
        assert float(found) == pytest.approx(2, abs=1e-15)


def test_a_parameter_goes_before_the_letter_code() -> None:
    assert value("R47", before="given R47 = 5 ohm") == Formula("R47", Decimal(5))


@pytest.mark.parametrize(
    ("text", "pair"),
    [
        ("10:1", (10, 1)),
        ("5", (5, 1)),
        ("2.5:0.5", (Decimal("2.5"), Decimal("0.5"))),
        ("(1/3):2", (Fraction(1, 3), 2)),
        ("?", (SYMBOL, 1)),
        ("n", (Formula("n", Decimal(3)), 1)),
        ("(2*n)", (Formula("(2*n)", Decimal(6)), 1)),
        ("turns", (Decimal(20), Decimal(3))),
        ("-1:2", (-1, 2)),
    ],
)
def test_ratios(text: str, pair: tuple[object, object]) -> None:
    before = "given n = 3\ngiven turns = 20:3"
    found = value(f"ratio {text}", "transformer", "+a -b +c -d", before)
    assert found["ratio"] == pair


def test_values_of_kinds_with_several() -> None:
    opamp = value("rout 75 gain 2e5", "opamp", "+p -n out")
    assert opamp.items == (("gain", (Decimal("2e5"),)), ("rout", (Decimal(75),)))
    assert value("", "opamp", "+p -n out").items == ()
    z = value("h 1 kohm 2 3 4 mS", "twoport", "+a -b +c -d")
    assert z.items == (("h", (Decimal(1000), Decimal(2), Decimal(3), Decimal("0.004"))),)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("5 V", "wrong-unit"),
        ("5 Ohm", "extra-word"),
        ("5Ohm", "unknown-unit"),
        ("5 kohm kohm", "extra-word"),
        ("5k kohm", "extra-word"),
        ("5%", "wrong-unit"),
        ("1_000", "unknown-unit"),
        ("0x10", "unknown-unit"),
        ("٣", "not-a-value"),
        ("1e", "unknown-unit"),
        ("inf", "unknown-parameter"),
        ("nan", "unknown-parameter"),
        ("1,5", "not-a-value"),
        ("3-4j", "needs-real"),
        ("5 @ 30 deg", "needs-real"),
        ("3-4 j", "unknown-unit"),
        ("3--4j", "unknown-unit"),
        ("10:1", "wrong-value"),
        ("5 ohm @", "missing-word"),
        ("1e301", "number-out-of-range"),
        ("1e-301", "number-out-of-range"),
    ],
)
def test_what_is_no_resistance(text: str, expected: str) -> None:
    assert code(text) == expected


@given(st.decimals(allow_nan=False, allow_infinity=False, min_value=-1e9, max_value=1e9))
@seeded
def test_decimal_numbers_are_exact(number: Decimal) -> None:
    assert value(f"{number} mohm") == Fraction(number) / 1000


@pytest.mark.parametrize(
    ("number", "text"),
    [
        ("0.0000080712", "8.0712e-6"), ("-1.5E-20", "-1.5e-20"), ("1E-12", "1e-12"),
        ("80712", "80712"), ("0.00123", "0.00123"), ("1.25E+9", "1.25e9"), ("2E+6", "2000000"),
    ],
)  # fmt: skip
def test_numbers_are_written_with_one_digit_before_the_point(number: str, text: str) -> None:
    exact = Decimal(number)
    assert write_number(exact) == text
    assert Decimal(text) == exact
    part = Rectangular(Decimal(0), exact)
    assert value(write_value(part, "S"), "admittance", before=AC) == part
