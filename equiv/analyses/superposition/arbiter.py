"""Where the two floating-point methods disagree, exact rational arithmetic decides.

Each term is compared with the exact one: the method that is off has lost its digits. Values that
are irrational (ω of a frequency in hertz, the cosine of an angle) are taken as the rational numbers
that their floats are, for both methods have started from these floats.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from typing import NamedTuple

from equiv.analyses.superposition.terms import (
    FLOOR,
    TERM_LIMIT,
    ControlledState,
    FrequencyTerms,
    Paths,
    Power,
    Term,
)
from equiv.equations.solution import Solver
from equiv.network import Network

LARGEST = 200
"""Unknowns up to which exact arithmetic decides."""
MOST_WORK = 2000
"""Unknowns times sub-circuits up to which the sub-circuits too are solved exactly."""


class Methods(NamedTuple):
    """The terms of every quantity by the two methods and by exact arithmetic.

    `form` is the form of the first method; the second is that of the sub-circuits.
    """

    first: Sequence[FrequencyTerms]
    second: Sequence[FrequencyTerms]
    exact: Sequence[FrequencyTerms]
    form: str


class Verdict(NamedTuple):
    """The terms as exact arithmetic has them, in floats, and which method was off, in words."""

    found: list[FrequencyTerms]
    words: str
    both: bool
    """Neither method kept its digits."""


def may_decide(network: Network, solver: Solver) -> bool:
    """Whether a disagreement is small enough a case to be decided exactly."""
    return not network.exact and solver.degenerate is None and solver.system.size <= LARGEST


def exact_solver(solver: Solver) -> Solver:
    """The same network at the same frequency in exact arithmetic."""
    return Solver(replace(solver.network, arithmetic="nearest"), solver.frequency)


def decide(methods: Methods) -> Verdict | None:
    """The exact terms, checked by the method that kept its digits, and the verdict on both.

    None where neither is off, but for the rounding of what is nothing.
    """
    rows = list(zip(methods.first, methods.second, methods.exact, strict=True))
    off = [
        max(_worst(true, [t.contribution for t in one.terms]) for one, _, true in rows),
        max(_worst(true, _checks(other)) for _, other, true in rows),
    ]
    lost = [size > TERM_LIMIT for size in off]
    if not any(lost):
        return None
    found = []
    for one, other, true in rows:
        checks = [t.check for t in other.terms]
        found.append(in_floats(true, [t.contribution for t in one.terms] if lost[1] else checks))
    return Verdict(found, _words(methods.form, off, lost), all(lost))


def _checks(terms: FrequencyTerms) -> list[complex | None]:
    """What the sub-circuits give, or the branch-current form of the whole network."""
    return [t.contribution if t.check is None else t.check for t in terms.terms]


def _worst(true: FrequencyTerms, found: Sequence[complex | None]) -> float:
    """The largest difference of a term from the exact one, relative (0 where there is none)."""
    floor = FLOOR * true.arithmetic_sum
    off = [
        abs(value - term.contribution) / max(abs(term.contribution), floor)
        for term, value in zip(true.terms, found, strict=False)
        if term.contribution is not None and value is not None and floor
    ]
    return max(off, default=0.0)


def _words(form: str, off: Sequence[float], lost: Sequence[bool]) -> str:
    second = "branch-current form"
    names = [f"{form} form", second]
    if form != "nodal":
        names = [f"{second} of the whole network", f"{second} of the sub-circuits"]
    if all(lost):
        return (
            f"the {names[0]} and the {names[1]} have both lost digits here (terms off by "
            f"{off[0]:.1e} and {off[1]:.1e} of themselves): exact rational arithmetic gives the "
            "terms"
        )
    bad = lost.index(True)
    return (
        f"the {names[bad]} has lost digits here (a term is off by {off[bad]:.1e} of itself): exact "
        f"rational arithmetic gives the terms; the {names[1 - bad]} agrees with it, as the check"
    )


def in_floats(at: FrequencyTerms, checks: Sequence[complex | None]) -> FrequencyTerms:
    """The terms as floating-point numbers, with their checks."""
    terms = [_term(t) for t in at.terms]
    if len(checks) == len(terms):
        terms = [replace(t, check=c) for t, c in zip(terms, checks, strict=True)]
    power = None if at.power is None else _power(at.power)
    return replace(at, terms=tuple(terms), all_on=complex(at.all_on), power=power)


def _number(value: complex | None) -> complex | None:
    return None if value is None else complex(value)


def _term(t: Term) -> Term:
    paths = None
    if t.paths is not None:
        through = tuple((name, complex(part)) for name, part in t.paths.through)
        paths = Paths(complex(t.paths.direct), through)
    return replace(
        t,
        value=_number(t.value),
        coefficient=_number(t.coefficient),
        contribution=_number(t.contribution),
        check=_number(t.check),
        controlled=tuple(map(_state, t.controlled)),
        parts=tuple(map(_term, t.parts)),
        paths=paths,
    )


def _state(s: ControlledState) -> ControlledState:
    return replace(s, sensed=complex(s.sensed), output=complex(s.output))


def _power(p: Power) -> Power:
    return replace(
        p,
        own=tuple(map(_number, p.own)),
        cross=tuple(tuple(map(_number, row)) for row in p.cross),
        all_on=complex(p.all_on),
    )
