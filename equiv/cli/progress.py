"""A progress bar on standard error, for work that takes over a second on a terminal."""

from __future__ import annotations

import time
from contextlib import ExitStack
from types import TracebackType
from typing import TYPE_CHECKING, Self

from equiv.cli.environment import Environment
from equiv.errors import printable

if TYPE_CHECKING:
    from rich.progress import Progress, TaskID

SECONDS_BEFORE = 1.0


class ProgressBar:
    """Told of work, it shows a bar once the work has taken a second; called as `Progress`."""

    def __init__(self, environment: Environment, quiet: bool) -> None:
        self._environment = environment
        self._silent = quiet or not environment.err_is_terminal
        self._start = time.monotonic()
        self._stack = ExitStack()
        self._bar: Progress | None = None
        self._task: TaskID | None = None

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        error: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        self._stack.close()

    def __call__(self, work: str, done: int, total: int) -> None:
        """The work in words, how much of it is done, and how much there is."""
        if self._silent or time.monotonic() - self._start < SECONDS_BEFORE:
            return
        if self._bar is None:
            self._bar = self._stack.enter_context(self._shown())
            self._task = self._bar.add_task("")
        assert self._task is not None
        self._bar.update(self._task, description=printable(work), completed=done, total=total)

    def _shown(self) -> Progress:
        # rich takes longer to import than most runs take altogether.
        from rich.console import Console
        from rich.progress import BarColumn, Progress, TextColumn

        console = Console(
            file=self._environment.err, no_color=not self._environment.colour, highlight=False
        )
        words = TextColumn("{task.description}", markup=False)
        count = TextColumn("{task.completed} of {task.total}", markup=False)
        return Progress(words, BarColumn(), count, console=console, transient=True)
