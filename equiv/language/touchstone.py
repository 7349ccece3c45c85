"""Touchstone files, version 1.1: parameters of many-ports at some frequencies, as text.

    # Hz S RI R 50            what the numbers are; GHz S MA R 50 where it does not say
    1e6 0.1 0 0.9 0 0.9 0 0.1 0

A one-port has N11 on a line, a two-port N11 N21 N12 N22, and from three ports on each row begins
a line. z, y, h and g are normalised by the reference R in the text, and in SI units here.

Source: Touchstone File Format Specification, version 1.1 (IBIS Open Forum); the ascending
frequencies and the noise data of two-ports from memory.
"""

from __future__ import annotations

import cmath
import math
import re

from equiv.elements.tabulated import Tabulated
from equiv.language.files import Text
from equiv.language.mistakes import Mistake
from equiv.language.numerals import NUMBER, bounded, decimal
from equiv.language.touchstone_lines import (
    Line,
    Point,
    Report,
    lines_of,
    not_a_number,
    points_of,
)
from equiv.language.touchstone_option import Option, option_of
from equiv.language.words import Statement, Word
from equiv.units import Number, scale

_EXTENSION = re.compile(r".*\.[sSzZyYhHgG](\d{1,3})[pP]")
_LARGEST = 1e300


def ports_of(name: str) -> int | None:
    """The number of ports that a file's name tells (3 of `splitter.s3p`), if it does."""
    match = _EXTENSION.fullmatch(name)
    return int(match[1]) if match else None


def read(text: Text, ports: int, report: Report) -> Tabulated | None:
    """The parameters in a text; None, and every mistake reported, where there is one."""
    wrong = False

    def note(mistake: Mistake, statement: Statement) -> None:
        nonlocal wrong
        wrong = True
        report(mistake, statement)

    lines = list(lines_of(text, note))
    option, lines = option_of(_first(text), lines, ports, note)
    points = list(points_of(lines, ports, note))
    if option is None:
        return None
    hertz: list[float] = []
    matrices: list[tuple[complex, ...]] = []
    for point in points:
        try:
            _add_frequency(point, option, hertz)
            matrices.append(_matrix(point, option, ports))
        except _Misplaced as misplaced:
            note(misplaced.mistake, misplaced.line.statement)
    if wrong:
        return None
    if not hertz:
        note(Mistake("touchstone-data", "the file has no data", (0, 1)), _first(text))
        return None
    reference = float(option.reference)
    return Tabulated(text.name, option.form.lower(), reference, tuple(hertz), tuple(matrices))


class _Misplaced(Exception):  # noqa: N818 (it carries a mistake to where it is reported)
    def __init__(self, line: Line, mistake: Mistake) -> None:
        self.line, self.mistake = line, mistake


def _first(text: Text) -> Statement:
    return Statement(text.name, 1, text.lines[0])


def _add_frequency(point: Point, option: Option, before: list[float]) -> None:
    """The frequency of a point behind those before it, which it must be above."""
    line, word = point.words[0]
    hertz = float(scale(_number(line, word), option.power))
    falls = bool(before) and hertz <= before[-1]
    before.append(hertz)
    if hertz < 0 or falls:
        what = "a frequency is not negative" if hertz < 0 else "the frequencies must rise"
        raise _Misplaced(
            line, Mistake("touchstone-order", f"{what}; found {word.text}", word.place)
        )


def _matrix(point: Point, option: Option, ports: int) -> tuple[complex, ...]:
    """The parameters in SI units, row by row."""
    numbers = [(line, word, float(_number(line, word))) for line, word in point.words[1:]]
    found = []
    for (line, word, first), (*_, second) in zip(numbers[::2], numbers[1::2], strict=True):
        try:
            found.append(_value(option.format, first, second))
        except OverflowError:
            raise _Misplaced(line, _too_large(word)) from None
    if ports == 2:
        found[1], found[2] = found[2], found[1]
    r = float(option.reference)
    factors = {
        "H": [r, 1.0, 1.0, 1 / r],
        "G": [1 / r, 1.0, 1.0, r],
        "Z": [r] * len(found),
        "Y": [1 / r] * len(found),
    }.get(option.form, [1.0] * len(found))
    return tuple(x * factor for x, factor in zip(found, factors, strict=True))


def _value(form: str, first: float, second: float) -> complex:
    """A pair of numbers as a complex one; quarter turns are exact."""
    if form == "RI":
        return complex(first, second)
    size = first if form == "MA" else 10.0 ** (first / 20)
    if size > _LARGEST:
        raise OverflowError
    quarter, rest = divmod(second, 90.0)
    turn = (1, 1j, -1, -1j)[int(quarter) % 4]
    return complex(turn * (size if rest == 0 else cmath.rect(size, math.radians(rest))))


def _number(line: Line, word: Word) -> Number:
    try:
        if not NUMBER.fullmatch(word.text):
            raise not_a_number(word)
        number = decimal(word.text, word.place)
        return bounded(number, word.place)
    except Mistake as mistake:
        raise _Misplaced(line, mistake) from None


def _too_large(word: Word) -> Mistake:
    return Mistake("touchstone-number", f"{word.text} dB is out of range", word.place)
