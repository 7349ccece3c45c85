"""An item as a statement writes it, before parameters and buses are known.

Nothing here knows a kind: everything follows from what the kinds declare.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from functools import cache
from typing import Any, NamedTuple

from equiv.errors import nearest
from equiv.language.mistakes import Mistake
from equiv.language.names import require_name
from equiv.language.scope import Scope
from equiv.language.slips import number_meant
from equiv.language.words import Statement, Word, Words
from equiv.threephase.declaring import Field, Kind, Problem, make
from equiv.threephase.entered import OPEN, SOLID, Earthing, Entered, Factor
from equiv.threephase.language.quantities import ALL_UNITS, LaterEntered, Wanted, read_entered
from equiv.threephase.language.trade_words import earthing_meant, field_meant
from equiv.threephase.model import Bus, Item
from equiv.threephase.vector_groups import group_meant, read_group

Place = tuple[int, int]
MOST_PARALLEL = 10_000
_COUNT = Wanted("a count", ("",), False, "any")
_SIDES = re.compile(r"([0-9.eE+-]+)([^\W\d]*)/([0-9.eE+-]+)([^\W\d]*)")


class LaterEarthing(NamedTuple):
    """An earthing whose impedance is known when the parameters are."""

    impedance: LaterEntered
    word: Word

    def evaluate(self, scope: Scope) -> Earthing:
        """How the star point is earthed."""
        try:
            return Earthing(self.impedance.evaluate(scope))
        except Mistake as mistake:
            near = earthing_meant(self.word.text) or nearest(self.word.text, ("solid", "open"))
            if mistake.code != "unknown-parameter" or near is None:
                raise
            message = f"expected solid, open or an impedance; found {self.word.text}"
            raise Mistake("not-a-choice", message, self.word.place, hint=near) from None


class LaterFactor(NamedTuple):
    """A power factor that is known when the parameters are."""

    cosphi: LaterEntered
    leads: bool

    def evaluate(self, scope: Scope) -> Factor:
        """The power factor."""
        return Factor(self.cosphi.evaluate(scope), self.leads)


class Draft(NamedTuple):
    """What a statement says about an item."""

    kind: type[Kind]
    name: str
    buses: tuple[str, ...]
    values: dict[str, Any]
    places: dict[str, Place]
    """Where each value stands; `name`, `bus` and the buses' names too."""
    statement: Statement

    def realise(self, scope: Scope, buses: Mapping[str, Bus], base: float | None) -> Item:
        """The item between its buses, with its values."""
        values = {
            name: value.evaluate(scope) if hasattr(value, "evaluate") else value
            for name, value in self.values.items()
        }
        if "count" in values:
            values["count"] = _whole(values["count"], self.places["count"])
        ends = ("bus",) if len(self.buses) == 1 else ("first", "second")
        values.update(zip(ends, (buses[name] for name in self.buses), strict=True))
        if base is not None and "base" in self.kind.__dataclass_fields__:  # type: ignore[attr-defined]
            values["base"] = base
        return make(self.kind, name=self.name, **values)

    def mistake(self, problem: Problem) -> Mistake:
        """A problem with the values, at the value that it is about."""
        place = self.places.get(problem.field, self.places["name"])
        return Mistake(problem.code, problem.message, place, hint=problem.hint)


def read_item(words: Words, kind: type[Kind]) -> Draft:
    """The item that a statement writes; its first word is taken already."""
    hint = kind.written_as
    places = {"name": words.next.place}
    name = words.name(f"a name for the {kind.kind}", hint)
    buses = _buses(words, kind, places, hint)
    draft = Draft(kind, name, buses, {}, places, words.statement)
    keywords = kind.words
    for field in kind.positional:
        if words.peek() and words.peek() not in keywords and not _next_field(words, field):
            _read(words, field, draft)
        elif field.needed:
            what = f"{field.shown} ({' or '.join(filter(None, field.units))})"
            message = f"{name} has no {what}"
            raise Mistake("missing-rating", message, words.next.place, hint=hint)
    fields = kind.by_keyword
    while words.peek():
        _keyword(words, fields, keywords, draft)
    for field in kind.fields:
        if field.needed and field.name not in draft.values:
            message = f"expected {field.keyword} in this {kind.kind}'s statement"
            raise Mistake("missing-word", message, words.next.place, hint=hint)
    return draft


def _next_field(words: Words, field: Field) -> bool:
    """Whether the voltages of both sides stand where another value is expected."""
    return field.form == "number" and _SIDES.match(words.peek()) is not None


def _buses(words: Words, kind: type[Kind], places: dict[str, Place], hint: str) -> tuple[str, ...]:
    """The bus, or the two buses with > between them."""
    first = words.next
    names = [words.name("a bus", hint)]
    places["bus"] = first.place
    if kind.connection != "BUS":
        mark = words.take("> and a bus", hint)
        if mark.text != ">":
            message = f"expected the form {names[0]} > BUS; found {mark.text}"
            raise Mistake("wrong-connection", message, mark.place, hint=hint)
        places["second bus"] = words.next.place
        names.append(words.name("a bus", hint))
    elif words.peek() == ">":
        message = f"expected one bus of this {kind.kind}; found >"
        raise Mistake("wrong-connection", message, words.next.place, hint=hint)
    return tuple(names)


