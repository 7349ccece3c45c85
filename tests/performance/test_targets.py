"""The targets of speed and size, as ratios within one run."""

import math
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path

import pytest
from performance.measures import (
    ASKED,
    BARE,
    environment,
    grid_text,
    process_seconds,
    program,
    seconds,
    write_arrays,
)

import equiv

pytestmark = pytest.mark.performance
Report = Callable[[str, str, str, str], None]

SMALL = """
title A network of ten elements
voltage  V1 +a -gnd 12 V
resistor R1 a b 1 kohm
resistor R2 b gnd 2 kohm
current  J1 gnd > b 3 mA
resistor R3 b c 1 kohm
vcvs     E1 +c -d mu 2 senses V:b
resistor R4 d gnd 3 kohm
resistor R5 c e 4 kohm
resistor R6 e gnd 5 kohm
cccs     F1 e > gnd beta 2 senses I:R1
find V:e
"""


def test_help_starts_at_once(report: Report) -> None:
    bare = process_seconds([sys.executable, "-c", "pass"], 15)
    ours = process_seconds([*program(), "--help"], 15)
    report(
        "`equiv --help` against `python -c pass`", "≤ 10 ×", f"{ours / bare:.1f} ×",
        f"{1e3 * ours:.0f} ms / {1e3 * bare:.0f} ms",
    )  # fmt: skip
    assert ours <= 10 * bare


def test_small_superposition_as_a_process(report: Report, tmp_path: Path) -> None:
    path = tmp_path / "small.equiv"
    path.write_text(SMALL)
    bare = process_seconds([sys.executable, "-c", "import numpy"], 11)
    ours = process_seconds([*program(), "superpose", str(path)], 11)
    report(
        "`superpose` on a 10-element file against `python -c \"import numpy\"`", "≤ 4 ×",
        f"{ours / bare:.1f} ×", f"{1e3 * ours:.0f} ms / {1e3 * bare:.0f} ms",
    )  # fmt: skip
    assert ours <= 4 * bare


def test_reading(report: Report) -> None:
    text = grid_text()
    lines = text.count("\n")
    took = seconds(lambda: equiv.parse(text), 7)
    network = equiv.parse(text)
    assert network.place_of["Rv0_0"][1] == 3
    report(
        "reading text into a network", "≥ 250 000 lines/s", f"{lines / took:,.0f} lines/s",
        f"{lines:,} lines in {took:.2f} s",
    )  # fmt: skip
    assert lines / took >= 250_000


def test_grid_command(report: Report, tmp_path: Path) -> None:
    path, arrays, script = (tmp_path / n for n in ("grid.equiv", "grid.npz", "bare.py"))
    path.write_text(grid_text())
    network = equiv.load(path)
    write_arrays(network, arrays)
    script.write_text(BARE)
    bare = float("inf")
    total = 0.0
    for _ in range(3):
        start = time.perf_counter()
        done = subprocess.run(
            [sys.executable, str(script), str(arrays)],
            check=True, capture_output=True, text=True, env=environment(),
        )  # fmt: skip
        took = time.perf_counter() - start
        total, loading = map(float, done.stdout.split())
        bare = min(bare, took - loading)
    at = equiv.superpose(network, ASKED, check="none").quantities[0].frequencies[0]
    assert at.total.real == pytest.approx(total, rel=1e-9)
    for words, target, name in (
        (["--check", "none"], 4, "with `--check none`"),
        ([], 7, "with the default check"),
    ):
        ours = process_seconds([*program(), "superpose", str(path), ASKED, *words], 2)
        report(
            f"300 × 300 grid, 10 000 sources, 300 vccs, the whole command {name}, against a bare "
            "numpy/scipy script", f"≤ {target} ×", f"{ours / bare:.1f} ×",
            f"{ours:.2f} s / {bare:.2f} s",
        )  # fmt: skip
        assert ours <= target * bare


def test_contributions_on_a_factorisation(report: Report) -> None:
    from equiv.equations.solution import Solver
    from equiv.equations.sparse import SparseFactor
    from equiv.language import quantity
    from equiv.network import DC

    network = equiv.parse(grid_text())
    asked = [quantity(q) for q in (ASKED, "V:n7_9", "V:n200_30,n40_99")]
    solver = Solver(network, DC)
    factor = SparseFactor(solver.system)
    row = solver.row(asked[0]).state
    one_solve = seconds(lambda: factor.lu.solve(row, "T"), 9)

    def ours() -> None:
        solver._factor = SparseFactor(solver.system)
        for q in asked:
            solver.coefficients(q)

    one_factor, took = float("inf"), float("inf")
    for _ in range(5):  # in turns, so that both see the same machine
        one_factor = min(one_factor, seconds(lambda: SparseFactor(solver.system), 1))
        took = min(took, seconds(ours, 1))
    limit = one_factor + len(asked) * one_solve
    report(
        "factorisation and contributions of 10 000 sources to 3 quantities against F + min(k, q) S",
        "≤ 1.1 ×", f"{took / limit:.2f} ×",
        f"{took:.2f} s / ({one_factor:.2f} + 3 × {one_solve:.3f}) s",
    )  # fmt: skip
    assert took <= 1.1 * limit


LADDER = """
import resource, sys, time
sys.path.insert(0, sys.argv[2])
from performance.measures import ladder_text
import equiv
n = int(sys.argv[1])
text = ladder_text(n)
start = time.perf_counter()
result = equiv.superpose(equiv.parse(text), f"V:n{n // 4}", check="none")
took = time.perf_counter() - start
assert result.exit_status == 0
print(took, resource.getrusage(resource.RUSAGE_SELF).ru_maxrss * 1024)
"""


def test_time_and_memory_against_size(report: Report) -> None:
    times, memory = [], 0.0
    sizes = [1000, 10_000, 100_000, 1_000_000]
    for size in sizes:
        best = float("inf")
        for _ in range(3 if size < 1_000_000 else 1):
            done = subprocess.run(
                [sys.executable, "-c", LADDER, str(size), str(Path(__file__).parents[1])],
                check=True, capture_output=True, text=True, env=environment(),
            )  # fmt: skip
            took, memory = map(float, done.stdout.split())
            best = min(best, took)
        times.append(best)
    xs, ys = [math.log10(s) for s in sizes], [math.log10(t) for t in times]
    mean_x, mean_y = sum(xs) / 4, sum(ys) / 4
    slope = sum((x - mean_x) * (y - mean_y) for x, y in zip(xs, ys, strict=True)) / sum(
        (x - mean_x) ** 2 for x in xs
    )
    report(
        "time against size, ladder of 10³ … 10⁶ resistors, text to terms",
        "slope ≤ 1.1; 10⁶ under 3 GB", f"slope {slope:.2f}; {memory / 1e9:.2f} GB",
        ", ".join(f"{t:.3g} s" for t in times),
    )  # fmt: skip
    assert slope <= 1.1
    assert memory < 3e9
