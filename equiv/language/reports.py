"""The mistakes of a text, collected so that all of them are told in one run."""

from __future__ import annotations

from equiv.errors import Diagnostic, Span
from equiv.language.limits import MOST_ERRORS
from equiv.language.mistakes import Mistake
from equiv.language.words import Statement


class Argument(Statement):
    """A statement that was not in a file but given to the function, such as a parameter's value."""

    __slots__ = ()


class Reports:
    """Diagnostics in the order of the text; beyond a number, only how many more there are."""

    def __init__(self) -> None:
        self._found: dict[tuple[str, str, Span], Diagnostic] = {}
        self._more = 0
        self._files: dict[str, int] = {}
        self.of_arguments = False
        """Whether an argument of the function is wrong, rather than a file."""

    def file(self, name: str) -> None:
        """Remember the order in which files are read."""
        self._files.setdefault(name, len(self._files))

    def add(self, mistake: Mistake, statement: Statement) -> None:
        """Report a mistake in a statement (once, though blocks repeat it)."""
        if isinstance(statement, Argument):
            self.of_arguments = True
        if len(self._found) >= MOST_ERRORS:
            self._more += 1
            return
        span = statement.span(mistake.place)
        key = (mistake.code, mistake.message, span)
        if key not in self._found:
            self._found[key] = Diagnostic(
                mistake.code, mistake.message, span, mistake.hint, mistake.related
            )

    def __bool__(self) -> bool:
        return bool(self._found)

    def diagnostics(self) -> tuple[Diagnostic, ...]:
        """All of them, sorted by place."""
        found = sorted(self._found.values(), key=self._place)
        if self._more:
            plural = "error is" if self._more == 1 else "errors are"
            found.append(Diagnostic("too-many-errors", f"{self._more} more {plural} not shown"))
        return tuple(found)

    def _place(self, diagnostic: Diagnostic) -> tuple[int, int, int]:
        span = diagnostic.span
        assert span is not None
        return self._files.get(span.file, -1), span.line, span.column
