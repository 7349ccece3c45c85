"""A coefficient of a law as a number times powers of symbols and of s: what formulas are made of."""

from __future__ import annotations

from fractions import Fraction
from itertools import count
from typing import Any, NamedTuple

_occurrences = count()


class TooLargeError(Exception):
    """An expansion has more terms than it may have."""


class Part(NamedTuple):
    """One term: its number, the powers of its symbols (by their numbers), the power of s."""

    number: Fraction | int
    powers: tuple[tuple[int, int], ...]
    s: int


class Amount:
    """A sum of terms, each with the place in a law at which its symbols stand.

    Laws make amounts with + - * /, each operation a new occurrence. A product with a number stays
    the same one, so that what the equations write of it into several rows, with signs, is known
    to be one rank-one matrix.
    """

    __slots__ = ("parts",)

    def __init__(self, parts: dict[int, Part]) -> None:
        self.parts = parts

    @classmethod
    def of(cls, number: Any, powers: dict[int, int] | None = None, s: int = 0) -> Amount:
        """number · Π symbol^power · s^power, as a new occurrence."""
        kept = tuple(sorted((k, p) for k, p in (powers or {}).items() if p))
        # numbers need not be told apart
        occurrence = next(_occurrences) if kept or s else -1
        exact = number if isinstance(number, int | Fraction) else Fraction(number)
        whole = exact.denominator == 1  # Python's own whole numbers are quicker
        return cls({occurrence: Part(exact.numerator if whole else exact, kept, s)})

    def __eq__(self, other: object) -> bool:
        return bool(other == 0 and not self)

    __hash__ = None  # type: ignore[assignment]

    def __bool__(self) -> bool:
        return any(part.number for part in self.parts.values())

    def __neg__(self) -> Amount:
        negative = [Amount.of(-p.number, dict(p.powers), p.s) for p in self.parts.values()]
        return Amount({k: part for one in negative for k, part in one.parts.items()})

    def __add__(self, other: Any) -> Amount:
        parts = dict(self.parts)
        for occurrence, part in _amount(other).parts.items():
            known = parts.get(occurrence)
            number = part.number + (known.number if known else 0)
            parts[occurrence] = part._replace(number=number)
        return Amount({k: part for k, part in parts.items() if part.number})

    __radd__ = __add__

    def __sub__(self, other: Any) -> Amount:
        return self + -_amount(other)

    def __rsub__(self, other: Any) -> Amount:
        return _amount(other) + -self

    def __mul__(self, other: Any) -> Amount:
        if isinstance(other, int | Fraction):
            return self._scaled(other)
        if not isinstance(other, Amount):
            return NotImplemented  # an array takes its elements one by one
        if not self.parts or not other.parts:
            return Amount({})
        one, two = self.only, other.only
        powers = dict(one.powers)
        for symbol, power in two.powers:
            powers[symbol] = powers.get(symbol, 0) + power
        return Amount.of(one.number * two.number, powers, one.s + two.s)

    __rmul__ = __mul__

    def _scaled(self, times: Fraction | int) -> Amount:
        if times == 1:
            return self
        if not times:
            return Amount({})
        opposite = times == -1
        return Amount(
            {
                k: Part(-p.number if opposite else p.number * times, p.powers, p.s)
                for k, p in self.parts.items()
            }
        )

    def __truediv__(self, other: Any) -> Amount:
        return self * _amount(other).inverse()

    def __rtruediv__(self, other: Any) -> Amount:
        return _amount(other) * self.inverse()

    def inverse(self) -> Amount:
        """1 over an amount of one term."""
        part = self.only
        return Amount.of(1 / Fraction(part.number), {k: -p for k, p in part.powers}, -part.s)

    @property
    def only(self) -> Part:
        """The term of an amount that has one."""
        (part,) = self.parts.values()
        return part


def _amount(value: Any) -> Amount:
    if isinstance(value, Amount):
        return value
    return Amount.of(value) if value else Amount({})
