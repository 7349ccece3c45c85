"""Whatever the text, what comes out is a network or diagnostics; never anything else."""

from __future__ import annotations

from pathlib import Path

import pytest
from diagnostics.cases import CASES
from diagnostics.damage import damaged
from hypothesis import given, settings
from hypothesis import strategies as st

from equiv.elements import KINDS
from equiv.errors import Diagnostic, EquivError
from equiv.language import OPTIONS, STATEMENTS, load, parse, quantity, write
from equiv.network import Network

fuzzed = settings(derandomize=True, max_examples=150, deadline=None)

WORDS = [
    *KINDS, *STATEMENTS, *OPTIONS, "senses", "k", "M", "mu", "r", "z", "abcd", "ratio", "gain",
    "a", "b", "gnd", "R1", "X", "+a", "-b", "a>b", ">", "V:a", "V:a,b", "I:R1", "I2:X.R1", "P:X",
    "file", '"parts/good.s2p"', "5", "4k7", "R47", "3-4j", "120 V @ 30 deg", "10:1", "0:0", "5%", "?", "(2*n)", "(1/3) ohm",
    "n", "n=3", "=", "(a b)", "(", ")", "((", '"', '"x"', "#", "\\", "@", "∠", "1e999", "kohm",
    "1e-400", "Ω", "\u0000", "\u202e", "\ud800", "\r", "\t", "½", "²", "∞", "nan", "(exp(n^n))",
]  # fmt: skip
SEEDS = [
    path.read_bytes().decode()
    for path in [
        *sorted(CASES.glob("*.equiv")),
        *sorted((Path(__file__).parents[2] / "samples").glob("*.equiv")),
    ]
]


def survives(text: str) -> None:
    """Read a text; if it is a network, write it and read it again."""
    try:
        network = parse(text, folder=CASES)
    except EquivError as error:
        assert error.diagnostics
        assert all(isinstance(d, Diagnostic) and d.code and d.message for d in error.diagnostics)
        assert str(error)
        return
    assert isinstance(network, Network)
    assert parse(write(network), folder=CASES) == network


@given(st.lists(st.lists(st.sampled_from(WORDS), max_size=9).map(" ".join), max_size=12))
@fuzzed
def test_lines_of_the_language_s_own_words(lines: list[str]) -> None:
    survives("\n".join(lines))


@given(st.text(max_size=200))
@fuzzed
def test_any_characters(text: str) -> None:
    survives(text)


@given(st.text(max_size=40))
@fuzzed
def test_any_value(text: str) -> None:
    line = text.replace("\n", " ")
    survives(f"frequency 50 Hz\ngiven n = 3\nimpedance Z1 a b {line}\nresistor R1 a gnd ({line})")


@given(st.integers(0, 10**9))
@settings(derandomize=True, max_examples=250, deadline=None)
def test_damaged_files(seed: int) -> None:
    survives(damaged(seed, SEEDS, WORDS, 6))


@given(st.binary(max_size=300))
@fuzzed
def test_any_bytes(tmp_path_factory: pytest.TempPathFactory, data: bytes) -> None:
    path = tmp_path_factory.getbasetemp() / "any.equiv"
    path.write_bytes(data)
    try:
        assert isinstance(load(path), Network)
    except EquivError as error:
        assert error.diagnostics


@given(st.text(max_size=30))
@fuzzed
def test_any_quantity_parameter_and_frequency(text: str) -> None:
    for call in (
        lambda: quantity(text),
        lambda: parse("given a = 5 ohm", given={"a": text}),
        lambda: parse("given a = 5 ohm", given={text: "5"}),
        lambda: parse("", frequency=text),
    ):
        try:
            call()
        except EquivError as error:
            assert error.diagnostics


@pytest.mark.parametrize(
    "text",
    [
        "resistor R1 a gnd " + "(" * 19_000,
        "resistor R1 a gnd " + "()" * 9_000,
        "resistor R1 a gnd " + "(1)+" * 4_000 + "j",
        "resistor R1 a gnd " + "1" * 19_000 + "x",
        "resistor R1 a gnd (" + "-" * 1_990 + "1)",
        "resistor R1 a gnd (" + "2^" * 900 + "2)",
        "resistor R1 a gnd (" + "9^99*" * 300 + "2)",
        "resistor R1 a gnd (" + "1+" * 990 + "2)",
        "find V:" + "," * 19_000,
        "note " + '"' * 19_000,
        "voltage V1 +a -gnd 1 V label " + '"\\' * 9_000,
        "block b (" + "p " * 9_000 + ")",
        "\\\n" * 30_000,
        "block b (p)\n" * 20_000,
        "block b (p)\nend\n" * 5_000,
        "end\n" * 20_000,
        "read \"parts/empty.equiv\"\n" * 3_000,
        "".join(f"given a{n} = a{n + 1}\n" for n in range(20_000)) + "given a20000 = 5",
        "".join(f"given a{n} = (a{n + 1} + 1)\n" for n in range(3_000)) + "given a3000 = a0",
        "".join(f"resistor R{n} a b 1\nfind V:zz{n}\n" for n in range(5_000)),
        "".join(f"block b{n} (p)\nuse b{n + 1} X (p)\nuse b{n + 1} Y (p)\nend\n" for n in range(31))
        + "block b31 (p)\nend\nuse b0 X (a)",
        "\n".join(f"resistr R{n} a b 1" for n in range(20_000)),
        "\n".join(f"resistor R a b{n} 1" for n in range(20_000)),
    ],
    ids=range(23),
)  # fmt: skip
def test_large_and_deep_texts_end_soon(text: str) -> None:
    survives(text)
