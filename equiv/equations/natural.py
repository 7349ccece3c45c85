"""Natural frequencies in the right half plane: a steady state that is never reached.

The laws are affine in s, so the system is G + s C. With C = E Fᵀ of full rank r and a shift σ,
the r eigenvalues μ of Fᵀ (G + σ C)⁻¹ E give s = σ - 1/μ. A frequency counts only if two shifts
agree on it, which no artefact of an infinite one does.

Source: L. O. Chua, P.-M. Lin, Computer-Aided Analysis of Electronic Circuits (1975), chapter 10
(from memory); the shift and the agreement of two shifts are our own.
"""

from __future__ import annotations

import numpy as np

from equiv.elements import Element
from equiv.elements.element import Parameters
from equiv.equations.arithmetic import FLOATING
from equiv.equations.dense import balance, matrix
from equiv.equations.layout import Layout, Numbers
from equiv.equations.system import System
from equiv.network import Network
from equiv.units import Symbol, as_number

LARGEST = 500
"""Unknowns up to which natural frequencies are looked for."""
_AGREEMENT = 1e-5
_MARGIN = 1e-7
_NEIGHBOURS = 1e-2
_REACH = 1e4
_FAR = 1e9
"""The s (rad/s) that C is read off at: far out, so that G takes none of its digits."""
_DYNAMIC = ("inductor", "capacitor")
_ACTIVE = ("opamp", "twoport", "nport")


def unstable_frequencies(network: Network) -> list[complex]:
    """Natural frequencies (rad/s) with a positive real part, the fastest growing first.

    A network without anything active in it has none.
    """
    elements = network.elements.values()
    if not any(e.kind in _DYNAMIC for e in elements) or not any(map(_is_active, elements)):
        return []
    if network.tabulated:
        return []  # what a file gives is known on the imaginary axis only
    if any(map(_is_open, elements)):
        return []
    layout = Layout(network, FLOATING)
    still = System(layout, "nodal", 0.0)
    if still.size > LARGEST or np.issubdtype(still.dtype, np.complexfloating):
        return []
    g = matrix(still)
    c = (matrix(System(layout, "nodal", _FAR)) - g) / _FAR
    found = natural_frequencies(g, c)
    return sorted((s for s in found if s.real > _margin(s, found)), key=lambda s: -s.real)


def _is_active(element: Element) -> bool:
    """Whether an element can give more than it takes (independent sources do not count)."""
    if element.role == "controlled" or element.kind in _ACTIVE:
        return True
    value = element.value
    if element.role != "passive" or value is None or isinstance(value, Parameters | Symbol):
        return False
    return complex(as_number(value)).real < 0


def _is_open(element: Element) -> bool:
    """Whether a value is written `?`."""
    value = element.value
    given = (
        [v for _, some in value.items for v in some] if isinstance(value, Parameters) else [value]
    )
    return any(isinstance(v, Symbol) for v in given)


def _margin(s: complex, found: list[complex]) -> float:
    """How far right a frequency must lie: several equal ones scatter about their place."""
    spread = [abs(s - other) for other in found if abs(s - other) < _NEIGHBOURS * abs(s)]
    return max(_MARGIN * abs(s), max(spread))


def natural_frequencies(g: Numbers, c: Numbers) -> list[complex]:
    """The finite s (rad/s) for which G + s C is singular, s = 0 left out."""
    if not c.any():
        return []
    rows, columns = balance(c)
    left, values, right = np.linalg.svd(c * rows[:, None] * columns)
    rank = int((values > 1e-13 * values.max()).sum())
    factors = left[:, :rank] * values[:rank] / rows[:, None], right[:rank] / columns
    found: list[complex] = []
    for rate in _rates(g, c):
        first, second = (_by_shift(g, c, factors, rate * factor) for factor in (1.37, 0.61))
        for s in first:
            if not rate / _REACH < abs(s) < rate * _REACH:
                continue
            agrees = second.size and np.abs(second - s).min() <= _AGREEMENT * abs(s)
            known = any(abs(s - other) <= _MARGIN * abs(s) for other in found)
            if agrees and not known:
                found.append(complex(s))
        if len(found) >= rank:
            break
    return found


def _rates(g: Numbers, c: Numbers) -> Numbers:
    """Shifts (rad/s) that cover the rates which the entries can make, from the middle outwards."""
    conducts, stores = np.abs(g[g != 0]), np.abs(c[c != 0])
    if not conducts.size or not stores.size:
        return np.empty(0)
    low = np.log10(conducts.min() / stores.max())
    high = np.log10(conducts.max() / stores.min())
    count = int(min(12, max(3, np.ceil((high - low) / 3) + 1)))
    rates = np.logspace(low, high, count)
    return rates[np.argsort(np.abs(np.arange(count) - (count - 1) / 2), kind="stable")]


def _by_shift(g: Numbers, c: Numbers, factors: tuple[Numbers, Numbers], shift: float) -> Numbers:
    """The finite s found from one shift."""
    e, f = factors
    shifted = g + shift * c
    rows, columns = balance(shifted)
    try:
        inner = np.linalg.solve(shifted * rows[:, None] * columns, rows[:, None] * e)
    except np.linalg.LinAlgError:
        return np.empty(0)
    inner = shift * (f @ (columns[:, None] * inner))
    if not np.isfinite(inner).all():
        return np.empty(0)
    mu = np.linalg.eigvals(inner)
    mu = mu[np.abs(mu) > 1e-12]
    return np.asarray(shift * (1 - 1 / mu))
