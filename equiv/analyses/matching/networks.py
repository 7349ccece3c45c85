"""Matching networks for a load: which there are, and each one at work in the original network."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace

import numpy as np

from equiv.analyses.matching.band import Band, half_power_band
from equiv.analyses.matching.build import Operation, operated, through
from equiv.analyses.matching.ladder import Ladder, Losses
from equiv.analyses.matching.preferred import Preferred, Wanted, least_return_loss, preferred_values
from equiv.analyses.matching.sections import (
    Section,
    l_sections,
    least_q,
    pi_sections,
    quarter_wave,
    t_sections,
    two_sections,
)
from equiv.analyses.matching.source import OverFrequency, PortSource
from equiv.analyses.matching.words import NETWORKS
from equiv.network import Progress


@dataclass(frozen=True)
class MatchingNetwork:
    """A network between port and load: exact values, and what they do in the original network.

    `lossless` is the network with ideal parts, `real` with the parts' own Q; `band` is that of
    the real one. `edges` are the load's powers at the ends of the band, over that at the match.
    """

    section: Section
    ladder: Ladder
    lossless: Operation
    real: Operation
    band: Band
    edges: tuple[float, ...]
    return_loss_db: float | None
    """None where the match is perfect: the return loss has no limit."""
    loss_db: float
    covers: bool | None
    preferred: tuple[Preferred, ...]
    best_power: float | None
    """The load's power with the best preferred values, in the original network (W)."""

    def choice(self, rank: int = 0) -> Ladder:
        """The ladder with its preferred values, if there are any; exact ones else."""
        return through(self.ladder, self.preferred[rank].values) if self.preferred else self.ladder


def sections_of(
    source: PortSource, load: complex, by: str, q: float | None
) -> tuple[tuple[Section, ...], tuple[str, ...]]:
    """The networks of a kind (or `all` kinds), and why others are left out."""
    z, omega = source.impedance, source.frequency.omega
    found: list[Section] = []
    reasons: list[str] = []
    for name in NETWORKS if by == "all" else (by,):
        if name == "l":
            found += l_sections(z, load, omega)
        elif name in ("pi", "t"):
            sections, reason = _by_q(name, z, load, q, omega)
            found += sections
            reasons += [reason] if reason else []
        else:
            make = two_sections if name == "two-section" else quarter_wave
            sections = make(z, load, omega)
            found += sections
            if not sections:
                reasons.append(f"{name}: port and load have the same resistance already")
    return tuple(found), tuple(reasons)


def _by_q(
    name: str, z: complex, load: complex, q: float | None, omega: float
) -> tuple[tuple[Section, ...], str | None]:
    topology = "pi" if name == "pi" else "T"
    if q is None:
        return (), f"{topology}: needs a loaded Q"
    make: Callable[..., tuple[Section, ...]] = pi_sections if name == "pi" else t_sections
    sections = make(z, load, q, omega)
    if sections:
        return sections, None
    least = least_q(topology, z, load)
    return (), f"{topology}: its loaded Q must be over {least:.4g}, where it becomes an L"


def matching_networks(
    over: OverFrequency,
    load: complex,
    sections: tuple[Section, ...],
    losses: Losses,
    wanted: Wanted,
    progress: Progress,
) -> tuple[MatchingNetwork, ...]:
    """Each network put together on the original network and solved with it."""
    found = []
    for number, section in enumerate(sections):
        progress("matching networks", number, len(sections))
        ladder = Ladder(section.parts, over.source.frequency.omega, losses)
        found.append(_network(over, load, section, ladder, wanted))
    return tuple(found)


def _network(
    over: OverFrequency, load: complex, section: Section, ladder: Ladder, wanted: Wanted
) -> MatchingNetwork:
    source = over.source
    lossless = operated(source, through(ladder, lossy=False), load)
    real = operated(source, ladder, load) if ladder.losses.any else lossless
    band = half_power_band(over, ladder, load)
    edges = [operated(source, ladder, load, f).power / real.power for f in band if f is not None]
    exact = np.array([ladder.values])
    least = float(least_return_loss(over, ladder, load, wanted._replace(band=None), exact)[0])
    span = wanted.span(source.frequency.hertz)
    preferred = preferred_values(over, ladder, load, wanted) if wanted.series else ()
    network = MatchingNetwork(
        section=section,
        ladder=ladder,
        lossless=lossless,
        real=real,
        band=band,
        edges=tuple(edges),
        return_loss_db=least if ladder.losses.any else None,
        loss_db=-10 * float(np.log10(real.power / source.available_power)),
        covers=None if span is None else band.covers(*span),
        preferred=preferred,
        best_power=None,
    )
    if not preferred:
        return network
    power = operated(source, network.choice(), load).power
    return replace(network, best_power=power)


def seen_mismatch(source: PortSource, operation: Operation) -> float:
    """|V - Z*·I| / (|V| + |Z|·|I|) at the port: zero where it sees the conjugate impedance."""
    z, v, i = source.impedance, operation.voltage, operation.current
    return abs(v - z.conjugate() * i) / (abs(v) + abs(z) * abs(i))


def best_of(networks: tuple[MatchingNetwork, ...]) -> int | None:
    """Which network is best: one that has the band; then in turn the return loss of its best
    preferred values, the least loss in its parts, the fewest parts, and the widest band.
    """
    if not networks:
        return None

    def merit(number: int) -> tuple[object, ...]:
        n = networks[number]
        width = n.band.width
        return (
            n.covers is not False,
            n.preferred[0].return_loss_db if n.preferred else 0.0,
            -round(n.loss_db, 9),
            -len(n.section.parts),
            width if width is not None else float("inf"),
        )

    return max(range(len(networks)), key=lambda number: (merit(number), -number))
