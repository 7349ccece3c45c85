"""A match as tables."""

from __future__ import annotations

import math

from equiv.analyses.headings import frequency_words
from equiv.analyses.matching.band import REACH
from equiv.analyses.matching.build import exact
from equiv.analyses.matching.found import Found
from equiv.analyses.matching.preferred import SAMPLES
from equiv.analyses.tables import Cell, Column, Measure, Row, Table
from equiv.network import Network
from equiv.units import say, write_value

_SHOWN = 4
"""Of the choices of preferred values for a network."""


def match_tables(network: Network, found: Found, digits: int) -> list[Table]:
    """The port, the loads, the networks, their parts, and preferred values."""
    tables = [_port_table(network, found), _load_table(network, found, digits)]
    if found.networks:
        tables += [_network_table(found), _part_table(found)]
    if found.wanted.series and found.networks:
        tables.append(_preferred_table(found))
    return tables


def _port_table(network: Network, found: Found) -> Table:
    source = found.source
    dc = not source.frequency.omega
    port, z = source.port, source.impedance
    columns = (
        Column("port", key=True),
        Column("open-circuit voltage", "V"),
        Column("resistance", "ohm", family="impedance"),
        *(() if dc else (Column("reactance", "ohm", family="impedance"),)),
        Column("available power", "W"),
    )
    reactance = () if dc else (z.imag,)
    voltage = source.voltage.real if dc else source.voltage
    row = Row((port.name, voltage, z.real, *reactance, source.available_power))
    subtitles = (
        f"Port {port.name}: voltage of {port.plus} over {port.minus}, "
        f"current out of {port.plus} into the load",
        frequency_words(source.frequency),
    )
    note = "Available power: |Voc|²/(4 Re Z), the most that any load can take."
    return Table(network.title or "Match", subtitles, columns, (row,), (note,), name="port")


def _load_table(network: Network, found: Found, digits: int) -> Table:
    dc = not found.source.frequency.omega
    columns = (
        Column("load", key=True),
        Column("resistance", "ohm", family="impedance"),
        *(() if dc else (Column("reactance", "ohm", family="impedance"),)),
        Column("power", "W", family="power"),
        Column("in the network", "W", family="power"),
        Column("mismatch loss", "dB"),
        Column("efficiency", "%"),
    )
    rows = [
        Row(
            (
                load.rule,
                load.impedance.real,
                *(() if dc else (load.impedance.imag,)),
                load.power,
                load.found,
                # a loss that is only rounding is none
                load.mismatch_loss if load.mismatch_loss > 1e-12 else 0.0,
                load.efficiency,
            )
        )
        for load in found.loads
    ]
    return Table("Loads", (), columns, tuple(rows), _load_notes(network, found, digits),
                 name="loads")  # fmt: skip


def _load_notes(network: Network, found: Found, digits: int) -> tuple[str, ...]:
    notes = [
        "Power: of the equivalent; in the network: the load connected to the original network.",
        "Efficiency: the load's power over the power of the independent sources that deliver, in "
        "the original network. With the conjugate load, a Thevenin source gives half of its power "
        "to its own resistance: its efficiency is then at most 50 %.",
    ]
    if network.controlled:
        notes.append(
            "Controlled sources may deliver power as well, which the efficiency does not count: "
            "it may exceed 100 %."
        )
    for load in found.loads:
        if load.ratio is not None:
            notes.append(
                f"Ratio: an ideal transformer of {load.ratio:.{digits}g}:1 (port to load) makes "
                "the load look as given here."
            )
        if load.no_efficiency is not None:
            notes.append(f"{load.rule}: no efficiency, for {load.no_efficiency}.")
    if found.needs_none:
        notes.append(
            "The load is the conjugate of the port's impedance: it takes the available power as "
            "it is, and needs no network."
        )
    return tuple(notes)


def _network_table(found: Found) -> Table:
    lossy = found.losses.any
    needed = found.wanted.band is not None
    columns = (
        Column("no.", key=True),
        Column("network", key=True),
        Column("loaded Q"),
        Column("half power from", "Hz", family="band"),
        Column("to", "Hz", family="band"),
        Column("band", "Hz", family="width"),
        *((Column("return loss", "dB"), Column("loss", "dB")) if lossy else ()),
        *((Column("has the band"),) if needed else ()),
    )
    rows = []
    for number, n in enumerate(found.networks, 1):
        loss: tuple[Cell, ...] = (n.return_loss_db, n.loss_db) if lossy else ()
        has: tuple[Cell, ...] = (("yes" if n.covers else "no"),) if needed else ()
        name = f"{n.section.topology}: {n.section.words}"
        rows.append(Row((number, name, n.section.q, *n.band, n.band.width, *loss, *has)))
    assert found.load is not None and found.best is not None
    title = f"Networks for a load of {write_value(exact(found.load), 'ohm')}"
    return Table(title, (), columns, tuple(rows), _network_notes(found), name="networks")


