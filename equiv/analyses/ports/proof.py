"""What proves a port's equivalent: three loads in the original network, and Blackman's formula."""

from __future__ import annotations

from dataclasses import dataclass, field
from decimal import Decimal

import numpy as np

from equiv.analyses.ports.tests import with_tests
from equiv.analyses.superposition.paths import dead_network
from equiv.elements import KINDS, Element
from equiv.elements.element import Frequency, Options
from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers, arithmetic_of
from equiv.equations.scalars import in_floats, like, scalar, solved, written
from equiv.equations.solution import Solver
from equiv.network import Network, Port
from equiv.units import is_exact

DC_LOADS = (0.5, 2.0, 7.0, 0.3, 11.0, 3.0)
AC_LOADS = (0.5 + 0.0j, 1.5 - 1.0j, 2.0 + 3.0j, 0.3 + 0.4j, 5.0 - 2.0j, 1.1 + 0.7j)
"""Loads of the proof, relative to the port's own impedance: the first three that have a solution."""
_ZERO = 1e-12
_NOISE = 1e-9
_LOADS = 3


@dataclass(frozen=True)
class LoadTest:
    """One load (ohm) at every port: the voltages in the network and of the equivalent (V)."""

    load: complex
    network: tuple[complex, ...]
    equivalent: tuple[complex, ...]


@dataclass(frozen=True)
class Equivalent:
    """v = Voc - Z·i and i = Isc - Y·v of some ports at one frequency.

    `voltages` and `currents` have a row a port and a column a source or group (V, A); a column is
    no term of its own where `alone` says that it has no solution without the others.
    `open_voltage` and `short_current` are those of all sources, `impedance` (ohm) and `admittance`
    (S) square. Each is None where it does not exist, with the reason.
    """

    ports: tuple[Port, ...]
    frequency: Frequency
    sources: tuple[str, ...]
    values: tuple[tuple[complex, str] | None, ...]
    impedance: Numbers | None
    admittance: Numbers | None
    voltages: Numbers | None
    currents: Numbers | None
    open_voltage: Numbers | None
    short_current: Numbers | None
    members: tuple[tuple[int, ...], ...]
    """The numbers, among the network's sources, of each source or group."""
    alone: tuple[bool, ...]
    no_thevenin: str | None
    no_norton: str | None
    loads: list[LoadTest] = field(default_factory=list, compare=False)
    """The three loads of the proof, filled by `three_loads`."""

    @property
    def thevenin(self) -> bool:
        """Whether the Thevenin equivalent exists."""
        return self.impedance is not None

    @property
    def norton(self) -> bool:
        """Whether the Norton equivalent exists."""
        return self.admittance is not None

    @property
    def named(self) -> str:
        """The ports in words."""
        return " and ".join(p.name for p in self.ports)

    @property
    def disagreement(self) -> float:
        """|Voc - Z·Isc| against |Voc| and |Z|·|Isc|: they come from two different networks."""
        z, voc, isc = self.impedance, self.open_voltage, self.short_current
        assert z is not None and voc is not None and isc is not None
        assert self.admittance is not None
        size = np.abs(voc).max() + (np.abs(z) @ np.abs(isc)).max()
        off = float(np.abs(voc - z @ isc).max() / size) if size else 0.0
        unit = np.eye(len(z))
        product = float(np.abs(z @ self.admittance - unit).max())
        return max(off, product / max(1.0, float((np.abs(z) @ np.abs(self.admittance)).max())))

    @property
    def own_resistances(self) -> list[float]:
        """Re Z of each port, the others open (Re Y where Z does not exist); rounding is zero."""
        matrix = self.impedance if self.impedance is not None else self.admittance
        if matrix is None:
            return []
        own = np.diag(matrix)
        zero = 0.0 if own.dtype == object else _ZERO
        return [0.0 if abs(x.real) <= zero * abs(x) else float(x.real) for x in own]

    @property
    def least_resistance(self) -> float | None:
        """The smallest eigenvalue of the Hermitian part of Z (of Y where Z does not exist)."""
        matrix = self.impedance if self.impedance is not None else self.admittance
        if matrix is None:
            return None
        matrix = in_floats(matrix)
        least = float(np.linalg.eigvalsh((matrix + matrix.conj().T) / 2).min())
        return 0.0 if abs(least) <= _NOISE * np.abs(matrix).max() else least

    def loaded(self, load: complex, extra: complex) -> Numbers:
        """The voltages with a load at each port, and an extra current into each `plus` (V)."""
        unit = np.eye(len(self.ports))
        if self.impedance is not None:
            voc = self.open_voltage
            assert voc is not None
            return solved(unit + self.impedance / load, voc + self.impedance.sum(1) * extra)
        assert self.admittance is not None
        isc = self.short_current
        assert isc is not None
        return solved(self.admittance + unit / load, isc + extra)


