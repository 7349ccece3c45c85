"""The parameters of ports in every form that exists, each with its source vector.

Currents j are counted *into* the ports here, as textbooks do for two-ports; the port current i of
the equivalents flows out of `plus` into the load, j = -i:

    z: v = z·j + v0                     h: (v1, j2) = h·(j1, v2) + sources
    y: j = y·v + j0, j0 = -Isc          g: (j1, v2) = g·(v1, j2) + sources
    abcd: (v1, j1) = abcd·(v2, -j2) + sources
    s: b = s·a + b0, with a, b = (v ± R·j)/(2·√R)

Source: IEC 60050-131 (two-port parameters); K. Kurokawa, Power waves and the scattering matrix,
IEEE Trans. Microwave Theory and Techniques 13 (1965), here with real references (from memory).
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, field
from itertools import product

import numpy as np

from equiv.analyses.ports.proof import Equivalent
from equiv.analyses.ports.relation import (
    FORMS,
    OF_TWO_PORTS,
    Sides,
    Solved,
    by_tests,
    sides,
    solved_for,
)
from equiv.analyses.ports.tests import responses
from equiv.elements import KINDS
from equiv.equations.layout import Numbers
from equiv.equations.port_relation import PortRelation, null_space
from equiv.equations.scalars import written
from equiv.equations.solution import source_values
from equiv.network import Network
from equiv.units import say

_MOST_MIXED = 6
"""Ports up to which every mixture of currents and voltages is tried."""
UNITS = {"v": "V", "j": "A", "a": "√W", "b": "√W"}


@dataclass(frozen=True)
class PortForm:
    """Parameters of one form: left = parameters · right + sources, or the reason there are none.

    `terms` has a row for each of `sides.left` and a column for each source.
    """

    form: str
    references: tuple[float, ...]
    """The reference resistance at each port (ohm), which s alone rests on."""
    sides: Sides
    parameters: Numbers | None
    terms: Numbers | None
    reason: str | None
    off: list[float] = field(default_factory=list, compare=False)
    """How far each loading of the proof is off, relative; filled by `proved`."""

    @property
    def sources(self) -> Numbers | None:
        """The source vector: what stands on the left when the right is zero."""
        return None if self.terms is None else self.terms.sum(axis=1)

    def units(self) -> list[list[str]]:
        """The unit of each parameter."""
        names = {"VA": "ohm", "AV": "S"}
        left, right = ([unit_of(name) for name in side] for side in self.sides)
        return [["" if a == b else names[a + b] for b in right] for a in left]


def unit_of(name: str) -> str:
    """The unit of a quantity that stands on a side of a form."""
    return UNITS[name.lstrip("-")[0]]


def in_form(network: Network, e: Equivalent, form: str, references: tuple[float, ...]) -> PortForm:
    """The parameters of some ports in a form: by its own test sources, else by the port relation.

    Errors: none; where the form does not exist its `reason` says why.
    """
    solved, reason = _by_own_tests(network, e, form, references)
    if solved is None:
        solved, why = _by_relation(network, e, form, references)
        reason = reason or why
    both = sides(form, len(e.ports))
    if solved is None:
        return PortForm(form, references, both, None, None, reason)
    return PortForm(form, references, both, solved.parameters, solved.terms, None)


def existing(network: Network, e: Equivalent, references: tuple[float, ...], but: str) -> list[str]:
    """The other forms that exist for some ports."""
    two = len(e.ports) == 2
    forms = [f for f in FORMS if f != but and (two or f not in OF_TWO_PORTS)]
    return [f for f in forms if in_form(network, e, f, references).parameters is not None]


Found = tuple[Solved | None, str | None]


def _by_own_tests(
    network: Network, e: Equivalent, form: str, references: tuple[float, ...]
) -> Found:
    """The tests whose answers are the parameters themselves."""
    if form == "z":
        voltages = e.voltages
        return _solved(e.impedance, voltages), e.no_thevenin
    if form == "y":
        return _solved(e.admittance, None if e.currents is None else -e.currents), e.no_norton
    if form == "s":
        return _by_loaded_tests(network, e, references)
    if form in ("h", "g"):
        return _by_mixed_tests(network, e, sides(form, 2).kinds)
    return None, None


def _solved(parameters: Numbers | None, terms: Numbers | None) -> Solved | None:
    return None if parameters is None or terms is None else Solved(parameters, terms)


def _by_mixed_tests(network: Network, e: Equivalent, kinds: tuple[str, ...]) -> Found:
    """1 A into some ports, 1 V across the others."""
    found, reason = responses(network, e.ports, e.frequency, kinds)
    if found is None:
        return None, reason
    # a response in A is the current out of plus
    signs = np.array([1 if kind == "current" else -1 for kind in kinds])
    found = found * signs[:, None]
    return Solved(found[:, -len(kinds) :], _terms(network, e, found)), None


def _by_loaded_tests(network: Network, e: Equivalent, references: tuple[float, ...]) -> Found:
    """1 A into each port with its reference across it: a = √R/2, b = v/√R - a."""
    count = len(e.ports)
    loads = [
        KINDS["resistor"](f"reference at {p.name}", (p.plus, p.minus), written(r))
        for p, r in zip(e.ports, references, strict=True)
    ]
    found, reason = responses(network.with_elements(loads), e.ports, e.frequency, "current")
    if found is None:
        ohms = " and ".join(dict.fromkeys(say(r, "ohm") for r in references))
        words = (reason or "").removeprefix("with the port open, ")
        return None, f"with {ohms} at the ports, {words}"
    root = np.sqrt(np.array(references))
    waves = found / root[:, None]
    s = 2 * waves[:, -count:] / root - np.eye(count)
    return Solved(s, _terms(network, e, waves)), None


def _terms(network: Network, e: Equivalent, found: Numbers) -> Numbers:
    """What each source (or group) of this frequency gives, at its value."""
    return _gathered(
        e, found * np.append(source_values(network, e.frequency), np.ones(len(e.ports)))
    )


def _gathered(e: Equivalent, columns: Numbers) -> Numbers:
    """A column a source or group, from one a source."""
    parts = [columns[:, list(numbers)].sum(axis=1) for numbers in e.members]
    return np.array(parts).T if parts else np.empty((len(columns), 0))


def _by_relation(
    network: Network, e: Equivalent, form: str, references: tuple[float, ...]
) -> Found:
    """A form from the relation that serves it best."""
    found: list[Solved] = []
    sound = False
    for relation in _relations(network, e):
        if relation.rank != len(e.ports) or len(relation.m) != len(e.ports):
            return None, _unsound(relation, len(e.ports))
        sound = True
        solved = solved_for(relation, form, np.array(references))
        if solved is not None:
            found.append(solved)
    if found:
        return max(found, key=lambda solved: solved.margin), None
    if not sound:
        return None, "no tests at the ports have a solution"
    return None, _undecided(e, form)


def _relations(network: Network, e: Equivalent) -> Iterator[PortRelation]:
    """Relations by test sources of one kind; only where there is none, by others."""
    count = len(e.ports)
    known = False
    for kind, parameters, terms in (
        ("current", e.impedance, e.voltages),
        ("voltage", e.admittance, None if e.currents is None else -e.currents),
    ):
        if parameters is not None and terms is not None:
            known = True
            yield by_tests((kind,) * count, parameters, terms)
    if known:
        return
    mixtures = product(("current", "voltage"), repeat=count if count <= _MOST_MIXED else 0)
    for kinds in mixtures:
        if len(set(kinds)) > 1:
            mixed, _ = _by_mixed_tests(network, e, kinds)
            if mixed is not None:
                yield by_tests(kinds, mixed.parameters, mixed.terms)
                return
    relation = null_space(network, e.ports, e.frequency, source_values(network, e.frequency))
    if relation is not None:
        yield relation._replace(k=_gathered(e, relation.k))


def _unsound(relation: PortRelation, ports: int) -> str:
    if len(relation.m) > ports:
        return "the ports themselves fix more voltages and currents than there are ports"
    return "the network leaves voltages and currents of its ports undecided, whatever is connected"


def _undecided(e: Equivalent, form: str) -> str:
    if form == "abcd":
        one, two = (p.name for p in e.ports)
        return (
            f"nothing passes from {one} to {two}: voltage and current of {two} do not decide "
            f"those of {one}"
        )
    given = ", ".join(sides(form, len(e.ports)).right)
    return f"{given} do not decide the rest, or cannot be chosen freely"
