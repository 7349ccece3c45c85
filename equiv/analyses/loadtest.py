"""From readings of a real port to its EMF and internal impedance, with their uncertainties."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass, replace
from hashlib import sha256
from typing import Any, ClassVar, NamedTuple

import numpy as np

from equiv.analyses.readings.fit import Fit, fit
from equiv.analyses.readings.readings import Readings, read_readings, refuse
from equiv.analyses.readings.tables import loadtest_data, loadtest_tables
from equiv.analyses.result import Caution, Check, Result
from equiv.analyses.superposition.terms import CLOSURE_LIMIT
from equiv.analyses.tables import Table
from equiv.network import Network, Origin

_NAMES = {
    "real": (("EMF", "V"), ("internal resistance", "ohm")),
    "magnitude": (
        ("EMF, magnitude", "V"), ("internal resistance", "ohm"), ("magnitude of the reactance", "ohm"),
    ),
    "complex": (
        ("EMF, real part", "V"), ("EMF, imaginary part", "V"),
        ("internal resistance", "ohm"), ("internal reactance", "ohm"),
    ),
}  # fmt: skip
_MAGNIFYING = 50.0
_UNCERTAIN = 0.2
"""A relative uncertainty of the impedance that is worth a caution."""
_SIGNIFICANT = 2.0
"""A square of a reactance this many standard uncertainties below zero is refused."""


class Estimate(NamedTuple):
    """A result with its standard uncertainty; None is what does not exist, for the reason."""

    quantity: str
    unit: str
    value: float | None
    uncertainty: float | None
    reason: str = ""


@dataclass(frozen=True)
class LoadTest(Result):
    """EMF (V) and internal impedance (ohm) of a port, from its readings.

    `estimates` are in the order of `correlations`, a square of numbers from -1 to 1, or None
    where there is no uncertainty. The EMF is the voltage of the open port.
    """

    command: ClassVar[str] = "loadtest"

    readings: Readings | None = None
    fit: Fit | None = None
    estimates: tuple[Estimate, ...] = ()
    correlations: tuple[tuple[float, ...], ...] | None = None
    reactance_squared: Estimate | None = None
    short_current: Estimate | None = None
    magnified: tuple[float | None, float | None] = (None, None)
    """Relative change of EMF and impedance by a relative error of each voltage, by chance."""

    @property
    def emf(self) -> complex:
        """The open-circuit voltage (V)."""
        values = [e.value or 0.0 for e in self.estimates]
        return complex(values[0], values[1]) if len(values) == 4 else values[0]

    @property
    def impedance(self) -> complex | None:
        """The internal impedance (ohm); None where the sign of its reactance cannot be found."""
        values = [e.value for e in self.estimates]
        if len(values) == 3 or None in values:
            return None
        return complex(values[-2] or 0.0, values[-1] or 0.0) if len(values) == 4 else values[1]

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """Results, correlations, readings with their residuals, and the checks."""
        return loadtest_tables(self, digits)

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        return loadtest_data(self)


def loadtest(text: str, *, name: str = "readings") -> LoadTest:
    """EMF and internal impedance of a real port from readings in CSV text.

    v = E - Z·i through the readings: exactly through two, by least squares beyond, weighted by
    the stated uncertainties; covariance (Aᵀ W A)⁻¹, or that of the residuals' scatter.

    Arguments: the CSV text (columns `load [ohm]` and `voltage [V]`, or `voltage [V]` and
    `current [A]`, also with angles; `|voltage| [V]` with resistive loads), its name for messages.
    Errors: NetworkFileError for text that cannot be read, DoesNotExistError for readings that
    no port can have; both with the place.
    Sign convention: voltage of plus over minus, current out of plus into the load.
    Source: JCGM 100:2008 (GUM), 5.1, 5.2 and H.3.
    """
    readings = read_readings(text, name)
    found = fit(readings)
    estimates, squared = _estimates(readings, found)
    digest = sha256(text.encode("utf-8", "surrogatepass")).hexdigest()
    result = LoadTest(
        Network({}, origin=Origin(name, digest)),
        checks=(_check(readings, found),),
        readings=readings,
        fit=found,
        estimates=estimates,
        correlations=_correlations(found),
        reactance_squared=squared,
        short_current=_short_current(readings, found),
        magnified=_magnified(readings, found),
    )
    return replace(result, cautions=tuple(_cautions(result, readings, found)))


def _check(readings: Readings, found: Fit) -> Check:
    if found.freedom:
        return Check("residuals against the slopes (normal equations)", found.off, CLOSURE_LIMIT)
    off = float(np.abs(found.residuals).max() / np.abs(readings.voltages).max())
    return Check("readings given again by EMF and impedance", off, CLOSURE_LIMIT)


def _sigmas(found: Fit) -> list[float | None]:
    if found.covariance is None:
        return [None] * len(found.parameters)
    return [float(s) for s in np.sqrt(np.diag(found.covariance))]


def _estimates(readings: Readings, found: Fit) -> tuple[tuple[Estimate, ...], Estimate | None]:
    values = [float(value) for value in found.parameters]
    sigmas = _sigmas(found)
    names = _NAMES[readings.mode]
    if readings.mode != "magnitude":
        rows = zip(names, values, sigmas, strict=True)
        return tuple(Estimate(*name, value, sigma) for name, value, sigma in rows), None
    squared = Estimate("square of the reactance, in ohm²", "", values[2], sigmas[2])
    first = [Estimate(*names[k], values[k], sigmas[k]) for k in range(2)]
    return (*first, _reactance(readings, values, sigmas[2])), squared


def _reactance(readings: Readings, values: list[float], sigma: float | None) -> Estimate:
    """|X| from X², where that is a square; its sign cannot be found from magnitudes."""
    _, r, square = values
    name = _NAMES["magnitude"][2]
    rounding = 1e-9 * (r * r + abs(square))
    if square < -max(rounding, _SIGNIFICANT * (sigma or 0.0)):
        worst = readings.cells[int(np.argmax(readings.drawn))]
        beyond = "" if sigma is None else f", more than {_SIGNIFICANT:.0f} standard uncertainties"
        raise refuse(
            f"no port has these magnitudes: the square of its reactance would be "
            f"{square:.4g} ohm²{beyond} below zero",
            worst,
            "one of the readings is wrong, or a load is not resistive",
        )
    if sigma is None and abs(square) <= rounding:
        return Estimate(*name, 0.0, None)
    if sigma is not None and square <= sigma:
        reason = f"its square, {square:.4g} ± {sigma:.2g} ohm², is not told from zero"
        return Estimate(*name, None, None, reason)
    size = math.sqrt(square)
    return Estimate(*name, size, None if sigma is None else sigma / (2 * size))


def _correlations(found: Fit) -> tuple[tuple[float, ...], ...] | None:
    if found.covariance is None:
        return None
    sigmas = np.sqrt(np.diag(found.covariance))
    if not sigmas.all():
        return None
    matrix = found.covariance / np.outer(sigmas, sigmas)
    return tuple(tuple(float(value) for value in row) for row in matrix)


def _short_current(readings: Readings, found: Fit) -> Estimate | None:
    """E/R at DC, whose uncertainty needs the correlation of the two."""
    e, r = (float(value) for value in found.parameters[:2])
    if readings.mode != "real" or not r:
        return None
    slope = np.array([1 / r, -e / r**2])
    sigma = None
    if found.covariance is not None:
        sigma = math.sqrt(max(0.0, float(slope @ found.covariance @ slope)))
    return Estimate("short-circuit current", "A", e / r, sigma)


def _magnified(readings: Readings, found: Fit) -> tuple[float | None, float | None]:
    """By how much independent relative errors of the voltages are magnified in E and in Z."""
    theta = found.parameters
    e, z = ([0, 1], [2, 3]) if readings.mode == "complex" else ([0], [1])
    power = found.sensitivity**2 / found.residuals.shape[1]
    if readings.mode == "magnitude":
        size = math.sqrt(max(theta[1] ** 2 + theta[2], 0.0))
        turned = theta[1] * found.sensitivity[1] + found.sensitivity[2] / 2
        of_z = math.sqrt(float((turned**2).sum())) / size if size else 0.0
    else:
        size = float(np.linalg.norm(theta[z]))
        of_z = math.sqrt(float(power[z].sum()))
    size_e = float(np.linalg.norm(theta[e]))
    of_e = math.sqrt(float(power[e].sum()))
    return (of_e / size_e if size_e else None, of_z / size if size else None)


def _too_close(result: LoadTest, readings: Readings, found: Fit) -> Iterator[Caution]:
    """That the impedance is hardly known: by its uncertainty or, if none is known, by magnifying."""
    by_z = result.magnified[1]
    words = f"an error of 1 % in the voltages becomes {by_z or 0:.3g} % in the impedance"
    if found.covariance is None:
        if by_z is not None and by_z > _MAGNIFYING:
            yield Caution("readings-too-close", f"the readings lie close together: {words}; read "
                          "at loads farther apart")  # fmt: skip
        return
    parts = slice(2, 4) if readings.mode == "complex" else slice(1, 2)
    size = float(np.linalg.norm(found.parameters[parts]))
    sigma = math.sqrt(float(np.diag(found.covariance)[parts].sum()))
    if sigma > _UNCERTAIN * size:
        yield Caution("readings-too-close", "the readings lie too close together for their "
                      f"uncertainties: {words}; read at loads farther apart")  # fmt: skip


def _cautions(result: LoadTest, readings: Readings, found: Fit) -> list[Caution]:
    cautions = list(_too_close(result, readings, found))
    if found.chi_squared is not None:
        from scipy.special import gammaincc

        chance = float(gammaincc(found.freedom / 2, found.chi_squared / 2))
        if chance < 0.05:
            cautions.append(
                Caution(
                    "poor-fit",
                    f"the residuals are larger than the stated uncertainties explain (by chance "
                    f"in {chance:.2g} of cases): the port is not linear, or they are too small",
                )
            )
    if any(e.quantity == "internal resistance" and (e.value or 0.0) < 0 for e in result.estimates):
        cautions.append(
            Caution(
                "resistance-not-positive",
                "the internal resistance comes out negative: an active port, or wrong readings",
            )
        )
    return cautions
