"""What the handlers of statements share: what they write into, and where they register."""

from __future__ import annotations

from collections.abc import Callable
from typing import NamedTuple, Protocol

from equiv.elements.element import Frequency
from equiv.language.amounts import Place, Written
from equiv.language.blocks import Block, Body
from equiv.language.fields import LaterFrequency
from equiv.language.mistakes import Mistake
from equiv.language.reports import Argument
from equiv.language.words import Statement, Word, Words
from equiv.network import Find, Port


class Once(NamedTuple):
    """Something that a network says once, and where."""

    value: str | Frequency | LaterFrequency
    statement: Statement
    place: Place


class Asked(NamedTuple):
    """A `find` or `port` statement."""

    what: Find | Port
    statement: Statement
    words: Words


class Reading(Protocol):
    """What the handlers write into: everything that is known of the network so far."""

    once: dict[str, Once]
    notes: list[str]
    finds: list[Asked]
    ports: dict[str, Asked]
    given: dict[str, tuple[Written, Argument]]
    """Parameters that were given to the function, and how."""

    def enter(self, block: Block) -> None:
        """What follows belongs to a block."""

    def leave(self) -> None:
        """The block ends."""

    def include(self, words: Words, name: Word) -> None:
        """Read another file's statements here."""


_Function = Callable[[Reading, Body, Statement], None]


class Handler(NamedTuple):
    """What a statement does, and whether it may stand in a block."""

    read: _Function
    in_blocks: bool


class Registry(dict[str, Handler]):
    """The handlers of a module, by the statements' first words."""

    def __call__(self, in_blocks: bool = False) -> Callable[[_Function], _Function]:
        """Register a function as the handler of the statement that has its name."""

        def add(function: _Function) -> _Function:
            self[function.__name__] = Handler(function, in_blocks)
            return function

        return add


def opened(statement: Statement) -> Words:
    """The statement's words from the second on."""
    words = Words(statement)
    words.take("a statement")
    return words


def only_once(
    reading: Reading,
    name: str,
    value: str | Frequency | LaterFrequency,
    statement: Statement,
    place: Place,
) -> None:
    first = reading.once.get(name)
    if first is not None:
        raise Mistake(
            "given-twice",
            f"{name} is given twice",
            place,
            related=((first.statement.span(first.place), "first given here"),),
        )
    reading.once[name] = Once(value, statement, place)
