"""The equivalents of ports as formulas, from one denominator and its numerators."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal
from typing import NamedTuple

from equiv.elements import KINDS
from equiv.elements.quantity import Quantity
from equiv.equations.symbolic.answer import Answer
from equiv.equations.symbolic.bordered import Place
from equiv.equations.symbolic.expression import (
    ONE,
    ZERO,
    Expression,
    Name,
    collected,
    negated,
    product,
    quotient,
    total,
)
from equiv.equations.symbolic.nesting import Where
from equiv.equations.symbolic.sequence import SingularError
from equiv.equations.symbolic.solver import FormulaSolver
from equiv.network import Network, Port


class Entry(NamedTuple):
    """A formula by itself (`top` over `bottom`), and as tables have it (`above` over `under`)."""

    top: Expression
    bottom: Expression
    above: Expression
    under: Expression

    @property
    def short(self) -> Expression:
        """With numerators and denominators by their names."""
        return quotient(self.above, self.under)

    @property
    def whole(self) -> Expression:
        """Complete in itself but for the named parts."""
        return quotient(self.top, self.bottom)

    def negated(self) -> Entry:
        """Minus the formula."""
        return self._replace(top=negated(self.top), above=negated(self.above))


Matrix = tuple[tuple[Entry, ...], ...]


@dataclass(frozen=True)
class Side:
    """One equivalent: a row of terms a port (V or A), and a matrix (ohm or S).

    `thevenin`: v = Voc - Z·i; `norton`: i = Isc - Y·v.
    """

    terms: Matrix
    matrix: Matrix

    def total(self, port: int, chosen: Sequence[int] | None = None) -> Entry:
        """The sum of a port's terms, or of some of them."""
        row = self.terms[port]
        if chosen is not None:
            row = tuple(row[k] for k in chosen)
        top = total([entry.top for entry in row])
        above = total([entry.above for entry in row])
        first = row[0] if row else self.matrix[port][0]
        return Entry(top, first.bottom, above, first.under)


@dataclass(frozen=True)
class PortFormulas:
    """The formulas of both equivalents; one that does not exist is None, with the reason."""

    ports: tuple[Port, ...]
    solver: FormulaSolver
    thevenin: Side | None
    norton: Side | None
    no_thevenin: str | None
    no_norton: str | None
    answers: tuple[Answer, ...]
    """Those with the ports open, one a port; then those with them shorted, where these were made."""
    where: Where
    wrong: tuple[tuple[str, int], ...]
    """What was proved, and how many formulas differ."""
    impedance_name: str = ""


NO_THEVENIN = "D = 0 whatever the values are: with the port open there is no unique solution"
NO_NORTON = (
    "Nz = 0 whatever the values are: the impedance is zero, and the shorted port has no unique "
    "solution"
)
NO_OPEN = "with all these ports open there is no unique solution, whatever the values are"
NO_SHORT = "with all these ports shorted there is no unique solution, whatever the values are"
NEITHER = (
    "D = 0 and Nz = 0 whatever the values are: the port fixes both its voltage and its current, "
    "or neither"
)


def port_formulas(network: Network, solver: FormulaSolver, ports: Sequence[Port]) -> PortFormulas:
    """The formulas of one port, or the coupled ones of several."""
    places = [
        Place(solver.layout.node_number[p.plus], solver.layout.node_number[p.minus]) for p in ports
    ]
    opened = _opened(solver, places)
    if len(ports) == 1 and opened is not None and opened[0].family is not None:
        return _from_triple(network, solver, ports[0], places[0], opened[0])
    return _from_both(network, solver, tuple(ports), places, opened)


def _opened(solver: FormulaSolver, places: Sequence[Place]) -> list[Answer] | None:
    """The voltages of all ports, of every source and test current; None where D = 0 is long."""
    try:
        return [solver.answer(place, places) for place in places]
    except SingularError:
        return None


