"""The load for maximum power, and the networks that make a given load take it."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Any, ClassVar, Literal

from equiv.analyses.closing import closing_table
from equiv.analyses.matching.data import match_data
from equiv.analyses.matching.found import Found
from equiv.analyses.matching.ladder import Losses
from equiv.analyses.matching.loads import LoadMatch, loads_of
from equiv.analyses.matching.networks import MatchingNetwork, matching_networks, sections_of
from equiv.analyses.matching.proof import match_cautions, match_checks
from equiv.analyses.matching.sections import already_matched
from equiv.analyses.matching.source import OverFrequency, PortSource, source_at
from equiv.analyses.matching.tables import match_tables
from equiv.analyses.matching.words import NETWORKS, Words, angle_of, number_of, wanted_of
from equiv.analyses.port import find_port
from equiv.analyses.preferred import Series
from equiv.analyses.result import Result
from equiv.analyses.tables import Table
from equiv.elements.element import Frequency
from equiv.errors import Diagnostic, DoesNotExistError, ExitStatus
from equiv.network import Network, Port, Progress, no_progress

By = Literal[
    "all", "conjugate", "resistive", "angle", "reactance", "ratio",
    "l", "pi", "t", "two-section", "quarter-wave",
]  # fmt: skip


@dataclass(frozen=True, kw_only=True)
class Match(Result):
    """Loads that take most power from a port, and networks that match a given load to it."""

    command: ClassVar[str] = "match"

    found: Found

    @property
    def source(self) -> PortSource:
        """The port as it is without a load."""
        return self.found.source

    @property
    def available_power(self) -> float:
        """The most power (W) that a load can take."""
        return self.source.available_power

    @property
    def loads(self) -> tuple[LoadMatch, ...]:
        """The loads, rule by rule."""
        return self.found.loads

    @property
    def networks(self) -> tuple[MatchingNetwork, ...]:
        """The matching networks for the given load."""
        return self.found.networks

    def matched(self, number: int | None = None) -> Network:
        """The original network with a matching network at its port, and a port MATCHED behind it.

        Arguments: the network's number as printed, from 1; the best one if none is given. It has
        its best preferred values if a series was asked for, else the exact ones.
        Errors: UsageError, DoesNotExistError where there is none.
        """
        return self.found.matched(number)

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """The port, the loads, the networks, their parts, and preferred values."""
        remarks = [f"Left out: {reason}." for reason in self.found.reasons]
        closing = closing_table(self.network, self.checks, self.cautions, *remarks)
        return (*match_tables(self.network, self.found, digits), closing)

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        return match_data(self.found)


def match(
    network: Network,
    port: str | Port,
    load: complex | str | None = None,
    *,
    by: By = "all",
    angle: float | str | None = None,
    reactance: float | str | None = None,
    q: float | None = None,
    series: Series | None = None,
    tolerance: float | str | None = None,
    return_loss: float = 10.0,
    band: float | str | None = None,
    inductor_q: float | None = None,
    capacitor_q: float | None = None,
    progress: Progress = no_progress,
) -> Match:
    """The load that takes most power from a port, and the networks that match a given load to it.

    P = |Voc|²/(4 Re Z) into ZL = Z*; the most into a resistance is at R = |Z|; a network makes a
    given load look like Z*. Each is put on the original network and solved with it.

    Arguments: a port by its name or as `a,b`; `load` in ohm; `by` one rule (`conjugate`,
    `resistive`, `angle`, `reactance`, `ratio`) or one sort of network (`l`, `pi`, `t`,
    `two-section`, `quarter-wave`); `angle` (degrees) or `reactance` (ohm) that a load must have;
    `q`, the loaded Q of pi and T; `series` of IEC 60063; `tolerance` of parts (a fraction, or
    `5%`; that of the series if none is given); `return_loss` (dB) that a made network must have,
    over a `band` (Hz) around the frequency; Q of coils and capacitors. Texts have their units.
    Errors: DoesNotExistError where no load takes the most power, or a network does not exist;
    NoUniqueSolutionError; UsageError.
    Sign convention: v is `plus` over `minus`, i flows out of `plus` into the load.
    Source: J. O. Bird, Electrical Circuit Theory and Technology, ch. 35; D. K. Misra,
    Radio-Frequency and Microwave Communication Circuits, ch. 6; IEC 60063.
    """
    chosen = port if isinstance(port, Port) else find_port(network, port)
    frequency = _frequency(network)
    words = Words(number_of(load, "ohm"), angle_of(angle), number_of(reactance, "ohm"), q)
    wanted = wanted_of(series, tolerance, return_loss, number_of(band, "Hz"), frequency)
    losses = Losses(inductor_q, capacitor_q)
    words.require(by, frequency, losses, wanted)
    source = source_at(network, chosen, frequency)
    found = Found(source, loads_of(source, by, words), words.load, (), wanted, losses)
    if words.load is not None and by in ("all", *NETWORKS):
        found = _with_networks(found, words.load, by, q, progress)
    return Match(
        network,
        checks=tuple(match_checks(found)),
        cautions=tuple(dict.fromkeys(match_cautions(network, found))),
        refusal=ExitStatus.DOES_NOT_EXIST if found.too_narrow else ExitStatus.DONE,
        found=found,
    )


def _frequency(network: Network) -> Frequency:
    """The file's frequency if there are sources at it, else the lowest of theirs."""
    own = network.frequency.omega
    return next((f for f in network.frequencies if f.omega == own), network.frequencies[0])


def _with_networks(
    found: Found, load: complex, by: str, q: float | None, progress: Progress
) -> Found:
    """With the networks for a load, where it needs one and there are any."""
    source = found.source
    if already_matched(source.impedance, load):
        return replace(found, needs_none=True)
    if not source.frequency.omega:
        reason = "at DC no network of coils, capacitors or lines changes a resistance"
        if by == "all":
            return replace(found, reasons=(f"networks: {reason}",))
        raise DoesNotExistError(Diagnostic("no-network", reason))
    sections, reasons = sections_of(source, load, by, q)
    if not sections:
        raise DoesNotExistError(Diagnostic("no-network", f"no network. {'; '.join(reasons)}"))
    networks = matching_networks(
        OverFrequency(source), load, sections, found.losses, found.wanted, progress
    )
    return replace(found, networks=networks, reasons=reasons)
