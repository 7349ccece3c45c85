"""The quick way through many plain lines: whole columns at a time, at the speed of C.

Lines of two-node elements with one plain number are put in buckets by their first word and
number of words, and a bucket is read by columns. Anything that is not plain is left out, to be
read word by word; what is read here is exactly what that would have given.
"""

from __future__ import annotations

import gc
import re
from collections import defaultdict
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from decimal import Decimal, localcontext
from functools import cache, partial
from itertools import repeat
from operator import mul
from typing import Any, NamedTuple

from equiv.elements import KINDS, Element
from equiv.elements.element import NO_OPTIONS
from equiv.elements.quantity import Quantity
from equiv.language.connections import shape
from equiv.language.drafts import is_single
from equiv.language.limits import MOST_EXPONENT, MOST_NAME
from equiv.language.numerals import EXACT, UNITS

_SMALLEST_BUCKET = 16
_LARGEST_BUCKET = 8_192
_NAME_BYTES = b"0123456789_abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ.:/'\n"
_NUMBER_BYTES = b"0123456789.+-eE"
_BAD_NAME = re.compile(r"[^\w.:/'\n]|\n\W|:\n")
_ATTACHED = re.compile(r"^([-+.0-9]+(?:[eE][-+]?[0-9]+)?)(\D*)$", re.MULTILINE)


class Plain(NamedTuple):
    """How a kind's plain statement is laid out."""

    kind: type[Element]
    marks: tuple[str, ...]
    keywords: frozenset[str]
    scales: dict[str, Decimal]
    """The power of ten of every unit that the value may have."""


class NotPlain(Exception):  # noqa: N818 (the lines are read another way)
    """Something in the bucket must be read word by word."""


@cache
def layout(keyword: str) -> Plain | None:
    """The layout of a kind that can be read by columns."""
    kind = KINDS.get(keyword)
    if kind is None or not is_single(kind) or len(shape(keyword).marks) != 2 or not kind.pairs:
        return None
    (field,) = kind.fields
    (unit,) = field.units
    words = frozenset((field.keyword, *field.aliases)) if field.keyword else frozenset()
    scales = {t: Decimal((0, (1,), power)) for t, (of, power) in UNITS.items() if of == unit != ""}
    return Plain(kind, shape(keyword).marks, frozenset(w for w in words if w), scales)


@contextmanager
def collector_paused() -> Iterator[None]:
    """No search for cyclic garbage while a great many lasting objects are made."""
    running = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if running:
            if gc.get_freeze_count() == 0:
                # Frozen and thawed, objects count as old, and are not searched through at once.
                gc.freeze()
                gc.unfreeze()
            gc.enable()


def read_plain(lines: Sequence[str]) -> list[Element | None]:
    """The elements of those lines that are plain; None for every other line."""
    if max(map(len, lines)) > MOST_NAME:
        # No name and no number of a shorter line can be too long.
        lines = [line if len(line) <= MOST_NAME else "" for line in lines]
    rows = list(map(str.split, lines))
    found: list[Element | None] = [None] * len(rows)
    buckets: defaultdict[tuple[str, int], list[int]] = defaultdict(list)
    for number, row in enumerate(rows):
        if row:
            buckets[row[0], len(row)].append(number)
    with localcontext(EXACT):
        for (keyword, _), numbers in buckets.items():
            plain = layout(keyword)
            if plain is not None:
                for start in range(0, len(numbers), _LARGEST_BUCKET):
                    _bucket(plain, rows, numbers[start : start + _LARGEST_BUCKET], found)
    return found


def _bucket(
    plain: Plain, rows: list[list[str]], numbers: list[int], found: list[Element | None]
) -> None:
    """Read a bucket by columns; where that fails, its halves."""
    try:
        elements = _by_columns(plain, list(zip(*[rows[n] for n in numbers], strict=True)))
    except (NotPlain, KeyError, ArithmeticError):
        if len(numbers) > _SMALLEST_BUCKET:
            half = len(numbers) // 2
            _bucket(plain, rows, numbers[:half], found)
            _bucket(plain, rows, numbers[half:], found)
        return
    for number, element in zip(numbers, elements, strict=True):
        found[number] = element


