"""A matching network as elements on the original network, and what it does there."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from decimal import Decimal
from typing import NamedTuple

from equiv.analyses.matching.ladder import LOSSLESS, Ladder
from equiv.analyses.matching.sections import Part
from equiv.analyses.matching.source import PortSource, moved
from equiv.elements import KINDS, Element
from equiv.elements.element import Parameters
from equiv.elements.quantity import Quantity
from equiv.equations.solution import Solver, State
from equiv.network import Network, Port
from equiv.units import Rectangular, Value, write_value

_NAMES = {"inductor": "Lmatch", "capacitor": "Cmatch", "line": "Line"}
_LOAD = "load at {}"
_ENTRY = "into the match at {}"


class Stress(NamedTuple):
    """Voltage across (V) and current through (A) a part, rms; of a line the larger end's."""

    voltage: float
    current: float


@dataclass(frozen=True)
class Operation:
    """A matching network and its load at work in the original network."""

    power: float
    """Power in the load (W)."""
    stresses: tuple[Stress, ...]
    voltage: complex
    """At the port (V)."""
    current: complex
    """Out of the port into the matching network (A)."""


@dataclass(frozen=True)
class Built:
    """Elements of a ladder between a port and an open pair of nodes."""

    elements: tuple[Element, ...]
    names: tuple[str, ...]
    """The name of the element that each part is."""
    end: str
    """The node where the load goes; the other one is the port's minus."""


def exact(value: complex) -> Value:
    """The exact value that reads back to the same floats."""
    number = Decimal(repr(float(value.real)))
    return Rectangular(number, Decimal(repr(float(value.imag)))) if value.imag else number


def impedance(name: str, nodes: tuple[str, str], value: complex) -> Element:
    """A load of an impedance (ohm); a resistor where it is real."""
    return KINDS["impedance" if value.imag else "resistor"](name, nodes, exact(value))


def built(network: Network, port: Port, start: str, ladder: Ladder, omega: float) -> Built:
    """The parts as elements from node `start` on, lines as they are at a frequency (rad/s)."""
    taken = {*network.elements, *network.node_set, *network.ports}
    elements: list[Element] = []
    names: list[str] = []
    node = start
    for number, part in enumerate(ladder.parts, 1):
        name = free_name(f"{_NAMES[part.kind]}{number}", taken)
        shunt = part.position == "shunt"
        onward = port.minus if shunt else free_name(f"match{number}", taken)
        if part.kind == "line":
            nodes = (node, port.minus, onward, port.minus)
            elements.append(_line(name, nodes, part.value, omega / ladder.omega))
        else:
            elements += _real_part(name, (node, onward), part, ladder, taken)
        names.append(name)
        node = node if shunt else onward
    return Built(tuple(elements), tuple(names), node)


def _real_part(
    name: str, nodes: tuple[str, str], part: Part, ladder: Ladder, taken: set[str]
) -> list[Element]:
    """A coil with its series resistance, a capacitor with its parallel conductance."""
    first, second = nodes
    value = exact(part.value)
    if part.kind == "capacitor":
        g = ladder.losses.conductance(part.value, ladder.omega)
        loss = (
            [KINDS["conductance"](free_name(f"{name}.loss", taken), nodes, exact(g))] if g else []
        )
        return [KINDS["capacitor"](name, nodes, value), *loss]
    r = ladder.losses.resistance(part.value, ladder.omega)
    if not r:
        return [KINDS["inductor"](name, nodes, value)]
    inner = free_name(f"{name}.inner", taken)
    return [
        KINDS["inductor"](name, (first, inner), value),
        KINDS["resistor"](free_name(f"{name}.loss", taken), (inner, second), exact(r)),
    ]


def _line(name: str, nodes: tuple[str, ...], impedance: float, quarters: float) -> Element:
    """A lossless line, so many quarter waves long, by its chain matrix."""
    turn = math.pi / 2 * quarters
    cos = 0.0 if quarters == 1 else math.cos(turn)
    sin = 1.0 if quarters == 1 else math.sin(turn)
    numbers = (complex(cos), 1j * sin * impedance, 1j * sin / impedance, complex(cos))
    return KINDS["twoport"](name, nodes, Parameters((("abcd", tuple(map(exact, numbers))),)))


def free_name(wanted: str, taken: set[str]) -> str:
    """A name that nothing has yet."""
    name, number = wanted, 1
    while name in taken:
        number += 1
        name = f"{wanted}_{number}"
    taken.add(name)
    return name


def operated(
    source: PortSource, ladder: Ladder, load: complex, hertz: float | None = None
) -> Operation:
    """The matching network between port and load, solved with the whole original network.

    `hertz` is another frequency than the source's.
    """
    network = source.network
    frequency = source.frequency
    if hertz is not None:
        network = moved(network, frequency, hertz)
        frequency = network.frequency
    port = source.port
    entry, name = _ENTRY.format(port.name), _LOAD.format(port.name)
    found = built(network, port, entry, ladder, frequency.omega)
    whole = network.with_elements(
        [
            KINDS["short"](f"{entry}.", (port.plus, entry)),
            *found.elements,
            impedance(name, (found.end, port.minus), load),
        ]
    )
    solver = Solver(whole, frequency, "branch-current")
    solver.require_solution()
    state = solver.state()
    current = state.of(Quantity("I", (name,)))
    return Operation(
        power=abs(current) ** 2 * load.real,
        stresses=tuple(
            _stress(state, n, 2 if part.kind == "line" else 1)
            for n, part in zip(found.names, ladder.parts, strict=True)
        ),
        voltage=state.of(Quantity("V", (port.plus, port.minus))),
        current=state.of(Quantity("I", (f"{entry}.",))),
    )


def _stress(state: State, name: str, pairs: int) -> Stress:
    return Stress(
        max(abs(state.of(Quantity("V", (name,), pair))) for pair in range(pairs)),
        max(abs(state.of(Quantity("I", (name,), pair))) for pair in range(pairs)),
    )


def matched_network(source: PortSource, ladder: Ladder, load: complex, words: str) -> Network:
    """The original network with the parts at its port, and a port MATCHED where the load goes.

    Seen from there, its impedance is the conjugate of the load, and the power available the same.
    """
    network, port = source.network, source.port
    found = built(network, port, port.plus, ladder, ladder.omega)
    name = free_name("MATCHED", {*network.elements, *network.node_set, *network.ports})
    ohms = write_value(exact(load), "ohm")
    how = words or "nothing, for it is matched as it is"
    at = write_value(source.frequency.value, source.frequency.unit)
    notes = [f"matched at {port.name} for a load of {ohms} at {name} by {how}"]
    notes += [
        f"{element} is a line of {write_value(exact(part.value), 'ohm')}, "
        f"a quarter wave long at {at}"
        for element, part in zip(found.names, ladder.parts, strict=True)
        if part.kind == "line"
    ]
    whole = network.with_elements(found.elements)
    return replace(
        whole,
        notes=(*network.notes, *notes),
        ports={**network.ports, name: Port(name, found.end, port.minus)},
    )


def through(ladder: Ladder, values: Sequence[float] | None = None, lossy: bool = True) -> Ladder:
    """The ladder with other values of its parts, or without their losses."""
    parts = ladder.parts
    if values is not None:
        parts = tuple(p._replace(value=v) for p, v in zip(parts, values, strict=True))
    return ladder._replace(parts=parts, losses=ladder.losses if lossy else LOSSLESS)
