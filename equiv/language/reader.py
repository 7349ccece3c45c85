"""Text into a network: the statements in order, then what rests on all of them."""

from __future__ import annotations

import re
from collections.abc import Mapping
from itertools import repeat
from pathlib import Path

from equiv.elements import KINDS
from equiv.errors import FileAccessError
from equiv.language.amounts import Written
from equiv.language.attached import Files, Tables
from equiv.language.blocks import Block, Body
from equiv.language.bulk import read_plain
from equiv.language.drafts import read_element
from equiv.language.files import Text, decoded, included_path, read_bytes
from equiv.language.handlers import Asked, Once
from equiv.language.keywords import HANDLERS
from equiv.language.limits import MOST_FILES, MOST_LINE, MOST_NESTING
from equiv.language.mistakes import AlreadyReported, Mistake
from equiv.language.reports import Argument, Reports
from equiv.language.words import Statement, Word, Words, comment_start, unquoted

FEWEST_IN_BULK = 64
"""Lines below which columns are not worth the while."""
_MOST_AT_ONCE = 8_192
_FIRST_WORD = re.compile(r"\s*(\S+)")


class Reader:
    """What is known of a network while its statements are read, one file after another."""

    def __init__(
        self,
        given: Mapping[str, tuple[Written, Argument]],
        root: Path | None = None,
        in_bulk_from: int = FEWEST_IN_BULK,
    ) -> None:
        self.given = dict(given)
        self.reports = Reports()
        self.top = Body()
        self.once: dict[str, Once] = {}
        self.notes: list[str] = []
        self.finds: list[Asked] = []
        self.ports: dict[str, Asked] = {}
        self.places: list[tuple[str, int]] = []
        """File and line of each entry at the top."""
        self.careful: list[int] = []
        """Which entries at the top were read word by word."""
        self.texts: dict[str, Text] = {}
        self.doubtful: set[str] = set()
        """Words of statements that could not be read: what they name may yet exist."""
        self._open: list[Block] = []
        self._root = root.resolve() if root else None
        self._path: list[Path] = []
        self._file = ""
        self._files = 0
        self._bytes = 0
        self._in_bulk_from = in_bulk_from
        self._tables = Tables(Files(self._located, self._content), self.reports)

    @property
    def _body(self) -> Body:
        return self._open[-1] if self._open else self.top

    def read(self, text: Text, path: Path | None = None) -> None:
        """Read the statements of a file, and of the files that it reads."""
        before, self._file = self._file, text.name
        self.texts[text.name] = text
        self.reports.file(text.name)
        self._path.append(path or Path())
        depth = len(self._open)
        for number, mistake in text.mistakes():
            self._report(mistake, Statement(text.name, number + 1, text.lines[number]))
            text.lines[number] = ""
        barriers = _barriers(text.lines) if "\\" in text.text or "block" in text.text else []
        self._lines(text.lines, barriers, depth)
        while len(self._open) > depth:
            block = self._open.pop()
            place = (0, len(block.statement.text.rstrip()))
            mistake = Mistake(
                "unclosed-block", "the block has no end", place, hint="write a line: end"
            )
            self._report(mistake, block.statement)
        self._path.pop()
        self._file = before

    def _lines(self, lines: list[str], barriers: list[int], depth: int) -> None:
        """Read lines, the plain ones outside blocks and continuations in bulk."""
        at = 0
        for barrier in [*barriers, len(lines)]:
            while at < barrier:
                stop = min(barrier, at + _MOST_AT_ONCE)
                if self._open or stop - at < self._in_bulk_from:
                    at = self._statement(lines, at, depth)
                else:
                    self._in_bulk(lines[at:stop], at, depth)
                    at = stop
            if barrier < len(lines) and at == barrier:
                at = self._statement(lines, at, depth)

    def _in_bulk(self, lines: list[str], offset: int, depth: int) -> None:
        """Read a stretch of lines, none of which is continued or begins a block."""
        found = read_plain(lines)
        start = 0
        left = [number for number, element in enumerate(found) if element is None]
        for number in [*left, len(lines)]:
            elements = found[start:number]
            if elements:
                self.top.entries.extend(elements)  # type: ignore[arg-type]
                numbers = range(offset + start + 1, offset + number + 1)
                self.places.extend(zip(repeat(self._file), numbers))
            if number < len(lines):
                self._statement(lines, number, depth, offset)
            start = number + 1

    def _statement(self, lines: list[str], at: int, depth: int, offset: int = 0) -> int:
        """Read the statement that begins at a line; the number of the line behind it."""
        line = lines[at]
        match = _FIRST_WORD.match(line)
        if match is None or match[1][0] == "#":
            return at + 1
        statement = Statement(self._file, at + offset + 1, line)
        at += 1
        try:
            if line.rstrip()[-1] == "\\":
                statement, at = self._continued(statement, lines, at)
                match = _FIRST_WORD.match(statement.text)
                if match is None or match[1][0] == "#":
                    return at
            self.read_statement(match[1], statement, depth)
        except Mistake as mistake:
            self._report(mistake, statement)
        except AlreadyReported:
            self._doubt(statement)
        return at

    def _continued(self, first: Statement, lines: list[str], at: int) -> tuple[Statement, int]:
        """The whole of a statement that a backslash continues, and the line behind it."""
        text, joins = "", []
        line, number = first.text, first.line
        while (bare := line.rstrip()).endswith("\\") and comment_start(line) >= len(bare):
            if at == len(lines):
                place = (len(bare) - 1, 1)
                mistake = Mistake("unfinished-statement", "no line follows the backslash", place)
                self._report(mistake, Statement(first.file, number, line))
                return Statement(first.file, first.line, "#"), at
            if len(text) <= MOST_LINE:
                joins.append((len(text), number, line))
                text += bare[:-1] + " "
            line, number, at = lines[at], number + 1, at + 1
        if len(text) > MOST_LINE:
            mistake = Mistake(
                "statement-too-long",
                f"the statement has more than {MOST_LINE} characters",
                (0, len(first.text)),
            )
            self._report(mistake, first)
            return Statement(first.file, first.line, "#"), at
        joins.append((len(text), number, line))
        return Statement(first.file, first.line, text + line, tuple(joins)), at

    def read_statement(self, first: str, statement: Statement, depth: int) -> None:
        """Read one statement by its first word; `depth` blocks were open before this file."""
        body = self._body
        handler = HANDLERS.get(first)
        kind = KINDS.get(first)
        if handler is not None:
            if self._open and not handler.in_blocks:
                raise Mistake(
                    "not-in-blocks",
                    f"{first} cannot stand in a block",
                    (statement.text.index(first), len(first)),
                )
            if first == "end" and len(self._open) <= depth:
                raise Mistake(
                    "end-without-block",
                    "no block is open here",
                    (statement.text.index(first), len(first)),
                )
            handler.read(self, body, statement)
        elif kind is not None:
            words = Words(statement)
            words.taken = 1
            body.entries.append(self._tables.attach(read_element(words, kind)))
        else:
            raise _unknown_keyword(first, statement)
        if isinstance(body, Block):
            body.claim()
        if body is self.top and len(body.entries) > len(self.places):
            self.careful.append(len(self.places))
            self.places.append((statement.file, statement.line))

    def _report(self, mistake: Mistake, statement: Statement) -> None:
        self.reports.add(mistake, statement)
        self._doubt(statement)

    def _doubt(self, statement: Statement) -> None:
        if len(self.doubtful) < MOST_LINE:
            names = re.split(r"[\s()>,:=]+", statement.text[:MOST_LINE])
            self.doubtful.update(name.lstrip("+-") for name in names)

    def enter(self, block: Block) -> None:
        """What follows belongs to a block."""
        self._open.append(block)
        if len(self._open) > MOST_NESTING:
            raise Mistake(
                "nested-too-deep",
                f"blocks are nested more than {MOST_NESTING} deep",
                (0, len(block.statement.text)),
            )

    def leave(self) -> None:
        """The block ends."""
        self._open.pop()

    def include(self, words: Words, name: Word) -> None:
        """Read another file's statements here."""
        path = self._located(unquoted(name.text), name.place)
        if path in self._path:
            raise Mistake("circular-read", f"{path.name} reads itself", name.place)
        self.read(self._content(path, name.place), path)

    def _located(self, name: str, place: tuple[int, int]) -> Path:
        """A file named relative to the folder of this one, and inside the network's."""
        if self._root is None:
            raise Mistake("no-folder", "this text is in no folder to read files from", place)
        return included_path(name, place, self._path[-1].parent, self._root)

    def _content(self, path: Path, place: tuple[int, int]) -> Text:
        """What is in a file, called by its name relative to the network's folder."""
        assert self._root is not None
        self._files += 1
        if len(self._path) > MOST_NESTING or self._files > MOST_FILES:
            raise Mistake("too-many-files", "too many files read each other", place)
        try:
            data = read_bytes(path, self._bytes)
            content = decoded(data, path.name)
        except FileAccessError as error:
            found = error.diagnostics[0]
            raise Mistake(found.code, found.message, place, hint=found.hint) from None
        self._bytes += len(data)
        return Text(path.relative_to(self._root).as_posix(), content)


def _barriers(lines: list[str]) -> list[int]:
    """Lines that may be continued or may begin a block: what follows is not on its own."""
    return [
        number
        for number, line in enumerate(lines)
        if "\\" in line or ("block" in line and line.split(None, 1)[0] == "block")
    ]


def _unknown_keyword(first: str, statement: Statement) -> Mistake:
    place = (statement.text.index(first), len(first))
    if first.lower() in HANDLERS or first.lower() in KINDS:
        return Mistake(
            "keyword-in-capitals",
            f"keywords are lower case; found {first}",
            place,
            hint=f"write {first.lower()}",
        )
    return Mistake(
        "unknown-keyword",
        f"expected a kind of element or a statement; found {first}",
        place,
        hint="equiv kinds lists them",
        near=(first, [*KINDS, *HANDLERS]),
    )
