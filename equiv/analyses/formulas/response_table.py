"""Coefficients as functions of s: poles, zeros and ends, as a table."""

from __future__ import annotations

from collections.abc import Sequence

from equiv.analyses.formulas.told import InS
from equiv.analyses.formulas.values import cell_of
from equiv.analyses.tables import Cell, Column, Row, Table
from equiv.equations.symbolic.conditions import Limit
from equiv.equations.symbolic.expression import Expression
from equiv.equations.symbolic.infix import text_of

_MOST_LISTED = 12
_PAIR = 1e-12
_LONG = 400
"""Characters of a formula beyond which a table does not have it: some 30 terms."""


def response_table(response: InS, of: str, digits: int) -> Table:
    """A row a source: what one unit of it gives at both ends of s, and its zeros."""
    columns = (
        Column("source", key=True), Column("s→0"), Column("s→infinity"), Column("zeros (1/s)"),
    )  # fmt: skip
    rows = tuple(
        Row(
            (
                row.source,
                _end(row.at_zero.at_zero(), row.at_zero),
                _end(row.at_infinity.at_infinity(), row.at_infinity),
                roots_text(row.zeros, digits),
            )
        )
        for row in response.rows
    )
    poles = roots_text(response.poles, digits)
    notes = (
        "s→0 is the value at DC.",
        f"Poles, the same for all sources (1/s): {poles}." if poles else "",
    )
    return Table(
        f"What one unit of each source gives to {of}, as a function of s",
        (), columns, rows, tuple(filter(None, notes)), name=f"response of {of}",
    )  # fmt: skip


def _end(value: Expression | None, behaviour: Limit) -> Cell:
    text = text_of(behaviour.grown() if value is None else value)
    if len(text) > _LONG:
        return "too long (it stands in --json)" if value is not None else "grows without bound"
    return cell_of(value) if value is not None else f"grows as {text}"


def roots_text(roots: Sequence[complex] | None, digits: int) -> str:
    """Roots in a line, pairs of conjugates together."""
    if roots is None:
        return ""
    if not roots:
        return "none"
    shown: list[str] = []
    for root in roots:
        if abs(root.imag) <= _PAIR * abs(root):
            shown.append(_figure(root.real, digits))
        elif root.imag > 0:
            real = _figure(root.real, digits) + " " if root.real else ""
            shown.append(f"{real}± j{_figure(root.imag, digits)}")
    more = len(shown) - _MOST_LISTED
    return "; ".join(shown[:_MOST_LISTED]) + (f"; and {more} more" if more > 0 else "")


def _figure(value: float, digits: int) -> str:
    return f"{value:.{digits}g}" if value else "0"
