"""What a network lets its ports do, whatever form that has: M v + N j = K u.

v are the voltages of the ports (plus over minus, V), j the currents into them (A), u the
independent sources. With the network's equations A x = B u + P j and v = Q x, every vector w
whose product with A over Q is zero gives an equation w₁ P j + w₂ v = -w₁ B u.

Source: null-space (implicit) descriptions of multiports: V. Belevitch, Classical Network Theory
(1968), from memory.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np

from equiv.elements.element import Frequency
from equiv.equations.dense import balance, matrix
from equiv.equations.layout import Layout, Numbers
from equiv.equations.system import System
from equiv.network import Network, Port

LARGEST = 600
"""Unknowns up to which the null space is looked for."""
RANK_LIMIT = 1e-11
CONSISTENT = 1e-9


class PortRelation(NamedTuple):
    """M v + N j = K, with a column of K for each source.

    `volts` and `amperes` are sizes that suit each port: the columns of M and N times these are
    what ranks are decided on.
    """

    m: Numbers
    n: Numbers
    k: Numbers
    volts: Numbers
    amperes: Numbers

    @property
    def rank(self) -> int:
        """The number of independent equations; a network that is sound has one a port."""
        if self.m.dtype == object:
            from equiv.equations.exact.matrices import rank_of

            return rank_of(np.hstack([self.m, self.n]))
        rows = np.hstack([self.m * self.volts, self.n * self.amperes])
        values = np.linalg.svd(rows, compute_uv=False)
        return int((values > RANK_LIMIT * values.max(initial=0.0)).sum())


def null_space(
    network: Network, ports: Sequence[Port], frequency: Frequency, u: Numbers
) -> PortRelation | None:
    """The relation from the left null space of the branch-current form.

    None if the network is too large, or has no solution whatever its ports do. There may be more or fewer equations than ports: see `rank`. Equations without any port in
    them are left out: they bind the sources alone.
    """
    layout = Layout(network)
    system = System(layout, "branch-current", layout.arithmetic.s(frequency))
    if system.size > LARGEST:
        return None
    count = len(ports)
    into = np.zeros((system.size + 1, count), system.real)
    across = np.zeros((count, system.size), system.dtype)
    for number, port in enumerate(ports):
        plus, minus = layout.node_number[port.plus], layout.node_number[port.minus]
        # the ground is -1: the last row, which is dropped
        into[plus, number] += 1
        into[minus, number] -= 1
        across[number] = system.voltage_row(plus, minus).state
    stacked = np.vstack([matrix(system), across])
    excited = system.excitation(np.diag(u)) if len(u) else np.zeros((system.size, 0), system.dtype)
    if network.exact:
        return _exact_relation(stacked, into[:-1], excited)
    rows, columns = balance(stacked)
    left, values, _ = np.linalg.svd(stacked * rows[:, None] * columns)
    rank = int((values > RANK_LIMIT * values.max(initial=0.0)).sum())
    null = left[:, rank:].conj().T
    inner, outer = null[:, :-count] * rows[:-count], null[:, -count:] * rows[-count:]
    relation = PortRelation(
        m=outer,
        n=inner @ into[:-1],
        k=-inner @ excited,
        volts=1 / rows[-count:],
        amperes=1 / np.array([rows[:-count][into[:-1, p] != 0].max() for p in range(count)]),
    )
    return _condensed(relation)


def _exact_relation(stacked: Numbers, into: Numbers, excited: Numbers) -> PortRelation | None:
    """The relation in exact numbers: the reduced echelon form of M v + N j - K u = 0."""
    from equiv.equations.exact.matrices import Matrix, null_space

    count = into.shape[1]
    null = null_space(stacked.T).T
    inner, outer = null[:, :-count], null[:, -count:]
    rows, pivots = Matrix(np.hstack([outer, inner @ into, inner @ excited])).reduced()
    of_ports = np.array(pivots, int) < 2 * count
    # what binds the sources alone must hold for them as they are
    if (rows[~of_ports].sum(axis=1) != 0).any():
        return None
    m, n, k = np.split(rows[of_ports], [count, 2 * count], axis=1)
    unit = np.ones(count)
    return PortRelation(m, n, -k, unit, unit)


def _condensed(relation: PortRelation) -> PortRelation | None:
    """The same relation by as many equations as it has ranks; None if the sources forbid it."""
    both = np.hstack([relation.m * relation.volts, relation.n * relation.amperes])
    left, values, _ = np.linalg.svd(both)
    # null vectors have norm one, so that small ranks are measured against one
    rank = int((values > RANK_LIMIT * max(1.0, values.max(initial=0.0))).sum())
    sizes = np.abs(relation.k).sum(axis=1).max(initial=0.0)
    without_ports = left[:, rank:].conj().T @ relation.k
    if (np.abs(without_ports.sum(axis=1)) > CONSISTENT * sizes).any():
        return None
    combine = left[:, :rank].conj().T
    return PortRelation(
        combine @ relation.m, combine @ relation.n, combine @ relation.k,
        relation.volts, relation.amperes,
    )  # fmt: skip
