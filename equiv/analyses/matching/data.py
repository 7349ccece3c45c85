"""A match as JSON."""

from __future__ import annotations

from typing import Any

from equiv.analyses.matching.band import REACH
from equiv.analyses.matching.found import Found
from equiv.analyses.matching.loads import LoadMatch
from equiv.analyses.matching.networks import MatchingNetwork
from equiv.analyses.matching.preferred import Preferred, Wanted
from equiv.analyses.result import pair

PERFECT = "the match is perfect: the return loss has no limit"
NO_EDGE = f"no half-power point on that side within a factor of {REACH:g} of the frequency"
NO_Q = "a quarter-wave line has no loaded Q"


def match_data(found: Found) -> dict[str, Any]:
    """The `result` of the JSON object."""
    source, wanted = found.source, found.wanted
    return {
        "port": {"name": source.port.name, "plus": source.port.plus, "minus": source.port.minus},
        "hertz": source.frequency.hertz,
        "voltage": pair(source.voltage),
        "impedance": pair(source.impedance),
        "available_power": source.available_power,
        "loads": [_load(load) for load in found.loads],
        "load": pair(found.load),
        "needs_network": None if found.load is None else not found.needs_none,
        "networks": [_network(network, wanted) for network in found.networks],
        "best": None if found.best is None else found.best + 1,
        "left_out": list(found.reasons),
        "criterion": {
            "return_loss_db": wanted.return_loss, "band": wanted.band,
            "tolerance": wanted.tolerance if wanted.series else None,
            "inductor_q": found.losses.inductor_q, "capacitor_q": found.losses.capacitor_q,
        },
    }  # fmt: skip


def _load(load: LoadMatch) -> dict[str, Any]:
    data: dict[str, Any] = {
        "rule": load.rule,
        "impedance": pair(load.impedance),
        "power": load.power,
        "power_in_network": load.found,
        "mismatch_loss_db": load.mismatch_loss,
        "efficiency": load.efficiency,
        "efficiency_reason": load.no_efficiency,
        "voltage": pair(load.voltage),
        "current": pair(load.current),
    }
    if load.ratio is not None:
        data["ratio"] = load.ratio
    return data


def _network(network: MatchingNetwork, wanted: Wanted) -> dict[str, Any]:
    section, band = network.section, network.band
    reasons = {
        "q": NO_Q if section.q is None else None,
        "band": NO_EDGE if None in band else None,
        "return_loss_db": PERFECT if network.return_loss_db is None else None,
    }
    data: dict[str, Any] = {
        "topology": section.topology,
        "parts": [
            {
                "kind": part.kind, "position": part.position, "value": part.value,
                **({"degrees": 90.0} if part.kind == "line" else {}),
                "voltage": stress.voltage, "current": stress.current,
            }
            for part, stress in zip(section.parts, network.real.stresses, strict=True)
        ],
        "q": section.q,
        "band": list(band),
        "return_loss_db": network.return_loss_db,
        "loss_db": network.loss_db,
        "reasons": {name: reason for name, reason in reasons.items() if reason},
        "preferred": [_preferred(choice, wanted) for choice in network.preferred],
    }  # fmt: skip
    if network.covers is not None:
        data["has_band"] = network.covers
    return data


def _preferred(choice: Preferred, wanted: Wanted) -> dict[str, Any]:
    return {
        "series": wanted.series,
        "values": list(choice.values),
        "return_loss_db": choice.return_loss_db,
        "loss_db": choice.loss_db,
        "yield": choice.yielded,
    }
