"""An element as a statement writes it, before parameters and blocks are known.

Nothing here knows a kind: everything follows from what the kinds declare.
"""

from __future__ import annotations

import re
from functools import cache
from typing import Any, NamedTuple

from equiv.elements import KINDS, Element
from equiv.elements.element import Field, Options, Parameters
from equiv.elements.quantity import Quantity
from equiv.language.connections import read_connection
from equiv.language.fields import FieldValue, LaterFrequency, LaterValue, ratio_pair, read_field
from equiv.language.limits import MOST_NAME
from equiv.language.mistakes import Mistake
from equiv.language.numerals import UNITS
from equiv.language.options import OPTIONS, Chosen, option_of
from equiv.language.quantities import read_quantity
from equiv.language.scope import Scope
from equiv.language.slips import number_meant
from equiv.language.words import Statement, Words
from equiv.units import Value


class Draft(NamedTuple):
    """What a statement says about an element."""

    kind: type[Element]
    name: str
    ends: tuple[str, ...]
    """Nodes, or the elements that a kind without terminals joins."""
    values: dict[str, tuple[FieldValue, ...]]
    senses: Quantity | None
    options: Options
    at: LaterFrequency | None
    statement: Statement
    value_place: tuple[int, int]
    comment: str

    def realise(self, scope: Scope) -> Element:
        """The element, with its values."""
        kind = self.kind
        value: Value | Parameters | None = None
        if kind.fields:
            value = self._value(scope)
        options = self.options
        if self.at is not None:
            options = options._replace(at=self.at.evaluate(scope))
        if not kind.pairs:
            return kind(self.name, (), value, self.senses, self.ends, options)
        return kind(self.name, self.ends, value, self.senses, (), options)

    def _value(self, scope: Scope) -> Value | Parameters:
        kind = self.kind
        if is_single(kind):
            value: Any = self.values[kind.fields[0].name][0]
            return value.evaluate(scope) if isinstance(value, LaterValue) else value
        items: list[tuple[str, tuple[Any, ...]]] = []
        for field in kind.fields:
            if field.name in self.values:
                numbers: tuple[Any, ...] = tuple(
                    v.evaluate(scope) if isinstance(v, LaterValue) else v
                    for v in self.values[field.name]
                )
                if field.form == "ratio":
                    numbers = ratio_pair(numbers[0])
                items.append((field.name, numbers))
        return Parameters(tuple(items))


def is_single(kind: type[Element]) -> bool:
    """Whether the kind has one number, which is its value."""
    fields = kind.fields
    return (
        kind.rule == "all"
        and len(fields) == 1
        and fields[0].form == "number"
        and len(fields[0].units) == 1
    )


@cache
def written_as(kind: str) -> str:
    """How a kind is written, from its docstring."""
    match = re.search(r"Written:\s*(.+)", KINDS[kind].__doc__ or "")
    return f"write it as: {match[1]}" if match else f"see: equiv kinds {kind}"


@cache
def keywords(kind: str) -> dict[str, Field]:
    """The fields of a kind by the words that may stand before them."""
    return {
        word: field
        for field in KINDS[kind].fields
        if field.keyword is not None
        for word in (field.keyword, *field.aliases)
    }


def read_element(words: Words, kind: type[Element]) -> Draft:
    """The element that a statement of this kind describes; its first word is taken."""
    form = written_as(kind.kind)
    name = words.name("a name", form)
    ends = read_connection(words, kind, name)
    start = words.taken
    values: dict[str, tuple[FieldValue, ...]] = {}
    for field in kind.fields:
        if field.keyword is None:
            values[field.name] = read_field(words, field, form)
    senses, chosen = _read_rest(words, kind, values)
    _require_complete(words, kind, values, senses)
    return Draft(
        kind, name, ends, values, senses, chosen.options(), chosen.at, words.statement,
        words.stretch(start), words.comment,
    )  # fmt: skip


def _read_rest(
    words: Words, kind: type[Element], values: dict[str, tuple[FieldValue, ...]]
) -> tuple[Quantity | None, Chosen]:
    """Fields with a keyword, what is sensed, and options: whatever order they are in."""
    senses: Quantity | None = None
    chosen = Chosen()
    known = keywords(kind.kind)
    while text := words.peek():
        if text in known:
            word = words.take("")
            field = known[text]
            _require_new(word.place, text, field, kind, values)
            values[field.name] = read_field(words, field, written_as(kind.kind))
        elif text == "senses" and kind.senses_what:
            place = words.take("").place
            if senses is not None:
                raise Mistake("given-twice", "senses is given twice", place)
            senses = _read_sensed(words, kind)
        elif option_of(text):
            chosen.read(words, kind)
        else:
            raise _unexpected(words, kind)
    return senses, chosen


