"""What every source gives to a quantity, as formulas over one denominator."""

from __future__ import annotations

from dataclasses import dataclass

from equiv.equations.symbolic.expression import Expression, Name, quotient, with_name
from equiv.equations.symbolic.family import Family
from equiv.equations.symbolic.nesting import Where


@dataclass(frozen=True)
class Answer:
    """The coefficients N_k / D of all sources (test currents last) on one quantity.

    `style` is `nested`, `named`, `sequence` or `expanded`; `family` holds the polynomials, where
    there are not too many terms; `where` what the names in the expressions stand for, in order.
    """

    style: str
    denominator: Expression
    numerators: tuple[Expression, ...]
    where: tuple[tuple[str, Expression], ...] = ()
    family: Family | None = None
    terms: int | None = None
    """How many terms the denominator or the longest numerator has, where that is known."""
    name: str = ""
    """The denominator's own name."""
    counted: int | None = None
    """The degree in s where there are no polynomials, if it is known."""

    @property
    def degree(self) -> int | None:
        """The degree of the denominator in s."""
        return self.counted if self.family is None else self.family.degree

    @property
    def exists(self) -> bool:
        """Whether the denominator is other than zero."""
        return self.family is None or bool(self.family.denominator)

    @property
    def under(self) -> Expression:
        """The denominator by its name, where it is worth one."""
        return Name(self.name) if self.name else self.denominator

    @property
    def bottom(self) -> Expression:
        """The denominator as formulas that stand alone have it: whole where it is short."""
        return self.denominator if self.style == "nested" else self.under

    @property
    def used(self) -> Where:
        """The named parts that such formulas use."""
        return list(self.where) if self.style == "nested" else self.all_where

    @property
    def all_where(self) -> Where:
        """The named parts, the denominator last."""
        return [*self.where, *([(self.name, self.denominator)] if self.name else [])]

    def with_denominator_named(self, expression: Expression) -> Expression:
        """An expression with the denominator by its name."""
        return with_name(expression, self.denominator, self.name) if self.name else expression

    def coefficient(self, number: int) -> Expression:
        """N_k / D, complete in itself but for the named parts."""
        return quotient(self.numerators[number], self.denominator)
