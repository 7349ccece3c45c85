"""Cases worked out by hand and twice by machine (own construction; no published source)."""

import cmath
import math

import pytest

import equiv
from equiv.analyses.superpose import Superposition
from equiv.errors import ExitStatus

REVERSAL = """
voltage   U    +a -gnd   12 V
resistor  Ra    a   b    2 kohm
resistor  Rb    b  gnd   3 kohm
current   J    gnd > b   4 mA
resistor  Rc    b   c    1 kohm
vcvs      E2   +c -gnd   mu 2 senses V:b
"""


def terms(result: Superposition, index: int = 0) -> dict[str, complex]:
    return {t.source: t.number for t in result.quantities[index].frequencies[0].terms}


def test_reversal_terms_and_total() -> None:
    result = equiv.superpose(equiv.parse(REVERSAL), "V:b")
    found = terms(result)
    assert found["U"] == pytest.approx(-36, rel=1e-12)
    assert found["J"] == pytest.approx(-24, rel=1e-12)
    at = result.quantities[0].frequencies[0]
    assert at.total == pytest.approx(-60, rel=1e-12)
    assert [t.check for t in at.terms] == pytest.approx([-36, -24], rel=1e-12)
    assert all(s.reversed for t in at.terms for s in t.controlled)
    assert result.exit_status == 0


def test_reversal_is_not_what_comes_of_switching_the_controlled_source_off() -> None:
    dead = REVERSAL.replace("vcvs      E2   +c -gnd   mu 2 senses V:b", "short E2 c gnd")
    found = terms(equiv.superpose(equiv.parse(dead), "V:b"))
    assert found == {"U": pytest.approx(36 / 11), "J": pytest.approx(24 / 11)}


@pytest.mark.parametrize("mu", [0.5, 1.5, 1.83, 3, 100])
def test_reversal_in_closed_form(mu: float) -> None:
    text = REVERSAL.replace("mu 2", f"mu {mu}")
    at = equiv.superpose(equiv.parse(text), "V:b").quantities[0].frequencies[0]
    assert at.total == pytest.approx(-3 * (12 + 2000 * 0.004) / (6 * mu - 11), rel=1e-9)


def test_reversal_has_no_solution_at_the_singular_gain() -> None:
    text = REVERSAL.replace("mu 2", "mu (11/6)")
    with pytest.raises(equiv.NoUniqueSolutionError, match="the gain of E2"):
        equiv.superpose(equiv.parse(text), "V:b")


def test_reversal_port_is_negative() -> None:
    result = equiv.port(equiv.parse(REVERSAL), "b,gnd")
    assert result.first.impedance[0, 0] == pytest.approx(-6000, rel=1e-12)
    assert "resistance-not-positive" in {c.code for c in result.cautions}
    assert "Blackman's formula" in {c.name for c in result.checks}
    assert result.exit_status == 0


def test_reversal_power_balance() -> None:
    state = {e.name: e.power.real for e in equiv.solve(equiv.parse(REVERSAL)).first.elements}
    assert state["Ra"] + state["Rb"] + state["Rc"] == pytest.approx(7.392, rel=1e-12)
    assert state["J"] == pytest.approx(0.24, rel=1e-12)
    assert state["U"] == pytest.approx(-0.432, rel=1e-12)
    assert state["E2"] == pytest.approx(-7.2, rel=1e-12)


def test_reversal_with_a_capacitor_is_unstable_on_every_result() -> None:
    network = equiv.parse(REVERSAL + "capacitor C b gnd 1 nF\nport B +b -gnd\n")
    results = [
        equiv.superpose(network, "V:b"),
        equiv.solve(network),
        equiv.port(network),
        equiv.check(network),
    ]
    for result in results:
        (caution,) = [c for c in result.cautions if c.code == "unstable"]
        assert "1.667e+05 1/s" in caution.message
        assert "never reached" in caution.message


