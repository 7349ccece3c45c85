"""Readings of a real port, made ready to be fitted; what no port can give is refused."""

from __future__ import annotations

import cmath
from collections.abc import Sequence
from typing import NamedTuple

import numpy as np

from equiv.equations.layout import Numbers
from equiv.errors import Diagnostic, DoesNotExistError, Span
from equiv.language.readings import QUANTITIES, Cell, ReadingTable, impossible, read_table


class Readings(NamedTuple):
    """Readings of a port: a row each.

    `mode` is `real` (DC), `complex` (angles are given) or `magnitude`; `by` is `load`, where
    `drawn` is the load's admittance (S), or `current`, where it is the current (A). Covariances
    are n x d x d (d = 2 for real and imaginary part), or None where nothing is stated.
    """

    mode: str
    by: str
    voltages: Numbers
    drawn: Numbers
    voltage_covariance: Numbers | None
    drawn_covariance: Numbers | None
    cells: tuple[Cell, ...]
    """The voltage cell of each reading."""
    loads: tuple[Cell, ...]
    """The load or current cell of each reading."""
    head: Span

    @property
    def stated(self) -> bool:
        """Whether uncertainties are stated."""
        return self.voltage_covariance is not None

    @property
    def unknowns(self) -> int:
        """Real numbers that are looked for."""
        return {"real": 2, "magnitude": 3, "complex": 4}[self.mode]

    @property
    def fewest(self) -> int:
        """Readings that are needed."""
        return 3 if self.mode == "magnitude" else 2


def read_readings(text: str, name: str) -> Readings:
    """The readings of a CSV text.

    Errors: NetworkFileError for what cannot be read, or is no reading of a port.
    """
    table = read_table(text, name, QUANTITIES)
    columns = table.columns
    mode, by = _kind(table)
    voltage_name = "|voltage|" if mode == "magnitude" else "voltage"
    cells, drawn = columns[voltage_name], columns[by]
    _require_possible(mode, by, cells, drawn)
    voltages, spread = _numbers(cells, columns.get("voltage angle"), mode)
    values, other = _numbers(drawn, columns.get(f"{by} angle"), mode)
    if by == "load":
        values, other = _admittances(values, other)
    _require_all_or_none(cells)
    _require_all_or_none([cell for cell in drawn if not cell.word])
    if spread is None and other is not None:
        spread = np.zeros((len(cells), *other.shape[1:]))
    found = Readings(
        mode, by, voltages, values, spread, other, tuple(cells), tuple(drawn), table.head
    )
    if len(cells) < found.fewest:
        what = "two readings" if found.fewest == 2 else "three readings"
        raise impossible("too-few-readings", f"{what} or more are needed", table.head)
    return found


def _kind(table: ReadingTable) -> tuple[str, str]:
    """Whether the readings are real, complex or magnitudes; and what stands beside the voltage."""
    columns = table.columns
    if "|voltage|" in columns:
        if extra := [q for q in columns if q not in ("|voltage|", "load", "remark")]:
            message = f"beside |voltage| only load is used; found {extra[0]}"
            raise impossible("extra-column", message, table.head)
        table.require("load")
        return "magnitude", "load"
    table.require("voltage")
    if ("load" in columns) == ("current" in columns):
        message = "beside the voltage, either load or current is needed, not both"
        raise impossible("missing-column", message, table.head,
                         "columns: load [ohm],voltage [V]  or  voltage [V],current [A]")  # fmt: skip
    by = "load" if "load" in columns else "current"
    complex_cells = [
        isinstance(cell.value, complex) for q in ("voltage", by) for cell in columns[q]
    ]
    angles = "voltage angle" in columns or "current angle" in columns
    if not angles and not any(complex_cells):
        return "real", by
    if by == "current" and ("voltage angle" in columns) != ("current angle" in columns):
        message = "voltage and current both need an angle, against one reference for all readings"
        raise impossible("missing-column", message, table.head)
    if by == "load" and "current angle" in columns:
        raise impossible("extra-column", "there is no current that this angle is of", table.head)
    return "complex", by


