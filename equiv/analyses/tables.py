"""A table as data: columns with a name and a unit, rows of values. Drawn by `equiv.rendering`."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import NamedTuple


class Measure(NamedTuple):
    """A number with a unit of its own, for a column whose rows have different units."""

    number: float | complex
    unit: str


Cell = str | int | float | complex | Measure | None
"""None is a value that does not exist; an int is a count; floats are drawn with the column's unit."""


@dataclass(frozen=True)
class Column:
    """A column: its heading, the SI unit of its numbers, and how they are to be drawn.

    `unit` is the SI unit without a prefix ("A"); numbers in the column are in it, and all of
    them are drawn with one SI prefix. "%" marks fractions that are drawn as percentages.
    `exponent` marks small numbers drawn as 1.2e-16 (differences and residuals).
    `key` marks the columns that stand in every part of a wide table drawn in parts; those marked
    `repeat` stand again at the beginning of its later parts.
    Columns with the same `family` word are drawn with the same prefix and decimals.
    """

    name: str
    unit: str = ""
    key: bool = False
    repeat: bool = False
    exponent: bool = False
    family: str = ""


@dataclass(frozen=True)
class Row:
    """The cells of a row; `level` 1 is a member under a group, `total` rows stand under a rule."""

    cells: tuple[Cell, ...]
    level: int = 0
    total: bool = False


@dataclass(frozen=True)
class Table:
    """A heading, sub-headings, columns and rows, and the notes that stand under them.

    `text` is drawn as it is, line for line, in place of columns and rows (a network's text).
    """

    title: str
    subtitles: tuple[str, ...] = ()
    columns: tuple[Column, ...] = ()
    rows: tuple[Row, ...] = ()
    notes: tuple[str, ...] = ()
    text: str | None = None
    plain: str | None = None
    """The same text in ASCII, for places that have no other signs."""
    name: str = "table"
    """A word for the table, used in CSV where a result has several."""

    def text_in(self, unicode: bool) -> str | None:
        """The text, in ASCII where that is wanted and there."""
        return self.text if unicode or self.plain is None else self.plain

    @staticmethod
    def rows_of(rows: Sequence[Sequence[Cell]]) -> tuple[Row, ...]:
        """Plain rows from plain sequences."""
        return tuple(Row(tuple(cells)) for cells in rows)


MEASURES = {"V": "voltage", "A": "current", "ohm": "impedance", "W": "power"}
"""What the numbers of an axis are, by their unit."""


class Series(NamedTuple):
    """A named row of numbers, one a point; what does not exist is not a number."""

    name: str
    values: tuple[float, ...]


@dataclass(frozen=True)
class Plot:
    """A picture as data: magnitudes stacked as bands, and lines over them, against `x`."""

    title: str
    x_name: str
    x_unit: str
    x: tuple[float, ...]
    x_log: bool
    y_name: str
    y_unit: str
    bands: tuple[Series, ...] = ()
    lines: tuple[Series, ...] = ()
    y_log: bool = False
