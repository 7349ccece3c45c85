"""Whatever the three-phase text, what comes out is a system or diagnostics; never anything else."""

from __future__ import annotations

import random
from pathlib import Path

import pytest
from diagnostics.damage import damaged
from diagnostics.systems import CASES
from hypothesis import given, settings
from hypothesis import strategies as st

import equiv
from equiv.errors import Diagnostic, EquivError
from equiv.threephase.kinds import KINDS
from equiv.threephase.language.statements import STATEMENTS
from equiv.threephase.loading import parse, write
from equiv.threephase.model import OneLine

fuzzed = settings(derandomize=True, max_examples=150, deadline=None)

WORDS = [
    *KINDS, *STATEMENTS, *{word for kind in KINDS.values() for word in kind.words},
    "A", "B", "C", "X", "U", ">", "A>B", "11 kV", "33/11 kV", "11kV/400V", "5 MVA", "5MVA", "2 Mvar",
    "900 kW", "12%", "1.02 pu @ 5 deg", "0.1+0.2j ohm/km", "80 uS/km", "1.2 km", "1.2km", "9 ohm",
    "Dyn11", "YNyn0", "Dyn2", "solid", "open", "lead", "tolerance", "0", "-1", "1e300 V", "1e-300 ohm",
    "n", "n = 3", "(2*n)", "(1/3) MVA", "(n) km", "?", "10:1", "((", "(", '"', '"x"', "#", "\\", "@",
    "=", "%", "pu", "km", "j", "1e999", "\u0000", "\u202e", "\ud800", "\r", "½", "∞", "nan", "/", "1/2/3 kV",
]  # fmt: skip
SEEDS = [
    text
    for path in [
        *sorted(CASES.glob("*.equiv")),
        *sorted((Path(__file__).parents[2] / "samples").glob("*.equiv")),
    ]
    if "three-phase" in (text := path.read_text(encoding="utf-8"))
]
HEAD = (
    "three-phase 50 Hz\nbus A 33 kV\nbus B 11 kV\nbus C 11 kV\ngiven n = 3\ninfeed U A level 9 kA\n"
)


def survives(text: str) -> bool:
    """Read a text; if it is a system, check it, write it and read it again."""
    try:
        system = parse(text)
    except EquivError as error:
        assert error.diagnostics
        assert all(isinstance(d, Diagnostic) and d.code and d.message for d in error.diagnostics)
        assert str(error)
        return False
    if isinstance(system, OneLine):
        assert equiv.check(system).render()
        assert parse(write(system)) == system
    return True


@given(st.lists(st.lists(st.sampled_from(WORDS), max_size=9).map(" ".join), max_size=12))
@fuzzed
def test_lines_of_the_language_s_own_words(lines: list[str]) -> None:
    survives(HEAD + "\n".join(lines))
    survives("three-phase 50 Hz\n" + "\n".join(lines))


@given(st.text(max_size=200))
@fuzzed
def test_any_characters(text: str) -> None:
    survives(f"{HEAD}{text}")
    survives(f"three-phase {text}")


@given(st.text(max_size=40))
@fuzzed
def test_any_value(text: str) -> None:
    line = text.replace("\n", " ")
    survives(f"{HEAD}generator G B {line} 11 kV x1 15%")
    survives(f"{HEAD}transformer T A > B 9 MVA {line} z 8% vector Dyn11")
    survives(f"{HEAD}line L B > C 1 km z1 {line}")
    survives(f"{HEAD}infeed V B level 1 kA voltage ({line}) pu")


@given(st.integers(0, 10**9))
@settings(derandomize=True, max_examples=300, deadline=None)
def test_damaged_files(seed: int) -> None:
    survives(damaged(seed, SEEDS, WORDS, 4))


def test_some_of_the_damaged_files_are_still_systems() -> None:
    """The fuzz would be idle if nothing it makes could be read."""
    chooser = random.Random(7)
    found = 0
    for _ in range(200):
        text = chooser.choice([s for s in SEEDS if "title" in s])
        at = chooser.randrange(len(text))
        found += survives(text[:at] + chooser.choice("0123456789. ") + text[at:])
    assert found > 50


@pytest.mark.parametrize(
    "text",
    [
        "generator G B " + "(" * 19_000,
        "generator G B (" + "2^" * 900 + "2) MVA 11 kV x1 1%",
        "line L A > B " + "1" * 19_000 + "km z1 1 ohm/km",
        "bus A 11 kV\n" * 20_000,
        "\n".join(f"bus B{n} 11 kV" for n in range(20_000)),
        "\n".join(f"generater G{n} B 3 MVA" for n in range(20_000)),
        "\n".join(f"load L{n} Q{n} 3 MVA" for n in range(20_000)),
        "\n".join(f"load L B 3 MVA count {n}" for n in range(20_000)),
        "\n".join(f"bus Q{n} 11 kV\nline L{n} B > Q{n} 1 ohm z1 1 ohm" for n in range(8_000)),
        "\n".join(f"bus Q{n} 11 kV\nline L{n} {f'Q{n - 1}' if n else 'B'} > Q{n} z1 1 ohm"
                  for n in range(8_000)),
        "\n".join(f"transformer T{n} A > B 9 MVA 33/11 kV z 8% vector Dyn{1 + n % 2 * 4}"
                  for n in range(3_000)),
        "three-phase 50 Hz\n" * 20_000,
        "\\\n" * 30_000,
    ],
    ids=range(13),
)  # fmt: skip
def test_large_and_deep_texts_end_soon(text: str) -> None:
    survives(HEAD + text)