def _require_new(
    place: tuple[int, int],
    text: str,
    field: Field,
    kind: type[Element],
    values: dict[str, tuple[FieldValue, ...]],
) -> None:
    if field.name in values:
        raise Mistake("given-twice", f"{text} is given twice", place)
    if kind.rule == "one" and values:
        raise Mistake(
            "one-of-them",
            f"{kind.kind} takes one of {_all_keywords(kind)}; found {text} too",
            place,
        )


def _read_sensed(words: Words, kind: type[Element]) -> Quantity:
    """The quantity that a controlled source senses, which must be of the right sort."""
    example = "V:p,n" if kind.senses_what == "V" else "I:R3"
    what = "voltage" if kind.senses_what == "V" else "current"
    word = words.take(f"the {what} it senses, as in {example}")
    sensed = read_quantity(word.text, word.at)
    if sensed.what != kind.senses_what:
        raise Mistake(
            "wrong-sense",
            f"{kind.kind} senses a {what}; found {word.text}",
            word.place,
            hint=f"write it as: senses {example}",
        )
    return sensed


def _all_keywords(kind: type[Element]) -> str:
    return ", ".join(field.keyword or field.name for field in kind.fields)


def _unexpected(words: Words, kind: type[Element]) -> Mistake:
    """What is said about a word that is neither a keyword nor an option."""
    word = words.next
    known = [*keywords(kind.kind), *OPTIONS, *(["senses"] if kind.senses_what else [])]
    if word.text.lower() in known:
        return Mistake(
            "keyword-in-capitals",
            f"keywords are lower case; found {word.text}",
            word.place,
            hint=f"write {word.text.lower()}",
        )
    if word.text == "senses":
        return Mistake("extra-word", f"{kind.kind} senses nothing", word.place)
    before = words.peek(-1) if words.taken else ""
    if word.text in UNITS and (meant := number_meant(before)):
        place = words.stretch(words.taken - 1)
        return Mistake("not-a-value", f"{before} is not a number", place, hint=meant)
    pool = [*known, *UNITS] if words.taken else known
    return Mistake(
        "extra-word",
        f"did not expect {word.text} here",
        word.place,
        hint=written_as(kind.kind),
        near=(word.text, pool),
    )


def _require_complete(
    words: Words,
    kind: type[Element],
    values: dict[str, tuple[FieldValue, ...]],
    senses: Quantity | None,
) -> None:
    form = written_as(kind.kind)
    if kind.rule == "all":
        for field in kind.fields:
            if field.name not in values:
                raise words.missing(f"{field.keyword} and its value", form)
    if kind.rule == "one" and not values:
        raise words.missing(f"one of {_all_keywords(kind)} with its value", form)
    if kind.senses_what and senses is None:
        raise words.missing("senses and the quantity it senses", form)


def renamed(draft: Draft, prefix: str, nodes: dict[str, str], names: frozenset[str]) -> Draft:
    """The draft as an instance of a block has it: local names get the instance's before them.

    `nodes` are the nodes that keep another name: the pins, and the ground. `names` are the
    elements of the block.
    """
    name = f"{prefix}.{draft.name}"
    if len(name) > MOST_NAME:
        raise Mistake(
            "name-too-long",
            f"inside the block the name has {len(name)} characters; at most {MOST_NAME} are read",
            Words(draft.statement).place_of(draft.name),
        )
    if draft.kind.pairs:
        ends = tuple([nodes.get(end) or f"{prefix}.{end}" for end in draft.ends])
    else:
        ends = tuple([f"{prefix}.{end}" for end in draft.ends])
    senses = draft.senses
    if senses is not None:
        senses = _renamed_quantity(draft, senses, prefix, nodes, names)
    return draft._replace(name=name, ends=ends, senses=senses, comment="")


def _renamed_quantity(
    draft: Draft, sensed: Quantity, prefix: str, nodes: dict[str, str], names: frozenset[str]
) -> Quantity:
    of_nodes = sensed.what == "V" and not sensed.pair
    if of_nodes and len(sensed.names) == 1 and sensed.names[0] in names:
        (name,) = sensed.names
        if name in nodes:
            raise Mistake(
                "two-meanings",
                f"in this block {name} is both a node and an element",
                Words(draft.statement).place_of(str(sensed)),
                hint=f"write V:{name},NODE for the node's voltage over another node",
            )
        of_nodes = False
    return sensed._replace(
        names=tuple((nodes.get(n) if of_nodes else None) or f"{prefix}.{n}" for n in sensed.names)
    )
