"""Numbers in columns: prefixes, digits, points in line, and what has no plain form."""

import cmath
import math

import pytest

from equiv.analyses.tables import Cell, Column, Measure, Row, Table
from equiv.rendering.columns import drawn_columns
from equiv.rendering.marks import PLAIN, UNICODE, Marks


def drawn(
    column: Column, *cells: Cell, digits: int = 5, marks: Marks = UNICODE
) -> tuple[str, list[str]]:
    """The unit and the cells of a column drawn by itself."""
    table = Table("", columns=(column,), rows=tuple(Row((cell,)) for cell in cells))
    (column_drawn,) = drawn_columns(table, digits, marks)
    return column_drawn.unit, column_drawn.texts


AMPERES = Column("current", "A")


def test_one_prefix_from_the_largest():
    assert drawn(AMPERES, 6315.84, -3432.1, 12.0) == ("kA", ["6.3158", "-3.4321", "0.0120"])


def test_rounding_up_takes_the_next_prefix():
    assert drawn(AMPERES, 999.9996) == ("kA", ["1.0000"])
    assert drawn(AMPERES, 999.99) == ("A", ["999.99"])


def test_micro_and_ohm_signs():
    assert drawn(Column("r", "ohm"), 4700.0) == ("kΩ", ["4.7000"])
    assert drawn(Column("r", "ohm"), 4700.0, marks=PLAIN) == ("kohm", ["4.7000"])
    assert drawn(AMPERES, 2.5e-6)[0] == "µA"
    assert drawn(AMPERES, 2.5e-6, marks=PLAIN)[0] == "uA"


def test_small_values_show_two_digits_with_up_to_four_more_decimals():
    _, texts = drawn(AMPERES, 1.0, 1.2345e-4, 1.2e-7, 1.2345e-8, -3e-12)
    assert texts == ["1.0000    ", "0.00012   ", "0.00000012", "1.2e-08   ", "-3.0e-12   "]


def test_nothing_is_minus_zero():
    for value in (-0.0, -1e-30, -1e-5, complex(-0.0, -0.0)):
        _, texts = drawn(AMPERES, 1.0, value)
        stripped = texts[1].strip().replace("-180.00", "").split()[0]
        assert float(stripped) != 0 or not stripped.startswith("-")


@pytest.mark.parametrize("digits", [1, 2, 3, 9, 17])
def test_the_largest_has_the_digits_asked_for(digits):
    _, (text,) = drawn(AMPERES, math.pi, digits=digits)
    assert text == f"{math.pi:.{digits - 1}f}"


def test_seventeen_digits_lose_nothing():
    value = 0.1 + 0.2
    _, (text,) = drawn(Column("n"), value, digits=17)
    assert float(text) == value


def test_out_of_every_prefix_is_exponent():
    assert drawn(AMPERES, 1e25, 3.0) == ("A", ["1.0000e+25", "3.0000e+00"])
    assert drawn(AMPERES, 1e-22) == ("A", ["1.0000e-22"])
    assert drawn(Column("gain"), 2e5)[1] == ["200000"]
    assert drawn(Column("gain"), 2e12)[1] == ["2.0000e+12"]


def test_zeros_only():
    assert drawn(AMPERES, 0.0, 0.0) == ("A", ["0.0000", "0.0000"])


def test_percent_columns_hold_fractions():
    assert drawn(Column("share", "%"), 0.6479, 1.0, -0.35, 1e-5) == (
        "%",
        ["64.79  ", "100.00  ", "-35.00  ", "0.0010"],
    )


def test_residuals():
    assert drawn(Column("difference", exponent=True), 1.23e-16, 0.0, None)[1] == [
        "1.2e-16",
        "0",
        "–",
    ]


def test_counts_have_no_decimals():
    assert drawn(Column("elements"), 12, 3)[1] == ["12", "3"]


def test_missing_and_not_finite_values():
    assert drawn(AMPERES, 1.0, None, math.nan, math.inf)[1] == ["1.0000", "–", "–", "–"]
    assert drawn(AMPERES, None, marks=PLAIN) == ("A", ["-"])


def test_magnitude_and_angle():
    column = Column("v", "V")
    assert drawn(column, cmath.rect(8.567, math.radians(-87.14)), 12j) == (
        "V",
        [" 8.567 ∠ -87.14°", "12.000 ∠  90.00°"],
    )
    assert drawn(column, 12j, marks=PLAIN)[1] == ["12.000 @ 90.00 deg"]


def test_a_complex_column_with_real_values_is_still_magnitude_and_angle():
    assert drawn(Column("v", "V"), complex(5), complex(-5), complex(-5, -0.0), 0j)[1] == [
        "5.0000 ∠   0.00°",
        "5.0000 ∠ 180.00°",
        "5.0000 ∠ 180.00°",
        "0.0000 ∠   0.00°",
    ]


def test_an_angle_just_over_minus_180_is_drawn_as_180():
    assert drawn(Column("v", "V"), complex(-1, -1e-9))[1] == ["1.0000 ∠ 180.00°"]
    assert drawn(Column("v", "V"), complex(1, -1e-9))[1] == ["1.0000 ∠ 0.00°"]


def test_measures_have_their_own_prefix_and_unit():
    column = Column("value")
    cells = (Measure(240.0, "V"), Measure(0.026316, "S"), Measure(50.0, ""), Measure(0.0, "A"))
    assert drawn(column, *cells)[1] == ["240.00 V ", "26.316 mS", "50.000   ", "0.0000 A "]
    assert drawn(column, Measure(999.9999, "V"), Measure(-4700.0, "ohm"))[1] == [
        "1.0000 kV",
        "-4.7000 kΩ",
    ]
    assert drawn(column, Measure(240.0, "V"), digits=2)[1] == ["240 V"]
    assert drawn(column, Measure(3e-20, "F"))[1] == ["3.0000e-20 F"]


def test_complex_measures():
    assert drawn(Column("value"), Measure(3 + 4j, "V"), Measure(0.1, "S"))[1] == [
        "5.0000 ∠ 53.13° V ",
        "100.00 ∠  0.00° mS",
    ]


def test_a_family_shares_prefix_decimals_and_angle():
    columns = (Column("a", "A", family="f"), Column("b", "A", family="f"), Column("c", "A"))
    table = Table("", columns=columns, rows=(Row((1500.0, 2.0j, 2.0)),))
    first, second, third = drawn_columns(table, 4, UNICODE)
    assert (first.unit, first.texts) == ("kA", ["1.500 ∠ 0.0°"])
    assert (second.unit, second.texts) == ("kA", ["0.0020 ∠ 90.0°"])
    assert (third.unit, third.texts) == ("A", ["2.000"])


def test_numpy_numbers_are_numbers():
    numpy = pytest.importorskip("numpy")
    assert drawn(AMPERES, numpy.float64(1.5))[1] == ["1.5000"]
    assert drawn(AMPERES, numpy.complex128(1.5j))[1] == ["1.5000 ∠ 90.00°"]
