"""A one-line diagram as conductors: terminals, star points and windings, three phases each.

Every branch is three conductors (or the limbs of a transformer) with one law for the three,

    P·i = Q·(T·v - e),

T the incidence of terminals, star points and windings. Nothing is transformed into symmetrical
components, except that data which are entered as z0, z1, z2 are made a 3×3 matrix in the first
place. Star points and their impedances are nodes and branches.

Source: three-phase primitive networks: G. Kron, Tensor Analysis of Networks (1939), from memory.
"""

from __future__ import annotations

from collections.abc import Iterator
from typing import NamedTuple

import numpy as np

from equiv.equations.layout import Numbers
from equiv.threephase.coordinates.windings import BALANCED, arranged
from equiv.threephase.entered import scaled
from equiv.threephase.model import Link, OneLine, Shunt, Transformer, View
from equiv.threephase.sequence.displacement import no_load_angles, turn
from equiv.threephase.sequence.sequences import emf, ohms_of, there

EARTH = -1
_MODES = np.vander(np.exp(2j * np.pi * np.arange(3) / 3), 3, increasing=True)


class Branch3(NamedTuple):
    """Up to three conductors with one law: P·i = Q·(T·v - e)."""

    nodes: tuple[int, ...]
    """The columns of `incidence`; EARTH is left out."""
    incidence: Numbers
    p: Numbers
    q: Numbers
    emf: Numbers
    to_earth: bool = False
    """It is nothing but a tie to earth: charging, or the impedance of a star point."""


def circulant(zero: complex, positive: complex, negative: complex) -> Numbers:
    """The 3×3 matrix of a branch that is entered by its sequence values."""
    # columns of _MODES: zero, negative (a, b, c ahead of each other), positive
    values = np.array([zero, negative, positive])
    return np.asarray(_MODES @ np.diag(values) @ _MODES.conj().T / 3)


def law(
    zero: complex | None, positive: complex | None, negative: complex | None
) -> tuple[Numbers, Numbers]:
    """P and Q of impedances of which some are infinite (None): there i = 0 stands instead."""
    z = (zero, positive, negative)
    p = circulant(*(1.0 if each is None else each for each in z))
    if None not in z:
        return p, np.eye(3)
    return p, circulant(*(0.0 if each is None else 1.0 for each in z))


class Conductors:
    """A system's conductors in one view, per unit of each bus's phase voltage."""

    def __init__(self, system: OneLine, view: View) -> None:
        self.system, self.view = system, view
        self.angles = no_load_angles(system)
        self.first_node = {name: 3 * n for n, name in enumerate(system.buses)}
        self.node_count = 3 * len(system.buses)
        self.branches: list[Branch3] = []
        self.shunts: dict[str, tuple[str, int]] = {}
        """The bus of each item at one bus, and the first of its currents."""
        rows = 0
        for item in there(system, view):
            before = len(self.branches)
            if isinstance(item, Shunt):
                self.branches += self._shunt(item)
                self.shunts[item.name] = (item.bus.name, rows + self._rows(before) - 3)
            elif isinstance(item, Link):
                self.branches += self._link(item)
            elif isinstance(item, Transformer):
                self.branches += self._transformer(item)
            rows += self._rows(before)

    def _rows(self, start: int) -> int:
        """How many currents the branches from one on have."""
        return sum(len(branch.p) for branch in self.branches[start:])

    def at(self, bus: str) -> tuple[int, int, int]:
        """The nodes of phases a, b, c."""
        first = self.first_node[bus]
        return first, first + 1, first + 2

    def _new_node(self) -> int:
        self.node_count += 1
        return self.node_count - 1

    def _star_point(self, neutral: complex | None, base: float) -> tuple[int, list[Branch3]]:
        """The node of a star point, and the impedance that earths it."""
        if neutral == 0:
            return EARTH, []
        node = self._new_node()
        if neutral is None:
            return node, []
        one = np.ones((1, 1))
        z = scaled(neutral, self.view.reactances) / base
        return node, [Branch3((node,), one, z * one, one, np.zeros(1), True)]

    def _shunt(self, item: Shunt) -> Iterator[Branch3]:
        base = ohms_of(item.bus, self.system.base)
        z = [item.series(s, self.view) for s in (0, 1, 2)]
        neutral = item.neutral()
        if item.lacks_zero_sequence:
            neutral = None  # no data: earth faults that reach it are not asked for
        if neutral is None and z[1] is not None:
            z[0] = z[1]  # an open star point carries nothing, whatever stands here
        star, earthing = self._star_point(neutral, base)
        yield from earthing
        p, q = law(*(None if each is None else each / base for each in z))
        behind = (emf(item, self.system, self.view) or 0.0) * turn(self.angles[item.bus.name])
        incidence = np.hstack([np.eye(3), -np.ones((3, 1))])
        yield Branch3((*self.at(item.bus.name), star), incidence, p, q, behind * BALANCED)

    def _link(self, item: Link) -> Iterator[Branch3]:
        base = ohms_of(item.first, self.system.base)
        z = [item.series(s, self.view) for s in (0, 1, 2)]
        if z[0] is None:
            z[0] = z[1]  # no data: earth faults that reach it are not asked for
        p, q = law(*(None if each is None else each / base for each in z))
        unit, none = np.eye(3), np.zeros(3)
        nodes = (*self.at(item.first.name), *self.at(item.second.name))
        yield Branch3(nodes, np.hstack([unit, -unit]), p, q, none)
        charging = [item.charging(s, self.view) * base / 2 for s in (0, 1, 2)]
        if any(charging):
            for bus in (item.first, item.second):
                yield Branch3(self.at(bus.name), unit, unit, circulant(*charging), none, True)

    def _transformer(self, item: Transformer) -> Iterator[Branch3]:
        """Limb currents: the windings' voltages, in their rated values, part by the leakage."""
        sides = (item.first, item.second)
        nodes: list[int] = []
        incidence = []
        for number, rows in enumerate(arranged(item.group_of_windings)):
            bus = sides[number]
            star = EARTH
            if rows[:, 3].any():
                base = ohms_of(bus, self.system.base)
                star, earthing = self._star_point(item.neutral(number + 1), base)
                yield from earthing
            nodes += [*self.at(bus.name), star]
            sign = -1 if number else 1
            incidence.append(sign * rows * bus.volts / item.rated[number])
        base = item.rated[0] ** 2 / self.system.base
        p, q = law(*(item.series(s, self.view) / base for s in (0, 1, 2)))
        yield Branch3(tuple(nodes), np.hstack(incidence), p, q, np.zeros(3))
