"""A result made by hand, and a process that is not one, for the tests of the command line."""

import io
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any, ClassVar

from equiv.analyses.result import Check, Result
from equiv.analyses.tables import Column, Row, Table
from equiv.cli.environment import Environment
from equiv.network import Network


@dataclass(frozen=True)
class Made(Result):
    """One table, or a text."""

    command: ClassVar[str] = "made"

    text: str | None = None

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        columns = (Column("node", key=True), Column("voltage", "V"))
        rows = (Row(("a", 12.3456789)), Row(("<b>", 2 + 0.5j)))
        return (Table("Made", (), columns, rows, text=self.text),)

    def plain_text(self) -> str | None:
        return self.text

    def data(self) -> dict[str, Any]:
        return {"nodes": {"a": 12.3456789}}


NETWORK = Network({}, title="A title \x1b[2J")
RESULT = Made(NETWORK)
FAILED = Made(NETWORK, checks=(Check("closure", 1.0, 1e-9),))


class Terminal(io.StringIO):
    """A stream that says it is a terminal."""

    def isatty(self) -> bool:
        return True


class Process:
    """An environment whose streams can be looked at."""

    def __init__(self, stdin: bytes = b"", **differences: Any) -> None:
        self.out = differences.pop("out", None) or io.StringIO()
        self.err = differences.pop("err", None) or io.StringIO()
        self.environment = Environment(
            read=lambda most: stdin[:most], out=self.out, err=self.err, **differences
        )

    @property
    def printed(self) -> str:
        return str(self.out.getvalue())

    @property
    def told(self) -> str:
        return str(self.err.getvalue())


class Library:
    """What the commands have called, and what they are given back."""

    def __init__(self) -> None:
        self.calls: dict[str, tuple[tuple[Any, ...], dict[str, Any]]] = {}
        self.answer: Any = RESULT

    def function(self, name: str, answer: Any = None) -> Callable[..., Any]:
        def called(*words: Any, **options: Any) -> Any:
            self.calls[name] = (words, options)
            given = self.answer if answer is None else answer
            if isinstance(given, BaseException):
                raise given
            return given

        return called
