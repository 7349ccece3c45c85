"""A plot as plain text: bands and lines on a grid of characters, with axes in words and units.

What is told by a character is told by its shape: never by a colour.
"""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import replace
from itertools import pairwise
from typing import NamedTuple

from equiv.analyses.tables import MEASURES, Plot, Series
from equiv.errors import display_width, printable
from equiv.units import engineering_power, prefix_of

WIDTH, HEIGHT = 66, 15
"""Characters of the field; with the scale at its left it stays within 80 columns."""
_GUTTER = 10
_MOST_LINE = 79
_STEPS = (1.0, 1.2, 1.6, 2.0, 3.0, 4.0, 6.0, 8.0, 10.0)
"""Ends of a scale, of which the half is as plain a number."""


class Signs(NamedTuple):
    """What a picture is made of."""

    bands: str
    line: str
    none: str
    upright: str
    tick: str
    corner: str
    level: str
    ohm: str
    micro: str


UNICODE = Signs("█░▓╱▒·", "●", "×", "│", "┤", "└", "─", "Ω", "µ")
ASCII = Signs("#.%/+:", "o", "x", "|", "+", "+", "-", "ohm", "u")


class Scale(NamedTuple):
    """The vertical scale: its ends, in the plain unit, and whether it is logarithmic."""

    low: float
    high: float
    log: bool

    def row(self, value: float) -> int:
        """How many rows of the field lie under a value."""
        if self.log:
            span = math.log10(self.high / self.low)
            part = math.log10(max(value, self.low) / self.low) / span
        else:
            part = (value - self.low) / (self.high - self.low)
        return min(HEIGHT, max(0, round(part * HEIGHT)))

    def middle(self) -> float:
        """The value half way up."""
        return math.sqrt(self.low * self.high) if self.log else (self.low + self.high) / 2


