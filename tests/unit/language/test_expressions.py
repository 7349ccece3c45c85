"""Expressions: precedence, exactness, dimensions, functions, bounds."""

import math
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st
from unit.language.generated import seeded

from equiv.language.dimensions import DIMENSIONS, NO_DIMENSION, dimension_of, unit_of
from equiv.language.expressions import parse_expression
from equiv.language.mistakes import Mistake
from equiv.language.scope import Parameter, Scope

SCOPE = Scope()
SCOPE.known.update(
    {
        "n": Parameter(Fraction(3), "", True),
        "Rs": Parameter(Fraction(50), "ohm", True),
        "L": Parameter(Fraction(1, 1000), "H", True),
        "C": Parameter(Fraction(1, 10**6), "F", True),
        "w": Parameter(Fraction(314), "rad/s", True),
        "T.1'": Parameter(Fraction(2), "s", True),
    }
)


def comes_to(text: str) -> tuple[Fraction, str]:
    """Number and unit of an expression."""
    number, dimension, _ = parse_expression(text, 0).evaluate(SCOPE)
    return number, unit_of(dimension)


def code(text: str) -> str:
    """The code of an expression's error."""
    with pytest.raises(Mistake) as caught:
        comes_to(text)
    return caught.value.code


@pytest.mark.parametrize(
    ("text", "number", "unit"),
    [
        ("2+3*4", 14, ""),
        ("(2+3)*4", 20, ""),
        ("2-3-4", -5, ""),
        ("24/4/3", 2, ""),
        ("2^3^2", 512, ""),
        ("-2^2", -4, ""),
        ("2^-2", Fraction(1, 4), ""),
        ("--3", 3, ""),
        ("2*-3", -6, ""),
        ("1/3+1/6", Fraction(1, 2), ""),
        ("0.1+0.2", Fraction(3, 10), ""),
        ("2*Rs + 10 ohm", 110, "ohm"),
        ("2*Rs+10", 110, "ohm"),
        ("10 + Rs", 60, "ohm"),
        ("Rs*2 A", 100, "V"),
        ("12 V/4 kohm", Fraction(3, 1000), "A"),
        ("2 V * 3 A", 6, "W"),
        ("1/Rs", Fraction(1, 50), "S"),
        ("w*L", Fraction(314, 1000), "ohm"),
        ("1/(w*C)", Fraction(10**6, 314), "ohm"),
        ("Rs*C", Fraction(50, 10**6), "s"),
        ("sqrt(9/4)", Fraction(3, 2), ""),
        ("sqrt(Rs*Rs)", 50, "ohm"),
        ("(Rs*Rs)^0.5", 50, "ohm"),
        ("Rs^2/Rs", 50, "ohm"),
        ("4k7 + 2R2", Fraction("4702.2"), "ohm"),
        ("100n*2", Fraction(2, 10**7), ""),
        ("5%*200", 10, ""),
        ("2 Hz*T.1'", 4, ""),
        ("10kohm + 1 kohm", 11000, "ohm"),
        ("0*Rs", 0, "ohm"),
        ("n", 3, ""),
    ],
)
def test_exact_results(text: str, number: Fraction, unit: str) -> None:
    assert comes_to(text) == (number, unit)


@pytest.mark.parametrize(
    ("text", "number"),
    [
        ("sqrt(2)", math.sqrt(2)),
        ("exp(1)", math.e),
        ("exp(-20.5)", math.exp(-20.5)),
        ("log(10)", math.log(10)),
        ("log(1e-200)", math.log(1e-200)),
        ("sin(1)", math.sin(1)),
        ("cos(1)", math.cos(1)),
        ("sin(-100)", math.sin(-100)),
        ("cos(pi)", -1.0),
        ("sin(pi/6)", 0.5),
        ("pi", math.pi),
        ("2^0.3", 2**0.3),
        ("2^(-1/3)", 2 ** (-1 / 3)),
    ],
)
def test_functions(text: str, number: float) -> None:
    # Reference: the C library's functions, good to the last place or two.
    found, unit = comes_to(text)
    assert unit == ""
    assert float(found) == pytest.approx(number, rel=4e-16)


def test_functions_have_forty_digits() -> None:
    # Abramowitz and Stegun, table 1.1 (from memory): e, ln 10 and the square root of 2.
    assert abs(
        comes_to("exp(1)")[0] - Fraction("2.71828182845904523536028747135266249775724709")
    ) < (Fraction(1, 10**38))
    assert abs(comes_to("log(10)")[0] - Fraction("2.30258509299404568401799145468436420760110")) < (
        Fraction(1, 10**38)
    )
    assert abs(comes_to("sqrt(2)")[0] - Fraction("1.41421356237309504880168872420969807856967")) < (
        Fraction(1, 10**38)
    )


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("Rs + 5 V", "wrong-dimension"),
        ("exp(Rs)", "wrong-dimension"),
        ("2^Rs", "wrong-dimension"),
        ("sqrt(Rs)", "wrong-dimension"),
        ("1/0", "division-by-zero"),
        ("1/(n-3)", "division-by-zero"),
        ("0^-1", "division-by-zero"),
        ("sqrt(-1)", "no-such-value"),
        ("log(-1)", "no-such-value"),
        ("exp(701)", "no-such-value"),
        ("(-8)^(1/3)", "no-such-value"),
        ("9^9^9^9", "number-too-large"),
        ("2^99999999999999999999", "number-too-large"),
        ("(1e300)^3", "number-too-large"),
        ("x", "unknown-parameter"),
        ("V", "bad-expression"),
        ("n n", "bad-expression"),
        ("2 +", "bad-expression"),
        ("* 2", "bad-expression"),
        ("", "bad-expression"),
        ("2,3", "bad-expression"),
        ("n.real", "unknown-parameter"),
        ("sqrt", "bad-expression"),
        ("sqrt(1", "bad-expression"),
        ("open(1)", "unknown-function"),
        ("n(1)", "unknown-function"),
        ("'a'", "bad-expression"),
        ("lambda: 1", "bad-expression"),
        ("[1]", "bad-expression"),
    ],
)
def test_errors(text: str, expected: str) -> None:
    assert code(text) == expected


numbers = (st.integers(-99, 99) | st.decimals(0, 99, places=2)).map(
    lambda number: (f"({number})", Fraction(number))
)
OPERATIONS = {"+": Fraction.__add__, "-": Fraction.__sub__, "*": Fraction.__mul__}
sums = st.recursive(
    numbers,
    lambda inner: st.builds(
        lambda first, sign, second: (
            f"({first[0]} {sign} {second[0]})",
            OPERATIONS[sign](first[1], second[1]),
        ),
        inner,
        st.sampled_from("+-*"),
        inner,
    ),
    max_leaves=12,
)


@given(sums)
@seeded
def test_agrees_with_fractions(written: tuple[str, Fraction]) -> None:
    text, number = written
    assert comes_to(text)[0] == number


@pytest.mark.parametrize("unit", [u for u in DIMENSIONS if u not in ("Hz", "rad/s")])
def test_units_and_dimensions_go_back_and_forth(unit: str) -> None:
    assert unit_of(DIMENSIONS[unit]) == unit
    assert dimension_of(unit) == DIMENSIONS[unit]


@given(st.tuples(*[st.integers(-4, 4)] * 3))
@seeded
def test_every_dimension_has_a_unit(dimension: tuple[int, int, int]) -> None:
    assert dimension_of(unit_of(dimension)) == dimension
    assert dimension_of("") == NO_DIMENSION