def three_loads(network: Network, e: Equivalent) -> float | None:
    """Largest difference of port voltages, network against equivalent, of the largest voltage.

    Where the equivalent has no source of its own, 1 A is fed into each port beside the load.
    """
    factors = AC_LOADS if e.frequency.omega else DC_LOADS
    feeds = e.open_voltage if e.thevenin else e.short_current
    extra = 0.0 if feeds is not None and np.abs(feeds).max(initial=0.0) > 0 else 1.0
    base = base_resistance(e)
    off, size = 0.0, 0.0
    for factor in factors:
        if len(e.loads) == _LOADS:
            break
        load = scalar(like(network, np.array([base * factor]))[0])
        solver = Solver(_loaded(network, e, load, extra), e.frequency, "branch-current")
        asked = [Quantity("V", (p.plus, p.minus)) for p in e.ports]
        if not (solver.consistent(solver.u) and all(map(solver.unique, asked))):
            continue
        state = solver.state()
        found = np.array([state.of(q) for q in asked])
        told = e.loaded(load if e.frequency.omega or is_exact(load) else load.real, extra)
        e.loads.append(LoadTest(load, tuple(found), tuple(map(scalar, told))))
        off = max(off, float(np.abs(found - told).max()))
        size = max(size, float(np.abs(found).max()))
    return (off / size if size else off) if e.loads else None


def base_resistance(e: Equivalent) -> float:
    """A resistance (ohm) that suits the port."""
    if e.impedance is not None and np.abs(e.impedance).max() > 0:
        return float(np.abs(np.diag(e.impedance)).max() or 1.0)
    if e.admittance is not None and np.abs(e.admittance).max() > 0:
        return float(1 / (np.abs(np.diag(e.admittance)).max() or 1.0))
    return 1.0


def _loaded(network: Network, e: Equivalent, load: complex, extra: float) -> Network:
    elements: list[Element] = []
    for p in e.ports:
        nodes = (p.plus, p.minus)
        kind = "impedance" if load.imag else "resistor"
        value = written(load if load.imag or is_exact(load) else load.real)
        elements.append(KINDS[kind](f"load at {p.name}", nodes, value))
        if extra:
            options = Options(at=e.frequency)
            # a `peak` file would take the value for a peak
            scale = Decimal(2).sqrt() if network.phasors == "peak" and e.frequency.omega else 1
            elements.append(
                KINDS["current"](
                    f"feed at {p.name}", nodes[::-1], Decimal(extra) * scale, options=options
                )
            )
    return network.with_elements(elements)


def blackman(network: Network, e: Equivalent) -> float | None:
    """|Z - Z0·(1 + T_short)/(1 + T_open)| / |Z|, for one port and one controlled source.

    Z0 is the impedance with the controlled source dead, T its return ratio with the port shorted
    and open. None where the formula does not apply.
    Source: R. B. Blackman, Effect of feedback on impedance, Bell System Tech. J. 22 (1943).
    """
    if len(e.ports) != 1 or len(network.controlled) != 1 or e.impedance is None:
        return None
    (element,) = network.controlled
    if element.senses is None or not np.abs(e.impedance).max():
        return None
    (gain,) = arithmetic_of(network).column([element.value], [element]).tolist()
    dead = dead_network(network)
    ratios = []
    z0 = 0j
    for test in ("current", "voltage"):
        tested, names = with_tests(dead, e.ports, e.frequency, test)
        solver = Solver(tested, e.frequency)
        if solver.degenerate is not None:
            return None
        h = solver.coefficients(element.senses)
        ratios.append(-gain * scalar(h[solver.layout.source_number[element.name]]))
        if test == "current":
            port = e.ports[0]
            response = solver.coefficients(Quantity("V", (port.plus, port.minus)))
            z0 = scalar(response[solver.layout.source_number[names[0]]])
    opened, shorted = ratios
    told = z0 * (1 + shorted) / (1 + opened)
    z = scalar(e.impedance[0, 0])
    return float(abs(z - told) / abs(z))
