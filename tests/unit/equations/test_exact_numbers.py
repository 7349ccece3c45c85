"""Exact numbers, matrices of them, and which values are rational."""

import random
from decimal import Decimal
from fractions import Fraction

import numpy as np
import pytest

import equiv
from equiv.analyses.exactness import exactly
from equiv.equations.exact.matrices import Matrix, null_space, rank_of
from equiv.equations.exact.number import Exact
from equiv.equations.scalars import scalar, solved, vector, written
from equiv.equations.solution import Solver
from equiv.network import DC
from equiv.units import Rectangular


def exact(re: object, im: object = 0) -> Exact:
    return Exact.of(re) + Exact.of(im) * Exact.of(1j)


def value(x: Exact) -> complex:
    return complex(x)


def test_arithmetic_is_that_of_the_rationals() -> None:
    draw = random.Random(3)
    for _ in range(50):
        a, b, c, d = (Fraction(draw.randint(-99, 99), draw.randint(1, 99)) for _ in range(4))
        x, y = exact(a, b), exact(c, d)
        assert x + y == exact(a + c, b + d) and x - y == exact(a - c, b - d)
        assert x * y == exact(a * c - b * d, a * d + b * c)
        if y:
            assert (x / y) * y == x and 1 / y * y == 1
        assert x.conjugate() == exact(a, -b) and -x == 0 - x
        assert value(x) == complex(a, b)


def test_a_float_that_is_not_whole_makes_a_number_inexact() -> None:
    third = exact(Fraction(1, 3))
    assert (third * 3.0).exact == "1" and (0j + third).exact == "1/3"
    assert type(third * 0.5) is complex and type(0.1j + third) is complex
    assert type(np.float64(0.5) * third) is complex


def test_what_is_not_zero_never_looks_it() -> None:
    tiny = exact(Fraction(1, 10**400))
    assert tiny and abs(tiny) > 0 and complex(tiny) == 0
    assert tiny != 0 and abs(exact(10**400)) == float("inf")


def test_text_of_a_number() -> None:
    assert exact(Fraction(60, 11)).exact == "60/11"
    assert exact(Fraction(3, 5), Fraction(-4, 5)).exact == ["3/5", "-4/5"]
    assert exact(-2).exact == "-2"


def test_roots() -> None:
    assert exact(Fraction(49, 4)).sqrt() == Fraction(7, 2)
    for bad in (exact(2), exact(-4), exact(0, 4)):
        with pytest.raises(ValueError, match="irrational"):
            bad.sqrt()


def test_numbers_of_either_sort() -> None:
    assert scalar(np.float64(2.5)) == 2.5 and type(scalar(np.float64(2.5))) is complex
    assert scalar(3).exact == "3"  # type: ignore[attr-defined]
    assert vector([1.0, 2j]).dtype == complex and vector([exact(1), 0j]).dtype == object
    assert written(exact(Fraction(1, 3), Fraction(1, 4))) == Rectangular(
        Fraction(1, 3), Decimal("0.25")
    )


def random_matrix(draw: random.Random, rows: int, columns: int, complex_: bool) -> np.ndarray:
    out = np.zeros((rows, columns), object)
    for i in range(rows):
        for j in range(columns):
            out[i, j] = exact(
                Fraction(draw.randint(-9, 9), draw.randint(1, 9)),
                draw.randint(-3, 3) if complex_ else 0,
            )
    return out


@pytest.mark.parametrize("complex_", [False, True])
def test_matrices(complex_: bool) -> None:
    draw = random.Random(7)
    for size in (1, 2, 5, 9):
        a = random_matrix(draw, size, size, complex_)
        b = random_matrix(draw, size, 2, True)
        x = Matrix(a).solve(b)
        assert (a @ x == b).all()
        assert (solved(a, b[:, 0]) == x[:, 0]).all()
        # of rank 1 less than its size: the last row follows from the others
        if size > 1:
            a[-1] = sum(a[k] * exact(k + 1, 1) for k in range(size - 1))
            assert not Matrix(a).regular and rank_of(a) == size - 1
            null = null_space(a)
            assert null.shape == (size, 1)
            assert not (a @ null != 0).any() and (null != 0).any()
            with pytest.raises(np.linalg.LinAlgError):
                solved(a, b)


