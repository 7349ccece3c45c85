"""The languages on one page each: that of networks, and that of three-phase files."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, ClassVar

from equiv.analyses.kinds import KindsPage, page, sections, summary
from equiv.analyses.kinds import kinds as kinds_of_networks
from equiv.analyses.result import Result
from equiv.analyses.tables import Column, Table
from equiv.elements import KINDS as ELEMENTS
from equiv.errors import Diagnostic, UsageError, nearest
from equiv.network import Network
from equiv.threephase.kinds import KINDS
from equiv.threephase.language.statements import STATEMENTS

WORD = "three-phase"
_OPTIONS = (
    "After any item's values: count N (of the same, in parallel), group NAME (sources: reported "
    'together), label "TEXT". EARTHING is solid, open or an impedance.'
)
_UNITS = (
    "Units: VA, W, var, V, A, ohm, ohm/km, S/km, km, %, pu, with SI prefixes (MVA, kV, uS/km). "
    "Per cent and per unit are on the item's own rating; parameters and expressions are written "
    "as in networks. Angles count from a bus's no-load angle: what vector groups turn is not in "
    "them."
)


@dataclass(frozen=True)
class SystemKindsPage(Result):
    """The statements of three-phase files and the kinds of item, or the page of one."""

    command: ClassVar[str] = "kinds"

    kind: str | None = None

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """A table of statements and one of kinds; for one kind its page."""
        if self.kind is not None:
            return (page(self.kind, KINDS[self.kind]),)
        kinds = Table.rows_of([(k, sections(KINDS[k])["Written"]) for k in KINDS])
        hint = (
            "`equiv kinds KIND` shows one kind's page, a transformer's by three-phase-transformer."
        )
        return (
            Table("Statements of a three-phase file",
                  (), (Column("statement", key=True), Column("meaning")),
                  Table.rows_of(statements()), name="statements"),
            Table("Items", (), (Column("kind", key=True), Column("written")), kinds,
                  (_OPTIONS, _UNITS, hint), name="items"),
        )  # fmt: skip

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        listed = [self.kind] if self.kind else list(KINDS)
        return {
            "statements": dict(STATEMENTS),
            "kinds": [
                {"kind": kind, "role": WORD, "summary": summary(KINDS[kind]),
                 **{name.lower(): text for name, text in sections(KINDS[kind]).items()}}
                for kind in listed
            ],
        }  # fmt: skip


def kinds(kind: str | None = None) -> KindsPage | SystemKindsPage:
    """Every kind of element and how it is written, or one kind's page.

    `three-phase` is the page of three-phase files. Errors: UsageError for a kind that there is
    not. Where networks have a kind of the same name it is `three-phase-transformer`.
    """
    bare = (kind or "").removeprefix(f"{WORD}-")
    if kind == WORD:
        return SystemKindsPage(Network({}))
    if kind is None or kind in ELEMENTS:
        return kinds_of_networks(kind)
    if bare in KINDS:
        return SystemKindsPage(Network({}), kind=bare)
    hint = nearest(kind, [*ELEMENTS, *KINDS, WORD])
    raise UsageError(Diagnostic("unknown-kind", f"there is no kind called {kind}", hint=hint))


def statements() -> list[tuple[str, str]]:
    """How each statement about a three-phase file is written, and what it means."""
    return [(w, meaning) for w, _, meaning in (t.partition(": ") for t in STATEMENTS.values())]
