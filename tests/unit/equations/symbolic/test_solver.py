"""Formulas from a network: styles, proof, names, bounds."""

import random

import pytest
import sympy

import equiv
from equiv.equations.symbolic import modular
from equiv.equations.symbolic.expression import Name, product
from equiv.equations.symbolic.infix import text_of
from equiv.equations.symbolic.solver import FormulaSolver
from equiv.equations.symbolic.sympy_form import with_parts
from equiv.language import quantity


def ladder(sections: int) -> str:
    lines = ["voltage Vs +n0 -gnd 1 V"]
    for i in range(sections):
        lines += [f"resistor A{i} n{i} n{i + 1} ?", f"resistor B{i} n{i + 1} gnd ?"]
    return "\n".join(lines) + "\n"


@pytest.mark.parametrize(
    ("sections", "style", "terms"),
    [(3, "nested", 13), (5, "named", 89), (7, "sequence", 610), (12, "sequence", 75025)],
)
def test_the_style_follows_the_length(sections: int, style: str, terms: int) -> None:
    solver = FormulaSolver(equiv.parse(ladder(sections)))
    asked = quantity(f"V:n{sections}")
    answer = solver.answer(asked)
    assert (answer.style, answer.terms) == (style, terms)
    assert solver.disagreements(answer, asked) == 0


def test_all_styles_are_the_same_formula() -> None:
    asked = quantity("V:n6")
    plain = FormulaSolver(equiv.parse(ladder(6)))
    named = plain.answer(asked)
    long = FormulaSolver(equiv.parse(ladder(6)), expand=True).answer(asked)
    matrix_way = plain._sequence(_matrix(plain, asked), None, None)
    values = {n: sympy.Rational(random.Random(n).randint(1, 99), 7) for n in plain.names}
    found = {with_parts(a.coefficient(0), a.where).subs(values) for a in (named, long, matrix_way)}
    assert len(found) == 1


def _matrix(solver: FormulaSolver, asked: equiv.quantity) -> object:  # type: ignore[valid-type]
    from equiv.equations.symbolic.bordered import bordered

    return bordered(solver.system, solver.row(asked))


def test_a_wrong_formula_fails_its_proof() -> None:
    from dataclasses import replace

    solver = FormulaSolver(equiv.parse(ladder(3)))
    asked = quantity("V:n3")
    answer = solver.answer(asked)
    wrong = replace(answer, numerators=(product(Name("A0"), answer.numerators[0]),))
    assert solver.disagreements(wrong, asked) == 1
    shifted = replace(answer, denominator=Name("A0"), name="")
    assert solver.disagreements(shifted, asked) == 1


def test_the_modulus_is_prime() -> None:
    assert sympy.isprime(modular.PRIME) and modular.PRIME == 2**61 - 1


def test_names_of_every_sort_are_ordinary_in_formulas() -> None:
    names = ["s", "D", "lambda", "R.1", "R/1", "4R", "Ωβ", "日本", "k1", "x1", "I", "is"]
    text = "voltage Vs +a -gnd 1 V\n" + "".join(f"resistor {n} a b ?\n" for n in names)
    text += "resistor Z b gnd ?\n"
    found = equiv.superpose(equiv.parse(text), "V:b", symbolic=True)
    symbols = found.data()["symbols"]
    assert symbols["R_1"] == "R.1" and symbols["R_1_2"] == "R/1" and symbols["x4R"] == "4R"
    assert (
        symbols["s_2"] == "s" and symbols["lambda_2"] == "lambda" and symbols["omegabeta"] == "Ωβ"
    )
    assert all(name.isascii() and name.isidentifier() for name in symbols)
    assert found.checks[0].passed


def test_hostile_names_reach_no_evaluator_and_no_markup() -> None:
    text = """
        voltage __import__ +a -gnd 1 V
        resistor exec:system a b ?
        resistor R''' b gnd ?
        """
    found = equiv.superpose(equiv.parse(text), "V:b", symbolic=True)
    assert found.checks[0].passed
    term = found.data()["quantities"][0]["frequencies"][0]["terms"][0]
    assert term["contribution"]["formula"] == "__import__*R___/(exec_system + R___)"
    for form in ("latex", "markdown", "csv", "html", "table"):
        assert found.render(form)


def test_kinds_with_several_values_have_a_symbol_for_each() -> None:
    text = """
        voltage Vs +a -gnd 1 V
        opamp U +a -b o gain 1e5 rin 1 Mohm rout 75 ohm
        resistor R1 b o 1 kohm
        twoport N +o -gnd +p -gnd h 100 0.1 50 1
        transformer T +p -gnd +q -gnd ratio 3:2
        resistor R2 q gnd 1 kohm
        """
    solver = FormulaSolver(equiv.parse(text))
    names = "Vs U_gain U_rin U_rout R1 N_h11 N_h12 N_h21 N_h22 T R2"
    assert solver.names == [*names.split(), "s"]
    assert solver.named[9].number == sympy.Rational(3, 2)


