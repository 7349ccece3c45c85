"""The equivalents of ports from what is seen there with them open, and with them shorted."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from equiv.analyses.ports.proof import Equivalent
from equiv.analyses.ports.tests import Seen, seen
from equiv.analyses.superposition.subcircuits import Plan
from equiv.elements.element import Frequency
from equiv.equations.layout import Numbers
from equiv.equations.scalars import scalar
from equiv.equations.solution import source_values
from equiv.network import Network, Port


def equivalent(network: Network, ports: tuple[Port, ...], frequency: Frequency) -> Equivalent:
    """The equivalents of some ports at one frequency (see `port`); not proved yet."""
    number = len(ports)
    opened = seen(network, ports, frequency, "current")
    shorted = seen(network, ports, frequency, "voltage")
    u = source_values(network, frequency)
    plans = _plans(network, frequency, u, (opened, shorted))
    z, y = (None if s.response is None else s.response[:, -number:] for s in (opened, shorted))
    return Equivalent(
        ports=ports,
        frequency=frequency,
        sources=tuple(plan.name for plan in plans),
        values=tuple(_value(network, plan, u) for plan in plans),
        impedance=z,
        admittance=None if y is None else -y,
        voltages=_terms(opened, plans, u),
        currents=_terms(shorted, plans, u),
        open_voltage=opened.total,
        short_current=shorted.total,
        members=tuple(tuple(plan.numbers) for plan in plans),
        alone=tuple(_exists(plan, opened) and _exists(plan, shorted) for plan in plans),
        no_thevenin=opened.reason,
        no_norton=shorted.reason,
    )


def _plans(
    network: Network, frequency: Frequency, u: Numbers, responses: Sequence[Seen]
) -> list[Plan]:
    """A term a source at this frequency; a group where some of its members alone have none."""
    here = [k for k, s in enumerate(network.sources) if network.frequency_of(s).same_as(frequency)]
    groups: dict[str, list[int]] = {}
    for k in here:
        group = network.sources[k].options.group
        if group:
            groups.setdefault(group, []).append(k)
    whole = {g for g, members in groups.items() if _needs_all(members, u, responses)}
    plans: dict[str, Plan] = {}
    for k in here:
        source = network.sources[k]
        group = source.options.group
        rescued = group is not None and group in whole
        name = group if rescued and group else source.name
        members = groups[name] if rescued else [k]
        names = tuple(network.sources[m].name for m in members)
        plans.setdefault(name, Plan(name, names, members))
    return list(plans.values())


def _needs_all(members: list[int], u: Numbers, responses: Sequence[Seen]) -> bool:
    """Whether some members alone have no response but all of them together have."""
    for found in responses:
        if found.solver is None or found.alone[members].all():
            continue
        together = np.zeros(len(found.solver.u), found.solver.u.dtype)
        together[members] = u[members]
        if found.solver.consistent(together):
            return True
    return False


def _terms(found: Seen, plans: Sequence[Plan], u: Numbers) -> Numbers | None:
    """What each plan gives at each port."""
    if found.response is None:
        return None
    columns = [found.response[:, plan.numbers] @ u[plan.numbers] for plan in plans]
    return np.array(columns).T if columns else np.empty((len(found.response), 0))


def _exists(plan: Plan, found: Seen) -> bool:
    """Whether a plan alone has a solution (a group is one because it has)."""
    return found.response is None or len(plan.numbers) > 1 or bool(found.alone[plan.numbers[0]])


def _value(network: Network, plan: Plan, u: Numbers) -> tuple[complex, str] | None:
    """The value of a source and what it imposes; None for a group."""
    if plan.members != (plan.name,):
        return None
    return scalar(u[plan.numbers[0]]), network.sources[plan.numbers[0]].output
