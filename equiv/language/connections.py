"""Where an element is connected: words that bear the marks its kind asks for."""

from __future__ import annotations

from functools import cache
from typing import NamedTuple

from equiv.elements import KINDS, Element
from equiv.language.mistakes import Mistake
from equiv.language.names import is_name, require_name
from equiv.language.words import Words


class Shape(NamedTuple):
    """The marks that the words of a kind's connection bear: `+`, `-`, `>` before it, or none."""

    marks: tuple[str, ...]
    repeats: bool = False
    """Whether the marks may come again, as often as there are words for them."""

    @property
    def arrow_allowed(self) -> bool:
        """Whether `a > b` may be written for `a b`."""
        return self.marks == ("", "")


@cache
def shape(kind: str) -> Shape:
    """The marks of a kind's connection, from its declaration."""
    marks: list[str] = []
    arrow = False
    for word in KINDS[kind].connection.split():
        if word == ">":
            arrow = True
            continue
        if word == "…":
            return Shape(tuple(marks), True)
        marks.append(">" if arrow else word[0] if word[0] in "+-" else "")
        arrow = False
    return Shape(tuple(marks))


def read_connection(words: Words, kind: type[Element], name: str) -> tuple[str, ...]:
    """The names of the nodes (or, for a kind without terminals, of the elements) it joins."""
    form = shape(kind.kind)
    wanted = "a node" if kind.pairs else "the name of an element"
    found: list[str] = []
    marks = list(form.marks)
    for number, mark in enumerate(marks):  # grows while the marks come again
        if words.peek() == ">" and number:
            arrow = words.take("an arrow")
            if mark != ">" and not form.arrow_allowed:
                raise _wrong(arrow.place, ">", kind, name)
        elif mark == ">":
            word = words.take("> and a node", _form(kind, name))
            what = f"no > before {word.text}" if is_name(word.text) else word.text
            raise _wrong(word.place, what, kind, name)
        word = words.take(wanted, _form(kind, name))
        text, at = word
        if mark in ("+", "-"):
            if text[0] != mark or len(text) == 1:
                raise _wrong(word.place, text, kind, name)
            text, at = text[1:], at + 1
        elif text[0] in "+-" and is_name(text[1:]):
            raise _wrong(word.place, text, kind, name)
        found.append(require_name(text, at, wanted))
        if form.repeats and len(found) == len(marks) and words.peek()[:1] in ("+", "-"):
            marks += form.marks
    return tuple(found)


def _wrong(place: tuple[int, int], found: str, kind: type[Element], name: str) -> Mistake:
    return Mistake(
        "wrong-connection",
        f"expected the form {kind.connection}; found {found}",
        place,
        hint=_form(kind, name),
    )


def _form(kind: type[Element], name: str) -> str:
    return f"write it as: {kind.kind} {name} {kind.connection}"


def write_connection(kind: type[Element], names: tuple[str, ...]) -> list[str]:
    """The words of a connection, one a name; an arrow stands in the word behind it."""
    form = shape(kind.kind)
    marks = form.marks * (len(names) // len(form.marks) if form.repeats else 1)
    return [
        f"> {name}" if mark == ">" else f"{mark}{name}"
        for mark, name in zip(marks, names, strict=True)
    ]
