"""From a file or a text to a network."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from decimal import localcontext
from functools import partial
from pathlib import Path

from equiv.language.arguments import arguments
from equiv.language.assembly import assembled
from equiv.language.bulk import collector_paused
from equiv.language.files import Text, decoded, digest, read_bytes
from equiv.language.numerals import EXACT
from equiv.language.reader import FEWEST_IN_BULK, Reader
from equiv.network import Network, Origin


def load(
    path: str | Path, given: Mapping[str, str] | None = None, frequency: str | None = None
) -> Network:
    """The network of a file.

    `given` replaces values of the file's parameters, `frequency` its frequency. Raises
    `FileAccessError`, `NetworkFileError` with every mistake in the file, or `UsageError`.
    """
    return read_network(*file_text(path), given, frequency)


def parse(
    text: str,
    *,
    name: str | None = None,
    folder: Path | None = None,
    given: Mapping[str, str] | None = None,
    frequency: str | None = None,
) -> Network:
    """The network of a text; `read` statements need the folder that they start from."""
    return read_network(*given_text(text, name, folder), given, frequency)


def file_text(path: str | Path) -> tuple[Text, Path, Origin]:
    """The text of a file, where it is, and what it is known by."""
    path = Path(path)
    data = read_bytes(path)
    return Text(path.name, decoded(data, path.name)), path, Origin(path.name, digest(data))


def given_text(
    text: str, name: str | None, folder: Path | None
) -> tuple[Text, Path | None, Origin]:
    """A text, as a file of that name in the folder would be."""
    origin = Origin(name, digest(text.encode("utf-8", "surrogatepass")))
    return Text(name or "text", text), folder / "text" if folder is not None else None, origin


def read_network(
    text: Text,
    path: Path | None,
    origin: Origin,
    given: Mapping[str, str] | None,
    frequency: str | None,
) -> Network:
    """The network of a text, with the means to read it again."""
    again = partial(_again, text.name, text.text, path, origin, given or {}, frequency)
    return replace(read_text(text, path, given, frequency), origin=origin, again=again)


def _again(
    name: str,
    text: str,
    path: Path | None,
    origin: Origin,
    given: Mapping[str, str],
    frequency: str | None,
    values: Mapping[str, str],
) -> Network:
    return read_network(Text(name, text), path, origin, {**given, **values}, frequency)


def read_text(
    text: Text,
    path: Path | None = None,
    given: Mapping[str, str] | None = None,
    frequency: str | None = None,
    in_bulk_from: int = FEWEST_IN_BULK,
) -> Network:
    """The network of a text; `path` is where it is, if it may read other files."""
    with localcontext(EXACT), collector_paused():
        values, override = arguments(given or {}, frequency)
        if path is None:
            reader = Reader(values, None, in_bulk_from)
            reader.read(text)
        else:
            path = path.resolve()
            reader = Reader(values, path.parent, in_bulk_from)
            reader.read(text, path)
        return assembled(reader, override)
