"""What is to be told of any equivalent, and of a port's own resistance."""

from __future__ import annotations

from equiv.analyses.ports.proof import Equivalent
from equiv.analyses.result import Caution

TERMINALS_ALONE = (
    "An equivalent stands for the terminals alone: losses and efficiency inside it are not those "
    "of the network."
)


def resistance_cautions(e: Equivalent) -> list[Caution]:
    """Ports whose resistance is not positive, each by its own name."""
    if not e.thevenin and not e.norton:
        return []
    what = "resistance" if e.thevenin else "conductance"
    found = []
    for port, value in zip(e.ports, e.own_resistances, strict=True):
        # without a Thevenin form a conductance of zero is an ideal current source
        if value > 0 or (value == 0 and not e.thevenin):
            continue
        sign = "zero" if value == 0 else "negative"
        found.append(_not_positive(f"the {what} of {port.name} is {sign}"))
    if not found and (e.least_resistance or 0) < 0:
        found.append(_not_positive(f"together {e.named} can give more than they take"))
    return found


def _not_positive(words: str) -> Caution:
    return Caution(
        "resistance-not-positive",
        f"{words}: this is legal, but the operating point with a load may not be stable",
    )
