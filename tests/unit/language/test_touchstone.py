"""Touchstone files: every format read, what is written read back, and what is wrong told.

Rules: Touchstone File Format Specification, versions 1.1 and 2.0 (IBIS Open Forum, 2009): option
line, order of two-ports and rows of four pairs read in excerpts; defaults, normalisation and
noise data from memory.
"""

import cmath
import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from equiv.elements.tabulated import Tabulated
from equiv.errors import UsageError
from equiv.language.files import Text
from equiv.language.mistakes import Mistake
from equiv.language.touchstone import ports_of, read
from equiv.language.touchstone_writer import write_touchstone
from equiv.language.words import Statement

fuzzed = settings(derandomize=True, max_examples=80, deadline=None)


def told(text: str, ports: int) -> tuple[Tabulated | None, list[tuple[str, int, int]]]:
    """What is read, and the code, line and offset of every mistake."""
    wrong: list[tuple[str, int, int]] = []

    def note(mistake: Mistake, statement: Statement) -> None:
        assert mistake.message and mistake.place[0] <= len(statement.text)
        assert statement.span(mistake.place).file == "x"
        wrong.append((mistake.code, statement.line, mistake.place[0]))

    return read(Text("x", text), ports, note), wrong


def table(text: str, ports: int) -> Tabulated:
    found, wrong = told(text, ports)
    assert found is not None and not wrong, wrong
    return found


def test_the_defaults_of_the_option_line() -> None:
    found = table("#\n1 0.5 90 2 0 3 -90 4 180\n", 2)
    assert found.hertz == (1e9,)
    assert (found.form, found.reference) == ("s", 50.0)
    # N11 N21 N12 N22: S21 is the third number of the second pair
    assert found.matrices == ((0.5j, -3j, 2 + 0j, -4 + 0j),)


@pytest.mark.parametrize(
    ("option", "hertz"),
    [("# Hz RI", 2.4), ("# ri khz", 2400.0), ("#MHZ RI S", 2.4e6), ("# RI R 50 ghz s", 2.4e9)],
)
def test_units_in_any_case_and_order(option: str, hertz: float) -> None:
    assert table(f"! first\n{option} ! behind\n\n2.4 1 2 ! point\n", 1).hertz == (hertz,)


def test_formats() -> None:
    point = cmath.rect(0.5, math.radians(30))
    for option, numbers in (
        ("# Hz S RI R 50", f"{point.real!r} {point.imag!r}"),
        ("# Hz S MA R 50", "0.5 30"),
        ("# Hz S DB R 50", f"{20 * math.log10(0.5)!r} 30"),
    ):
        (matrix,) = table(f"{option}\n1 {numbers}\n", 1).matrices
        assert abs(matrix[0] - point) < 1e-15


def test_parameters_are_normalised_by_the_reference() -> None:
    numbers = "1 1 0 3 0 2 0 4 0"
    for form, factors in {
        "Z": (75, 75, 75, 75),
        "Y": (1 / 75, 1 / 75, 1 / 75, 1 / 75),
        "H": (75, 1, 1, 1 / 75),
        "G": (1 / 75, 1, 1, 75),
    }.items():
        (matrix,) = table(f"# Hz {form} RI R 75\n{numbers}\n", 2).matrices
        expected = [n * f for n, f in zip((1, 2, 3, 4), factors, strict=True)]
        assert matrix == pytest.approx(expected, rel=1e-15)


def test_rows_of_many_ports_and_four_pairs_a_line() -> None:
    rows = [[complex(10 * r + c, r - c) for c in range(5)] for r in range(5)]
    lines = ["# Hz S RI"]
    for r, row in enumerate(rows):
        pairs = [f"{x.real:g} {x.imag:g}" for x in row]
        lines.append(("7 " if r == 0 else "") + " ".join(pairs[:4]))
        lines.append(pairs[4])
    assert table("\n".join(lines), 5).matrices == (tuple(x for row in rows for x in row),)


def test_noise_data_of_a_two_port_are_left_out() -> None:
    text = "# Hz S RI\n1 1 0 1 0 1 0 1 0\n2 2 0 2 0 2 0 2 0\n1 0.5 0.3 120 0.2\n9 0.6 0.3 130 0.2\n"
    assert table(text, 2).hertz == (1, 2)


def test_lines_end_as_they_like_and_later_option_lines_do_not_count() -> None:
    found = table("# Hz S RI\r\n1 1 0\r\n# MHz S MA\r\n\t2  1\t0", 1)
    assert found.hertz == (1, 2) and found.matrices == ((1,), (1,))


def test_exact_numbers() -> None:
    # 0.1 · 1e9 is 1e8 only if the power of ten is taken in decimals
    assert table("# GHz S RI\n0.1 1 0\n1.005 1 0\n", 1).hertz == (1e8, 1.005e9)


