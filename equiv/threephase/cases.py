"""What is found for one fault: currents (A, at the faulted bus's own voltage level, rms)."""

from __future__ import annotations

from collections.abc import Mapping
from typing import NamedTuple

TYPES = ("three-phase", "line-ground", "line-line", "line-line-ground")
"""Phase a is the odd one out for `line-ground`; b and c are joined for the last two."""

STAR_POINT = "star point"
"""The kind of what a transformer's earthed star point gives."""
STARS_AND_NETWORK = "star points and network"
"""The name of what star points, line charging and unequal ratios give, where they are together."""


def phase_of_terms(type_: str) -> str:
    """The phase that the terms of a type of fault are about: `a`, or `b` where b and c are joined."""
    return "a" if type_ in ("three-phase", "line-ground") else "b"


class Phases(NamedTuple):
    """A quantity in each phase."""

    a: complex
    b: complex
    c: complex


def largest_phase(of: Phases) -> str:
    """The phase with the largest value; the first of those that differ only by rounding."""
    most = max(map(abs, of))
    return next(name for name, x in zip("abc", of, strict=True) if abs(x) >= most * (1 - 1e-9))


class Sequence(NamedTuple):
    """A quantity in each sequence."""

    zero: complex
    positive: complex
    negative: complex


class FaultTerm(NamedTuple):
    """What one source or group gives to the fault current, or to a relay's.

    `contribution` is in the phase of `FaultCase.phase`; `partial` what the source delivers from
    its own terminals into its own bus during the fault, at the level of `partial_bus`.
    """

    source: str
    members: tuple[str, ...]
    contribution: complex
    partial: Phases | None = None
    partial_bus: str | None = None
    kind: str = ""
    """The kind of the item; `group`; `star point` for that of a transformer, `network` for
    what line charging and unequal ratios give (these two in the equivalent-source basis)."""
    parallel: int = 1
    """How many items give it together: `count` of the file, added up for a group."""


class Relay(NamedTuple):
    """The current into a branch at its end near the relay, from the bus into the branch.

    Where several items are `parallel` the relay is in one of them, and all is of that one.
    `impedance` is the apparent impedance (ohm) of the loop that the fault is in, `infeed_factor`
    the fault-path current over the relay's; None where the relay's current is zero, and where
    `blind` says why the relay does not look at the fault.
    """

    branch: str
    bus: str
    phases: Phases
    terms: tuple[FaultTerm, ...]
    total: complex
    infeed_factor: complex | None
    impedance: complex | None
    parallel: int = 1
    blind: str = ""
    """In words, why it has neither: the fault is at its own bus, or not ahead of it."""


class FaultCase(NamedTuple):
    """One fault at one bus."""

    bus: str
    type: str
    volts: float
    """Nominal voltage of the bus, line to line (V)."""
    phases: Phases
    earth: complex
    """The current to earth, 3·I0."""
    sequence: Sequence
    x_over_r: float | None
    """Of the impedance of the whole fault loop; None where it has no resistance, or no peak."""
    peak_factor: float | None
    peak: float | None
    asymmetrical_rms: float | None
    terms: tuple[FaultTerm, ...]
    total: complex
    """The current of `phase`: the terms sum to it."""
    check: Phases | None = None
    """The phase currents found again in phase coordinates."""
    voltages: Mapping[str, Phases] = {}
    """Phase to earth (V) at each bus during the fault."""
    relays: tuple[Relay, ...] = ()
    reasons: tuple[str, ...] = ()
    """In words, why a current is zero: no path for earth-fault current, and where."""
    no_peak: str = ""
    """In words, why there is no X/R, peak and first-cycle rms: a capacitive loop, no current."""

    @property
    def phase(self) -> str:
        """The phase that the terms are about."""
        return phase_of_terms(self.type)
