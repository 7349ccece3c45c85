"""Windings on three limbs, connected as the vector group says.

A winding's row gives the EMF of its limb (per unit) from the voltages of the terminals and of the
star point; its transpose gives the terminal currents from those of the limbs. Polarity, cyclic
naming of the terminals and the sense of a delta or zigzag are found from the clock: the one
arrangement whose no-load voltages stand where the vector group says.

Source: IEC 60076-1:2011, clause 7 and annex D (from memory).
"""

from __future__ import annotations

import cmath
import itertools
import math

import numpy as np
from numpy.typing import NDArray

from equiv.errors import Diagnostic, UsageError
from equiv.threephase.model import VectorGroup

Rows = NDArray[np.float64]
"""Three limbs by four: terminals a, b, c and the star point."""

NEXT = np.roll(np.eye(3), 1, axis=1)
"""Each limb's follower: b after a, c after b, a after c."""
BALANCED = np.exp(-2j * np.pi * np.arange(3) / 3)
_SAME = 1e-9


def rows_of(connection: str, sense: int) -> tuple[Rows, Rows]:
    """L and R of L·e = R·v: star e = v - vn; delta √3·e = v - v(next); zigzag e - e(next) = √3·(v - vn)."""
    unit, follower = np.eye(3), NEXT if sense > 0 else NEXT.T
    to_star = np.hstack([unit, -np.ones((3, 1))])
    if connection == "Y":
        return unit, to_star
    if connection == "D":
        return unit, np.hstack([unit - follower, np.zeros((3, 1))]) / math.sqrt(3)
    return (unit - follower) / math.sqrt(3), to_star


def arranged(group: VectorGroup) -> tuple[Rows, Rows]:
    """First and second side's rows T₁ and T₂ of T₁·v₁ - T₂·v₂ = z·i, i the limb currents.

    With a zigzag winding the equation is written for its terminals, where its halves on two limbs
    add: the other side's limb EMFs go through the same two halves.

    Errors: UsageError where no connection of such windings has this clock.
    """
    first, second = group.first.connection, group.second.connection
    if "Z" in (first, second) and first == "Z":
        turned = VectorGroup(group.second, group.first, -group.clock % 12)
        second_rows, first_rows = arranged(turned)
        return first_rows, second_rows
    _, start = rows_of(first, 1)
    ahead = cmath.exp(-1j * math.pi * group.clock / 6)
    for sense, shift, polarity in itertools.product((1, -1), range(3), (1, -1)):
        left, right = rows_of(second, sense)
        named = polarity * np.linalg.matrix_power(NEXT, shift) @ left @ start
        if np.allclose(named[:, :3] @ BALANCED, right[:, :3] @ (BALANCED * ahead), atol=_SAME):
            return named, right
    windings = f"{first} and {second}"
    raise UsageError(
        Diagnostic("vector-group", f"windings {windings} have no clock number {group.clock}")
    )
