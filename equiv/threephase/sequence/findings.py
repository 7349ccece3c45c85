"""What is doubtful in a three-phase system, and where earth-fault current has no path, in words."""

from __future__ import annotations

from collections import deque
from collections.abc import Iterable, Iterator, Mapping
from itertools import islice

from equiv.analyses.result import Caution
from equiv.equations.words import listed
from equiv.threephase.kinds.transformer import Transformer as WithPlate
from equiv.threephase.model import Item, Link, OneLine, Shunt, Transformer, View, Winding
from equiv.threephase.ratios import doubtful_ratio
from equiv.threephase.words import level_words

BY_DATA = (
    "; capacitance to earth of cables and machines is not entered (b0), so the current to earth "
    "is zero there only by the data"
)
_MANY = 20
_MANY_REASONS = 4
_SUPERPOSITION = View()


def no_earth_path(system: OneLine, view: View = _SUPERPOSITION) -> Mapping[str, str]:
    """The buses from which earth-fault current has no way to earth, each with the reason in words.

    The zero sequence follows from windings and earthing: an earthed star passes current where the
    other side is a delta (to earth) or an earthed star (through); an earthed zigzag passes it to
    earth by itself. Capacitance to earth (b0) is a path. Source: IEC 60909-0:2016, 6.3 (from memory).
    """
    items = [i for i in system.items.values() if not isinstance(i, Shunt) or i.stays(view)]
    joined: list[tuple[str, str]] = []
    earthed: set[str] = set()
    for item in items:
        if isinstance(item, Shunt) and _reaches_earth(item, view):
            earthed.add(item.bus.name)
        elif isinstance(item, Link):
            joined.append((item.first.name, item.second.name))
            if item.charging(0, view):
                earthed.update((item.first.name, item.second.name))
        elif isinstance(item, Transformer):
            through, ends = _of_transformer(item)
            joined += [(item.first.name, item.second.name)] if through else []
            earthed.update(ends)
    found: dict[str, str] = {}
    reasons = _reasons(items)
    for part in _parts(system.buses, joined):
        if not earthed.intersection(part):
            why = _in_words([word for bus in part for word in reasons.get(bus, ())]) + BY_DATA
            found.update((bus, no_path_at(bus) + why) for bus in part)
    return {bus: found[bus] for bus in system.buses if bus in found}


def doubts(system: OneLine) -> tuple[Caution, ...]:
    """What is allowed in a system and hardly meant, or will keep a result from being had."""
    return tuple(
        caution
        for finder in (_loose_buses, _without_source, _ratios, _star_points, _zero_data, _paths)
        for caution in finder(system)
    )


def _reaches_earth(item: Shunt, view: View) -> bool:
    """Whether zero-sequence current goes through an item to earth (as if its data were known)."""
    if item.lacks_zero_sequence:
        return True
    return item.neutral() is not None and item.series(0, view) is not None


def _of_transformer(item: Transformer) -> tuple[bool, list[str]]:
    """Whether it passes zero-sequence current through, and from which buses to earth."""
    group = item.group_of_windings
    sides = (
        (item.first.name, group.first, item.neutral(1) is not None, group.second),
        (item.second.name, group.second, item.neutral(2) is not None, group.first),
    )
    ends = [
        bus
        for bus, own, earthed, other in sides
        if earthed
        and (own.connection == "Z" or (own.connection == "Y" and other.connection == "D"))
    ]
    through = all(own.connection == "Y" and earthed for _, own, earthed, _ in sides)
    return through, ends


def _reasons(items: Iterable[Item]) -> dict[str, list[str]]:
    """For each bus, what stands there that might be earthed and is not."""
    found: dict[str, list[str]] = {}
    for item in items:
        if isinstance(item, Transformer):
            group = item.group_of_windings
            for side, bus, own, other in (
                (1, item.first, group.first, group.second),
                (2, item.second, group.second, group.first),
            ):
                volts = level_words(item.rated[side - 1])
                words = _of_side(own, other, item.neutral(side) is not None)
                found.setdefault(bus.name, []).append(f"the {volts} side of {item.name} {words}")
        elif isinstance(item, Shunt) and item.drives and item.kind != "motor":
            found.setdefault(item.bus.name, []).append(f"{item.name} is not earthed")
    return found


def _of_side(own: Winding, other: Winding, earthed: bool) -> str:
    if own.connection == "D":
        return "is a delta"
    if not earthed:
        return "is not earthed"
    star = "a zigzag" if other.connection == "Z" else "a star that is not earthed"
    return f"is earthed, but the other is {star}"


