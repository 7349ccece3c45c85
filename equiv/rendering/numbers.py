"""Numbers as text: one prefix and one precision for a column, points under each other."""

from __future__ import annotations

import cmath
import math
from collections.abc import Iterable, Sequence
from typing import NamedTuple

from equiv.units import engineering_power

MORE_DECIMALS = 4
"""Decimals that a small value may have beyond those of its column."""
UNPREFIXED = frozenset({"", "%", "deg", "dB"})
DUST = 1e-15
"""A number this much smaller than its column's largest is drawn as the zero that it stands for."""
_PLAIN_FROM, _PLAIN_BELOW = 1e-4, 1e9


class Scale(NamedTuple):
    """How the numbers of a column are drawn."""

    power: int
    """The power of ten of the prefix, a multiple of three."""
    decimals: int
    """Digits behind the point; behind the first digit where `exponent` is set."""
    shown: int
    """Significant digits that the smallest number must show."""
    exponent: bool = False
    dust: float = 0.0
    """The magnitude (in the plain unit) below which a number of the column is only rounding."""

    def apply(self, value: float) -> float:
        """The value in the prefixed unit; dividing keeps whole prefixes exact."""
        if self.power > 0:
            return value / 10.0**self.power
        return value * 10.0**-self.power if self.power else value


def residual_scale() -> Scale:
    """The scale of a column of differences: 1.2e-16."""
    return Scale(0, 1, 2, exponent=True)


def percent_scale(digits: int) -> Scale:
    """The scale of fractions drawn as percentages."""
    return Scale(-2, max(0, digits - 3), min(2, digits))


def scale_for(largest: float, unit: str, digits: int) -> Scale:
    """The scale in which the largest magnitude of a column shows `digits` significant digits."""
    rounded = float(f"{largest:.{digits - 1}e}")
    power = 0 if unit in UNPREFIXED else engineering_power(rounded)
    if rounded == 0:
        return Scale(0, digits - 1, min(2, digits))
    magnitude = math.floor(math.log10(rounded) + 1e-12)
    if not _PLAIN_FROM <= Scale(power, 0, 0).apply(rounded) < _PLAIN_BELOW:
        return Scale(0, digits - 1, min(2, digits), exponent=True)
    decimals = max(0, digits - 1 - (magnitude - power))
    return Scale(power, decimals, min(2, digits), dust=DUST * largest)


def engineering_text(value: float, unit: str, digits: int) -> tuple[str, int]:
    """A number by itself with `digits` significant digits, and the power of its own prefix."""
    text = f"{value:.{digits - 1}e}"
    mantissa, _, exponent = text.partition("e")
    magnitude = int(exponent)
    power = 0 if unit in UNPREFIXED else magnitude // 3 * 3
    before = magnitude - power + 1
    if value == 0 or not (-15 <= power <= 12 and 1 <= before < digits):
        scale = scale_for(abs(value), unit, digits)
        return real_texts([value], scale)[0], scale.power
    sign = "-" if value < 0 else ""
    figures = mantissa.lstrip("-").replace(".", "")
    return f"{sign}{figures[:before]}.{figures[before:]}", power


def real_texts(values: Sequence[float], scale: Scale) -> list[str]:
    """Real numbers in their scale; a number too small for it is written with an exponent."""
    if scale.exponent:
        return [f"{v:.{scale.decimals}e}" if v else "0" for v in values]
    scaled = [scale.apply(v) + 0.0 for v in values] if scale.power else [v + 0.0 for v in values]
    smallest = min(filter(None, map(abs, scaled)), default=1.0)
    decimals = scale.decimals
    if smallest >= 10.0 ** (scale.shown - 1 - decimals):
        return [f"{v:.{decimals}f}" for v in scaled]
    return [_small(v, scale) for v in scaled]


def _small(value: float, scale: Scale) -> str:
    """A number that may need more decimals than its column has."""
    if value == 0:
        return f"{value:.{scale.decimals}f}"
    needed = scale.shown - 1 - math.floor(math.log10(abs(value)))
    if needed > scale.decimals + MORE_DECIMALS:
        return f"{value:.{scale.shown - 1}e}"
    return f"{value:.{max(needed, scale.decimals)}f}"


def angle_texts(values: Iterable[complex], digits: int) -> list[str]:
    """Angles in degrees, over -180 up to 180; that of a zero is 0."""
    decimals = max(0, digits - 3)
    texts = []
    for value in values:
        degrees = round(math.degrees(cmath.phase(value)), decimals) + 0.0 if value else 0.0
        texts.append(f"{180.0 if degrees <= -180.0 else degrees:.{decimals}f}")
    return texts


def column_texts(values: Sequence[float], scale: Scale) -> list[str]:
    """Real numbers of a column, with blanks that put their points in line."""
    texts = real_texts(values, scale)
    return texts if scale.exponent else align_points(texts)


def align_points(texts: list[str]) -> list[str]:
    """Blanks behind each number, so that ranged right the points stand under each other."""
    behind = [_behind_point(text) for text in texts]
    most = max(behind, default=0)
    if min(behind, default=0) == most:
        return texts
    return [text + " " * (most - tail) for text, tail in zip(texts, behind, strict=True)]


def _behind_point(text: str) -> int:
    point = text.find(".")
    if point < 0:
        point = text.find("e")
    return 0 if point < 0 else len(text) - point
