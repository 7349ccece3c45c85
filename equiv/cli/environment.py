"""What the process stands in: its streams and what they can show. Made once, then passed on."""

from __future__ import annotations

import os
import sys
from collections.abc import Callable
from dataclasses import dataclass
from typing import TextIO

USUAL_WIDTH = 80
"""Of a terminal that does not tell."""


@dataclass(frozen=True)
class Environment:
    """The streams of a process, and how to write on them."""

    read: Callable[[int], bytes]
    """Reads standard input to its end, or as many bytes as it is told."""
    out: TextIO
    err: TextIO
    width: int | None = None
    """Columns of the terminal; None where standard output is none (a pipe or a file)."""
    encoding: str = "utf-8"
    out_is_terminal: bool = False
    err_is_terminal: bool = False
    colour: bool = False

    def tell(self, words: str) -> None:
        """A message, on standard error; nobody may be there to read it."""
        try:
            self.err.write(words + "\n")
            self.err.flush()
        except OSError:
            silence(self.err)


def of_process() -> Environment:
    """The environment of this process."""
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="backslashreplace", newline="\n")
    return Environment(
        read=lambda most: sys.stdin.buffer.read(most),
        out=sys.stdout,
        err=sys.stderr,
        width=_width(),
        encoding=sys.stdout.encoding or "ascii",
        out_is_terminal=sys.stdout.isatty(),
        err_is_terminal=sys.stderr.isatty(),
        colour=not os.environ.get("NO_COLOR"),
    )


def silence(stream: TextIO) -> None:
    """Nothing more is written to a stream that has failed, not even when the process ends."""
    try:
        nowhere = os.open(os.devnull, os.O_WRONLY)
        os.dup2(nowhere, stream.fileno())
        os.close(nowhere)
    except (OSError, ValueError):
        return


def _width() -> int | None:
    """`COLUMNS` where it is a number, else the columns of the terminal."""
    columns = os.environ.get("COLUMNS", "")
    if columns.isdecimal() and int(columns) > 0:
        return int(columns)
    try:
        return os.get_terminal_size(sys.stdout.fileno()).columns or USUAL_WIDTH
    except (OSError, ValueError):
        return None
