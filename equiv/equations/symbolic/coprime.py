"""Whether polynomials have a common factor, found out at a random point before any division."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

Integers = NDArray[np.int64]
_PRIME = 2**16 + 1
"""A prime whose residues are the powers of 3, so that a term at a point is one look into a table."""
_FEW = 24
"""Terms up to which the greatest common divisor itself is as quick."""
_SEED = 20261201
_POINTS: Integers = np.random.default_rng(_SEED).integers(0, _PRIME - 1, (3, 512))
"""Points, as the powers of 3 that the symbols are."""


def _powers_of_three() -> Integers:
    found = np.ones(1, np.int64)
    while len(found) < _PRIME - 1:
        found = np.concatenate([found, found * pow(3, len(found), _PRIME) % _PRIME])
    return found


_POWER_OF_THREE = _powers_of_three()


class Listed(NamedTuple):
    """Polynomials one below the other, a row a term."""

    powers: Integers
    """Of each symbol (a column) in each term."""
    numbers: list[int]
    """The coefficients of the terms."""
    counts: list[int]
    """How many terms each polynomial has."""

    @property
    def slices(self) -> list[slice]:
        """The rows of each polynomial."""
        ends = np.cumsum(self.counts).tolist()
        return [slice(end - n, end) for end, n in zip(ends, self.counts, strict=True)]


def coprime(polynomials: Listed) -> bool:
    """Whether they have no factor in common but numbers and powers of symbols, for certain.

    The first and the shortest of the others are looked at. Where both are linear in x, a + b·x and
    c + d·x, a common factor with x in it makes a·d = b·c whatever the other symbols are. A factor
    without such symbols divides what stands with each product of them; where that is one term for
    one of the products, it is one term itself. False where there may be a factor, or many points
    do not tell.
    """
    there = [part for part in polynomials.slices if part.stop > part.start]
    if len(there) < 2 or there[0].stop - there[0].start <= _FEW:
        return False
    shortest = min(there[1:], key=lambda part: part.stop - part.start)
    one, other = (polynomials.powers[part] for part in (there[0], shortest))
    if one.shape[1] > _POINTS.shape[1]:
        return False
    degrees = np.maximum(one.max(axis=0), other.max(axis=0))
    if degrees.max() > 1 and not _one_stands_alone(one[:, degrees <= 1]):
        return False
    numbers = [_residues(polynomials.numbers[part]) for part in (there[0], shortest)]
    return any(
        _differences(_At(one, numbers[0], point), _At(other, numbers[1], point))[degrees == 1].all()
        for point in _POINTS[:, : one.shape[1]]
    )


def _one_stands_alone(powers: Integers) -> bool:
    return bool((np.unique(powers, axis=0, return_counts=True)[1] == 1).any())


def _residues(numbers: list[int]) -> Integers:
    return np.array([number % _PRIME for number in numbers], np.int64)


class _At:
    """A polynomial at a point: its value, and the value of the terms that have each symbol."""

    def __init__(self, powers: Integers, numbers: Integers, point: Integers) -> None:
        values = _POWER_OF_THREE[(powers @ point) & (_PRIME - 2)] * numbers % _PRIME
        self.total = int(values.sum()) % _PRIME
        self.parts = values @ powers % _PRIME


def _differences(one: _At, other: _At) -> Integers:
    """a·d - b·c for every symbol, but for a factor."""
    found: Integers = (one.total * other.parts - other.total * one.parts) % _PRIME
    return found
