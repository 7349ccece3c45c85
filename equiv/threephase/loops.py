"""Transformers in a loop, whose vector groups must come to no displacement in all."""

from __future__ import annotations

from collections import deque
from collections.abc import Iterable, Iterator
from typing import NamedTuple

from equiv.threephase.declaring import Problem
from equiv.threephase.model import Item, Link, Transformer


class _Step(NamedTuple):
    bus: str
    item: str
    hours: int
    """How far `bus` lags the bus before it."""
    transforms: bool


def disagreements(items: Iterable[Item]) -> Iterator[tuple[str, Problem]]:
    """The transformers that close a loop with a displacement left over, each with its problem."""
    ways: dict[str, list[_Step]] = {}
    edges: list[tuple[str, str, str, int, bool]] = []
    for item in items:
        if isinstance(item, Link | Transformer):
            transforms = isinstance(item, Transformer)
            hours = item.group_of_windings.clock if isinstance(item, Transformer) else 0
            one, two = item.first.name, item.second.name
            ways.setdefault(one, []).append(_Step(two, item.name, hours, transforms))
            ways.setdefault(two, []).append(_Step(one, item.name, -hours % 12, transforms))
            edges.append((item.name, one, two, hours, transforms))
    hours_of, before = _tree(ways)
    kinds = {edge[0] for edge in edges if edge[4]}
    for name, one, two, hours, _ in edges:
        left = (hours_of[one] + hours - hours_of[two]) % 12
        if left:
            loop = _loop(name, one, two, before)
            named = [item for item in loop if item in kinds]
            yield (named[0] if name not in named else name), _problem(named, left)


def _tree(
    ways: dict[str, list[_Step]],
) -> tuple[dict[str, int], dict[str, tuple[str, str] | None]]:
    """The displacement of each bus along one way to it, and the bus and item before it."""
    hours_of: dict[str, int] = {}
    before: dict[str, tuple[str, str] | None] = {}
    for root in ways:
        if root in hours_of:
            continue
        hours_of[root], before[root] = 0, None
        waiting = deque([root])
        while waiting:
            bus = waiting.popleft()
            for step in ways[bus]:
                if step.bus not in hours_of:
                    hours_of[step.bus] = (hours_of[bus] + step.hours) % 12
                    before[step.bus] = bus, step.item
                    waiting.append(step.bus)
    return hours_of, before


def _loop(name: str, one: str, two: str, before: dict[str, tuple[str, str] | None]) -> list[str]:
    """The items of the loop that an item closes."""
    first, second = _way(one, before), _way(two, before)
    common = {item for item in first if item in set(second)}
    return [*(i for i in reversed(first) if i not in common), name,
            *(i for i in second if i not in common)]  # fmt: skip


def _way(bus: str, before: dict[str, tuple[str, str] | None]) -> list[str]:
    items = []
    while (step := before[bus]) is not None:
        bus, item = step
        items.append(item)
    return items


def _problem(named: list[str], left: int) -> Problem:
    some = ", ".join(named[:8]) + (", …" if len(named) > 8 else "")
    degrees = 30 * (left if left <= 6 else left - 12)
    return Problem(
        "groups-disagree",
        f"the vector groups of {some} come to {degrees} degrees round a loop, not to zero",
        "vector",
        "transformers in parallel have vector groups of the same clock number",
    )
