"""The port relation M v + N j = K by test sources, and solved for any form of parameters.

v are the port voltages (plus over minus), j the currents *into* the ports, as textbooks count
them. Whether a form exists is decided by the smallest singular value of what multiplies its
left-hand side, in rows of norm one, against the norm of [M N].
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from equiv.equations.layout import Numbers
from equiv.equations.port_relation import RANK_LIMIT, PortRelation
from equiv.equations.scalars import solved

FORMS = ("z", "y", "h", "g", "abcd", "s")
OF_TWO_PORTS = ("h", "g", "abcd")


class Sides(NamedTuple):
    """What stands on the left and on the right of a form: `v1`, `j2`, `-j2`, `b1`, `a1`."""

    left: tuple[str, ...]
    right: tuple[str, ...]

    @property
    def kinds(self) -> tuple[str, ...]:
        """The test source at each port that gives the form: of what stands on the right."""
        return tuple("current" if name[0] == "j" else "voltage" for name in self.right)


def sides(form: str, ports: int) -> Sides:
    """What the parameters of a form relate, for a number of ports."""

    def each(letter: str) -> tuple[str, ...]:
        return tuple(f"{letter}{number + 1}" for number in range(ports))

    if form == "h":
        return Sides(("v1", "j2"), ("j1", "v2"))
    if form == "g":
        return Sides(("j1", "v2"), ("v1", "j2"))
    if form == "abcd":
        return Sides(("v1", "j1"), ("v2", "-j2"))
    return Sides(*map(each, {"z": "vj", "y": "jv", "s": "ba"}[form]))


class Solved(NamedTuple):
    """Parameters and source terms of a form (SI units)."""

    parameters: Numbers
    terms: Numbers
    margin: float = 1.0
    """The smallest singular value that decided, of the norm of [M N]."""


def by_tests(kinds: tuple[str, ...], response: Numbers, terms: Numbers) -> PortRelation:
    """The relation from tests with a current or a voltage at each port.

    Port p answers a current with a voltage and a voltage with a current *into* it: a row of
    `response` for each port with a column for each test, and of `terms` for each source.
    """
    count = len(kinds)
    unit = np.eye(count)
    answers_v = np.array([kind == "current" for kind in kinds])
    m = np.where(answers_v, unit, -response)
    n = np.where(answers_v, -response, unit)
    own = np.abs(np.diag(response)).astype(float)
    ohms = np.where(own > 0, own, 1.0)
    ohms = np.where(answers_v, ohms, 1 / ohms)
    return PortRelation(m, n, terms, np.sqrt(ohms), 1 / np.sqrt(ohms))


def by_waves(s: Numbers, terms: Numbers, references: Numbers) -> PortRelation:
    """The relation from b = s·a + terms, with a, b = (v ± R·j)/(2·√R)."""
    root = np.sqrt(references)
    unit = np.eye(len(s))
    return PortRelation((unit - s) / (2 * root), -(unit + s) * root / 2, terms, root, 1 / root)


def solved_for(relation: PortRelation, form: str, references: Numbers) -> Solved | None:
    """The parameters of a form and its source terms, in SI units; None where it does not exist."""
    if relation.m.dtype == object:
        return _solved_exactly(relation, form, references)
    count = len(relation.volts)
    volts, amperes = relation.volts, relation.amperes
    if form == "s":
        volts, amperes = np.sqrt(references), 1 / np.sqrt(references)
    rows = np.hstack([relation.m * volts, relation.n * amperes])
    norms = np.linalg.norm(rows, axis=1)
    rows, k = rows / norms[:, None], relation.k / norms[:, None]
    left, right, sizes_left, sizes_right = _placed(rows, form, volts, amperes)
    smallest = np.linalg.svd(left, compute_uv=False).min()
    margin = float(smallest / np.linalg.norm(rows, 2))
    if not margin > RANK_LIMIT:
        return None
    found = np.linalg.solve(left, np.hstack([-right, k]))
    parameters = found[:, :count] * sizes_left[:, None] / sizes_right
    return Solved(parameters, found[:, count:] * sizes_left[:, None], margin)


def _solved_exactly(relation: PortRelation, form: str, references: Numbers) -> Solved | None:
    """The same in exact numbers, where a matrix is singular or it is not."""
    count = len(relation.volts)
    volts = np.sqrt(references) if form == "s" else np.ones(count, object)
    rows = np.hstack([relation.m * volts, relation.n / volts])
    left, right, _, _ = _placed(rows, form, volts, volts)
    try:
        found = solved(left, np.hstack([-right, relation.k]))
    except np.linalg.LinAlgError:
        return None
    return Solved(found[:, :count], found[:, count:])


def _placed(
    rows: Numbers, form: str, volts: Numbers, amperes: Numbers
) -> tuple[Numbers, Numbers, Numbers, Numbers]:
    """The columns of the left and of the right side, and the sizes of what stands there."""
    count = len(volts)
    of_v, of_j = rows[:, :count], rows[:, count:]
    if form == "s":
        unit = np.ones(count)
        return of_v - of_j, of_v + of_j, unit, unit
    columns: list[list[Numbers]] = [[], []]
    sizes: list[list[float]] = [[], []]
    for side, names in enumerate(sides(form, count)):
        for name in names:
            port = int(name.lstrip("-vj")) - 1
            is_v = "v" in name
            sign = -1 if name[0] == "-" else 1
            columns[side].append(sign * (of_v if is_v else of_j)[:, port])
            sizes[side].append((volts if is_v else amperes)[port])
    left, right = (np.array(side).T for side in columns)
    return left, right, np.array(sizes[0]), np.array(sizes[1])
