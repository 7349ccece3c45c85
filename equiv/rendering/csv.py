"""Tables as CSV (RFC 4180) for programs: SI base units, full double precision, no prefixes.

A heading bears its unit in brackets. A complex column is two, `_re` and `_im`; a column whose
rows have units of their own is followed by a column of units; percentages are fractions, and
exact numbers stand whole as `60/11` (two columns where one of them is complex). Where
a table has members or totals, a last column `row` says what each row is, so that sums are easy.
Several tables are each preceded by a blank line, and the first column says which one it is.
"""

from __future__ import annotations

import csv
import io
from collections.abc import Iterator, Sequence
from functools import lru_cache

from equiv.analyses.tables import Cell, Column, Fractions, Measure, Row, Table
from equiv.errors import printable
from equiv.rendering.columns import Cells, cells_of, polar_columns

# What makes a spreadsheet take a cell for a formula, and the wide forms of the same signs.
_FORMULA_SIGNS = ("=", "+", "-", "@", "\t", "\r", "\N{FULLWIDTH EQUALS SIGN}",
                  "\N{FULLWIDTH PLUS SIGN}", "\N{FULLWIDTH HYPHEN-MINUS}",
                  "\N{FULLWIDTH COMMERCIAL AT}")  # fmt: skip


def draw(tables: Sequence[Table], digits: int = 5) -> str:
    """Tables as CSV; the digits do not matter, since every number is given whole."""
    filled = [table for table in tables if table.columns or table.text is not None]
    return "\n".join(_table(table, len(filled) > 1) for table in filled)


def _table(table: Table, several: bool) -> str:
    stream = io.StringIO()
    writer = csv.writer(stream, lineterminator="\n")
    lines = list(zip(*_columns(table), strict=True))
    if several:
        lines = [(("table" if n == 0 else harmless(table.name)), *l) for n, l in enumerate(lines)]
    writer.writerows(lines)
    return stream.getvalue()


@lru_cache(maxsize=4096)
def harmless(text: str) -> str:
    """A text that no spreadsheet takes for a formula and no terminal for a command."""
    quoted = "'" + text if text.lstrip(" ").startswith(_FORMULA_SIGNS) else text
    return printable(quoted)


def _columns(table: Table) -> Iterator[list[str]]:
    """The columns of the file, each with its heading first."""
    if table.text is not None:
        yield ["text", *map(harmless, table.text.splitlines())]
        return
    cells = cells_of(table)
    polar = polar_columns(table.columns, cells)
    for column, column_cells, is_polar in zip(table.columns, cells, polar, strict=True):
        yield from _column(column, column_cells, is_polar)
    if any(row.level or row.total for row in table.rows):
        yield ["row", *map(_role, table.rows)]


def _role(row: Row) -> str:
    return "total" if row.total else "member" if row.level else "term"


def _column(column: Column, cells: Cells, polar: bool) -> Iterator[list[str]]:
    measured = any(isinstance(cell, Measure) for cell in cells)
    unit = "" if column.unit == "%" or measured else column.unit
    bracket = f" [{printable(unit)}]" if unit else ""
    name = harmless(column.name)
    if any(isinstance(cell, Fractions) for cell in cells):
        yield from _exact(f"{name}", bracket, cells)
    elif polar:
        if set(map(type, cells)) == {complex}:
            yield [f"{name}_re{bracket}", *(repr(cell.real + 0.0) for cell in cells)]  # type: ignore[union-attr]
            yield [f"{name}_im{bracket}", *(repr(cell.imag + 0.0) for cell in cells)]  # type: ignore[union-attr]
            return
        yield [f"{name}_re{bracket}", *(_cell(cell, "real") for cell in cells)]
        yield [f"{name}_im{bracket}", *(_cell(cell, "imag") for cell in cells)]
    else:
        yield [f"{name}{bracket}", *map(_cell, cells)]
    if measured:
        units = [_unit(cell, column.unit) for cell in cells]
        yield [f"{name} unit", *map(harmless, units)]


def _exact(name: str, bracket: str, cells: Cells) -> Iterator[list[str]]:
    """Exact numbers whole: digits, a minus and a slash, in which no formula can hide."""
    exact = [cell if isinstance(cell, Fractions) else None for cell in cells]
    if any(number and number.im for number in exact):
        yield [f"{name}_re{bracket}", *(number.re if number else "" for number in exact)]
        yield [f"{name}_im{bracket}", *((number.im or "0") if number else "" for number in exact)]
    else:
        yield [f"{name}{bracket}", *(number.re if number else "" for number in exact)]
    if any(number and number.unit for number in exact):
        yield [f"{name} unit", *(harmless(number.unit) if number else "" for number in exact)]


def _unit(cell: Cell, unit: str) -> str:
    if isinstance(cell, Measure):
        return cell.unit
    return "" if cell is None or isinstance(cell, str) else unit


def _cell(cell: Cell, part: str = "") -> str:
    """A cell at full precision; a text in a complex column stands with the real parts."""
    if isinstance(cell, Measure):
        cell = cell.number
    if cell is None or isinstance(cell, Fractions):
        return ""
    if isinstance(cell, str):
        return harmless(cell) if part != "imag" else ""
    if isinstance(cell, int) and not part:
        return str(cell)
    return repr(float(cell.imag if part == "imag" else cell.real) + 0.0)
