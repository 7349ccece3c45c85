"""What formulas tell, put to the proof: where there is no solution, derivatives, degrees, numbers."""

import pytest
import sympy
from flint import Ordering, fmpz_mpoly_ctx

import equiv
from equiv.equations.symbolic.conditions import Ratio, derivative, vanishing
from equiv.equations.symbolic.sympy_form import to_sympy

NAMES = ["a", "b", "c", "s"]
RING = fmpz_mpoly_ctx.get(NAMES, Ordering.lex)
A, B, C, _ = RING.gens()
a, b, c = sympy.symbols("a b c")


@pytest.mark.parametrize(
    ("polynomial", "value"),
    [
        # a factor that has not the symbol stands in the slope and in the rest
        ((A + B) * (2 * C + 3 * A), -3 * a / 2),
        (A * B * (C - A * B), a * b),
        (6 * (A + B) * C + 4 * (A + B), -sympy.Rational(2, 3)),
        (B * C + A, -a / b),
    ],
)
def test_the_value_at_which_a_polynomial_vanishes(polynomial: object, value: sympy.Expr) -> None:
    found = vanishing(polynomial, 2, NAMES)
    assert found is not None
    assert sympy.cancel(to_sympy(found) - value) == 0


@pytest.mark.parametrize("symbol", [0, 1, 2])
def test_a_derivative_is_that_of_sympy(symbol: int) -> None:
    top, bottom = (A + B) * C - 2 * A * B, (A + C) * (B + C)
    found = derivative(Ratio(top, bottom), symbol).written(NAMES)
    ratio = ((a + b) * c - 2 * a * b) / ((a + c) * (b + c))
    assert sympy.cancel(to_sympy(found) - sympy.diff(ratio, (a, b, c)[symbol])) == 0


FEEDBACK = """
voltage Vs +a -gnd 1 V
resistor R1 a b 1 ohm
resistor R2 b gnd 2 ohm
resistor R3 c b 3 ohm
vcvs E +c -gnd mu 5 senses V:b
"""


def test_at_the_value_that_fails_the_network_has_no_solution() -> None:
    network = equiv.parse(FEEDBACK)
    data = equiv.superpose(network, "V:b", symbolic=True).data()["quantities"][0]
    (fails,) = data["fails"]
    assert fails["symbol"] == "E"
    # the current law at b: 1/R1 + 1/R2 + (1 - mu)/R3 = 0
    assert fails["value"]["re"] == 1 + 3 * (1 + 0.5)
    with pytest.raises(equiv.NoUniqueSolutionError):
        equiv.solve(equiv.parse(FEEDBACK.replace("mu 5", "mu 5.5")), exact=True)


def test_a_wrong_value_is_found_out(monkeypatch: pytest.MonkeyPatch) -> None:
    from equiv.analyses.formulas import told
    from equiv.equations.symbolic.expression import Number, product

    right = told.vanishing

    def wrong(*words: object) -> object:
        return product(Number(2), right(*words))

    network = equiv.parse(FEEDBACK)
    fine = equiv.superpose(network, "V:b", symbolic=True)
    assert fine.exit_status == 0
    assert any("without a unique solution" in check.name for check in fine.checks)
    monkeypatch.setattr(told, "vanishing", wrong)
    assert equiv.superpose(network, "V:b", symbolic=True).exit_status == 1


def test_one_denominator_for_two_quantities_that_differ_by_a_number() -> None:
    text = "voltage V1 +a -gnd 10 V\nresistor R1 a b 2 ohm\nresistor R2 b gnd 3 ohm\n"
    network = equiv.parse(text + "resistor R3 b gnd 7 ohm\nresistor R4 b gnd 5 ohm\n")
    asked = ["V:b", "I:R2", "I:R3", "I:R4", "I:R1"]
    found = equiv.superpose(network, *asked, symbolic="V1,R1")
    exact = equiv.superpose(network, *asked, exact=True)
    assert found.exit_status == 0
    for own, other in zip(found.quantities, exact.quantities, strict=True):
        assert own.frequencies[0].total == pytest.approx(complex(other.frequencies[0].all_on))
    names = [q.answer.name for q in found.quantities]
    assert len(set(names)) < len(names)


@pytest.mark.parametrize(("capacitors", "last"), [(20, "C"), (17, "L")])
def test_the_degree_of_what_is_not_written_out(capacitors: int, last: str) -> None:
    lines = ["voltage Vin +n0 -gnd 1 V"]
    for k in range(20):
        lines.append(f"resistor A{k} n{k} n{k + 1} 1 kohm")
        shunt = f"capacitor B{k} n{k + 1} gnd 1 nF" if k < capacitors else None
        lines.append(shunt or f"inductor B{k} n{k + 1} gnd 1 mH")
    found = equiv.superpose(equiv.parse("\n".join(lines)), "V:n20", symbolic=True)
    q = found.data()["quantities"][0]
    # of order 20 with one kind of store or both: each is independent of the others
    assert q["denominator"]["degree"] == 20
    assert any("degree" in n and "20" in n for t in found.tables() for n in t.notes)


def test_the_degree_by_elimination_is_that_of_the_polynomials() -> None:
    from equiv.equations.symbolic.bordered import bordered
    from equiv.equations.symbolic.compressed import compressed
    from equiv.equations.symbolic.degree import degree_in_s
    from equiv.equations.symbolic.solver import FormulaSolver
    from equiv.language import quantity

    text = (
        "voltage V1 +a -gnd 1 V\ninductor L1 a b 1 H\ncapacitor C1 b gnd 1 F\n"
        "resistor R1 b c 1 ohm\ncapacitor C2 c gnd 1 F\ninductor L2 c d 1 H\n"
        "resistor R2 d gnd 1 ohm\nvccs G gnd > c g 1 S senses V:d\n"
    )
    solver = FormulaSolver(equiv.parse(text))
    for word in ("V:b", "V:c", "V:d", "I:L1", "I:C2", "V:L2", "I:R2"):
        matrix = compressed(bordered(solver.system, solver.row(quantity(word))))
        answer = solver.answer(quantity(word))
        assert answer.family is not None
        assert degree_in_s(matrix, solver.point) == answer.family.degree
