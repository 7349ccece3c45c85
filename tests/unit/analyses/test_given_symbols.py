"""Parameters of a file as symbols: whichever way one comes into a value, the formula follows it."""

from __future__ import annotations

import pytest
import sympy

import equiv
from equiv.analyses.superpose import Superposition

BLOCK = """
    given R = {R} ohm
    block SECTION (a b) r=1 ohm
      given twice = (2*r)
      resistor Rx a b r
      resistor Ry a b twice
    end
    voltage V1 +a -gnd 10 V
    use SECTION U (a b) r=R
    resistor R2 b gnd 50 ohm
    """
FIELDS = """
    given R = {R} ohm
    given g = {g}
    voltage V1 +a -gnd 10 V
    resistor R1 a b 100 ohm
    opamp U +b -o o gain g rin (10*R) rout R
    resistor R5 o gnd R
    """
TWOPORT = """
    given R = {R} ohm
    voltage V1 +a -gnd 10 V
    twoport T +a -gnd +b -gnd z 80 ohm R R (2*R)
    resistor R5 b gnd (R^2/10 ohm)
    """
SQUARE = """
    given p = {p} ohm
    given q = (p/2)
    given k = {k}
    voltage V1 +a -gnd (k*2 V)
    resistor R1 a b (p^2/q)
    resistor R2 b gnd (k*q)
    resistor R3 b gnd (sqrt(2)*p)
    """
TURNS = """
    given n = {n}
    voltage V1 +a -gnd 10 V
    resistor R1 a b 4 ohm
    transformer T +b -gnd +c -gnd ratio n
    resistor R2 c gnd 1 ohm
    """
COUPLED = """
    frequency 1000 rad/s
    given L = {L} mH
    given k = {k}
    voltage V1 +a -gnd 1 V
    inductor L1 a gnd L
    inductor L2 b gnd (4*L)
    coupling K L1 L2 k k
    resistor R b gnd 10 ohm
    """


def total(found: Superposition) -> complex:
    """The sum of the first quantity's terms."""
    (at, *_) = found.data()["quantities"][0]["frequencies"]
    return complex(at["total"]["re"], at["total"]["im"])


@pytest.mark.parametrize(
    ("text", "asked", "here", "there"),
    [
        (BLOCK, "V:b", {"R": "100"}, {"R": "7"}),
        (FIELDS, "V:b", {"R": "100", "g": "5"}, {"R": "30", "g": "40"}),
        (FIELDS, "I:U", {"R": "100", "g": "-5"}, {"R": "30", "g": "40"}),
        (TWOPORT, "V:b", {"R": "12"}, {"R": "31"}),
        (SQUARE, "I:R2", {"p": "4", "k": "3"}, {"p": "9", "k": "0.5"}),
        (SQUARE, "I:R1", {"p": "4", "k": "-3"}, {"p": "9", "k": "0.5"}),
        (TURNS, "V:c", {"n": "3"}, {"n": "0.7"}),
        (TURNS, "I:V1", {"n": "-3"}, {"n": "2"}),
        (COUPLED, "V:b", {"L": "2", "k": "1"}, {"L": "5", "k": "-0.25"}),
        (COUPLED, "V:b", {"L": "2", "k": "0"}, {"L": "5", "k": "0.9"}),
    ],
)
def test_the_formula_is_right_at_another_value_of_the_parameters(
    text: str, asked: str, here: dict[str, str], there: dict[str, str]
) -> None:
    names = list(here)
    found = equiv.superpose(equiv.parse(text.format(**here)), asked, symbolic=names)
    assert all(check.passed for check in found.checks)
    formula = found.to_sympy()
    assert {s.name for s in formula.free_symbols} - {"s"} == set(names)
    elsewhere = equiv.parse(text.format(**there))
    scale = {name: 1e-3 if name == "L" else 1 for name in names}
    point = {name: sympy.Float(there[name]) * scale[name] for name in names}
    point["s"] = sympy.I * elsewhere.frequency.omega
    by_name = {symbol: point[symbol.name] for symbol in formula.free_symbols}
    expected = total(equiv.superpose(elsewhere, asked))
    assert complex(formula.subs(by_name)) == pytest.approx(expected, rel=1e-12)


