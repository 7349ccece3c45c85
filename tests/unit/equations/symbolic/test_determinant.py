"""The determinant by remembered minors, and numbers taken out before it, against sympy."""

import itertools
import random

import numpy as np
import pytest
import sympy
from flint import fmpz_mpoly

import equiv
from equiv.equations.symbolic.amount import TooLargeError
from equiv.equations.symbolic.bordered import bordered
from equiv.equations.symbolic.compressed import compressed
from equiv.equations.symbolic.coprime import Listed, coprime
from equiv.equations.symbolic.determinant import determinant
from equiv.equations.symbolic.family import context, family
from equiv.equations.symbolic.solver import FormulaSolver
from equiv.language import quantity


def in_sympy(terms: dict[int, int], symbols: list[sympy.Symbol]) -> sympy.Expr:
    return sum(
        (
            c * sympy.prod(x for i, x in enumerate(symbols) if key >> i & 1)
            for key, c in terms.items()
        ),
        sympy.Integer(0),
    )


@pytest.mark.parametrize("seed", range(12))
def test_against_sympy(seed: int) -> None:
    """Symbols as rank-one matrices σ·u·vᵀ in a matrix of whole numbers."""
    draw = random.Random(seed)
    size, count = draw.randint(1, 6), draw.randint(1, 6)
    symbols = list(sympy.symbols(f"x:{count}"))
    rows: list[dict[int, dict[int, int]]] = [{} for _ in range(size)]
    matrix = sympy.zeros(size, size)
    entries = [
        (draw.randrange(size), draw.randrange(size), 0, draw.randint(-3, 3)) for _ in range(size)
    ]
    for bit in range(count):
        u = [(draw.randrange(size), draw.choice((-1, 1))) for _ in range(2)]
        v = [(draw.randrange(size), draw.choice((-1, 1))) for _ in range(2)]
        entries += [(r, c, 1 << bit, a * b) for r, a in u for c, b in v]
    for row, column, key, number in entries:
        terms = rows[row].setdefault(column, {})
        terms[key] = terms.get(key, 0) + number
        matrix[row, column] += in_sympy({key: number}, symbols)
    found = in_sympy(determinant(rows, (1 << count) - 1, 10**6), symbols)
    expected = sympy.expand(matrix.det(method="berkowitz"))
    # the order of the rows decides the sign
    assert sympy.expand(found - expected) == 0 or sympy.expand(found + expected) == 0


def test_a_budget_is_kept() -> None:
    rows = [{c: {1 << (8 * r + c): 1} for c in range(8)} for r in range(8)]
    with pytest.raises(TooLargeError):
        determinant(rows, (1 << 64) - 1, 1000)


def test_nothing_of_a_singular_matrix() -> None:
    assert determinant([{0: {0: 1}, 1: {0: 2}}, {0: {0: 2}, 1: {0: 4}}], 0, 10) == {}
    assert determinant([{0: {0: 1}}, {0: {0: 1}}], 0, 10) == {}


def listed(*polynomials: fmpz_mpoly) -> Listed:
    terms = [p.to_dict() for p in polynomials]
    powers = np.array([e for t in terms for e in t], np.int64)
    return Listed(powers, [int(c) for t in terms for c in t.values()], list(map(len, terms)))


def some(draw: random.Random, symbols: range, degree: int, count: int) -> fmpz_mpoly:
    """A polynomial linear in some of six symbols, and of a degree in s."""
    return context(6).from_dict(
        {
            (*(draw.randint(0, 1) * (i in symbols) for i in range(6)), draw.randint(0, degree)):
            draw.choice((1, -2, 3))
            for _ in range(count)
        }
    )  # fmt: skip


@pytest.mark.parametrize("degree", [0, 1, 3])
@pytest.mark.parametrize("seed", range(20))
def test_what_is_called_coprime_is(seed: int, degree: int) -> None:
    draw = random.Random(seed)
    one, other = (some(draw, range(6), degree, 60) for _ in range(2))
    assert one.gcd(other).is_constant()
    assert coprime(listed(one, other))


@pytest.mark.parametrize("seed", range(20))
@pytest.mark.parametrize("where", [range(2), range(0)])
def test_a_common_factor_is_not_overlooked(seed: int, where: range) -> None:
    draw = random.Random(seed)
    s = context(6).gens()[-1]
    common = some(draw, where, 0, 4) + s + 9
    one, other = (some(draw, range(2, 6), 2, 60) * common for _ in range(2))
    assert len(one) > 24  # long enough to be looked at
    assert not coprime(listed(one, other))


@pytest.mark.parametrize(("nodes", "trees", "pairs"), [(5, 125, 50), (6, 1296, 432)])
def test_complete_graphs(nodes: int, trees: int, pairs: int) -> None:
    """n^(n - 2) trees (A. Cayley, 1889), 2 n^(n - 3) pairs of trees that part two nodes."""
    names = [*(f"n{i}" for i in range(1, nodes)), "gnd"]
    lines = ["current J gnd > n1 1 A"]
    for i, (a, b) in enumerate(itertools.combinations(names, 2)):
        lines.append(f"resistor R{i} {a} {b} 1 ohm")
    solver = FormulaSolver(equiv.parse("\n".join(lines) + "\n"))
    matrix = bordered(solver.system, solver.row(quantity("V:n1")))
    as_it_is, found = (
        family(m.expanded(10**6), len(solver.named), 1) for m in (matrix._replace(nodes=0), matrix)
    )
    assert [len(terms) for terms in found.terms] == [trees, pairs]
    assert {number for terms in found.terms for number in terms.values()} == {1}
    assert found == as_it_is


@pytest.mark.parametrize("seed", range(8))
def test_numbers_taken_out_change_no_formula(seed: int) -> None:
    draw = random.Random(seed)
    lines = ["voltage Vs +n0 -gnd 1 V", "current J n3 > n5 2 A"]
    for i in range(14):
        kind = "resistor" if i % 3 else draw.choice(["resistor", "capacitor", "inductor"])
        unit = {"resistor": "ohm", "capacitor": "F", "inductor": "H"}[kind]
        lines.append(f"{kind} Z{i} n{i} n{i + 1} {draw.randint(1, 9)} {unit}")
        lines.append(f"resistor S{i} n{draw.randrange(i + 1)} gnd {draw.randint(1, 9)} ohm")
    lines += ["resistor X n14 gnd 1 ohm", "vccs G n2 > n9 g 1 S senses V:n4,n11"]
    solver = FormulaSolver(equiv.parse("\n".join(lines) + "\n"), {"Z4", "X", "G"})
    whole = bordered(solver.system, solver.row(quantity("V:n7")))
    small = compressed(whole)
    assert small.size < whole.size
    count = len(solver.named)
    one, other = (family(m.expanded(10**6), count, m.sources) for m in (whole, small))
    assert one == other
