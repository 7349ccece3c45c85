"""The network language on one page, from the kinds and statements themselves."""

from __future__ import annotations

import inspect
from dataclasses import dataclass
from typing import Any, ClassVar

from equiv.analyses.result import Result
from equiv.analyses.tables import Column, Table
from equiv.elements import KINDS
from equiv.errors import Diagnostic, UsageError, nearest
from equiv.language import STATEMENTS
from equiv.network import Network

ROLES = {
    "source": "Independent sources",
    "controlled": "Controlled sources",
    "passive": "Passive elements",
    "device": "Devices",
}


@dataclass(frozen=True)
class KindsPage(Result):
    """The kinds of element and how each is written, or the page of one."""

    command: ClassVar[str] = "kinds"

    kind: str | None = None

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """A table a role and one of statements; for one kind its page."""
        if self.kind is not None:
            return (page(self.kind, KINDS[self.kind]),)
        tables = [_statements()]
        for role, title in ROLES.items():
            kinds = [k for k in KINDS.values() if k.role == role]
            rows = Table.rows_of([(k.kind, sections(k)["Written"]) for k in kinds])
            columns = (Column("kind", key=True), Column("written"))
            tables.append(Table(title, (), columns, rows, name=role))
        hint = (
            'Options of any element: label "TEXT", group NAME, tolerance 1%, at 150 Hz. '
            "`equiv kinds KIND` shows one kind's page, `equiv kinds three-phase` the words of "
            "three-phase files."
        )
        last = tables[-1]
        tables[-1] = Table(
            last.title, last.subtitles, last.columns, last.rows, (hint,), name=last.name
        )
        return tuple(tables)

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        kinds = [KINDS[self.kind]] if self.kind else list(KINDS.values())
        return {
            "statements": dict(STATEMENTS),
            "kinds": [
                {"kind": k.kind, "role": k.role, "summary": summary(k),
                 **{name.lower(): text for name, text in sections(k).items()}}
                for k in kinds
            ],
        }  # fmt: skip


def kinds(kind: str | None = None) -> KindsPage:
    """Every kind of element and how it is written, or one kind's page.

    Errors: UsageError for a kind that there is not.
    """
    if kind is not None and kind not in KINDS:
        raise UsageError(
            Diagnostic("unknown-kind", f"there is no kind called {kind}", hint=nearest(kind, KINDS))
        )
    return KindsPage(Network({}), kind=kind)


def summary(kind: type) -> str:
    """The first sentence of a kind's docstring."""
    return inspect.getdoc(kind).partition("\n")[0]  # type: ignore[union-attr]


def sections(kind: type) -> dict[str, str]:
    """The labelled parts of a kind's docstring: Written, Equation, Off, Notes, Example, Source."""
    found: dict[str, str] = {}
    name = ""
    for line in (inspect.getdoc(kind) or "").splitlines()[1:]:
        label, colon, text = line.partition(":")
        if colon and label.isalpha() and not line.startswith(" "):
            name = label
            found[name] = text.strip()
        elif name and line.strip():
            found[name] += " " + line.strip()
    return found


def page(word: str, kind: type) -> Table:
    """The page of a kind, from its docstring."""
    lines = tuple(f"{name + ':':<10}{text}" for name, text in sections(kind).items())
    return Table(word, (summary(kind),), notes=lines, name=word)


def statements() -> list[tuple[str, str]]:
    """How each statement about the file is written, and what it means."""
    return [(w, meaning) for w, _, meaning in (t.partition(": ") for t in STATEMENTS.values())]


def _statements() -> Table:
    columns = (Column("statement", key=True), Column("meaning"))
    return Table(
        "Statements about the file", (), columns, Table.rows_of(statements()), name="statements"
    )
