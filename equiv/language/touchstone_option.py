"""The option line of a Touchstone file: what its numbers are."""

from __future__ import annotations

from decimal import Decimal
from typing import NamedTuple

from equiv.language.mistakes import Mistake
from equiv.language.numerals import NUMBER, bounded, decimal
from equiv.language.touchstone_lines import Line, Report
from equiv.language.words import Statement, Word

UNITS = {"HZ": 0, "KHZ": 3, "MHZ": 6, "GHZ": 9}
FORMS = ("S", "Z", "Y", "H", "G")
FORMATS = ("MA", "DB", "RI")
_PARTS = {
    "power": "unit", "form": "kind of parameters", "format": "format", "reference": "reference",
}  # fmt: skip
_HINT = "an option line is written: # GHz S MA R 50, each part of it once"


class Option(NamedTuple):
    """What an option line says."""

    power: int = 9
    form: str = "S"
    format: str = "MA"
    reference: Decimal = Decimal(50)


def option_of(
    first: Statement, lines: list[Line], ports: int, note: Report
) -> tuple[Option | None, list[Line]]:
    """What the option line says, and the lines of data; further option lines do not count."""
    if lines and lines[0].words[0].text.startswith("["):
        mistake = Mistake(
            "touchstone-version",
            f"found {lines[0].words[0].text}: this is version 2 of the format",
            lines[0].place,
            hint="write the file as version 1.1, which has no words in brackets",
        )
        note(mistake, lines[0].statement)
        return None, []
    marked = [line for line in lines if line.words[0].text[0] == "#"]
    data = [line for line in lines if line.words[0].text[0] != "#"]
    if not marked or (data and data[0].statement.line < marked[0].statement.line):
        line = data[0] if data else None
        mistake = Mistake(
            "touchstone-option", "expected an option line before the data",
            line.place if line else (0, 1), hint=_HINT,
        )  # fmt: skip
        note(mistake, line.statement if line else first)
        return None, data
    try:
        return _read_option(marked[0], ports), data
    except Mistake as mistake:
        note(mistake, marked[0].statement)
        return None, data


def _read_option(line: Line, ports: int) -> Option:
    words = [Word(w.text.upper(), w.at) for w in line.words]
    if words[0].text != "#":
        words[0] = Word(words[0].text[1:], words[0].at + 1)
    else:
        words.pop(0)
    found: dict[str, object] = {}
    value: object
    while words:
        word = words.pop(0)
        if word.text in UNITS:
            part, value = "power", UNITS[word.text]
        elif word.text in FORMS:
            part, value = "form", word.text
        elif word.text in FORMATS:
            part, value = "format", word.text
        elif word.text == "R":
            part, value = "reference", _reference(words, word)
        else:
            raise Mistake(
                "touchstone-option", f"did not expect {word.text} here", word.place,
                hint=_HINT, near=(word.text, (*UNITS, *FORMS, *FORMATS)),
            )  # fmt: skip
        if part in found:
            raise Mistake(
                "touchstone-option", f"{word.text} is a second {_PARTS[part]}", word.place,
                hint=_HINT,
            )  # fmt: skip
        if word.text in ("H", "G") and ports != 2:
            message = f"{word.text} parameters are those of a two-port; this file has {ports} ports"
            raise Mistake("touchstone-option", message, word.place)
        found[part] = value
    return Option(**found)  # type: ignore[arg-type]


def _reference(words: list[Word], after: Word) -> Decimal:
    word = words.pop(0) if words else Word("", after.at + len(after.text))
    if not NUMBER.fullmatch(word.text) or (value := decimal(word.text, word.place)) <= 0:
        found = word.text or "nothing"
        raise Mistake(
            "touchstone-option",
            f"expected a positive reference in ohms behind R; found {found}",
            word.place,
            hint=_HINT,
        )
    bounded(value, word.place)
    return value
