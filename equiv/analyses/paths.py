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

from equiv.analyses.result import Check
from equiv.analyses.subcircuits import Plan
from equiv.analyses.terms import CLOSURE_LIMIT, FLOOR, Paths, Term
from equiv.elements import KINDS
from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
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
    dead = Solver(dead_network(network), solver.frequency)
    if dead.degenerate is not None:
        return terms
    h = dead.coefficients(quantity)
    number = dead.layout.source_number
    out = []
    for term, plan in zip(terms, plans, strict=True):
        if term.contribution is None:
            out.append(term)
            continue
        direct = sum((complex(h[number[m]]) * _value(solver, m) for m in plan.members), 0j)
        outputs = {c.name: c.output for c in term.controlled} or _outputs(solver, plan)
        through = tuple((name, complex(h[number[name]]) * y) for name, y in outputs.items())
        out.append(replace(term, paths=Paths(direct, through)))
    return out


def _value(solver: Solver, member: str) -> complex:
    return complex(solver.u[solver.layout.source_number[member]])


def _outputs(solver: Solver, plan: Plan) -> dict[str, complex]:
    """What every controlled source gives in a sub-circuit."""
    u: Numbers = plan.alone(solver.u)
    state = solver.state(u)
    return {c.name: state.of(Quantity(c.output, (c.name,))) for c in solver.network.controlled}


def paths_check(quantity: Quantity, terms: Sequence[Term], largest: float) -> Check:
    """That the paths of each term add up to it, relative to Σ|path| over all terms."""
    split = [(t, t.paths) for t in terms if t.paths is not None]
    size = max(sum(p.gross for _, p in split), FLOOR * largest)
    off = max((abs(p.total - t.number) for t, p in split), default=0.0)
    return Check(f"paths against terms, {quantity}", off / size if size else off, CLOSURE_LIMIT)
