"""Sweeps as tables to be read, as one whole table for CSV, and as JSON."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

import numpy as np

from equiv.analyses.headings import frequency_words
from equiv.analyses.result import finite, pair
from equiv.analyses.sweeping.axis import Axis
from equiv.analyses.sweeping.curves import Curve
from equiv.analyses.tables import Cell, Column, Measure, Row, Table
from equiv.equations.layout import Numbers
from equiv.network import Network

MOST_TERMS = 6
"""Sources with a column of their own in a table that is read; CSV and JSON have all."""
_MOST_POINTS_NAMED = 8
_ROUNDING = 1e-13


def curve_table(network: Network, axis: Axis, curve: Curve) -> Table:
    """A row a point: the total, the source that dominates, and the largest terms."""
    columns: list[Column] = [Column(axis.name, "" if axis.log else axis.unit, key=True)]
    cells: list[list[Cell]] = [_axis_cells(axis)]
    for column, numbers in _totals(curve):
        columns.append(column)
        cells.append(numbers)
    shown: list[int] = []
    if curve.sources:
        shown = sorted(curve.by_peak[:MOST_TERMS])
        for column, numbers in [*_dominating(curve), *_terms(curve, shown)]:
            columns.append(column)
            cells.append(numbers)
    rows = tuple(Row(row) for row in zip(*cells, strict=True))
    return Table(
        network.title or "Sweep", titles(axis, curve), tuple(columns), rows,
        tuple(_notes(axis, curve, shown)), name=name_of(curve),
    )  # fmt: skip


def name_of(curve: Curve) -> str:
    """What tells this curve from the others of the result."""
    at = curve.frequency
    where = f" at {frequency_words(at, '')}" if at is not None and at.omega else ""
    return f"{curve.asked.word}{where}"


def titles(axis: Axis, curve: Curve) -> tuple[str, ...]:
    """Label, the quantity in words, what it is against, and the frequency."""
    label = curve.asked.label
    heading = curve.heading[0].upper() + curve.heading[1:]
    port = curve.asked.port
    if port is not None:
        heading = (
            f"Port {port.name}: impedance and open-circuit voltage of {port.plus} over {port.minus}"
        )
    else:
        heading = f"{heading} ({curve.asked.word})"
    steps = "in equal ratios" if axis.log else "in equal steps"
    last = axis.points - 1
    against = (
        f"Against {axis.words} from {axis.at(0)} to {axis.at(last)}, {last + 1} points {steps}"
    )
    at = "phasors are rms" if curve.frequency is None else frequency_words(curve.frequency)
    return (*([label[0].upper() + label[1:]] if label else []), heading, against, at)


def _axis_cells(axis: Axis) -> list[Cell]:
    if not axis.log:
        return list(axis.values.tolist())
    return [Measure(value, axis.unit) for value in axis.values.tolist()]


def _numbers(values: Any, real: bool) -> list[Cell]:
    """The numbers of a column; None where there is none."""
    known = [None if value != value else value for value in values.tolist()]
    return [None if v is None else v.real for v in known] if real else list(known)


def _totals(curve: Curve) -> list[tuple[Column, list[Cell]]]:
    if curve.is_power:
        power = [(Column("power absorbed", "W", family="power"), _numbers(curve.total, True))]
        if not curve.real:
            column = Column("reactive power", "var", family="power")
            power.append((column, _numbers(_reactive(curve.total), True)))
        return power
    total = _numbers(curve.total, curve.real)
    if curve.impedance is None:
        return [(Column("sum of terms", curve.unit, repeat=False, family="term"), total)]
    z = _numbers(curve.impedance, curve.real)
    found = [(Column("impedance", "ohm", family="impedance"), z)]
    if curve.sources:
        found.append((Column("open-circuit voltage", "V", family="term"), total))
    return found


def _reactive(power: Numbers) -> Numbers:
    """The imaginary part, as the zero that it stands for where it is only rounding."""
    return np.where(np.abs(power.imag) <= _ROUNDING * np.abs(power), 0.0, power.imag)


def _dominating(curve: Curve) -> list[tuple[Column, list[Cell]]]:
    if curve.is_power or len(curve.sources) < 2:
        return []
    names: list[Cell] = [None if k is None else curve.sources[k] for k in curve.dominant]
    shares: list[Cell] = [
        None if k is None else float(curve.shares[point, k])
        for point, k in enumerate(curve.dominant)
    ]
    return [(Column("dominating source"), names), (Column("its gross share", "%"), shares)]


def _terms(curve: Curve, shown: Sequence[int]) -> list[tuple[Column, list[Cell]]]:
    if len(curve.sources) < 2 and not curve.is_power:
        return []
    if curve.is_power:
        return [
            (Column(f"own power of {curve.sources[k]}", "W", family="power"),
             _numbers(curve.terms[:, k], True))
            for k in shown
        ]  # fmt: skip
    return [
        (Column(f"term of {curve.sources[k]}", curve.unit, family="term"),
         _numbers(curve.terms[:, k], curve.real))
        for k in shown
    ]  # fmt: skip


def _notes(axis: Axis, curve: Curve, shown: Sequence[int]) -> list[str]:
    notes = []
    if curve.is_power:
        notes.append("Powers do not superpose: own powers leave out what pairs of sources make.")
    elif len(curve.sources) > 1:
        notes.append("Gross share: |term| over the sum of all |term|.")
    more = len(curve.sources) - len(shown)
    if more > 0:
        notes.append(f"The {len(shown)} largest terms are shown; CSV and JSON have {more} more.")
    return notes + reasons_in_words(axis, curve)


def reasons_in_words(axis: Axis, curve: Curve) -> list[str]:
    """Why there is no value at some points; a reason once, with the points that it holds for."""
    points: dict[str, list[int]] = {}
    for point, reason in sorted(curve.reasons.items()):
        points.setdefault(reason, []).append(point)
    words = []
    for reason, places in points.items():
        named = ", ".join(axis.at(p) for p in places[:_MOST_POINTS_NAMED])
        if len(places) > _MOST_POINTS_NAMED:
            named += f" and {len(places) - _MOST_POINTS_NAMED} more points"
        words.append(f"No value at {named}: {reason}.")
    return words


def whole_table(axis: Axis, curve: Curve) -> Table:
    """Every number of a curve, a row a point, in SI units: for CSV."""
    unit = ("W" if curve.real else "VA") if curve.is_power else curve.unit
    columns = [Column(axis.name, axis.unit)]
    cells: list[list[Cell]] = [list(axis.values.tolist())]
    if curve.impedance is not None:
        columns.append(Column("impedance", "ohm", family="impedance"))
        cells.append(_numbers(curve.impedance, curve.real))
    whole = "open-circuit voltage" if curve.asked.port else "total"
    columns.append(Column(whole, unit, family="term"))
    cells.append(_numbers(curve.total, curve.real))
    what = "own power of" if curve.is_power else "term of"
    for k, source in enumerate(curve.sources):
        columns.append(Column(f"{what} {source}", unit, family="term"))
        cells.append(_numbers(curve.terms[:, k], curve.real))
    for column, numbers in _dominating(curve):
        columns.append(column)
        cells.append(numbers)
    if curve.reasons:
        columns.append(Column("reason"))
        cells.append([curve.reasons.get(p, "") for p in range(len(axis.values))])
    rows = tuple(Row(row) for row in zip(*cells, strict=True))
    return Table(name_of(curve), (), tuple(columns), rows, name=name_of(curve))


def curve_data(axis: Axis, curve: Curve) -> dict[str, Any]:
    """The JSON of a curve."""
    port = curve.asked.port
    what: dict[str, Any] = {"quantity": str(curve.asked.quantity), "label": curve.asked.label}
    if port is not None:
        what = {"port": {"name": port.name, "plus": port.plus, "minus": port.minus}}
    return {
        **what,
        "unit": curve.unit,
        "positive": curve.positive,
        "hertz": None if curve.frequency is None else curve.frequency.hertz,
        "sources": list(curve.sources),
        "points": [_point_data(axis, curve, p) for p in range(len(axis.values))],
    }


def _point_data(axis: Axis, curve: Curve, point: int) -> dict[str, Any]:
    total = pair(complex(curve.total[point]))
    terms = [pair(complex(term)) for term in curve.terms[point]]
    data: dict[str, Any] = {"at": float(axis.values[point])}
    if curve.is_power:
        return {**data, "own": terms, "total": total, "reason": curve.reasons.get(point)}
    k = curve.dominant[point]
    shared = {
        "terms": terms,
        "gross_shares": [finite(float(share)) for share in curve.shares[point]],
        "dominating": None if k is None else curve.sources[k],
        "reason": curve.reasons.get(point),
    }
    if curve.impedance is None:
        return {**data, "total": total, **shared}
    z = pair(complex(curve.impedance[point]))
    return {**data, "impedance": z, "open_circuit_voltage": total, **shared}