def _by_columns(plain: Plain, columns: list[tuple[str, ...]]) -> list[Element]:
    """The elements of a bucket, from the columns of its words."""
    rest = columns[1:]
    if len(rest) < 3:
        raise NotPlain
    names = rest.pop(0)
    first, second = _ends(plain, rest)
    if plain.keywords:
        _every(rest.pop(0), plain.keywords)
    senses: Any = repeat(None)
    sensed: tuple[str, ...] = ()
    if plain.kind.senses_what:
        if len(rest) < 3:
            raise NotPlain
        sensed = rest.pop()
        _every(rest.pop(), ("senses",))
        senses, sensed = _quantities(plain.kind.senses_what, sensed)
    values = _numbers(plain, rest)
    _check_names((*names, *first, *second, *sensed))
    records = zip(
        names, zip(first, second, strict=False), values, senses, repeat(()), repeat(NO_OPTIONS)
    )
    return list(map(partial(tuple.__new__, plain.kind), records))


def _every(column: tuple[str, ...], allowed: Sequence[str] | frozenset[str]) -> None:
    if not set(column).issubset(allowed):
        raise NotPlain


def _ends(plain: Plain, rest: list[tuple[str, ...]]) -> tuple[Sequence[str], Sequence[str]]:
    """The columns of the two nodes, without their marks."""
    first = rest.pop(0)
    mark = plain.marks[1]
    if mark == ">" or (mark == "" and rest[0][0] == ">"):
        _every(rest.pop(0), (">",))
    if not rest:
        raise NotPlain
    second = rest.pop(0)
    if mark != "-":
        return first, second
    if {w[0] for w in first} != {"+"} or {w[0] for w in second} != {"-"}:
        raise NotPlain
    return _not_empty([w[1:] for w in first]), _not_empty([w[1:] for w in second])


def _not_empty(column: list[str]) -> list[str]:
    if "" in column:
        raise NotPlain
    return column


def _quantities(what: str, column: tuple[str, ...]) -> tuple[list[Quantity], tuple[str, ...]]:
    """The sensed quantities, and every name in them."""
    if {w[:2] for w in column} != {f"{what}:"}:
        raise NotPlain
    parts = [tuple(w[2:].split(",")) for w in column]
    longest = 2 if what == "V" else 1
    if max(map(len, parts)) > longest:
        raise NotPlain
    names = tuple(_not_empty([name for part in parts for name in part]))
    made = map(partial(tuple.__new__, Quantity), zip(repeat(what), parts, repeat(0)))
    return list(made), names


def _numbers(plain: Plain, rest: list[tuple[str, ...]]) -> list[Decimal]:
    """The values in SI units."""
    if not 1 <= len(rest) <= 2:
        raise NotPlain
    digits: Sequence[str] = rest[0]
    units: Sequence[str] = rest[1] if len(rest) == 2 else ()
    joined = "".join(digits)
    if not _only(joined, _NUMBER_BYTES):
        if units:
            raise NotPlain
        pairs = _ATTACHED.findall("\n".join(digits))
        if len(pairs) != len(digits):
            raise NotPlain
        digits, units = zip(*pairs, strict=True)
        joined = "".join(digits)
    values = map(Decimal, digits)
    if units:
        values = map(mul, values, map(plain.scales.__getitem__, units))
    numbers = list(values)
    exponents = "e" in joined or "E" in joined
    if exponents and max(abs(n.adjusted()) if n else 0 for n in numbers) > MOST_EXPONENT:
        raise NotPlain
    return numbers


def _only(text: str, allowed: bytes) -> bool:
    return text.isascii() and not text.encode().translate(None, allowed)


def _check_names(names: Sequence[str]) -> None:
    """Every name must be one, which a search through all of them at once can tell."""
    joined = "\n".join(("", *names, ""))
    if not _only(joined, _NAME_BYTES):
        if _BAD_NAME.search(joined):
            raise NotPlain
    elif any(f"\n{mark}" in joined for mark in ".:/'" if mark in joined) or (
        ":" in joined and ":\n" in joined
    ):
        raise NotPlain
