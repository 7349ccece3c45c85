"""A load put on the original network: what proves its point, and what every source does there."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from equiv.analyses.loading.points import Line, Point
from equiv.elements import KINDS, Element
from equiv.elements.element import Frequency, Options
from equiv.elements.quantity import Quantity
from equiv.equations.scalars import scalar, written
from equiv.equations.solution import Solver, State
from equiv.errors import EquivError
from equiv.language.loads import Load
from equiv.network import Network, Port
from equiv.units import Value, is_exact

_NOISE = 1e-12
_FLOOR = 1e-6
_DUST = 1e-15
"""A power this small beside the largest of the network is only rounding."""
_ROLES = {"source": "independent", "controlled": "controlled"}
_IMMITTANCES = frozenset({"resistor", "conductance", "impedance", "admittance"})


class SourceState(NamedTuple):
    """A source in the loaded network: voltage of its first node over the second, and power.

    `delivered` is the complex power that it gives (VA); None is a value that is not determined.
    """

    name: str
    kind: str
    role: str
    """`independent`, `controlled`, or `active` for another element that gives power"""
    voltage: complex | None
    delivered: complex | None


class Proof(NamedTuple):
    """The original network with the load on it, solved in the branch-current form.

    `difference` is the larger of the differences of voltage and current from the equivalent's,
    each of the larger of its value and its open-circuit or short-circuit value.
    """

    voltage: complex
    current: complex
    difference: float
    balance: float
    sources: tuple[SourceState, ...]


def prove(network: Network, port: Port, line: Line, load: Load, point: Point) -> Proof | str:
    """The proof of a point; in words why there is none, where the network has no solution so."""
    element = _element(network, port, line, load, point)
    try:
        solver = Solver(network.with_elements([element]), line.frequency, "branch-current")
        asked = (Quantity("V", (port.plus, port.minus)), Quantity("I", (element.name,)))
        if not (solver.consistent(solver.u) and all(map(solver.unique, asked))):
            return f"with this load, {'; '.join(solver.reasons)}"
        state = solver.state()
    except EquivError as error:
        return f"with this load, {'; '.join(d.message for d in error.diagnostics)}"
    voltage, current = (state.of(quantity) for quantity in asked)
    off = (
        _relative(voltage - point.voltage, point.voltage, line.voc, state.largest("V")),
        _relative(current - point.current, point.current, line.isc, state.largest("I")),
    )
    sources = _sources(network, solver, state)
    return Proof(voltage, current, max(off), state.balance(), sources)


def why_none(network: Network, port: Port, frequency: Frequency, kind: str) -> str:
    """Why the network has no solution with its port open or shorted, in its own words."""
    element = KINDS[kind](f"load at {port.name}", (port.plus, port.minus))
    try:
        solver = Solver(network.with_elements([element]), frequency, "branch-current")
        reasons = solver.reasons
    except EquivError as error:
        reasons = tuple(d.message for d in error.diagnostics)
    words = "open" if kind == "open" else "shorted"
    return f"with the port {words}, {'; '.join(reasons)}" if reasons else ""


def _relative(difference: complex, value: complex, most: complex | None, largest: float) -> float:
    """A difference of its value; at a port that gives nothing, of what is in the network."""
    size = max(abs(value), abs(most or 0.0), _FLOOR * largest)
    return float(abs(difference) / size) if size else float(abs(difference))


def _element(network: Network, port: Port, line: Line, load: Load, point: Point) -> Element:
    """The load as an element; a power or a curve by the current that it takes there.

    Where the port gives one current at any voltage, that is the impedance it has there instead.
    """
    name, nodes = f"load at {port.name}", (port.plus, port.minus)
    if load.kind == "short" or (load.kind == "impedance" and not load.value):
        return KINDS["short"](name, nodes)
    if load.kind == "open":
        return KINDS["open"](name, nodes)
    if load.kind == "impedance":
        return _impedance(name, nodes, load.value)
    if line.voc is None:
        return _impedance(name, nodes, scalar(point.voltage / point.current))
    # a `peak` file would take the value for a peak
    scale = 2**0.5 if network.phasors == "peak" and line.frequency.omega else 1.0
    value = scalar(point.current) * scale
    return KINDS["current"](name, nodes, _value(value), options=Options(at=line.frequency))


def _impedance(name: str, nodes: tuple[str, str], value: complex) -> Element:
    return KINDS["impedance" if value.imag else "resistor"](name, nodes, _value(value))


def _value(value: complex) -> Value:
    return written(value if value.imag or is_exact(value) else value.real)


def _sources(network: Network, solver: Solver, state: State) -> tuple[SourceState, ...]:
    """Every source, controlled source and device, and whatever else gives power."""
    found = []
    powers = np.asarray(state.voltages) * np.conj(state.currents)
    size = float(np.abs(powers).max(initial=0.0))
    for position, element in enumerate(solver.layout.elements):
        if element.name not in network.elements or not element.pairs:
            continue
        first = int(solver.layout.first_branch[position])
        branches = range(first, first + len(element.pairs))
        delivered = -scalar(powers[list(branches)].sum())
        if abs(delivered) <= _DUST * size and not is_exact(delivered):
            delivered = 0j
        role = _ROLES.get(element.role, "controlled" if element.kind == "opamp" else "")
        if not role and delivered.real > _NOISE * size and _may_be_active(element):
            role = "active"
        if not role:
            continue
        voltage, known = _determined(solver, element)
        found.append(
            SourceState(
                element.name, element.kind, role,
                scalar(state.voltages[first]) if voltage else None,
                delivered if known else None,
            )
        )  # fmt: skip
    return tuple(found)


def _may_be_active(element: Element) -> bool:
    """Whether an element that gives power is active itself; coupled inductors pass it on."""
    return element.kind in _IMMITTANCES or len(element.pairs) > 1


def _determined(solver: Solver, element: Element) -> tuple[bool, bool]:
    """Whether the voltage of an element's first pair, and its power, have one value each."""
    if solver.degenerate is None:
        return True, True
    ground = solver.network.ground
    pairs = range(len(element.pairs))
    voltages = [solver.unique(Quantity("V", element.pair_nodes(k, ground))) for k in pairs]
    currents = [solver.unique(Quantity("I", (element.name,), k)) for k in pairs]
    return voltages[0], all(voltages) and all(currents)


def same(one: Frequency, other: Frequency) -> bool:
    """Whether two frequencies are the same."""
    return abs(one.omega - other.omega) <= _NOISE * max(one.omega, other.omega)
