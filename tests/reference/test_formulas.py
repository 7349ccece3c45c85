"""Formulas against facts of the textbooks, each with its source."""

from math import prod

import pytest
import sympy

import equiv

R1, R2, R3, R4, R5 = sympy.symbols("R1:6")


def total(text: str, asked: str, **options: object) -> sympy.Expr:
    """The formula of a quantity."""
    found = equiv.superpose(
        equiv.parse(text), asked, symbolic=options.pop("symbolic", True), **options
    )
    assert all(check.passed for check in found.checks)
    return found.to_sympy()


def impedance(text: str, port: str, **options: object) -> sympy.Expr:
    """The formula of a port's impedance."""
    found = equiv.port(equiv.parse(text), port, symbolic=True, **options)
    assert all(check.passed for check in found.checks)
    return found.to_sympy("impedance")


def same(one: sympy.Expr, other: sympy.Expr) -> bool:
    return sympy.cancel(one - other) == 0


def test_a_bridge_is_balanced_where_its_products_are_equal() -> None:
    # S. H. Christie 1833, C. Wheatstone 1843 (from memory): no current where R1·R4 = R2·R3
    current = total(
        """
        voltage Vs +a -gnd 10 V
        resistor R1 a b 1 ohm
        resistor R2 b gnd 2 ohm
        resistor R3 a c 3 ohm
        resistor R4 c gnd 4 ohm
        resistor R5 b c 5 ohm
        """,
        "I:R5",
    )
    top, _ = sympy.fraction(sympy.cancel(current))
    assert same(top, sympy.Symbol("Vs") * (R2 * R3 - R1 * R4))


def test_the_output_resistance_of_a_follower() -> None:
    # A voltage follower of open-loop gain A: rout/(1 + A) (P. Horowitz, W. Hill, The Art of
    # Electronics, chapter 4, from memory); its input is left open here
    rout, gain = sympy.symbols("U_rout U_gain")
    found = impedance(
        """
        opamp U +in -out out gain 1e5 rout 75 ohm
        resistor Rin in gnd 1 Mohm
        """,
        "out,gnd",
    )
    assert same(found, rout / (1 + gain))


def test_the_output_resistance_of_an_emitter_follower() -> None:
    # (rpi + Rs)/(1 + beta) parallel to Re (P. R. Gray, R. G. Meyer, Analysis and Design of Analog
    # Integrated Circuits, common-collector stage, from memory; ro left out)
    rs, rpi, beta, re = sympy.symbols("Rs rpi beta1 Re")
    found = impedance(
        """
        voltage Vs +s -gnd 1 V
        resistor Rs s b 1 kohm
        resistor rpi b e 2 kohm
        cccs beta1 gnd > e beta 100 senses I:rpi
        resistor Re e gnd 1 kohm
        """,
        "e,gnd",
    )
    series = (rpi + rs) / (1 + beta)
    assert same(found, series * re / (series + re))


def test_miller() -> None:
    # J. M. Miller 1920 (from memory): an impedance across an inverting gain -A looks like Z/(1 + A)
    gain, c, s = sympy.symbols("A C s")
    found = impedance(
        """
        vcvs A +gnd -out mu 100 senses V:in
        capacitor C in out 1 pF
        """,
        "in,gnd",
    )
    assert same(found, 1 / (s * c * (1 + gain)))


def test_blackman() -> None:
    # R. B. Blackman, Effect of feedback on impedance (1943, from memory):
    # Z = Z0·(1 + T_short)/(1 + T_open), here for a transconductance around an emitter resistor
    gm, r = sympy.symbols("gm Re")
    text = """
        vccs gm c > e g 40 mS senses V:in,e
        resistor Re e gnd 1 kohm
        resistor Rc c gnd 5 kohm
        short Sh in gnd
        """
    found = impedance(text, "e,gnd")
    # with the transconductance dead Z0 = Re; return ratios: port open gm·Re, port shorted 0
    assert same(found, r * (1 + 0) / (1 + gm * r))


def test_the_null_of_a_twin_t() -> None:
    # H. W. Augustadt 1938, twin-T with R, R, R/2 and C, C, 2C (from memory): H = 0 at s = j/(R·C)
    r, c, s = sympy.symbols("R C s")
    text = """
        given R = 10 kohm
        given C = 10 nF
        voltage Vs +in -gnd 1 V
        resistor Ra in a R
        resistor Rb a out R
        capacitor C2 a gnd (2*C)
        capacitor Ca in b C
        capacitor Cb b out C
        resistor R2 b gnd (R/2)
        """
    found = total(text, "V:out", symbolic="R,C") / 1
    top, bottom = sympy.fraction(sympy.cancel(found))
    assert same(found, (1 + (s * r * c) ** 2) / (1 + 4 * s * r * c + (s * r * c) ** 2))
    assert top.subs(s, sympy.I / (r * c)).expand() == 0
    assert bottom.subs(s, sympy.I / (r * c)).expand() != 0
    zeros = equiv.superpose(equiv.parse(text), "V:out", symbolic="R,C").quantities[0].response
    assert zeros is not None and zeros.rows[0].zeros is not None
    assert sorted(z.imag for z in zeros.rows[0].zeros) == pytest.approx([-1e4, 1e4])


