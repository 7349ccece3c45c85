"""A port under loads as tables to be read and signed, and as JSON."""

from __future__ import annotations

from typing import Any

from equiv.analyses.exactness import exact_cells, exact_columns, exact_notes
from equiv.analyses.headings import frequency_words
from equiv.analyses.loading.points import leans, power_factor, reactive
from equiv.analyses.loading.proof import SourceState
from equiv.analyses.loading.state import LoadState, LoadTotal, PortLoads, largest
from equiv.analyses.result import Check, finite, pair
from equiv.analyses.superposition.terms import limit_of
from equiv.analyses.tables import Cell, Column, Measure, Row, Table
from equiv.equations.scalars import scalar
from equiv.network import Network, Port
from equiv.units import is_exact

EFFICIENCY = (
    "Efficiency: power taken by the load over the power of the independent sources that deliver, "
    "in the original network (a source that absorbs is no part of it, nor is a controlled one)."
)
REGULATION = "Regulation: (|Voc| - |V|)/|V|, of the voltage under load."
CHECK = (
    "Difference: voltage and current against the original network with the load on it "
    "(branch-current form), relative; the larger of the two."
)


def load_tables(
    network: Network, port: Port, found: PortLoads, with_notes: bool = True
) -> list[Table]:
    """The loads at one frequency, and what every source does under each."""
    tables = [_loads_table(network, port, found, with_notes)]
    if any(state.proof and state.proof.sources for state in found.states):
        tables.append(_sources_table(port, found))
    return tables


def _loads_table(network: Network, port: Port, found: PortLoads, with_notes: bool) -> Table:
    dc = found.line.dc
    words = any(state.solution for state in found.states)
    ac_columns = (
        Column("reactive power"), Column("power factor"), Column("current is"),
    )  # fmt: skip
    columns = (
        Column("no.", key=True),
        Column("load", key=True),
        Column("voltage", "V", family="voltage"),
        Column("current"),
        Column("power taken"),
        *(() if dc else ac_columns),
        Column("regulation", "%"),
        Column("efficiency", "%"),
        Column("voltage in the network", "V", family="voltage"),
        Column("difference", exponent=True),
        *((Column("solution"),) if words else ()),
        *exact_columns(
            network, ("exact voltage", "V"), ("exact current", "A"), ("exact power", _watts(dc))
        ),
    )
    rows = [
        Row((*_row(state, dc), *((state.solution,) if words else ()), *_exact(network, state)))
        for state in found.states
    ]
    subtitles = (
        f"Port {port.name}: voltage of {port.plus} over {port.minus}, "
        f"current out of {port.plus} into the load",
        frequency_words(found.frequency),
    )
    title = network.title or "Loads at a port"
    notes = (
        *_largest(network, found),
        *(_definitions(found) if with_notes else ()),
        *_notes(found),
        *exact_notes(rows),
    )
    return Table(title, subtitles, columns, tuple(rows), notes, name=f"loads{_where(found)}")


def _watts(dc: bool) -> str:
    return "W" if dc else "VA"


def _exact(network: Network, state: LoadState) -> list[Cell]:
    point = state.point
    v, i = (None, None) if point is None else (point.voltage, point.current)
    return exact_cells(network, v, i, state.power)


def _where(found: PortLoads) -> str:
    return f" at {frequency_words(found.frequency, '')}" if not found.line.dc else ""


def _number(value: complex | None, dc: bool) -> Cell:
    return None if value is None else complex(value).real if dc else complex(value)


def _measure(value: complex, unit: str, dc: bool) -> Measure:
    """A number with a prefix of its own: loads reach from open to short."""
    return Measure(complex(value).real if dc else complex(value), unit)


def _row(state: LoadState, dc: bool) -> tuple[Cell, ...]:
    power, proof = state.power, state.proof
    if state.point is None or power is None:
        return (state.number, state.load.text, *([None] * (7 if dc else 10)))
    leaning = {"lags": "lagging", "leads": "leading"}.get(leans(power), "in phase" if power else "")
    ac = (Measure(reactive(power), "var"), power_factor(power), leaning)
    return (
        state.number,
        state.load.text,
        _number(state.point.voltage, dc),
        _measure(state.point.current, "A", dc),
        Measure(power.real, "W"),
        *(() if dc else ac),
        state.regulation,
        state.efficiency.value,
        None if proof is None else _number(proof.voltage, dc),
        None if proof is None else proof.difference,
    )


def _largest(network: Network, found: PortLoads) -> list[str]:
    """The checks of the table in one line."""
    differences = [s.proof.difference for s in found.states if s.proof is not None]
    if not differences:
        return []
    return [Check("largest difference", largest(differences), limit_of(network)).sentence()]


def _definitions(found: PortLoads) -> list[str]:
    ac = "Power factor: P/|S|; lagging where the load takes reactive power."
    return [CHECK, *(() if found.line.dc else (ac,)), REGULATION, EFFICIENCY]


