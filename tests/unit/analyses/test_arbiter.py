"""Where two floating-point methods disagree, exact arithmetic decides and says which was wrong."""

from fractions import Fraction

import pytest

import equiv
from equiv.analyses.superpose import Superposition

STIFF = """
frequency {frequency}
current J gnd > a 2 A
resistor R1 a b 1e-6 ohm
resistor R2 b gnd 1 Mohm
resistor R3 a gnd 3 Mohm
resistor R4 b gnd {last} Mohm
find I:R1
"""


def exact_current(last: int) -> float:
    """The current in R1 by hand: J divides between R3 and R1 with R2 ∥ R4 behind it."""
    behind = Fraction(10) ** 6 * last / (last + 1)
    through = Fraction(1, 10**6) + behind
    return float(2 * Fraction(3 * 10**6) / (Fraction(3 * 10**6) + through))


def verdict(result: Superposition) -> str:
    (words,) = [c.message for c in result.cautions if c.code == "digits-lost"]
    return words


@pytest.mark.parametrize("last", [1, 5, 70])
@pytest.mark.parametrize("frequency", ["0 Hz", "50 Hz", "314 rad/s"])
def test_the_nodal_form_is_named_where_it_loses_digits(last: int, frequency: str) -> None:
    result = equiv.superpose(equiv.parse(STIFF.format(last=last, frequency=frequency)))
    at = result.quantities[0].frequencies[0]
    assert at.total.real == pytest.approx(exact_current(last), rel=1e-15)
    assert at.terms[0].check is not None
    assert at.terms[0].check.real == pytest.approx(exact_current(last), rel=1e-12)
    words = verdict(result)
    assert words.startswith("the nodal form has lost digits here (a term is off by ")
    assert "exact rational arithmetic gives the terms" in words
    assert result.exit_status == 0
    assert not any(hasattr(t.contribution, "exact") for t in at.terms)


def test_nothing_is_said_where_both_agree() -> None:
    text = STIFF.format(last=5, frequency="0 Hz").replace("1e-6 ohm", "10 ohm")
    assert not [c for c in equiv.superpose(equiv.parse(text)).cautions if c.code == "digits-lost"]


def test_both_may_have_lost_them() -> None:
    # a current of 296 pA between nodes that differ by 2 mV and stand at 2.8 kV
    text = """
    resistor R1 n0 gnd 396 ohm
    resistor R2 n1 n0 6.01e-06 ohm
    resistor R3 n2 n1 1.11e+06 ohm
    resistor R4 n3 n2 0.000307 ohm
    resistor R5 n2 n3 4.18e+06 ohm
    resistor R6 n0 n3 6.08e+06 ohm
    current J0 n3 > n2 6.93 A
    current J1 gnd > n0 7.07 A
    """
    network = equiv.parse(text)
    result = equiv.superpose(network, "I:R3")
    true = equiv.superpose(network, "I:R3", exact=True)
    near, far = (r.quantities[0].frequencies[0].total for r in (result, true))
    assert near.real == pytest.approx(complex(far).real, rel=1e-15)
    assert "have both lost digits here" in verdict(result)
    assert result.exit_status == 0 and "in exact arithmetic" in result.how_checked


def test_large_networks_are_left_to_the_branch_current_form() -> None:
    chain = "".join(f"resistor C{k} {f'c{k - 1}' if k else 'gnd'} c{k} 1 ohm\n" for k in range(250))
    result = equiv.superpose(equiv.parse(STIFF.format(last=5, frequency="0 Hz") + chain))
    codes = {c.code for c in result.cautions}
    assert "branch-current-form" in codes and "digits-lost" not in codes
    assert result.quantities[0].frequencies[0].total.real == pytest.approx(
        exact_current(5), rel=1e-9
    )
