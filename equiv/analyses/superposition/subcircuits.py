"""The second method: each source's sub-circuit, assembled and solved as a network of its own.

The other independent sources become shorts and opens of the same name, every controlled source
stays, and the sub-circuit is solved in the branch-current form: neither the formulation nor the
factorisation is that of the table's terms.
"""

from __future__ import annotations

import random
from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import NamedTuple

import numpy as np

from equiv.analyses.superposition.terms import ControlledState
from equiv.elements.element import Frequency
from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.equations.scalars import scalar
from equiv.equations.solution import Solver, State
from equiv.errors import EquivError
from equiv.network import Branch, Network, Progress

MOST_SOURCES = 200
MOST_UNKNOWNS = 2000
MOST_DECOMPOSED = 4000
"""Unknowns times sources up to which singular sub-circuits are each decomposed."""
SAMPLE = 8
HOW_CHECKED = {
    "each": "each term found again in its own sub-circuit, branch-current form",
    "none": "terms were not found again by a second method (--check none)",
}
_SEED = 20240901
_NOTHING = 1e-14


class Plan(NamedTuple):
    """A term to be found: a source or group, its members and their numbers among the sources."""

    name: str
    members: tuple[str, ...]
    numbers: list[int]

    def alone(self, u: Numbers) -> Numbers:
        """The sources' values with all but these at zero."""
        out = np.zeros_like(u)
        out[self.numbers] = u[self.numbers]
        return out


@dataclass(frozen=True)
class SubCircuits:
    """How the terms are checked: `each` by its own sub-circuit, by a `sample`, or by `none`."""

    network: Network
    frequency: Frequency
    plans: Sequence[Plan]
    how: str
    states: tuple[State | None, ...] = ()

    @classmethod
    def solve(
        cls,
        network: Network,
        frequency: Frequency,
        plans: Sequence[Plan],
        check: str,
        solver: Solver,
        progress: Progress,
    ) -> SubCircuits:
        """Solve every sub-circuit, where that is what is wanted."""
        unknowns = solver.system.size
        small = len(plans) <= MOST_SOURCES and unknowns <= MOST_UNKNOWNS
        if solver.degenerate is not None and unknowns * len(plans) > MOST_DECOMPOSED:
            # a decomposition for each would take minutes: they share one
            small = False
        if check == "none" or (check == "auto" and not small):
            how = "none" if check == "none" else "sample"
            return cls(network, frequency, plans, how, (None,) * len(plans))
        states: list[State | None] = []
        for number, plan in enumerate(plans):
            progress("sub-circuits", number, len(plans))
            states.append(_alone(network, frequency, plan))
        return cls(network, frequency, plans, "each", tuple(states))

    @property
    def how_in_words(self) -> str:
        """Which terms are checked, and how."""
        if self.how == "sample":
            count = min(2 * SAMPLE, len(self.plans))
            return (
                f"{count} of {len(self.plans)} terms (the {SAMPLE} largest, and others drawn with "
                "a fixed seed) found again in branch-current form"
            )
        return HOW_CHECKED[self.how]

    def checks(
        self, quantity: Quantity, contributions: Sequence[complex | None]
    ) -> list[complex | None]:
        """Each term again, by the second method; None where it was not (or does not exist)."""
        if self.how == "sample":
            return self._sampled(quantity, contributions)
        return [None if state is None else state.of(quantity) for state in self.states]

    def _sampled(
        self, quantity: Quantity, contributions: Sequence[complex | None]
    ) -> list[complex | None]:
        """The largest terms and some drawn ones, from one branch-current factorisation."""
        sizes = np.array([abs(c or 0.0) for c in contributions])
        chosen = set(np.argsort(-sizes, kind="stable")[:SAMPLE].tolist())
        rest = [i for i in range(len(sizes)) if i not in chosen]
        chosen.update(random.Random(_SEED).sample(rest, min(SAMPLE, len(rest))))
        found: list[complex | None] = [None] * len(sizes)
        order = sorted(i for i in chosen if contributions[i] is not None)
        if order:
            solver = self.second_solver
            columns = np.stack([self.plans[i].alone(solver.u) for i in order], axis=1)
            for i, value in zip(order, solver.values(quantity, columns), strict=True):
                found[i] = value
        return found

    @cached_property
    def second_solver(self) -> Solver:
        """The whole network in branch-current form (all sub-circuits share its matrix)."""
        return Solver(self.network, self.frequency, "branch-current")


def _alone(network: Network, frequency: Frequency, plan: Plan) -> State:
    """The solution of one sub-circuit (the nearest where it has none)."""
    return Solver(network.isolate(plan.name), frequency, "branch-current").state()


def why_not(network: Network, frequency: Frequency, name: str) -> str:
    """Why the sub-circuit of a source has no solution, in words."""
    try:
        reasons = Solver(network.isolate(name), frequency, "branch-current").reasons
    except EquivError as error:
        reasons = tuple(d.message for d in error.diagnostics)
    return f"with {name} alone, {'; '.join(reasons)}"


def controlled_states(network: Network, state: State) -> tuple[ControlledState, ...]:
    """What every controlled source senses and gives in a solution."""
    layout = state.system.layout
    nodes = np.append(state.x[: layout.node_count], 0)
    largest = {
        "V": np.abs(state.voltages).max(initial=0),
        "I": np.abs(state.currents).max(initial=0),
    }
    found = []
    for element in network.controlled:
        assert element.senses is not None
        if element.senses.what == "V":
            first, second = layout.nodes_of(element.senses)
            sensed = scalar(nodes[first] - nodes[second])
        else:
            sensed = scalar(state.currents[layout.branch_of_quantity(element.senses)])
        branch = layout.branch_of(Branch(element.name, 0))
        output = (state.voltages if element.output == "V" else state.currents)[branch]
        found.append(
            ControlledState(
                name=element.name,
                kind=element.kind,
                senses=str(element.senses),
                sensed=sensed,
                output=scalar(output),
                unit="V" if element.output == "V" else "A",
                sensed_unit=element.senses.unit,
                reversed=bool(sensed.real < -_NOTHING * largest[element.senses.what]),
            )
        )
    return tuple(found)