def _from_triple(
    network: Network, solver: FormulaSolver, port: Port, place: Place, answer: Answer
) -> PortFormulas:
    """Voc = Nv/D, Zth = Nz/D, Isc = Nv/Nz: existence is read off D and Nz."""
    d, nz = answer.exists, answer.numerators[-1] != ZERO
    tops = _tops(solver, answer)
    impedance = answer.numerators[-1]
    name = "Nz" if nz and _worth_a_name(impedance) else ""
    under = Name("Nz") if name else impedance
    down = impedance if answer.style == "nested" else under
    thevenin = norton = None
    if d:
        z = Entry(down, answer.bottom, under, answer.under)
        terms = tuple(Entry(top, answer.bottom, top, answer.under) for top in tops)
        thevenin = Side((terms,), ((z,),))
    if nz:
        y = Entry(answer.bottom, down, answer.under, under) if d else Entry(ZERO, down, ZERO, under)
        norton = Side((tuple(Entry(top, down, top, under) for top in tops),), ((y,),))
    wrong = []
    if d:
        wrong.append((f"the open port {port.name}", solver.disagreements(answer, place, [place])))
    where = _where([answer], [("Nz", impedance)] if name else [])
    if nz:
        fractions = [(top, impedance) for top in answer.numerators[:-1]]
        fractions.append((negated(answer.denominator) if d else ZERO, impedance))
        short = solver.beside(_shorted(network, (port,)))
        differing = short.differing(fractions, where, _current(short, network, 0))
        wrong.append((f"the shorted port {port.name}", differing))
    reasons = (
        None if d else NO_THEVENIN if nz else NEITHER,
        None if nz else NO_NORTON if d else NEITHER,
    )
    return PortFormulas(
        (port,), solver, thevenin, norton, *reasons, (answer,), where, tuple(wrong), name
    )


def _from_both(
    network: Network,
    solver: FormulaSolver,
    ports: tuple[Port, ...],
    places: Sequence[Place],
    opened: list[Answer] | None,
) -> PortFormulas:
    """The impedances with all ports open, the admittances with all of them shorted."""
    count = len(solver.sources)
    answers: list[Answer] = []
    wrong: list[tuple[str, int]] = []
    thevenin = norton = None
    if opened is not None and all(a.exists for a in opened):
        thevenin = _side(solver, opened, count)
        answers += opened
        for port, place, answer in zip(ports, places, opened, strict=True):
            differing = solver.disagreements(answer, place, places)
            wrong.append((f"the open port {port.name}", differing))
    short = solver.beside(_shorted(network, ports))
    currents = [_current(short, network, number) for number in range(len(ports))]
    shorted = _answers(short, currents)
    if shorted is not None:
        side = _side(solver, shorted, count)
        minus = tuple(tuple(entry.negated() for entry in row) for row in side.matrix)
        norton = Side(side.terms, minus)
        answers += shorted
        for port, current, answer in zip(ports, currents, shorted, strict=True):
            differing = short.disagreements(answer, current)
            wrong.append((f"the shorted port {port.name}", differing))
    return PortFormulas(
        ports, solver, thevenin, norton,
        None if thevenin else NO_OPEN, None if norton else NO_SHORT,
        tuple(answers), _where(answers, []), tuple(wrong),
    )  # fmt: skip


def _answers(solver: FormulaSolver, currents: Sequence[Quantity]) -> list[Answer] | None:
    try:
        found = [solver.answer(current) for current in currents]
    except SingularError:
        return None
    return found if all(answer.exists for answer in found) else None


def _side(solver: FormulaSolver, answers: Sequence[Answer], count: int) -> Side:
    def entry(answer: Answer, top: Expression) -> Entry:
        return Entry(top, answer.bottom, top, answer.under)

    terms = tuple(tuple(entry(answer, top) for top in _tops(solver, answer)) for answer in answers)
    matrix = tuple(tuple(entry(a, top) for top in a.numerators[count:]) for a in answers)
    return Side(terms, matrix)


def _tops(solver: FormulaSolver, answer: Answer) -> list[Expression]:
    """The numerator of each source, times its value."""
    pairs = zip(map(solver.value, range(len(solver.sources))), answer.numerators, strict=False)
    return [collected(product(value, numerator)) for value, numerator in pairs]


def _shorted(network: Network, ports: Sequence[Port]) -> Network:
    """The network with a voltage source at every port, whose current is the port's."""
    elements = [
        KINDS["voltage"](name, (port.plus, port.minus), Decimal(0))
        for name, port in zip(_names(network, len(ports)), ports, strict=True)
    ]
    return network.with_elements(elements)


def _names(network: Network, count: int) -> list[str]:
    """Names for the sources at ports that no element has."""
    found: list[str] = []
    number = 0
    while len(found) < count:
        number += 1
        if f"port{number}" not in network.elements:
            found.append(f"port{number}")
    return found


def _current(short: FormulaSolver, network: Network, number: int) -> Quantity:
    """The current out of a shorted port, through the source there."""
    name = list(short.made.network.elements)[len(network.elements) + number]
    return Quantity("I", (name,))


def _where(answers: Sequence[Answer], more: Where) -> Where:
    """The named parts of all answers, each once."""
    found = dict(pair for answer in answers for pair in answer.all_where)
    return [*found.items(), *more]


def _worth_a_name(expression: Expression) -> bool:
    return not isinstance(expression, Name) and expression != ONE
