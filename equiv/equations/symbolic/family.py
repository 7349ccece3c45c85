"""One denominator and several numerators with all that is common to them taken out."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property, reduce
from math import gcd

import numpy as np
from flint import Ordering, fmpz_mpoly, fmpz_mpoly_ctx

from equiv.equations.symbolic.bordered import MARKER, Expansion
from equiv.equations.symbolic.coprime import Listed, coprime

Exponents = tuple[int, ...]
_MACHINE_WORD = 62


@dataclass(frozen=True)
class Family:
    """N_k / D: polynomials with whole coefficients in the symbols, s last."""

    ring: fmpz_mpoly_ctx
    terms: tuple[dict[Exponents, int], ...]
    """The coefficients of the denominator, then of the numerators, by their exponents."""

    @cached_property
    def denominator(self) -> fmpz_mpoly:
        """D."""
        return self.ring.from_dict(self.terms[0])

    @cached_property
    def numerators(self) -> tuple[fmpz_mpoly, ...]:
        """Every N_k."""
        return tuple(map(self.ring.from_dict, self.terms[1:]))

    @property
    def degree(self) -> int:
        """The degree in s of the denominator."""
        return max((exponents[-1] for exponents in self.terms[0]), default=0)

    @property
    def longest(self) -> int:
        """The number of terms of the longest of them."""
        return max(map(len, self.terms))

    @property
    def all(self) -> tuple[fmpz_mpoly, ...]:
        """The denominator and the numerators."""
        return (self.denominator, *self.numerators)


def context(count: int) -> fmpz_mpoly_ctx:
    """The ring of polynomials in so many symbols, and s; hostile names never reach it."""
    return fmpz_mpoly_ctx.get([f"x{i}" for i in range(count)] + ["s"], Ordering.lex)


def family(expansion: Expansion, count: int, sources: int) -> Family:
    """The denominator and the numerators of all sources, reduced."""
    parts = expansion.parted()
    terms = [parts.get(kind, {}) for kind in (MARKER, *range(sources))]
    plain = _plain(expansion, count)
    if plain is not None:
        return reduced(_spread(terms, plain, expansion.keys.shift), context(count))
    added = [_added(expansion, part, count) for part in terms]
    rows = [exponents for part in added for exponents in part]
    powers = np.array(rows, np.int64).reshape(len(rows), count + 1)
    numbers = [number for part in added for number in part.values()]
    return reduced(Listed(powers, numbers, list(map(len, added))), context(count))


def _plain(expansion: Expansion, count: int) -> list[tuple[int, bool]] | None:
    """The bit of each symbol, and whether it stands for 1 over it.

    None unless every occurrence has one symbol to the power ±1, and every symbol one occurrence.
    """
    found: dict[int, tuple[int, bool]] = {}
    for bit, own in enumerate(expansion.keys.powers):
        if len(own) > 1 or own[0][0] in found or abs(own[0][1]) != 1:
            return None
        found[own[0][0]] = bit, own[0][1] < 0
    # a symbol that the equations do not have is found at a marker's bit, which is taken off
    nowhere = len(expansion.keys.powers), False
    return [found.get(symbol, nowhere) for symbol in range(count)]


def _spread(
    terms: Sequence[dict[int, int]], plain: Sequence[tuple[int, bool]], shift: int
) -> Listed:
    """The bits of the keys as powers, and what stands above them as that of s.

    All is taken times the symbols that stand below, so that no power is negative.
    """
    keys = [key for part in terms for key in part]
    bits = [bit for bit, _ in plain]
    powers = np.empty((len(keys), len(bits) + 1), np.int64, "F")
    if max(keys, default=0) < 1 << _MACHINE_WORD:
        listed = np.array(keys, np.int64)
        powers[:, :-1] = listed[:, None] >> np.array(bits, np.int64) & 1
        powers[:, -1] = listed >> shift
    else:
        for row, key in zip(powers, keys, strict=True):
            row[:] = [*[key >> bit & 1 for bit in bits], key >> shift]
    powers[:, :-1] ^= np.array([below for _, below in plain], np.int64)
    numbers = [number for part in terms for number in part.values()]
    return Listed(powers, numbers, list(map(len, terms)))


def _added(expansion: Expansion, terms: dict[int, int], count: int) -> dict[Exponents, int]:
    """Terms whose occurrences are of the same symbols, added up."""
    found: dict[Exponents, int] = {}
    for key, number in terms.items():
        exponents = expansion.exponents(key, count)
        found[exponents] = found.get(exponents, 0) + number
    return {exponents: number for exponents, number in found.items() if number}


def reduced(listed: Listed, ring: fmpz_mpoly_ctx) -> Family:
    """Without common powers (which may be negative), common numbers, and common factors."""
    powers, numbers, counts = listed
    if numbers:
        powers = powers - powers.min(axis=0)
    shared = gcd(*numbers)
    if shared > 1:
        numbers = [number // shared for number in numbers]
    listed = Listed(powers, numbers, counts)
    rows = list(zip(*powers.T.tolist(), strict=True))
    terms = [dict(zip(rows[part], numbers[part], strict=True)) for part in listed.slices]
    if not coprime(listed):
        polynomials = [ring.from_dict(part) for part in terms]
        there = sorted(filter(None, polynomials), key=len)
        common = reduce(lambda a, b: a.gcd(b), there, ring.constant(0))
        if not common.is_constant():
            terms = [_whole(p / common if p else p) for p in polynomials]
    first = next(filter(None, terms), None)
    if first and first[max(first)] < 0:
        terms = [{exponents: -number for exponents, number in part.items()} for part in terms]
    return Family(ring, tuple(terms))


def _whole(polynomial: fmpz_mpoly) -> dict[Exponents, int]:
    """Python's own whole numbers, which everything can be done with."""
    terms = polynomial.to_dict().items()
    return {tuple(map(int, exponents)): int(number) for exponents, number in terms}
