"""What may stand behind any element's value: one reader an option, its docstring the help."""

from __future__ import annotations

import re
from collections.abc import Callable
from typing import Any

from equiv.elements import Element
from equiv.elements.element import NO_OPTIONS, Options
from equiv.language.expressions import parse_expression
from equiv.language.fields import LaterFrequency, read_frequency
from equiv.language.mistakes import Mistake
from equiv.language.numerals import bounded, numeral
from equiv.language.scope import Scope
from equiv.language.words import Words, closing, quoted
from equiv.units import Number, exact, scale, write_number, write_value


def _label(words: Words) -> str:
    """label "TEXT": what the element is called in tables."""
    return words.text("the label's text")


def _group(words: Words) -> str:
    """group NAME: independent sources that are reported together."""
    return words.name("the name of a group")


def _tolerance(words: Words) -> Number:
    """tolerance 1%: how far the value may be off, either way (±1% and +-1% mean the same)."""
    word = words.take("a percentage, as in: tolerance 1%")
    mark = re.match(r"±|\+-|", word.text)
    start = mark.end() if mark else 0
    fraction = _percentage(word.text[start:], word.at + start)
    if fraction is None or not 0 <= fraction <= 1:
        raise Mistake(
            "bad-tolerance",
            f"expected a percentage from 0% to 100%; found {word.text}",
            word.place,
            hint="write it as: tolerance 1%",
        )
    return fraction


def _percentage(text: str, at: int) -> Number | None:
    """The fraction that a percentage is."""
    if not text.endswith("%"):
        return None
    if text[0] == "(" and closing(text, 0) == len(text) - 2:
        number = parse_expression(text[1:-2], at + 1).evaluate(Scope()).number
        return bounded(scale(exact(number), -2), (at, len(text)))
    found = numeral(text, at)
    return bounded(found.number, (at, len(text))) if found else None


def _at(words: Words) -> Any:
    """at 150 Hz: an independent source at a frequency of its own; DC is 0 Hz."""
    return read_frequency(words)


_READERS: dict[str, Callable[[Words], Any]] = {
    "label": _label,
    "group": _group,
    "tolerance": _tolerance,
    "at": _at,
}
_OF_SOURCES = ("group", "at")

OPTIONS: dict[str, str] = {name: reader.__doc__ or "" for name, reader in _READERS.items()}
"""One line of help for each option."""


def option_of(text: str) -> str | None:
    """The option that a word begins: its name, or a tolerance by its own sign (±1%)."""
    if text in _READERS:
        return text
    return "tolerance" if re.match(r"(±|\+-)[0-9.(]", text) else None


class Chosen:
    """The options of one statement, while they are read."""

    __slots__ = ("at", "given")

    def __init__(self) -> None:
        self.given: dict[str, Any] = {}
        self.at: LaterFrequency | None = None

    def read(self, words: Words, kind: type[Element]) -> None:
        """Read the option whose name stands next."""
        word = words.next
        name = option_of(word.text) or word.text
        if name in self.given:
            raise Mistake("given-twice", f"{name} is given twice", word.place)
        if name in _OF_SOURCES and kind.role != "source":
            raise Mistake(
                "sources-only",
                f"{name} is for independent sources; {kind.kind} is none",
                word.place,
            )
        if name == word.text:
            words.take("an option")
        value = _READERS[name](words)
        if isinstance(value, LaterFrequency):
            self.at = value
        self.given[name] = value

    def options(self) -> Options:
        """The options; a frequency that is not known yet is left out."""
        if not self.given:
            return NO_OPTIONS
        return Options(**{k: v for k, v in self.given.items() if v is not self.at})


def write_options(options: Options) -> list[str]:
    """The words of an element's options."""
    words: list[str] = []
    if options.label is not None:
        words.append(f"label {quoted(options.label)}")
    if options.group is not None:
        words.append(f"group {options.group}")
    if options.tolerance is not None:
        words.append(f"tolerance {write_number(scale(options.tolerance, 2))}%")
    if options.at is not None:
        words.append(f"at {write_value(*options.at)}")
    return words
