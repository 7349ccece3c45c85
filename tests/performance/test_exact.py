"""Exact solutions against elimination in Python's fractions, as ratios within one run."""

import random
from collections.abc import Callable
from fractions import Fraction

import pytest
from performance.measures import seconds

import equiv
from equiv.analyses.exactness import exactly
from equiv.equations.dense import matrix
from equiv.equations.exact.factor import ExactFactor
from equiv.equations.solution import Solver
from equiv.equations.system import System
from equiv.network import DC, Network

pytestmark = pytest.mark.performance
Report = Callable[[str, str, str, str], None]
Rows = list[list[Fraction]]


def mesh(nodes: int) -> Network:
    """As many nodes, each joined to four others by resistances of six digits; two sources."""
    draw = random.Random(20240907)
    lines = ["current J gnd > n1 3 mA", "resistor Rg n0 gnd 50 ohm"]
    for k in range(1, nodes):
        for j, other in enumerate(draw.sample(range(k), min(k, 2))):
            lines.append(f"resistor R{k}_{j} n{k} n{other} {draw.uniform(1, 1000):.3f} ohm")
    lines.append(f"vccs G n{nodes - 1} > gnd g 1.25 mS senses V:n{nodes // 2}")
    return exactly(equiv.parse("\n".join(lines) + "\n"), True)


def in_fractions(system: System, right: list[Fraction]) -> Rows:
    """The matrix with its right-hand side as Python fractions."""
    return [
        [*(Fraction(str(getattr(x, "re", x))) for x in row), b]
        for row, b in zip(matrix(system), right, strict=True)
    ]


def eliminate(rows: Rows) -> list[Fraction]:
    """Gauss with the first pivot that is not zero; zeros are skipped."""
    rows = [list(row) for row in rows]
    size = len(rows)
    for k in range(size):
        pivot = next(i for i in range(k, size) if rows[i][k])
        rows[k], rows[pivot] = rows[pivot], rows[k]
        upper = rows[k]
        for row in rows[k + 1 :]:
            if row[k]:
                factor = row[k] / upper[k]
                for j in range(k, size + 1):
                    if upper[j]:
                        row[j] -= factor * upper[j]
    found = [Fraction(0)] * size
    for k in reversed(range(size)):
        rest = sum(rows[k][j] * found[j] for j in range(k + 1, size) if rows[k][j])
        found[k] = (rows[k][size] - rest) / rows[k][k]
    return found


@pytest.mark.parametrize(("nodes", "target"), [(50, 60), (100, 300), (200, None)])
def test_exact_solutions(report: Report, nodes: int, target: int | None) -> None:
    """Of 200 unknowns only the time itself: fractions take minutes there."""
    network = mesh(nodes)
    solver = Solver(network, DC)
    system = solver.system
    assert system.size == nodes
    right = system.excitation(solver.u)
    ours = seconds(lambda: ExactFactor(system).solve(right), 5)
    whole = seconds(lambda: Solver(network, DC).state().balance(), 2)
    found = [Fraction(x.exact) for x in ExactFactor(system).solve(right)]
    rows = in_fractions(system, [Fraction(str(getattr(b, "re", b))) for b in right])
    # it solves the system, whatever its size
    assert all(sum(a * x for a, x in zip(row, found, strict=False)) == row[-1] for row in rows)
    words = f"exact solution of {nodes} unknowns"
    figure = f"{1e3 * ours:.1f} ms; network to power balance {1e3 * whole:.0f} ms"
    if target is None:
        report(words, "none (fractions take minutes)", f"{1e3 * ours:.0f} ms", figure)
        return
    told: list[list[Fraction]] = []
    theirs = seconds(lambda: told.append(eliminate(rows)), 1)
    assert told == [found]
    report(
        f"{words} against elimination in Python's fractions", f"≥ {target} ×",
        f"{theirs / ours:.0f} ×", f"{figure} / {1e3 * theirs:.0f} ms",
    )  # fmt: skip
    assert theirs >= target * ours
