"""Lossless networks that make a load look like the conjugate of a port's impedance.

Everything is written for a complex port impedance and a complex load: what is reactive in either
is taken into the parts beside it. Impedances are in ohm, susceptances in siemens; a part is
named by its position, series or shunt, from the port to the load.

Sources: L, pi and T sections by virtual resistance: C. Bowick, RF Circuit Design, ch. 4 (from
memory); two sections through the geometric mean: D. K. Misra, Radio-Frequency and Microwave
Communication Circuits, ch. 6; quarter-wave line: D. M. Pozar, Microwave Engineering, ch. 5.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from itertools import product
from typing import NamedTuple

_NOTHING = 1e-12
"""A part this much smaller than its surroundings is none."""
_EQUAL = 1e-9


class Part(NamedTuple):
    """A part: `inductor` (H), `capacitor` (F) or `line` (its characteristic impedance, ohm)."""

    kind: str
    position: str
    value: float

    @property
    def unit(self) -> str:
        """The SI unit of the value."""
        return {"inductor": "H", "capacitor": "F", "line": "ohm"}[self.kind]

    @property
    def words(self) -> str:
        """The part in a form such as `series L`."""
        if self.kind == "line":
            return "line"
        return f"{self.position} {'L' if self.kind == 'inductor' else 'C'}"


class Section(NamedTuple):
    """A network from the port to the load, and its loaded Q (None where it has none)."""

    topology: str
    parts: tuple[Part, ...]
    q: float | None

    @property
    def words(self) -> str:
        """The network by its parts."""
        return ", ".join(part.words for part in self.parts)


class _Step(NamedTuple):
    """A part before it is a coil or a capacitor: a reactance in series, a susceptance in shunt."""

    position: str
    size: float
    scale: float
    """What the size is small or large against."""


class _Solution(NamedTuple):
    steps: tuple[_Step, ...]
    q: float


def already_matched(z: complex, load: complex) -> bool:
    """Whether the load is the conjugate of the port's impedance."""
    return abs(load - z.conjugate()) <= _EQUAL * abs(z)


def l_sections(z: complex, load: complex, omega: float) -> tuple[Section, ...]:
    """Every L: up to two with the series part at the port, and two with the shunt part there."""
    found = [*_series_first(z, load), *_shunt_first(z, load)]
    sections = [_section("L", solution, omega) for solution in found]
    different: list[Section] = []
    for section in sections:
        if not any(_same(section, other) for other in different):
            different.append(section)
    return tuple(different)


def pi_sections(z: complex, load: complex, q: float, omega: float) -> tuple[Section, ...]:
    """Every pi whose side of the higher resistance has the given loaded Q.

    Rv = Rhigh/(1 + Q²), the virtual resistance between the two halves; Rhigh and Rlow are the
    parallel resistances of port and load. None where Q is too low.
    """
    near, far = 1 / z, 1 / load
    virtual = max(1 / near.real, 1 / far.real) / (1 + q * q)
    found = []
    for own, other, series in _halves(1 / near.real / virtual, 1 / far.real / virtual):
        steps = (
            _Step("shunt", own * near.real - near.imag, abs(near)),
            _Step("series", series * virtual, virtual),
            _Step("shunt", other * far.real - far.imag, abs(far)),
        )
        found.append(_section("pi", _Solution(steps, q), omega))
    return tuple(found)


def t_sections(z: complex, load: complex, q: float, omega: float) -> tuple[Section, ...]:
    """Every T whose side of the lower resistance has the given loaded Q.

    Rv = Rlow·(1 + Q²), the virtual resistance between the two halves. None where Q is too low.
    """
    virtual = min(z.real, load.real) * (1 + q * q)
    found = []
    for own, other, shunt in _halves(virtual / z.real, virtual / load.real):
        steps = (
            _Step("series", own * z.real - z.imag, abs(z)),
            _Step("shunt", shunt / virtual, 1 / virtual),
            _Step("series", other * load.real - load.imag, abs(load)),
        )
        found.append(_section("T", _Solution(steps, q), omega))
    return tuple(found)


