"""Terms by source or by group."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from typing import NamedTuple

import numpy as np

from equiv.equations.layout import Numbers
from equiv.threephase.cases import FaultTerm, Phases
from equiv.threephase.model import OneLine, Shunt


class Heading(NamedTuple):
    """A source or a group: its name, its members, and their places among the sources."""

    name: str
    members: tuple[str, ...]
    numbers: tuple[int, ...]
    kind: str


class Groups:
    """The sources of a system, one by one or by the groups that the file puts them in."""

    def __init__(self, system: OneLine, sources: Sequence[str], by: str) -> None:
        self.system, self.sources = system, tuple(sources)
        found: dict[str, list[int]] = {}
        for number, name in enumerate(sources):
            group = system.items[name].group if by == "group" else None
            found.setdefault(f"group {group}" if group else name, []).append(number)
        self.headings = tuple(
            Heading(
                key.removeprefix("group "),
                tuple(sources[n] for n in numbers),
                tuple(numbers),
                system.items[key].kind if key in sources else "group",
            )
            for key, numbers in found.items()
        )

    def placed(self, names: Sequence[str], values: Numbers) -> Numbers:
        """Values of some of the sources at their places among all of them."""
        at = {name: number for number, name in enumerate(self.sources)}
        out = np.zeros(len(self.sources), complex)
        out[[at[name] for name in names]] = values
        return out

    def summed(self, terms: Numbers) -> Numbers:
        """Terms (last axis: sources) added up by heading."""
        if not self.headings:
            return terms[..., :0]
        order = [number for heading in self.headings for number in heading.numbers]
        starts = np.cumsum([0, *(len(heading.numbers) for heading in self.headings[:-1])])
        return np.add.reduceat(terms[..., order], starts, axis=-1)

    def terms(
        self, contributions: Iterable[complex], partials: Sequence[Phases] | None = None
    ) -> tuple[FaultTerm, ...]:
        """A term for each source or group; partial currents add where they are at one bus."""
        values = np.asarray(list(contributions))
        return tuple(self._term(h, values, partials) for h in self.headings)

    def of_headings(self, totals: Iterable[complex]) -> Iterator[FaultTerm]:
        """A term for each source or group from their totals, without partial currents."""
        for heading, total in zip(self.headings, totals, strict=True):
            yield FaultTerm(
                heading.name, heading.members, complex(total), kind=heading.kind,
                parallel=self._count(heading),
            )  # fmt: skip

    def _term(
        self, heading: Heading, values: Numbers, partials: Sequence[Phases] | None
    ) -> FaultTerm:
        total = complex(values[list(heading.numbers)].sum())
        items = [self.system.items[name] for name in heading.members]
        buses = {item.bus.name for item in items if isinstance(item, Shunt)}
        partial = None
        if partials is not None and len(buses) == 1:
            rows = [partials[n] for n in heading.numbers]
            partial = Phases(*(sum(column) for column in zip(*rows, strict=True)))
        at = buses.pop() if partial is not None else None
        count = self._count(heading)
        return FaultTerm(heading.name, heading.members, total, partial, at, heading.kind, count)

    def _count(self, heading: Heading) -> int:
        """How many items are behind a heading."""
        return sum(self.system.items[name].count for name in heading.members)
