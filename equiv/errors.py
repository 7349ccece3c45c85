"""Everything that can go wrong, as values that can be shown to a person.

The error tree, with the exit status each one gives the command line:

    EquivError                      70
    ├── UsageError                   2   wrong words or options
    ├── NetworkFileError             3   the network file has errors (a list of diagnostics)
    ├── NoUniqueSolutionError        4   the network has no unique solution
    ├── DoesNotExistError            5   the term or the equivalent asked for does not exist
    └── FileAccessError              6   a file cannot be read or written
"""

from __future__ import annotations

import unicodedata
from collections.abc import Iterable
from enum import IntEnum
from itertools import islice
from typing import NamedTuple


class ExitStatus(IntEnum):
    """What the process tells its caller."""

    DONE = 0
    CHECK_FAILED = 1
    USAGE = 2
    FILE_HAS_ERRORS = 3
    NO_UNIQUE_SOLUTION = 4
    DOES_NOT_EXIST = 5
    CANNOT_READ_OR_WRITE = 6
    INTERNAL = 70
    INTERRUPTED = 130


class Span(NamedTuple):
    """A stretch of one line of a file: 1-based line and column, and the line's own text."""

    file: str
    line: int
    column: int
    length: int
    text: str


class Diagnostic(NamedTuple):
    """One thing that is wrong, where it is, and what to do about it."""

    code: str
    message: str
    span: Span | None = None
    hint: str | None = None
    related: tuple[tuple[Span, str], ...] = ()

    def __str__(self) -> str:
        """`file:line:column: error[code]: message`, the line, carets, and the hint."""
        if self.span is None:
            lines = [f"error[{self.code}]: {printable(self.message)}"]
        else:
            place = f"{printable(self.span.file)}:{self.span.line}:{self.span.column}"
            lines = [
                f"{place}: error[{self.code}]: {printable(self.message)}",
                *_pointed(self.span),
            ]
        for span, words in self.related:
            lines.append(f"{printable(span.file)}:{span.line}:{span.column}: {printable(words)}")
            lines.extend(_pointed(span))
        if self.hint:
            lines.append(f"    hint: {printable(self.hint)}")
        return "\n".join(lines)


class EquivError(Exception):
    """The root of everything this program raises on purpose."""

    exit_status = ExitStatus.INTERNAL

    def __init__(self, diagnostics: Diagnostic | Iterable[Diagnostic]) -> None:
        self.diagnostics = (
            (diagnostics,) if isinstance(diagnostics, Diagnostic) else tuple(diagnostics)
        )
        super().__init__("\n\n".join(map(str, self.diagnostics)))


class UsageError(EquivError):
    """A command or a library function was called with words it cannot use."""

    exit_status = ExitStatus.USAGE


class NetworkFileError(EquivError):
    """A network's text has errors; all of them are in `diagnostics`."""

    exit_status = ExitStatus.FILE_HAS_ERRORS


class NoUniqueSolutionError(EquivError):
    """The network's equations have no solution, or more than one."""

    exit_status = ExitStatus.NO_UNIQUE_SOLUTION


class DoesNotExistError(EquivError):
    """A term or an equivalent was asked for that does not exist."""

    exit_status = ExitStatus.DOES_NOT_EXIST


class FileAccessError(EquivError):
    """A file cannot be read or written."""

    exit_status = ExitStatus.CANNOT_READ_OR_WRITE


def nearest(word: str, known: Iterable[str]) -> str | None:
    """A hint that names the known word most like another, however many are known."""
    from difflib import get_close_matches

    some = islice(known, _MOST_LOOKED_AT)
    alike = [k for k in some if abs(len(k) - len(word)) <= 2 and k != word]
    if len(word) > _LONGEST_WORD:
        return None
    if len(alike) > _MOST_COMPARED:
        alike = [k for k in alike if k[0] == word[0]][:_MOST_COMPARED]
    same = [k for k in alike if k.casefold() == word.casefold()]
    near = get_close_matches(word, same, 1, 0.0) or get_close_matches(word, alike, 1)
    return f"did you mean {near[0]}?" if near else None


_MOST_LOOKED_AT = 20_000
_MOST_COMPARED = 500
_LONGEST_WORD = 80

# Characters that move the cursor, turn the writing direction, or start an escape sequence.
_UNSAFE_CATEGORIES = frozenset({"Cc", "Cf", "Cs", "Co", "Cn", "Zl", "Zp"})


def printable(text: str) -> str:
    """The text with every control, direction and escape character written out as `\\x1b`."""
    if text.isascii() and text.isprintable():
        return text
    return "".join(
        f"\\x{ord(c):02x}" if unicodedata.category(c) in _UNSAFE_CATEGORIES else c for c in text
    )


def display_width(text: str) -> int:
    """Columns that a text takes on a terminal (East Asian wide characters take two)."""
    if text.isascii():
        return len(text)
    return sum(
        0 if unicodedata.combining(c) else 2 if unicodedata.east_asian_width(c) in "WF" else 1
        for c in text
    )


_LONGEST_SHOWN = 160


def _pointed(span: Span) -> list[str]:
    """The line, and carets under the span; a very long line is cut around the span."""
    start = max(0, span.column - 1)
    text = span.text.replace("\t", " ")
    cut = max(0, start - _LONGEST_SHOWN // 2) if len(text) > _LONGEST_SHOWN else 0
    shown = text[cut : cut + _LONGEST_SHOWN]
    before = printable(text[cut:start])
    under = printable(shown[start - cut : start - cut + span.length])
    carets = "^" * max(1, display_width(under))
    return [f"    {printable(shown)}", f"    {' ' * display_width(before)}{carets}"]