def _keyword(
    words: Words, fields: Mapping[str, Field], keywords: tuple[str, ...], draft: Draft
) -> None:
    """A keyword and what stands behind it."""
    word = words.take("a keyword")
    text = word.text
    if text not in keywords:
        before = "a keyword stands before each value" if text[0].isdigit() else "its words"
        listed = f"{before}: {', '.join(keywords)}"
        hint = field_meant(text, keywords) or nearest(text, keywords) or listed
        message = f"did not expect {text} in this {draft.kind.kind}'s statement"
        raise Mistake("extra-word", message, word.place, hint=hint)
    name = fields[text].name if text in fields else text
    if name in draft.values:
        raise Mistake("given-twice", f"{text} is given twice", word.place)
    if words.peek() in keywords:
        message = f"expected a value behind {text}; found {words.peek()}"
        raise Mistake("missing-value", message, words.next.place)
    if text in fields:
        _read(words, fields[text], draft)
        return
    start = words.taken
    if text == "count":
        draft.values[name] = read_entered(words, _COUNT)
    elif text == "label":
        draft.values[name] = words.text("the label's text")
    else:
        draft.values[name] = words.name("the name of a group")
    draft.places[name] = words.stretch(start)


def _read(words: Words, field: Field, draft: Draft) -> None:
    """The value of a field."""
    start = words.taken
    draft.values[field.name] = _FORMS[field.form](words, field)
    draft.places[field.name] = words.stretch(start)


@cache
def _wanted(field: Field) -> Wanted:
    return Wanted(field.shown, field.units, field.complex, field.bounds)


def _number(words: Words, field: Field) -> Entered | LaterEntered:
    return read_entered(words, _wanted(field))


def _earthing(words: Words, field: Field) -> Earthing | LaterEarthing:
    """`solid`, `open` or an impedance."""
    if words.peek() in ("solid", "open"):
        return SOLID if words.take("solid or open").text == "solid" else OPEN
    word = words.next
    wanted = Wanted("solid, open or an impedance", field.units, True, "not negative")
    found = read_entered(words, wanted)
    return LaterEarthing(found, word) if isinstance(found, LaterEntered) else Earthing(found)


def _factor(words: Words, field: Field) -> Factor | LaterFactor:
    """A power factor, with `lead` or `lag` behind it."""
    found = read_entered(words, _wanted(field))
    leads = False
    if words.peek() in ("lead", "lag"):
        leads = words.take("lead or lag").text == "lead"
    return LaterFactor(found, leads) if isinstance(found, LaterEntered) else Factor(found, leads)


def _voltages(words: Words, field: Field) -> tuple[Entered, Entered]:
    """The rated voltages of both sides: `33/11 kV`, `11 kV/400 V`."""
    start = words.taken
    text = words.take("the rated voltages, as in 33/11 kV").text
    if "/" not in text and words.peek(0).find("/") > 0:
        text += words.take("the rated voltages").text
    if words.peek() in ALL_UNITS:
        text += words.take("a unit").text
    place = words.stretch(start)
    match = _SIDES.fullmatch(text)
    if match is None:
        message = f"expected the rated voltages of both sides; found {words.written(place)}"
        hint = number_meant(text) or "as in: 33/11 kV, or 11/0.4 kV"
        raise Mistake("missing-rating", message, place, hint=hint)
    first, first_unit, second, second_unit = match.groups()
    sides = []
    for number, unit in ((first, first_unit or second_unit), (second, second_unit)):
        own = Words(Statement(words.statement.file, 1, f"{number} {unit}"))
        try:
            side = read_entered(own, _wanted(field))
            own.end()
        except Mistake as mistake:
            raise Mistake(mistake.code, mistake.message, place, hint=mistake.hint) from None
        assert isinstance(side, Entered)
        sides.append(side)
    return sides[0], sides[1]


def _group(words: Words, field: Field) -> Any:
    """A vector group, the high side first."""
    word = words.take("a vector group, as in Dyn11")
    found = read_group(word.text)
    if isinstance(found, str):
        form = "by IEC 60076-1: the high side's letter, the low side's, the clock, as in Dyn11"
        meant = group_meant(word.text)
        hint = f"did you mean {meant}? capitals are the high side's" if meant else form
        raise Mistake("bad-vector-group", found, word.place, hint=hint)
    return found


_FORMS = {
    "number": _number,
    "earthing": _earthing,
    "factor": _factor,
    "voltages": _voltages,
    "group": _group,
}


def _whole(entered: Entered, place: Place) -> int:
    number = entered.real
    if number != int(number) or not 1 <= number <= MOST_PARALLEL:
        message = f"a count is a whole number from 1 to {MOST_PARALLEL}"
        raise Mistake("bad-count", message, place)
    return int(number)


def require_bus_name(words: Words) -> str:
    """The name of a bus that is being declared."""
    word = words.take("a name for the bus", "write it as: bus NAME 11 kV")
    return require_name(word.text, word.at, "a name for the bus")
