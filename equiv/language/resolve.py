"""Checks over the whole network: names that must exist, and values that must go together."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from decimal import Decimal
from fractions import Fraction
from functools import cached_property
from itertools import chain
from operator import itemgetter

from equiv.elements import KINDS, Element
from equiv.elements.element import Frequency, Parameters
from equiv.elements.quantity import Quantity
from equiv.errors import Span
from equiv.language.drafts import Draft
from equiv.language.files import Text
from equiv.language.handlers import Asked
from equiv.language.mistakes import Mistake
from equiv.language.reports import Reports
from equiv.language.words import Statement, Words
from equiv.network import DC, Find, Port
from equiv.units import Formula, Value, is_complex


class Whole:
    """All elements, and where each was written."""

    def __init__(self, ground: str, reports: Reports, texts: Mapping[str, Text]) -> None:
        self.ground = ground
        self.reports = reports
        self.listed: list[Element] = []
        self.places: list[tuple[str, int]] = []
        self.drafts: dict[int, Draft] = {}
        """The statements of those elements that were read word by word."""
        self.frequency: Frequency = DC
        self.doubtful: set[str] = set()
        self._texts = texts

    def extend(self, elements: Iterable[object], places: list[tuple[str, int]]) -> None:
        """Elements that were read in bulk."""
        self.listed.extend(elements)  # type: ignore[arg-type]
        self.places.extend(places)

    def add(self, element: Element, draft: Draft) -> None:
        """An element that was read word by word."""
        self.drafts[len(self.listed)] = draft
        self.listed.append(element)
        self.places.append((draft.statement.file, draft.statement.line))

    @cached_property
    def elements(self) -> dict[str, Element]:
        """The elements by name; the first of two with one name."""
        found = dict(zip(map(itemgetter(0), self.listed), self.listed, strict=True))
        if len(found) < len(self.listed):
            found.update((e.name, e) for e in reversed(self.listed))
        return found

    @cached_property
    def nodes(self) -> set[str]:
        """Every node that an element touches, and the ground."""
        found = set(chain.from_iterable(map(itemgetter(1), self.listed)))
        found.add(self.ground)
        return found

    def statement(self, index: int) -> Statement:
        """Where an element was written."""
        if index in self.drafts:
            return self.drafts[index].statement
        file, line = self.places[index]
        return Statement(file, line, self._texts[file].lines[line - 1])

    def span(self, index: int, word: str) -> Span:
        """The place of a word in an element's statement."""
        statement = self.statement(index)
        return statement.span(Words(statement).place_of(word))

    def report(self, index: int, word: str, mistake: Mistake) -> None:
        """Report a mistake at a word of an element's statement."""
        statement = self.statement(index)
        mistake.place = Words(statement).place_of(word)
        self.reports.add(mistake, statement)

    def unknown(self, name: str, known: Iterable[str], wanted: str) -> Mistake | None:
        """That a name is unknown, unless a statement that may define it could not be read."""
        if name in self.doubtful or name.partition(".")[0] in self.doubtful:
            return None
        return Mistake(
            "unknown-name", f"there is no {wanted} called {name}", (0, 0), near=(name, known)
        )

    def wrong_quantity(self, quantity: Quantity) -> Mistake | None:
        """What is wrong with a quantity in this network."""
        names = quantity.names
        if quantity.what == "V" and len(names) == 2:
            for name in names:
                if name not in self.nodes:
                    return self.unknown(name, self.nodes, "node")
            return None
        (name,) = names
        element = self.elements.get(name)
        voltage = quantity.what == "V" and quantity.pair == 0
        if voltage and name in self.nodes:
            return None if element is None else _two_meanings(name)
        if element is None:
            known = chain(self.elements, self.nodes if voltage else ())
            return self.unknown(name, known, "node or element" if voltage else "element")
        if quantity.pair >= len(element.pairs):
            return Mistake(
                "no-such-pair",
                f"{name} is a {element.kind}, which has no such terminal pair; found {quantity}",
                (0, 0),
            )
        return None


def _two_meanings(name: str) -> Mistake:
    return Mistake(
        "two-meanings",
        f"{name} is both a node and an element",
        (0, 0),
        hint=f"write V:{name},NODE for the node's voltage over another node",
    )


def check(whole: Whole, finds: list[Asked], ports: dict[str, Asked]) -> None:
    """Report everything that is wrong with the network as a whole."""
    if len(whole.elements) < len(whole.listed):
        _check_names(whole)
    for index, element in enumerate(whole.listed):
        if element[3] is not None and (wrong := whole.wrong_quantity(element[3])):
            whole.report(index, str(element[3]), wrong)
    for index in whole.drafts:
        _, _, value, _, links, options = whole.listed[index]
        if links:
            _check_links(whole, index)
        if options.group is not None:
            _check_group(whole, index)
        if type(value) is not Decimal:
            _check_complex(whole, index)
    _check_frequencies(whole)
    for asked in [*finds, *ports.values()]:
        _check_asked(whole, asked)


def _check_names(whole: Whole) -> None:
    first: dict[str, int] = {}
    for index, element in enumerate(whole.listed):
        name = element.name
        if first.setdefault(name, index) == index:
            continue
        related = ((whole.span(first[name], name), "first used here"),)
        mistake = Mistake(
            "name-taken", f"there is already an element called {name}", (0, 0), related=related
        )
        whole.report(index, name, mistake)


