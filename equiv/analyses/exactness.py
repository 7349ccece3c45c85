"""Exact numbers beside decimals: their columns in tables, and what is said of them."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace

from equiv.analyses.tables import LONGEST_SHOWN, Cell, Column, Fractions, Row
from equiv.network import Network
from equiv.units import is_exact

_REMARK = (
    "Exact: rational arithmetic from the text on, the checks too; shares and ratios of magnitudes "
    "are rounded."
)
_DYNAMIC = " Natural frequencies are sought in floating point."
_LONG = (
    f"An exact value of more than {LONGEST_SHOWN} characters is not shown here; it stands whole in "
    "JSON and CSV."
)


def exactly(network: Network, exact: bool) -> Network:
    """The network, to be solved in rational arithmetic where that is wanted."""
    return replace(network, arithmetic="exact") if exact else network


def remarks(network: Network) -> list[str]:
    """What is said of all the numbers of an exact result."""
    if not network.exact:
        return []
    dynamic = any(e.kind in ("inductor", "capacitor") for e in network.elements.values())
    return [_REMARK + (_DYNAMIC if dynamic else "")]


def exact_columns(network: Network, *columns: tuple[str, str]) -> list[Column]:
    """Columns of names and units for exact values; none where the numbers are not exact."""
    return [Column(name, unit) for name, unit in columns] if network.exact else []


def exact_cells(network: Network, *values: complex | None, unit: str = "") -> list[Cell]:
    """Cells for such columns; `unit` where the rows of a column have different ones."""
    return [_cell(value, unit) for value in values] if network.exact else []


def _cell(value: complex | None, unit: str) -> Cell:
    if value is None:
        return None
    if not is_exact(value):
        return ""
    exact = value.exact  # type: ignore[attr-defined]
    re, im = (exact, "") if isinstance(exact, str) else exact
    return Fractions(re, im, unit)


def exact_notes(rows: Iterable[Row]) -> list[str]:
    """What is said under a table some of whose exact values are too long to be shown."""
    cells = (cell for row in rows for cell in row.cells)
    return [_LONG] if any(isinstance(c, Fractions) and c.long for c in cells) else []
