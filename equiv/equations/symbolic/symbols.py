"""Which values of a network are symbols, what they are called in formulas, what numbers they have."""

from __future__ import annotations

import cmath
import re
import unicodedata
from collections.abc import Collection, Mapping
from dataclasses import dataclass, field, replace
from decimal import Decimal
from fractions import Fraction
from keyword import iskeyword
from math import isqrt
from typing import Any, NamedTuple

from equiv.elements import Element
from equiv.elements.element import Parameters
from equiv.equations.symbolic.amount import Amount
from equiv.network import Network
from equiv.units import Formula, Rectangular, Rounded, Symbol, Value, as_number

_PLAIN = re.compile(r"[A-Za-z_][A-Za-z0-9_]*")
RESERVED = frozenset({"s", "D", "Nv", "Nz", "I", "pi"})
"""Names that mean something else in a formula."""


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


class Symbolised(NamedTuple):
    """A network whose values are amounts of symbols and exact numbers, its symbols, its sources."""

    network: Network
    symbols: Symbols
    sources: tuple[Amount, ...]
    """The value of each independent source."""


class Multiple(NamedTuple):
    """The value of an element as a number times powers of the file's parameters."""

    number: Fraction
    powers: tuple[tuple[str, int], ...]


class Shared(NamedTuple):
    """Parameters of the file that are symbols, and the elements whose values are made of them."""

    parameters: Mapping[str, tuple[str, Fraction | complex | None]]
    """The unit and the number of each."""
    elements: Mapping[str, Multiple]


NONE_SHARED = Shared({}, {})


def symbolised(
    network: Network, chosen: Collection[str] | None = None, shared: Shared = NONE_SHARED
) -> Symbolised:
    """Symbols for the chosen elements (all, if none are given), and for those valued `?`.

    A coupling's symbol is its mutual inductance (H), so that formulas have no square roots; a
    transformer's is its ratio n1/n2. Values that are complex or not rational stay symbols.
    """
    symbols = Symbols()
    parameters = {name: symbols.add_parameter(name, *of) for name, of in shared.parameters.items()}
    made: dict[str, Element] = {}
    sources: list[Amount] = []
    for element in network.elements.values():
        multiple = shared.elements.get(element.name)
        if multiple is not None:
            powers = {parameters[name]: power for name, power in multiple.powers}
            value: Any = Amount.of(multiple.number, powers)
        else:
            wanted = chosen is None or element.name in chosen
            value = _Maker(network, symbols, element, wanted).value()
        if element.role == "source":
            sources.append(value)
        elif value is not element.value:
            made[element.name] = element._replace(value=value)
    bare = replace(network, again=None)
    return Symbolised(bare.replacing(made), symbols, tuple(sources))


class _Maker:
    """The values of one element, as amounts."""

    def __init__(self, network: Network, symbols: Symbols, element: Element, wanted: bool) -> None:
        self.network, self.symbols, self.element = network, symbols, element
        self.wanted = wanted

    def value(self) -> Any:
        """What stands in place of the element's value."""
        element = self.element
        if element.value is None or element.table is not None:
            return element.value
        if isinstance(element.value, Parameters):
            return Parameters(tuple(self._field(*item) for item in element.value.items))
        return self._one(element.value, "", element.fields[0].units[0])

    def _field(self, name: str, values: tuple[Any, ...]) -> tuple[str, tuple[Any, ...]]:
        kind = self.element.kind
        if kind == "transformer":
            ratio = Fraction(values[0]) / Fraction(values[1])
            return name, (self._one(ratio, "", ""), 1)
        if kind == "coupling":
            return "M", (self._mutual(name, values[0]),)
        units = next(f.units for f in self.element.fields if f.name == name)
        if len(values) == 1:
            return name, (self._one(values[0], name, units[0]),)
        places = ("11", "12", "21", "22") if name != "abcd" else tuple("abcd")
        prefix = name if name != "abcd" else ""
        return name, tuple(
            self._one(value, prefix + place, unit)
            for value, place, unit in zip(values, places, units, strict=True)
        )

    def _one(self, value: Any, part: str, unit: str) -> Amount:
        exact = exact_number(value)
        element = self.element
        if exact is not None and not self.wanted:
            return Amount.of(exact)
        number = exact if exact is not None else nearest_number(value)
        if number is not None and not self.wanted:
            self.symbols.kept.append(element.name)
        words = _PARTS.get(part, part) or _quantity(element)
        meaning = f"{words} of {element.kind} {element.name}"
        return Amount.of(1, {self.symbols.add(element, part, meaning, unit, number): 1})

    def _mutual(self, name: str, value: Any) -> Amount:
        """The mutual inductance, whichever way the coupling is written."""
        if name == "M":
            return self._one(value, "", "H")
        squares = [exact_number(self.network.elements[n].value) for n in self.element.links]
        k = exact_number(value)
        if k is None or squares[0] is None or squares[1] is None:
            return self._one(Symbol(), "", "H")
        root = _root(squares[0] * squares[1])
        mutual: Any = k * root if isinstance(root, Fraction) else complex(float(k) * root)
        if isinstance(mutual, complex):
            return self._complex(mutual)
        return self._one(mutual, "", "H")

    def _complex(self, mutual: complex) -> Amount:
        if not self.wanted:
            self.symbols.kept.append(self.element.name)
        meaning = f"mutual inductance of coupling {self.element.name}"
        return Amount.of(1, {self.symbols.add(self.element, "", meaning, "H", mutual): 1})


def _root(square: Fraction) -> Fraction | float:
    """The square root: exact where it is rational."""
    if square >= 0:
        top, bottom = isqrt(square.numerator), isqrt(square.denominator)
        if top * top == square.numerator and bottom * bottom == square.denominator:
            return Fraction(top, bottom)
    return cmath.sqrt(float(square)).real


_QUANTITIES = {
    "resistor": "resistance", "conductance": "conductance", "inductor": "inductance",
    "capacitor": "capacitance", "impedance": "impedance", "admittance": "admittance",
    "coupling": "mutual inductance", "transformer": "ratio n1/n2", "voltage": "voltage",
    "current": "current", "gyrator": "gyration resistance",
}  # fmt: skip
_PARTS = {"rin": "input resistance", "rout": "output resistance"}
_PLAIN_QUANTITIES = {"resistance", "conductance", "inductance", "capacitance", "impedance",
                     "admittance", "voltage", "current", "gain", "gyration resistance"}  # fmt: skip


def _quantity(element: Element) -> str:
    return _QUANTITIES.get(element.kind, "gain")
