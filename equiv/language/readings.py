"""Readings in CSV: columns named with their units, cells that may state an uncertainty.

A header names each column as `voltage [V]`, `load [kohm]`, `current angle [deg]`; a column of
standard uncertainties bears a `±` (`± voltage [mV]`), or each cell does (`2.31±0.02`). Lines
that are empty or begin with `#` are passed over. Cells are parted by commas, semicolons or tabs.
"""

from __future__ import annotations

import cmath
import math
import re
from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import localcontext
from typing import NamedTuple

from equiv.errors import Diagnostic, NetworkFileError, Span, nearest
from equiv.language.amounts import Later, read_amount
from equiv.language.files import Text
from equiv.language.limits import MOST_ERRORS
from equiv.language.mistakes import Mistake
from equiv.language.numerals import EXACT
from equiv.language.words import Statement, Words
from equiv.units import Ratio, Symbol, as_number, split_unit

QUANTITIES: dict[str, str | None] = {
    "load": "ohm", "voltage": "V", "current": "A", "|voltage|": "V",
    "voltage angle": "deg", "current angle": "deg", "remark": None,
}  # fmt: skip
"""The columns there are and the SI unit of each; None is text that is passed over."""
_HEADING = re.compile(r"\s*(±|\+/-)?\s*([^\[\]±]*?)\s*(±|\+/-)?\s*(?:\[\s*([^\[\]]*?)\s*\])?\s*")
_PLUS_MINUS = re.compile(r"±|\+/-")
_WORDS = ("open", "short")
_QUOTED = re.compile(r' *"((?:[^"]|"")*)" *')
_UNITS_OF_ANGLES = {"deg": math.pi / 180, "°": math.pi / 180, "rad": 1.0}
DECIMAL_COMMA = "the decimal mark is a point; a comma parts the cells"


class Cell(NamedTuple):
    """A number in its SI unit (radians for an angle), its standard uncertainty, and its place."""

    value: float | complex
    uncertainty: float | None
    span: Span
    word: str = ""
    """`open` or `short` in place of a number."""


class Heading(NamedTuple):
    """A column: the quantity, the factor that brings its numbers to SI, and its place."""

    quantity: str
    factor: float
    uncertainty: bool
    span: Span


@dataclass
class ReadingTable:
    """The cells of each quantity, a row a reading."""

    head: Span
    columns: dict[str, list[Cell]] = field(default_factory=dict)

    def require(self, *quantities: str) -> None:
        """Raise NetworkFileError where a column is missing."""
        missing = [q for q in quantities if q not in self.columns]
        if missing:
            words = " and ".join(f"{q} [{QUANTITIES[q]}]" for q in missing)
            raise impossible("missing-column", f"there is no column {words}", self.head)


def impossible(code: str, message: str, span: Span, hint: str | None = None) -> NetworkFileError:
    """One thing that is wrong with readings, at its place."""
    return NetworkFileError(Diagnostic(code, message, span, hint))


def read_table(text: str, name: str, quantities: Mapping[str, str | None]) -> ReadingTable:
    """The readings of a CSV text; `quantities` are the columns it may have.

    Errors: NetworkFileError with every mistake of the text.
    """
    return _Reader(Text(name, text), quantities).table()


