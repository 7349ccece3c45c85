"""Powers: own terms, cross terms and the true total. A power is never superposed.

V = Σ V_k and I = Σ I_k make V·I* = Σ V_k·I_k* + Σ_{j<k} (V_j·I_k* + V_k·I_j*): what each source
would give alone, and what each pair gives together. Sources of different frequencies have no
cross term in the mean.
"""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from equiv.analyses.superposition.subcircuits import Plan
from equiv.analyses.superposition.term_maker import Existence, Rounding, TermMaker
from equiv.analyses.superposition.terms import FrequencyTerms, Power
from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.equations.scalars import scalar, vector
from equiv.equations.solution import Solver, State
from equiv.errors import Diagnostic, UsageError

MOST_SOURCES = 400


def power_at(
    solver: Solver,
    state: State,
    plans: Sequence[Plan],
    existence: Existence,
    rounding: Rounding | None,
    quantity: Quantity,
) -> FrequencyTerms:
    """The power an element absorbs (VA; its real part in W) as own and cross terms.

    Errors: UsageError where there are too many sources for a matrix of cross terms.
    """
    if len(plans) > MOST_SOURCES:
        raise UsageError(_too_many(quantity, len(plans)))
    count = len(plans)
    products = np.zeros((count, count), object if solver.network.exact else complex)
    all_on, size = 0j, 0.0
    for pair in range(len(solver.network.elements[quantity.names[0]].pairs)):
        makers = [TermMaker(solver, Quantity(w, quantity.names, pair), rounding) for w in "VI"]
        v, i = (vector(maker.numbers(plans)) for maker in makers)
        products += np.outer(v, np.conj(i))
        volts, amperes = (maker.all_on(state) for maker in makers)
        all_on += volts * amperes.conjugate()
        size += float(np.abs(v).sum() * np.abs(i).sum())
    reasons = existence.reasons(quantity)
    exists = [reason is None for reason in reasons]
    power = Power(
        sources=tuple(plan.name for plan in plans),
        own=tuple(scalar(products[j, j]) if exists[j] else None for j in range(count)),
        cross=tuple(
            tuple(_cross(products, exists, j, k) for k in range(count)) for j in range(count)
        ),
        all_on=all_on,
        size=size,
        reasons=tuple(reasons),
    )
    return FrequencyTerms(solver.frequency, (), all_on, power)


def _cross(products: Numbers, exists: Sequence[bool], j: int, k: int) -> complex | None:
    """What a pair gives together; nothing on and below the diagonal."""
    if k <= j:
        return scalar(0) if products.dtype == object else 0j
    return scalar(products[j, k] + products[k, j]) if exists[j] and exists[k] else None


def _too_many(quantity: Quantity, count: int) -> Diagnostic:
    return Diagnostic(
        "too-many-sources",
        f"{quantity} of {count} sources has {count * (count - 1) // 2} cross terms",
        hint=f"put the sources into at most {MOST_SOURCES} groups and use --by group",
    )
