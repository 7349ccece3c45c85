"""Readings fitted by v = E - Z·i: exactly, or by weighted least squares with uncertainties.

The residual of a reading is its voltage less that of the port: V - E/(1 + Z·y) at a load of
admittance y, V - E + Z·I at a current I. Its covariance follows from what is stated for V and
for y or I, at the values found (the effective variance); weights are found again until nothing
moves. The covariance of the results is (Aᵀ W A)⁻¹.

Sources: JCGM 100:2008 (GUM), 5.1 and 5.2; effective variance: J. Orear, American Journal of
Physics 50 (1982), from memory.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import NamedTuple

import numpy as np

from equiv.analyses.readings.readings import Readings, blocks, refuse
from equiv.equations.layout import Numbers

_MOST_STEPS = 100
_SETTLED = 1e-14
_UNSETTLED = 1e-8
_SINGULAR = 1e12


class Moment(NamedTuple):
    """At some parameters: residuals n x d (V), slopes n x d x p, covariances n x d x d."""

    residuals: Numbers
    slopes: Numbers
    covariances: Numbers


class Fit(NamedTuple):
    """What was found, with the covariance of the parameters (None where there is none)."""

    parameters: Numbers
    covariance: Numbers | None
    residuals: Numbers
    """n x d, in volts"""
    spread: Numbers | None
    """Standard uncertainty of each residual (V), where it is stated: n x d."""
    freedom: int
    chi_squared: float | None
    scatter: float | None
    """Standard deviation of the residuals (V), where nothing is stated."""
    condition: float
    sensitivity: Numbers
    """Change of each parameter by a relative error of each voltage's parts: p x n x d."""
    off: float
    """How far the residuals are from being orthogonal to the slopes, relative to the readings."""


def fit(readings: Readings) -> Fit:
    """EMF and impedance of some readings.

    The parameters are E, R (real); E, R, X² (magnitude); Re E, Im E, R, X (complex).
    Errors: DoesNotExistError where no port has these readings.
    """
    model = {"real": _real, "complex": _complex, "magnitude": _magnitude}[readings.mode]
    theta = _start(readings)
    step = np.inf
    for _ in range(_MOST_STEPS):
        rows, right, lower = _whitened(model, readings, theta)
        change = np.linalg.lstsq(rows, -right, rcond=None)[0]
        theta = theta + change
        # what the change does to the fitted voltages
        step = float(np.linalg.norm(rows @ change) / np.linalg.norm(_readings(readings, lower)))
        if step <= _SETTLED:
            break
    if not step <= _UNSETTLED:
        raise refuse("no EMF and impedance come near these readings", readings.cells[-1])
    return _judged(model, readings, theta)


Model = Callable[[Readings, Numbers], Moment]


def _judged(model: Model, readings: Readings, theta: Numbers) -> Fit:
    """The covariance, the conditioning and the proof of a fit."""
    rows, right, lower = _whitened(model, readings, theta)
    residuals = model(readings, theta).residuals
    norms = np.linalg.norm(rows, axis=0)
    u, s, vt = np.linalg.svd(rows / norms, full_matrices=False)
    inverse = (vt.T / s) @ u.T / norms[:, None]
    freedom = residuals.size - len(theta)
    square = float(right @ right)
    covariance, scatter = inverse @ inverse.T, None
    if not readings.stated:
        scatter = float(np.sqrt(square / freedom)) if freedom else None
        covariance = covariance * (scatter**2 if scatter is not None else np.nan)
    known = readings.stated or freedom > 0
    shape = (len(theta), *residuals.shape)
    back = np.einsum("pnd,nde->pne", inverse.reshape(shape), np.linalg.inv(lower))
    volts = np.abs(readings.voltages)[None, :, None]
    off = np.abs(rows.T @ right) / (norms * np.linalg.norm(_readings(readings, lower)))
    return Fit(
        theta,
        covariance if known else None,
        residuals,
        np.sqrt(np.einsum("nij,nij->ni", lower, lower)) if readings.stated else None,
        freedom,
        square if readings.stated and freedom else None,
        scatter,
        float(s[0] / s[-1]),
        back * volts,
        float(off.max()),
    )


def _whitened(model: Model, readings: Readings, theta: Numbers) -> tuple[Numbers, Numbers, Numbers]:
    """Slopes and residuals in units of their own uncertainty, and the Cholesky factors."""
    moment = model(readings, theta)
    try:
        lower = np.linalg.cholesky(moment.covariances)
    except np.linalg.LinAlgError:
        exact = int(np.argmin(np.linalg.eigvalsh(moment.covariances)[:, 0]))
        raise refuse(
            "this reading would have no uncertainty at all while others have",
            readings.cells[exact],
            "state the uncertainty of the voltages too, over zero",
        ) from None
    rows = np.linalg.solve(lower, moment.slopes).reshape(-1, len(theta))
    right = np.linalg.solve(lower, moment.residuals[..., None]).ravel()
    return rows, right, lower


def _readings(readings: Readings, lower: Numbers) -> Numbers:
    """The voltages in units of their own uncertainty."""
    return np.linalg.solve(lower, _parts(readings.voltages)[..., None]).ravel()


