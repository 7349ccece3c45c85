"""The load that takes most power under a rule, and what it takes in the original network.

Sources: maximum power transfer, conjugate, resistive, and with the angle or the reactance held:
J. O. Bird, Electrical Circuit Theory and Technology, ch. 35; W. H. Hayt, J. E. Kemmerly,
Engineering Circuit Analysis (from memory).
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Callable
from dataclasses import dataclass
from decimal import Decimal

from equiv.analyses.matching.build import impedance
from equiv.analyses.matching.source import PortSource
from equiv.analyses.matching.words import Words
from equiv.elements import KINDS, Element
from equiv.elements.element import Parameters
from equiv.elements.quantity import Quantity
from equiv.equations.solution import Solver, State

_STEP = 0.01
"""How far away, relatively, a load's neighbours are: far enough for their loss to be seen."""
_NAME = "load at {}"


@dataclass(frozen=True)
class LoadMatch:
    """A load (ohm) at the port, and what it takes there.

    `power` (W) is that of the equivalent, `found` that in the original network; `excess` is the
    largest relative gain of power in a neighbouring load, None where the load is no maximum.
    """

    rule: str
    impedance: complex
    power: float
    found: float
    voltage: complex
    current: complex
    efficiency: float | None
    no_efficiency: str | None
    """Why there is no efficiency."""
    excess: float | None
    mismatch_loss: float
    ratio: float | None = None

    @property
    def difference(self) -> float:
        """The power in the original network against that of the equivalent."""
        return abs(self.found - self.power) / self.power


@dataclass(frozen=True)
class _Choice:
    """A load made by one or two numbers, which its neighbours have a little different."""

    rule: str
    numbers: tuple[float, ...]
    make: Callable[..., complex]
    is_maximum: bool = True
    load: complex | None = None
    """What stands behind the ideal transformer, whose ratio is the only number."""

    def neighbours(self) -> list[tuple[float, ...]]:
        """The numbers with each of them a little smaller and larger."""
        if not self.is_maximum:
            return []
        size = max(map(abs, self.numbers))
        # a part that is zero is moved by a part of the others
        steps = [_STEP * (abs(number) or size) for number in self.numbers]
        return [
            (*self.numbers[:index], self.numbers[index] + sign * step, *self.numbers[index + 1 :])
            for index, step in enumerate(steps)
            for sign in (-1, 1)
        ]


def loads_of(source: PortSource, by: str, words: Words) -> tuple[LoadMatch, ...]:
    """The loads of a rule, or of all; with a given load, that load as it is beside them.

    At DC the conjugate is the resistance, so that one of them is enough.
    """
    every = by == "all"
    rules: dict[str, Callable[[], LoadMatch]] = {
        "conjugate": lambda: conjugate(source),
        "resistive": lambda: resistive(source),
    }
    if every and not source.frequency.omega:
        del rules["conjugate"]
    angle, reactance, load = words.angle, words.reactance, words.load
    if angle is not None:
        rules["angle"] = lambda: fixed_angle(source, angle)
    if reactance is not None:
        rules["reactance"] = lambda: fixed_reactance(source, reactance.real)
    if load is not None:
        rules["given"] = lambda: given_load(source, load)
        rules["ratio"] = lambda: transformer_ratio(source, load)
    chosen = {by, "given"} if by in rules else {"conjugate", "given"}
    return tuple(make() for rule, make in rules.items() if every or rule in chosen)


def conjugate(source: PortSource) -> LoadMatch:
    """ZL = Z*: all of the available power."""
    z = source.impedance
    numbers = (z.real, -z.imag) if source.frequency.omega else (z.real,)
    return _matched(source, _Choice("conjugate", numbers, _rectangular))


def resistive(source: PortSource) -> LoadMatch:
    """RL = |Z|: the most that a resistance takes."""
    return _matched(source, _Choice("resistive", (abs(source.impedance),), _rectangular))


