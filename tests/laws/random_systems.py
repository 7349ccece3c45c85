"""Random three-phase systems of simple items: machines, lines, transformers of all vector groups."""

from __future__ import annotations

import cmath
import math
import random
import re
from dataclasses import dataclass

from equiv.threephase.model import (
    Bus,
    Item,
    Link,
    OneLine,
    Shunt,
    Transformer,
    VectorGroup,
    View,
    Winding,
)

GROUPS = (
    "Yy0", "Yyn0", "YNyn0", "YNyn2", "YNyn4", "YNyn6", "YNyn8", "YNyn10", "YNy0", "Yy6", "Dd0",
    "Dd6", "Dd10", "Dy1", "Dyn1", "Dyn5", "Dyn7", "Dyn11", "YNd1", "YNd5", "YNd7", "YNd11", "Yd1",
    "Yd5", "Yd7", "Yd11", "Yz1", "Yzn5", "Yzn11", "YNzn1", "Dzn0", "Dzn6", "Dz2", "ZNd0", "ZNy11",
    "ZNyn5",
)  # fmt: skip


def group(text: str) -> VectorGroup:
    """A vector group, as in `Dyn11`."""
    found = re.fullmatch(r"([YDZ])(N?)([ydz])(n?)(\d+)", text)
    assert found, text
    first, n1, second, n2, clock = found.groups()
    return VectorGroup(Winding(first, bool(n1)), Winding(second.upper(), bool(n2)), int(clock))


NO_BUS, COMMON = Bus("", 1.0), group("Dyn11")


def at(z: complex, view: View) -> complex:
    """An impedance at the frequency of a view."""
    return complex(z.real, z.imag * view.reactances)


@dataclass(frozen=True)
class Machine(Shunt):
    """A machine, or with `load` a constant impedance (ohm)."""

    bus: Bus = NO_BUS
    z: tuple[complex | None, complex | None, complex | None] = (None, 1j, 1j)
    star: complex | None = None
    volts: complex | None = None
    load: bool = False

    kind = "machine"

    def series(self, sequence: int, view: View) -> complex | None:
        found = self.z[sequence]
        return None if found is None else at(found, view)

    def neutral(self) -> complex | None:
        return self.star

    def emf(self, view: View) -> complex | None:
        return self.volts

    @property
    def drives(self) -> bool:
        return not self.load

    def stays(self, view: View) -> bool:
        return view.basis == "superposition" or not self.load


@dataclass(frozen=True)
class Cable(Link):
    """A line (ohm, S)."""

    first: Bus = NO_BUS
    second: Bus = NO_BUS
    z: tuple[complex | None, complex, complex] = (1j, 1j, 1j)
    b: tuple[float, float] = (0.0, 0.0)

    kind = "cable"

    def series(self, sequence: int, view: View) -> complex | None:
        found = self.z[sequence]
        return None if found is None else at(found, view)

    def charging(self, sequence: int, view: View) -> complex:
        if sequence and view.basis == "equivalent-source":
            return 0j
        return 1j * self.b[1 if sequence else 0] * view.reactances


@dataclass(frozen=True)
class Unit(Transformer):
    """A transformer (ohm at the first side)."""

    first: Bus = NO_BUS
    second: Bus = NO_BUS
    rated: tuple[float, float] = (1.0, 1.0)
    group_of_windings: VectorGroup = COMMON
    z: tuple[complex, complex] = (1j, 1j)
    stars: tuple[complex | None, complex | None] = (None, None)

    kind = "transformer"

    def series(self, sequence: int, view: View) -> complex:
        return at(self.z[1 if sequence else 0], view)

    def neutral(self, side: int) -> complex | None:
        return self.stars[side - 1]


def system(*items: Item, base: float = 10e6, prefault: float = 1.0) -> OneLine:
    """A system of some items, with the buses that they name."""
    buses: dict[str, Bus] = {}
    for item in items:
        ends = (item.bus,) if isinstance(item, Shunt) else (item.first, item.second)  # type: ignore[attr-defined]
        buses.update({bus.name: bus for bus in ends})
    return OneLine(buses, {item.name: item for item in items}, 50.0, base=base, prefault=prefault)


