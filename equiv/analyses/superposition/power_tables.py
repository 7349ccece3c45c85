"""Powers as tables: own and cross terms as a matrix, and their sums."""

from __future__ import annotations

from equiv.analyses.exactness import exact_cells, exact_columns, exact_notes
from equiv.analyses.headings import name_of, titles_of
from equiv.analyses.result import Check
from equiv.analyses.superposition.terms import FrequencyTerms, Power, QuantityTerms, limit_of
from equiv.analyses.tables import Column, Row, Table
from equiv.network import Network


def power_tables(network: Network, q: QuantityTerms, at: FrequencyTerms) -> list[Table]:
    """Own powers and cross terms as a matrix, and their sums."""
    title, subtitles = titles_of(network, q, at)
    power = at.power
    assert power is not None
    matrix = [
        Row(
            (
                number + 1, source, *[""] * number, _real(power.own[number]),
                *map(_real, power.cross[number][number + 1 :]),
            )
        )
        for number, source in enumerate(power.sources)
    ]  # fmt: skip
    columns = (
        Column("no.", key=True),
        Column("source", key=True),
        *(Column(f"with {source}", "W", family="power") for source in power.sources),
    )
    notes = ["On the diagonal what a source gives alone; beside it what each pair gives together."]
    notes += [
        f"{source}: none alone; {reason}"
        for source, reason in zip(power.sources, power.reasons, strict=True)
        if reason
    ]
    return [
        Table(title, subtitles, columns, tuple(matrix), tuple(notes), name=name_of(q, at)),
        _power_sums(network, q, at, power),
    ]


def _real(value: complex | None) -> float | None:
    return None if value is None else value.real


def _power_sums(network: Network, q: QuantityTerms, at: FrequencyTerms, power: Power) -> Table:
    dc = not at.frequency.omega
    parts = [
        *([("sum of own powers", power.own_sum, False)] if power.complete else []),
        *([("sum of cross terms", power.cross_sum, False)] if power.complete else []),
        ("true total", power.total, True),
        ("all at once", power.all_on, True),
    ]
    rows = [
        Row(
            (name, value.real, *([] if dc else [value.imag]), *exact_cells(network, value)),
            total=total,
        )
        for name, value, total in parts
    ]
    reactive = [] if dc else [Column("reactive power", "var", family="power")]
    exact = exact_columns(network, ("exact", "W" if dc else "VA"))
    columns = (Column("part", key=True), Column("power", "W", family="power"), *reactive, *exact)
    notes = (
        "Powers do not superpose: the own powers alone are not the total.",
        Check(
            "difference of total and all at once", power.difference, limit_of(network)
        ).sentence(),
        *exact_notes(rows),
    )
    title = f"{q.heading[0].upper()}{q.heading[1:]}: sums"
    return Table(title, (), columns, tuple(rows), notes, name=f"sums of {name_of(q, at)}")