def test_the_weights_of_an_r_2r_ladder() -> None:
    # Each bit of the ladder gives half as much as the next (B. M. Gordon, 1950s, from memory)
    bits = 6
    lines = ["given R = 10 kohm", "resistor T n0 gnd (2*R)"]
    for i in range(bits):
        lines += [f"voltage B{i} +b{i} -gnd 1 V", f"resistor L{i} b{i} n{i} (2*R)"]
        if i:
            lines.append(f"resistor S{i} n{i - 1} n{i} R")
    found = equiv.superpose(
        equiv.parse("\n".join(lines) + "\n"),
        f"V:n{bits - 1}",
        symbolic=["R", *(f"B{i}" for i in range(bits))],
    )
    (q,) = found.quantities
    data = found.data()["quantities"][0]["frequencies"][0]["terms"]
    assert [sympy.Rational(t["coefficient"]["formula"]) for t in data] == [
        sympy.Rational(1, 2 ** (bits - i)) for i in range(bits)
    ]
    assert not q.answer.where
    port = equiv.port(equiv.parse("\n".join(lines) + "\n"), f"n{bits - 1},gnd", symbolic="R")
    assert port.to_sympy() == sympy.Symbol("R")


def test_a_ladder_of_equal_resistors_has_fibonacci_numbers() -> None:
    # The input resistance of n sections of R, R is R·F(2n+1)/F(2n) (A. M. Morgan-Voyce 1959, from
    # memory; also Fibonacci Quarterly 1, 1963)
    lines = ["given R = 1 ohm"]
    for i in range(7):
        lines += [f"resistor A{i} n{i} n{i + 1} R", f"resistor B{i} n{i + 1} gnd R"]
    found = equiv.port(equiv.parse("\n".join(lines) + "\n"), "n0,gnd", symbolic="R").to_sympy()
    assert found == sympy.Rational(610, 377) * sympy.Symbol("R")


def test_the_number_of_terms_of_a_ladder_is_a_fibonacci_number() -> None:
    # Spanning trees of the graph that the determinant sums over (G. Kirchhoff 1847)
    for sections, trees in ((2, 5), (3, 13), (4, 34), (5, 89)):
        lines = ["voltage Vs +n0 -gnd 1 V"]
        for i in range(sections):
            lines += [f"resistor A{i} n{i} n{i + 1} ?", f"resistor B{i} n{i + 1} gnd ?"]
        found = equiv.superpose(
            equiv.parse("\n".join(lines) + "\n"), f"V:n{sections}", symbolic=True
        )
        assert found.quantities[0].answer.terms == trees


def test_the_complete_graph_has_cayleys_number_of_terms() -> None:
    # A. Cayley 1889: n^(n-2) trees on n labelled nodes
    nodes = ["n1", "n2", "n3", "n4", "gnd"]
    lines = ["current J gnd > n1 1 A"]
    lines += [
        f"resistor R{i}{j} {nodes[i]} {nodes[j]} ?" for i in range(5) for j in range(i + 1, 5)
    ]
    found = equiv.superpose(equiv.parse("\n".join(lines) + "\n"), "V:n2", symbolic=True)
    assert found.quantities[0].answer.terms == 5**3


def test_a_singular_gain() -> None:
    # A published exercise of the common sort: one loop around a voltage-controlled source fails
    # where mu·beta = 1 (H. S. Black's loop gain of one, 1934)
    text = """
        vcvs mu +o -gnd mu 3 senses V:x
        resistor R1 o x 5 ohm
        resistor R2 x gnd 6 ohm
        current J gnd > x 1 A
        """
    found = equiv.superpose(equiv.parse(text), "V:x", symbolic=["mu"])
    (failing,) = found.quantities[0].failing
    assert failing.value is not None
    assert failing.value.data()["formula"] == "11/6"
    assert same(found.to_sympy(), 30 / (11 - 6 * sympy.Symbol("mu")))


def test_delta_and_star() -> None:
    # A. E. Kennelly 1899: Ra = R12·R13/(R12 + R13 + R23)
    text = """
        resistor R1 a b ?
        resistor R2 b gnd ?
        resistor R3 gnd a ?
        """
    found = impedance(text, "a,gnd")
    star = [R1 * R3 / (R1 + R2 + R3), R2 * R3 / (R1 + R2 + R3)]
    assert same(found, sum(star))


def test_a_chain_of_dividers() -> None:
    # Buffered dividers multiply (common practice)
    text = "voltage Vs +n0 -gnd 1 V\n" + "".join(
        f"resistor A{i} n{i} m{i} ?\nresistor B{i} m{i} gnd ?\nopamp U{i} +m{i} -n{i + 1} n{i + 1}\n"
        for i in range(3)
    )
    a, b = sympy.symbols("A0:3"), sympy.symbols("B0:3")
    expected = sympy.Symbol("Vs") * prod(y / (x + y) for x, y in zip(a, b, strict=True))
    assert same(total(text, "V:n3"), expected)
