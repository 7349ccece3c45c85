"""The terms of a quantity: what each source gives to it, and the sums they make."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property
from itertools import accumulate
from typing import Any

from equiv.analyses.result import pair
from equiv.elements.element import Frequency
from equiv.elements.quantity import Quantity
from equiv.equations.scalars import scalar, zero_like
from equiv.network import Network
from equiv.units import is_exact

CLOSURE_LIMIT = 1e-9
"""How far the sum may be from all sources at once, relative to Σ|term|."""
TERM_LIMIT = 1e-9
"""How far a term may be from its sub-circuit, relative to the term."""
FLOOR = 1e-3
"""A smaller term is judged against this part of Σ|term|."""
NOTABLE_CANCELLATION = 10.0


def limit_of(network: Network, limit: float = CLOSURE_LIMIT) -> float:
    """A limit of differences: nothing at all where the numbers are exact."""
    return 0.0 if network.exact else limit


@dataclass(frozen=True)
class ControlledState:
    """A controlled source in a sub-circuit: what it senses (V or A) and what it puts out."""

    name: str
    kind: str
    senses: str
    sensed: complex
    output: complex
    unit: str
    sensed_unit: str
    reversed: bool
    """Its polarity is opposite to its marks: what it senses is negative, or over 90° away."""

    def data(self) -> dict[str, Any]:
        """The JSON of it."""
        return {
            "name": self.name, "kind": self.kind, "senses": self.senses,
            "sensed": pair(self.sensed), "output": pair(self.output), "unit": self.unit,
            "reversed": self.reversed,
        }  # fmt: skip


@dataclass(frozen=True)
class Paths:
    """A term by its paths: direct, and through each controlled source; the parts add up to it."""

    direct: complex
    through: tuple[tuple[str, complex], ...]

    @cached_property
    def total(self) -> complex:
        """The sum of the parts."""
        return self.direct + sum(part for _, part in self.through)

    @property
    def gross(self) -> float:
        """Σ|part|."""
        return abs(self.direct) + sum(abs(part) for _, part in self.through)


@dataclass(frozen=True)
class Term:
    """What one source (or group) gives to a quantity. Phasors are rms; units are in the fields.

    `contribution` is None where the sub-circuit has no solution, with the `reason` in words.
    """

    source: str
    kind: str
    members: tuple[str, ...]
    value: complex | None
    unit: str
    coefficient: complex | None
    coefficient_unit: str
    contribution: complex | None
    check: complex | None = None
    controlled: tuple[ControlledState, ...] = ()
    reason: str | None = None
    parts: tuple[Term, ...] = ()
    """The terms of a group's members."""
    paths: Paths | None = None

    @property
    def number(self) -> complex:
        """The contribution, 0 where there is none."""
        return 0.0 if self.contribution is None else self.contribution


@dataclass(frozen=True)
class Power:
    """A power as a quadratic form of the sources (VA): own terms, cross terms, true total.

    `cross[j][k]` with j < k is V_j·I_k* + V_k·I_j* of the pair; below the diagonal it is zero, so
    that the own terms and all of the matrix add up to the total.
    """

    sources: tuple[str, ...]
    own: tuple[complex | None, ...]
    cross: tuple[tuple[complex | None, ...], ...]
    all_on: complex
    size: float
    """Σ|voltage term| · Σ|current term|: what differences are relative to."""
    reasons: tuple[str | None, ...] = ()
    """Why a source alone has no power: its sub-circuit has no solution."""

    @property
    def complete(self) -> bool:
        """Whether every source alone has a solution."""
        return not any(self.reasons)

    @property
    def own_sum(self) -> complex:
        """The sum of the own powers."""
        return sum((p for p in self.own if p is not None), zero_like(self.all_on))

    @property
    def cross_sum(self) -> complex:
        """The sum of the cross terms."""
        found = (c for row in self.cross for c in row if c is not None)
        return sum(found, zero_like(self.all_on))

    @property
    def total(self) -> complex:
        """Own and cross terms; all sources at once where one of them does not exist."""
        return self.own_sum + self.cross_sum if self.complete else self.all_on

    @property
    def difference(self) -> float:
        """The sum of own and cross terms against all sources at once, relative to `size`."""
        off = abs(self.total - self.all_on)
        return off / self.size if self.size else off


