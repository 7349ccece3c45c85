"""Tables as text, whole: what a person sees."""

import random
import time
from collections.abc import Callable
from textwrap import dedent

import pytest
from unit.rendering.examples import AC, DC
from unit.rendering.hostile import HOSTILE, hostile_table

from equiv.analyses.tables import Column, Measure, Row, Table
from equiv.errors import display_width
from equiv.rendering.lines import wrap
from equiv.rendering.terminal import draw


def text(block: str) -> str:
    """A block as it stands in the test, without its indentation."""
    return dedent(block).lstrip("\n")


def test_natural_width():
    assert draw([DC]) == text(
        """
        Superposition of I:R3
        current in R3, positive from b to gnd inside R3
        DC, two sources, values rms

                                                                         running  second    relative
        source   kind          value  coefficient  contribution   share      sum  method  difference
                                                             kA       %       kA      kA
        ────────────────────────────────────────────────────────────────────────────────────────────
        Vmain    voltage   240.00 V     26.316 mS        6.3158   64.79   6.3158  6.3158     1.2e-16
        standby  group             –            –        3.4321   35.21   9.7479  9.7479           0
          Vgen   voltage   236.00 V     14.500 mS        3.4341       –        –       –           –
          Iaux   current  -2.0000 mA    1.0000          -0.0020       –        –       –           –
        ────────────────────────────────────────────────────────────────────────────────────────────
        sum                                              9.7479  100.00           9.7479           –

        The sum and the network with all sources on agree to 1.2e-16 of the sum of the
          magnitudes (limit 1e-09).
        """
    )


def test_a_wide_table_in_parts_with_its_key_columns():
    assert draw([DC], digits=3, width=40, unicode=False) == text(
        """
        Superposition of I:R3
        current in R3, positive from b to gnd
        inside R3
        DC, two sources, values rms

        source   kind        value  coefficient
        ---------------------------------------
        Vmain    voltage    240 V       26.3 mS
        standby  group           -            -
          Vgen   voltage    236 V       14.5 mS
          Iaux   current  -2.00 mA      1.00

                                      running
        source   contribution  share      sum
                           kA      %       kA
        -------------------------------------
        Vmain          6.32       65     6.32
        standby        3.43       35     9.75
          Vgen         3.43        -        -
          Iaux        -0.0020      -        -
        -------------------------------------
        sum            9.75      100

                 second    relative
        source   method  difference
                     kA
        ---------------------------
        Vmain      6.32     1.2e-16
        standby    9.75           0
          Vgen        -           -
          Iaux        -           -
        ---------------------------
        sum        9.75           -

        The sum and the network with all sources
          on agree to 1.2e-16 of the sum of the
          magnitudes (limit 1e-09).
        """
    )


def test_complex_numbers_and_wide_letters():
    assert draw([AC]) == text(
        """
        Voltages

        node           voltage        source value
                             V
        ──────────────────────────────────────────
        a     5.0000 ∠  53.13°  120.04 ∠ -1.43° V
        名前  0.0010 ∠ 180.00°  1.0000 ∠  0.00° nΩ
        x                    –                   –
        ──────────────────────────────────────────
        sum   5.0000 ∠ 180.00°  0.0000 ∠  0.00° V
        """
    )


def test_without_unicode_everything_is_ascii():
    plain = draw([AC, hostile_table()], unicode=False)
    assert plain.isascii()
    assert "5.0000 @  53.13 deg" in plain
    assert "\\u540d\\u524d" in plain
    assert "1.0000 @  0.00 deg nohm" in plain


@pytest.mark.parametrize("width", [40, 60, 80, 100])
def test_no_line_is_wider_than_the_terminal(width):
    for line in draw([DC, AC], width=width).splitlines():
        assert display_width(line) <= width


def test_sentences_in_cells_are_wrapped_within_their_column():
    table = Table(
        "Remarks",
        columns=(Column("where", key=True), Column("remark"), Column("value", "V")),
        rows=(
            Row(("line 3", "the element R1 is connected at one end only and carries nothing", 1.0)),
            Row(("line 4", "short", 2.0)),
        ),
    )
    assert draw([table], width=50) == text(
        """
        Remarks

        where   remark                               value
                                                         V
        ──────────────────────────────────────────────────
        line 3  the element R1 is connected at one  1.0000
                end only and carries nothing
        line 4  short                               2.0000
        """
    )


def test_nothing_hostile_reaches_the_terminal():
    drawn = draw([hostile_table()])
    assert drawn.replace("\n", "").isprintable()
    for hostile in HOSTILE:
        if hostile.isprintable():
            assert hostile in drawn


def test_a_text_stands_as_it_is():
    table = Table("", text="title  x\nresistor R1 a b 1 ohm\x1b[2J\n")
    assert draw([table]) == "\ntitle  x\nresistor R1 a b 1 ohm\\x1b[2J\n"


def test_tables_are_set_apart_and_may_be_empty():
    empty = Table("Nothing", columns=(Column("name"), Column("value", "V")))
    assert draw([empty, Table("Words", notes=("only a note",))]) == text(
        """
        Nothing

        name  value
                  V
        ───────────


        Words

        only a note
        """
    )


def test_words_are_never_broken():
    assert wrap("aaa bb cccccccc d", 6) == ["aaa bb", "cccccccc", "d"]
    assert wrap("a b", 1, "  ") == ["a", "  b"]
    assert wrap("", 10) == [""]


def large_table() -> Table:
    number = random.Random(7).gauss
    names = ("source", "kind", "value", "coefficient", *"abcde")
    columns = tuple(Column(name, "A" if len(name) == 1 else "") for name in names)
    rows = (
        (
            f"V{i}",
            "voltage",
            Measure(number(0, 100), "V"),
            Measure(number(0, 1), "S"),
            *(number(0, 1) for _ in range(5)),
        )
        for i in range(10_000)
    )
    return Table("Large", columns=columns, rows=Table.rows_of(list(rows)))


def shortest(work: Callable[[], object]) -> float:
    times = []
    for _ in range(5):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return min(times)


@pytest.mark.performance
def test_ten_thousand_rows_cost_little_more_than_formatting_their_numbers():
    table = large_table()
    numbers = [random.Random(1).random() for _ in range(90_000)]
    formatting = shortest(lambda: [f"{number:.4f}" for number in numbers])
    assert shortest(lambda: draw([table])) < 15 * formatting


def test_every_row_of_a_large_table_is_there():
    assert draw([large_table()]).count("\n") == 10_005