SINGULAR = [
    "voltage V1 +a -gnd 5 V\nvoltage V2 +a -gnd 3 V\nresistor R a b 1 ohm\nresistor Q b gnd 2 ohm\n",
    "voltage V1 +a -gnd 5 V\nvoltage V2 +a -gnd 5 V\nresistor R a b 1 ohm\nresistor Q b gnd 2 ohm\n",
    "current I gnd > a 1 A\nopen R a b\nvoltage V +b -gnd 1 V\nresistor Q b gnd 2 ohm\n",
    "voltage V +b -gnd 1 V\nresistor R a c 3 ohm\nresistor Q b gnd 2 ohm\n",
    "current Is gnd > a 1 A\nresistor R a gnd 4 ohm\nvccs G gnd > a g 0.25 S senses V:a\n"
    "voltage V +b -gnd 2 V\nresistor Q b gnd 3 ohm\n",
    "voltage V +b -gnd 10 V\nresistor Q b gnd 2 ohm\ntransformer R +b -gnd +s -a ratio 2:1\n"
    "resistor L s a 5 ohm\n",
    "voltage V +b -gnd 1 V\nresistor Q b gnd 2 ohm\nresistor R b a 1 ohm\nresistor S a gnd -1 ohm\n"
    "resistor T a gnd 1 ohm\nopamp U +a -gnd c\nresistor W c gnd 1 ohm\n",
]


@pytest.mark.parametrize("text", SINGULAR)
def test_singular_networks_are_judged_as_in_floating_point(text: str) -> None:
    network = equiv.parse(text)
    near, true = (Solver(n, DC) for n in (network, exactly(network, True)))
    assert true.degenerate is not None or near.degenerate is None
    assert true.reasons == near.reasons
    asked = [
        equiv.quantity(q) for q in ("V:a", "V:b", "I:R", "I:Q", "I:" + network.sources[0].name)
    ]
    units = [near.u, *np.diag(near.u)]
    for q in asked:
        assert true.unique(q) == near.unique(q), q
        for u in units:
            assert true.consistent(u) == near.consistent(u)
            if near.unique(q):
                assert true.determines(q, u) == near.determines(q, u), (q, u)
    x, y = near.state(), true.state()
    for q in asked:
        if near.unique(q) and near.determines(q, near.u):
            assert complex(y.of(q)) == pytest.approx(x.of(q), abs=1e-12)


def test_a_part_that_is_unique_is_exact_beside_one_that_is_not() -> None:
    network = equiv.parse(SINGULAR[1])
    result = equiv.superpose(network, "I:Q", "I:V1", exact=True)
    assert result.exit_status == 4
    at = result.quantities[0].frequencies[0]
    assert at.all_on.exact == "5/3"  # type: ignore[attr-defined]
    assert at.terms[0].contribution is None and "V1 alone" in (at.terms[0].reason or "")
    network = equiv.parse(
        "voltage V1 +a -gnd 5 V group bank\nvoltage V2 +a -gnd 5 V group bank\n"
        "resistor R a b 1 ohm\nresistor Q b gnd 2 ohm\n"
    )
    at = equiv.superpose(network, "I:Q", exact=True).quantities[0].frequencies[0]
    assert [t.source for t in at.terms] == ["bank"]
    assert at.total.exact == "5/3" and at.difference == 0  # type: ignore[attr-defined]


def refused(text: str, *asked: str) -> str:
    with pytest.raises(equiv.UsageError) as caught:
        equiv.superpose(equiv.parse(text), *(asked or ("I:R",)), exact=True)
    return str(caught.value)


DIVIDER = "voltage V +a -gnd 1 V\nresistor R a gnd {} ohm\n"


