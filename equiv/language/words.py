"""A statement and its words, each with its place in the text."""

from __future__ import annotations

import re
from collections.abc import Iterable
from functools import partial
from typing import NamedTuple

from equiv.errors import Span
from equiv.language.limits import MOST_TEXT
from equiv.language.mistakes import Mistake
from equiv.language.names import is_name, require_name


class Word(NamedTuple):
    """A word and its offset in the statement's text."""

    text: str
    at: int

    @property
    def place(self) -> tuple[int, int]:
        """Offset and length."""
        return self.at, len(self.text)


_word = partial(tuple.__new__, Word)
"""A word from a pair, without the call that a named tuple makes: there are very many words."""


class Statement:
    """One statement: its text, and the lines of the file that it was written on."""

    __slots__ = ("file", "joins", "line", "text")

    def __init__(
        self, file: str, line: int, text: str, joins: tuple[tuple[int, int, str], ...] = ()
    ) -> None:
        self.file = file
        self.line = line
        self.text = text
        self.joins = joins
        """Offset, number and text of each line, where a statement is continued."""

    def span(self, place: tuple[int, int]) -> Span:
        """Where in the file a place of the statement is."""
        at, length = place
        start, line, text = 0, self.line, self.text
        for join in self.joins:
            if join[0] <= at:
                start, line, text = join
        column = at - start
        return Span(self.file, line, column + 1, max(1, min(length, len(text) - column)), text)


_PLAIN_WORD = re.compile(r"\S+")
_SPECIAL = re.compile(r'["()@∠>=#]')
_QUOTED = re.compile(r'"(?:[^"\\]|\\.)*"')
_RUN = re.compile(r'[^\s"()@∠>=]+')
_PARENTHESES = re.compile(r"[()]|(?<=\s)#")
_COMMENT = re.compile(r"(?:^|(?<=\s))#")
_ESCAPE = re.compile(r'\\(["\\])')


def scan(text: str) -> tuple[list[Word], str]:
    """The words of a statement, and the comment behind it."""
    if _SPECIAL.search(text) is None:
        return [_word((m.group(), m.start())) for m in _PLAIN_WORD.finditer(text)], ""
    words: list[Word] = []
    at, end = 0, len(text)
    while at < end:
        first = text[at]
        if first.isspace():
            at += 1
            continue
        if first == "#" and (at == 0 or text[at - 1].isspace()):
            return words, " ".join(text[at + 1 :].split())[:MOST_TEXT].strip()
        if first in "@∠>=":
            words.append(Word(first, at))
            at += 1
            continue
        stop = _quoted(text, at) if first == '"' else _run(text, at)
        words.append(Word(text[at:stop], at))
        at = stop
    return words, ""


def _quoted(text: str, at: int) -> int:
    """Where a text in quotation marks ends."""
    match = _QUOTED.match(text, at)
    if match is None:
        raise Mistake(
            "unclosed-quote", "the quotation mark is not closed on this line", (at, len(text) - at)
        )
    if match.end() < len(text) and not text[match.end()].isspace():
        raise Mistake(
            "stray-quote",
            "a blank is missing behind the text in quotation marks",
            (match.end(), 1),
            hint='inside a text, a quotation mark is written \\"',
        )
    return match.end()


def _run(text: str, at: int) -> int:
    """Where a word ends; what it has in parentheses belongs to it, blanks too."""
    while at < len(text):
        if text[at] == "(":
            at = closing(text, at) + 1
        elif text[at] == ")":
            raise Mistake("unopened-parenthesis", "nothing opens this parenthesis", (at, 1))
        elif text[at] == '"':
            raise Mistake(
                "stray-quote",
                "a quotation mark stands inside a word",
                (at, 1),
                hint='a text stands by itself, as in: label "TEXT"',
            )
        else:
            match = _RUN.match(text, at)
            if match is None:
                return at
            at = match.end()
    return at


def closing(text: str, at: int) -> int:
    """Where the parenthesis that opens at `at` is closed."""
    depth = 0
    for match in _PARENTHESES.finditer(text, at):
        if match.group() == "#":
            break
        depth += 1 if match.group() == "(" else -1
        if depth == 0:
            return match.start()
    raise Mistake("unclosed-parenthesis", "this parenthesis is not closed", (at, 1))


def comment_start(text: str) -> int:
    """Where the comment of a line begins (its length, if it has none)."""
    if "#" not in text:
        return len(text)
    at = 0
    while at < len(text):
        if text[at] == '"' and (match := _QUOTED.match(text, at)):
            at = match.end()
        elif text[at] == "#" and (at == 0 or text[at - 1].isspace()):
            return at
        else:
            at += 1
    return at


