"""A table's columns as text: headings with prefixed units, cells with their points aligned."""

from __future__ import annotations

import cmath
from collections.abc import Sequence
from typing import NamedTuple, cast

from equiv.analyses.tables import Cell, Column, Fractions, Measure, Table
from equiv.rendering.marks import Marks
from equiv.rendering.numbers import (
    Scale,
    align_points,
    angle_texts,
    column_texts,
    engineering_text,
    percent_scale,
    real_texts,
    residual_scale,
    scale_for,
)
from equiv.units import prefix_of

Cells = Sequence[Cell]
Numeral = int | float | complex | Measure


class Drawn(NamedTuple):
    """A column as text; numbers are ranged right, with blanks that put their points in line."""

    name: str
    unit: str
    key: bool
    repeat: bool
    right: bool
    texts: list[str]


def drawn_columns(table: Table, digits: int, marks: Marks) -> list[Drawn]:
    """Every column of a table as text."""
    cells = cells_of(table)
    polar = polar_columns(table.columns, cells)
    scales = _scales(table.columns, cells, digits)
    return [
        _drawn(column, column_cells, _Style(scale, is_polar, digits, marks))
        for column, column_cells, scale, is_polar in zip(
            table.columns, cells, scales, polar, strict=True
        )
    ]


def cells_of(table: Table) -> list[Cells]:
    """The table's cells column by column; what is not a finite number does not exist."""
    if not table.rows:
        return [() for _ in table.columns]
    columns: list[Cells] = list(zip(*(row.cells for row in table.rows), strict=True))
    assert len(columns) == len(table.columns), f"a row of {table.name} has too many or few cells"
    return [_finite(cells) for cells in columns]


def _finite(cells: Cells) -> Cells:
    numbers = [n for n in map(_number, cells) if n is not None]
    if cmath.isfinite(sum(numbers)):
        return cells
    return [None if (n := _number(c)) is not None and not cmath.isfinite(n) else c for c in cells]


def _number(cell: Cell) -> complex | None:
    """The number in a cell, if there is one."""
    if cell is None or isinstance(cell, str | Fractions):
        return None
    return cell.number if isinstance(cell, Measure) else cell


def polar_columns(columns: Sequence[Column], cells: Sequence[Cells]) -> list[bool]:
    """Which columns are complex, by a complex cell of their own or of their family."""
    own = [_has_complex(column_cells) for column_cells in cells]
    families = {c.family for c, polar in zip(columns, own, strict=True) if polar and c.family}
    return [
        (polar or c.family in families) and not c.exponent and c.unit != "%"
        for c, polar in zip(columns, own, strict=True)
    ]


def _has_complex(cells: Cells) -> bool:
    kinds = set(map(type, cells))
    if any(issubclass(kind, complex) for kind in kinds):
        return True
    return Measure in kinds and any(isinstance(_number(c), complex) for c in cells)


def _scales(columns: Sequence[Column], cells: Sequence[Cells], digits: int) -> list[Scale]:
    """The scale of each column; the columns of a family share one."""
    largest: dict[tuple[object, str], float] = {}
    keys = [(column.family or number, column.unit) for number, column in enumerate(columns)]
    for key, column_cells in zip(keys, cells, strict=True):
        plain = (abs(c) for c in column_cells if isinstance(c, int | float | complex))
        largest[key] = max(largest.get(key, 0.0), max(plain, default=0.0))
    return [
        residual_scale()
        if column.exponent
        else percent_scale(digits)
        if column.unit == "%"
        else scale_for(largest[key], column.unit, digits)
        for key, column in zip(keys, columns, strict=True)
    ]


class _Style(NamedTuple):
    scale: Scale
    polar: bool
    digits: int
    marks: Marks


def _drawn(column: Column, cells: Cells, style: _Style) -> Drawn:
    prefix = prefix_of(style.scale.power) if column.unit != "%" else ""
    name = style.marks.text(column.name)
    unit = style.marks.unit(prefix, column.unit)
    if style.scale.dust:
        cells = [_dusted(c, style.scale.dust) for c in cells]
    kinds = set(map(type, cells))
    exact = Fractions in kinds
    if exact:
        cells = [_spelt(c, style.marks) if isinstance(c, Fractions) else c for c in cells]
        kinds = set(map(type, cells))
    if kinds == {str}:
        texts = list(map(style.marks.text, cast(Sequence[str], cells)))
        return Drawn(name, unit, column.key, column.repeat, False, texts)
    if kinds == {float} and not style.polar:
        texts = column_texts(cast(Sequence[float], cells), style.scale)
        return Drawn(name, unit, column.key, column.repeat, True, texts)
    numerals = [c for c in cells if c is not None and not isinstance(c, str | Fractions)]
    figures = iter(_figures(column, numerals, style))
    texts = [
        style.marks.missing
        if c is None
        else style.marks.text(c)
        if isinstance(c, str)
        else next(figures)
        for c in cells
    ]
    right = bool(numerals) or (bool(column.unit) and not exact) or column.exponent
    return Drawn(name, unit, column.key, column.repeat, right, texts)


def _spelt(number: Fractions, marks: Marks) -> str:
    """An exact number in a table for people."""
    if number.long:
        return marks.cut
    return f"{number.text} {marks.unit('', number.unit)}".rstrip()


def _dusted(cell: Cell, dust: float) -> Cell:
    """A number that is only rounding, as zero."""
    plain = isinstance(cell, float | complex)
    return 0.0 if plain and abs(cell) < dust else cell  # type: ignore[arg-type]


def _figures(column: Column, numerals: Sequence[Numeral], style: _Style) -> list[str]:
    """Numbers of any sort, in line with each other: magnitude, angle, unit of their own."""
    values = [n.number if isinstance(n, Measure) else n for n in numerals]
    sizes = [abs(v) for v in values] if style.polar else cast(list[float], values)
    units: list[str] = []
    if any(isinstance(n, Measure) for n in numerals):
        texts, units = _measures(numerals, sizes, style)
    elif style.polar or column.unit or column.exponent:
        texts = column_texts(sizes, style.scale)
    else:
        floats = iter(real_texts([v for v in sizes if not isinstance(v, int)], style.scale))
        texts = align_points([str(v) if isinstance(v, int) else next(floats) for v in sizes])
    if style.polar:
        texts = _with_angles(texts, values, style)
    return _with_units(texts, units) if any(units) else texts


def _measures(
    numerals: Sequence[Numeral], sizes: Sequence[float], style: _Style
) -> tuple[list[str], list[str]]:
    """Numbers each in its own prefix, and the units; points of different units need no line."""
    texts, units = [], []
    for numeral, size in zip(numerals, sizes, strict=True):
        if isinstance(numeral, Measure):
            text, power = engineering_text(size, numeral.unit, style.digits)
            texts.append(text)
            units.append(style.marks.unit(prefix_of(power), numeral.unit))
        else:
            texts += real_texts([size], style.scale)
            units.append("")
    return texts, units


def _with_angles(texts: list[str], values: Sequence[complex], style: _Style) -> list[str]:
    angles = angle_texts(values, style.digits)
    wide, broad = max(map(len, texts), default=0), max(map(len, angles), default=0)
    return [
        f"{text:>{wide}} {style.marks.angle} {angle:>{broad}}{style.marks.degree}"
        for text, angle in zip(texts, angles, strict=True)
    ]


def _with_units(texts: list[str], units: list[str]) -> list[str]:
    wide = max(map(len, units))
    return [f"{text} {unit:<{wide}}" for text, unit in zip(texts, units, strict=True)]
