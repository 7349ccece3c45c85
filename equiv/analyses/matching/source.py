"""The port that is to be matched: its open voltage and impedance, at one frequency and over many."""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from decimal import Decimal

import numpy as np

from equiv.analyses.port import equivalent
from equiv.analyses.ports.proof import Equivalent
from equiv.analyses.ports.tests import with_tests
from equiv.elements.element import Element, Frequency, Parameters
from equiv.elements.quantity import Quantity
from equiv.equations.solution import Solver
from equiv.errors import Diagnostic, DoesNotExistError, EquivError
from equiv.network import Network, Port
from equiv.units import is_complex, say

_ZERO = 1e-12
TURN = 6.283185307179586


@dataclass(frozen=True)
class PortSource:
    """A port as v = Voc - Z·i, with Re Z > 0 and a voltage."""

    network: Network
    port: Port
    frequency: Frequency
    voltage: complex
    impedance: complex

    @property
    def available_power(self) -> float:
        """The most power (W) that a load can take: |Voc|²/(4 Re Z)."""
        return abs(self.voltage) ** 2 / (4 * self.impedance.real)

    def power(self, load: complex) -> float:
        """The power (W) that a load takes, from the equivalent."""
        return abs(self.voltage / (self.impedance + load)) ** 2 * load.real


def source_at(network: Network, port: Port, frequency: Frequency) -> PortSource:
    """The port as a source that can be matched.

    Errors: DoesNotExistError, in words, where no load takes the most power.
    """
    e = equivalent(network, (port,), frequency)
    z = _impedance(e)
    voc = e.open_voltage
    voltage = complex(voc[0]) if voc is not None else z * complex(e.short_current[0])  # type: ignore[index]
    terms = float(np.nansum(abs(e.voltages))) if e.voltages is not None else abs(voltage)
    if abs(voltage) <= _ZERO * terms or not terms:
        raise _no_match(
            f"no source gives a voltage at the open port {port.name}: it has no power to give",
            "the match of a port without sources is seen when a source of any value feeds it",
        )
    return PortSource(network, port, frequency, voltage, z)


def _impedance(e: Equivalent) -> complex:
    """The impedance of the port, which must have a positive resistance."""
    name = e.named
    if e.impedance is not None:
        z = complex(e.impedance[0, 0])
    elif e.admittance is not None and abs(e.admittance[0, 0]) > 0:
        z = 1 / complex(e.admittance[0, 0])
    elif e.admittance is not None:
        raise _no_match(
            f"the port {name} drives the same current through any load: the more resistance, "
            "the more power, so no load takes the most",
        )
    else:
        raise _no_match(
            f"the port {name} has neither equivalent: {e.no_thevenin}; {e.no_norton}",
        )
    if z.real > _ZERO * abs(z):
        return z
    if z.real >= -_ZERO * abs(z):
        raise _no_match(
            f"the port {name} has no resistance: the power that a load can take has no limit",
        )
    raise _no_match(
        f"the port {name} has the negative resistance {say(z.real, 'ohm')}: a load can take any "
        "power from it, so none takes the most, and the operating point may not be stable",
    )


def _no_match(message: str, hint: str | None = None) -> DoesNotExistError:
    return DoesNotExistError(Diagnostic("no-match", f"no match: {message}", hint=hint))


@dataclass(frozen=True)
class OverFrequency:
    """Open voltage and impedance of the port over frequency, each solved once."""

    source: PortSource
    _known: dict[float, tuple[complex, complex] | None] = field(default_factory=dict)

    def at(self, hertz: float) -> tuple[complex, complex] | None:
        """Voc (V, rms) and Z (ohm) at a frequency; None where the open port has no solution."""
        if hertz not in self._known:
            self._known[hertz] = self._solved(hertz)
        return self._known[hertz]

    def _solved(self, hertz: float) -> tuple[complex, complex] | None:
        port = self.source.port
        try:
            network = moved(self.source.network, self.source.frequency, hertz)
            tested, _ = with_tests(network, (port,), network.frequency, "current")
            solver = Solver(tested, network.frequency)
        except EquivError:
            return None
        own, test = solver.u.copy(), np.zeros_like(solver.u)
        own[-1], test[-1] = 0.0, 1.0
        voltage = Quantity("V", (port.plus, port.minus))
        if not (solver.unique(voltage) and solver.consistent(own) and solver.consistent(test)):
            return None
        open_voltage, impedance = solver.values(voltage, np.stack([own, test], axis=1))
        return open_voltage, impedance


def moved(network: Network, base: Frequency, hertz: float) -> Network:
    """The network with its sources of one frequency moved to another, the others switched off."""
    changed: dict[str, Element] = {}
    for source in network.sources:
        if abs(network.frequency_of(source).omega - base.omega) > 1e-12 * base.omega:
            changed[source.name] = source.switched_off()
        elif source.options.at is not None:
            changed[source.name] = source._replace(options=source.options._replace(at=None))
    return replace(network.replacing(changed), frequency=Frequency(Decimal(repr(hertz))))


def known_at_one_frequency(network: Network) -> list[str]:
    """Elements whose complex value is given for the file's frequency alone."""
    names = []
    for element in network.elements.values():
        if element.role == "source":
            continue
        value = element.value
        if isinstance(value, Parameters):
            parts = [v for _, values in value.items for v in values]
        else:
            parts = [] if value is None else [value]
        if any(map(is_complex, parts)):
            names.append(element.name)
    return names