def _require_possible(mode: str, by: str, voltages: Sequence[Cell], drawn: Sequence[Cell]) -> None:
    for cell in voltages:
        if mode == "magnitude" and (isinstance(cell.value, complex) or cell.value <= 0):
            raise impossible(
                "impossible-reading", "a magnitude is a real number over zero", cell.span
            )
    if by != "load":
        return
    for cell, load in zip(voltages, drawn, strict=True):
        if not load.value:
            raise impossible("impossible-reading", "a short has no voltage to be read", load.span,
                             "give voltage and current in place of load and voltage")  # fmt: skip
        if load.value.real < 0 or (load.value.real == 0 and mode != "complex"):
            raise impossible("impossible-reading", "a load's resistance is not negative", load.span)
        if mode == "magnitude" and isinstance(load.value, complex):
            raise impossible("needs-real", "magnitudes alone need resistive loads", load.span,
                             "give the angles of the voltages too")  # fmt: skip
        if not abs(cell.value):
            message = "no voltage across a load that is no short: the port gives nothing here"
            raise impossible("impossible-reading", message, cell.span)


def _require_all_or_none(cells: Sequence[Cell]) -> None:
    without = next((cell for cell in cells if cell.uncertainty is None), None)
    if without is not None and any(cell.uncertainty is not None for cell in cells):
        message = "this reading states no uncertainty, others of its column do"
        raise impossible("missing-uncertainty", message, without.span)


def _numbers(
    cells: Sequence[Cell], angles: Sequence[Cell] | None, mode: str
) -> tuple[Numbers, Numbers | None]:
    """The numbers of a column with their angles, and the covariance of each.

    The uncertainty of a complex number is that of its real and of its imaginary part, unless
    that of its angle is stated too.
    """
    stated = any(cell.uncertainty is not None for cell in cells)
    sigmas = np.array([cell.uncertainty or 0.0 for cell in cells])
    if mode != "complex":
        values = np.array([cell.value.real for cell in cells])
        return values, (sigmas**2)[:, None, None] if stated else None
    values = np.array([complex(cell.value) for cell in cells])
    covariance = (sigmas**2)[:, None, None] * np.eye(2)
    if angles is not None:
        turns = np.array([cmath.rect(1.0, cell.value.real) for cell in angles])
        values = values * turns
        if any(cell.uncertainty is not None for cell in angles):
            across = np.abs(values) * np.array([cell.uncertainty or 0.0 for cell in angles])
            axes = np.angle(values)
            frame = np.stack([np.cos(axes), -np.sin(axes), np.sin(axes), np.cos(axes)], axis=-1)
            frame = frame.reshape(-1, 2, 2)
            both = np.stack([sigmas**2, across**2], axis=-1)
            covariance = np.einsum("nij,nj,nkj->nik", frame, both, frame)
            stated = True
    return values, covariance if stated else None


def _admittances(loads: Numbers, covariance: Numbers | None) -> tuple[Numbers, Numbers | None]:
    """Admittances of loads (0 where it is open), and their covariance by d(1/Z) = -dZ/Z²."""
    opened = np.isinf(loads)
    safe = np.where(opened, 1.0, loads)
    values = np.where(opened, 0.0, 1.0 / safe)
    if covariance is None:
        return values, None
    slope = -(values**2)
    turned = blocks(slope)
    spread: Numbers = turned @ covariance @ np.swapaxes(turned, 1, 2)
    return values, spread


def blocks(values: Numbers) -> Numbers:
    """Numbers as n x d x d matrices that multiply by them (d = 2 for complex ones)."""
    if not np.iscomplexobj(values):
        return np.asarray(values)[:, None, None]
    rows = [[values.real, -values.imag], [values.imag, values.real]]
    return np.moveaxis(np.array(rows), -1, 0)


def refuse(message: str, cell: Cell, hint: str | None = None) -> DoesNotExistError:
    """That no port has these readings, shown at one of them."""
    return DoesNotExistError(Diagnostic("impossible-readings", message, cell.span, hint))
