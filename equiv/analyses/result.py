"""What every analysis returns: a frozen result that can show itself, with its checks."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Any, ClassVar, NamedTuple

from equiv.analyses.tables import Table
from equiv.errors import ExitStatus
from equiv.network import Network
from equiv.units import is_exact

PROGRAM = "equiv 0.1.0"


class Check(NamedTuple):
    """Something that must be small, how small it is, and how small it must be."""

    name: str
    value: float
    limit: float
    shared: bool = False
    """It is about the whole result, not about one of its tables."""

    def sentence(self) -> str:
        """The check as a line under a table: the number beside its limit, and the verdict."""
        verdict = "passed" if self.passed else "FAILED"
        name = self.name[0].upper() + self.name[1:]
        value = f"{self.value:.1e}" if self.value else "0"
        limit = f"{self.limit:.0e}" if self.limit else "0"
        return f"{name}: {value} (limit {limit}): {verdict}"

    @property
    def passed(self) -> bool:
        """Whether the value is within its limit (a value that is not a number is not)."""
        return self.value <= self.limit


class Caution(NamedTuple):
    """A warning: a code for programs, and a sentence for people."""

    code: str
    message: str


Drawer = Callable[[Sequence[Table], int], str]
DRAWERS: dict[str, Drawer] = {}
"""The forms a result can be drawn in (tables and significant digits in, text out).

`equiv.rendering` fills it, so that results can show themselves though they stand below it.
"""


@dataclass(frozen=True)
class Result:
    """The root of all results. Numbers are in SI units; phasors are rms.

    `network` is the network as it was analysed, `checks` what proves the result, `cautions` what
    the reader must know before relying on it, `exit_status` what a process ends with.
    """

    network: Network
    checks: tuple[Check, ...] = ()
    cautions: tuple[Caution, ...] = ()
    refusal: ExitStatus = ExitStatus.DONE
    """4 or 5 where a part of what was asked does not exist; the rest is given all the same."""

    command: ClassVar[str] = ""

    @property
    def exit_status(self) -> ExitStatus:
        """The status of the worst thing in the result."""
        if self.refusal:
            return self.refusal
        passed = all(check.passed for check in self.checks)
        return ExitStatus.DONE if passed else ExitStatus.CHECK_FAILED

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """The result as tables to be read; `digits` is for the numbers in their sentences."""
        raise NotImplementedError

    def records(self, digits: int = 5) -> tuple[Table, ...]:
        """The tables for CSV: those to be read, where a result has no others for programs."""
        return self.tables(digits)

    def plain_text(self) -> str | None:
        """The result as text for a file, where it is that rather than tables."""
        return None

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        raise NotImplementedError

    def to_dict(self) -> dict[str, Any]:
        """The JSON object: plain dicts, lists, strings and numbers."""
        return {
            "schema": f"equiv/{self.command}/1",
            "program": PROGRAM,
            "title": self.network.title,
            "file": {"name": self.network.origin.name, "sha256": self.network.origin.sha256},
            "phasors": "rms",
            "result": self.data(),
            "checks": [
                {"name": c.name, "value": finite(c.value), "limit": c.limit, "passed": c.passed}
                for c in self.checks
            ],
            "warnings": [{"code": w.code, "message": w.message} for w in self.cautions],
        }

    def render(self, form: str = "table", digits: int = 5) -> str:
        """The result's tables as `table`, `csv`, `markdown`, `latex` or `html`."""
        tables = self.records(digits) if form == "csv" else self.tables(digits)
        return DRAWERS[form](tables, digits)

    def to_markdown(self, digits: int = 5) -> str:
        """The result as Markdown."""
        return self.render("markdown", digits)

    def _repr_html_(self) -> str:
        return self.render("html")

    def __str__(self) -> str:
        return self.render("table")


def finite(value: float) -> float | None:
    """A number for JSON, which knows no infinity and no not-a-number."""
    return value if -1e308 < value < 1e308 else None


def pair(value: complex | None) -> dict[str, Any] | None:
    """A complex number for JSON: always both parts; None where it does not exist.

    An exact one has its text too: `60/11`, or both parts where it is complex.
    """
    if value is None or finite(value.real) is None or finite(value.imag) is None:
        return None
    exact = {"exact": value.exact} if is_exact(value) else {}  # type: ignore[attr-defined]
    return {"re": float(value.real) + 0.0, "im": float(value.imag) + 0.0, **exact}
