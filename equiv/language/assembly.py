"""The second half of reading: parameters, blocks and values, then the network as a whole."""

from __future__ import annotations

from collections.abc import Callable
from typing import TypeVar

from equiv.elements.element import Frequency
from equiv.errors import Diagnostic, NetworkFileError, UsageError, nearest
from equiv.language.blocks import Expansion, Frame, Use
from equiv.language.drafts import Draft
from equiv.language.fields import LaterFrequency
from equiv.language.mistakes import AlreadyReported, Mistake
from equiv.language.reader import Reader
from equiv.language.reports import Argument
from equiv.language.resolve import Whole, check, check_override
from equiv.language.scope import Scope
from equiv.language.words import Statement, Words
from equiv.network import DC, Find, Given, Network, Port

_T = TypeVar("_T")
Override = tuple[Frequency | LaterFrequency, Argument]


def assembled(reader: Reader, override: Override | None) -> Network:
    """The network that was read; every mistake in it is raised at once."""
    require_known(reader)
    scope = Scope(reader.top.definitions)
    scope.settle(reader.reports.add)
    frequency = _frequency(reader, scope)
    used = _evaluated(override[0], override[1], reader, scope) if override else frequency
    ground = reader.once.get("ground")
    whole = _elements(reader, scope, str(ground.value) if ground else "gnd")
    if override and used and frequency:
        whole.frequency = frequency
        check_override(whole, used, override[1])
    whole.frequency = used or DC
    check(whole, reader.finds, reader.ports)
    raise_mistakes(reader)
    title, phasors = reader.once.get("title"), reader.once.get("phasors")
    return Network(
        elements=whole.elements,
        title=str(title.value) if title else "",
        notes=tuple(reader.notes),
        ground=whole.ground,
        frequency=used or DC,
        phasors=str(phasors.value) if phasors else "rms",
        given=parameters(reader, scope),
        finds=tuple(asked.what for asked in reader.finds if isinstance(asked.what, Find)),
        ports={n: asked.what for n, asked in reader.ports.items() if isinstance(asked.what, Port)},
        comments={draft.name: draft.comment for draft in whole.drafts.values() if draft.comment},
        places=tuple(whole.places),
    )


def raise_mistakes(reader: Reader) -> None:
    """Raise what is wrong in a text, or in what was given with it."""
    if reader.reports:
        kind = UsageError if reader.reports.of_arguments else NetworkFileError
        raise kind(reader.reports.diagnostics())


def parameters(reader: Reader, scope: Scope) -> dict[str, Given]:
    """The file's parameters and their values."""
    known = scope.known
    return {name: Given(known[name].value, known[name].unit) for name in reader.top.definitions}


def require_known(reader: Reader) -> None:
    """Every parameter given to the function must be one of the file's."""
    known = reader.top.definitions
    unknown = [name for name in reader.given if name not in known]
    if unknown:
        raise_mistakes(reader)
        raise UsageError([_unknown_given(name, list(known)) for name in unknown])


def _unknown_given(name: str, known: list[str]) -> Diagnostic:
    listed = ", ".join(known[:12]) or "none"
    return Diagnostic(
        "unknown-given",
        f"the file has no parameter called {name}",
        hint=nearest(name, known) or f"its parameters: {listed}",
    )


def _frequency(reader: Reader, scope: Scope) -> Frequency | None:
    once = reader.once.get("frequency")
    if once is None or isinstance(once.value, str):
        return None
    return _evaluated(once.value, once.statement, reader, scope)


def _evaluated(
    value: Frequency | LaterFrequency, statement: Statement, reader: Reader, scope: Scope
) -> Frequency | None:
    if isinstance(value, Frequency):
        return value
    return attempt(lambda: value.evaluate(scope), statement, reader)


def attempt(work: Callable[[], _T], statement: Statement, reader: Reader) -> _T | None:
    """What some work on a statement makes; None where it is wrong, which is reported."""
    try:
        return work()
    except Mistake as mistake:
        reader.reports.add(mistake, statement)
    except AlreadyReported:
        pass
    return None


def _elements(reader: Reader, scope: Scope, ground: str) -> Whole:
    """The elements in the order of the text, with those of blocks in their places."""
    whole = Whole(ground, reader.reports, reader.texts)
    frame = Frame(reader.top, scope)
    expansion = Expansion(ground, reader.top, reader.reports.add)
    entries, instances, start = reader.top.entries, dict[str, Use](), 0
    for index in reader.careful:
        whole.extend(entries[start:index], reader.places[start:index])
        entry = entries[index]
        if isinstance(entry, Draft):
            _add(whole, entry, scope, reader)
        elif isinstance(entry, Use) and _is_new(entry, instances, reader):
            for element, draft in expansion.expand(entry, frame):
                whole.add(element, draft)
        start = index + 1
    whole.extend(entries[start:], reader.places[start:])
    whole.doubtful = reader.doubtful | expansion.broken
    return whole


def _add(whole: Whole, draft: Draft, scope: Scope, reader: Reader) -> None:
    element = attempt(lambda: draft.realise(scope), draft.statement, reader)
    if element is not None:
        whole.add(element, draft)
    else:
        reader.doubtful.update((draft.name, *draft.ends))


def _is_new(use: Use, instances: dict[str, Use], reader: Reader) -> bool:
    first = instances.setdefault(use.name, use)
    if first is use:
        return True
    mistake = Mistake(
        "name-taken",
        f"there is already an instance called {use.name}",
        Words(use.statement).place_of(use.name),
        related=(
            (first.statement.span(Words(first.statement).place_of(use.name)), "first used here"),
        ),
    )
    reader.reports.add(mistake, use.statement)
    return False
