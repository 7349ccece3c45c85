"""What the shell offers: names out of the file on the command line.

A file is often half written while its names are being completed, so what is wrong in it is
left out; and completion never fails or prints, whatever happens.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from contextlib import suppress
from functools import wraps
from pathlib import Path
from typing import TYPE_CHECKING, TypeGuard

import typer

import equiv

if TYPE_CHECKING:
    from equiv.network import Network
    from equiv.threephase.model import OneLine

LARGEST_FILE = 5_000_000
MOST_OFFERED = 500
_TRIES = 4

Completion = Callable[[typer.Context, str], list[str]]


def _offered(names: Callable[[typer.Context, str], Iterable[str]]) -> Completion:
    """The names that go on from what is written; none where anything fails."""

    @wraps(names)
    def completion(ctx: typer.Context, incomplete: str) -> list[str]:
        found: list[str] = []
        with suppress(Exception):
            before = _before_colon(ctx)
            for name in names(ctx, before + incomplete):
                if name.startswith(before + incomplete) and name.isprintable():
                    found.append(name.removeprefix(before))
                if len(found) == MOST_OFFERED:
                    break
        return found

    return completion


def _before_colon(ctx: typer.Context) -> str:
    """`I:` where the shell has split `I:R3` at its colon, as bash does."""
    words: list[str] = ctx.params.get("quantities") or ctx.params.get("what") or []
    return f"{words[-2]}:" if len(words) > 1 and words[-1] == ":" else ""


@_offered
def quantities(ctx: typer.Context, incomplete: str) -> Iterator[str]:
    """Voltages of nodes, node pairs and elements; currents and powers of elements."""
    yield from _quantities(ctx, incomplete)


def _quantities(ctx: typer.Context, incomplete: str) -> Iterator[str]:
    network = _network(ctx)
    if "," in incomplete:
        first = incomplete.rpartition(",")[0]
        yield from (f"{first},{node}" for node in _nodes(network))
        return
    yield from (f"V:{node}" for node in network.nodes)
    for what in "VIP":
        yield from (f"{what}:{e.name}" for e in network.elements.values() if e.pairs)


@_offered
def swept(ctx: typer.Context, incomplete: str) -> Iterator[str]:
    """Ports and pairs of nodes, and quantities."""
    yield from _network(ctx).ports
    yield from _quantities(ctx, incomplete)


@_offered
def parameters(ctx: typer.Context, incomplete: str) -> Iterator[str]:
    """The frequency, and the file's parameters."""
    yield "frequency"
    yield from _network(ctx).given


@_offered
def sources(ctx: typer.Context, incomplete: str) -> Iterator[str]:
    """Independent sources, and groups of them."""
    network: Network | OneLine = _network(ctx)
    if _is_one_line(network):
        driving = [item for item in network.items.values() if getattr(item, "drives", False)]
        yield from (item.name for item in driving)
        yield from dict.fromkeys(item.group for item in driving if item.group)
        return
    yield from (source.name for source in network.sources)
    yield from network.groups


@_offered
def ports(ctx: typer.Context, incomplete: str) -> Iterator[str]:
    """Declared ports, and pairs of nodes."""
    network = _network(ctx)
    if "," not in incomplete:
        yield from network.ports
    first, comma, _ = incomplete.rpartition(",")
    for node in _nodes(network):
        yield f"{first},{node}" if comma else f"{node},"


@_offered
def buses(ctx: typer.Context, incomplete: str) -> Iterable[str]:
    """The buses of a three-phase file."""
    return _system(ctx).buses


@_offered
def branches(ctx: typer.Context, incomplete: str) -> Iterator[str]:
    """Lines, reactors and transformers of a three-phase file, and the same at either end."""
    for name, item in _system(ctx).items.items():
        ends = [getattr(item, end).name for end in ("first", "second") if hasattr(item, end)]
        yield from (name, *(f"{name}@{bus}" for bus in ends)) if ends else ()


@_offered
def kinds(ctx: typer.Context, incomplete: str) -> Iterable[str]:
    """The kinds of element, and of item in a three-phase system."""
    from equiv.elements import KINDS
    from equiv.threephase.kinds import KINDS as OF_SYSTEMS
    from equiv.threephase.kinds_page import WORD

    return sorted({*KINDS, *OF_SYSTEMS, WORD})


@_offered
def samples(ctx: typer.Context, incomplete: str) -> Iterable[str]:
    """The samples."""
    from equiv.analyses.sample import samples as files

    return files()


def _nodes(network: Network) -> tuple[str, ...]:
    return (*network.nodes, network.ground)


def _is_one_line(network: Network | OneLine) -> TypeGuard[OneLine]:
    from equiv.threephase.model import OneLine

    return isinstance(network, OneLine)


def _system(ctx: typer.Context) -> OneLine:
    """The three-phase system of the file on the command line."""
    system: Network | OneLine = _network(ctx)
    if not _is_one_line(system):
        raise ValueError("not a three-phase file")
    return system


def _network(ctx: typer.Context) -> Network:
    """The network of the file on the command line, without the lines that are wrong."""
    file = Path(ctx.params["file"])
    if file.stat().st_size > LARGEST_FILE or not file.is_file():
        raise ValueError("too large to be read between two keystrokes")
    with suppress(equiv.NetworkFileError):
        return equiv.load(file)
    lines = file.read_text("utf-8-sig").splitlines()
    for _ in range(_TRIES):
        try:
            return equiv.parse("\n".join(lines), name=str(file))
        except equiv.NetworkFileError as error:
            for diagnostic in error.diagnostics:
                if diagnostic.span is not None:
                    lines[diagnostic.span.line - 1] = ""
    raise ValueError("too much is wrong")
