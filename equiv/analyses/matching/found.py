"""What a match has found, before it is proved and drawn."""

from __future__ import annotations

from dataclasses import dataclass

from equiv.analyses.matching.build import matched_network
from equiv.analyses.matching.ladder import LOSSLESS, Ladder, Losses
from equiv.analyses.matching.loads import LoadMatch
from equiv.analyses.matching.networks import MatchingNetwork, best_of
from equiv.analyses.matching.preferred import NOTHING_WANTED, Wanted
from equiv.analyses.matching.source import PortSource
from equiv.analyses.matching.words import refuse
from equiv.errors import Diagnostic, DoesNotExistError
from equiv.network import Network


@dataclass(frozen=True)
class Found:
    """The port, loads that take most power from it, and networks that match a given load to it."""

    source: PortSource
    loads: tuple[LoadMatch, ...]
    load: complex | None = None
    networks: tuple[MatchingNetwork, ...] = ()
    wanted: Wanted = NOTHING_WANTED
    losses: Losses = LOSSLESS
    reasons: tuple[str, ...] = ()
    """Why networks that were asked for are not there."""
    needs_none: bool = False
    """The load is the conjugate of the port's impedance already."""

    @property
    def best(self) -> int | None:
        """The best of the networks, counted from 0."""
        return best_of(self.networks)

    @property
    def too_narrow(self) -> bool:
        """Whether a band is needed that no network has."""
        return bool(self.networks) and all(n.covers is False for n in self.networks)

    def matched(self, number: int | None = None) -> Network:
        """The original network with one of the networks at its port (see `Match.matched`)."""
        if self.load is None:
            raise refuse("a matched network needs a load to be matched", "give one, as in 50 ohm")
        if self.needs_none:
            nothing = Ladder((), self.source.frequency.omega)
            return matched_network(self.source, nothing, self.load, "")
        if self.best is None and not self.reasons:
            raise refuse("only loads were asked for, and no network", "ask by all, l, pi …")
        if self.best is None:
            reason = f"there is no matching network: {'; '.join(self.reasons)}"
            raise DoesNotExistError(Diagnostic("no-network", reason))
        if number is not None and not 1 <= number <= len(self.networks):
            raise refuse(f"there is no network {number}", f"networks: 1 to {len(self.networks)}")
        chosen = self.networks[self.best if number is None else number - 1]
        words = f"{chosen.section.topology} ({chosen.section.words})"
        return matched_network(self.source, chosen.choice(), self.load, words)
