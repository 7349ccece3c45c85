"""A load test as tables to be read and signed, and as JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from equiv.analyses.closing import closing_table
from equiv.analyses.result import finite, pair
from equiv.analyses.tables import Cell, Column, Measure, Row, Table
from equiv.units import say

if TYPE_CHECKING:
    from equiv.analyses.loadtest import Estimate, LoadTest

_MODES = {
    "real": "DC readings: v = E - R·i",
    "complex": "Readings with angles, against one reference: v = E - Z·i",
    "magnitude": "Magnitudes at resistive loads: |v| = |E|·Rl/|Rl + R + jX|",
}


def loadtest_tables(result: LoadTest, digits: int) -> tuple[Table, ...]:
    """Results, correlations, readings with residuals, checks."""
    tables = [_results_table(result), _readings_table(result)]
    if result.correlations is not None:
        tables.insert(1, _correlations_table(result))
    closing = closing_table(
        result.network, result.checks, result.cautions, *_remarks(result, digits)
    )
    return (*tables, closing)


def _measure(value: float | None, unit: str) -> Cell:
    return None if value is None else Measure(value, unit)


def _results_table(result: LoadTest) -> Table:
    assert result.readings is not None and result.fit is not None
    columns = (
        Column("quantity", key=True),
        Column("value"),
        Column("standard uncertainty"),
        Column("relative", "%"),
    )
    found: list[Estimate] = list(result.estimates)
    found += [e for e in (result.reactance_squared, result.short_current) if e is not None]
    rows = []
    for e in found:
        relative = None
        if e.value and e.uncertainty is not None:
            relative = abs(e.uncertainty / e.value)
        rows.append(
            Row((e.quantity, _measure(e.value, e.unit), _measure(e.uncertainty, e.unit), relative))
        )
    number = len(result.readings.cells)
    how = "exact" if not result.fit.freedom else f"least squares of {number} readings"
    subtitles = (_MODES[result.readings.mode], f"Of {number} readings, {how}"
                 if not result.fit.freedom else how[0].upper() + how[1:])  # fmt: skip
    notes = [f"There is no {e.quantity}: {e.reason}." for e in found if e.reason]
    if result.readings.mode == "magnitude":
        notes.append(
            "The sign of the reactance cannot be found from magnitudes at resistive loads."
        )
    notes.append(_how_uncertain(result))
    name = result.network.origin.name or "readings"
    return Table(
        f"Load test: {name}", subtitles, columns, tuple(rows), tuple(notes), name="results"
    )


def _degrees(freedom: int) -> str:
    return f"{freedom} degree{'' if freedom == 1 else 's'} of freedom"


def _how_uncertain(result: LoadTest) -> str:
    assert result.readings is not None and result.fit is not None
    if result.readings.stated:
        return (
            "Standard uncertainties by the law of propagation (JCGM 100:2008, 5.1 and 5.2); what "
            "stands behind ± is taken for a standard uncertainty (k = 1), independent of the others."
        )
    if result.fit.freedom:
        return (
            "Standard uncertainties from the scatter of the residuals, type A "
            f"({_degrees(result.fit.freedom)}): the readings state none."
        )
    return (
        "No uncertainties: the readings state none (with ±), and there are no more of them than "
        "unknowns."
    )


def _correlations_table(result: LoadTest) -> Table:
    assert result.correlations is not None
    names = [e.quantity for e in result.estimates]
    columns = (Column("results", key=True), Column("and", key=True), Column("correlation"))
    rows = [
        Row((names[p], names[q], result.correlations[p][q]))
        for p in range(len(names))
        for q in range(p + 1, len(names))
    ]
    notes = ("What is calculated from both needs it: they come from the same readings.",)
    return Table("Correlation of the results", (), columns, tuple(rows), notes, name="correlations")


def _readings_table(result: LoadTest) -> Table:
    readings, fit = result.readings, result.fit
    assert readings is not None and fit is not None
    of, unit = ("load", "ohm") if readings.by == "load" else ("current", "A")
    is_complex = readings.mode == "complex"
    stated = fit.spread is not None
    columns = (
        Column("no.", key=True),
        Column(of, unit, key=True),
        Column("voltage read", "V", family="voltage"),
        Column("voltage of the result", "V", family="voltage"),
        Column("residual", "V", exponent=True),
        *((Column("in standard uncertainties"),) if stated else ()),
    )
    rows = []
    for k, cell in enumerate(readings.loads):
        drawn: Cell = cell.word
        if not drawn:
            number = complex(1 / readings.drawn[k] if of == "load" else readings.drawn[k])
            drawn = number if is_complex else number.real
        read = readings.voltages[k]
        off = fit.residuals[k]
        left = complex(*off) if is_complex else float(off[0])
        size = abs(left) if is_complex else left
        cells: list[Cell] = [
            k + 1, drawn, complex(read) if is_complex else float(read),
            complex(read - left) if is_complex else float(read - left), size,
        ]  # fmt: skip
        if fit.spread is not None:
            parts = fit.residuals[k] / fit.spread[k]
            cells.append(float(abs(complex(*parts)) if is_complex else parts[0]))
        rows.append(Row(tuple(cells)))
    notes = ("Residual: voltage read less that of the result at the same "
             f"{of}{', its magnitude' if is_complex else ''}.",)  # fmt: skip
    return Table("Readings", (), columns, tuple(rows), notes, name="readings")


def _remarks(result: LoadTest, digits: int) -> list[str]:
    fit = result.fit
    assert fit is not None
    remarks = []
    if fit.chi_squared is not None:
        remarks.append(f"Fit: chi-squared {fit.chi_squared:.3g} for {_degrees(fit.freedom)}.")
    elif fit.scatter is not None:
        remarks.append(
            f"Fit: standard deviation of the residuals {say(fit.scatter, 'V', digits)}, "
            f"{_degrees(fit.freedom)}."
        )
    if result.impedance is not None and isinstance(result.impedance, complex):
        remarks.append(
            f"EMF {say(result.emf, 'V', digits)}; impedance {say(result.impedance, 'ohm', digits)}."
        )
    by_e, by_z = result.magnified
    words = [
        f"{by:.3g} % in the {what}"
        for by, what in ((by_e, "EMF"), (by_z, "impedance"))
        if by is not None
    ]
    remarks.append(
        f"Conditioning: independent errors of 1 % in the voltages become {' and '.join(words)}; "
        f"condition number of the scaled equations {fit.condition:.3g}."
    )
    remarks.append(
        "EMF and impedance stand for the terminals alone, within the range of the readings: "
        "losses and efficiency inside the port are not in them."
    )
    return remarks


def _estimate_data(e: Estimate | None) -> dict[str, Any] | None:
    if e is None:
        return None
    return {
        "quantity": e.quantity,
        "unit": e.unit,
        "value": e.value,
        "uncertainty": e.uncertainty,
        "reason": e.reason or None,
    }


def loadtest_data(result: LoadTest) -> dict[str, Any]:
    """The JSON of a load test."""
    readings, fit = result.readings, result.fit
    assert readings is not None and fit is not None
    correlations = result.correlations
    no_uncertainty = None if correlations is not None else _how_uncertain(result)
    impedance = result.impedance
    return {
        "mode": readings.mode,
        "readings": len(readings.cells),
        "emf": pair(complex(result.emf)),
        "impedance": pair(None if impedance is None else complex(impedance)),
        "impedance_reason": None
        if impedance is not None
        else "the sign of the reactance cannot be found from magnitudes at resistive loads",
        "estimates": [_estimate_data(e) for e in result.estimates],
        "reactance_squared": _estimate_data(result.reactance_squared),
        "short_circuit_current": _estimate_data(result.short_current),
        "correlations": None if correlations is None else [list(row) for row in correlations],
        "uncertainty_reason": no_uncertainty,
        "degrees_of_freedom": fit.freedom,
        "chi_squared": fit.chi_squared,
        "scatter": fit.scatter,
        "condition": finite(fit.condition),
        "magnified": {"emf": result.magnified[0], "impedance": result.magnified[1]},
        "residuals": [pair(complex(*row) if len(row) == 2 else complex(row[0]))
                      for row in fit.residuals.tolist()],
    }  # fmt: skip
