"""The options of formulas, each declared once; `--symbolic` may stand with names or without."""

from __future__ import annotations

import os
import re
from collections.abc import Iterator, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

if TYPE_CHECKING:
    from equiv.network import Network

Symbolic = Annotated[
    str | None,
    typer.Option(
        "--symbolic",
        metavar="[NAME,...]",
        help="Formulas in all elements' names, or in these; the rest are exact numbers.",
    ),
]
Expand = Annotated[bool, typer.Option("--expand", help="Formulas written out, however long.")]
FailsFor = Annotated[
    str | None,
    typer.Option(metavar="NAME", help="The value of it at which there is no solution."),
]
Derivative = Annotated[
    str | None, typer.Option(metavar="NAME", help="Derivatives with respect to it.")
]

_QUANTITY = re.compile(r"[VIP]\d*:")


def with_values(words: Sequence[str]) -> Iterator[str]:
    """The words of a command line with an empty value behind a `--symbolic` that has none.

    It has none at the end, and before an option, a quantity (`I:R3`) or a file.
    """
    waiting = False
    rest = iter(words)
    for word in rest:
        if waiting:
            waiting = False
            if not _is_no_name(word):
                yield f"--symbolic={word}"
                continue
            yield "--symbolic="
        if word == "--":
            yield word
            yield from rest
            return
        if word == "--symbolic":
            waiting = True
            continue
        yield word
    if waiting:
        yield "--symbolic="


def _is_no_name(word: str) -> bool:
    if word.startswith("-") or _QUANTITY.match(word):
        return True
    return word.endswith(".equiv") or os.path.sep in word or Path(word).is_file()


def names_and_ports(
    network: Network, symbolic: str | None, ports: Sequence[str] | None
) -> tuple[str | None, list[str]]:
    """What stands behind `--symbolic` as names; a port that stands there as the first port."""
    found = list(ports or ())
    if symbolic is None:
        return None, found
    names = symbolic.split(",")
    if symbolic and not all(n in network.elements or n in network.given for n in names):
        nodes = len(names) == 2 and all(n in network.node_set for n in names)
        if symbolic in network.ports or nodes:
            return "", [symbolic, *found]
    return symbolic, found
