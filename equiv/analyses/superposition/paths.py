"""Terms by their paths: the direct part, and the part through each controlled source.

With every controlled source made an independent one (a dead one is a short or an open), the
coefficient h⁰ of each is found; a term is h⁰_k·u_k + Σ_j h⁰_j·(output of j in sub-circuit k).

Source: W. M. Leach, On the application of superposition to dependent sources in circuit analysis
(2009, from memory).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal

import numpy as np

from equiv.analyses.result import Check
from equiv.analyses.superposition.subcircuits import MOST_SOURCES, MOST_UNKNOWNS, Plan
from equiv.analyses.superposition.terms import Paths, Term, limit_of
from equiv.elements import KINDS
from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.equations.scalars import scalar, vector
from equiv.equations.solution import Solver
from equiv.network import Network


def dead_network(network: Network) -> Network:
    """The network with every controlled source an independent one of 1 V or 1 A."""
    kinds = {"V": KINDS["voltage"], "I": KINDS["current"]}
    return network.replacing(
        {c.name: kinds[c.output](c.name, c.nodes, Decimal(1)) for c in network.controlled}
    )


def paths_of(
    network: Network, solver: Solver, quantity: Quantity, terms: list[Term], plans: Sequence[Plan]
) -> list[Term]:
    """The terms with their paths; unchanged where the dead network decides nothing."""
    if not terms:
        return terms
    dead = Solver(dead_network(network), solver.frequency)
    if dead.degenerate is not None:
        return terms
    h = dead.coefficients(quantity)
    drives = _drives(dead, solver, plans)
    few = len(plans) <= MOST_SOURCES and dead.system.size <= MOST_UNKNOWNS
    # what is smaller than rounding in the dead network is no path
    limits = dead.rounding(quantity, drives) if few else np.zeros(len(plans))
    number = dead.layout.source_number
    controlled = [(c.name, number[c.name]) for c in network.controlled]
    out = []
    for k, (term, plan) in enumerate(zip(terms, plans, strict=True)):
        if term.contribution is None:
            out.append(term)
            continue
        parts = np.where(np.abs(h * drives[:, k]) > limits[k], h * drives[:, k], 0)
        direct = scalar(parts[[number[m] for m in plan.members]].sum())
        through = tuple((name, scalar(parts[n])) for name, n in controlled)
        out.append(replace(term, paths=Paths(direct, through)))
    return out


def _drives(dead: Solver, solver: Solver, plans: Sequence[Plan]) -> Numbers:
    """The dead network's sources in each sub-circuit: its own, and the controlled ones' outputs."""
    u = np.stack([plan.alone(solver.u) for plan in plans], axis=1)
    number, own = dead.layout.source_number, solver.layout.source_number
    drives = np.zeros((len(dead.u), len(plans)), np.result_type(u, solver.system.dtype))
    for name, row in own.items():
        drives[number[name]] = u[row]
    for c in solver.network.controlled:
        output = Quantity(c.output, (c.name,))
        values = vector(solver.values(output, u))
        values = np.where(np.abs(values) > solver.rounding(output, u), values, 0)
        drives[number[c.name]] = values.real if drives.dtype == float else values
    return drives


def paths_check(network: Network, quantity: Quantity, terms: Sequence[Term]) -> Check:
    """That the paths of each term add up to it, relative to Σ|path| over all terms."""
    split = [(t, t.paths) for t in terms if t.paths is not None]
    size = sum(p.gross for _, p in split)
    off = max((abs(p.total - t.number) for t, p in split), default=0.0)
    name, limit = f"paths against terms, {quantity}", limit_of(network)
    return Check(name, off / size if size else off, limit)
