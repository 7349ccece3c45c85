"""What the shape of a network alone forbids: floating parts, loops, cut-sets.

Only findings that are certain are made here: a set of nodes that nothing but independent
current-driving branches joins to the ground, and a loop of nothing but independent
voltage-holding branches, make the equations singular whatever the values are.
"""

from __future__ import annotations

from collections.abc import Iterator
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from equiv.equations.laws import Laws
from equiv.equations.layout import Integers

MOST_FINDINGS = 20


class Finding(NamedTuple):
    """A fault of shape: `loop` or `cut`, the branches in it with their signs, and its nodes."""

    sort: str
    branches: tuple[int, ...]
    signs: tuple[int, ...]
    nodes: tuple[int, ...] = ()


class Roles(NamedTuple):
    """Which branches hold a voltage, and which drive a current, whatever the rest does."""

    holds: NDArray[np.bool_]
    drives: NDArray[np.bool_]


def roles(laws: Laws) -> Roles:
    """The part that each branch plays, read off the terms of its law."""
    layout, count = laws.layout, laws.layout.branch_count
    own_voltage, other, own_current = (np.zeros(count, dtype=bool) for _ in range(3))
    live = laws.across.coefficient != 0
    branch, first, second = (column[live] for column in laws.across[:3])
    tail, head = layout.tail[branch], layout.head[branch]
    same = ((first == tail) & (second == head)) | ((first == head) & (second == tail))
    same &= first != second
    own_voltage[branch[same]] = True
    other[branch[~same & (first != second)]] = True
    live = laws.through.coefficient != 0
    branch, sensed = laws.through.branch[live], laws.through.first[live]
    own_current[branch[branch == sensed]] = True
    other[branch[branch != sensed]] = True
    own_current |= ~laws.is_equation
    return Roles(
        holds=own_voltage & ~own_current & ~other, drives=own_current & ~own_voltage & ~other
    )


def findings(laws: Laws) -> list[Finding]:
    """Every certain fault of a network's shape."""
    part = roles(laws)
    return [*_cuts(laws, part.drives), *_loops(laws, part.holds)]


def _cuts(laws: Laws, drives: NDArray[np.bool_]) -> Iterator[Finding]:
    layout = laws.layout
    conducting = np.flatnonzero(~drives)
    nodes = layout.node_count
    tail, head = layout.tail[conducting] % (nodes + 1), layout.head[conducting] % (nodes + 1)
    label = components(nodes + 1, tail, head)
    grounded = label[nodes]
    floating = np.unique(label[label != grounded])
    for part in floating[:MOST_FINDINGS]:
        inside = label == part
        first, second = inside[layout.tail], inside[layout.head]
        crossing = np.flatnonzero(first ^ second)
        signs = np.where(first[crossing], 1, -1)
        yield Finding(
            "cut",
            tuple(crossing.tolist()),
            tuple(signs.tolist()),
            tuple(np.flatnonzero(inside).tolist()),
        )


def components(count: int, first: Integers, second: Integers) -> Integers:
    """A label for each of `count` nodes: the same where edges join them."""
    if count > 2000:
        from scipy.sparse import coo_matrix
        from scipy.sparse.csgraph import connected_components

        edges = coo_matrix((np.ones(len(first)), (first, second)), shape=(count, count))
        return np.asarray(connected_components(edges, directed=False)[1], dtype=np.int64)
    root = list(range(count))
    for a, b in zip(first.tolist(), second.tolist(), strict=True):
        root[_find(root, a)] = _find(root, b)
    return np.array([_find(root, node) for node in range(count)], dtype=np.int64)


def _find(root: list[int], node: int) -> int:
    while root[node] != node:
        root[node] = root[root[node]]
        node = root[node]
    return node


def _loops(laws: Laws, holds: NDArray[np.bool_]) -> Iterator[Finding]:
    """A loop for each voltage-holding branch that closes one (a spanning forest's chords)."""
    layout = laws.layout
    above: dict[int, list[tuple[int, int, int]]] = {}
    root = list(range(layout.node_count + 1))
    seen = 0
    for branch in np.flatnonzero(holds).tolist():
        tail, head = int(layout.tail[branch]), int(layout.head[branch])
        if _find(root, tail) == _find(root, head):
            if (seen := seen + 1) > MOST_FINDINGS:
                return
            path = _path(above, head, tail)
            yield Finding("loop", (branch, *(b for b, _ in path)), (1, *(sign for _, sign in path)))
            continue
        root[_find(root, tail)] = _find(root, head)
        above.setdefault(tail, []).append((head, branch, 1))
        above.setdefault(head, []).append((tail, branch, -1))


def _path(
    tree: dict[int, list[tuple[int, int, int]]], start: int, goal: int
) -> list[tuple[int, int]]:
    """Branches and directions from one node to another in a forest."""
    came: dict[int, tuple[int, int, int]] = {start: (start, -1, 0)}
    queue = [start]
    for node in queue:
        if node == goal:
            break
        for other, branch, sign in tree.get(node, ()):
            if other not in came:
                came[other] = (node, branch, sign)
                queue.append(other)
    path = []
    node = goal
    while node != start:
        node, branch, sign = came[node]
        path.append((branch, sign))
    return path[::-1]