def _notes(found: PortLoads) -> list[str]:
    line, states = found.line, found.states
    notes = []
    if line.voc is None:
        notes.append(f"There is no open-circuit voltage and so no regulation: {line.no_thevenin}.")
    elif line.isc is None:
        notes.append(f"There is no short-circuit current: {line.no_norton}.")
    for state in states:
        reason = state.efficiency.reason
        if state.exists and reason:
            notes.append(f"{state.number}, {state.load.text}: no efficiency, for {reason}.")
    active = {
        s.name
        for state in states
        if state.proof is not None
        for s in state.proof.sources
        if s.role != "independent" and s.delivered is not None and s.delivered.real > 0
        and _role(s) == "delivers"
    }  # fmt: skip
    if active:
        notes.append(
            f"{', '.join(sorted(active))}: no independent source, and delivers power all the "
            "same, which the efficiency does not count: it may exceed 100 %."
        )
    return list(dict.fromkeys(notes))


def _sources_table(port: Port, found: PortLoads) -> Table:
    dc = found.line.dc
    columns = (
        Column("no.", key=True),
        Column("load", key=True),
        Column("source", key=True),
        Column("kind"),
        Column("voltage", "V", family="voltage"),
        Column("power delivered"),
        *(() if dc else (Column("reactive power"),)),
        Column("role"),
    )
    rows = []
    for state in found.states:
        if state.proof is None:
            continue
        for s in state.proof.sources:
            power: list[Cell] = [None, None]
            if s.delivered is not None:
                power = [Measure(s.delivered.real, "W"), Measure(reactive(s.delivered), "var")]
            voltage = _number(s.voltage, dc)
            cells = (state.number, state.named, s.name, s.kind, voltage)
            rows.append(Row((*cells, *power[: 1 if dc else 2], _role(s))))
    notes = (
        "Voltage: first node over second. Every independent and controlled source, and any other "
        "element that gives power; what an element absorbs is negative.",
    )
    title = "Sources in the original network with the load on it"
    subtitles = (frequency_words(found.frequency),)
    return Table(title, subtitles, columns, tuple(rows), notes, name=f"sources{_where(found)}")


def _role(s: SourceState) -> str:
    """`delivers` or `absorbs` and, where it is none of the independent ones, that it is not."""
    if s.delivered is None:
        return "not determined"
    if abs(s.delivered.real) <= 1e-12 * abs(s.delivered) or not abs(s.delivered):
        return ""
    return "delivers" if s.delivered.real > 0 else "absorbs"


def total_table(port: Port, totals: tuple[LoadTotal, ...]) -> Table:
    """The loads over all frequencies."""
    columns = (
        Column("no.", key=True),
        Column("load", key=True),
        Column("voltage, rms", "V"),
        Column("current, rms", "A"),
        Column("power taken", "W"),
        Column("efficiency", "%"),
        *((Column("solution"),) if any(t.words for t in totals) else ()),
    )
    rows = [
        Row(
            (t.number, t.load.text, t.voltage, t.current, t.power, t.efficiency.value, t.words)[
                : len(columns)
            ]
        )
        for t in totals
    ]
    notes = (
        "The rms over all frequencies is the root of the sum of squares; powers of different "
        "frequencies add.",
    )
    title = f"Port {port.name} over all frequencies"
    return Table(title, (), columns, tuple(rows), notes, name="totals")


def load_data(port: Port, found: PortLoads) -> dict[str, Any]:
    """The JSON of the loads at one frequency."""
    return {
        "port": {"name": port.name, "plus": port.plus, "minus": port.minus},
        "hertz": found.frequency.hertz,
        "definitions": {
            "regulation": REGULATION.partition(": ")[2],
            "efficiency": EFFICIENCY.partition(": ")[2],
        },
        "loads": [_state_data(state) for state in found.states],
    }


def _state_data(state: LoadState) -> dict[str, Any]:
    power, proof = state.power, state.proof
    exists = state.point is not None and power is not None
    return {
        "number": state.number,
        "load": state.load.text,
        "kind": state.load.kind,
        "exists": exists,
        "solution": state.solution if exists and state.solution else None,
        "reason": None if exists else state.words,
        "largest_power": None if state.most is None else finite(state.most),
        "voltage": pair(None if state.point is None else scalar(state.point.voltage)),
        "current": pair(None if state.point is None else scalar(state.point.current)),
        "power": None if power is None else finite(power.real),
        "reactive_power": None if power is None else finite(reactive(power)),
        **({"power_exact": power.exact} if is_exact(power) else {}),  # type: ignore[union-attr]
        "power_factor": None if power is None else power_factor(power),
        "current_phase": None if power is None else leans(power) or None,
        "regulation": None if state.regulation is None else finite(state.regulation),
        "efficiency": state.efficiency.value,
        "efficiency_reason": state.efficiency.reason or None,
        "check": None
        if proof is None
        else {"voltage": pair(proof.voltage), "current": pair(proof.current),
              "difference": finite(proof.difference)},
        "sources": [] if proof is None else [_source_data(s) for s in proof.sources],
    }  # fmt: skip


def _source_data(s: SourceState) -> dict[str, Any]:
    return {
        "name": s.name,
        "kind": s.kind,
        "role": s.role,
        "voltage": pair(s.voltage),
        "power": pair(s.delivered),
        "reason": "not determined" if s.delivered is None else None,
    }


def total_data(t: LoadTotal) -> dict[str, Any]:
    """The JSON of a load over all frequencies."""
    return {
        "number": t.number,
        "load": t.load.text,
        "voltage_rms": t.voltage,
        "current_rms": t.current,
        "power": t.power,
        "efficiency": t.efficiency.value,
        "efficiency_reason": t.efficiency.reason or None,
        "reason": t.words or None,
    }
