"""Plots as SVG or PNG by matplotlib, which is needed only here.

The same plots give the same bytes: no date, no version of a font, a fixed salt for identifiers.
Every text is drawn as it is: nothing in a name is a formula, a command or markup. Bands differ by
hatching as well as by shade.
"""

from __future__ import annotations

import io
from collections.abc import Callable, Iterator, Sequence
from contextlib import contextmanager
from importlib.util import find_spec
from pathlib import PurePath
from typing import Any

from equiv.analyses.tables import MEASURES, Plot
from equiv.errors import Diagnostic, UsageError, printable
from equiv.rendering.marks import UNICODE
from equiv.units import engineering_power, prefix_of

FORMS = ("svg", "png")
_WIDE, _HIGH = 8.0, 4.5
"""Inches of one plot."""
_DOTS = 150
"""Of a PNG, to the inch."""
_SALT = "equiv"
_SHADES = ("#1f4e79", "#e8b04a", "#6fa8a0", "#b5534b", "#c9c3dd", "#d9d9d9")
_HATCHES = ("", "///", "...", "xxx", "\\\\\\", "ooo")
_NO_METADATA: dict[str, dict[str, None]] = {
    "svg": {"Date": None, "Creator": None, "Format": None, "Type": None},
    "png": {"Software": None},
}
_LONGEST = 60
"""Characters of a name in a picture."""


def form_of(path: str) -> str:
    """The form that a file's name asks for.

    Errors: UsageError for another form, and where matplotlib is not installed.
    """
    form = PurePath(path).suffix.removeprefix(".").lower()
    if form not in FORMS:
        raise UsageError(
            Diagnostic(
                "unknown-picture",
                f"{PurePath(path).name} asks for no picture that can be drawn",
                hint="name it .svg or .png",
            )
        )
    require_matplotlib()
    return form


def require_matplotlib() -> None:
    """Raise UsageError where matplotlib is not installed."""
    try:
        there = find_spec("matplotlib") is not None
    except ValueError:
        there = False
    if not there:
        raise UsageError(
            Diagnostic(
                "no-matplotlib",
                "a picture is drawn by matplotlib, which is not installed",
                hint='install it with: python -m pip install "equiv[plot]"',
            )
        )


def draw(plots: Sequence[Plot], form: str) -> bytes:
    """The plots below each other, as the bytes of a file."""
    require_matplotlib()
    stream = io.BytesIO()
    with _settings():
        from matplotlib.figure import Figure

        figure = Figure(figsize=(_WIDE, _HIGH * max(1, len(plots))), layout="constrained")
        if plots:
            figure.suptitle(_short(plots[0].title))
        for number, plot in enumerate(plots, 1):
            _draw(figure.add_subplot(len(plots), 1, number), plot)
        figure.savefig(stream, format=form, dpi=_DOTS, metadata=_NO_METADATA[form])
    return stream.getvalue()


@contextmanager
def _settings() -> Iterator[None]:
    """matplotlib's own settings, whatever the user's are, with texts that are no formulas."""
    import matplotlib

    with matplotlib.rc_context():
        matplotlib.rcdefaults()
        matplotlib.rcParams.update(
            {
                "svg.hashsalt": _SALT,
                "svg.fonttype": "none",
                "text.usetex": False,
                "text.parse_math": False,
                "axes.formatter.use_mathtext": False,
                "hatch.linewidth": 0.5,
                "font.size": 9.0,
            }
        )
        yield


def _draw(axes: Any, plot: Plot) -> None:
    entries: list[tuple[Any, str]] = []
    below = [0.0] * len(plot.x)
    for number, band in enumerate(plot.bands):
        above = [low + size for low, size in zip(below, band.values, strict=True)]
        style = {"facecolor": _SHADES[number % len(_SHADES)],
                 "hatch": _HATCHES[number % len(_HATCHES)]}  # fmt: skip
        area = axes.fill_between(plot.x, below, above, edgecolor="#333333", linewidth=0.3, **style)
        entries.insert(0, (area, band.name))
        below = above
    for line in plot.lines:
        look: dict[str, Any] = {
            "color": "black",
            "linestyle": "--" if plot.bands else "-",
            "linewidth": 1.4,
        }
        # a lone point between points without a value is seen by its mark
        marker = "." if len(plot.x) <= 60 else ""
        (curve,) = axes.plot(plot.x, line.values, marker=marker, markersize=3, **look)
        entries.insert(0, (curve, line.name))
    _scales(axes, plot)
    if len(entries) > 1:
        _legend(axes, entries)


def _scales(axes: Any, plot: Plot) -> None:
    """The axes in words, with plain numbers and their units."""
    if plot.x_log:
        axes.set_xscale("log")
    if plot.y_log:
        axes.set_yscale("log")
    axes.set_xlim(plot.x[0], plot.x[-1])
    if not plot.y_log and all(v >= 0 for line in plot.lines for v in line.values if v == v):
        axes.set_ylim(bottom=0)
    for side, unit, log in ((axes.xaxis, plot.x_unit, plot.x_log),
                            (axes.yaxis, plot.y_unit, plot.y_log)):  # fmt: skip
        side.set_major_formatter(_ticks(unit))
        if log:
            side.set_minor_formatter(lambda value, position: "")
    kind = ", logarithmic" if plot.x_log else ""
    axes.set_xlabel(f"{_short(plot.x_name)}{kind}")
    axes.set_ylabel(f"{MEASURES[plot.y_unit]}{', logarithmic' if plot.y_log else ''}")
    axes.set_title(_short(plot.y_name, 2 * _LONGEST), fontsize="medium")
    axes.grid(visible=True, color="#cccccc", linewidth=0.4)
    axes.set_axisbelow(True)


def _ticks(unit: str) -> Callable[[float, int], str]:
    """Tick labels as `20 kHz`."""

    def label(value: float, position: int) -> str:
        power = engineering_power(abs(value)) if unit else 0
        return f"{value / 10.0**power:.4g} {_unit(power, unit)}".rstrip()

    return label


def _unit(power: int, unit: str) -> str:
    return UNICODE.unit(prefix_of(power), unit)


def _legend(axes: Any, entries: Sequence[tuple[Any, str]]) -> None:
    """Names are set afterwards: matplotlib leaves out those that begin with an underscore."""
    handles = [handle for handle, _ in entries]
    legend = axes.legend(handles, [f"entry {n}" for n in range(len(handles))],
                         loc="center left", bbox_to_anchor=(1.01, 0.5), frameon=False)  # fmt: skip
    for text, (_, name) in zip(legend.get_texts(), entries, strict=True):
        text.set_text(_short(name))


def _short(text: str, most: int = _LONGEST) -> str:
    """A name made harmless, on one line, and no longer than fits."""
    safe = printable(text)
    return safe if len(safe) <= most else safe[: most - 1] + "…"
