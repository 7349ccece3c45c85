"""Trees of expressions: their text, their numbers, and the forms that polynomials take."""

import ast
import random
from fractions import Fraction

import pytest
import sympy
from flint import Ordering, fmpz_mpoly_ctx

from equiv.equations.symbolic.conditions import Ratio, derivative, limit, roots_in_s, vanishing
from equiv.equations.symbolic.expression import (
    Expression,
    Name,
    Number,
    Product,
    Quotient,
    Sum,
    evaluated,
    negated,
    power,
    product,
    quotient,
    total,
)
from equiv.equations.symbolic.infix import text_of
from equiv.equations.symbolic.nesting import expanded, nested, with_repeats_named
from equiv.equations.symbolic.sympy_form import latex_of, to_sympy, with_parts

A, B, C = Name("a"), Name("b"), Name("c")
NAMES = ["a", "b", "c", "d", "s"]
RING = fmpz_mpoly_ctx.get(NAMES, Ordering.lex)


def number(value: int, below: int = 1) -> Number:
    return Number(Fraction(value, below))


@pytest.mark.parametrize(
    ("tree", "text"),
    [
        (total([A, negated(B)]), "a - b"),
        (product(A, total([B, C])), "a*(b + c)"),
        (quotient(A, product(B, C)), "a/(b*c)"),
        (quotient(total([A, B]), C), "(a + b)/c"),
        (quotient(A, quotient(B, C)), "a*c/b"),
        (negated(quotient(A, B)), "-a/b"),
        (total([A, negated(quotient(B, C))]), "a - b/c"),
        (total([A, negated(total([B, C]))]), "a - (b + c)"),
        (product(number(-2), A), "-2*a"),
        (quotient(product(number(2, 3), A), B), "2*a/(3*b)"),
        (power(A, 2), "a**2"),
        (quotient(A, product(A, B)), "1/b"),
        (quotient(product(A, power(B, 3)), product(power(B, 2), C)), "a*b/c"),
        (total([number(1), A, number(2)]), "a + 3"),
        (total([]), "0"),
        (quotient(number(11), number(6)), "11/6"),
    ],
)
def test_text(tree: Expression, text: str) -> None:
    assert text_of(tree) == text
    ast.parse(text, mode="eval")


def trees(draw: random.Random, depth: int) -> Expression:
    if not depth:
        return draw.choice([A, B, C, number(draw.randint(1, 5))])
    parts = [trees(draw, depth - 1) for _ in range(2)]
    if draw.random() < 0.3:
        parts[1] = negated(parts[1])
    return draw.choice([total, lambda p: product(*p), lambda p: quotient(*p)])(parts)


@pytest.mark.parametrize("seed", range(60))
def test_text_means_what_the_tree_means(seed: int) -> None:
    tree = trees(random.Random(seed), 4)
    values = {"a": sympy.Rational(3, 7), "b": sympy.Rational(-5, 11), "c": sympy.Integer(13)}
    try:
        expected = evaluated(tree, values, lambda x: sympy.Rational(x.numerator, x.denominator))
    except ZeroDivisionError:
        return
    symbols = {sympy.Symbol(name): value for name, value in values.items()}
    built = to_sympy(tree).subs(symbols)
    assert built == expected or not expected.is_finite
    # read by a reader of ordinary expressions
    assert sympy.sympify(text_of(tree)).subs(symbols) == built


def test_trees_of_different_kinds_differ() -> None:
    assert Sum((A, B)) != Product((A, B)) != Quotient(A, B)
    assert len({Sum((A, B)), Product((A, B)), Quotient(A, B)}) == 3


def polynomial(seed: int, terms: int = 12) -> object:
    draw = random.Random(seed)
    return RING.from_dict(
        {
            (*(draw.randint(0, 1) for _ in range(4)), draw.randint(0, 2)): draw.choice(
                [1, 1, -1, 6]
            )
            for _ in range(terms)
        }
    )


