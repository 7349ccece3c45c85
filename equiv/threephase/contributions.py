"""What gives the fault current where every EMF is zero: the partial currents, as the fault has them.

Kirchhoff's law for a whole sequence network: the current into the fault is what machines and star
points deliver, less what line charging takes to the reference, and what ideal ratios r take or
give there, (r - 1)·i each, i per unit from the first side on.

Source: IEC 60909-0:2016 (from memory) for the contributions; Kirchhoff's current law.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

import numpy as np

from equiv.threephase.cases import STAR_POINT, FaultTerm, Phases
from equiv.threephase.cases import Sequence as SequenceValues
from equiv.threephase.grouping import Groups
from equiv.threephase.model import Shunt
from equiv.threephase.sequence.connection import term_weights
from equiv.threephase.sequence.faulted import Faulted
from equiv.threephase.sequence.networks import Names, elements_of
from equiv.threephase.sequence.sequences import Charging, Part, Series, ToEarth, amperes_of

REMAINDER = 1e-10
"""What is below this part of the fault current is rounding."""


def contributions(
    found: Faulted, groups: Groups, machines: Sequence[Shunt], partials: Sequence[Phases]
) -> tuple[FaultTerm, ...]:
    """What machines, star points and the network give to the current of a fault."""
    weights = term_weights(found.fault.type)
    values = np.array([
        sum(w * found.delivered(item.name, s) for s, w in enumerate(weights)) for item in machines
    ])  # fmt: skip
    return (
        *groups.terms(values * found.at.amperes, partials),
        *_earthing(found, groups, weights.zero),
        *_network(found),
    )


def _earthing(found: Faulted, groups: Groups, weight: complex) -> Iterator[FaultTerm]:
    """The star points that bring zero-sequence current, other than those of machines."""
    solution = found.solution
    zero = solution.of[0]
    for part in zero.of.parts:
        if not isinstance(part, ToEarth) or part.item.name in groups.sources:
            continue
        if not any(elements_of(part, zero.names, zero.ties)):
            continue
        current = found.delivered(part.item.name, 0)
        if not current:
            continue
        unit = amperes_of(solution.system.buses[part.bus], solution.system.base)
        partial = found.in_phases(SequenceValues(current, 0, 0), part.bus, unit)
        value = complex(weight * current * found.at.amperes)
        name, count = part.item.name, part.item.count
        yield FaultTerm(name, (name,), value, partial, part.bus, STAR_POINT, count)


def _network(found: Faulted) -> Iterator[FaultTerm]:
    """What line charging and ideal ratios give to the current of a fault, all together."""
    total = 0j
    for s, weight in enumerate(term_weights(found.fault.type)):
        of = found.solution.of[s]
        for part in of.of.parts:
            name, factor = _from_reference(part, of.names)
            if factor:
                total += weight * factor * found.through(name, s)
    if abs(total) > REMAINDER * sum(map(abs, found.current)):
        yield FaultTerm("network", (), total * found.at.amperes, kind="network")


def _from_reference(part: Part, names: Names) -> tuple[str, float]:
    """An element, and how much of its current a part brings from the reference."""
    name = part.item.name
    if isinstance(part, Charging):
        return names.charging(name, part.end), -1.0
    return names.element(name), part.ratio - 1.0 if isinstance(part, Series) else 0.0
