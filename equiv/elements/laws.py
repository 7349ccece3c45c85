"""How an element says its law: equations that are sums of terms, whatever the numbers are.

A law is written once for a whole column of elements of a kind. `Across`, `Through` and `Drive`
are the three terms there are; coefficients are anything that can `+ - * /` (floats, arrays of
them, exact fractions, polynomials), so that no law knows the arithmetic.
"""

from __future__ import annotations

from typing import Any, NamedTuple, Protocol

Pair = Any
"""Two columns of node numbers: first over second."""


class Across(NamedTuple):
    """coefficient × the voltage of a pair of nodes, first over second."""

    pair: Pair
    coefficient: Any = 1


class Through(NamedTuple):
    """coefficient × the current of a branch, first node to second inside it."""

    branch: Any
    coefficient: Any = 1


class Drive(NamedTuple):
    """coefficient × the value of an independent source."""

    source: Any
    coefficient: Any = 1


Term = Across | Through | Drive


class Pen(Protocol):
    """What a law is written with."""

    def equation(self, branch: Any, *terms: Term) -> None:
        """The branch's own equation: the sum of the terms is zero; its current is unknown."""

    def current(self, branch: Any, *terms: Term) -> None:
        """The branch's current is the sum of the terms."""

    def add(self, branch: Any, *terms: Term) -> None:
        """Further terms in an equation that another element has written."""


class Column(Protocol):
    """Elements of one kind and variant, side by side."""

    @property
    def variant(self) -> Any:
        """The form of the law that these elements share."""

    @property
    def s(self) -> Any:
        """The complex frequency: 0 at DC, jω in the sinusoidal steady state (rad/s)."""

    @property
    def value(self) -> Any:
        """The value of a kind that has one, in its SI unit."""

    @property
    def source(self) -> Any:
        """Which independent source each element is."""

    @property
    def sensed_pair(self) -> Pair:
        """The nodes whose voltage is sensed."""

    @property
    def sensed_branch(self) -> Any:
        """The branch whose current is sensed."""

    def branch(self, number: int = 0) -> Any:
        """The elements' branches: 0 is the first terminal pair, 1 the second."""

    def pair(self, number: int = 0) -> Pair:
        """The nodes of a terminal pair."""

    def parameter(self, name: str, index: int = 0) -> Any:
        """A named value of a kind that has several."""

    def root(self, squares: Any) -> Any:
        """The square roots of numbers, one an element."""

    @property
    def reference(self) -> Any:
        """The reference resistance of parameters s that files give (ohm)."""

    def entry(self, row: int, column: int) -> Any:
        """A parameter that files give at some frequencies, at this one."""

    def linked(self, number: int) -> tuple[Any, Any]:
        """Branches and values of the elements that a coupling joins: 0 first, 1 second."""

    def split(self, chosen: Any) -> tuple[Column, Column]:
        """The elements for which `chosen` is true, and the others."""