def drawn(plot: Plot, unicode: bool) -> str:
    """The picture as lines of text."""
    signs = UNICODE if unicode else ASCII
    plot = _filled(plot)
    columns = _columns(plot)
    scale = _scale(plot, columns)
    if scale is None:
        return "There is nothing to draw: no point has a value."
    field = [_column(plot, points, scale, signs) for points in columns]
    power = engineering_power(max(abs(scale.low), abs(scale.high)))
    how = ", logarithmic" if scale.log else ""
    unit = _unit(power, plot.y_unit, signs)
    lines = [" " * _GUTTER + f"{MEASURES[plot.y_unit]} in {unit}{how}"]
    labels = {HEIGHT: scale.high, (HEIGHT + 1) // 2: scale.middle(), 0: scale.low}
    for row in range(HEIGHT, 0, -1):
        label = _number(labels[row], power, scale.log) if row in labels else ""
        mark = signs.tick if row in labels else signs.upright
        lines.append(f"{label:>{_GUTTER - 1}}{mark}" + "".join(c[row - 1] for c in field).rstrip())
    gaps = [all(_missing(plot, p) for p in points) for points in columns]
    floor = "".join(signs.none if gap else signs.level for gap in gaps)
    lines.append(f"{_number(scale.low, power, scale.log):>{_GUTTER - 1}}{signs.corner}{floor}")
    lines += _below(plot, len(columns), signs)
    lines += _legend(plot, any(gaps), signs)
    return "\n".join(line.rstrip() for line in lines)


def _filled(plot: Plot) -> Plot:
    """A plot of few points with straight lines between them, a point for each column."""
    last = len(plot.x) - 1
    if last + 1 >= WIDTH:
        return plot
    places = [k * last / (WIDTH - 1) for k in range(WIDTH)]

    def filled(series: Series) -> Series:
        return Series(series.name, tuple(_between(series.values, at) for at in places))

    bands, lines = tuple(map(filled, plot.bands)), tuple(map(filled, plot.lines))
    ends = (plot.x[0], *[math.nan] * (WIDTH - 2), plot.x[-1])
    return replace(plot, x=ends, bands=bands, lines=lines)


def _between(values: Sequence[float], at: float) -> float:
    """The value at a place between two points; beside a missing one the nearer of the two."""
    before = min(int(at), len(values) - 2)
    low, high = values[before], values[before + 1]
    found = low + (at - before) * (high - low)
    return values[round(at)] if math.isnan(found) else found


def _columns(plot: Plot) -> list[range]:
    """The points that each column of the field shows."""
    edges = [round(k * len(plot.x) / WIDTH) for k in range(WIDTH + 1)]
    return [range(a, b) for a, b in pairwise(edges)]


def _missing(plot: Plot, point: int) -> bool:
    series = (*plot.bands, *plot.lines)
    return any(math.isnan(one.values[point]) for one in series)


def _stack(plot: Plot, point: int) -> float:
    return math.fsum(band.values[point] for band in plot.bands)


def _scale(plot: Plot, columns: Sequence[Sequence[int]]) -> Scale | None:
    """A scale with plain numbers at its ends that everything fits in."""
    points = [p for column in columns for p in column if not _missing(plot, p)]
    if not points:
        return None
    values = [line.values[p] for line in plot.lines for p in points]
    values += [_stack(plot, p) for p in points] if plot.bands else []
    low, high = min(values), max(values)
    if plot.y_log:
        ends = math.floor(math.log10(low) + 1e-9), math.ceil(math.log10(high) - 1e-9)
        return Scale(10.0 ** ends[0], 10.0 ** max(ends[1], ends[0] + 1), True)
    if low == high == 0:
        return Scale(0.0, 1.0, False)
    return Scale(-_plain(-low) if low < 0 else 0.0, _plain(high) if high > 0 else 0.0, False)


def _plain(value: float) -> float:
    """The plain number at or above a positive one."""
    power = 10.0 ** math.floor(math.log10(value))
    return next((s for s in _STEPS if s * power >= value * (1 - 1e-9)), 10.0) * power


def _column(plot: Plot, points: Sequence[int], scale: Scale, signs: Signs) -> list[str]:
    """A column of the field, from below; of several points the one that reaches highest."""
    cells = [" "] * HEIGHT
    known = [p for p in points if not _missing(plot, p)]
    if not known:
        return cells
    if plot.bands:
        top = max(known, key=lambda p: _stack(plot, p))
        below, under = 0.0, 0
        for number, band in enumerate(plot.bands):
            below += band.values[top]
            upper = scale.row(below)
            for row in range(under, upper):
                cells[row] = signs.bands[min(number, len(signs.bands) - 1)]
            under = max(under, upper)
        known = [top]
    for line in plot.lines:
        rows = [max(1, scale.row(line.values[p])) for p in known]
        if plot.bands and rows[0] >= under:
            continue  # nothing cancels: the line would only hide the uppermost band
        for row in range(min(rows), max(rows) + 1):
            cells[row - 1] = signs.line
    return cells


def _unit(power: int, unit: str, signs: Signs) -> str:
    prefix = prefix_of(power).replace("u", signs.micro)
    return prefix + (signs.ohm if unit == "ohm" else unit)


def _number(value: float, power: int, log: bool) -> str:
    text = f"{value / 10.0**power:.3g}"
    if "e" in text and log:
        return f"{value / 10.0**power:.0e}"
    return text


def _point(value: float, unit: str, signs: Signs) -> str:
    power = engineering_power(abs(value)) if unit else 0
    return f"{value / 10.0**power:.4g} {_unit(power, unit, signs)}".rstrip()


def _below(plot: Plot, width: int, signs: Signs) -> Iterator[str]:
    """The ends and the middle of the horizontal axis, and what it is."""
    first, last = plot.x[0], plot.x[-1]
    middle = math.sqrt(first * last) if plot.x_log else (first + last) / 2
    left, centre, right = (_point(x, plot.x_unit, signs) for x in (first, middle, last))
    line = f"{left:<{width}}"
    start = (width - len(centre)) // 2
    line = line[:start] + centre + line[start + len(centre) :]
    yield " " * _GUTTER + line[: width - len(right)] + right
    yield " " * _GUTTER + printable(plot.x_name) + (", logarithmic" if plot.x_log else "")


def _legend(plot: Plot, gaps: bool, signs: Signs) -> Iterator[str]:
    """Every sign with what it stands for, the uppermost first."""
    where = ", where it is less than the stack" if plot.bands else ""
    marks = [(signs.line, line.name + where) for line in plot.lines]
    bands = list(enumerate(plot.bands))[::-1]
    marks += [(signs.bands[min(n, len(signs.bands) - 1)], band.name) for n, band in bands]
    marks += [(signs.none, "no value")] if gaps else []
    line = " " * _GUTTER
    for sign, name in marks:
        item = f"{sign} {printable(name)}"
        if line.strip() and display_width(line) + display_width(item) + 3 > _MOST_LINE:
            yield line
            line = " " * _GUTTER
        line += ("   " if line.strip() else "") + item
    yield line
