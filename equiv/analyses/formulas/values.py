"""A value as a formula with its number, and formulas as the cells of tables."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any, NamedTuple

from equiv.analyses.result import pair
from equiv.analyses.tables import FormulaText
from equiv.equations.symbolic.expression import Expression
from equiv.equations.symbolic.infix import text_of

Where = list[tuple[str, Expression]]


class Value(NamedTuple):
    """A formula, and its number where all its symbols have one."""

    expression: Expression
    number: complex | None = None

    def data(self) -> dict[str, Any]:
        """The JSON of it."""
        known = pair(self.number) or {"re": None, "im": None}
        return {**known, "formula": text_of(self.expression)}


def cell_of(expression: Expression) -> FormulaText:
    """A formula as a cell: text, and LaTeX."""
    return FormulaText(text_of(expression), _latex(expression))


def _latex(expression: Expression) -> Callable[[], str]:
    def draw() -> str:
        from equiv.equations.symbolic.sympy_form import latex_of

        return latex_of(expression)

    return draw
