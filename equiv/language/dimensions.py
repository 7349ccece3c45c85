"""Units as products of volts, amperes and seconds, so that expressions can be checked."""

from __future__ import annotations

from equiv.units import UNIT_NAMES

Dimension = tuple[int, ...]
"""The exponents of V, A and s."""

NO_DIMENSION: Dimension = (0, 0, 0)
DIMENSIONS: dict[str, Dimension] = {
    "": NO_DIMENSION,
    "V": (1, 0, 0),
    "A": (0, 1, 0),
    "ohm": (1, -1, 0),
    "S": (-1, 1, 0),
    "H": (1, -1, 1),
    "F": (-1, 1, 1),
    "W": (1, 1, 0),
    "s": (0, 0, 1),
    "Hz": (0, 0, -1),
    "rad/s": (0, 0, -1),
}
POWERS = ("VA", "var")
"""Units of apparent and reactive power: in expressions, as watts."""
PER_SECOND = "1/s"
"""A result that may be hertz or radians a second; which one must be said."""

_UNITS = {
    dimension: PER_SECOND if dimension == (0, 0, -1) else unit
    for unit, dimension in DIMENSIONS.items()
}


def unit_of(dimension: Dimension) -> str:
    """The unit of a dimension; one that has no name is written as a product."""
    unit = _UNITS.get(dimension)
    if unit is not None:
        return unit
    return " ".join(
        base if power == 1 else f"{base}^{power}"
        for base, power in zip("VAs", dimension, strict=True)
        if power
    )


def in_words(dimension: Dimension) -> str:
    """A dimension in words: `ohms`."""
    unit = unit_of(dimension)
    return UNIT_NAMES.get(unit, unit)


def dimension_of(unit: str) -> Dimension:
    """The dimension of a unit's text, as `unit_of` writes it."""
    if unit in DIMENSIONS:
        return DIMENSIONS[unit]
    if unit in POWERS:
        return DIMENSIONS["W"]
    if unit == PER_SECOND:
        return (0, 0, -1)
    powers = dict(part.partition("^")[::2] for part in unit.split())
    return tuple(int(powers.get(base, "0") or 1) for base in "VAs")
