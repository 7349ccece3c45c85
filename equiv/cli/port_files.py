"""What `port` needs besides the library: ranges of frequencies, and the Touchstone file."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any, NamedTuple

from equiv.cli.run import Run
from equiv.errors import Diagnostic, UsageError

if TYPE_CHECKING:
    from equiv.analyses.port import PortEquivalent

SOURCES = ".sources.json"
"""Behind the name of a Touchstone file: the file of its source vector."""


def frequencies(
    at: Sequence[str], first: str | None, last: str | None, points: int, log: bool
) -> list[Any]:
    """The frequencies that options name, one by one and as a range."""
    if (first is None) != (last is None):
        hint = "for example: --from 1MHz --to 9MHz --points 5"
        raise UsageError(Diagnostic("half-a-range", "--from and --to go together", hint=hint))
    if first is None or last is None:
        return list(at)
    from equiv.analyses.ports.frequencies import spread

    return [*at, *spread(first, last, points, log)]


class TouchstoneFiles(NamedTuple):
    """The Touchstone file that is asked for, if one is, and the one of its sources."""

    run: Run
    file: str | None

    def write(self, result: PortEquivalent) -> None:
        """Write both."""
        if self.file is None:
            return
        from equiv.language.touchstone import ports_of
        from equiv.rendering import json

        ports, told = len(result.first.ports), ports_of(self.file)
        if told not in (None, ports):
            raise UsageError(
                Diagnostic(
                    "wrong-ports",
                    f"the name {self.file} tells {told} ports; there are {ports}",
                    hint=f"a Touchstone file's name ends in .s{ports}p",
                )
            )
        text, sources = result.touchstone(), json.draw(result.touchstone_sources())
        self.run.write(text, self.file)
        self.run.write(sources, self.file + SOURCES)


def of(run: Run, file: str | None) -> TouchstoneFiles:
    """The files of a run; complains before the work where one of them cannot be written."""
    if file is not None:
        run.require_writable(file)
        run.require_writable(file + SOURCES)
    return TouchstoneFiles(run, file)
