"""Terms, totals and port impedances against the frequency or a parameter."""

from __future__ import annotations

from collections.abc import Sequence
from contextlib import suppress
from dataclasses import dataclass
from decimal import Decimal
from functools import partial
from typing import Any, ClassVar

import numpy as np

from equiv.analyses.cautions import about_network
from equiv.analyses.closing import closing_table
from equiv.analyses.result import DRAWERS, Caution, Check, Result
from equiv.analyses.sweeping.axis import FREQUENCY, Axis, End, axis
from equiv.analyses.sweeping.curves import Asked, Curve, asked_of, heading_of, positive_of
from equiv.analyses.sweeping.picture import picture_table, plots_of
from equiv.analyses.sweeping.points import Values, in_stacks, one_point
from equiv.analyses.sweeping.proof import Place, Proof, sample
from equiv.analyses.sweeping.tables import curve_data, curve_table, whole_table
from equiv.analyses.tables import Plot, Table
from equiv.elements.element import Frequency
from equiv.elements.quantity import Quantity
from equiv.errors import (
    Diagnostic,
    DoesNotExistError,
    EquivError,
    ExitStatus,
    NoUniqueSolutionError,
)
from equiv.network import Network, Port, Progress, no_progress
from equiv.units import as_number, is_complex, write_value

NO_AXIS = Axis(FREQUENCY, "Hz", Decimal(0), Decimal(1), 2, False)
UNSTABLE = "unstable"
TOOK_OVER = Caution(
    "branch-current-form",
    "the nodal form would lose its digits here: solved in the branch-current form",
)


@dataclass(frozen=True)
class Sweep(Result):
    """The curves of a sweep, with what proves them."""

    command: ClassVar[str] = "sweep"

    axis: Axis = NO_AXIS
    curves: tuple[Curve, ...] = ()
    remarks: tuple[str, ...] = ()

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """For each curve a table, a row a point, and a picture; then the checks."""
        tables: list[Table] = []
        for curve in self.curves:
            tables.append(curve_table(self.network, self.axis, curve))
            tables += [picture_table(plot) for plot in plots_of(self.network, self.axis, curve)]
        closing = closing_table(self.network, self.checks, self.cautions, *self.remarks)
        return (*tables, closing)

    def render(self, form: str = "table", digits: int = 5) -> str:
        """The tables in a form; as `csv` each with every term, and nothing but numbers."""
        if form != "csv":
            return super().render(form, digits)
        return DRAWERS[form]([whole_table(self.axis, curve) for curve in self.curves], digits)

    def plots(self) -> tuple[Plot, ...]:
        """The pictures as data, for `equiv.rendering.pictures`."""
        return tuple(p for c in self.curves for p in plots_of(self.network, self.axis, c))

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        axis = self.axis
        return {
            "over": {"name": axis.name, "unit": axis.unit, "log": axis.log,
                     "values": axis.values.tolist()},
            "curves": [curve_data(axis, curve) for curve in self.curves],
        }  # fmt: skip


