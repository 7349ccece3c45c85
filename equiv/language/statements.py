"""The statements about the file: one handler each, whose docstring is its help."""

from __future__ import annotations

import re

from equiv.language.blocks import Body
from equiv.language.fields import read_frequency
from equiv.language.handlers import Asked, Reading, Registry, only_once, opened
from equiv.language.mistakes import Mistake
from equiv.language.names import require_name
from equiv.language.numerals import UNITS
from equiv.language.quantities import read_quantity
from equiv.language.words import Statement, bounded_text, free_text, unquoted
from equiv.network import Find, Port

register = Registry()


def _text(statement: Statement) -> str:
    match = re.match(r"\s*\S+", statement.text)
    return free_text(statement.text, match.end() if match else 0)


@register()
def title(reading: Reading, body: Body, statement: Statement) -> None:
    """title TEXT: the heading of every output."""
    place = (0, len(statement.text.rstrip()))
    only_once(reading, "title", _text(statement), statement, place)


@register()
def note(reading: Reading, body: Body, statement: Statement) -> None:
    """note TEXT: may repeat; carried into reports."""
    reading.notes.append(_text(statement))


@register()
def ground(reading: Reading, body: Body, statement: Statement) -> None:
    """ground NODE: the reference node; gnd if none is named."""
    words = opened(statement)
    word = words.next
    node = words.name("a node")
    words.end()
    only_once(reading, "ground", node, statement, word.place)


@register()
def frequency(reading: Reading, body: Body, statement: Statement) -> None:
    """frequency 50 Hz: the sinusoidal steady state the file is about (rad/s too); DC without it."""
    words = opened(statement)
    found = read_frequency(words)
    place = words.stretch(1)
    words.end(near=UNITS)
    only_once(reading, "frequency", found, statement, place)


@register()
def phasors(reading: Reading, body: Body, statement: Statement) -> None:
    """phasors rms, or phasors peak: what the magnitude of a source means; rms if not said."""
    words = opened(statement)
    word = words.take("rms or peak")
    if word.text not in ("rms", "peak"):
        raise Mistake(
            "not-a-choice", f"expected rms or peak; found {word.text}", word.place,
            near=(word.text, ("rms", "peak")),
        )  # fmt: skip
    words.end()
    only_once(reading, "phasors", word.text, statement, word.place)


@register()
def find(reading: Reading, body: Body, statement: Statement) -> None:
    """find QUANTITY "label": a quantity this file is about; the label may be left out."""
    words = opened(statement)
    word = words.take("a quantity, as in V:a or I:R3")
    quantity = read_quantity(word.text, word.at)
    label = None
    if words.peek():
        last = words.take("a label")
        if last.text[0] != '"':
            raise Mistake(
                "extra-word",
                f"did not expect {last.text} here",
                last.place,
                hint='one quantity a statement; a label stands in quotation marks: "TEXT"',
            )
        label = bounded_text(unquoted(last.text), last.place)
    words.end()
    reading.finds.append(Asked(Find(quantity, label), statement, words))


@register()
def port(reading: Reading, body: Body, statement: Statement) -> None:
    """port NAME +a -b: a named terminal pair."""
    words = opened(statement)
    word = words.next
    name = words.name("a port's name")
    hint = f"write it as: port {name} +a -b"
    ends = []
    for mark in "+-":
        end = words.take(f"{mark} and a node", hint)
        if end.text[0] != mark:
            raise Mistake(
                "wrong-connection",
                f"expected the form +a -b; found {end.text}",
                end.place,
                hint=hint,
            )
        ends.append(require_name(end.text[1:], end.at + 1, "a node"))
    words.end(hint)
    first = reading.ports.get(name)
    if first is not None:
        raise Mistake(
            "name-taken",
            f"there is already a port called {name}",
            word.place,
            related=((first.statement.span(first.words.place_of(name)), "first used here"),),
        )
    reading.ports[name] = Asked(Port(name, *ends), statement, words)


@register()
def read(reading: Reading, body: Body, statement: Statement) -> None:
    """read "file": another file's statements, relative to this one's folder."""
    words = opened(statement)
    word = words.next
    words.text("a file's name")
    words.end()
    reading.include(words, word)
