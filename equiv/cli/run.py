"""One run of a command: where it reads its network, and whom it tells of long work."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

import equiv
from equiv.cli.environment import Environment
from equiv.errors import Diagnostic, FileAccessError

if TYPE_CHECKING:
    from equiv.network import Network

STANDARD_INPUT = "-"


@dataclass(frozen=True)
class Run:
    """What a command needs besides its own words."""

    environment: Environment
    given: Mapping[str, str]
    frequency: str | None
    progress: Callable[[str, int, int], None]
    force: bool = False

    def network(self, file: str) -> Network:
        """The network of a file, or of standard input for `-`."""
        if file != STANDARD_INPUT:
            return equiv.load(file, given=self.given, frequency=self.frequency)
        text = self._standard_input()
        return equiv.parse(text, name="-", given=self.given, frequency=self.frequency)

    def text(self, file: str) -> tuple[str, str]:
        """The text of a file that is no network (or of standard input), and what it is called."""
        if file == STANDARD_INPUT:
            return self._standard_input(), "-"
        from equiv.language.files import decoded, read_bytes

        path = Path(file)
        return decoded(read_bytes(path), path.name), path.name

    def require_writable(self, file: str) -> None:
        """Complain of a file that is to be written beside the result, before the work."""
        from equiv.cli.output import require_writable

        require_writable(Path(file), self.force)

    def write(self, text: str | bytes, file: str) -> None:
        """Write a file beside the result, whole or not at all."""
        from equiv.cli.output import write_whole

        write_whole(text, Path(file), self.force)

    def _standard_input(self) -> str:
        # The language is imported only where there is a network to read.
        from equiv.language.files import decoded
        from equiv.language.limits import MOST_BYTES

        try:
            data = self.environment.read(MOST_BYTES + 1)
        except OSError as error:
            raise _unreadable(str(error.strerror)) from None
        if len(data) > MOST_BYTES:
            raise _unreadable(f"it has more than {MOST_BYTES} bytes")
        return decoded(data, "standard input")


def _unreadable(reason: str) -> FileAccessError:
    return FileAccessError(Diagnostic("cannot-read", f"cannot read standard input: {reason}"))
