"""The sub-circuit of one source, of a network or of a three-phase system at a fault."""

from __future__ import annotations

from itertools import islice

from equiv.analyses.isolate import Isolation
from equiv.analyses.isolate import isolate as isolate_network
from equiv.errors import Diagnostic, UsageError
from equiv.network import Network
from equiv.threephase.asked import Ohms, impedance_of, require_place
from equiv.threephase.model import OneLine
from equiv.threephase.sequence.composite import isolate as isolate_system

_MOST_NAMED = 12


def isolate(
    network: Network | OneLine,
    source: str,
    *,
    bus: str | None = None,
    type: str | None = None,
    fault_impedance: Ohms | None = None,
    ground_impedance: Ohms | None = None,
) -> Isolation:
    """The sub-circuit of one independent source (or group), the others switched off.

    Voltage sources become shorts and current sources opens of the same name, with a comment on
    each; every controlled source stays. Of a three-phase system it is the sequence networks,
    joined as the fault at `bus` joins them, per unit, with the EMF of one source (or group).

    Arguments, for three-phase systems alone: `bus`, where the fault is; `type` (`three-phase` if
    none is given), `fault_impedance` and `ground_impedance` (ohm) as those of `fault`.
    Errors: UsageError where there is no such source or group, or no bus is named.
    """
    options = {"bus": bus, "type": type, "fault impedance": fault_impedance,
               "ground impedance": ground_impedance}  # fmt: skip
    if not isinstance(network, OneLine):
        asked = next((name for name, word in options.items() if word is not None), None)
        if asked is not None:
            raise UsageError(_no_fault(network, asked))
        return isolate_network(network, source)
    if bus is None:
        raise UsageError(_no_bus(network))
    kind = type or "three-phase"
    in_fault = impedance_of(fault_impedance or 0, "fault impedance")
    to_earth = impedance_of(ground_impedance or 0, "ground impedance")
    require_place((kind,), to_earth)
    return isolate_system(network, source, bus, kind, in_fault, to_earth)


def _no_fault(network: Network, asked: str) -> Diagnostic:
    return Diagnostic(
        "not-three-phase",
        f"a {asked} of a fault was given, but {network.origin.name or 'this network'} does not "
        "describe a three-phase system",
    )


def _no_bus(system: OneLine) -> Diagnostic:
    some = ", ".join(islice(system.buses, _MOST_NAMED))
    more = ", …" if len(system.buses) > _MOST_NAMED else ""
    return Diagnostic(
        "no-bus",
        f"{system.origin.name or 'this text'} describes a three-phase system: its sub-circuits "
        "are those of a fault, and no bus was named",
        hint=f"name one: --bus BUS --type TYPE; buses: {some}{more}",
    )