def free_text(text: str, at: int) -> str:
    """The text of a `title` or `note` from `at` on: as it stands, or in quotation marks."""
    rest = text[at:]
    start = at + len(rest) - len(rest.lstrip())
    if text[start : start + 1] == '"':
        stop = _quoted(text, start)
        found = unquoted(text[start:stop])
        tail = text[stop:].strip()
        if tail and not tail.startswith("#"):
            raise Mistake(
                "extra-word", "nothing may follow the text in quotation marks", (stop, len(text))
            )
    else:
        comment = _COMMENT.search(text, start)
        stop = comment.start() if comment else len(text)
        found = text[start:stop].strip().replace("\t", " ")
    return bounded_text(found, (start, stop - start))


def bounded_text(text: str, place: tuple[int, int]) -> str:
    """The text, which must not be empty or very long."""
    if not text.strip():
        raise Mistake("missing-text", "there is no text here", place)
    if len(text) > MOST_TEXT:
        raise Mistake(
            "text-too-long",
            f"the text has {len(text)} characters; at most {MOST_TEXT} are read",
            place,
        )
    return text


def unquoted(word: str) -> str:
    """What stands between quotation marks."""
    return _ESCAPE.sub(r"\1", word[1:-1]).replace("\t", " ")


def quoted(text: str) -> str:
    """A text in quotation marks."""
    return '"' + text.replace("\\", "\\\\").replace('"', '\\"') + '"'


def _without_kind(quantity: str) -> str:
    """The name that a quantity is about; any other word as it is."""
    return quantity[2:] if quantity[1:2] == ":" else quantity


class Words:
    """The words of a statement, taken from left to right."""

    __slots__ = ("_list", "comment", "statement", "taken")

    def __init__(self, statement: Statement) -> None:
        self.statement = statement
        self._list, self.comment = scan(statement.text)
        self.taken = 0

    def peek(self, ahead: int = 0) -> str:
        """The next word's text, empty at the end."""
        index = self.taken + ahead
        return self._list[index].text if index < len(self._list) else ""

    @property
    def next(self) -> Word:
        """The next word; at the end, an empty one behind the last."""
        if self.taken < len(self._list):
            return self._list[self.taken]
        last = self._list[-1] if self._list else Word("", 0)
        return Word("", last.at + len(last.text))

    def take(self, wanted: str, hint: str | None = None) -> Word:
        """The next word, which must be there; `wanted` says what it is."""
        if self.taken >= len(self._list):
            raise self.missing(wanted, hint)
        word = self._list[self.taken]
        self.taken += 1
        return word

    def split(self, length: int) -> None:
        """Make two words of the next one, the first with so many characters."""
        text, at = self._list[self.taken]
        self._list[self.taken : self.taken + 1] = [
            Word(text[:length], at),
            Word(text[length:], at + length),
        ]

    def missing(self, wanted: str, hint: str | None = None) -> Mistake:
        """That the statement ends too soon."""
        return Mistake(
            "missing-word", f"expected {wanted}; the statement ends here", self.next.place,
            hint=hint,
        )  # fmt: skip

    def name(self, wanted: str, hint: str | None = None) -> str:
        """The next word, which must be a name."""
        word = self.take(wanted, hint)
        return require_name(word.text, word.at, wanted)

    def text(self, wanted: str) -> str:
        """The next word, which must be a text in quotation marks."""
        word = self.take(wanted)
        if word.text[0] != '"':
            shown = word.text if is_name(word.text) else "TEXT"
            raise Mistake(
                "missing-quotes",
                f"expected {wanted}; found {word.text}",
                word.place,
                hint=f'write it in quotation marks: "{shown}"',
            )
        return bounded_text(unquoted(word.text), word.place)

    def stretch(self, start: int) -> tuple[int, int]:
        """The place of the words from number `start` to the last one taken."""
        first = self._list[start] if start < len(self._list) else self.next
        last = self._list[self.taken - 1] if self.taken > start else first
        return first.at, last.at + len(last.text) - first.at

    def written(self, place: tuple[int, int]) -> str:
        """The text at a place, blanks made single."""
        at, length = place
        return " ".join(self.statement.text[at : at + length].split())

    def end(self, hint: str | None = None, near: Iterable[str] = ()) -> None:
        """Nothing more may follow; `near` are words that were perhaps meant."""
        if self.taken < len(self._list):
            word = self._list[self.taken]
            raise Mistake(
                "extra-word",
                f"did not expect {word.text} here",
                word.place,
                hint=hint,
                near=(word.text, near),
            )

    def place_of(self, text: str) -> tuple[int, int]:
        """The first word (from the second on) that is a text; or all of the statement.

        Marks are no part of it, nor are the names of the instances around a name in a block.
        """
        bare = [(word, word.text.lstrip("+-")) for word in self._list[1:]]
        for word, local in bare:
            if text == local:
                return word.place
        for word, local in bare:
            if _without_kind(text).endswith(f".{_without_kind(local)}"):
                return word.place
        return self._list[0].at, len(self.statement.text.rstrip()) - self._list[0].at
