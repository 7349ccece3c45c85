"""The pictures of a sweep: stacked terms of a quantity, a port's impedance, a power."""

from __future__ import annotations

import numpy as np

from equiv.analyses.picture import drawn
from equiv.analyses.sweeping.axis import Axis
from equiv.analyses.sweeping.curves import Curve
from equiv.analyses.sweeping.tables import name_of
from equiv.analyses.tables import Plot, Series, Table
from equiv.equations.layout import Numbers
from equiv.network import Network

MOST_BANDS = 5
"""Sources with a band of their own; the others share one."""
_LOG_FROM = 50.0
"""The ratio of the largest to the smallest impedance from which its axis is logarithmic."""
OTHERS = "other sources"


def plots_of(network: Network, axis: Axis, curve: Curve) -> list[Plot]:
    """The impedance of a port, then the terms stacked, or the curve of a power."""
    title = network.title or "Sweep"
    found = []
    if curve.impedance is not None:
        size = np.abs(curve.impedance)
        known = size[np.isfinite(size)]
        spread = known.size and known.min() > 0 and known.max() > _LOG_FROM * known.min()
        name = f"Magnitude of the impedance of {curve.asked.word}"
        found.append(_plot(title, axis, name, "ohm", lines=(_series("|Z|", size),),
                           y_log=bool(spread)))  # fmt: skip
    if curve.is_power:
        power = (_series(curve.asked.word, curve.total.real),)
        found.append(_plot(title, axis, _sentence(curve), "W", lines=power))
    elif curve.sources:
        lines = (_series("|sum|", np.abs(curve.total)),) if len(curve.sources) > 1 else ()
        name = f"{_sentence(curve)}: |term| of each source, stacked"
        found.append(_plot(title, axis, name, curve.unit, _bands(curve), lines))
    return found


def picture_table(plot: Plot) -> Table:
    """The picture as a table of text, with a version in ASCII."""
    name = f"picture of {plot.y_name}"
    return Table(plot.y_name, text=drawn(plot, True), plain=drawn(plot, False), name=name)


def _plot(
    title: str, axis: Axis, y_name: str, y_unit: str, bands: tuple[Series, ...] = (),
    lines: tuple[Series, ...] = (), y_log: bool = False,
) -> Plot:  # fmt: skip
    return Plot(title, axis.words, axis.unit, tuple(axis.values.tolist()), axis.log,
                y_name, y_unit, bands, lines, y_log)  # fmt: skip


def _sentence(curve: Curve) -> str:
    words = curve.heading.split(", positive")[0]
    at = name_of(curve).removeprefix(curve.asked.word)
    return f"{words[0].upper()}{words[1:]}{at}"


def _series(name: str, values: Numbers) -> Series:
    return Series(name, tuple(values.tolist()))


def _bands(curve: Curve) -> tuple[Series, ...]:
    """The largest terms each, the largest first and so lowest; the others together."""
    order = curve.by_peak
    own = order if len(order) <= MOST_BANDS + 1 else order[:MOST_BANDS]
    bands = [_series(curve.sources[k], curve.sizes[:, k]) for k in own]
    rest = order[len(own) :]
    if rest:
        bands.append(_series(OTHERS, curve.sizes[:, rest].sum(axis=1)))
    return tuple(bands)
