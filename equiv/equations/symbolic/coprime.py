"""Whether polynomials have a common factor, found out at one random point before any division."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
from numpy.typing import NDArray

Exponents = tuple[int, ...]
_PRIME = 2**31 - 1
_SEED = 20261201
_POINT = np.random.default_rng(_SEED).integers(1, _PRIME, 512)
_FEW = 24
"""Terms up to which the greatest common divisor itself is as quick."""


def coprime(polynomials: Sequence[Mapping[Exponents, int]]) -> bool:
    """Whether the first of the polynomials and some other have no factor in common, for certain.

    Only where they are linear in every symbol: with a + b·x and c + d·x at random values of the
    other symbols, a common factor in x makes a·d = b·c. False where that is so, or not known.
    """
    there = [part for part in polynomials if part]
    if len(there) < 2 or len(there[0]) <= _FEW or len(next(iter(there[0]))) > len(_POINT):
        return False
    first, *others = there
    found = [_Linear(first), _Linear(min(others, key=len))]
    return all(one.linear for one in found) and not _meet(*found).any()


class _Linear:
    """A polynomial at a random point: its value, and of each symbol's part of it."""

    def __init__(self, terms: Mapping[Exponents, int]) -> None:
        powers = np.array(list(terms), np.int64)
        self.linear = bool((powers <= 1).all())
        self.there = powers.any(axis=0)
        if not self.linear:
            return
        values = np.array([number % _PRIME for number in terms.values()], np.int64)
        values = values * _products(np.where(powers, _POINT[: powers.shape[1]], 1)) % _PRIME
        self.total = int(values.sum()) % _PRIME
        self.parts = [int(x) % _PRIME for x in values @ powers]


def _products(factors: NDArray[np.int64]) -> NDArray[np.int64]:
    """The product of each row, by halves."""
    while factors.shape[1] > 1:
        half = factors.shape[1] // 2
        left = factors[:, :half] * factors[:, half : 2 * half] % _PRIME
        factors = np.hstack([left, factors[:, 2 * half :]])
    return factors[:, 0]


def _meet(one: _Linear, other: _Linear) -> NDArray[np.bool_]:
    """The symbols in which both may have the same root."""
    products = [
        (one.total * b - other.total * a) % _PRIME == 0
        for a, b in zip(one.parts, other.parts, strict=True)
    ]
    return np.array(products) & one.there & other.there
