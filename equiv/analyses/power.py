"""Powers: own terms, cross terms and the true total. A power is never superposed.

V = Σ V_k and I = Σ I_k make V·I* = Σ V_k·I_k* + Σ_{j<k} (V_j·I_k* + V_k·I_j*): what each source
would give alone, and what each pair gives together. Sources of different frequencies have no
cross term in the mean.
"""

from __future__ import annotations

from collections.abc import Sequence

from equiv.analyses.subcircuits import Plan
from equiv.analyses.terms import FrequencyTerms, Power
from equiv.elements.quantity import Quantity
from equiv.equations.solution import Solver, State
from equiv.errors import Diagnostic, UsageError
from equiv.network import Branch

MOST_SOURCES = 400


def power_at(
    solver: Solver, state: State, plans: Sequence[Plan], quantity: Quantity
) -> FrequencyTerms:
    """The power an element absorbs (VA; its real part in W) as own and cross terms.

    Errors: UsageError where there are too many sources for a matrix of cross terms.
    """
    if len(plans) > MOST_SOURCES:
        raise UsageError(_too_many(quantity, len(plans)))
    place = solver.network.locate(quantity)
    assert isinstance(place, Branch)
    pairs = range(len(solver.network.elements[place.element].pairs))
    count = len(plans)
    own = [0j] * count
    cross = [[0j] * count for _ in range(count)]
    all_on = 0j
    for pair in pairs:
        v, i = (_parts(solver, plans, Quantity(w, quantity.names, pair)) for w in "VI")
        for j in range(count):
            own[j] += v[j] * i[j].conjugate()
            for k in range(j + 1, count):
                cross[j][k] += v[j] * i[k].conjugate() + v[k] * i[j].conjugate()
        branch = solver.layout.branch_of(Branch(place.element, pair))
        all_on += complex(state.voltages[branch]) * complex(state.currents[branch]).conjugate()
    power = Power(
        sources=tuple(plan.name for plan in plans),
        own=tuple(own),
        cross=tuple(map(tuple, cross)),
        total=sum(own) + sum(c for row in cross for c in row),
        all_on=all_on,
    )
    return FrequencyTerms(solver.frequency, (), all_on, power)


def _parts(solver: Solver, plans: Sequence[Plan], quantity: Quantity) -> list[complex]:
    """What each term gives to a voltage or current."""
    h = solver.coefficients(quantity)
    return [complex(h[plan.numbers] @ solver.u[plan.numbers]) for plan in plans]


def _too_many(quantity: Quantity, count: int) -> Diagnostic:
    return Diagnostic(
        "too-many-sources",
        f"{quantity} of {count} sources has {count * (count - 1) // 2} cross terms",
        hint=f"put the sources into at most {MOST_SOURCES} groups and use --by group",
    )
