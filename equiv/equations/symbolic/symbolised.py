"""A network whose values are amounts: symbols, multiples of parameters, exact numbers."""

from __future__ import annotations

import cmath
from collections.abc import Collection, Iterable, Mapping
from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from math import isqrt
from typing import Any, NamedTuple

from equiv.elements import Element
from equiv.elements.element import Parameters
from equiv.equations.symbolic.amount import Amount
from equiv.equations.symbolic.symbols import Symbols, exact_number, nearest_number
from equiv.errors import Diagnostic, UsageError
from equiv.network import Network
from equiv.units import Formula, Rounded, Symbol, Value, as_rounded


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
    elements: Mapping[str, tuple[Multiple | None, ...]]
    """For each value of an element what it is made of; None for a mere number."""


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
        made_of = [
            m and Amount.of(m.number, {parameters[name]: power for name, power in m.powers})
            for m in shared.elements.get(element.name, ())
        ]
        wanted = chosen is None or element.name in chosen
        value = _Maker(network, symbols, element, wanted, made_of).value()
        if element.role == "source":
            sources.append(value)
        elif value is not element.value:
            made[element.name] = element._replace(value=value)
    bare = replace(network, again=None)
    return Symbolised(bare.replacing(made), symbols, tuple(sources))


class _Maker:
    """The values of one element, as amounts: `made_of` those that are made of parameters."""

    def __init__(
        self,
        network: Network,
        symbols: Symbols,
        element: Element,
        wanted: bool,
        made_of: Iterable[Amount | None] = (),
    ) -> None:
        self.network, self.symbols, self.element = network, symbols, element
        self.wanted, self.made_of = wanted, iter(made_of)

    def value(self) -> Any:
        """What stands in place of the element's value."""
        element = self.element
        if element.value is None:
            return None
        if element.table is not None:
            raise _from_file(element)
        if isinstance(element.value, Parameters):
            return Parameters(tuple(self._field(*item) for item in element.value.items))
        return self._one(element.value, "", element.fields[0].units[0])

    def _field(self, name: str, values: tuple[Any, ...]) -> tuple[str, tuple[Any, ...]]:
        kind = self.element.kind
        if kind == "transformer":
            return name, (self._one(_ratio(*values), "", ""), 1)
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
        made_of = next(self.made_of, None)
        if made_of is not None:
            return made_of
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
            return self._unknown()
        root = _root(squares[0] * squares[1])
        mutual: Any = k * root if isinstance(root, Fraction) else complex(float(k) * root)
        if isinstance(mutual, complex):
            return self._complex(mutual)
        return self._one(mutual, "", "H")

    def _unknown(self) -> Amount:
        return self._one(Symbol(), "", "H")

    def _complex(self, mutual: complex) -> Amount:
        if not self.wanted:
            self.symbols.kept.append(self.element.name)
        meaning = f"mutual inductance of coupling {self.element.name}"
        return Amount.of(1, {self.symbols.add(self.element, "", meaning, "H", mutual): 1})


class _Lister(_Maker):
    """The values as numbers, in the order in which the symbols are made."""

    def __init__(self, network: Network, element: Element) -> None:
        super().__init__(network, Symbols(), element, False)
        self.found: list[Fraction | Symbol | None] = []

    def _one(self, value: Any, part: str, unit: str) -> Amount:
        value = value.value if isinstance(value, Formula) else value
        rounded = isinstance(value, Rounded)  # to 40 digits: the same ones in each of its multiples
        known = Fraction(value) if rounded else exact_number(value)
        self.found.append(value if isinstance(value, Symbol) else known)
        return Amount({})

    def _unknown(self) -> Amount:
        self.found.append(None)
        return Amount({})

    def _complex(self, mutual: complex) -> Amount:
        return self._unknown()


def listed_values(network: Network, element: Element) -> list[Fraction | Symbol | None]:
    """The numbers that an element has in formulas, or `?`; None for one that is not rational."""
    lister = _Lister(network, element)
    if element.table is None:
        lister.value()
    return lister.found


def _ratio(first: Value, second: Value) -> Value:
    """n1/n2, marked if one of them is rounded."""
    numbers = [n.value if isinstance(n, Formula) else n for n in (first, second)]
    if not all(isinstance(n, Decimal | Fraction) for n in numbers):
        return Symbol()
    ratio = Fraction(numbers[0]) / Fraction(numbers[1])  # type: ignore[arg-type]
    return as_rounded(ratio) if any(isinstance(n, Rounded) for n in numbers) else ratio


def _from_file(element: Element) -> UsageError:
    return UsageError(
        Diagnostic(
            "not-a-formula",
            f"{element.name} has parameters that a file gives at some frequencies: "
            "they are no formula",
            hint="leave it out, or ask for numbers",
        )
    )


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


def _quantity(element: Element) -> str:
    return _QUANTITIES.get(element.kind, "gain")
