"""The diagonal of an inverse from sparse factors, against numpy's inverse."""

import numpy as np
import pytest
import scipy.sparse as sparse
from scipy.sparse.linalg import splu

import equiv
from equiv.equations.diagonal import inverse_diagonal, unit_lower_inverse
from equiv.equations.solution import Solver


def random_matrix(seed: int, size: int, symmetric: bool) -> sparse.csc_matrix:
    rng = np.random.default_rng(seed)
    a = sparse.random(size, size, 0.05, random_state=rng, format="csc").astype(complex)
    a.data *= np.exp(2j * np.pi * rng.random(a.nnz))
    a = (a + a.T if symmetric else a) + sparse.diags(rng.uniform(0.5, 3, size) * (1 + 1j))
    return a.tocsc()


@pytest.mark.parametrize("symmetric", [True, False])
@pytest.mark.parametrize("seed", range(4))
def test_against_the_dense_inverse(seed: int, symmetric: bool) -> None:
    a = random_matrix(seed, 90, symmetric)
    inverse = np.linalg.inv(a.toarray())
    for options in ({"permc_spec": "MMD_AT_PLUS_A"}, {"permc_spec": "COLAMD"}):
        places = np.array([3, 0, 88, 41, 3])
        found = inverse_diagonal(splu(a, **options), places)
        assert np.allclose(found, np.diag(inverse)[places], rtol=1e-10)


def test_the_inverse_of_a_triangle() -> None:
    lower = splu(random_matrix(7, 60, True)).L.tocsc()
    found = unit_lower_inverse(lower)
    assert np.allclose((found @ lower).toarray(), np.eye(60), atol=1e-12)


@pytest.mark.parametrize("rungs", [20, 400])
def test_driving_points_of_a_ladder(rungs: int) -> None:
    """Each driving-point resistance is that of a solve of its own, dense and sparse."""
    lines = [f"resistor S{n} a{n} a{n + 1} {1 + n % 7} ohm" for n in range(rungs)]
    lines += [f"resistor P{n} a{n} gnd {50 + n % 11} ohm" for n in range(rungs + 1)]
    network = equiv.parse("\n".join(lines))
    solver = Solver(network, network.frequency)
    nodes = np.arange(0, rungs + 1, 3)
    found = solver.driving_points(nodes)
    for node, value in zip(nodes.tolist(), found.tolist(), strict=True):
        unit = np.zeros(solver.system.size)
        unit[node] = 1.0
        assert value == pytest.approx(solver.response(unit)[node], rel=1e-10)