def _in_words(reasons: list[str]) -> str:
    """Some reasons in a sentence."""
    if not reasons:
        return "nothing there is earthed"
    kept = list(dict.fromkeys(reasons))
    some = kept[:_MANY_REASONS]
    more = len(kept) - len(some)
    if more:
        return f"{', '.join(some)}, and so on ({more} more)"
    return some[0] if len(some) == 1 else f"{', '.join(some[:-1])} and {some[-1]}"


def _parts(buses: Iterable[str], joined: Iterable[tuple[str, str]]) -> Iterator[list[str]]:
    """The buses that hang together, part by part."""
    ways: dict[str, list[str]] = {}
    for one, two in joined:
        ways.setdefault(one, []).append(two)
        ways.setdefault(two, []).append(one)
    seen: set[str] = set()
    for root in buses:
        if root in seen:
            continue
        seen.add(root)
        part, waiting = [], deque([root])
        while waiting:
            bus = waiting.popleft()
            part.append(bus)
            for other in ways.get(bus, ()):
                if other not in seen:
                    seen.add(other)
                    waiting.append(other)
        yield part


def _ends(item: Item) -> tuple[str, ...]:
    if isinstance(item, Link | Transformer):
        return item.first.name, item.second.name
    return (item.bus.name,) if isinstance(item, Shunt) else ()


def _loose_buses(system: OneLine) -> Iterator[Caution]:
    """Buses that no item names."""
    named = {bus for item in system.items.values() for bus in _ends(item)}
    loose = [bus for bus in system.buses if bus not in named]
    if loose:
        yield Caution("loose-bus", f"nothing is connected to {listed(loose)}")


def _without_source(system: OneLine) -> Iterator[Caution]:
    """Parts of the system that no source reaches."""
    named = {bus for item in system.items.values() for bus in _ends(item)}
    fed = {i.bus.name for i in system.items.values() if isinstance(i, Shunt) and i.drives}
    ends = map(_ends, system.items.values())
    pairs = [(both[0], both[1]) for both in ends if len(both) == 2]
    dead = [
        bus
        for part in _parts(system.buses, pairs)
        if not fed.intersection(part)
        for bus in part
        if bus in named
    ]
    if dead:
        yield Caution("no-source-at", f"no source reaches {listed(dead)}: no fault current there")


def _ratios(system: OneLine) -> Iterator[Caution]:
    """Transformers whose ratio is a little off."""
    plates = (item for item in system.items.values() if isinstance(item, WithPlate))
    for words in islice(filter(None, map(doubtful_ratio, plates)), _MANY):
        yield Caution("doubtful-ratio", words)


def _star_points(system: OneLine) -> Iterator[Caution]:
    """Star points that are brought out, about whose earthing nothing is said."""
    plates = [item for item in system.items.values() if isinstance(item, WithPlate)]
    for item in islice(filter(_unsaid, plates), _MANY):
        for side, volts in _unsaid(item):
            words = (
                f"the star point of the {level_words(volts)} side of {item.name} is brought out, "
                f"and nothing is said of neutral{side}: taken as open"
            )
            yield Caution("neutral-not-said", words)


def _unsaid(item: WithPlate) -> list[tuple[int, float]]:
    group = item.group_of_windings
    return [
        (side, item.rated[side - 1])
        for side, winding in ((1, group.first), (2, group.second))
        if winding.neutral_out and getattr(item, f"neutral{side}") is None
    ]


def _zero_data(system: OneLine) -> Iterator[Caution]:
    """Items whose zero-sequence impedance is not known."""
    lacking = [item.name for item in system.items.values() if item.lacks_zero_sequence]
    if lacking:
        words = f"no zero-sequence data for {listed(lacking)}: earth faults that reach it"
        yield Caution("no-zero-sequence", f"{words} have no answer")


def _paths(system: OneLine) -> Iterator[Caution]:
    """Where earth-fault current has no path: the buses with one reason in one sentence."""
    named = {bus for item in system.items.values() for bus in _ends(item)}
    where: dict[str, list[str]] = {}
    for bus, words in no_earth_path(system).items():
        if bus in named:
            where.setdefault(words.removeprefix(no_path_at(bus)), []).append(bus)
    for why, buses in islice(where.items(), _MANY):
        yield Caution("no-earth-path", f"{no_path_at(listed(buses))}{why}")


def no_path_at(place: str) -> str:
    """What stands before the reason that some buses have no path."""
    return f"no path for earth-fault current at {place}: "
