"""A table as data: columns with a name and a unit, rows of values. Drawn by `equiv.rendering`."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import NamedTuple


class Measure(NamedTuple):
    """A number with a unit of its own, for a column whose rows have different units."""

    number: float | complex
    unit: str


LONGEST_SHOWN = 24
"""Characters of an exact number beyond which it is not drawn in tables for people."""


class Fractions(NamedTuple):
    """An exact number: the real part as text, and the imaginary one where it is not zero."""

    re: str
    im: str = ""
    unit: str = ""
    """Its SI unit, where the rows of its column have different ones."""

    @property
    def text(self) -> str:
        """`60/11`, or `3/5 - j4/5`."""
        if not self.im:
            return self.re
        sign, size = ("-", self.im[1:]) if self.im[0] == "-" else ("+", self.im)
        return f"{self.re} {sign} j{size}" if self.re != "0" else f"{sign.strip('+')}j{size}"

    @property
    def long(self) -> bool:
        """Whether one of its parts is too long to be shown."""
        return max(len(self.re), len(self.im)) > LONGEST_SHOWN


class FormulaText(str):
    """A formula: a text like others, and what it is in LaTeX's math mode."""

    __slots__ = ("latex",)

    def __new__(cls, text: str, latex: Callable[[], str]) -> FormulaText:
        """The text, and what makes the LaTeX when it is needed."""
        made = super().__new__(cls, text)
        made.latex = latex
        return made

    latex: Callable[[], str]


Cell = str | int | float | complex | Measure | Fractions | None
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
