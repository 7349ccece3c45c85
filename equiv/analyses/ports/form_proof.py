"""What proves parameters: loads and feeds at the ports of the original network."""

from __future__ import annotations

from decimal import Decimal

import numpy as np

from equiv.analyses.ports.forms import PortForm
from equiv.analyses.ports.proof import AC_LOADS, DC_LOADS, Equivalent, base_resistance
from equiv.elements import KINDS, Element
from equiv.elements.element import Options
from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.equations.scalars import like, written
from equiv.equations.solution import Solver
from equiv.network import Network

_FEWEST = 3


def proved(network: Network, e: Equivalent, form: PortForm) -> float | None:
    """How far the parameters are off under loads in the original network, relative.

    Different loads at the ports each time, and a current fed into one port after another, so that
    every parameter is needed. Voltages are the network's, solved in the branch-current form; each
    row is measured against the sizes of its terms. None where no loading has a solution.
    """
    count = len(e.ports)
    base = base_resistance(e) if e.thevenin or e.norton else 1.0
    level = _level(e)
    for test in range(max(_FEWEST, count + 1)):
        factors = AC_LOADS if e.frequency.omega else DC_LOADS
        loads = np.array([base * factors[(test + p) % len(factors)] for p in range(count)])
        feeds = np.array([level / base if p == test else 0.0 for p in range(count)])
        loads, feeds = like(network, loads), like(network, feeds)
        solver = Solver(_loaded(network, e, loads, feeds), e.frequency, "branch-current")
        asked = [Quantity("V", (p.plus, p.minus)) for p in e.ports]
        if not (solver.consistent(solver.u) and all(map(solver.unique, asked))):
            continue
        state = solver.state()
        v = np.array([state.of(q) for q in asked])
        form.off.append(_off(form, v, feeds, loads))
    return max(form.off, default=None)


def _level(e: Equivalent) -> float:
    """A voltage that suits the ports (V)."""
    for vector, factor in ((e.open_voltage, 1.0), (e.short_current, base_resistance(e))):
        if vector is not None and np.abs(vector).max(initial=0.0) > 0:
            return float(np.abs(vector).max() * factor)
    return 1.0


def _loaded(network: Network, e: Equivalent, loads: Numbers, feeds: Numbers) -> Network:
    """The network with an impedance across each port, and currents fed into `plus`."""
    elements: list[Element] = []
    for p, load, feed in zip(e.ports, loads.tolist(), feeds.tolist(), strict=True):
        ends = (p.plus, p.minus)
        kind = "impedance" if isinstance(load, complex) or load.imag else "resistor"
        elements.append(KINDS[kind](f"load at {p.name}", ends, written(load)))
        if feed:
            # a `peak` file would take the value for a peak
            peak = network.phasors == "peak" and e.frequency.omega
            amount = Decimal(feed) * Decimal(2).sqrt() if peak else written(feed)
            options = Options(at=e.frequency)
            elements.append(
                KINDS["current"](f"feed at {p.name}", ends[::-1], amount, options=options)
            )
    return network.with_elements(elements)


def _off(form: PortForm, v: Numbers, feeds: Numbers, loads: Numbers) -> float:
    """The largest |left - parameters · right - sources| of a row, of the sizes of its terms."""
    assert form.parameters is not None and form.sources is not None
    j = feeds - v / loads
    sizes = np.abs(v) + np.abs(v).max(initial=0.0), np.abs(feeds) + np.abs(v / loads)
    left, right = (side_values(form, names, v, j) for names in form.sides)
    size_left, size_right = (_sizes(form, names, *sizes) for names in form.sides)
    off = np.abs(left - form.parameters @ right - form.sources)
    size = size_left + np.abs(form.parameters) @ size_right + np.abs(form.sources)
    return float((off / np.where(size > 0, size, 1.0)).max(initial=0.0))


def side_values(form: PortForm, names: tuple[str, ...], v: Numbers, j: Numbers) -> Numbers:
    """What stands on a side of a form, from the voltages of the ports and currents into them."""
    found = []
    for name in names:
        port = int(name.lstrip("-vjab")) - 1
        if name[0] in "ab":
            r = form.references[port]
            sign = 1 if name[0] == "a" else -1
            found.append((v[port] + sign * r * j[port]) / (2 * r**0.5))
        else:
            found.append({"v": v[port], "j": j[port], "-": -j[port]}[name[0]])
    return np.array(found)


def _sizes(form: PortForm, names: tuple[str, ...], v: Numbers, j: Numbers) -> Numbers:
    found = []
    for name in names:
        port = int(name.lstrip("-vjab")) - 1
        if name[0] in "ab":
            r = float(form.references[port])
            found.append((v[port] + r * j[port]) / (2 * r**0.5))
        else:
            found.append(v[port] if name[0] == "v" else j[port])
    return np.array(found)
