"""Tables as Markdown with pipe tables; every text from outside comes out as literal text."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence

from equiv.analyses.tables import Row, Table
from equiv.errors import printable
from equiv.rendering.columns import Drawn, drawn_columns
from equiv.rendering.marks import UNICODE

_ENTITIES = {"&": "&amp;", "<": "&lt;", ">": "&gt;"}
_SIGNS = re.compile(r"[\\`*_{}\[\]#|~$^!&<>]|:(?=//)|(?<=\w)@(?=\w)|(?<=www)\.", re.IGNORECASE)
_OPENINGS = re.compile(r"[-+=]|\d+(?=[.)])")
_INDENT = "&emsp;"


def draw(tables: Sequence[Table], digits: int = 5) -> str:
    """Tables as Markdown: a heading each, a table, and the notes as a list."""
    return "\n".join("\n".join(_table(table, digits)) + "\n" for table in tables)


def inline(text: str) -> str:
    """A text within a line, escaped so that nothing in it is markup."""
    return _SIGNS.sub(_escape, printable(text).strip())


def literal(text: str) -> str:
    """A text that begins a line, escaped so that it does not begin a list or a rule either."""
    safe = inline(text)
    opening = _OPENINGS.match(safe)
    if opening is None:
        return safe
    end = opening.end() if opening[0][0].isdigit() else 0
    return f"{safe[:end]}\\{safe[end:]}"


def _escape(sign: re.Match[str]) -> str:
    return _ENTITIES.get(sign[0]) or "\\" + sign[0]


def _table(table: Table, digits: int) -> Iterator[str]:
    if table.title:
        yield f"## {literal(table.title)}"
    for words in table.subtitles:
        yield from ("", literal(words))
    if table.text is not None:
        yield from ("", *_fenced(table.text))
    elif table.columns:
        yield from ("", *_grid(drawn_columns(table, digits, UNICODE), table.rows))
    if table.notes:
        yield from ("", *(f"- {literal(note)}" for note in table.notes))


def _fenced(text: str) -> Iterator[str]:
    """The text as code; the fence is longer than any in the text."""
    longest = max(map(len, re.findall("`+", text)), default=0)
    fence = "`" * max(3, longest + 1)
    yield fence
    yield from map(printable, text.splitlines())
    yield fence


def _grid(columns: Sequence[Drawn], rows: Sequence[Row]) -> Iterator[str]:
    headings = [
        f"{inline(c.name)} ({inline(c.unit)})" if c.unit else inline(c.name) for c in columns
    ]
    yield _line(headings)
    yield _line(["---:" if column.right else ":---" for column in columns])
    first = next((i for i, column in enumerate(columns) if not column.right), None)
    for row, texts in zip(rows, zip(*(c.texts for c in columns), strict=True), strict=True):
        cells = [inline(" ".join(text.split())) for text in texts]
        if first is not None:
            cells[first] = _INDENT * row.level + cells[first]
        yield _line([f"**{cell}**" if cell else "" for cell in cells] if row.total else cells)


def _line(cells: Sequence[str]) -> str:
    return f"| {' | '.join(cells)} |"
