"""What proves a match in the original network, and what to know before relying on it."""

from __future__ import annotations

from collections.abc import Sequence

from equiv.analyses.cautions import about_network
from equiv.analyses.matching.found import Found
from equiv.analyses.matching.loads import LoadMatch
from equiv.analyses.matching.networks import seen_mismatch
from equiv.analyses.matching.source import known_at_one_frequency
from equiv.analyses.result import Caution, Check
from equiv.analyses.superposition.terms import CLOSURE_LIMIT
from equiv.network import Network

_EDGE_LIMIT = 1e-8
_MOST_NAMES = 8


def match_checks(found: Found) -> list[Check]:
    """Powers in the original network, of the worst of the loads and of the networks."""
    checks = _load_checks(found.loads)
    return [*checks, *_network_checks(found)] if found.networks else checks


def _load_checks(loads: Sequence[LoadMatch]) -> list[Check]:
    worst = max((load.difference for load in loads), default=0.0)
    checks = [Check("power of the loads, network against equivalent", worst, CLOSURE_LIMIT)]
    excesses = [load.excess for load in loads if load.excess is not None]
    if excesses:
        name = "most that a neighbouring load takes more, in the network"
        checks.append(Check(name, max(excesses), CLOSURE_LIMIT))
    return checks


def _network_checks(found: Found) -> list[Check]:
    """Each network put together on the original one and solved with it: the worst of them."""
    source, networks = found.source, found.networks
    available = source.available_power
    checks = [
        Check(
            "power in the load against the available power, lossless networks",
            max(abs(n.lossless.power / available - 1) for n in networks),
            CLOSURE_LIMIT,
        ),
        Check(
            "impedance seen by the port against the conjugate, lossless networks",
            max(seen_mismatch(source, n.lossless) for n in networks),
            CLOSURE_LIMIT,
        ),
    ]
    edges = [abs(edge - 0.5) for n in networks for edge in n.edges]
    if edges:
        checks.append(Check("power at the ends of the bands against half", max(edges), _EDGE_LIMIT))
    preferred = [
        abs(n.best_power / available - 10 ** (-n.preferred[0].loss_db / 10))
        for n in networks
        if n.best_power is not None
    ]
    if preferred:
        name = "power with the best preferred values, network against chain matrix"
        checks.append(Check(name, max(preferred), CLOSURE_LIMIT))
    return checks


def match_cautions(network: Network, found: Found) -> list[Caution]:
    """Other frequencies, values that are known at one frequency only, a band that is not met."""
    cautions = about_network(network)
    if any(f.omega != found.source.frequency.omega for f in network.frequencies):
        words = "the match is for one frequency; sources at other frequencies are left out"
        cautions.append(Caution("one-frequency", words))
    held = known_at_one_frequency(network) if found.networks else []
    if held:
        some = ", ".join(held[:_MOST_NAMES]) + (" …" if len(held) > _MOST_NAMES else "")
        words = f"known at one frequency only, and held constant over the band: {some}"
        cautions.append(Caution("held-constant", words))
    if found.too_narrow:
        cautions.append(Caution("band", "no network here has the band that is needed"))
    return cautions
