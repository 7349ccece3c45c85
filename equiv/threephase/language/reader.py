"""Text into a three-phase system: the statements in order, then what rests on all of them."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import replace
from decimal import localcontext
from pathlib import Path

from equiv.elements import KINDS as ELEMENTS
from equiv.errors import Diagnostic, UsageError
from equiv.language.amounts import Written
from equiv.language.arguments import arguments
from equiv.language.bulk import collector_paused
from equiv.language.files import Text
from equiv.language.keywords import HANDLERS as OF_NETWORKS
from equiv.language.limits import MOST_ELEMENTS
from equiv.language.mistakes import Mistake
from equiv.language.numerals import EXACT
from equiv.language.reader import Reader
from equiv.language.reports import Argument
from equiv.language.words import Statement, Words
from equiv.network import Origin
from equiv.threephase.kinds import KINDS, Kind
from equiv.threephase.language.assembly import assembled
from equiv.threephase.language.drafts import Draft, read_item
from equiv.threephase.language.quantities import read_power_amount
from equiv.threephase.language.statements import HANDLERS, BusDraft, Said
from equiv.threephase.language.trade_words import field_meant, kind_meant
from equiv.threephase.model import OneLine

_WORD_BY_WORD = 2**62
"""Lines below which nothing is read in bulk: there is nothing plain in these files."""


class SystemReader(Reader):
    """What is known of a system while its statements are read, one file after another."""

    def __init__(
        self, given: Mapping[str, tuple[Written, Argument]], root: Path | None = None
    ) -> None:
        super().__init__(given, root, _WORD_BY_WORD)
        self.said: dict[str, Said] = {}
        self.buses: list[BusDraft] = []
        self.drafts: list[Draft] = []

    def read_statement(self, first: str, statement: Statement, depth: int) -> None:
        """Read one statement by its first word."""
        handler, kind = HANDLERS.get(first), KINDS.get(first)
        if handler is not None:
            handler(self, self.top, statement)
        elif kind is not None:
            if len(self.drafts) >= MOST_ELEMENTS:
                message = f"more than {MOST_ELEMENTS} items"
                raise Mistake("too-many-elements", message, (0, len(statement.text)))
            self.drafts.append(read_item(_words(statement, kind), kind))
        else:
            raise _unknown(first, statement)


def _words(statement: Statement, kind: type[Kind]) -> Words:
    """The words of an item's statement, the first taken."""
    try:
        words = Words(statement)
    except Mistake as mistake:
        raise _symbol(mistake, statement, kind) or mistake from None
    words.taken = 1
    return words


def _symbol(mistake: Mistake, statement: Statement, kind: type[Kind]) -> Mistake | None:
    """That a quotation mark is part of a symbol, as in x"d."""
    for match in re.finditer(r"\S+", statement.text):
        hint = field_meant(match[0], kind.words)
        if hint and match.start() <= mistake.place[0] < match.end():
            message = f"did not expect {match[0]} in this {kind.kind}'s statement"
            return Mistake("extra-word", message, (match.start(), len(match[0])), hint=hint)
    return None


def _unknown(first: str, statement: Statement) -> Mistake:
    place = (statement.text.index(first), len(first))
    known = [*KINDS, *HANDLERS]
    if first.lower() in known:
        hint = f"write {first.lower()}"
        message = f"keywords are lower case; found {first}"
        return Mistake("keyword-in-capitals", message, place, hint=hint)
    meant = kind_meant(first)
    if meant is None and (first in ELEMENTS or first in OF_NETWORKS):
        message = f"{first} is for networks; this file says three-phase"
        hint = "equiv kinds three-phase lists what it may hold"
        return Mistake("not-three-phase", message, place, hint=hint)
    return Mistake(
        "unknown-keyword",
        f"expected a kind of item or a statement; found {first}",
        place,
        hint=meant or "equiv kinds three-phase lists them",
        near=None if meant else (first, known),
    )


def read_system(
    text: Text,
    path: Path | None,
    given: Mapping[str, str] | None,
    frequency: str | None,
    origin: Origin,
) -> OneLine:
    """The system of a text; `path` is where it is, if it may read other files.

    Errors: NetworkFileError with every mistake; UsageError for parameters that there are not,
    and for another frequency: impedances are entered at the file's own.
    """
    if frequency is not None:
        message = "a three-phase system is known at its own frequency only"
        hint = "its impedances are entered at the frequency behind three-phase"
        raise UsageError(Diagnostic("fixed-frequency", message, hint=hint))
    with localcontext(EXACT), collector_paused():
        values, _ = arguments(given or {}, None, read_power_amount)
        path = None if path is None else path.resolve()
        reader = SystemReader(values, None if path is None else path.parent)
        reader.read(text, path)
        return replace(assembled(reader), origin=origin)
