"""The second half of reading: parameters, buses and items, then the system as a whole."""

from __future__ import annotations

from collections.abc import Mapping
from itertools import islice
from typing import TYPE_CHECKING

from equiv.language.assembly import attempt, parameters, raise_mistakes, require_known
from equiv.language.limits import MOST_ERRORS
from equiv.language.mistakes import Mistake
from equiv.language.scope import Scope
from equiv.threephase.declaring import Kind
from equiv.threephase.entered import Entered
from equiv.threephase.kinds.transformer import Transformer
from equiv.threephase.language.drafts import Draft
from equiv.threephase.language.quantities import LaterEntered
from equiv.threephase.language.statements import BusDraft
from equiv.threephase.loops import disagreements
from equiv.threephase.model import Bus, Item, Link, OneLine
from equiv.threephase.ratios import wrong_ratio
from equiv.threephase.words import level_words

if TYPE_CHECKING:
    from equiv.threephase.language.reader import SystemReader

MOST_TOLERANCE = 0.10


def assembled(reader: SystemReader) -> OneLine:
    """The system that was read; every mistake in it is raised at once."""
    require_known(reader)
    scope = Scope(reader.top.definitions)
    scope.settle(reader.reports.add)
    base = _said(reader, "base", scope)
    prefault = _said(reader, "prefault", scope)
    frequency = _said(reader, "three-phase", scope)
    buses = _buses(reader, scope)
    drafts, items = _items(reader, scope, buses, base.real if base else None)
    _check_whole(reader, drafts, items)
    raise_mistakes(reader)
    title = reader.once.get("title")
    assert frequency is not None
    return OneLine(
        buses,
        items,
        frequency.real / (1.0 if frequency.unit == "Hz" else 6.283185307179586),
        title=str(title.value) if title else "",
        notes=tuple(reader.notes),
        base=base.real if base else 100e6,
        prefault=prefault.real if prefault else 1.0,
        given=parameters(reader, scope),
        places={d.name: (d.statement.file, d.statement.line) for d in drafts.values()},
    )


def _said(reader: SystemReader, name: str, scope: Scope) -> Entered | None:
    """A value that the file says once."""
    said = reader.said.get(name)
    if said is None:
        return None
    return attempt(lambda: _known(said.value, scope), said.statement, reader)


def _known(value: Entered | LaterEntered, scope: Scope) -> Entered:
    return value if isinstance(value, Entered) else value.evaluate(scope)


def _buses(reader: SystemReader, scope: Scope) -> dict[str, Bus]:
    """The buses by name."""
    buses: dict[str, Bus] = {}
    first: dict[str, BusDraft] = {}
    for draft in reader.buses:
        if draft.name in first:
            reader.reports.add(_taken("a bus", draft, first[draft.name]), draft.statement)
            continue
        first[draft.name] = draft
        bus = attempt(lambda d=draft: _bus(d, scope), draft.statement, reader)  # type: ignore[misc]
        if bus is not None:
            buses[draft.name] = bus
        else:
            reader.doubtful.add(draft.name)
    return buses


def _taken(what: str, draft: BusDraft | Draft, first: BusDraft | Draft) -> Mistake:
    return Mistake(
        "name-taken",
        f"there is already {what} called {draft.name}",
        draft.places["name"],
        related=((first.statement.span(first.places["name"]), "first used here"),),
    )


def _bus(draft: BusDraft, scope: Scope) -> Bus:
    volts = _known(draft.volts, scope)
    written = {"volts": volts}
    if draft.tolerance is None:
        return Bus(draft.name, volts.real, written=written)
    tolerance = _known(draft.tolerance, scope)
    if tolerance.real > MOST_TOLERANCE:
        message = "a supply's tolerance is at most 10 %"
        raise Mistake("bad-tolerance", message, draft.places["tolerance"])
    return Bus(draft.name, volts.real, tolerance.real, {**written, "tolerance": tolerance})


def _items(
    reader: SystemReader, scope: Scope, buses: Mapping[str, Bus], base: float | None
) -> tuple[dict[str, Draft], dict[str, Item]]:
    """The items by name, and the drafts that they were made of."""
    drafts: dict[str, Draft] = {}
    items: dict[str, Item] = {}
    for draft in reader.drafts:
        first = drafts.setdefault(draft.name, draft)
        if first is not draft:
            reader.reports.add(_taken("an item", draft, first), draft.statement)
        elif _has_its_buses(draft, buses, reader):
            item = attempt(lambda d=draft: d.realise(scope, buses, base), draft.statement, reader)  # type: ignore[misc]
            if item is not None:
                items[draft.name] = item
    return drafts, items


def _has_its_buses(draft: Draft, buses: Mapping[str, Bus], reader: SystemReader) -> bool:
    known = True
    for name, place in zip(draft.buses, ("bus", "second bus"), strict=False):
        if name in buses:
            continue
        known = False
        if name not in reader.doubtful:
            mistake = Mistake(
                "unknown-bus",
                f"there is no bus called {name}",
                draft.places[place],
                hint=f"declare it: bus {name} 11 kV",
                near=(name, buses),
            )
            reader.reports.add(mistake, draft.statement)
    if len(draft.buses) == 2 and draft.buses[0] == draft.buses[1]:
        message = f"{draft.name} has both its ends at {draft.buses[0]}"
        reader.reports.add(
            Mistake("same-bus", message, draft.places["second bus"]), draft.statement
        )
        return False
    return known


def _check_whole(
    reader: SystemReader, drafts: Mapping[str, Draft], items: Mapping[str, Item]
) -> None:
    """Report what is wrong with the items by themselves, and together."""
    for name, item in items.items():
        draft = drafts[name]
        assert isinstance(item, Kind)
        for problem in item.problems():
            reader.reports.add(draft.mistake(problem), draft.statement)
        if isinstance(item, Link) and item.first.volts != item.second.volts:
            reader.reports.add(_two_voltages(item, draft), draft.statement)
        if isinstance(item, Transformer) and (wrong := wrong_ratio(item)):
            reader.reports.add(draft.mistake(wrong), draft.statement)
        if item.group is not None and item.group in items:
            message = f"{item.group} is an item; a group needs a name of its own"
            reader.reports.add(
                Mistake("name-taken", message, draft.places["group"]), draft.statement
            )
    if not reader.reports:
        for name, problem in islice(disagreements(items.values()), MOST_ERRORS):
            reader.reports.add(drafts[name].mistake(problem), drafts[name].statement)
        _require_source(reader, items)


def _two_voltages(item: Link, draft: Draft) -> Mistake:
    first, second = item.first, item.second
    return Mistake(
        "two-voltages",
        f"a {item.kind} joins buses of one voltage; {first.name} is at "
        f"{level_words(first.volts)}, {second.name} at {level_words(second.volts)}",
        draft.places["second bus"],
        hint="between two voltages stands a transformer",
    )


def _require_source(reader: SystemReader, items: Mapping[str, Item]) -> None:
    if any(getattr(item, "drives", False) for item in items.values()):
        return
    said = reader.said["three-phase"]
    message = "nothing in this system feeds a fault"
    hint = "an infeed, a generator or a motor does, as in: infeed Utility GRID level 900 MVA"
    reader.reports.add(Mistake("no-source", message, said.place, hint=hint), said.statement)
