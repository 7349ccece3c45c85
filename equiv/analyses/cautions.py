"""What a reader must know before relying on a result."""

from __future__ import annotations

import math
from collections.abc import Iterable
from contextlib import suppress

from equiv.analyses.result import Caution
from equiv.equations.natural import unstable_frequencies
from equiv.equations.solution import Solver
from equiv.errors import UsageError
from equiv.network import Network

_DUTY_WORDS = ("fault", "short circuit", "short-circuit", "arc flash", "prospective")
DUTY = Caution(
    "fault-duty",
    "linear, steady-state values: arcs, saturation and decaying currents are not in them. "
    "Equipment duty, protection settings and labels are the work of a licensed engineer "
    "under the local code.",
)


def about_network(network: Network, headings: Iterable[str] = ()) -> list[Caution]:
    """Warnings that belong to every result of a network."""
    found = [Caution("unstable", _unstable(s)) for s in unstable_frequencies(network)[:1]]
    found += interpolated(network)
    labels = [find.label or "" for find in network.finds]
    words = "\n".join((network.title, *network.notes, *headings, *labels, *network.elements))
    words = words.lower()
    if any(duty in words for duty in _DUTY_WORDS):
        found.append(DUTY)
    return found


def interpolated(network: Network) -> list[Caution]:
    """Parameters from a file that are taken between two of its points.

    A frequency outside its points is left out: only a solution there is refused.
    """
    tables = {e.table.file: e.table for e in network.tabulated if e.table}
    found = []
    for frequency in network.frequencies:
        for table in tables.values():
            with suppress(UsageError):
                between = table.between_words(frequency.hertz)
                if between is None:
                    continue
                message = f"{table.file} is taken linear between its points at {between}"
                found.append(Caution("interpolated", message))
    return found


def _unstable(s: complex) -> str:
    rate = f"+{s.real:.4g} 1/s"
    if s.imag:
        rate += f" ({abs(s.imag) / (2 * math.pi):.4g} Hz)"
    return (
        f"a natural frequency lies in the right half plane, at {rate}: "
        "the network is unstable and this steady state is never reached"
    )


def about_solver(solver: Solver) -> list[Caution]:
    """Warnings from the solution itself: a change of form, or parts that are not determined."""
    found = []
    if solver.degenerate is not None:
        found += [
            Caution("not-unique", f"{reason}; what is given here is unique all the same")
            for reason in solver.reasons
        ]
    elif solver.took_over:
        found.append(
            Caution(
                "branch-current-form",
                "the nodal form would lose its digits here: solved in the branch-current form",
            )
        )
    return found
