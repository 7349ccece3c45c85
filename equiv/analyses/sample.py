"""Samples to start from."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import Any, ClassVar

from equiv.analyses.result import Result
from equiv.analyses.tables import Column, Table
from equiv.errors import Diagnostic, UsageError, nearest
from equiv.network import Network


@dataclass(frozen=True)
class Samples(Result):
    """The samples, or the text of one."""

    command: ClassVar[str] = "sample"

    name: str | None = None

    def plain_text(self) -> str | None:
        """The text of the sample."""
        return None if self.name is None else samples()[self.name].read_text(encoding="utf-8")

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """The list of samples, or the text of one."""
        if self.name is not None:
            return (Table(self.name, text=self.plain_text(), name="sample"),)
        rows = Table.rows_of([(name, title(path)) for name, path in samples().items()])
        note = "`equiv sample NAME --output NAME.equiv` writes one to start from."
        columns = (Column("sample", key=True), Column("what it is about"))
        return (Table("Samples", (), columns, rows, (note,), name="samples"),)

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        listed = [{"name": name, "title": title(path)} for name, path in samples().items()]
        return {"samples": listed, "name": self.name, "text": self.plain_text()}


def sample(name: str | None = None) -> Samples:
    """The list of samples, or one of them to start from.

    Errors: UsageError where there is no such sample.
    """
    if name is not None and name not in samples():
        raise UsageError(
            Diagnostic(
                "unknown-sample", f"there is no sample called {name}", hint=nearest(name, samples())
            )
        )
    return Samples(Network({}), name=name)


def samples() -> dict[str, Path]:
    """The samples' files by name, in the order of their names."""
    package = Path(__file__).resolve().parent.parent
    # installed they are in the package; in a checkout they stand beside it
    for folder in (package / "samples", package.parent / "samples"):
        if folder.is_dir():
            return {path.stem: path for path in sorted(folder.glob("*.equiv"))}
    return {}


def title(path: Path) -> str:
    """The text of a sample's title statement."""
    for line in path.read_text(encoding="utf-8").splitlines():
        if line.startswith("title "):
            return line.removeprefix("title ").strip()
    return ""
