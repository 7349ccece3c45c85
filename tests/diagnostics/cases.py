"""How each error code is brought about: by a file of its name, or by a call."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from decimal import Decimal
from pathlib import Path

from equiv.elements import KINDS
from equiv.errors import EquivError
from equiv.language import Builder, load, parse, write
from equiv.language.loads import load_curve, read_loads
from equiv.network import Network

CASES = Path(__file__).parent / "cases"

SMALLER_LIMITS: Mapping[str, tuple[str, int]] = {
    "expression-too-long": ("expressions.MOST_EXPRESSION", 100),
    "file-too-large": ("files.MOST_BYTES", 100),
    "line-too-long": ("files.MOST_LINE", 200),
    "name-too-long": ("names.MOST_NAME", 50),
    "statement-too-long": ("reader.MOST_LINE", 90),
    "text-too-long": ("words.MOST_TEXT", 50),
    "too-many-digits": ("numerals.MOST_DIGITS", 50),
    "too-many-elements": ("blocks.MOST_ELEMENTS", 100),
    "too-many-errors": ("reports.MOST_ERRORS", 3),
    "too-many-files": ("reader.MOST_FILES", 2),
}
"""Limits that are lowered for a case, so that its file can be short."""


def _network(name: str = "R1", value: Decimal = Decimal(1), title: str = "") -> Network:
    resistor = KINDS["resistor"](name, ("a", "gnd"), value)
    return Network({name: resistor}, title=title)


CALLS: Mapping[str, list[Callable[[], object]]] = {
    "bad-power-factor": [
        lambda: read_loads("power 50 W pf 1.2 lag"),
        lambda: read_loads("power 50 W pf 0 lead"),
    ],
    "missing-column": [
        lambda: load_curve("voltage [V]\n1\n2\n", "curve.csv"),
        lambda: load_curve("voltage [V],± current [A]\n1,2\n", "curve.csv"),
    ],
    "no-number": [lambda: read_loads("8 ohm ?")],
    "not-a-load": [lambda: read_loads("8 ohm shrt"), lambda: read_loads("8 ohm lamp")],
    "twice": [lambda: load_curve("voltage [V],voltage [mV],current [A]\n", "curve.csv")],
    "wrong-cells": [lambda: load_curve("voltage [V],current [A]\n1,2\n3\n4,5,6\n", "curve.csv")],
    "bad-text": [lambda: Builder(title="a\nvoltage V1 +a -gnd 1 V")],
    "bad-value": [
        lambda: Builder().resistor("R1", "a", "gnd", float("nan")),
        lambda: Builder().resistor("R1", "a", "gnd", "5 ohm # comment"),
        lambda: Builder().resistor("R1", "a", "gnd", "5\nend"),
        lambda: Builder().resistor("R1", "a", "gnd", True),
        lambda: Builder().resistor("R1", "a", "gnd", 5, tolerance="1% label"),
    ],
    "cannot-write": [
        lambda: write(_network(name="R 1")),
        lambda: write(_network(value=Decimal("NaN"))),
        lambda: write(_network(title="a\nb")),
    ],
    "file-too-large": [lambda: load(CASES / "name-taken.equiv")],
    "no-folder": [lambda: parse('read "parts/empty.equiv"')],
    "unknown-given": [
        lambda: parse("given tail = 5 ohm", given={"tial": "6 ohm"}),
        lambda: parse("", given={"x": "6 ohm"}),
    ],
    "wrong-arguments": [
        lambda: Builder().resistor("R1", "a"),
        lambda: Builder().resistor("R1", "a", "gnd", 5, 6),
        lambda: Builder().resistor("R1", "a", "gnd", 5, colour="red"),
    ],
}
"""Calls that are wrong in themselves."""


def names() -> list[str]:
    """Every case."""
    return sorted({*(path.stem for path in CASES.glob("*.equiv")), *CALLS})


def message(code: str) -> str:
    """Everything that is said about a case."""
    calls = CALLS.get(code) or [lambda: load(CASES / f"{code}.equiv")]
    return "\n\n".join(map(said, calls)) + "\n"


def said(call: Callable[[], object]) -> str:
    """What a call complains of."""
    try:
        call()
    except EquivError as error:
        return f"{type(error).__name__}\n{error}"
    return "nothing was wrong"