@pytest.mark.parametrize(
    ("formula", "rational"),
    [
        ("(sqrt(2))", None), ("(sqrt(2.25))", "2/3"), ("(2^(1/2))", None), ("(8^(2/3))", "1/4"),
        ("(pi)", None), ("(exp(1))", None), ("(exp(0) + 1)", "1/2"), ("(log(2))", None),
        ("(log(1) + 2)", "1/2"), ("(cos(1))", None), ("(cos(0) + sin(0))", "1"),
        ("(sqrt(2) * 0 + 1)", None), ("(1/3)", "3"), ("0.1", "10"),
    ],
)  # fmt: skip
def test_formulas_are_rational_or_refused(formula: str, rational: str | None) -> None:
    text = DIVIDER.format(formula)
    if rational is None:
        assert "R has a formula whose value is irrational" in refused(text)
    else:
        total = equiv.superpose(equiv.parse(text), "I:R", exact=True).quantities[0]
        assert total.frequencies[0].total.exact == rational  # type: ignore[attr-defined]


def test_irrational_parameters_reach_through_parameters_and_blocks() -> None:
    given = "given root = (sqrt(2) * 1 ohm)\ngiven twice = (root * 2)\n"
    for word in ("root", "twice", "(twice/2)", "(twice)"):
        words = refused(f"{given}voltage V +a -gnd 1 V\nresistor R a gnd {word}\n")
        assert "R has a formula" in words
    block = (
        "block HALF (t) r=1 ohm\n  resistor R t gnd (r / 2)\nend\nvoltage V +a -gnd 1 V\n"
        "use HALF X (a) r=(sqrt(2) * 1 ohm)\n"
    )
    assert "X.R has a formula" in refused(block, "V:a")


AC = "frequency {}\nvoltage V +a -gnd {}\nresistor R a b 1 ohm\ninductor L b gnd 1 mH\n"


@pytest.mark.parametrize(
    ("angle", "parts"),
    [("0 deg", "1"), ("90 deg", ["0", "1"]), ("-90 deg", ["0", "-1"]), ("180 deg", "-1"),
     ("450 deg", ["0", "1"]), ("0 rad", "1")],
)  # fmt: skip
def test_angles_of_quarter_turns_are_exact(angle: str, parts: object) -> None:
    text = AC.format("1000 rad/s", f"1 V @ {angle}")
    state = equiv.solve(equiv.parse(text), exact=True).first
    assert dict(state.nodes)["a"].exact == parts  # type: ignore[union-attr]


def test_other_angles_peak_values_and_hertz_are_refused() -> None:
    assert "V has the angle 30 deg" in refused(AC.format("1000 rad/s", "1 V @ 30 deg"))
    assert "V has the angle 1 rad" in refused(AC.format("1000 rad/s", "1 V @ 1 rad"))
    peak = "phasors peak\n" + AC.format("1000 rad/s", "1 V")
    assert "V is a peak value" in refused(peak)
    words = refused(AC.format("50 Hz", "1 V"))
    assert "at 50 Hz the angular frequency ω = 2π·f is irrational" in words
    assert "rad/s" in words and "--symbolic" in words


def test_a_coupling_by_k_needs_a_rational_root() -> None:
    text = (
        "frequency 10 rad/s\nvoltage V +a -gnd 1 V\nresistor R a b 1 ohm\ninductor L1 b gnd 2 mH\n"
        "inductor L2 c gnd {} mH\nresistor Q c gnd 1 ohm\ncoupling K L1 L2 k 0.5\n"
    )
    assert "K has M = k·√(L1·L2), and this root is irrational" in refused(text.format(3))
    assert equiv.solve(equiv.parse(text.format(8)), exact=True).first.balance == 0


def test_symbols_are_refused_as_ever() -> None:
    assert "R is written with `?` and has no number" in refused(
        DIVIDER.format("?").replace(" ohm", "")
    )


def test_networks_that_would_take_minutes_are_refused() -> None:
    lines = ["voltage V +n0 -gnd 1 V"]
    for k in range(1600):
        lines += [f"resistor R{k} n{k} n{k + 1} 1 ohm"]
    lines.append("resistor R n1600 gnd 1 ohm")
    assert "exact results are for up to" in refused("\n".join(lines) + "\n", "I:R")
