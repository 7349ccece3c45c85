"""Why a fault current is zero, in words."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Mapping
from itertools import islice

from equiv.equations.words import listed
from equiv.threephase.cases import Sequence
from equiv.threephase.sequence.connection import EARTH_FAULTS
from equiv.threephase.sequence.findings import BY_DATA, no_path_at

MOST_REASONS = 20


def why(
    reasons: Mapping[str, str], bus: str, kind: str, voltage: complex, z: Sequence
) -> tuple[str, ...]:
    """Why a current is zero, from the voltage before the fault and the impedances.

    `reasons` says of the buses without a way to earth why there is none.
    """
    if not voltage or not math.isfinite(abs(z.positive)):
        return (_no_source_at(bus),)
    if kind in EARTH_FAULTS and not math.isfinite(abs(z.zero)):
        return (reasons.get(bus, f"{no_path_at(bus)}nothing earths its network{BY_DATA}"),)
    return ()


def gathered(reasons: Iterable[tuple[str, str]]) -> Iterator[str]:
    """The reasons of many buses, each once with its buses: `no source feeds A, B and C`."""
    where: dict[tuple[bool, str], list[str]] = {}
    for bus, words in reasons:
        dead = words == _no_source_at(bus)
        where.setdefault((dead, "" if dead else words.removeprefix(no_path_at(bus))), []).append(
            bus
        )
    for (dead, rest), buses in islice(where.items(), MOST_REASONS):
        named = listed(list(dict.fromkeys(buses)))
        yield _no_source_at(named) if dead else f"{no_path_at(named)}{rest}"
    if len(where) > MOST_REASONS:
        yield f"{len(where) - MOST_REASONS} more reasons: --as csv and --json have them all"


def _no_source_at(place: str) -> str:
    return f"no source feeds {place}"
