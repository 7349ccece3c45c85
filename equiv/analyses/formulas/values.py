"""A value as a formula with its number, and formulas as the cells of tables."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any, NamedTuple

from equiv.analyses.result import pair
from equiv.analyses.tables import FormulaText
from equiv.equations.symbolic.expression import Expression
from equiv.equations.symbolic.infix import text_of

_LONGEST_WORD = 40
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
    """A formula as a cell: text that can be broken into lines, and LaTeX."""
    text = text_of(expression)
    if any(len(word) > _LONGEST_WORD for word in text.split()):
        text = " ".join(map(_with_breaks, text.split()))
    return FormulaText(text, _latex(expression))


def _latex(expression: Expression) -> Callable[[], str]:
    def draw() -> str:
        from equiv.equations.symbolic.sympy_form import latex_of

        return latex_of(expression)

    return draw


def _with_breaks(word: str) -> str:
    """A long product with blanks where a line may end."""
    lines, line = [], ""
    for factor in word.split("*"):
        longer = f"{line}*{factor}" if line else factor
        if line and factor and line[-1] != "*" and len(longer) > _LONGEST_WORD:
            lines.append(line)
            longer = f"*{factor}"
        line = longer
    return " ".join([*lines, line])
