"""Exact numbers in every form of a table."""

import csv
import io

import pytest

from equiv.analyses.tables import LONGEST_SHOWN, Column, Fractions, Row, Table
from equiv.rendering import csv as to_csv
from equiv.rendering import html, latex, markdown, terminal

LONG = "1" * (LONGEST_SHOWN - 2) + "/37"
TABLE = Table(
    "Terms",
    columns=(Column("no.", key=True), Column("current", "A"), Column("exact", "A")),
    rows=(
        Row((1, -60 / 17, Fractions("-60/17"))),
        Row((2, 2.5, Fractions("5/2"))),
        Row((3, 3e20, Fractions(LONG))),
        Row((4, None, None)),
        Row(("", 1.0, ""), total=True),
    ),
)
COMPLEX = Table(
    "Terms",
    columns=(Column("current", "A"), Column("exact")),
    rows=(
        Row((1.2 - 1.6j, Fractions("6/5", "-8/5", "A"))),
        Row((16j, Fractions("0", "16", "ohm"))),
        Row((-16j, Fractions("0", "-1/16", "ohm"))),
        Row((3.0 + 0j, Fractions("3"))),
    ),
)


@pytest.mark.parametrize(
    ("number", "text"),
    [
        (Fractions("60/11"), "60/11"), (Fractions("-8/17"), "-8/17"),
        (Fractions("3/5", "-4/5"), "3/5 - j4/5"), (Fractions("-3", "4"), "-3 + j4"),
        (Fractions("0", "10"), "j10"), (Fractions("0", "-1/3"), "-j1/3"),
    ],
)  # fmt: skip
def test_text(number: Fractions, text: str) -> None:
    assert number.text == text and not number.long


def test_what_is_long_is_cut_for_people_and_whole_for_programs() -> None:
    assert Fractions("1", LONG).long and Fractions(LONG).long
    assert not Fractions("1" * LONGEST_SHOWN).long
    for drawn in (terminal.draw([TABLE]), markdown.draw([TABLE]), html.draw([TABLE])):
        assert "…" in drawn and LONG not in drawn
    assert "..." in terminal.draw([TABLE], unicode=False)
    assert LONG in to_csv.draw([TABLE])


def test_terminal() -> None:
    lines = [line.split() for line in terminal.draw([TABLE]).splitlines()]
    assert ["no.", "current", "exact"] in lines
    assert any(line[-1:] == ["-60/17"] for line in lines)
    assert any(line[-2:] == ["–", "–"] for line in lines)


def test_csv_has_plain_fractions_that_programs_can_read() -> None:
    rows = list(csv.reader(io.StringIO(to_csv.draw([TABLE]))))
    assert rows[0] == ["no.", "current [A]", "exact [A]", "row"]
    assert [row[2] for row in rows[1:]] == ["-60/17", "5/2", LONG, "", ""]


def test_csv_of_complex_ones_is_two_columns_and_a_unit() -> None:
    rows = list(csv.reader(io.StringIO(to_csv.draw([COMPLEX]))))
    assert rows[0][2:] == ["exact_re", "exact_im", "exact unit"]
    assert [row[2:] for row in rows[1:]] == [
        ["6/5", "-8/5", "A"], ["0", "16", "ohm"], ["0", "-1/16", "ohm"], ["3", "0", ""],
    ]  # fmt: skip


def test_units_stand_behind_where_rows_differ() -> None:
    drawn = terminal.draw([COMPLEX])
    assert "6/5 - j8/5 A" in drawn and "j16 Ω" in drawn and "-j1/16 Ω" in drawn
    assert "j16 ohm" in terminal.draw([COMPLEX], unicode=False)


def test_latex_sets_them_as_formulas() -> None:
    drawn = latex.draw([TABLE])
    assert "$-60/17$" in drawn and "$5/2$" in drawn and LONG not in drawn
    assert r"$6/5 - j8/5$\,$\mathrm{A}$" in latex.draw([COMPLEX])
