"""What an element is, and what a kind of element declares about itself.

An element is an immutable record. A kind is a class of such records in a file of its own: it
declares how it is written, its branches and its law, and registers itself; reading, writing,
`equiv kinds`, the manual's page and the property tests follow from the declaration.
"""

from __future__ import annotations

from typing import Any, ClassVar, NamedTuple

from equiv.elements.laws import Column, Pen
from equiv.elements.quantity import Quantity
from equiv.elements.tabulated import Tabulated
from equiv.units import Number, Value

GROUND = -1
"""In `pairs`: the reference node, for an element that is tied to it without naming it."""


class Field(NamedTuple):
    """A value that a kind takes: its keyword (None: it stands alone) and the units of its numbers."""

    name: str
    units: tuple[str, ...]
    keyword: str | None = None
    complex: bool = False
    form: str = "number"
    """`number`, `ratio`, or `file` for parameters that a Touchstone file gives"""
    aliases: tuple[str, ...] = ()


class Frequency(NamedTuple):
    """A frequency as it was written, in hertz or in radians a second."""

    value: Number
    unit: str = "Hz"

    @property
    def hertz(self) -> float:
        """The frequency in hertz."""
        return float(self.value) if self.unit == "Hz" else float(self.value) / 6.283185307179586

    @property
    def omega(self) -> float:
        """The angular frequency in rad/s."""
        return float(self.value) if self.unit != "Hz" else float(self.value) * 6.283185307179586

    def same_as(self, other: Frequency) -> bool:
        """Whether two frequencies are one: equal but for the rounding of a change of unit."""
        return abs(self.omega - other.omega) <= 1e-12 * max(self.omega, other.omega)


class Parameters(NamedTuple):
    """The named values of a kind that has several, or a choice of one among several."""

    items: tuple[tuple[str, tuple[Any, ...]], ...]
    """A `Value` for each unit of the field; for a field of the form `file` one `Tabulated`."""

    @property
    def names(self) -> tuple[str, ...]:
        """Which parameters are given."""
        return tuple(name for name, _ in self.items)

    @property
    def variant(self) -> tuple[str, ...]:
        """What decides the form of the law: the names, and what a file's parameters are."""
        table = self.table
        return (*self.names, *table.variant) if table is not None else self.names

    @property
    def table(self) -> Tabulated | None:
        """The parameters from a file, where there is one."""
        found = (values[0] for _, values in self.items)
        return next((value for value in found if isinstance(value, Tabulated)), None)

    def __getitem__(self, name: Any) -> Any:
        if isinstance(name, str):
            return dict(self.items)[name]
        return self.items


class Options(NamedTuple):
    """What may stand behind any element's value."""

    label: str | None = None
    group: str | None = None
    tolerance: Number | None = None
    at: Frequency | None = None


NO_OPTIONS = Options()


class Record(NamedTuple):
    """The data of an element."""

    name: str
    nodes: tuple[str, ...]
    value: Value | Parameters | None = None
    senses: Quantity | None = None
    links: tuple[str, ...] = ()
    """Names of the elements that a coupling joins."""
    options: Options = NO_OPTIONS


KINDS: dict[str, type[Element]] = {}
"""The registry of kinds, by the word that begins a statement."""


class Element(Record):
    """An element of a network; each kind is a class below this one.

    Sign convention of every kind: the current of a terminal pair is counted from its first node
    to its second inside the element, its voltage is first over second, and power is the power
    absorbed (the passive sign convention; IEC 60375).
    """

    __slots__ = ()

    kind: ClassVar[str] = ""
    role: ClassVar[str] = "passive"
    """`passive`, `source`, `controlled` or `device`"""
    connection: ClassVar[str] = "a b"
    """The words of the connection, with the marks that they must bear; `…` repeats the pair."""
    pairs: ClassVar[tuple[tuple[int, int], ...]] = ((0, 1),)
    """The terminal pairs, each a branch, as positions in `nodes`."""
    fields: ClassVar[tuple[Field, ...]] = ()
    rule: ClassVar[str] = "all"
    """Which fields are given: `all`, exactly `one`, or `any` of them."""
    senses_what: ClassVar[str] = ""
    """`V` or `I` for a controlled source."""
    output: ClassVar[str] = ""
    """`V` or `I`: what a source or controlled source imposes."""

    def __init_subclass__(cls) -> None:
        super().__init_subclass__()
        if cls.kind:
            KINDS[cls.kind] = cls

    def __eq__(self, other: object) -> bool:
        return type(self) is type(other) and tuple.__eq__(self, other)

    def __ne__(self, other: object) -> bool:
        return not self == other

    def __hash__(self) -> int:
        return hash((self.kind, tuple(self)))

    @property
    def variant(self) -> tuple[str, ...]:
        """Elements of a kind with the same variant share one form of the law."""
        return self.value.variant if isinstance(self.value, Parameters) else ()

    @property
    def table(self) -> Tabulated | None:
        """The parameters that a file gives at some frequencies, where the element has them."""
        return self.value.table if isinstance(self.value, Parameters) else None

    def pair_nodes(self, number: int, ground: str) -> tuple[str, str]:
        """The names of the nodes of a terminal pair."""
        first, second = self.pairs[number]
        return self.nodes[first], ground if second == GROUND else self.nodes[second]

    @classmethod
    def law(cls, some: Column, pen: Pen) -> None:
        """The law in branch-current form: every current is an unknown, nothing is divided."""
        raise NotImplementedError

    @classmethod
    def nodal(cls, some: Column, pen: Pen) -> None:
        """The law in nodal form: currents that voltages decide are written by `pen.current`."""
        cls.law(some, pen)

    def switched_off(self) -> Element:
        """What stands in the element's place, under its name, when it gives nothing."""
        raise TypeError(f"a {self.kind} cannot be switched off")
