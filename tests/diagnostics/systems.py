"""How each error code of three-phase files is brought about: by a file of its name, or by a call."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import replace
from pathlib import Path

from diagnostics.cases import said

from equiv.threephase.loading import load, parse, require_network, require_system, write
from equiv.threephase.model import Bus, OneLine

CASES = Path(__file__).parent / "systems"
SYSTEM = "three-phase 50 Hz\nbus A 11 kV\ninfeed U A level 100 MVA\n"

SMALLER_LIMITS: Mapping[str, tuple[str, int]] = {"too-many-elements": ("reader.MOST_ELEMENTS", 2)}
"""Limits that are lowered for a case, so that its file can be short."""


def _unwritable() -> object:
    return write(replace(require_system(parse(SYSTEM)), buses={"A B": Bus("A B", 11e3)}))


def _taken_for_a_network() -> object:
    system = parse(SYSTEM, name="station.equiv")
    assert isinstance(system, OneLine)
    return system.elements


CALLS: Mapping[str, list[Callable[[], object]]] = {
    "cannot-write": [_unwritable],
    "fixed-frequency": [lambda: parse(SYSTEM, frequency="60 Hz")],
    "three-phase": [lambda: require_network(parse(SYSTEM)), _taken_for_a_network],
    "not-three-phase": [
        lambda: load(CASES / "not-three-phase.equiv"),
        lambda: require_system(parse("resistor R1 a gnd 5 ohm", name="divider.equiv")),
    ],
    "unknown-keyword": [
        lambda: load(CASES / "unknown-keyword.equiv"),
        lambda: parse("Three-phase 50 Hz\nbus A 11 kV\ninfeed U A level 9 MVA", name="text"),
    ],
    "unknown-given": [lambda: parse(SYSTEM, given={"tial": "6 ohm"})],
}
"""Calls that are wrong in themselves."""


def names() -> list[str]:
    """Every case."""
    return sorted({*(path.stem for path in CASES.glob("*.equiv")), *CALLS})


def message(code: str) -> str:
    """Everything that is said about a case."""
    calls = CALLS.get(code) or [lambda: load(CASES / f"{code}.equiv")]
    return "\n\n".join(map(said, calls)) + "\n"
