"""Parameters by name: those of the file, and inside a block those of the instance too."""

from __future__ import annotations

from collections.abc import Callable
from decimal import Decimal
from fractions import Fraction
from typing import NamedTuple

from equiv.language.dimensions import dimension_of
from equiv.language.mistakes import AlreadyReported, Mistake
from equiv.language.operations import Measure
from equiv.language.slips import number_meant
from equiv.language.words import Statement
from equiv.units import Formula, Ratio, Rounded, Value, as_rounded


class Parameter(NamedTuple):
    """A parameter's value in SI units."""

    value: Value
    unit: str
    top: bool
    """Whether it is the file's own, so that a formula may go on naming it."""


class Definition(NamedTuple):
    """How a parameter is defined, and where."""

    evaluate: Callable[[Scope], Parameter]
    statement: Statement
    place: tuple[int, int]


class _Pending(Exception):  # noqa: N818 (it only says what must be evaluated first)
    def __init__(self, name: str) -> None:
        super().__init__(name)
        self.name = name


Report = Callable[[Mistake, Statement], None]


class Scope:
    """The parameters that can be named at a place of the text."""

    def __init__(
        self, definitions: dict[str, Definition] | None = None, outer: Scope | None = None
    ) -> None:
        self.known: dict[str, Parameter] = {}
        self._waiting = dict(definitions or {})
        self._broken: set[str] = set()
        self._outer = outer

    def __contains__(self, name: str) -> bool:
        here = name in self.known or name in self._waiting or name in self._broken
        return here or (self._outer is not None and name in self._outer)

    def find(self, name: str, place: tuple[int, int]) -> Parameter:
        """The parameter of that name."""
        found = self.known.get(name)
        if found is not None:
            return found
        if name in self._waiting:
            raise _Pending(name)
        if name in self._broken:
            raise AlreadyReported
        if self._outer is not None and name in self._outer:
            return self._outer.find(name, place)
        raise Mistake(
            "unknown-parameter",
            f"there is no parameter called {name}",
            place,
            hint=number_meant(name) or f"define it: given {name} = VALUE",
            near=(name, self._names()),
        )

    def _names(self) -> list[str]:
        outer = self._outer._names() if self._outer else []
        return [*self.known, *self._waiting, *outer]

    def measure(self, name: str, place: tuple[int, int]) -> Measure:
        """The parameter's value as a real number with its dimension."""
        value, unit, _ = self.find(name, place)
        if isinstance(value, Formula):
            value = value.value
        if isinstance(value, Ratio):
            rounded = isinstance(value.first, Rounded) or isinstance(value.second, Rounded)
            value = Fraction(value.first) / Fraction(value.second)
            value = as_rounded(value) if rounded else value
        if not isinstance(value, Decimal | Fraction):
            raise Mistake(
                "needs-real", f"{name} is complex; expressions are of real numbers", place
            )
        return Measure(Fraction(value), dimension_of(unit), isinstance(value, Rounded))

    def settle(self, report: Report) -> None:
        """Evaluate every definition, in whatever order they need each other."""
        for first in list(self._waiting):
            path = {first: None} if first in self._waiting else {}
            while path:
                name = next(reversed(path))
                needed = self._try(name, report)
                if needed is None or needed in path:
                    if needed is not None:
                        self._cycle(list(path), needed, report)
                    path.popitem()
                else:
                    path[needed] = None

    def _try(self, name: str, report: Report) -> str | None:
        """Evaluate a definition; the name of the one that must come first, if there is one."""
        definition = self._waiting.get(name)
        if definition is None:
            return None
        try:
            self.known[name] = definition.evaluate(self)
        except _Pending as pending:
            return pending.name
        except Mistake as mistake:
            report(mistake, definition.statement)
            self._broken.add(name)
        except AlreadyReported:
            self._broken.add(name)
        del self._waiting[name]
        return None

    def _cycle(self, path: list[str], needed: str, report: Report) -> None:
        """Report a circle of definitions, and take all of them out."""
        circle = path[path.index(needed) :]
        definition = self._waiting[circle[-1]]
        shown = " needs ".join([*circle[:8], *(["…"] if len(circle) > 8 else []), needed])
        report(
            Mistake(
                "circular-parameters", f"parameters need each other: {shown}", definition.place
            ),
            definition.statement,
        )
        for name in circle:
            del self._waiting[name]
            self._broken.add(name)