def _start(readings: Readings) -> Numbers:
    """The parameters by a linear form of the same law; exact where the readings are."""
    v, drawn = readings.voltages, readings.drawn
    if readings.mode == "magnitude":
        # 1/V² = (1 + 2R·y + (R² + X²)·y²)/E²
        scale = float(drawn.max())
        y = drawn / scale
        _require_distinct(readings, 3)
        a, b, c = _solved(readings, np.stack([v**0, y, y**2], axis=1) * v[:, None] ** 2, v**0)
        if a <= 0:
            message = "the open-circuit voltage would have to be infinite for these magnitudes"
            raise refuse(message, readings.cells[int(np.argmax(drawn))])
        r = b / (2 * a * scale)
        return np.array([1 / np.sqrt(a), r, c / (a * scale**2) - r**2])
    _require_distinct(readings, 2)
    current = v * drawn if readings.by == "load" else drawn
    size = float(np.abs(current).max()) or 1.0
    e, z = _solved(readings, np.stack([np.ones_like(v), -current / size], axis=1), v)
    z = z / size
    return _parts(np.array([e, z])).ravel()


def _solved(readings: Readings, rows: Numbers, right: Numbers) -> Numbers:
    norms = np.linalg.norm(rows, axis=0)
    if not norms.all() or np.linalg.cond(rows / norms) > _SINGULAR:
        raise _not_apart(readings)
    return np.asarray(np.linalg.lstsq(rows / norms, right, rcond=None)[0] / norms)


def _require_distinct(readings: Readings, number: int) -> None:
    """Readings of enough different loads."""
    distinct: list[complex] = []
    size = np.abs(readings.drawn).max() or 1.0
    for value in readings.drawn:
        if all(abs(value - other) > 1e-12 * size for other in distinct):
            distinct.append(value)
        if len(distinct) == number:
            return
    raise _not_apart(readings)


def _not_apart(readings: Readings) -> Exception:
    """Why the readings do not tell EMF and impedance apart, at the last of them."""
    v, drawn = readings.voltages, readings.drawn
    last = readings.cells[-1]
    same_drawn = np.ptp(np.abs(drawn - drawn[0])) <= 1e-9 * np.abs(drawn).max()
    same_voltage = np.ptp(np.abs(v - v[0])) <= 1e-9 * np.abs(v).max()
    if same_drawn and not same_voltage:
        what = "load" if readings.by == "load" else "current"
        return refuse(f"the {what} is the same as before, and the voltage is another: "
                      "no linear port does that", last)  # fmt: skip
    current = v * drawn
    same_current = np.ptp(np.abs(current - current[0])) <= 1e-9 * np.abs(current).max()
    if readings.mode != "magnitude" and readings.by == "load" and same_current and not same_drawn:
        return refuse("the current is the same at every load: such a port has no EMF and no "
                      "internal impedance, it is a current source", last)  # fmt: skip
    what = "three different loads" if readings.mode == "magnitude" else "two different loads"
    return refuse(f"these readings do not tell EMF and impedance apart: {what} are needed", last)


def _parts(values: Numbers) -> Numbers:
    """Numbers as n x d: real, or real and imaginary part."""
    if np.iscomplexobj(values):
        return np.stack([values.real, values.imag], axis=1)
    return np.asarray(values)[:, None]


def _covariances(readings: Readings, slope: Numbers) -> Numbers:
    """Of the residuals: of the voltages, and of what is drawn by the residual's slope in it."""
    width = 2 if readings.mode == "complex" else 1
    if readings.voltage_covariance is None:
        return np.broadcast_to(np.eye(width), (len(readings.cells), width, width))
    found = readings.voltage_covariance
    if readings.drawn_covariance is not None:
        turn = blocks(slope)
        found = found + turn @ readings.drawn_covariance @ np.swapaxes(turn, 1, 2)
    return found


def _linear(
    readings: Readings, e: complex, z: complex
) -> tuple[Numbers, Numbers, Numbers, Numbers]:
    """The residual V - v, and its slopes in E, in Z and in what is drawn."""
    v, drawn = readings.voltages, readings.drawn
    if readings.by == "current":
        return v - e + z * drawn, -np.ones_like(v), drawn, z * np.ones_like(v)
    whole = 1 + z * drawn
    return v - e / whole, -1 / whole, e * drawn / whole**2, e * z / whole**2


def _real(readings: Readings, theta: Numbers) -> Moment:
    off, by_e, by_z, by_drawn = _linear(readings, theta[0], theta[1])
    slopes = np.stack([by_e, by_z], axis=-1)[:, None, :]
    return Moment(off[:, None], slopes, _covariances(readings, by_drawn))


def _complex(readings: Readings, theta: Numbers) -> Moment:
    e, z = complex(theta[0], theta[1]), complex(theta[2], theta[3])
    off, by_e, by_z, by_drawn = _linear(readings, e, z)
    slopes = np.concatenate([blocks(by_e), blocks(by_z)], axis=-1)
    return Moment(_parts(off), slopes, _covariances(readings, by_drawn))


def _magnitude(readings: Readings, theta: Numbers) -> Moment:
    """|V| = E/√((1 + R·y)² + X²·y²) at resistive loads."""
    e, r, x2 = theta
    y = readings.drawn
    square = np.maximum((1 + r * y) ** 2 + x2 * y**2, 1e-12)
    root = square**-0.5
    by_r, by_x2 = e * (1 + r * y) * y * root**3, e * y**2 * root**3 / 2
    by_y = e * ((1 + r * y) * r + x2 * y) * root**3
    slopes = np.stack([-root, by_r, by_x2], axis=-1)[:, None, :]
    return Moment((readings.voltages - e * root)[:, None], slopes, _covariances(readings, by_y))
