"""Voltages that only ties to earth hold, or nothing at all: kept apart, so that they keep digits.

A part without solid earthing is held to earth by little (the charging of its cables), and what
flows there would be lost in sums with the currents of its lines. Its common voltage is an unknown
of its own, a mode n: it has no voltage across any branch inside the part, and Kirchhoff's law for
the whole part, nᵀ·(currents to earth) = 0, is written without the currents inside.

Source: null spaces as in equations/port_relation.py; G. Kron (1939), from memory.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np

from equiv.equations.degenerate import echelon
from equiv.equations.layout import Integers, Numbers
from equiv.threephase.coordinates.conductors import EARTH, Branch3

RANK = 1e-10
"""Singular values below this part of the largest are none."""


_WHOLE = 1e-12


class Modes(NamedTuple):
    """Modes as columns of node voltages; the first `free` are not held at all."""

    shapes: Numbers
    across: Numbers
    """T·n, the voltages that modes have across branches: to earth alone."""
    free: int
    held: Integers
    """A node for each mode: with these nodes at zero, no mode is left."""


def modes_of(branches: Sequence[Branch3], incidence: Numbers) -> Modes:
    """The modes of a system of conductors, from the incidence of its branches and nodes."""
    inside, to_earth, held = [], np.zeros(len(incidence), bool), []
    at = 0
    for branch in branches:
        rows = slice(at, at := at + len(branch.p))
        to_earth[rows] = EARTH in branch.nodes or branch.to_earth
        own = incidence[rows]
        held.append(_held(branch, own))
        if not to_earth[rows].any():
            inside.append(held[-1])
        elif len(own) == 3 and not branch.to_earth:
            # between its conductors a branch to earth holds as much as any other
            inside.append(held[-1] - held[-1].mean(axis=0))
    shapes = _exact(_null_space(inside, incidence.shape[1]))
    across = np.where(to_earth[:, None], incidence @ shapes, 0)
    free = _null_space([rows @ shapes for rows in held], shapes.shape[1])
    count = free.shape[1]
    if count:
        others = np.setdiff1d(np.arange(shapes.shape[1]), _pivots(free))
        shapes, across = (
            np.hstack([first, whole[:, others]])
            for first, whole in ((shapes @ free, shapes), (0 * (across @ free), across))
        )
    return Modes(shapes, across, count, _pivots(shapes))


def _held(branch: Branch3, incidence: Numbers) -> Numbers:
    """The voltages that a branch holds: T, or the part of it that Q leaves."""
    if np.array_equal(branch.q, np.eye(len(branch.q))):
        return incidence
    _, values, right = np.linalg.svd(branch.q)
    live = right[values > RANK * values.max(initial=0.0)]
    if len(live) == len(right):
        return incidence
    projector = live.conj().T @ live
    small = np.abs(projector.imag).max(initial=0.0) <= RANK
    return np.asarray((projector.real if small else projector) @ incidence)


def _null_space(parts: Sequence[Numbers], size: int) -> Numbers:
    """An orthonormal basis of what all the rows make zero, in columns."""
    matrix = np.vstack([np.zeros((1, size)), *parts])
    triangle = np.linalg.qr(matrix, mode="r") if len(matrix) > size else matrix
    _, values, right = np.linalg.svd(triangle)
    rank = int((values > RANK * max(values.max(initial=0.0), 1.0)).sum())
    return np.asarray(right[rank:].conj().T)


def _exact(columns: Numbers) -> Numbers:
    """The same space by columns with a row of their own each, whole numbers where they are."""
    if not columns.size:
        return columns
    reduced = echelon(columns)
    whole = np.rint(reduced.real)
    return np.asarray(np.where(np.abs(reduced - whole) <= _WHOLE, whole, reduced))


def _pivots(columns: Numbers) -> Integers:
    """A row for each column, so that the columns are independent in these rows."""
    rest, found = columns.copy(), []
    for column in range(columns.shape[1]):
        row = int(np.argmax(np.abs(rest[:, column])))
        found.append(row)
        others = rest[row, column + 1 :] / rest[row, column]
        rest[:, column + 1 :] -= np.outer(rest[:, column], others)
    return np.array(found, dtype=np.int64)
