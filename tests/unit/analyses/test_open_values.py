"""Values written `?` in networks with transformers, files, and what could be unstable."""

from __future__ import annotations

from pathlib import Path

import pytest
import sympy

import equiv

AMPLIFIER = """
    frequency 1 kHz
    voltage V1 +a -gnd 1 V
    resistor R1 a b ?
    resistor R2 b p ?
    capacitor C1 b o ?
    capacitor C2 p gnd ?
    opamp U +p -o o
    port OUT +o -gnd
    """
TURNS = """
    {given}
    voltage V1 +a -gnd 10 V
    resistor R1 a b 4 ohm
    transformer T +b -gnd +c -gnd ratio {ratio}
    resistor R2 c gnd 1 ohm
    """


def by_name(formula: sympy.Expr) -> sympy.Expr:
    """The formula in plain symbols."""
    return formula.subs({s: sympy.Symbol(s.name) for s in formula.free_symbols})


def test_an_active_filter_may_be_open() -> None:
    # R. P. Sallen, E. L. Key, IRE Trans. Circuit Theory 2 (1955) 74 (from memory): unity gain
    found = equiv.superpose(equiv.parse(AMPLIFIER), "V:o", symbolic="V1")
    v1, r1, r2, c1, c2, s = sympy.symbols("V1 R1 R2 C1 C2 s")
    expected = v1 / (r1 * r2 * c1 * c2 * s**2 + (r1 + r2) * c2 * s + 1)
    assert sympy.cancel(by_name(found.to_sympy()) - expected) == 0
    assert equiv.port(equiv.parse(AMPLIFIER), "OUT", symbolic=True).checks[0].passed


@pytest.mark.parametrize(
    "line",
    [
        "vcvs E +x -gnd mu ? senses V:b\nresistor RX x gnd 1 ohm",
        "twoport T +b -gnd +x -gnd z ? 1 ohm 1 ohm ?\nresistor RX x gnd 1 ohm",
        "opamp U +b -x x gain ? rin 1 Mohm",
    ],
)
def test_any_open_value_beside_something_active(line: str) -> None:
    text = f"frequency 50 Hz\nvoltage V +a -gnd 1 V\nresistor R a b 1 ohm\ncapacitor C b gnd 1 uF\n{line}\n"
    found = equiv.superpose(equiv.parse(text), "V:x", symbolic="R")
    assert found.checks[0].passed


@pytest.mark.parametrize(
    ("given", "ratio", "symbolic"),
    [
        ("", "?", True),
        ("", "?", "R1"),
        ("given n = 3", "n", True),
        ("given n = 3", "n", "T"),
        ("given n = 3", "(2*n)", "T"),
        ("given n = 3", "n", "n"),
        ("given n = 3", "(2*n):1", "T"),
    ],
)
def test_a_ratio_in_symbols(given: str, ratio: str, symbolic: bool | str) -> None:
    network = equiv.parse(TURNS.format(given=given, ratio=ratio))
    found = equiv.superpose(network, "V:c", symbolic=symbolic)
    assert all(check.passed for check in found.checks)
    v, t = sympy.symbols("V t")
    # v1 = t·v2 and t·i1 = -i2: 4 ohm against t² · 1 ohm
    expected = v * t / (4 + t**2)
    point = {"V1": v, "T": t, "n": t, "R1": 4, "R2": 1, "V": v}
    formula = found.to_sympy()
    formula = formula.subs({s: point[s.name] for s in formula.free_symbols})
    fixed = formula if formula.has(v) else formula * v / 10
    assert sympy.cancel(fixed - expected) == 0


def test_parameters_of_a_file_are_refused_in_words(tmp_path: Path) -> None:
    (tmp_path / "two.s2p").write_text("# Hz S RI R 50\n50 0.1 0 0.8 0 0.8 0 0.1 0\n")
    (tmp_path / "n.equiv").write_text(
        "frequency 50 Hz\nvoltage V +a -gnd 1 V\nresistor R a b 50 ohm\n"
        'twoport F +b -gnd +o -gnd file "two.s2p"\nresistor L o gnd 50 ohm\n'
    )
    network = equiv.load(tmp_path / "n.equiv")
    for symbolic in (True, "R"):
        with pytest.raises(equiv.UsageError, match="F has parameters that a file gives") as error:
            equiv.superpose(network, "V:o", symbolic=symbolic)
        assert error.value.diagnostics[0].code == "not-a-formula"
        with pytest.raises(equiv.UsageError, match="F has parameters that a file gives"):
            equiv.port(network, "o,gnd", symbolic=symbolic)