def _network_notes(found: Found) -> tuple[str, ...]:
    lines = any(part.kind == "line" for n in found.networks for part in n.section.parts)
    notes = [
        "From the port to the load. Half power: of the load's power at the match, found in the "
        "network itself; the load is held constant"
        + (", a line's length grows with frequency." if lines else "."),
    ]
    if any(None in n.band for n in found.networks):
        notes.append(
            f"Where a half-power point is missing, there is none within a factor of {REACH:g}."
        )
    if found.losses.any:
        named = {"coils": found.losses.inductor_q, "capacitors": found.losses.capacitor_q}
        parts = " and ".join(f"{name} of Q {q:g}" for name, q in named.items() if q)
        notes.append(
            f"Real parts: {parts} at the match frequency; a coil has a constant resistance in "
            "series, a capacitor a constant conductance across it. Loss: what the load takes "
            "less than the available power."
        )
    if found.wanted.band is not None:
        low, high = found.wanted.span(found.source.frequency.hertz) or (0.0, 0.0)
        notes.append(f"The band that is needed: {say(low, 'Hz')} to {say(high, 'Hz')}.")
    assert found.best is not None
    notes.append(
        f"Best: network {found.best + 1} (of those with the band that is needed, if any; then by "
        "return loss in preferred values, loss, fewest parts, widest band)."
    )
    return tuple(notes)


def _part_table(found: Found) -> Table:
    columns = (
        Column("no.", key=True),
        Column("part", key=True),
        Column("position"),
        Column("value"),
        Column("voltage", "V", family="voltage"),
        Column("current", "A", family="current"),
    )
    rows: list[Row] = []
    for number, n in enumerate(found.networks, 1):
        first: Cell = number
        for part, stress in zip(n.section.parts, n.real.stresses, strict=True):
            value = Measure(part.value, part.unit)
            name = "line, 90 degrees" if part.kind == "line" else part.kind
            rows.append(Row((first, name, part.position, value, *stress)))
            first = number
    notes = [
        "Exact values, from the port to the load; voltage across and current in each part, rms, "
        "in the original network."
    ]
    if any(part.kind == "line" for n in found.networks for part in n.section.parts):
        notes.append(
            "A line's value is its characteristic impedance; its voltage and current are those "
            "of the larger end."
        )
    return Table("Parts", (), columns, tuple(rows), tuple(notes), name="parts")


def _preferred_table(found: Found) -> Table:
    wanted = found.wanted
    most = max(len(n.section.parts) for n in found.networks)
    columns = (
        Column("no.", key=True),
        Column("rank", key=True),
        *(Column(f"part {k + 1}") for k in range(most)),
        Column("return loss", "dB"),
        Column("loss", "dB"),
        Column("yield", "%"),
    )
    rows = []
    for number, n in enumerate(found.networks, 1):
        units = [part.unit for part in n.section.parts]
        for rank, choice in enumerate(n.preferred[:_SHOWN], 1):
            values: list[Cell] = [
                Measure(value, unit) for value, unit in zip(choice.values, units, strict=True)
            ]
            values += [""] * (most - len(values))
            loss = choice.return_loss_db if math.isfinite(choice.return_loss_db) else None
            rows.append(Row((number, rank, *values, loss, choice.loss_db, choice.yielded)))
    where = "at the match frequency"
    if wanted.band is not None:
        where = "at the match frequency and at both ends of the needed band; the least counts"
    notes = [
        f"Values next to the exact ones, ranked by return loss in the network, {where}.",
        f"Yield: of {SAMPLES} networks drawn with parts up to {100 * wanted.tolerance:g} % off "
        f"(evenly, the same draw each time), those with {wanted.return_loss:g} dB or more.",
    ]
    if any(len(n.preferred) > _SHOWN for n in found.networks):
        notes.append(f"The best {_SHOWN} of each network; the JSON has all of them.")
    title = f"Preferred values, {wanted.series} of IEC 60063"
    return Table(title, (), columns, tuple(rows), tuple(notes), name="preferred")