def sweep(
    network: Network,
    *what: str | Quantity | Port,
    over: str = FREQUENCY,
    start: End,
    stop: End,
    points: int = 101,
    log: bool = False,
    progress: Progress = no_progress,
) -> Sweep:
    """The terms of quantities, or a port's impedance and open-circuit voltage, point by point.

    A(s) = G + s·C at each s = jω, h = C_q A(s)⁻¹ B + D as in `superpose`; for a parameter the
    network is read again with each value of it.

    Arguments: quantities as `I:R3`, ports by name or as `a,b` (the file's `find` statements, or
    else its ports, if none are given); `over` "frequency" or the name of a `given`; `start` and
    `stop` as text with a unit ("20 kHz") or numbers in the SI unit; `points` in equal steps, or
    equal ratios with `log`; `progress` is told of long work.
    Errors: UsageError for an unknown parameter, and where elements are known at one frequency
    only; NoUniqueSolutionError or DoesNotExistError where there is no value at any point.
    Sign convention: as in `superpose` and `port`.
    Source: as `superpose`; the laws' being affine in s: C. W. Ho et al. (1975).
    """
    asked = asked_of(network, what)
    moved = axis(network, over, start, stop, points, log)
    run = _over_frequency if moved.is_frequency else _over_parameter
    curves, checks = run(network, moved, asked, "nodal", progress)
    last = [] if moved.is_frequency else _unstable(moved, network)
    if not all(check.passed for check in checks):
        # the nodal form has lost its digits somewhere: the other one gives the whole sweep
        curves, checks = run(network, moved, asked, "branch-current", progress)
        last.append(TOOK_OVER)
    _require_some(curves)
    bad = any(curve.reasons for curve in curves)
    ports_only = all(c.asked.port for c in curves if c.reasons)
    refusal = ExitStatus.DOES_NOT_EXIST if ports_only else ExitStatus.NO_UNIQUE_SOLUTION
    cautions = [*about_network(network, [c.asked.label or "" for c in curves]), *last]
    return Sweep(
        network,
        checks=tuple(checks),
        cautions=tuple(dict.fromkeys(cautions)),
        refusal=refusal if bad else ExitStatus.DONE,
        axis=moved,
        curves=curves,
        remarks=_remarks(network, moved),
    )


def _over_frequency(
    network: Network, axis: Axis, asked: Sequence[Asked], form: str, progress: Progress
) -> tuple[tuple[Curve, ...], list[Check]]:
    """The file's frequency moves; sources at frequencies of their own are off."""
    own = {s.name: s.switched_off() for s in network.sources if s.options.at}
    moving = network.replacing(own) if own else network
    names = tuple(s.name for s in moving.sources)
    values = Values.empty(len(asked), len(axis.values), len(names))
    left = np.flatnonzero(in_stacks(moving, axis, asked, values, names, form, progress))
    rotating = [s.name for s in moving.sources if _turns(s.value)]
    for done, point in enumerate(left.tolist()):
        progress("points by themselves", done, len(left))
        if not axis.values[point] and rotating:
            values.refuse(point, f"at DC every value is real; {rotating[0]} is complex")
            continue
        here = axis.network(moving, point)
        one_point(here, here.frequency, asked, values, names, form, point)
    curves = tuple(_curve(moving, a, values, n, names, None) for n, a in enumerate(asked))

    def place(point: int) -> tuple[Network, Frequency]:
        here = axis.network(moving, point)
        return here, here.frequency

    return _proved(curves, place, moving, "")


def _over_parameter(
    network: Network, axis: Axis, asked: Sequence[Asked], form: str, progress: Progress
) -> tuple[tuple[Curve, ...], list[Check]]:
    """The network read again at each value; a curve a quantity and frequency of the sources."""
    groups = _groups(network)
    home: list[Frequency | None] = [_frequency(network, names) for names in groups]
    work = [Values.empty(len(asked), len(axis.values), len(names)) for names in groups]
    for point in range(len(axis.values)):
        progress("points", point, len(axis.values))
        here = _read(axis, network, point, work)
        if here is None:
            continue
        for number, names in enumerate(groups):
            at = _frequency(here, names)
            if at != home[number]:
                home[number] = None
            one_point(here, at, asked, work[number], names, form, point)
    curves: list[Curve] = []
    checks: list[Check] = []
    for names, values, steady in zip(groups, work, home, strict=True):
        mine = tuple(_curve(network, a, values, n, names, steady) for n, a in enumerate(asked))
        known = steady if len(groups) > 1 else None
        at_words = f" at {write_value(known.value, known.unit)}" if known else ""
        place = partial(_place, axis, network, names)
        mine, proofs = _proved(mine, place, network, at_words)
        checks += proofs
        curves += mine
    order = sorted(range(len(curves)), key=lambda k: k % len(asked))
    return tuple(curves[k] for k in order), checks


