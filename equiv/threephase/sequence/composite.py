"""The sequence networks joined at one fault, as one ordinary network that runs as it is.

line-ground: the three in series, the fault's impedance threefold; line-line: positive and
negative in parallel; line-line-ground: all three in parallel; three-phase: the positive alone.
The currents into the fault are those of the elements `into_fault_1`, `_2` and `_0`.

Source: C. L. Fortescue (1918); interconnection of sequence networks: common practice.
"""

from __future__ import annotations

from dataclasses import replace

from equiv.analyses.isolate import Isolation
from equiv.elements import Element
from equiv.elements.quantity import Quantity
from equiv.errors import Diagnostic, DoesNotExistError, UsageError, nearest
from equiv.network import Find, Network
from equiv.threephase.cases import TYPES
from equiv.threephase.loading import require_system
from equiv.threephase.model import OneLine, View
from equiv.threephase.sequence.connection import EARTH_FAULTS
from equiv.threephase.sequence.displacement import no_load_angles
from equiv.threephase.sequence.networks import (
    NAMES,
    REFERENCE,
    SequenceNetwork,
    elements_of,
    made,
    number,
    sequence_network,
)
from equiv.threephase.sequence.sequences import amperes_of, ohms_of
from equiv.units import say

JOINT = "joint"
_REFERENCES = {1: REFERENCE, 2: "reference_2", 0: "reference_0"}
_WORDS = {
    "three-phase": "its current is that of phase a",
    "line-ground": "the current of phase a is three times that of any of them",
    "line-line": "the current of phase b is -j·√3 times it",
    "line-line-ground": "the current of phase b is I0 + a²·I1 + a·I2",
}


def composite(
    system: OneLine | Network,
    bus: str,
    type: str,
    fault_impedance: complex = 0,
    ground_impedance: complex = 0,
    view: View | None = None,
) -> Network:
    """The composite sequence network of one fault, per unit on the base power of the system.

    I1, I2 and I0 into the fault, per unit of the base current at the bus, are its `find`
    quantities. Arguments and errors as those of `fault`; the basis is superposition.
    """
    diagram = require_system(system)
    view = View(case=view.case) if view else View()
    _require_known(diagram, bus, type)
    no_load_angles(diagram)
    ohms = ohms_of(diagram.buses[bus], diagram.base)
    wanted = {"three-phase": (1,), "line-line": (1, 2)}.get(type, (1, 2, 0))
    parts = {s: sequence_network(diagram, view, s) for s in wanted}
    _require_data(parts, bus, type)
    elements: dict[str, Element] = {}
    for s, part in parts.items():
        reference = _REFERENCES[s] if type == "line-ground" else REFERENCE
        for branch in part.parts:
            for element in elements_of(branch, part.names, part.ties, reference):
                elements[element.name] = element
    nodes = {s: part.names.node(bus) for s, part in parts.items()}
    joints = _joined(nodes, type, complex(fault_impedance) / ohms, complex(ground_impedance) / ohms)
    mark = _mark(elements)
    for element in joints:
        elements[f"{element.name}{mark}"] = element._replace(name=f"{element.name}{mark}")
    return replace(
        parts[1].network,
        elements=elements,
        title=f"{diagram.title or 'System'}: {type} fault at {bus}",
        notes=(*_notes(diagram, bus, type), *diagram.notes),
        finds=tuple(_find(element.name, mark) for element in joints),
    )


def isolate(
    system: OneLine | Network,
    source: str,
    bus: str,
    type: str,
    fault_impedance: complex = 0,
    ground_impedance: complex = 0,
    view: View | None = None,
) -> Isolation:
    """The composite sequence network of one fault with one source (or group), the others off.

    Superposing it gives the sequence currents that the source's EMF drives into the fault: its
    term. Arguments and errors as those of `composite`; UsageError where there is no such source.
    """
    network = composite(system, bus, type, fault_impedance, ground_impedance, view)
    return Isolation(network, source=source, subcircuit=network.isolate(source))


def _find(joint: str, mark: str) -> Find:
    """The question for the current of a joint."""
    words = f"{NAMES[int(joint[-1])]}-sequence current into the fault, per unit"
    return Find(Quantity("I", (f"{joint}{mark}",)), words)


def _require_known(system: OneLine, bus: str, type: str) -> None:
    if bus not in system.buses:
        message = f"there is no bus called {bus}"
        raise UsageError(Diagnostic("unknown-bus", message, hint=nearest(bus, system.buses)))
    if type not in TYPES:
        message = f"type is {type}; it is one of {', '.join(TYPES)}"
        raise UsageError(Diagnostic("unknown-choice", message, hint=nearest(type, TYPES)))


def _joined(nodes: dict[int, str], type: str, fault: complex, ground: complex) -> list[Element]:
    """The elements that join the sequence networks, each with the current into the fault."""
    if type == "three-phase":
        return [_path(1, nodes[1], REFERENCE, fault)]
    if type == "line-line":
        return [_path(1, nodes[1], nodes[2], fault)]
    if type == "line-ground":
        return [
            _path(1, nodes[1], _REFERENCES[2], 0j),
            _path(2, nodes[2], _REFERENCES[0], 0j),
            _path(0, nodes[0], REFERENCE, 3 * (fault + ground)),
        ]
    legs = {1: fault, 2: fault, 0: fault + 3 * ground}
    return [_path(s, nodes[s], JOINT, legs[s]) for s in (1, 2, 0)]


def _path(sequence: int, start: str, end: str, impedance: complex) -> Element:
    name = f"into_fault_{sequence}"
    if not impedance:
        return made("short", name, (start, end))
    return made("impedance", name, (start, end), number(impedance))


def _mark(elements: dict[str, Element]) -> str:
    """What makes the joints' names those of no item."""
    mark = ""
    while any(f"into_fault_{s}{mark}" in elements for s in (1, 2, 0)):
        mark += "'"
    return mark


def _notes(system: OneLine, bus: str, type: str) -> tuple[str, ...]:
    at = system.buses[bus]
    base = say(amperes_of(at, system.base), "A", 6)
    phase = say(at.volts / 3**0.5, "V", 6)
    return (
        f"Per unit on {say(system.base, 'VA', 6)}: at {bus} 1 A is {base}, 1 V is {phase}.",
        f"At no load phase a of {bus} is at 0 deg; of the sequence currents, {_WORDS[type]}.",
    )


def _require_data(parts: dict[int, SequenceNetwork], bus: str, type: str) -> None:
    if type not in EARTH_FAULTS:
        return
    ties = parts[0].ties
    item = ties.lacking.get(ties.label[bus])
    if item is not None:
        message = f"no zero-sequence data for {item}, which earth-fault currents at {bus} need"
        raise DoesNotExistError(Diagnostic("no-zero-sequence", message))
