"""What is said where there is no exact result: the whole message."""

from collections.abc import Callable

import pytest

import equiv
from equiv.errors import UsageError
from equiv.network import Network

LEAVE = "leave --exact out, or write a rational value in its place"
RADIANS = "write the frequency in rad/s, or ask for formulas with --symbolic"
FORMULA = "has a formula whose value is irrational (a root, exp, log, sin, cos or pi)"
COUPLED = (
    "inductor L1 a gnd 2 H\ninductor L2 a b 3 H\nresistor R1 b gnd 1 ohm\ncoupling K L1 L2 k 0.5"
)
PLAIN = "resistor R1 a gnd 1 ohm"


def one(element: str, above: str = "") -> Network:
    return equiv.parse(f"{above}\nvoltage V1 +s -gnd 1 V\nresistor Rs s a 1 ohm\n{element}\n")


CASES: list[tuple[Callable[[], object], str, str]] = [
    (
        lambda: equiv.solve(one("resistor R1 a gnd (sqrt(2) * 1 ohm)"), exact=True),
        f"R1 {FORMULA}", LEAVE,
    ),
    (
        lambda: equiv.superpose(one("twoport N +a -gnd +b -gnd z (pi) 1 2 3"), "V:a", exact=True),
        f"N {FORMULA}", LEAVE,
    ),
    (
        lambda: equiv.solve(one(PLAIN, "frequency 50 Hz"), exact=True),
        "at 50 Hz the angular frequency ω = 2π·f is irrational", RADIANS,
    ),
    (
        lambda: equiv.solve(one(PLAIN, "frequency (2 * pi * 50) rad/s"), exact=True),
        "at 314.1592653589793238462643383279502884197 rad/s its formula is irrational", RADIANS,
    ),
    (
        lambda: equiv.solve(
            one("current J a > gnd 1 A @ 30 deg", "frequency 1 rad/s"), exact=True
        ),
        "J has the angle 30 deg, whose sine or cosine is irrational", LEAVE,
    ),
    (
        lambda: equiv.port(one(PLAIN, "frequency 1 rad/s\nphasors peak"), "a,gnd", exact=True),
        "V1 is a peak value (phasors peak): its rms value is over √2, which is irrational",
        "write rms values",
    ),
    (
        lambda: equiv.solve(one(COUPLED, "frequency 1 rad/s"), exact=True),
        "K has M = k·√(L1·L2), and this root is irrational", "give M itself",
    ),
    (
        lambda: equiv.load_port(one(PLAIN), "a,gnd", "power 1 W", exact=True),
        "power 1 W: a constant power is met where a square root says, which is irrational as a rule",
        "exact loads are impedances, short, open and constant currents",
    ),
    (
        lambda: equiv.load_port(one(PLAIN), "a,gnd", "(sqrt(2)) ohm", exact=True),
        f"load (sqrt(2)) ohm {FORMULA}", LEAVE,
    ),
    (
        lambda: equiv.port(one(PLAIN), "a,gnd", form="s", exact=True),
        "the waves of s are over √R, and the root of 50 is irrational",
        "give a reference that is a square, as 49 ohm; or leave --exact out",
    ),
]  # fmt: skip


@pytest.mark.parametrize(("call", "words", "hint"), CASES, ids=range(len(CASES)))
def test_what_is_irrational_is_named(call: Callable[[], object], words: str, hint: str) -> None:
    with pytest.raises(UsageError) as caught:
        call()
    said = f"error[irrational]: no exact result: {words}\n    hint: {hint}"
    assert str(caught.value) == said
    assert caught.value.exit_status == 2


def test_parameters_of_a_file_were_rounded(tmp_path: object) -> None:
    from pathlib import Path

    folder = Path(str(tmp_path))
    (folder / "x.s1p").write_text("# Hz Z RI R 1\n0 5 0\n")
    (folder / "x.equiv").write_text(
        'voltage V +a -gnd 1 V\nresistor R a b 1 ohm\nnport N +b -gnd file "x.s1p"\nfind I:R\n'
    )
    with pytest.raises(UsageError) as caught:
        equiv.superpose(equiv.load(folder / "x.equiv"), exact=True)
    words = "N takes its parameters from a file, as rounded numbers"
    assert f"no exact result: {words}" in str(caught.value)