class Grower:
    """Grows a system bus by bus, from a seed; `plain` without loads, charging, unequal EMFs."""

    def __init__(self, seed: int, size: int = 6, plain: bool = False) -> None:
        self.random = random.Random(seed)
        self.plain = plain
        self.items: list[Item] = []
        self.buses = [Bus("B1", 33e3)]
        self._machine(self.buses[0])
        while len(self.buses) < size:
            if self.random.random() < 0.5:
                self._transformer()
            else:
                self._line()
        for bus in self.buses:
            if self.random.random() < 0.4:
                self._machine(bus)
            if not plain and self.random.random() < 0.3:
                self._machine(bus, load=True)

    def grown(self, base: float = 10e6) -> OneLine:
        """The system."""
        return system(*self.items, base=base, prefault=1.03)

    def _near(self, volts: float, size: float = 0.1) -> complex:
        ohms = volts**2 / 10e6 * size * self.random.uniform(0.5, 2)
        return cmath.rect(ohms, math.atan(self.random.uniform(1.5, 30)))

    def _neutral(self, volts: float) -> complex | None:
        found = self.random.random()
        if found < 0.3:
            return None
        return 0j if found < 0.6 else self._near(volts, 0.5)

    def _machine(self, bus: Bus, load: bool = False) -> None:
        size = 2.0 if load else 0.15
        z1, z2, z0 = (self._near(bus.volts, size) for _ in range(3))
        emf = None
        if not load and not self.plain:
            angle = self.random.uniform(-0.2, 0.2)
            emf = cmath.rect(bus.volts / math.sqrt(3) * self.random.uniform(0.95, 1.1), angle)
        star = self._neutral(bus.volts)
        self.items.append(
            Machine(
                f"M{len(self.items)}", bus=bus, z=(z0, z1, z1 if load else z2), star=star,
                volts=emf, load=load,
            )
        )  # fmt: skip

    def _line(self) -> None:
        start = self.random.choice(self.buses)
        ends = [b for b in self.buses if b.volts == start.volts and b is not start]
        if not ends or self.random.random() < 0.7:
            ends = [Bus(f"B{len(self.buses) + 1}", start.volts)]
            self.buses.append(ends[0])
        end = self.random.choice(ends)
        if self._angle(start) is not None and self._angle(end) not in (None, self._angle(start)):
            return
        z1, z0 = self._near(start.volts), self._near(start.volts, 0.3)
        base = 10e6 / start.volts**2
        b = (0.0, 0.0) if self.plain else (0.003 * base, 0.01 * base)
        self.items.append(
            Cable(f"L{len(self.items)}", first=start, second=end, z=(z0, z1, z1), b=b)
        )

    def _angle(self, bus: Bus) -> int | None:
        from equiv.threephase.sequence.displacement import no_load_angles

        known = system(*self.items)
        return no_load_angles(known).get(bus.name)

    def _transformer(self) -> None:
        start = self.random.choice(self.buses)
        end = Bus(f"B{len(self.buses) + 1}", self.random.choice([33e3, 11e3, 6.6e3, 400.0]))
        self.buses.append(end)
        windings = group(self.random.choice(GROUPS))
        tap = 1.0 if self.plain or self.random.random() < 0.5 else self.random.uniform(0.95, 1.05)
        stars = (
            self._neutral(start.volts) if windings.first.neutral_out else None,
            self._neutral(end.volts) if windings.second.neutral_out else None,
        )
        self.items.append(
            Unit(
                f"T{len(self.items)}", first=start, second=end, rated=(start.volts * tap, end.volts),
                group_of_windings=windings, stars=stars,
                z=(self._near(start.volts, 0.08), self._near(start.volts, 0.1)),
            )
        )  # fmt: skip
