"""The sequence networks joined at a fault: currents per volt before the fault.

three-phase:       I1 = E/(Z1 + Zf)
line-ground:       I1 = I2 = I0 = E/(Z1 + Z2 + Z0 + 3·(Zf + Zg))
line-line:         I1 = -I2 = E/(Z1 + Z2 + Zf)
line-line-ground:  with A1 = Z1 + Zf, A2 = Z2 + Zf, A0 = Z0 + Zf + 3·Zg
                   I1 = E/(A1 + A2·A0/(A2 + A0)), I2 = -I1·A0/(A2 + A0), I0 = -I1·A2/(A2 + A0)

Currents are counted out of the bus into the fault. Zf is in each phase (three-phase), between
phase a and earth with Zg in series (line-ground), between phases b and c (line-line), in each of
the two legs with Zg from their common point to earth (line-line-ground).

Source: C. L. Fortescue (1918); IEC 60909-0:2016, clause 7 (from memory).
"""

from __future__ import annotations

import math
from typing import NamedTuple

import numpy as np

from equiv.equations.layout import Numbers
from equiv.threephase.cases import Phases, Sequence, phase_of_terms

A = complex(-0.5, math.sqrt(3) / 2)
"""The operator of 120 degrees."""
A2 = A.conjugate()
EARTH_FAULTS = ("line-ground", "line-line-ground")


class Impedances(NamedTuple):
    """Driving-point impedances (one a bus), infinite where a bus is not tied to the reference."""

    positive: Numbers
    negative: Numbers
    zero: Numbers

    def of(self, row: int) -> Sequence:
        """Those of one bus."""
        return Sequence(*(complex(z[row]) for z in (self.zero, self.positive, self.negative)))


class Currents(NamedTuple):
    """Sequence currents into the fault per volt before it, one a bus."""

    zero: Numbers
    positive: Numbers
    negative: Numbers


def currents(kind: str, z: Impedances, fault: Numbers, ground: Numbers) -> Currents:
    """The sequence currents of a type of fault, per unit of the voltage before the fault.

    Each impedance is a fraction n/d, so that an infinite one is 1/0; nothing is divided but once.
    Where a current is not bounded (0 ohm in all of the loop) it is infinite.
    """
    (n1, d1), (n2, d2), (n0, d0) = map(_fraction, z)
    none = np.zeros(len(n1), complex)
    if kind == "three-phase":
        return Currents(none, _over(d1, n1 + fault * d1), none)
    if kind == "line-ground":
        all_three = d1 * d2 * d0
        loop = n1 * d2 * d0 + n2 * d1 * d0 + n0 * d1 * d2 + 3 * (fault + ground) * all_three
        each = _over(all_three, loop)
        return Currents(each, each, each)
    if kind == "line-line":
        each = _over(d1 * d2, n1 * d2 + n2 * d1 + fault * d1 * d2)
        return Currents(none, each, -each)
    a1, a2, a0 = n1 + fault * d1, n2 + fault * d2, n0 + (fault + 3 * ground) * d0
    loop = a1 * a2 * d0 + a1 * a0 * d2 + a2 * a0 * d1
    return Currents(
        -_over(a2 * d1 * d0, loop),
        _over(d1 * (a2 * d0 + a0 * d2), loop),
        -_over(a0 * d1 * d2, loop),
    )


def _fraction(z: Numbers) -> tuple[Numbers, Numbers]:
    infinite = ~np.isfinite(z)
    return np.where(infinite, 1, z), np.where(infinite, 0, 1)


def _over(above: Numbers, below: Numbers) -> Numbers:
    """above/below; 0 where nothing stands above, infinite where only below is nothing."""
    out = np.where(above == 0, 0, np.inf).astype(complex)
    return np.asarray(np.divide(above, below, out=out, where=(below != 0)))


def phase_currents(kind: str, i: Sequence) -> Phases:
    """The phase currents of a fault; phases that the fault does not touch carry exactly none."""
    zero, positive, _ = i
    if kind == "line-ground":
        return Phases(3 * zero, 0j, 0j)
    if kind == "three-phase":
        return Phases(positive, A2 * positive, A * positive)
    if kind == "line-line":
        b = (A2 - A) * positive
        return Phases(0j, b, -b)
    return Phases(0j, *phases(i)[1:])


def phases(of: Sequence) -> Phases:
    """Phase values from sequence values: Xa = X0 + X1 + X2, Xb = X0 + a²·X1 + a·X2, Xc so too."""
    zero, positive, negative = of
    return Phases(
        zero + positive + negative,
        zero + A2 * positive + A * negative,
        zero + A * positive + A2 * negative,
    )


def term_weights(kind: str) -> Sequence:
    """How much of each sequence current is in the phase that the terms are about."""
    if phase_of_terms(kind) == "a":
        return Sequence(1, 1, 1)
    return Sequence(1, A2, A)