@pytest.mark.parametrize(
    ("text", "ports", "mistakes"),
    [
        ("", 1, [("touchstone-option", 1, 0)]),
        ("# Hz S RI\n", 1, [("touchstone-data", 1, 0)]),
        ("1 2 3\n# Hz S RI\n", 1, [("touchstone-option", 1, 0)]),
        ("# Hz S RI R\n1 2 3\n", 1, [("touchstone-option", 1, 11)]),
        ("# Hz S RI R 0\n1 2 3\n", 1, [("touchstone-option", 1, 12)]),
        ("# Hz S RI R 5O\n1 2 3\n", 1, [("touchstone-option", 1, 12)]),
        ("# Hz S Z RI\n1 2 3\n", 1, [("touchstone-option", 1, 7)]),
        ("# Hz G RI\n1 2 3\n", 1, [("touchstone-option", 1, 5)]),
        ("[Version] 2.0\n# Hz S RI\n1 2 3\n", 1, [("touchstone-version", 1, 0)]),
        ("# Hz S RI\n1 2 3 4\n", 1, [("touchstone-data", 2, 0)]),
        ("# Hz S RI\n1 2 x\n", 1, [("touchstone-number", 2, 4)]),
        ("# Hz S RI\n1 2 nan\n", 1, [("touchstone-number", 2, 4)]),
        ("# Hz S RI\n1 2 inf\n", 1, [("touchstone-number", 2, 4)]),
        ("# Hz S RI\n1 2 1_0\n", 1, [("touchstone-number", 2, 4)]),
        ("# Hz S RI\n1 2 1e999\n", 1, [("number-out-of-range", 2, 4)]),
        ("# Hz S DB\n1 1e9 0\n", 1, [("touchstone-number", 2, 2)]),
        ("# Hz S RI\n2 2 3\n2 2 3\n", 1, [("touchstone-order", 3, 0)]),
        ("# Hz S RI\n-2 2 3\n", 1, [("touchstone-order", 2, 0)]),
        ("# Hz S RI\n1 2 3\n1\x00 2 3\n", 1, [("control-character", 3, 1)]),
        ("# Hz S RI\n1 1 0 1 0 1 0\n", 3, [("touchstone-data", 2, 0)]),
        (
            "# Hz S RI\n1 1 0\n2 1\n3 y 0\n",
            1,
            [("touchstone-data", 3, 0), ("touchstone-number", 4, 2)],
        ),
    ],
)
def test_every_mistake_has_its_place(
    text: str, ports: int, mistakes: list[tuple[str, int, int]]
) -> None:
    found, wrong = told(text, ports)
    assert found is None
    assert wrong == mistakes


def test_names_tell_the_number_of_ports() -> None:
    assert [ports_of(n) for n in ("x.s2p", "X.S12P", "x.z3p", "x.txt", "x.s2p.bak", "s2p")] == [
        2, 12, 3, None, None, None,
    ]  # fmt: skip


numbers = st.floats(-1e12, 1e12).map(lambda x: x if abs(x) > 1e-200 else 0.0)


@st.composite
def tables(draw: st.DrawFn) -> Tabulated:
    ports = draw(st.integers(1, 6))
    hertz = sorted(draw(st.sets(st.floats(0, 1e12), min_size=1, max_size=4)))
    hertz = [f for f in hertz if f == 0 or f > 1e-200]
    values = st.builds(complex, numbers, numbers)
    matrices = [tuple(draw(values) for _ in range(ports * ports)) for _ in hertz]
    form = draw(st.sampled_from("szy"))
    reference = draw(st.floats(1e-3, 1e6))
    return Tabulated("x", form, reference, tuple(hertz), tuple(matrices))


@given(tables().filter(lambda t: t.hertz))
@fuzzed
def test_what_is_written_reads_back(written: Tabulated) -> None:
    text = write_touchstone(written, ["a title\n! # Ω", "second"])
    found = table(text, written.ports)
    assert (found.form, found.reference, found.hertz) == (
        written.form, written.reference, written.hertz,
    )  # fmt: skip
    for matrix, told_ in zip(found.matrices, written.matrices, strict=True):
        if written.form == "s":
            assert matrix == told_
        for x, y in zip(matrix, told_, strict=True):
            assert abs(x - y) <= 1e-15 * abs(y)
    data = [line.split() for line in text.splitlines() if line[0] not in "!#"]
    assert all(len(line) <= 9 for line in data)


WORDS = [
    "#", "!", "Hz", "GHz", "S", "Z", "Y", "H", "G", "RI", "MA", "DB", "R", "50", "[Version]", "1",
    "2", "0.5", "-1e3", "1e400", "x", "nan", "\n", "\n", "\n", "\t", "\u0000", "½", "²", "1 0 0\n",
]  # fmt: skip


@given(st.lists(st.sampled_from(WORDS), max_size=40), st.integers(1, 4))
@fuzzed
def test_any_words_are_a_table_or_mistakes(words: list[str], ports: int) -> None:
    found, wrong = told(" ".join(words), ports)
    assert (found is None) == bool(wrong)


@given(st.text(max_size=100), st.integers(1, 4))
@fuzzed
def test_any_text_is_a_table_or_mistakes(text: str, ports: int) -> None:
    found, wrong = told(text, ports)
    assert (found is None) == bool(wrong)


# At a frequency

POINTS = Tabulated("x", "s", 50.0, (0.0, 1e6, 3e6), ((0.5,), (0.25 + 0.5j,), (1j,)))


def test_points_and_lines_between_them() -> None:
    assert POINTS.at(1e6) == (0.25 + 0.5j,)
    assert POINTS.at(1e6 * (1 + 1e-12)) == (0.25 + 0.5j,)
    assert POINTS.at(2e6)[0] == pytest.approx(0.125 + 0.75j)
    assert POINTS.at(0.0) == (0.5,)
    assert POINTS.between_words(3e6) is None
    assert POINTS.between_words(2e6) == "1 MHz and 3 MHz"


def test_outside_its_points_a_file_gives_nothing() -> None:
    with pytest.raises(UsageError, match="x gives no parameters at 4 MHz"):
        POINTS.at(4e6)
    without_dc = POINTS._replace(hertz=(1.0, 1e6, 3e6))
    with pytest.raises(UsageError, match="no point at 0 Hz, and DC is not guessed"):
        without_dc.at(0.0)
    with pytest.raises(UsageError, match="complex parameters at 0 Hz"):
        POINTS._replace(matrices=((0.5j,),) * 3).at(0.0)