@dataclass(frozen=True)
class FrequencyTerms:
    """The terms at one frequency, and all sources at once (`all_on`), in the quantity's unit."""

    frequency: Frequency
    terms: tuple[Term, ...]
    all_on: complex
    power: Power | None = None
    refusal: str | None = None
    """Why the quantity has no value at this frequency, in words."""

    @cached_property
    def complete(self) -> bool:
        """Whether every term exists."""
        if self.power:
            return self.power.complete
        return all(term.contribution is not None for term in self.terms)

    @cached_property
    def total(self) -> complex:
        """The sum of the terms; all sources at once where a term does not exist."""
        if self.power:
            return self.power.total
        if not self.complete:
            return self.all_on
        return sum((t.number for t in self.terms), zero_like(self.all_on))

    @cached_property
    def arithmetic_sum(self) -> float:
        """Σ|term|."""
        return math.fsum(abs(t.number) for t in self.terms)

    @property
    def difference(self) -> float:
        """|sum - all sources at once| / Σ|term|."""
        if self.power:
            return self.power.difference
        if not self.complete:
            return 0.0
        off = abs(self.total - self.all_on)
        return off / self.arithmetic_sum if self.arithmetic_sum else off

    @property
    def terms_cancel(self) -> bool:
        """Whether several terms make a sum of nothing."""
        several = sum(1 for term in self.terms if term.number) > 1
        return self.complete and several and self.cancels_to_nothing

    @cached_property
    def cancels_to_nothing(self) -> bool:
        """Whether the total is below the closure limit: its shares mean nothing."""
        if is_exact(self.total):
            return not self.total
        return abs(self.total) <= CLOSURE_LIMIT * self.arithmetic_sum

    @cached_property
    def cancellation(self) -> float | None:
        """Σ|term| / |total|."""
        return None if self.cancels_to_nothing else self.arithmetic_sum / abs(self.total)

    @property
    def digits_lost(self) -> float:
        """Decimal digits that the cancellation of the terms costs."""
        return math.log10(self.cancellation) if self.cancellation else math.inf

    def share(self, term: Term) -> float | None:
        """The in-phase share: Re(term · total*) / |total|²."""
        if term.contribution is None or self.cancels_to_nothing or not self.complete:
            return None
        total = scalar(self.total)
        return (term.contribution * total.conjugate()).real / abs(total) ** 2

    def gross_share(self, term: Term) -> float | None:
        """|term| / Σ|term|."""
        if term.contribution is None or not self.arithmetic_sum:
            return None
        return abs(term.contribution) / self.arithmetic_sum

    @property
    def agrees(self) -> bool:
        """Whether the sum closes and the terms are those of their sub-circuits."""
        if self.refusal:
            return True
        return self.difference <= CLOSURE_LIMIT and (self.worst_term or 0.0) <= TERM_LIMIT

    @cached_property
    def running_sums(self) -> tuple[complex | None, ...]:
        """The sum up to each term; None where a term does not exist."""
        if not self.complete:
            return (None,) * len(self.terms)
        return tuple(accumulate(scalar(t.number) for t in self.terms))

    @cached_property
    def worst_term(self) -> float | None:
        """The largest relative difference of a term from its sub-circuit; None if not checked."""
        floor = FLOOR * self.arithmetic_sum
        off = [
            abs(t.contribution - t.check) / max(abs(t.contribution), abs(t.check), floor)
            if max(abs(t.contribution), abs(t.check), floor)
            else 0.0
            for t in self.terms
            if t.contribution is not None and t.check is not None
        ]
        return max(off) if off else None


@dataclass(frozen=True)
class QuantityTerms:
    """A quantity's terms at each frequency. `positive` says its reference direction."""

    quantity: Quantity
    label: str | None
    unit: str
    heading: str
    positive: str
    frequencies: tuple[FrequencyTerms, ...]

    @property
    def rms(self) -> float | None:
        """√Σ|total|² over the frequencies, where there are several (a power simply adds).

        None where the quantity has no value at one of them.
        """
        if len(self.frequencies) < 2 or any(f.refusal for f in self.frequencies):
            return None
        if self.quantity.what == "P":
            return math.fsum(f.total.real for f in self.frequencies)
        return math.sqrt(math.fsum(abs(f.total) ** 2 for f in self.frequencies))
