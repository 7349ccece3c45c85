"""A network as text: what `read` makes of it is the same network again."""

from __future__ import annotations

import re
from collections.abc import Iterable
from decimal import Decimal
from fractions import Fraction
from typing import Any

from equiv.elements import Element
from equiv.elements.element import Parameters
from equiv.errors import Diagnostic, UsageError
from equiv.language.connections import write_connection
from equiv.language.drafts import is_single
from equiv.language.files import FORBIDDEN
from equiv.language.limits import MOST_NAME, MOST_TEXT
from equiv.language.names import NAME_RULE, is_name
from equiv.language.options import write_options
from equiv.language.words import quoted
from equiv.network import DC, Network
from equiv.units import Formula, Phasor, Ratio, Rectangular, Value, exact, write_value

_WIDEST = 24
"""Columns are aligned up to this width; a longer name pushes the rest of its line out."""
_NO_FORMULA = re.compile(r'["#\\\n]')
_SIMPLE_TEXT = re.compile(r'[^\s"#\\](?:[^\s#\\]| (?=[^\s#\\]))*')


def write(network: Network) -> str:
    """The canonical text of a network.

    Instances of blocks are written out element by element. Raises `UsageError` for a network,
    made in code, that has names or texts which the language cannot hold.
    """
    head = [
        *([f"title  {written_text(network.title)}"] if network.title else []),
        *(f"note   {written_text(note)}" for note in network.notes),
        *([f"ground {written_name(network.ground)}"] if network.ground != "gnd" else []),
        *([f"frequency {write_value(*network.frequency)}"] if network.frequency != DC else []),
        *(["phasors peak"] if network.phasors == "peak" else []),
    ]
    given = [
        f"given  {written_name(name)} = {written_value(value, unit)}"
        for name, (value, unit) in network.given.items()
    ]
    tail = [
        *(
            f"find  {_names(find.quantity.names, str(find.quantity))}"
            + (f"  {written_quoted(find.label)}" if find.label is not None else "")
            for find in network.finds
        ),
        *(
            f"port  {written_name(p.name)}  +{written_name(p.plus)} -{written_name(p.minus)}"
            for p in network.ports.values()
        ),
    ]
    sections = [head, given, _elements(network), tail]
    return "\n\n".join("\n".join(lines) for lines in sections if lines) + "\n"


def _elements(network: Network) -> list[str]:
    """The elements' statements, in columns."""
    rows = [_cells(element) for element in network.elements.values()]
    widths = [
        max((len(row[i]) for row in rows if len(row[i]) <= _WIDEST), default=0) for i in range(4)
    ]
    lines = []
    for element, row in zip(network.elements.values(), rows, strict=True):
        cells = [cell.ljust(width) for cell, width in zip(row, widths, strict=False)]
        line = f"{cells[0]}  {cells[1]}  {cells[2]} {cells[3]}  {row[4]}".rstrip()
        comment = _comment(network.comments.get(element.name, ""))
        lines.append(f"{line}  # {comment}" if comment else line)
    return lines


def _cells(element: Element) -> tuple[str, str, str, str, str]:
    """Kind, name, first and second end, and everything else."""
    ends = element.nodes or element.links
    connection = write_connection(type(element), tuple(map(written_name, ends)))
    if connection[0][0] not in "+-":
        connection[0] = f" {connection[0]}"
    rest = [*connection[2:], *_values(element)]
    if element.senses is not None:
        rest.append(f"senses {_names(element.senses.names, str(element.senses))}")
    options = element.options
    for text in (options.label, options.group):
        if text is not None:
            (written_quoted if text is options.label else written_name)(text)
    rest.extend(write_options(options))
    return element.kind, written_name(element.name), connection[0], connection[1], "  ".join(rest)


def _values(element: Element) -> list[str]:
    """The words of an element's values."""
    value = element.value
    if value is None:
        return []
    if is_single(type(element)) and not isinstance(value, Parameters):
        (field,) = element.fields
        keyword = f"{field.keyword} " if field.keyword else ""
        return [keyword + written_value(value, field.units[0])]
    if not isinstance(value, Parameters):
        raise _unwritable(f"{element.name} has a value of the wrong form")
    words = []
    for field in element.fields:
        if field.name in value.names:
            numbers = dict(value.items)[field.name]
            if field.form == "ratio":
                texts = [_ratio(*numbers)]
            elif field.form == "file":
                texts = [written_quoted(numbers[0].file)]
            else:
                texts = [
                    written_value(v, unit) for v, unit in zip(numbers, field.units, strict=True)
                ]
            words.append(" ".join([*([field.keyword] if field.keyword else []), *texts]))
    return words


def _ratio(first: Value, second: Value) -> str:
    """`10:1`; a symbol or a formula stands alone, for it is over one."""
    if isinstance(first, Decimal | Fraction) and isinstance(second, Decimal | Fraction):
        return written_value(Ratio(first, second), "")
    if second != 1:
        raise _unwritable("a ratio of a symbol or formula must be over 1")
    return written_value(first, "")


def written_value(value: Value, unit: str) -> str:
    """A value with its unit; `UsageError` if it cannot be written."""
    parts: Iterable[object] = (
        value if isinstance(value, tuple) and not isinstance(value, Formula) else (value,)
    )
    if any(isinstance(part, Decimal) and not part.is_finite() for part in parts):
        raise _unwritable("a value is not a finite number")
    text = write_value(_shortest(value), unit)
    if isinstance(value, Formula) and (_NO_FORMULA.search(text) or FORBIDDEN.search(text)):
        raise _unwritable("a formula has characters that cannot be written")
    return text


def _shortest(value: Value) -> Value:
    """The value with decimals in place of those fractions that are decimals."""
    if isinstance(value, Fraction):
        return exact(value)
    if isinstance(value, Rectangular | Phasor | Ratio):
        parts = value._asdict().items()
        short: dict[str, Any] = {n: exact(part) for n, part in parts if type(part) is Fraction}
        return value._replace(**short)
    return value


def written_name(name: str) -> str:
    """The name, which must be one; `UsageError` if it is none."""
    if not is_name(name) or len(name) > MOST_NAME:
        raise _unwritable(f"{name!r} cannot be written as a name", NAME_RULE)
    return name


def _names(names: tuple[str, ...], text: str) -> str:
    for name in names:
        written_name(name)
    return text


def written_text(text: str) -> str:
    """A title or note: as it stands where that can be read back, else in quotation marks."""
    plain = _SIMPLE_TEXT.fullmatch(text) and len(text) <= MOST_TEXT and not FORBIDDEN.search(text)
    return text if plain else written_quoted(text)


def written_quoted(text: str) -> str:
    """A text in quotation marks; `UsageError` if it cannot be written."""
    if (
        not text.strip()
        or len(text) > MOST_TEXT
        or re.search(r"[\t\n]", text)
        or FORBIDDEN.search(text)
    ):
        raise _unwritable(
            "a text is empty, has more than one line or characters that cannot be written"
        )
    return quoted(text)


def _comment(text: str) -> str:
    return " ".join(FORBIDDEN.sub(" ", text).split())[:MOST_TEXT].strip()


def _unwritable(message: str, hint: str | None = None) -> UsageError:
    return UsageError(Diagnostic("cannot-write", message, hint=hint))
