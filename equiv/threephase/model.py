"""The one-line diagram of a balanced three-phase system, as the calculation sees it. Immutable.

Quantities are in SI units (V, A, ohm, S, VA) of all the `count` parallel items together; bus and
rated voltages are line to line, EMFs phase to neutral, rms. Sequences are 1 (positive),
2 (negative) and 0 (zero).
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Any, ClassVar, NamedTuple

from equiv.errors import Diagnostic, UsageError
from equiv.network import NOWHERE, Given, Network, Origin


class View(NamedTuple):
    """How a system is looked at: what decides the impedances of its items."""

    basis: str = "superposition"
    """`superposition` or `equivalent-source` (IEC 60909-0: corrections K_T and K_G)"""
    case: str = "max"
    """`max` or `min`"""
    reactances: float = 1.0
    """What reactances and susceptances are multiplied by: 0.4 for the 20 Hz (24 Hz) method."""


@dataclass(frozen=True)
class Bus:
    """A bus and its nominal voltage (V, line to line)."""

    name: str
    volts: float
    tolerance: float = 0.06
    """Of a low-voltage supply: 0.06 or 0.10 (IEC 60909-0, table 1)."""
    written: Mapping[str, Any] = field(default_factory=dict, compare=False)


@dataclass(frozen=True)
class Item:
    """Something between buses, or between a bus and earth. Each kind is a class below this one."""

    kind: ClassVar[str] = ""
    name: str
    count: int = 1
    group: str | None = None
    label: str | None = None

    @property
    def lacks_zero_sequence(self) -> bool:
        """Whether zero-sequence current could flow in it and its impedance is not known."""
        return False


class Shunt(Item):
    """An item at one bus: machines and infeeds (which have an EMF), loads, capacitor banks."""

    bus: Bus

    def series(self, sequence: int, view: View) -> complex | None:
        """The impedance between terminal and star point (ohm), without that of the neutral.

        None where there is no path: infinite impedance, a delta, or no zero-sequence data.
        """
        raise NotImplementedError

    def neutral(self) -> complex | None:
        """The impedance between star point and earth (ohm); None where it is not earthed."""
        return None

    def emf(self, view: View) -> complex | None:
        """The EMF behind the impedance (V, phase to neutral), where it is given; None elsewhere.

        Its angle is counted from the no-load angle of its bus: vector groups are not in it.
        A machine without a given EMF has the prefault voltage of its bus.
        """
        return None

    @property
    def drives(self) -> bool:
        """Whether it has an EMF: infeed, generator, motor; not a load or a capacitor bank."""
        return False

    def stays(self, view: View) -> bool:
        """Whether it is there in this view: motors are not in the smallest fault currents,
        loads and capacitor banks not in the equivalent-source method."""
        return True


class Link(Item):
    """An item between two buses of one nominal voltage: a line, a reactor."""

    first: Bus
    second: Bus

    def series(self, sequence: int, view: View) -> complex | None:
        """The series impedance (ohm); None where there is no zero-sequence data."""
        raise NotImplementedError

    def charging(self, sequence: int, view: View) -> complex:
        """The whole shunt admittance (S), half of it at each end.

        In the equivalent-source method it is in the zero sequence alone.
        """
        return 0j


class Winding(NamedTuple):
    """A winding: `Y`, `D` or `Z`, and whether its star point is brought out."""

    connection: str
    neutral_out: bool = False


class VectorGroup(NamedTuple):
    """The vector group by IEC 60076-1, as in Dyn11: the low side lags by clock × 30 degrees."""

    first: Winding
    second: Winding
    clock: int


class Transformer(Item):
    """Two windings. The first side is what the statement names first (before `>`).

    `clock` counts how far the second side lags the first, whichever has the higher voltage: where
    the high side is named second, reading turns the group round.
    """

    first: Bus
    second: Bus
    rated: tuple[float, float]
    """Rated voltages of the sides (V); the first times the tap."""
    group_of_windings: VectorGroup

    def series(self, sequence: int, view: View) -> complex:
        """The short-circuit impedance (ohm) referred to the first side's rated voltage.

        The zero sequence's is that of one phase's windings (z0, or that of the positive sequence
        where none is given); what becomes of it, windings and earthing decide.
        """
        raise NotImplementedError

    def neutral(self, side: int) -> complex | None:
        """The impedance between star point and earth on side 1 or 2 (ohm); None: not earthed."""
        raise NotImplementedError


@dataclass(frozen=True)
class OneLine:
    """A three-phase system: buses and items by name, in the order of the file."""

    buses: Mapping[str, Bus]
    items: Mapping[str, Item]
    hertz: float
    title: str = ""
    notes: tuple[str, ...] = ()
    base: float = 100e6
    """The base power (VA) of per-unit values without a rating of their own, and of the networks."""
    prefault: float = 1.0
    """The voltage before the fault where no EMF is given, per unit of each bus's nominal."""
    given: Mapping[str, Given] = field(default_factory=dict)
    """The parameters that its values may name."""
    places: Mapping[str, tuple[str, int]] = field(default_factory=dict, compare=False)
    origin: Origin = field(default=NOWHERE, compare=False)

    @property
    def frequency_words(self) -> str:
        """The frequency, for headings."""
        return f"{self.hertz:g} Hz"

    def __getattr__(self, name: str) -> Any:
        if name in _OF_NETWORKS:
            raise UsageError(three_phase_only(self.origin.name))
        raise AttributeError(f"{type(self).__name__!r} object has no attribute {name!r}")


_OF_NETWORKS = frozenset(name for name in vars(Network) if not name.startswith("_")) | frozenset(
    Network.__dataclass_fields__
)


def three_phase_only(name: str | None) -> Diagnostic:
    """That a three-phase system was given where a network is wanted."""
    return Diagnostic(
        "three-phase",
        f"{name or 'this text'} describes a three-phase system; this works on networks",
        hint="use equiv fault; equiv isolate gives its sequence networks as a network's text",
    )
