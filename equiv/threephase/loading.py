"""Files of either sort: networks, and three-phase systems (which say so: `three-phase 50 Hz`)."""

from __future__ import annotations

import re
from collections.abc import Mapping
from pathlib import Path
from typing import cast

from equiv import language
from equiv.errors import Diagnostic, NetworkFileError, UsageError
from equiv.language.files import Text
from equiv.language.loading import file_text, given_text, read_network
from equiv.language.words import comment_start
from equiv.network import Network, Origin
from equiv.threephase.model import OneLine, three_phase_only

WORD = "three-phase"
"""What a three-phase file says."""

_SAYS_SO = re.compile(r"^\s*three-phase(?!\S)", re.MULTILINE)


def load(
    path: str | Path, given: Mapping[str, str] | None = None, frequency: str | None = None
) -> Network:
    """The network of a file; of one that says `three-phase` a `OneLine`, for `equiv.fault`.

    `given` replaces values of the file's parameters, `frequency` its frequency. Raises
    `FileAccessError`, `NetworkFileError` with every mistake in the file, or `UsageError`.
    """
    return _read(*file_text(path), given, frequency)


def parse(
    text: str,
    *,
    name: str | None = None,
    folder: Path | None = None,
    given: Mapping[str, str] | None = None,
    frequency: str | None = None,
) -> Network:
    """The network of a text; of one that says `three-phase` a `OneLine`, for `equiv.fault`.

    `read` statements need the folder that they start from.
    """
    return _read(*given_text(text, name, folder), given, frequency)


def write(network: Network | OneLine) -> str:
    """The canonical text of a network or of a three-phase system.

    Instances of blocks are written out element by element. Raises `UsageError` for one, made in
    code, that has names or texts which the language cannot hold.
    """
    if isinstance(network, OneLine):
        from equiv.threephase.language.writer import write_system

        return write_system(network)
    return language.write(network)


def _hinted(diagnostic: Diagnostic) -> Diagnostic:
    """An error of a network, with a hint where its word is one of three-phase files."""
    from equiv.threephase.kinds import KINDS
    from equiv.threephase.language.statements import STATEMENTS

    if diagnostic.code != "unknown-keyword" or diagnostic.span is None:
        return diagnostic
    at = diagnostic.span.column - 1
    word = diagnostic.span.text[at : at + diagnostic.span.length]
    if word.lower() not in (*KINDS, *STATEMENTS):
        return diagnostic
    says_so = "a three-phase file says so: three-phase 50 Hz"
    return diagnostic._replace(hint="write three-phase" if word.lower() == WORD else says_so)


def _read(
    text: Text,
    path: Path | None,
    origin: Origin,
    given: Mapping[str, str] | None,
    frequency: str | None,
) -> Network:
    """What a text describes."""
    if not says_three_phase(text.text):
        try:
            return read_network(text, path, origin, given, frequency)
        except NetworkFileError as error:
            raise NetworkFileError(tuple(map(_hinted, error.diagnostics))) from None
    from equiv.threephase.language.reader import read_system

    # Typed as what it is for nearly everyone: `fault` and `check` take both.
    return cast("Network", read_system(text, path, given, frequency, origin))


def says_three_phase(text: str) -> bool:
    """Whether a text is that of a three-phase system: a statement of it says so."""
    for match in _SAYS_SO.finditer(text) if "three-phase" in text else ():
        before = text[: match.start()].rstrip("\n").rpartition("\n")[2].rstrip()
        if not before.endswith("\\") or comment_start(before) < len(before):
            return True
    return False


def require_network(found: Network | OneLine) -> Network:
    """The network; `UsageError` where it is a three-phase system."""
    if isinstance(found, OneLine):
        raise UsageError(three_phase_only(found.origin.name))
    return found


def require_system(found: Network | OneLine) -> OneLine:
    """The three-phase system; `UsageError` where it is a network."""
    if isinstance(found, OneLine):
        return found
    message = f"{found.origin.name or 'this text'} does not describe a three-phase system"
    hint = "such a file says so, as in: three-phase 50 Hz; equiv kinds three-phase shows its words"
    raise UsageError(Diagnostic("not-three-phase", message, hint=hint))
