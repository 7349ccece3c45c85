"""No-load angles of the buses: what the vector groups of the transformers between them make.

IEC 60076-1: the second side lags the first by clock × 30 degrees. Positive-sequence quantities
turn with the angle, negative-sequence ones against it; zero-sequence ones pass star-star groups
only, reversed where the clock is 2, 6 or 10: exp(j·3·angle), which is one or minus one.
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Mapping

from equiv.errors import Diagnostic, UsageError
from equiv.threephase.model import Link, OneLine, Transformer

STEPS = 12
_TURN = tuple(cmath.exp(1j * math.pi * k / 6) for k in range(STEPS))


def turn(steps: int) -> complex:
    """The phasor of one that leads by steps of 30 degrees; quarter turns are exact."""
    steps %= STEPS
    return (1, 1j, -1, -1j)[steps // 3] if steps % 3 == 0 else _TURN[steps]


def rotation(sequence: int, steps: int) -> complex:
    """What a sequence quantity of a bus is multiplied by that leads by steps of 30 degrees."""
    if sequence == 0:
        return 1 if steps % 4 == 0 else -1
    return turn(steps if sequence == 1 else -steps)


def no_load_angles(system: OneLine) -> Mapping[str, int]:
    """How far each bus leads the first bus of its part at no load, in steps of 30 degrees.

    Errors: UsageError where the vector groups around a loop disagree.
    """
    near: dict[str, list[tuple[str, int, str]]] = {name: [] for name in system.buses}
    for item in system.items.values():
        if isinstance(item, Link | Transformer):
            lag = item.group_of_windings.clock if isinstance(item, Transformer) else 0
            near[item.first.name].append((item.second.name, -lag, item.name))
            near[item.second.name].append((item.first.name, lag, item.name))
    angles: dict[str, int] = {}
    for start in system.buses:
        if start in angles:
            continue
        angles[start] = 0
        queue = [start]
        for bus in queue:
            for other, steps, name in near[bus]:
                angle = (angles[bus] + steps) % STEPS
                if other not in angles:
                    angles[other] = angle
                    queue.append(other)
                elif angles[other] != angle:
                    raise UsageError(_disagree(name, bus, other))
    return angles


def _disagree(name: str, bus: str, other: str) -> Diagnostic:
    return Diagnostic(
        "vector-groups",
        f"the vector groups around a loop through {name} disagree: two ways from {bus} to "
        f"{other} give different phase displacements",
        hint="transformers in parallel must have one phase displacement",
    )