def test_a_coupling_is_one_symbol_without_a_square_root() -> None:
    text = """
        frequency 50 Hz
        voltage Vs +a -gnd 1 V
        inductor L1 a gnd 2 H
        inductor L2 b gnd 3 H
        coupling K L1 L2 k 0.5
        resistor R b gnd 1 ohm
        """
    network = equiv.parse(text)
    found = equiv.superpose(network, "V:b", symbolic=True)
    k, l1, l2, r, s, vs = sympy.symbols("K L1 L2 R s Vs")
    expected = vs * k * r / (r * l1 + s * (l1 * l2 - k**2))
    assert sympy.cancel(found.to_sympy() - expected) == 0
    assert all(check.passed for check in found.checks)
    # k·√(L1·L2) = 0.5·√6 is not rational: the coupling stays a symbol where it is not named
    part = equiv.superpose(network, "V:b", symbolic="R")
    assert "K" in str(part.to_sympy()) and any("irrational" in words for words in part.legend)
    whole = equiv.superpose(equiv.parse(text.replace("3 H", "8 H")), "V:b", symbolic="R")
    assert whole.to_sympy().free_symbols == {r, s}


def test_bounds_are_said_in_words() -> None:
    many = "".join(f"resistor R{i} a gnd ?\n" for i in range(201))
    with pytest.raises(equiv.UsageError, match="202 symbols; formulas are made for up to 200"):
        equiv.superpose(equiv.parse(f"current J gnd > a 1 A\n{many}"), "V:a", symbolic="J")
    long = "".join(f"resistor R{i} n{i} n{i + 1} 1 ohm\n" for i in range(501))
    with pytest.raises(equiv.UsageError, match="nodes; formulas are made for up to 300"):
        equiv.superpose(
            equiv.parse(f"current J gnd > n0 1 A\n{long}resistor E n501 gnd 1 ohm\n"), "V:n0",
            symbolic="J",
        )  # fmt: skip
    with pytest.raises(equiv.UsageError, match="terms; up to 200000 are"):
        equiv.superpose(equiv.parse(ladder(20)), "V:n20", symbolic=True, expand=True)


def test_a_dense_network_of_many_symbols_ends_in_a_sequence() -> None:
    count = 12
    text = "current J gnd > n0 1 A\n" + "".join(
        f"resistor R{i}_{j} n{i} {'gnd' if j == count else f'n{j}'} ?\n"
        for i in range(count) for j in range(i + 1, count + 1)
    )  # fmt: skip
    found = equiv.superpose(equiv.parse(text), "V:n1", symbolic=True)
    assert found.quantities[0].answer.style == "sequence"
    assert found.checks[0].passed
    # A. Cayley's number of trees, and thus of terms
    assert found.quantities[0].answer.terms == (count + 1) ** (count - 1)


def test_what_is_no_formula_is_refused_in_words() -> None:
    network = equiv.parse("voltage V +a -gnd 1 V\nresistor R a gnd 1 ohm\nshort S a b\n"
                          "given p = 2\nresistor Q b gnd (p + 1 ohm)\n")  # fmt: skip
    for words, options, message in (
        (["I:R"], {"symbolic": "R7"}, "no element and no parameter called R7"),
        (["I:R"], {"symbolic": "S"}, "S is a short and has no value"),
        (["P:R"], {"symbolic": True}, "is a power"),
        (["I:R"], {"symbolic": "R", "fails_for": "V7"}, "V7 is not a symbol"),
        (["I:R"], {"symbolic": True, "paths": True}, "--paths and --symbolic"),
        (["I:R"], {"symbolic": "p"}, r"\(p \+ 1 ohm\), is no number times powers of p"),
    ):
        with pytest.raises(equiv.UsageError, match=message):
            equiv.superpose(network, *words, **options)
    with pytest.raises(equiv.UsageError, match="--form and --symbolic"):
        equiv.port(network, "a,gnd", form="z", symbolic=True)


def test_a_network_without_a_solution_has_no_formula() -> None:
    text = "voltage V1 +a -gnd ?\nvoltage V2 +a -gnd ?\nresistor R a gnd ?\n"
    with pytest.raises(equiv.NoUniqueSolutionError, match="D = 0 whatever the values are"):
        equiv.superpose(equiv.parse(text), "I:R", symbolic=True)


def test_values_at_which_there_is_no_solution_leave_the_formula() -> None:
    text = """
        vcvs E +o -gnd mu (11/6) senses V:x
        resistor R1 o x 5 ohm
        resistor R2 x gnd 6 ohm
        current J gnd > x 1 A
        """
    found = equiv.superpose(equiv.parse(text), "V:x", symbolic=True)
    assert found.exit_status == 4
    assert found.data()["quantities"][0]["frequencies"][0]["total"]["re"] is None
    (failing,) = found.quantities[0].failing
    assert failing.value is not None and text_of(failing.value.expression) == "(R1 + R2)/R2"
    assert "no unique" in found.cautions[-1].message or "no-unique" in found.cautions[-1].code


def test_a_common_factor_in_s_leaves_plain_numbers_in_the_data() -> None:
    import json

    text = """
        frequency 50 Hz
        voltage Vs +a -gnd 1 V
        resistor R1 a b ?
        capacitor C1 b gnd ?
        capacitor C2 b gnd ?
        resistor R2 a c ?
        inductor L2 c d ?
        capacitor C3 d gnd ?
        port OUT +b -gnd
        """
    found = equiv.port(equiv.parse(text), "OUT", symbolic=True)
    data = json.loads(json.dumps(found.to_dict()))
    assert data["result"]["denominators"][0]["formula"] == "R1*(C1 + C2)*s + 1"
    assert data["result"]["denominators"][0]["degree"] == 1