def test_three_infeeds_into_one_fault() -> None:
    impedances = {"A": 0.014 + 0.28j, "B": 0.03 + 0.9j, "C": 0.12 + 1.2j}
    emf = 4160 / math.sqrt(3)
    text = "frequency 50 Hz\nshort Fault f gnd\n" + "".join(
        f"voltage {k} +{k}1 -gnd {emf!r} V @ 0 deg\nimpedance Z{k} {k}1 f {z.real}+{z.imag}j ohm\n"
        for k, z in impedances.items()
    )
    at = equiv.superpose(equiv.parse(text), "I:Fault").quantities[0].frequencies[0]
    expected = {"A": (8567, -87.14, 64.79), "B": (2667, -88.09, 20.17), "C": (1992, -84.29, 15.05)}
    for term in at.terms:
        magnitude, angle, share = expected[term.source]
        assert abs(term.number) == pytest.approx(magnitude, abs=0.5)
        assert math.degrees(cmath.phase(term.number)) == pytest.approx(angle, abs=0.005)
        assert 100 * at.share(term) == pytest.approx(share, abs=0.005)
    assert abs(at.total) == pytest.approx(13223, abs=0.5)
    assert math.degrees(cmath.phase(at.total)) == pytest.approx(-86.90, abs=0.005)


PARALLEL = """
voltage V1 +a -gnd 5 V
voltage V2 +a -gnd 5 V
resistor R a gnd 5 ohm
"""


def test_two_equal_ideal_sources_in_parallel() -> None:
    network = equiv.parse(PARALLEL)
    result = equiv.superpose(network, "I:R")
    at = result.quantities[0].frequencies[0]
    assert at.all_on == pytest.approx(1)
    assert [t.contribution for t in at.terms] == [None, None]
    assert all("loop of voltage sources" in (t.reason or "") for t in at.terms)
    assert result.exit_status == ExitStatus.DOES_NOT_EXIST
    with pytest.raises(equiv.NoUniqueSolutionError, match="V1 and V2 form a loop"):
        equiv.superpose(network, "I:V1")


def test_the_group_of_both_is_a_term_that_exists() -> None:
    text = PARALLEL.replace("5 V", "5 V group both")
    for by in ("source", "group"):
        result = equiv.superpose(equiv.parse(text), "I:R", by=by)
        (term,) = result.quantities[0].frequencies[0].terms
        assert term.members == ("V1", "V2") and term.value is None
        assert term.number == pytest.approx(1) and term.check == pytest.approx(1)
        assert result.exit_status == 0


def test_sources_that_disagree_have_no_solution() -> None:
    with pytest.raises(equiv.NoUniqueSolutionError, match="disagree by 2 V"):
        equiv.superpose(equiv.parse(PARALLEL.replace("V2 +a -gnd 5", "V2 +a -gnd 3")), "I:R")


def test_terms_that_cancel() -> None:
    text = "".join(
        f"current J{i} gnd > a {value} A\n" for i, value in enumerate(("10", "-9.9", "0.05"))
    )
    result = equiv.superpose(equiv.parse(text + "resistor R a gnd 1 ohm\n"), "V:a")
    at = result.quantities[0].frequencies[0]
    shares = [100 * (at.share(t) or 0) for t in at.terms]
    gross = [100 * (at.gross_share(t) or 0) for t in at.terms]
    assert shares == pytest.approx([6667, -6600, 33], abs=0.5)
    assert gross == pytest.approx([50.1, 49.6, 0.25], abs=0.05)
    assert at.cancellation == pytest.approx(133, abs=0.5)
    assert at.digits_lost == pytest.approx(2.1, abs=0.05)
    assert "which costs 2.1 digits" in " ".join(result.render().split())


@pytest.mark.parametrize(
    ("angle", "total"),
    [(0, 13.93), (90, 7.0), (180, 0.072)],
    ids=["in phase", "quadrature", "opposed"],
)
def test_powers_that_do_not_add(angle: int, total: float) -> None:
    """Terms of 3 W and 4 W in one resistor of 1 ohm."""
    text = f"""
    frequency 50 Hz
    current J1 gnd > a {math.sqrt(3)!r} A @ 0 deg
    current J2 gnd > a 2 A @ {angle} deg
    resistor R a gnd 1 ohm
    """
    power = equiv.superpose(equiv.parse(text), "P:R").quantities[0].frequencies[0].power
    assert [p.real for p in power.own] == pytest.approx([3, 4], rel=1e-12)
    assert power.total.real == pytest.approx(total, abs=0.005)
    assert power.cross[0][1].real == pytest.approx(power.total.real - 7, abs=1e-12)