@pytest.mark.parametrize("seed", range(30))
def test_nested_and_expanded_are_the_polynomial(seed: int) -> None:
    found = polynomial(seed) * polynomial(seed + 100, 3)
    plain = sympy.expand(to_sympy(expanded(found, NAMES)))
    assert sympy.expand(to_sympy(nested(found, NAMES)) - plain) == 0
    if seed % 2 and found:
        names = iter(range(1, 99))
        (short,), where = with_repeats_named([nested(found, NAMES)], lambda: f"k{next(names)}")
        assert sympy.expand(with_parts(short, where) - plain) == 0


def test_a_number_too_large_for_a_machine_word_is_taken_out() -> None:
    a, s = RING.gen(0), RING.gen(4)
    assert text_of(nested(10**30 * (a * s + a), NAMES)) == f"{10**30}*a*(s + 1)"


def test_equal_brackets_are_put_together() -> None:
    a, b, c, d, _ = RING.gens()
    assert text_of(nested((a + b) * (c + d), NAMES)) == "(a + b)*(c + d)"
    assert text_of(nested(a * (c + d) + b * (c + d) + 1, NAMES)) == "(a + b)*(c + d) + 1"
    assert text_of(nested(a * b - c * d, NAMES)) == "a*b - c*d"
    assert text_of(nested(c * d - a * b, NAMES)) == "c*d - a*b"


def test_the_value_where_a_polynomial_vanishes() -> None:
    a, b, c, _, _ = RING.gens()
    found = vanishing(6 * a * b - 11 * b + a * c, 1, NAMES)
    assert found is not None and text_of(found) == "-a*c/(6*a - 11)"
    assert vanishing(a * a - b, 0, NAMES) is None
    assert vanishing(b + c, 0, NAMES) is None


def test_derivatives_and_limits() -> None:
    a, b, _, _, s = RING.gens()
    ratio = Ratio(a * s + b, (s + 1) * (a * s + 2))
    slope = derivative(ratio, 0)
    x, y, z = sympy.symbols("a b s")
    expected = sympy.diff((x * z + y) / ((z + 1) * (x * z + 2)), x)
    found = to_sympy(slope.written(NAMES))
    assert sympy.cancel(found - expected) == 0
    assert text_of(limit(ratio, NAMES, "zero").expression) == "b/2"
    end = limit(ratio, NAMES, "infinity")
    assert (text_of(end.expression), end.power) == ("1", -1)
    assert text_of(end.at_infinity() or A) == "0"
    growing = limit(Ratio(a * s * s, s + b), NAMES, "infinity")
    assert growing.at_infinity() is None and text_of(growing.grown()) == "a*s"


def test_roots_from_exact_coefficients() -> None:
    s = RING.gen(4)
    assert roots_in_s((s + 3) ** 2 * (s * s + 4)) == [-2j, 2j, -3, -3]
    assert roots_in_s(RING.gen(0) * s + 1) is None
    close = 10**12 * s * s + 2 * 10**12 * s + 10**12 - 1
    assert roots_in_s(close) == pytest.approx([-1 + 1e-6, -1 - 1e-6], rel=1e-15)


def test_latex() -> None:
    tree = quotient(product(Name("Vs"), Name("R2")), total([Name("R1"), Name("Rload2")]))
    assert latex_of(tree) == r"\frac{\mathrm{Vs} R_{2}}{R_{1} + \mathrm{Rload}_{2}}"


def test_factors_whose_numbers_are_long_are_left_as_they_are() -> None:
    a, b, c, _, s = RING.gens()
    # the library cannot put these two factors in order
    found = (a * s + 10**40 * b) * (a * s + (10**40 + 1) * b) * c
    plain = sympy.expand(to_sympy(expanded(found, NAMES)))
    assert sympy.expand(to_sympy(nested(found, NAMES)) - plain) == 0
    longer = (a * s + 10**90 * b) * (a + b)
    plain = sympy.expand(to_sympy(expanded(longer, NAMES)))
    assert sympy.expand(to_sympy(nested(longer, NAMES)) - plain) == 0
