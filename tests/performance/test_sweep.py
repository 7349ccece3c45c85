"""The targets of speed of a sweep over frequency, as ratios within one run."""

import random
from collections.abc import Callable

import numpy as np
import pytest
import scipy.sparse as sparse
from performance.measures import seconds
from scipy.sparse.linalg import splu

import equiv
from equiv.equations.batch import Batch, Coefficients

pytestmark = pytest.mark.performance
Report = Callable[[str, str, str, str], None]
ROUNDS = 9


def line_text(sections: int, side: int = 1) -> str:
    """A line (or a grid `side` wide) of resistors, inductors and capacitors, with two sources."""
    draw = random.Random(20240905)
    lines = ["frequency 1 kHz", "voltage E +in -gnd 1 V", "resistor Rin in n0_0 50 ohm"]
    for k in range(sections):
        for j in range(side):
            here = f"n{k}_{j}"
            lines.append(f"capacitor C{k}_{j} {here} gnd {draw.uniform(1, 100):.3f} nF")
            if k + 1 < sections:
                what = "inductor L" if (k + j) % 5 == 4 else "resistor R"
                value = "mH" if (k + j) % 5 == 4 else "ohm"
                lines.append(
                    f"{what}{k}_{j} {here} n{k + 1}_{j} {draw.uniform(10, 100):.3f} {value}"
                )
            if j + 1 < side:
                lines.append(
                    f"resistor S{k}_{j} {here} n{k}_{j + 1} {draw.uniform(10, 100):.3f} ohm"
                )
    lines.append(f"current J gnd > n{sections // 2}_0 5 mA")
    lines.append(f"vccs G gnd > n{sections - 1}_0 g 1 mS senses V:n{sections // 2}_0")
    return "\n".join(lines) + "\n"


def in_turns(*works: Callable[[], object]) -> list[float]:
    """The shortest times of some calls, taken in turns so that all see the same machine."""
    times = [float("inf")] * len(works)
    for _ in range(ROUNDS):
        for k, work in enumerate(works):
            times[k] = min(times[k], seconds(work, 1))
    return times


def matrices(batch: Batch, omega: np.ndarray) -> np.ndarray:
    g, c = (batch._filled(values) for values in (batch._still, batch._rising))
    return g + 1j * omega[:, None, None] * c


@pytest.mark.parametrize(
    ("sections", "points"), [(10, 20_000), (50, 5_000), (120, 1_000)], ids=["10", "50", "120"]
)
def test_small_networks_in_stacks(report: Report, sections: int, points: int) -> None:
    network = equiv.parse(line_text(sections))
    asked = equiv.quantity(f"V:n{sections - 1}_0")
    batch = Batch(network)
    omega = 2 * np.pi * np.logspace(1, 6, points)
    stack = matrices(batch, omega).transpose(0, 2, 1).copy()
    row = batch.row(asked).still.astype(complex)
    right = np.broadcast_to(row[:, None], (points, len(row), 1))

    def ours() -> Coefficients:
        batch = Batch(network)
        return batch.coefficients(omega, [batch.row(asked)])

    found, told = ours(), np.linalg.solve(stack, right)[:, :, 0] @ batch._filled_right()
    assert found.reliable.all()
    assert np.abs(told - found.values[:, 0]).max() < 1e-11 * np.abs(told).max()
    bare, took, whole = in_turns(
        lambda: np.linalg.solve(stack, right),
        ours,
        lambda: equiv.sweep(network, asked, start="10 Hz", stop="1 MHz", points=points, log=True),
    )
    report(
        f"sweep of {batch.size} unknowns over {points:,} frequencies, network to terms, against "
        "`numpy.linalg.solve` of the same matrices made for nothing",
        "≤ 1.3 ×", f"{took / bare:.2f} ×",
        f"{1e3 * took:.0f} ms / {1e3 * bare:.0f} ms; the whole result with its checks "
        f"{whole / bare:.2f} ×",
    )  # fmt: skip
    assert took <= 1.3 * bare


def test_large_networks_are_factorised_again(report: Report) -> None:
    network = equiv.parse(line_text(100, 100))
    asked, points = equiv.quantity("V:n40_7"), 200
    batch = Batch(network)
    assert not batch.dense
    shape = (batch.size, batch.size)
    omega = 2 * np.pi * np.logspace(2, 5, points)
    g, c = (
        sparse.csc_matrix((v, batch._places), shape=shape) for v in (batch._still, batch._rising)
    )
    row = batch.row(asked).still.astype(complex)
    made = [(g + 1j * w * c).tocsc() for w in omega]

    def bare() -> None:
        for a in made:
            splu(
                a, permc_spec="MMD_AT_PLUS_A", diag_pivot_thresh=0.1, panel_size=1,
                options={"SymmetricMode": True},
            ).solve(row, "T")  # fmt: skip

    def ours() -> Coefficients:
        batch = Batch(network)
        return batch.coefficients(omega, [batch.row(asked)])

    theirs, took = in_turns(bare, ours)
    whole = seconds(
        lambda: equiv.sweep(
            network, asked, start="100 Hz", stop="100 kHz", points=points, log=True
        ),
        2,
    )
    report(
        f"sweep of {batch.size:,} unknowns over {points} frequencies, network to terms, against a "
        "factorisation and a solve each",
        "≤ 1.15 P (F + S)", f"{took / theirs:.2f} P (F + S)",
        f"{took:.2f} s / {theirs:.2f} s; the whole result with its checks {whole / theirs:.2f}",
    )  # fmt: skip
    assert took <= 1.15 * theirs
