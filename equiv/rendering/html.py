"""Tables as HTML: one `<table>` each, without script or style; every text is escaped."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from equiv.analyses.tables import Row, Table
from equiv.errors import printable
from equiv.rendering.columns import Drawn, drawn_columns
from equiv.rendering.marks import UNICODE

_ENTITIES = str.maketrans(
    {"&": "&amp;", "<": "&lt;", ">": "&gt;", '"': "&quot;", "'": "&#39;", "`": "&#96;"}
)
_INDENT = "&emsp;"


def draw(tables: Sequence[Table], digits: int = 5) -> str:
    """Tables as an HTML fragment."""
    return "".join("\n".join(_table(table, digits)) + "\n" for table in tables)


def escaped(text: str) -> str:
    """A text that is nothing but text, in an element or in an attribute."""
    return printable(text).translate(_ENTITIES)


def _table(table: Table, digits: int) -> Iterator[str]:
    heading = "<br>".join(escaped(words) for words in (table.title, *table.subtitles) if words)
    if table.text is not None:
        yield f"<p>{heading}</p>"
        yield f"<pre>{'&#10;'.join(map(escaped, table.text.splitlines()))}</pre>"
    elif table.columns:
        columns = drawn_columns(table, digits, UNICODE)
        yield f"<table>\n<caption>{heading}</caption>"
        yield f"<thead>\n<tr>{''.join(map(_heading, columns))}</tr>\n</thead>\n<tbody>"
        yield from _rows(columns, table.rows)
        yield "</tbody>\n</table>"
    else:
        yield f"<p>{heading}</p>"
    if table.notes:
        yield "<ul>"
        yield from (f"<li>{escaped(note)}</li>" for note in table.notes)
        yield "</ul>"


def _heading(column: Drawn) -> str:
    unit = f"<br>{escaped(column.unit)}" if column.unit else ""
    return f'<th scope="col">{escaped(column.name)}{unit}</th>'


def _rows(columns: Sequence[Drawn], rows: Sequence[Row]) -> Iterator[str]:
    first = next((i for i, column in enumerate(columns) if not column.right), None)
    for row, texts in zip(rows, zip(*(c.texts for c in columns), strict=True), strict=True):
        cells = [escaped(" ".join(text.split())) for text in texts]
        if first is not None:
            cells[first] = _INDENT * row.level + cells[first]
        tag = "th" if row.total else "td"
        yield "<tr>" + "".join(f"<{tag}>{cell}</{tag}>" for cell in cells) + "</tr>"
