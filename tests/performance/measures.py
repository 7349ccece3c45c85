"""What is measured against what: every figure is a ratio of two times taken in one run."""

from __future__ import annotations

import os
import random
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path

SIDE = 300
SOURCES = 10_000
CONTROLLED = 300
ASKED = "V:n150_150"


def environment() -> dict[str, str]:
    """The environment of an installed program: byte code is kept, and one thread is used."""
    env = {k: v for k, v in os.environ.items() if k != "PYTHONDONTWRITEBYTECODE"}
    return {**env, "OPENBLAS_NUM_THREADS": "1", "OMP_NUM_THREADS": "1"}


def process_seconds(words: list[str], repeat: int) -> float:
    """The shortest wall time of a process."""
    best = float("inf")
    for _ in range(repeat):
        start = time.perf_counter()
        subprocess.run(words, check=True, capture_output=True, env=environment())
        best = min(best, time.perf_counter() - start)
    return best


def seconds(work: Callable[[], object], repeat: int) -> float:
    """The shortest time of a call."""
    best = float("inf")
    for _ in range(repeat):
        start = time.perf_counter()
        work()
        best = min(best, time.perf_counter() - start)
    return best


def program() -> list[str]:
    """The installed command beside this interpreter."""
    return [str(Path(sys.executable).with_name("equiv"))]


def grid_text(side: int = SIDE, sources: int = SOURCES, controlled: int = CONTROLLED) -> str:
    """A square grid of resistors, current sources into it, and transconductances across it."""
    draw = random.Random(20240901)

    def node(i: int, j: int) -> str:
        return "gnd" if i == j == 0 else f"n{i}_{j}"

    def anywhere() -> str:
        return f"n{draw.randrange(1, side)}_{draw.randrange(side)}"

    lines = ["title A grid"]
    for i in range(side):
        for j in range(side):
            if j + 1 < side:
                value = f"{draw.uniform(1, 10):.4f} ohm"
                lines.append(f"resistor Rh{i}_{j} {node(i, j)} {node(i, j + 1)} {value}")
            if i + 1 < side:
                value = f"{draw.uniform(1, 10):.4f} ohm"
                lines.append(f"resistor Rv{i}_{j} {node(i, j)} {node(i + 1, j)} {value}")
    lines += [
        f"current I{k} gnd > {anywhere()} {draw.uniform(-1, 1):.3f} A" for k in range(sources)
    ]
    for k in range(controlled):
        a, b, p, q = (anywhere() for _ in range(4))
        lines.append(f"vccs G{k} {a} > {b} g 1 mS senses V:{p},{q}")
    return "\n".join(lines) + "\n"


def ladder_text(elements: int) -> str:
    """A ladder of series and shunt resistors with one source."""
    lines = ["voltage E +n0 -gnd 1 V"]
    for k in range(elements // 2):
        lines.append(f"resistor S{k} n{k} n{k + 1} 1 ohm")
        lines.append(f"resistor P{k} n{k + 1} gnd 3 ohm")
    return "\n".join(lines) + "\n"


# The bare script: it finds the arrays of the grid on disk (their loading is not counted),
# factors once, solves once transposed, and makes the dot products.
BARE = """
import sys, time
import numpy as np, scipy.sparse as sparse
from scipy.sparse.linalg import splu
start = time.perf_counter()
z = np.load(sys.argv[1])
entries, rows, columns, b_rows, b_columns, b_values, u, c = (z[k] for k in z.files)
loading = time.perf_counter() - start
a = sparse.csc_matrix((entries, (rows, columns)), shape=(len(c), len(c)))
lu = splu(a, permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.1, panel_size=1,
          options={"SymmetricMode": True})
adjoint = lu.solve(c, "T")
h = np.zeros(len(u))
np.add.at(h, b_columns, adjoint[b_rows] * b_values)
print(float(h @ u), loading)
"""


def write_arrays(network: object, path: Path) -> None:
    """The arrays of a network's nodal system, for the bare script."""
    import numpy as np

    from equiv.equations.solution import Solver
    from equiv.language import quantity
    from equiv.network import DC, Network

    assert isinstance(network, Network)
    solver = Solver(network, DC)
    a, b = solver.system.a, solver.system.b
    row = solver.row(quantity(ASKED)).state
    np.savez(path, a.values, a.rows, a.columns, b.rows, b.columns, b.values, solver.u, row)