class _Reader:
    def __init__(self, text: Text, quantities: Mapping[str, str | None]) -> None:
        self.text, self.quantities = text, quantities
        self.wrong: list[Diagnostic] = []
        self.separator = ","

    def table(self) -> ReadingTable:
        for number, mistake in self.text.mistakes():
            self._report(mistake, number, 0)
        lines = [
            (number, line)
            for number, line in enumerate(self.text.lines)
            if line.strip() and not line.lstrip().startswith("#")
        ]
        self._raise_if_wrong()
        if not lines:
            span = Span(self.text.name, 1, 1, 1, self.text.lines[0])
            raise impossible("no-header", "there is no header and no reading", span,
                             "begin with a line such as: load [ohm],voltage [V]")  # fmt: skip
        number, line = lines[0]
        self.separator = next((s for s in "\t;" if s in line), ",")
        headings = self._header(number)
        self._raise_if_wrong()
        table = ReadingTable(self._span(number, 0, len(line)))
        for number, _ in lines[1:]:
            self._row(number, headings, table)
        self._raise_if_wrong()
        if len(lines) == 1:
            raise impossible("no-readings", "no reading follows the header", table.head)
        return table

    def _raise_if_wrong(self) -> None:
        if self.wrong:
            raise NetworkFileError(self.wrong[:MOST_ERRORS])

    def _span(self, number: int, at: int, length: int) -> Span:
        return Span(self.text.name, number + 1, at + 1, max(1, length), self.text.lines[number])

    def _report(self, mistake: Mistake, number: int, at: int) -> None:
        span = self._span(number, at + mistake.place[0], mistake.place[1])
        self.wrong.append(Diagnostic(mistake.code, str(mistake), span, mistake.hint))

    def _cells(self, number: int) -> list[tuple[str, int]]:
        """The cells of a line, each with its offset."""
        line, found, at = self.text.lines[number], [], 0
        while True:
            quoted = _QUOTED.match(line, at)
            if quoted and line[quoted.end() : quoted.end() + 1] in ("", self.separator):
                found.append((quoted[1].replace('""', '"'), quoted.start(1)))
                end = quoted.end()
            else:
                end = line.find(self.separator, at)
                end = len(line) if end < 0 else end
                cell = line[at:end]
                found.append((cell.strip(), at + len(cell) - len(cell.lstrip())))
            if end >= len(line):
                return found
            at = end + 1

    def _header(self, number: int) -> list[Heading]:
        headings: list[Heading] = []
        for cell, at in self._cells(number):
            try:
                heading = self._heading(cell, self._span(number, at, len(cell)))
                if any(h[0] == heading[0] and h[2] == heading[2] for h in headings):
                    raise _mistake("twice", f"there are two columns {cell}", cell)
                headings.append(heading)
            except Mistake as mistake:
                self._report(mistake, number, at)
        there = {h.quantity for h in headings if not h.uncertainty}
        for heading in headings:
            if heading.uncertainty and heading.quantity not in there and not self.wrong:
                message = f"uncertainties of {heading.quantity}, but no column of its values"
                self.wrong.append(Diagnostic("missing-column", message, heading.span))
        return headings

    def _heading(self, cell: str, span: Span) -> Heading:
        match = _HEADING.fullmatch(cell)
        name = " ".join(match[2].lower().split()) if match else cell
        if match is None or name not in self.quantities:
            known = ", ".join(f"{q} [{u}]" if u else q for q, u in self.quantities.items())
            hint = nearest(name, self.quantities) or f"columns: {known}"
            raise _mistake(
                "unknown-column", f"there is no column called {cell or 'nothing'}", cell, hint
            )
        unit = self.quantities[name]
        uncertainty = bool(match[1] or match[3])
        if unit is None:
            return Heading(name, 1.0, uncertainty, span)
        written = match[4] or ""
        if unit == "deg" and written in _UNITS_OF_ANGLES:
            return Heading(name, _UNITS_OF_ANGLES[written], uncertainty, span)
        found = split_unit(written) if written else None
        if found is None or found[0] != unit:
            what = f"found {written}" if written else "it has none"
            raise _mistake("wrong-unit", f"the column {name} needs a unit of {unit}; {what}", cell,
                           f"write it as: {name} [{unit}]")  # fmt: skip
        return Heading(name, 10.0 ** found[1], uncertainty, span)

    def _row(self, number: int, headings: list[Heading], table: ReadingTable) -> None:
        cells = self._cells(number)
        if len(cells) != len(headings):
            line = self.text.lines[number]
            message = f"found {len(cells)} cells; the header has {len(headings)} columns"
            self.wrong.append(
                Diagnostic("wrong-cells", message, self._span(number, 0, len(line)), DECIMAL_COMMA)
            )
            return
        values: dict[str, Cell] = {}
        sigmas: dict[str, float] = {}
        for (cell, at), heading in zip(cells, headings, strict=True):
            if self.quantities[heading.quantity] is None:
                continue
            try:
                if heading.uncertainty:
                    sigmas[heading.quantity] = _sigma(cell, heading, 0.0)
                else:
                    span = self._span(number, at, len(cell))
                    values[heading.quantity] = _cell(cell, heading, span)
            except Mistake as mistake:
                self._report(mistake, number, at)
        for quantity, value in values.items():
            if quantity in sigmas:
                if value.uncertainty is not None:
                    message = f"the uncertainty of {quantity} is given twice"
                    self.wrong.append(Diagnostic("twice", message, value.span))
                value = value._replace(uncertainty=sigmas[quantity])
            table.columns.setdefault(quantity, []).append(value)


def _mistake(code: str, message: str, cell: str, hint: str | None = None) -> Mistake:
    return Mistake(code, message, (0, len(cell)), hint=hint)


def _cell(text: str, heading: Heading, span: Span) -> Cell:
    """`2.31`, `2.31±0.02`, `12 @ -30 deg`, `3+4j`, `open`."""
    if text.lower() in _WORDS and heading.quantity == "load":
        return Cell(math.inf if text.lower() == "open" else 0.0, None, span, text.lower())
    parts = _PLUS_MINUS.split(text)
    if len(parts) > 2:
        raise _mistake("bad-cell", f"found {text}, expected one ±", text)
    value = _number(parts[0], heading)
    if len(parts) == 1:
        return Cell(value, None, span)
    try:
        return Cell(value, _sigma(parts[1], heading, abs(value)), span)
    except Mistake as mistake:
        at, length = mistake.place
        mistake.place = (at + len(text) - len(parts[1]), length)
        raise


def _sigma(text: str, heading: Heading, size: float) -> float:
    """A standard uncertainty; behind a value it may be a percentage of it."""
    percent = size and text.rstrip().endswith("%")
    if percent:
        value = abs(size) / 100 * _number(text.rstrip()[:-1], heading) / heading.factor
    else:
        value = _number(text, heading)
    if isinstance(value, complex) or value < 0:
        raise _mistake("bad-uncertainty", f"found ±{text}, expected a number from zero up", text)
    return value


def _number(text: str, heading: Heading) -> float | complex:
    """A number of a column in its SI unit; one with a unit of its own needs no factor."""
    if not text.strip():
        raise _mistake("empty-cell", f"there is no {heading.quantity} here", text or " ")
    unit = QUANTITIES[heading.quantity]
    with localcontext(EXACT):
        words = Words(Statement("", 1, text))
        hint = DECIMAL_COMMA if "," in text else None
        found = read_amount(words, f"a number for {heading.quantity}", hint)
        words.end(hint)
    if isinstance(found, Later) or isinstance(found.value, Symbol | Ratio):
        raise _mistake(
            "not-a-value", f"expected a number for {heading.quantity}; found {text.strip()}", text
        )
    if found.unit not in (None, unit):
        raise _mistake("wrong-unit", f"found {text.strip()}, expected a value in {unit}", text)
    value = as_number(found.value)
    value *= 1.0 if found.unit else heading.factor
    if not cmath.isfinite(value):
        raise _mistake("not-finite", f"{text.strip()} is no finite number", text)
    return value