def fixed_angle(source: PortSource, angle: float) -> LoadMatch:
    """|ZL| = |Z| at a given angle (rad): the most at that power factor."""

    def make(size: float) -> complex:
        return cmath.rect(size, angle)

    return _matched(source, _Choice("angle", (abs(source.impedance),), make))


def fixed_reactance(source: PortSource, reactance: float) -> LoadMatch:
    """RL = |Z + jXL| with XL given (ohm)."""

    def make(resistance: float) -> complex:
        return complex(resistance, reactance)

    best = abs(source.impedance + 1j * reactance)
    return _matched(source, _Choice("reactance", (best,), make))


def transformer_ratio(source: PortSource, load: complex) -> LoadMatch:
    """n1:n2 with (n1/n2)²·|ZL| = |Z|: the ideal transformer that gives a load the most."""

    def make(ratio: float) -> complex:
        return ratio * ratio * load

    ratio = math.sqrt(abs(source.impedance) / abs(load))
    return _matched(source, _Choice("ratio", (ratio,), make, load=load))


def given_load(source: PortSource, load: complex) -> LoadMatch:
    """The load as it is, without any network."""
    return _matched(source, _Choice("given", (load.real, load.imag), _rectangular, False))


def _rectangular(resistance: float, reactance: float = 0.0) -> complex:
    return complex(resistance, reactance)


def _matched(source: PortSource, choice: _Choice) -> LoadMatch:
    """The load in the original network, and its neighbours there."""
    load = choice.make(*choice.numbers)
    solver, state, found = _connected(source, choice, choice.numbers)
    others = [_connected(source, choice, numbers)[2] for numbers in choice.neighbours()]
    port = source.port
    voltage = state.of(Quantity("V", (port.plus, port.minus)))
    power = source.power(load)
    delivered, why = _delivered(source, solver, state)
    return LoadMatch(
        rule=choice.rule,
        impedance=load,
        power=power,
        found=found,
        voltage=voltage,
        current=voltage / load,
        efficiency=found / delivered if delivered else None,
        no_efficiency=why,
        excess=max(0.0, max(others) / found - 1) if others else None,
        mismatch_loss=10 * math.log10(source.available_power / power) + 0.0,
        ratio=choice.numbers[0] if choice.load is not None else None,
    )


def _connected(
    source: PortSource, choice: _Choice, numbers: tuple[float, ...]
) -> tuple[Solver, State, float]:
    """The original network with the load (and its transformer) at the port; the load's power."""
    port = source.port
    name = _NAME.format(port.name)
    nodes = (port.plus, port.minus)
    elements: list[Element] = []
    load = choice.load
    if load is None:
        load = choice.make(*numbers)
    else:
        (ratio,) = numbers
        inner = f"secondary at {port.name}"
        turns = Parameters((("ratio", (Decimal(repr(ratio)), Decimal(1))),))
        ends = (*nodes, inner, port.minus)
        elements.append(KINDS["transformer"](f"transformer at {port.name}", ends, turns))
        nodes = (inner, port.minus)
    elements.append(impedance(name, nodes, load))
    solver = Solver(source.network.with_elements(elements), source.frequency, "branch-current")
    solver.require_solution()
    asked = Quantity("I", (name,))
    solver.require_unique(asked)
    state = solver.state()
    return solver, state, abs(state.of(asked)) ** 2 * load.real


def _delivered(source: PortSource, solver: Solver, state: State) -> tuple[float | None, str | None]:
    """The power (W) of the independent sources that deliver; None, and why, if there is none."""
    powers = []
    for element in source.network.sources:
        quantities = Quantity("V", element.nodes), Quantity("I", (element.name,))
        if not all(map(solver.unique, quantities)):
            return None, f"the power of {element.name} is not determined"
        v, i = map(state.of, quantities)
        powers.append(-(v * i.conjugate()).real)
    largest = max(map(abs, powers), default=0.0)
    delivered = sum(power for power in powers if power > 1e-12 * largest)
    return (delivered, None) if delivered else (None, "no independent source delivers power")