def _place(
    axis: Axis, network: Network, names: Sequence[str], point: int
) -> tuple[Network, Frequency]:
    here = axis.network(network, point)
    return here, _frequency(here, names)


def _read(axis: Axis, network: Network, point: int, work: Sequence[Values]) -> Network | None:
    """The network at a point; None where it cannot be solved there, for a reason in words."""
    reason = "sources of different frequencies meet or part here"
    try:
        here = axis.network(network, point)
        if len(here.frequencies) == len(network.frequencies):
            return here
    except EquivError as error:
        # what a value makes wrong is a reason at that point; at every point it is the answer
        if point == len(axis.values) - 1 and all(len(v.reasons[0]) == point for v in work):
            raise
        reason = "; ".join(d.message for d in error.diagnostics)
    for values in work:
        values.refuse(point, reason)
    return None


def _groups(network: Network) -> list[tuple[str, ...]]:
    """The sources of each frequency."""
    groups: dict[float, list[str]] = {f.omega: [] for f in network.frequencies}
    for source in network.sources:
        omega = network.frequency_of(source).omega
        groups[min(groups, key=lambda w: abs(w - omega))].append(source.name)
    return [tuple(names) for names in groups.values()]


def _frequency(network: Network, names: Sequence[str]) -> Frequency:
    if not names:
        return network.frequency
    return network.frequency_of(network.elements[names[0]])


def _turns(value: Any) -> bool:
    """Whether a source's value is complex, which nothing is at DC."""
    return is_complex(value) and complex(as_number(value)).imag != 0


def _curve(
    network: Network, asked: Asked, values: Values, number: int, names: tuple[str, ...],
    frequency: Frequency | None,
) -> Curve:  # fmt: skip
    return Curve(
        asked=asked,
        unit=asked.quantity.unit,
        heading=heading_of(network, asked),
        positive=positive_of(network, asked),
        frequency=frequency,
        sources=names,
        terms=values.terms[number],
        total=values.totals[number],
        impedance=values.impedances[number] if asked.port else None,
        reasons=values.reasons[number],
        real=frequency is not None and not frequency.omega,
    )


def _proved(
    curves: tuple[Curve, ...], place: Place, network: Network, where: str
) -> tuple[tuple[Curve, ...], list[Check]]:
    proof = Proof(curves, place, sample(curves, len(network.nodes)))
    return proof.curves, proof.checks(where)


def _unstable(axis: Axis, network: Network) -> list[Caution]:
    """A natural frequency in the right half plane at either end of a parameter's range."""
    found = []
    for point in (0, len(axis.values) - 1):
        with suppress(EquivError):
            found += [
                Caution(c.code, f"at {axis.name} = {axis.at(point)}, {c.message}")
                for c in about_network(axis.network(network, point))
                if c.code == UNSTABLE
            ]
    return found


def _require_some(curves: Sequence[Curve]) -> None:
    """Raise where there is no value at any point of any curve."""
    if any(curve.exists.any() for curve in curves):
        return
    reasons = dict.fromkeys(reason for curve in curves for reason in curve.reasons.values())
    kind = DoesNotExistError if all(c.asked.port for c in curves) else NoUniqueSolutionError
    code = "no-equivalent" if kind is DoesNotExistError else "no-unique-solution"
    raise kind([Diagnostic(code, reason) for reason in list(reasons)[:12]])


def _remarks(network: Network, axis: Axis) -> tuple[str, ...]:
    own = [s for s in network.sources if s.options.at]
    if not axis.is_frequency or not own:
        return ()
    named = ", ".join(f"{s.name} at {_words(s.options.at)}" for s in own[:12])
    return (
        "A frequency sweep moves the file's own frequency. Sources at frequencies of their own "
        f"are not moved and not in these terms: {named}.",
    )


def _words(at: Frequency | None) -> str:
    return "" if at is None else write_value(at.value, at.unit)
