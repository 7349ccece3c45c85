"""Tables for a terminal or a text file: thin rules, no boxes, no colour."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import NamedTuple

from equiv.analyses.tables import Row, Table
from equiv.rendering.columns import Drawn, drawn_columns
from equiv.rendering.lines import fill, widest, wrap
from equiv.rendering.marks import PLAIN, UNICODE, Marks

GAP = "  "
INDENT = "  "
PROSE_WIDTH = 80
HEADING_LINES = 3
NARROWEST_PROSE = 24


class _Strip(NamedTuple):
    """A column ready to be set: its heading's lines, its unit, its cells and their width."""

    heading: list[str]
    unit: str
    key: bool
    repeat: bool
    right: bool
    texts: list[str]
    width: int


def draw(
    tables: Sequence[Table], digits: int = 5, width: int | None = None, unicode: bool = True
) -> str:
    """Tables as text; wider ones than `width` in parts, each with the key columns.

    Without a width the table has its natural one, as in a pipe. Without `unicode` the signs of
    the tables are plain ASCII and what else is not ASCII is written out as `\\xe9`.
    """
    marks = UNICODE if unicode else PLAIN
    return "\n\n\n".join("\n".join(_table(t, digits, width, marks)) for t in tables) + "\n"


def _table(table: Table, digits: int, width: int | None, marks: Marks) -> Iterator[str]:
    prose = width or PROSE_WIDTH
    for words in (table.title, *table.subtitles):
        yield from wrap(marks.text(words), prose) if words else ()
    text = table.text_in(unicode=marks is UNICODE)
    if text is not None:
        yield ""
        yield from (marks.text(line) for line in text.splitlines())
    elif table.columns:
        drawn = _indented(drawn_columns(table, digits, marks), table.rows)
        for part in _parts([_strip(column) for column in drawn], width):
            yield ""
            yield from _part(part, table.rows, marks)
    if table.notes:
        yield ""
    for note in table.notes:
        yield from wrap(marks.text(note), prose, INDENT)


def _indented(columns: list[Drawn], rows: Sequence[Row]) -> list[Drawn]:
    """The first column of text with its members set in under their group."""
    if not any(row.level for row in rows):
        return columns
    first = next((i for i, column in enumerate(columns) if not column.right), None)
    if first is not None:
        texts = [
            INDENT * row.level + text for row, text in zip(rows, columns[first].texts, strict=True)
        ]
        columns[first] = columns[first]._replace(texts=texts)
    return columns


def _strip(column: Drawn) -> _Strip:
    """The heading in up to three lines, so that it is hardly wider than the cells."""
    narrow = max(widest(column.texts), widest(column.name.split()), widest([column.unit]))
    heading = wrap(column.name, narrow)
    while len(heading) > HEADING_LINES:
        narrow += 1
        heading = wrap(column.name, narrow)
    return _Strip(
        heading, column.unit, column.key, column.repeat, column.right, column.texts, narrow
    )


def _total_width(strips: Sequence[_Strip]) -> int:
    return sum(strip.width for strip in strips) + len(GAP) * (len(strips) - 1)


def _parts(strips: list[_Strip], width: int | None) -> Iterator[list[_Strip]]:
    """The columns in groups that fit the width, each with the key columns in their places.

    Later groups also begin with the columns that are to be repeated.
    """
    if width is None or _total_width(strips) <= width:
        yield strips
        return
    keys = [i for i, strip in enumerate(strips) if strip.key] or [0]
    strips = _narrowed(strips, keys, width)
    part = list(keys)
    for i in range(len(strips)):
        if i in keys:
            continue
        longer = sorted([*part, i])
        if len(part) > len(keys) and _total_width([strips[j] for j in longer]) > width:
            yield [strips[j] for j in part]
            again = [j for j in range(i) if strips[j].repeat]
            longer = sorted([*keys, *again, i])
        part = longer
    yield [strips[j] for j in part]


def _narrowed(strips: list[_Strip], keys: Sequence[int], width: int) -> list[_Strip]:
    """Columns of sentences wrapped: so that all columns fit, or else one fits beside the keys."""
    for i, strip in enumerate(strips):
        if strip.right or not any(set(text.strip()) & set(" *") for text in strip.texts):
            continue
        others = _total_width(strips) - strip.width
        beside = sum(strips[k].width + len(GAP) for k in keys if k != i)
        room = width - others if width - others >= NARROWEST_PROSE else width - beside
        room = max(room, NARROWEST_PROSE, widest(strip.heading), widest([strip.unit]))
        if room < strip.width:
            texts = ["\n".join(_wrapped(text, room)) for text in strip.texts]
            broad = max(widest(text.split("\n")) for text in texts)
            strips[i] = strip._replace(
                texts=texts, width=max(broad, widest(strip.heading), widest([strip.unit]))
            )
    return strips


def _wrapped(text: str, width: int) -> list[str]:
    start = text[: len(text) - len(text.lstrip())]
    room = width - len(start)
    words = " ".join(_with_breaks(word, room) for word in text.split())
    return [start + line for line in wrap(words, room)]


def _with_breaks(word: str, width: int) -> str:
    """A product that is longer than a line, with blanks where lines may end."""
    lines, line = [], ""
    for factor in word.split("*") if len(word) > width else [word]:
        longer = f"{line}*{factor}" if line else factor
        # a power's two stars stay together
        if line and factor and line[-1] != "*" and len(longer) > width:
            lines.append(line)
            longer = f"*{factor}"
        line = longer
    return " ".join([*lines, line])


def _part(strips: Sequence[_Strip], rows: Sequence[Row], marks: Marks) -> Iterator[str]:
    """Heading, rule and rows; a total with nothing but its name in this part is left out."""
    rule = marks.rule * _total_width(strips)
    yield from _heading(strips)
    yield rule
    lines = _lines(strips)
    if not any(row.total for row in rows):
        yield from lines
        return
    above = True
    values = [strip.texts for strip in strips if not strip.key]
    for number, (row, line) in enumerate(zip(rows, lines, strict=True)):
        if row.total and values and not any(texts[number] for texts in values):
            continue
        if row.total and not above:
            yield rule
        above = row.total
        yield line


def _heading(strips: Sequence[_Strip]) -> Iterator[str]:
    high = max(len(strip.heading) for strip in strips)
    columns = [
        fill([*[""] * (high - len(s.heading)), *s.heading, s.unit], s.width, s.right)
        for s in strips
    ]
    *names, units = (GAP.join(line).rstrip() for line in zip(*columns, strict=True))
    yield from names
    if units:
        yield units


def _lines(strips: Sequence[_Strip]) -> Iterator[str]:
    """The rows; one with a wrapped cell takes several lines."""
    if not any("\n" in "".join(strip.texts) for strip in strips):
        columns = [fill(strip.texts, strip.width, strip.right) for strip in strips]
        yield from (GAP.join(cells).rstrip() for cells in zip(*columns, strict=True))
        return
    for cells in zip(*(strip.texts for strip in strips), strict=True):
        split = [cell.split("\n") for cell in cells]
        high = max(map(len, split))
        columns = [
            fill([*cell, *[""] * (high - len(cell))], strip.width, strip.right)
            for strip, cell in zip(strips, split, strict=True)
        ]
        yield "\n".join(GAP.join(line).rstrip() for line in zip(*columns, strict=True))
