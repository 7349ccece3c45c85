"""One denominator and several numerators with all that is common to them taken out."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cached_property, reduce
from math import gcd
from operator import and_

import numpy as np
from flint import Ordering, fmpz_mpoly, fmpz_mpoly_ctx

from equiv.equations.symbolic.bordered import MARKER, Expansion
from equiv.equations.symbolic.coprime import coprime

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
    if plain is None:
        powers = [_added(expansion, part, count) for part in terms]
    else:
        powers = _spread(terms, plain, expansion.keys.shift)
    return reduced(powers, context(count), least_taken=plain is not None)


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
) -> list[dict[Exponents, int]]:
    """Keys as exponents: all terms times the symbols that stand below, so that none is negative.

    The powers that every term has are left out.
    """
    inverted = sum(1 << bit for bit, below in plain if below)
    bits = [bit for bit, _ in plain]
    common = reduce(and_, (key ^ inverted for part in terms for key in part), (1 << shift) - 1)
    lowest = min((key >> shift for part in terms for key in part), default=0)
    found = []
    for part in terms:
        keys = [(key ^ inverted ^ common) - (lowest << shift) for key in part]
        found.append(dict(zip(_exponents(keys, bits, shift), part.values(), strict=True)))
    return found


def _exponents(keys: list[int], bits: list[int], shift: int) -> Iterable[Exponents]:
    """The bits of each key, and what stands above them."""
    if max(keys, default=0) >= 1 << _MACHINE_WORD:
        return [(*[key >> bit & 1 for bit in bits], key >> shift) for key in keys]
    columns = np.array(keys, np.int64)[:, None]
    powers = np.hstack([columns >> np.array(bits, np.int64) & 1, columns >> shift])
    return map(tuple, powers.tolist())


def _added(expansion: Expansion, terms: dict[int, int], count: int) -> dict[Exponents, int]:
    """Terms whose occurrences are of the same symbols, added up."""
    found: dict[Exponents, int] = {}
    for key, number in terms.items():
        exponents = expansion.exponents(key, count)
        found[exponents] = found.get(exponents, 0) + number
    return {exponents: number for exponents, number in found.items() if number}


def reduced(
    terms: Sequence[dict[Exponents, int]], ring: fmpz_mpoly_ctx, least_taken: bool = False
) -> Family:
    """Without common powers (which may be negative), common numbers, and common factors."""
    least = [] if least_taken else _least(exponents for part in terms for exponents in part)
    shared = reduce(gcd, (number for part in terms for number in part.values()), 0) or 1
    if any(least) or shared != 1:
        least = least or [0] * len(ring.names())
        terms = [
            {
                tuple([e - low for e, low in zip(exponents, least, strict=True)]): number // shared
                for exponents, number in part.items()
            }
            for part in terms
        ]
    if not coprime(terms):
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


def _least(exponents: Iterable[Exponents]) -> list[int]:
    """The least power of every symbol."""
    rows = zip(*exponents, strict=True)
    return [min(row) for row in rows]