def least_q(topology: str, z: complex, load: complex) -> float:
    """The loaded Q that a pi or T must exceed: there it has become an L."""
    near, far = (1 / z, 1 / load) if topology == "pi" else (z, load)
    ratio = max(near.real / far.real, far.real / near.real)
    return math.sqrt(max(0.0, ratio - 1))


def two_sections(z: complex, load: complex, omega: float) -> tuple[Section, ...]:
    """Two L in cascade, through √(Re Z · Re ZL); none where both resistances are the same."""
    if abs(z.real - load.real) <= _EQUAL * z.real:
        return ()
    middle = complex(math.sqrt(z.real * load.real))
    form = _series_first if z.real < load.real else _shunt_first
    return tuple(
        _section("two-section", _Solution(one.steps + two.steps, max(one.q, two.q)), omega)
        for one, two in product(list(form(z, middle)), list(form(middle, load)))
    )


def quarter_wave(z: complex, load: complex, omega: float) -> tuple[Section, ...]:
    """A line of √(Re Z · Re ZL), a quarter wave long; series parts cancel the reactances.

    None where both resistances are the same: there the line would do nothing.
    """
    if abs(z.real - load.real) <= _EQUAL * z.real:
        return ()
    line = Part("line", "cascade", math.sqrt(z.real * load.real))
    before = _parts((_Step("series", -z.imag, abs(z)),), omega)
    behind = _parts((_Step("series", -load.imag, abs(load)),), omega)
    return (Section("quarter-wave", (*before, line, *behind), None),)


def _series_first(z: complex, load: complex) -> Iterator[_Solution]:
    """Series at the port, shunt across the load: Re 1/(YL + jB) = Re Z."""
    y = 1 / load
    for root in _roots(y.real / z.real - y.real**2, y.real / z.real):
        b = root - y.imag
        x = -z.imag - (1 / complex(y.real, root)).imag
        steps = (_Step("series", x, abs(z)), _Step("shunt", b, abs(y)))
        yield _Solution(steps, abs(root) / y.real)


def _shunt_first(z: complex, load: complex) -> Iterator[_Solution]:
    """Shunt at the port, series to the load: Re 1/(ZL + jX) = Re 1/Z."""
    y = 1 / z
    for root in _roots(load.real / y.real - load.real**2, load.real / y.real):
        x = root - load.imag
        b = -y.imag - (1 / complex(load.real, root)).imag
        steps = (_Step("shunt", b, abs(y)), _Step("series", x, abs(load)))
        yield _Solution(steps, abs(root) / load.real)


def _roots(square: float, scale: float) -> tuple[float, ...]:
    """Both roots; one where they fall together, none where there is no real one."""
    if abs(square) <= _NOTHING * scale:
        return (0.0,)
    return (math.sqrt(square), -math.sqrt(square)) if square > 0 else ()


def _halves(near: float, far: float) -> Iterator[tuple[float, float, float]]:
    """The Q of both halves with every choice of signs, and their sum; they are ratios + 1.

    Left out are opposite halves that cancel: the middle part would be none.
    """
    if min(near, far) <= 1 + _NOTHING:
        return
    one, two = math.sqrt(near - 1), math.sqrt(far - 1)
    for first, second in product((one, -one), (two, -two)):
        if abs(first + second) > _EQUAL * (one + two):
            yield first, second, first + second


def _section(topology: str, solution: _Solution, omega: float) -> Section:
    return Section(topology, _parts(solution.steps, omega), solution.q)


def _parts(steps: tuple[_Step, ...], omega: float) -> tuple[Part, ...]:
    """Coils and capacitors that have these reactances and susceptances."""
    parts = []
    for position, size, scale in steps:
        if abs(size) <= _NOTHING * scale:
            continue
        inductive = (size > 0) == (position == "series")
        value = (
            abs(size) / omega if (position == "series") == inductive else 1 / (omega * abs(size))
        )
        parts.append(Part("inductor" if inductive else "capacitor", position, value))
    return tuple(parts)


def _same(one: Section, other: Section) -> bool:
    return len(one.parts) == len(other.parts) and all(
        a[:2] == b[:2] and math.isclose(a.value, b.value, rel_tol=_EQUAL)
        for a, b in zip(one.parts, other.parts, strict=True)
    )