def test_a_derivative_counts_every_place_of_the_parameter() -> None:
    text = FIELDS.format(R="100", g="{g}")
    found = equiv.superpose(
        equiv.parse(text.format(g="5")), "V:b", symbolic="g", derivative="g"
    ).to_sympy()
    exact = [
        sympy.Rational(str(equiv.superpose(equiv.parse(text.format(g=g)), "V:b", exact=True)
                           .quantities[0].frequencies[0].total.real))
        for g in ("4.999", "5.001")
    ]  # fmt: skip
    (g,) = found.free_symbols
    slope = sympy.diff(found, g).subs(g, 5)
    assert float(slope) == pytest.approx(
        float((exact[1] - exact[0]) / sympy.Rational("0.002")), rel=1e-6
    )
    # A. by hand: R + 50 ohm
    by_block = equiv.superpose(
        equiv.parse("given R = 100 ohm\nblock B (a b) r=1\nresistor x a b r\nend\n"
                    "voltage V1 +a -gnd 10 V\nuse B U (a b) r=R\nresistor R2 b gnd 50 ohm\n"),
        "V:b", symbolic="R", derivative="R",
    )  # fmt: skip
    (r,) = by_block.to_sympy().free_symbols
    assert sympy.cancel(by_block.to_sympy() - 500 / (r + 50)) == 0


def test_a_named_element_is_a_symbol_of_its_own() -> None:
    text = """
        given R = 10 ohm
        voltage V1 +a -gnd 10 V
        resistor R1 a b R
        resistor R2 b gnd (2*R)
        resistor R3 b gnd (R + 1 ohm)
        """
    found = equiv.superpose(equiv.parse(text), "V:b", symbolic="R,R1,R3")
    r, r1, r3 = (sympy.Symbol(n) for n in ("R", "R1", "R3"))
    plain = {s: sympy.Symbol(s.name) for s in found.to_sympy().free_symbols}
    both = 2 * r * r3 / (2 * r + r3)
    assert sympy.cancel(found.to_sympy().subs(plain) - 10 * both / (r1 + both)) == 0
    with pytest.raises(equiv.UsageError, match=r"of R3, \(R \+ 1 ohm\), is no number") as error:
        equiv.superpose(equiv.parse(text), "V:b", symbolic="R,R1")
    assert "name R3 itself" in (error.value.diagnostics[0].hint or "")


@pytest.mark.parametrize(
    ("text", "element"),
    [
        ("block B (a) r=1\nresistor x a gnd (r + 1 ohm)\nend\nuse B U (a) r=p", "U.x"),
        ("opamp U +a -b b gain 1000 rin (p + 1 ohm)", "U"),
        ("vcvs E +b -gnd mu (1/(p + 1)) senses V:a", "E"),
        ("resistor Q a gnd (2^p)", "Q"),
        ("resistor Q a gnd (sqrt(p))", "Q"),
        ("frequency 50 Hz\nvoltage W +b -gnd (p) V @ 30 deg", "W"),
    ],
)
def test_what_is_no_multiple_is_refused_and_names_the_element(text: str, element: str) -> None:
    text = f"given p = 2\nvoltage V1 +a -gnd 1 V\nresistor R a gnd 1 ohm\n{text}\n"
    network = equiv.parse(text)
    with pytest.raises(equiv.UsageError, match=rf"the value of {element}\b.* of p\b"):
        equiv.superpose(network, "I:R", symbolic="p")
    found = equiv.superpose(network, "I:R", symbolic=["p", element])
    assert found.checks[0].passed


def test_what_a_formula_cannot_follow_is_refused() -> None:
    text = "given p = 2\n{}\nvoltage V1 +a -gnd (p) V\nresistor R a gnd 1 ohm\n"
    network = equiv.parse(text.format("frequency (100*p) Hz"))
    with pytest.raises(equiv.UsageError, match="a frequency of the file depends on p"):
        equiv.superpose(network, "I:R", symbolic="p")
    peak = equiv.parse(text.format("frequency 50 Hz\nphasors peak"))
    with pytest.raises(equiv.UsageError, match="V1 is made of a parameter as a peak value"):
        equiv.superpose(peak, "I:R", symbolic="p")
    assert equiv.superpose(peak, "I:R", symbolic="p,V1").checks[0].passed
    changed = equiv.Network(elements=peak.elements, given=peak.given)
    with pytest.raises(equiv.UsageError, match="was changed after it was read"):
        equiv.superpose(changed, "I:R", symbolic="p")


def test_a_parameter_that_a_limit_keeps_small_is_followed() -> None:
    text = COUPLED.format(L="2", k="1").replace("k k", "M (2*k*L)")
    found = equiv.superpose(equiv.parse(text), "V:b", symbolic="L,k")
    known = equiv.superpose(equiv.parse(COUPLED.format(L="2", k="1")), "V:b", symbolic="L,k")
    assert str(found.to_sympy()) == str(known.to_sympy())