def _check_asked(whole: Whole, asked: Asked) -> None:
    what = asked.what
    if isinstance(what, Find):
        wrong = whole.wrong_quantity(what.quantity)
        _report_asked(whole, asked, str(what.quantity), wrong)
    elif isinstance(what, Port):
        for node in (what.plus, what.minus):
            if node not in whole.nodes:
                _report_asked(whole, asked, node, whole.unknown(node, whole.nodes, "node"))


def _report_asked(whole: Whole, asked: Asked, word: str, wrong: Mistake | None) -> None:
    if wrong is not None:
        wrong.place = asked.words.place_of(word)
        whole.reports.add(wrong, asked.statement)


def _check_links(whole: Whole, index: int) -> None:
    """What a coupling joins must be two inductors, which it cannot join too strongly."""
    element = whole.listed[index]
    found: list[Element] = []
    for name in element.links:
        other = whole.elements.get(name)
        if other is None:
            inductors = (e.name for e in whole.listed if e.kind == "inductor")
            if wrong := whole.unknown(name, inductors, "inductor"):
                whole.report(index, name, wrong)
        elif other.kind != "inductor":
            message = f"{element.kind} joins inductors; {name} is a {other.kind}"
            whole.report(index, name, Mistake("not-an-inductor", message, (0, 0)))
        else:
            found.append(other)
    if len(found) == 2:
        _check_strength(whole, index, found)


def _check_strength(whole: Whole, index: int, inductors: list[Element]) -> None:
    element = whole.listed[index]
    if inductors[0] is inductors[1]:
        message = f"{element.kind} joins two inductors; {inductors[0].name} is named twice"
        whole.report(index, inductors[0].name, Mistake("coupled-to-itself", message, (0, 0)))
        return
    value = element.value
    if not isinstance(value, Parameters):
        return
    first, second = (_number(inductor.value) for inductor in inductors)
    k, mutual = (_number(dict(value.items).get(name, (None,))[0]) for name in ("k", "M"))
    too_strong = k is not None and abs(k) > 1
    if mutual is not None and first is not None and second is not None:
        too_strong = mutual**2 > first * second
    if too_strong:
        message = "k lies between -1 and 1" if k is not None else "M is at most √(L1·L2)"
        mistake = Mistake("coupled-too-strongly", message, (0, 0))
        mistake.place = whole.drafts[index].value_place
        whole.reports.add(mistake, whole.statement(index))


def _number(value: Value | Parameters | None) -> Fraction | None:
    if isinstance(value, Formula):
        value = value.value
    if value is None or isinstance(value, tuple):
        return None
    return Fraction(value)


def _check_group(whole: Whole, index: int) -> None:
    element = whole.listed[index]
    group = element.options.group
    if group is not None and group in whole.elements:
        message = f"{group} is an element; a group needs a name of its own"
        whole.report(index, group, Mistake("name-taken", message, (0, 0)))


def _values(element: Element) -> Iterable[Value]:
    value = element.value
    if isinstance(value, Parameters):
        return [v for _, values in value.items for v in values]
    return [] if value is None else [value]


def _check_complex(whole: Whole, index: int) -> None:
    """At DC every value is real."""
    element = whole.listed[index]
    at = element.options.at or whole.frequency
    if at.value or not any(map(is_complex, _values(element))):
        return
    hint = "write a frequency statement, as in: frequency 50 Hz"
    mistake = Mistake(
        "complex-at-dc",
        f"{element.name} has a complex value; at DC every value is real",
        whole.drafts[index].value_place,
        hint=None if element.options.at else hint,
    )
    whole.reports.add(mistake, whole.statement(index))


def is_fixed(element: Element) -> bool:
    """Whether an element is known at one frequency only."""
    if element.role == "source":
        return False
    if element.role == "passive" and any(field.complex for field in element.fields):
        return True
    return any(map(is_complex, _values(element)))


def _check_frequencies(whole: Whole) -> None:
    """An element known at the file's frequency only, and a source at another."""
    home = round(whole.frequency.omega, 9)
    for index in whole.drafts:
        at = whole.listed[index].options.at
        if at is not None and round(at.omega, 9) != home:
            break
    else:
        return
    kinds = {kind for kind in KINDS.values() if any(field.complex for field in kind.fields)}
    source = whole.listed[index].name
    for number, element in enumerate(whole.listed):
        if type(element) in kinds and is_fixed(element):
            mistake = Mistake(
                "fixed-frequency",
                f"{element.name} is known at the file's frequency only, and {source} is at another",
                (0, 0),
                hint="an inductor or capacitor is known at every frequency",
                related=((whole.span(index, "at"), "the source at another frequency"),),
            )
            whole.report(number, element.name, mistake)


def check_override(whole: Whole, frequency: Frequency, given: Statement) -> None:
    """A frequency given to the function cannot replace the one that an element is known at."""
    if round(frequency.omega, 9) == round(whole.frequency.omega, 9):
        return
    for element in whole.listed:
        if is_fixed(element):
            mistake = Mistake(
                "fixed-frequency",
                f"{element.name} is known at the file's frequency only; it cannot be changed",
                (0, len(given.text)),
            )
            whole.reports.add(mistake, given)
            return
