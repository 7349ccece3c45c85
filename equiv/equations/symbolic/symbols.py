"""Symbols: what they are called in formulas, what they stand for, what numbers they have."""

from __future__ import annotations

import re
import unicodedata
from dataclasses import dataclass, field
from decimal import Decimal
from fractions import Fraction
from keyword import iskeyword
from typing import Any, NamedTuple

from equiv.elements import Element
from equiv.units import Formula, Rectangular, Rounded, Symbol, Value, as_number

_PLAIN = re.compile(r"[A-Za-z_][A-Za-z0-9_]*")
RESERVED = frozenset({"s", "D", "Nv", "Nz", "I", "pi"})
"""Names that mean something else in a formula."""
_PLAIN_QUANTITIES = {"resistance", "conductance", "inductance", "capacitance", "impedance",
                     "admittance", "voltage", "current", "gain", "gyration resistance"}  # fmt: skip


class Named(NamedTuple):
    """A symbol: its name in formulas, what it stands for in words, its unit and its number."""

    name: str
    meaning: str
    unit: str
    number: Fraction | complex | None
    element: str
    """The element (or parameter) that it is a value of."""
    part: str = ""
    """Which value of the element it is, where it has several."""
    controlled: bool = False
    """Whether it is the gain of a controlled source."""
    source: bool = False
    """Whether it is the value of an independent source."""

    @property
    def plain(self) -> bool:
        """Whether the name says it all: it is the element's own, and its only value."""
        if self.meaning == f"parameter {self.name}":
            return True
        quantity = self.meaning.split(" of ")[0]
        return self.name == self.element and not self.part and quantity in _PLAIN_QUANTITIES


@dataclass
class Symbols:
    """The symbols of a network in the order of its elements."""

    listed: list[Named] = field(default_factory=list)
    kept: list[str] = field(default_factory=list)
    """Elements that are symbols although numbers were wanted: theirs are not rational."""
    _taken: set[str] = field(default_factory=set)

    def add(self, element: Element, part: str, meaning: str, unit: str, number: Any) -> int:
        """One symbol more; its number."""
        name = self.new_name(f"{element.name}_{part}" if part else element.name)
        controlled, source = element.role == "controlled", element.role == "source"
        self.listed.append(
            Named(name, meaning, unit, number, element.name, part, controlled, source)
        )
        return len(self.listed) - 1

    def add_parameter(self, name: str, unit: str, number: Any) -> int:
        """A symbol for a parameter of the file; its number."""
        found = self.new_name(name)
        self.listed.append(Named(found, f"parameter {name}", unit, number, name))
        return len(self.listed) - 1

    def new_name(self, text: str) -> str:
        """A name that is ordinary in an expression, and not taken."""
        name = text if _PLAIN.fullmatch(text) else _ordinary(text)
        first, number = name, 1
        while name in self._taken or name in RESERVED or iskeyword(name):
            number += 1
            name = f"{first}_{number}"
        self._taken.add(name)
        return name

    def share_names(self, other: Symbols) -> None:
        """Take no name from now on that is taken elsewhere."""
        other._taken |= self._taken
        self._taken = other._taken

    def find(self, name: str) -> int | None:
        """The number of the symbol of that name."""
        return next((i for i, n in enumerate(self.listed) if n.name == name), None)

    def of_element(self, name: str) -> int | None:
        """The number of the first symbol that an element has."""
        return next((i for i, n in enumerate(self.listed) if n.element == name), None)


def _letter(sign: str) -> str:
    """A Greek letter by its name; `_` for what no expression has in a name."""
    if sign.isascii():
        return sign if sign.isalnum() else "_"
    words = unicodedata.name(sign, "").split()
    return words[-1].lower() if words[:1] == ["GREEK"] and words[-1].isalpha() else "_"


def _ordinary(text: str) -> str:
    letters = "".join(map(_letter, text))
    name = letters if re.search("[A-Za-z0-9]", letters) else "x"
    return name if _PLAIN.fullmatch(name) else f"x{name}"


def exact_number(value: Value | Any) -> Fraction | None:
    """The rational number that a value is; None where it is complex, irrational or no number."""
    if isinstance(value, Formula):
        value = value.value
    if isinstance(value, Rounded):
        return None
    if isinstance(value, Rectangular) and value.im == 0:
        value = value.re
    return Fraction(value) if isinstance(value, Decimal | Fraction | int) else None


def nearest_number(value: Value) -> Fraction | complex | None:
    """The exact number, else the nearest complex one; None for `?`."""
    if isinstance(value, Symbol):
        return None
    exact = exact_number(value)
    return exact if exact is not None else complex(as_number(value))
