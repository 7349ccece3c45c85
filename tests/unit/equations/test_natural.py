"""Natural frequencies against closed forms and polynomial roots."""

import numpy as np
import pytest

import equiv
from equiv.equations.dense import matrix
from equiv.equations.layout import Layout
from equiv.equations.natural import natural_frequencies, unstable_frequencies
from equiv.equations.system import System


def found(text: str) -> list[complex]:
    layout = Layout(equiv.parse(text))
    g = matrix(System(layout, "nodal", 0.0))
    c = (matrix(System(layout, "nodal", 1e9)) - g) / 1e9
    return sorted(natural_frequencies(g, c), key=lambda s: (s.real, s.imag))


def test_series_resonance() -> None:
    text = "voltage V +a -gnd 1 V\nresistor R a b 10 ohm\ninductor L b c 1 mH\ncapacitor C c gnd 1 uF\n"
    roots = sorted(np.roots([1e-9, 10e-6, 1]), key=lambda s: (s.real, s.imag))
    assert found(text) == pytest.approx(roots, rel=1e-9)


def test_widely_spread_rates() -> None:
    text = "voltage V +a -gnd 1 V\n" + "".join(
        f"resistor R{k} a n{k} 1 kohm\ncapacitor C{k} n{k} gnd 1e{-k} F\n" for k in (3, 6, 9, 12)
    )
    assert found(text) == pytest.approx([-1e9, -1e6, -1e3, -1.0], rel=1e-6)


def test_capacitor_loops_and_inductor_cutsets_make_no_false_alarm() -> None:
    text = """
    voltage V +a -gnd 1 V
    capacitor C1 a b 1 uF
    capacitor C2 b gnd 1 uF
    capacitor C3 a gnd 1 nF
    inductor L1 c gnd 1 mH
    inductor L2 c d 2 mH
    current J gnd > c 1 A
    resistor R1 b gnd 1 Mohm
    resistor R2 d gnd 1 kohm
    """
    assert unstable_frequencies(equiv.parse(text)) == []


@pytest.mark.parametrize("mu", [1.5, 2.9, 3.1, 5.0])
def test_bridge_oscillator_starts_at_a_gain_of_three(mu: float) -> None:
    """The series-parallel RC bridge oscillates where the gain passes 3 (classical, from memory)."""
    text = f"""
    vcvs A +o -gnd mu {mu} senses V:p
    resistor R1 o q 10 kohm
    capacitor C1 q p 10 nF
    resistor R2 p gnd 10 kohm
    capacitor C2 p gnd 10 nF
    """
    unstable = unstable_frequencies(equiv.parse(text))
    assert bool(unstable) == (mu > 3)
    rc = 1e-4
    roots = np.roots([rc**2, (3 - mu) * rc, 1])
    for s in unstable:
        assert np.abs(roots - s).min() <= 1e-6 * abs(s)


def test_lossless_resonators_are_not_called_unstable() -> None:
    text = "current J gnd > a 1 A\ninductor L a gnd 1 mH\ncapacitor C a gnd 1 nF\n"
    assert unstable_frequencies(equiv.parse(text)) == []
