"""What a sweep finds: for each quantity or port, the terms and the total at every point."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from functools import cached_property
from typing import NamedTuple

import numpy as np

from equiv.analyses.port import find_port
from equiv.analyses.superposition.terms import CLOSURE_LIMIT
from equiv.elements.element import Frequency
from equiv.elements.quantity import Quantity
from equiv.equations.layout import Numbers
from equiv.errors import Diagnostic, UsageError
from equiv.language import quantity as read_quantity
from equiv.network import Branch, Network, Port

TEST = "test source at {}"


class Asked(NamedTuple):
    """A quantity, or a port: its open-circuit voltage, and its impedance by a test source."""

    word: str
    quantity: Quantity
    port: Port | None = None
    label: str | None = None
    pairs: int = 1
    """Terminal pairs whose powers make the power of an element."""

    @property
    def test(self) -> str:
        """The name of the port's test source."""
        return TEST.format(self.word)

    @property
    def parts(self) -> tuple[Quantity, ...]:
        """What must be found of it: itself, or the voltages and currents of a power."""
        q = self.quantity
        if q.what != "P":
            return (q,)
        return tuple(Quantity(w, q.names, pair) for pair in range(self.pairs) for w in "VI")


def asked_of(network: Network, what: Sequence[str | Quantity | Port]) -> tuple[Asked, ...]:
    """What was asked for; the file's find statements, or else its ports, if nothing was.

    Errors: UsageError for an unknown quantity or port, or where there is nothing to ask for.
    """
    if not what:
        finds = [_of_quantity(network, f.quantity) for f in network.finds]
        found = finds or [_of_port(port) for port in network.ports.values()]
        if not found:
            raise UsageError(
                Diagnostic(
                    "nothing-asked",
                    "the file has no find statement and declares no port",
                    hint="name quantities as I:R3 or V:a, or a port as a,b",
                )
            )
        return tuple(found)
    return tuple({asked.word: asked for asked in (_asked(network, one) for one in what)}.values())


def _asked(network: Network, one: str | Quantity | Port) -> Asked:
    if isinstance(one, Port):
        return _of_port(one)
    if isinstance(one, str) and (one in network.ports or ":" not in one):
        return _of_port(find_port(network, one))
    return _of_quantity(network, read_quantity(one) if isinstance(one, str) else one)


def _of_quantity(network: Network, q: Quantity) -> Asked:
    network.locate(q)
    labels = {find.quantity: find.label for find in network.finds}
    pairs = len(network.elements[q.names[0]].pairs) if q.what == "P" else 1
    return Asked(str(q), q, None, labels.get(q), pairs)


def _of_port(port: Port) -> Asked:
    return Asked(port.name, Quantity("V", (port.plus, port.minus)), port)


@dataclass(frozen=True)
class Curve:
    """One quantity, or one port, along a sweep. Phasors are rms; what does not exist is NaN.

    `terms` has a row a point and a column a source: what each gives to the quantity (of a port:
    to its open-circuit voltage), or of a power the source's own power, which do not add up to
    the total. `impedance` (ohm) is that of a port. `reasons` say why a point has no value.
    """

    asked: Asked
    unit: str
    heading: str
    positive: str
    frequency: Frequency | None
    """That of the sources, where it is the same at every point."""
    sources: tuple[str, ...]
    terms: Numbers
    total: Numbers
    impedance: Numbers | None = None
    reasons: dict[int, str] = field(default_factory=dict)
    real: bool = False
    """Every number is real (DC)."""

    @property
    def is_power(self) -> bool:
        """Whether it is a power, which does not superpose."""
        return self.asked.quantity.what == "P"

    @cached_property
    def sizes(self) -> Numbers:
        """|term|, a row a point."""
        return np.asarray(np.abs(self.terms))

    @cached_property
    def shares(self) -> Numbers:
        """|term| / Σ|term|, a row a point; not a number where there is nothing to share."""
        whole = self.sizes.sum(axis=1, keepdims=True)
        shares = np.full_like(self.sizes, np.nan)
        return np.asarray(np.divide(self.sizes, whole, out=shares, where=whole > 0))

    @cached_property
    def dominant(self) -> tuple[int | None, ...]:
        """The source with the largest gross share at each point; None where there is none.

        Equal shares, to the closure limit, go to the source that stands first in the file.
        """
        if self.is_power or not self.sources:
            return (None,) * len(self.total)
        known = np.asarray(np.isfinite(self.shares).all(axis=1))
        shares = np.where(known[:, None], self.shares, 0.0)
        most = shares.max(axis=1, keepdims=True)
        first = (shares >= most * (1 - CLOSURE_LIMIT)).argmax(axis=1)
        return tuple(int(k) if there else None for k, there in zip(first, known, strict=True))

    @property
    def exists(self) -> Numbers:
        """At which points there is a value."""
        return np.asarray(np.isfinite(self.total))

    @property
    def by_peak(self) -> list[int]:
        """The sources by the largest size of their terms, the largest first."""
        peaks = np.nan_to_num(self.sizes).max(axis=0, initial=0.0)
        return [int(k) for k in np.argsort(-peaks, kind="stable")]


def positive_of(network: Network, asked: Asked) -> str:
    """The reference direction in words."""
    q = asked.quantity
    if asked.port is not None:
        return f"{asked.port.plus} over {asked.port.minus}"
    place = network.locate(q)
    if not isinstance(place, Branch):
        return f"{place.first} over {place.second}"
    first, second = network.pair_nodes(place)
    words = {"V": f"{first} over {second}", "P": "absorbed"}
    return words.get(q.what, f"from {first} to {second} inside {place.element}")


def heading_of(network: Network, asked: Asked) -> str:
    """The quantity in words with its reference direction."""
    if asked.port is None:
        return network.describe(asked.quantity)
    port = asked.port
    return f"open-circuit voltage of {port.name}, positive where {port.plus} is higher"
