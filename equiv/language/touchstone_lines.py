"""The lines of a Touchstone file, and how they make up points."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterator
from typing import NamedTuple

from equiv.language.files import Text
from equiv.language.mistakes import Mistake
from equiv.language.numerals import NUMBER
from equiv.language.words import Statement, Word

Report = Callable[[Mistake, Statement], None]

_WORD = re.compile(r"\S+")
_NOISE = 5


class Line(NamedTuple):
    """A line with numbers on it."""

    statement: Statement
    words: list[Word]

    @property
    def place(self) -> tuple[int, int]:
        """From the first number to the last."""
        start = self.words[0].at
        return start, self.words[-1].at + len(self.words[-1].text) - start


class Point(NamedTuple):
    """The numbers of one frequency, and the line that it begins on."""

    line: Line
    words: list[tuple[Line, Word]]


def lines_of(text: Text, note: Report) -> Iterator[Line]:
    """The lines that say something, without their comments."""
    unreadable = set()
    for number, mistake in text.mistakes():
        note(mistake, Statement(text.name, number + 1, text.lines[number]))
        unreadable.add(number)
    for number, line in enumerate(text.lines):
        bare = line.partition("!")[0]
        words = [Word(m.group(), m.start()) for m in _WORD.finditer(bare)]
        if words and number not in unreadable:
            yield Line(Statement(text.name, number + 1, line), words)


def points_of(lines: list[Line], ports: int, note: Report) -> Iterator[Point]:
    """The lines put together to points; the noise data of a two-port are left out."""
    wanted = 1 + 2 * ports * ports
    lines = _without_noise(lines, note) if ports == 2 else lines
    if ports <= 2:
        for line in lines:
            if len(line.words) == wanted:
                yield Point(line, [(line, word) for word in line.words])
            else:
                note(_wrong_count(line, wanted, ports), line.statement)
        return
    point: Point | None = None
    for line in lines:
        if len(line.words) % 2:
            if point is not None and len(point.words) < wanted:
                note(_too_few(point, wanted), point.line.statement)
            point = Point(line, [])
        elif point is None:
            note(_no_frequency(line), line.statement)
            continue
        point.words.extend((line, word) for word in line.words)
        if len(point.words) == wanted:
            yield point
        elif len(point.words) > wanted:
            first = max(0, len(line.words) - (len(point.words) - wanted))
            note(_too_many(line, first, ports), line.statement)
    if point is not None and len(point.words) < wanted:
        note(_too_few(point, wanted), point.line.statement)


def _without_noise(lines: list[Line], note: Report) -> list[Line]:
    """Noise begins with five numbers whose frequency is not above the one before."""
    for number, line in enumerate(lines):
        if number and len(line.words) == _NOISE and not _rises(lines[number - 1], line):
            for noise in lines[number:]:
                if len(noise.words) != _NOISE:
                    note(_wrong_noise(noise), noise.statement)
                for word in noise.words:
                    if not NUMBER.fullmatch(word.text):
                        note(not_a_number(word), noise.statement)
            return lines[:number]
    return lines


def _rises(before: Line, line: Line) -> bool:
    texts = before.words[0].text, line.words[0].text
    if not all(map(NUMBER.fullmatch, texts)):
        return True
    return float(texts[0]) < float(texts[1])


def not_a_number(word: Word) -> Mistake:
    hint = "a comment begins with !" if word.text[0] in "*;/c%" else None
    return Mistake(
        "touchstone-number", f"expected a number; found {word.text}", word.place, hint=hint
    )


def _wrong_count(line: Line, wanted: int, ports: int) -> Mistake:
    order = "N11 N21 N12 N22" if ports == 2 else "N11"
    return Mistake(
        "touchstone-data",
        f"expected {wanted} numbers on this line; found {len(line.words)}",
        line.place,
        hint=f"a line of a {ports}-port has the frequency and the pairs {order}",
    )


def _wrong_noise(line: Line) -> Mistake:
    return Mistake(
        "touchstone-data",
        f"expected the {_NOISE} numbers of noise data on this line; found {len(line.words)}",
        line.place,
        hint="noise data begin where the frequency of a two-port falls back; they end the file",
    )


def _no_frequency(line: Line) -> Mistake:
    return Mistake(
        "touchstone-data",
        f"expected a frequency and its pairs, an odd number of numbers; found {len(line.words)}",
        line.place,
    )


def _too_few(point: Point, wanted: int) -> Mistake:
    return Mistake(
        "touchstone-data",
        f"the frequency that begins here has {(len(point.words) - 1) // 2} pairs of numbers; "
        f"expected {wanted // 2}",
        point.line.place,
    )


def _too_many(line: Line, first: int, ports: int) -> Mistake:
    start = line.words[first].at
    end = line.words[-1].at + len(line.words[-1].text)
    return Mistake(
        "touchstone-data",
        f"a {ports}-port has {ports * ports} pairs of numbers at each frequency; here are more",
        (start, end - start),
    )
