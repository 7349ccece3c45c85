"""Numbers and text: exact values, SI prefixes, the code of IEC 60062, engineering notation.

A value is exact from the text on (`Decimal` or `Fraction`); a float is made only where
floating point begins, by `as_number`.

Sources: BIPM, The International System of Units (9th ed., 2019), table 7 (prefixes);
IEC 60062 (letter as decimal point).
"""

from __future__ import annotations

import cmath
import math
from decimal import Context, Decimal
from fractions import Fraction
from typing import NamedTuple

Number = Decimal | Fraction

# Arithmetic of a value's text must not round: a context wide enough for any bounded number.
_WIDE = Context(prec=10_000, Emax=999_999, Emin=-999_999)

# Past so many decimal places a fraction is the shorter way to write an exact number.
_MOST_PLACES = 300


class Rounded:
    """Marks a number that stands for an irrational one, to 40 digits."""


class RoundedDecimal(Rounded, Decimal):
    """A decimal number that was rounded."""


class RoundedFraction(Rounded, Fraction):
    """A fraction of rounded numbers."""


def as_rounded(number: Number) -> Number:
    """The number, marked as a rounded one."""
    if isinstance(number, Rounded):
        return number
    return RoundedDecimal(number) if isinstance(number, Decimal) else RoundedFraction(number)


class Rectangular(NamedTuple):
    """A complex value by its parts."""

    re: Number
    im: Number


class Phasor(NamedTuple):
    """A complex value by magnitude and angle, as it was written."""

    magnitude: Number
    angle: Number
    degrees: bool = True


class Ratio(NamedTuple):
    """Two numbers written `first:second`."""

    first: Number
    second: Number


class Formula(NamedTuple):
    """A value given by an expression: its text, and what the expression comes to."""

    text: str
    value: Number


class Symbol(NamedTuple):
    """A value written `?`: no number, only the element's own name."""


SYMBOL = Symbol()
Value = Number | Rectangular | Phasor | Ratio | Formula | Symbol

PREFIXES = {
    "f": -15, "p": -12, "n": -9, "u": -6, "µ": -6, "μ": -6, "m": -3,
    "": 0, "k": 3, "M": 6, "G": 9, "T": 12,
}  # fmt: skip
_PREFIX_OF = {
    -15: "f",
    -12: "p",
    -9: "n",
    -6: "u",
    -3: "m",
    0: "",
    3: "k",
    6: "M",
    9: "G",
    12: "T",
}

# Every spelling of a unit that is read; the first is the one that is written.
SPELLINGS: dict[str, tuple[str, ...]] = {
    "ohm": ("ohm", "Ω", "\u2126"),
    "S": ("S", "mho"),
    "H": ("H",),
    "F": ("F",),
    "V": ("V",),
    "A": ("A",),
    "W": ("W",),
    "Hz": ("Hz",),
    "rad/s": ("rad/s",),
    "s": ("s",),
    "": (),
}
UNIT_NAMES = {
    "ohm": "ohms", "S": "siemens", "H": "henries", "F": "farads", "V": "volts", "A": "amperes",
    "W": "watts", "Hz": "hertz", "rad/s": "radians a second", "s": "seconds", "": "no unit",
}  # fmt: skip


def unit_exponents(unit: str) -> dict[str, int]:
    """Every way to write `unit` with a prefix, and the power of ten it stands for."""
    return {
        prefix + spelling: power
        for prefix, power in PREFIXES.items()
        for spelling in SPELLINGS[unit]
    }


def split_unit(text: str) -> tuple[str, int] | None:
    """The SI unit and power of ten of a unit's text (`mohm` is ohm, -3), or None."""
    for unit, spellings in SPELLINGS.items():
        for spelling in spellings:
            if text.endswith(spelling) and text[: -len(spelling)] in PREFIXES:
                return unit, PREFIXES[text[: -len(spelling)]]
    return None


def scale(number: Number, power: int) -> Number:
    """An exact number times a power of ten, exactly."""
    if isinstance(number, Fraction):
        scaled: Number = number * Fraction(10) ** power
    else:
        scaled = number.scaleb(power, _WIDE)
    return as_rounded(scaled) if isinstance(number, Rounded) else scaled


def is_exact(value: object) -> bool:
    """Whether a number is one of the exact ones (`equations.exact`)."""
    return hasattr(value, "exact")


def exact(number: Fraction) -> Number:
    """A fraction as the decimal number that it is; the fraction itself where there is none."""
    rest, twos, fives = number.denominator, 0, 0
    while rest % 2 == 0:
        rest, twos = rest // 2, twos + 1
    while rest % 5 == 0:
        rest, fives = rest // 5, fives + 1
    if rest != 1 or max(twos, fives) > _MOST_PLACES:
        return number
    places = max(twos, fives)
    digits = number.numerator * 10**places // number.denominator
    return Decimal(digits).scaleb(-places, _WIDE)


def as_number(value: Value) -> float | complex:
    """The float (or complex, where the value is complex) nearest to an exact value."""
    if isinstance(value, Formula):
        return float(value.value)
    if isinstance(value, Rectangular):
        return complex(float(value.re), float(value.im))
    if isinstance(value, Phasor):
        return _polar(float(value.magnitude), value.angle, value.degrees)
    if isinstance(value, Ratio):
        return float(Fraction(value.first) / Fraction(value.second))
    if isinstance(value, Symbol):
        raise ValueError("a symbol has no number")
    return float(value)


def _polar(magnitude: float, angle: Number, degrees: bool) -> complex:
    """Magnitude and angle as a complex number; quarter turns are exact."""
    if not degrees:
        return cmath.rect(magnitude, float(angle))
    quarter, rest = divmod(Fraction(angle), 90)
    turn = (1, 1j, -1, -1j)[int(quarter) % 4]
    return turn * (magnitude if rest == 0 else cmath.rect(magnitude, math.radians(rest)))


def is_complex(value: Value | None) -> bool:
    """Whether a value is written as a complex number that is not real."""
    if isinstance(value, Rectangular):
        return value.im != 0
    return isinstance(value, Phasor)


def write_number(number: Number) -> str:
    """An exact number as a short text that reads back to the same one: `4700`, `8.0712e-6`."""
    if isinstance(number, Fraction):
        if number.denominator == 1:
            return str(number.numerator)
        return f"({number.numerator}/{number.denominator})"
    if number == 0:
        return "0"
    sign, digits, exponent = number.normalize(_WIDE).as_tuple()
    assert isinstance(exponent, int)
    text = "".join(map(str, digits))
    if 0 <= exponent <= 6:
        text += "0" * exponent
    elif -len(text) < exponent < 0:
        text = f"{text[:exponent]}.{text[exponent:]}"
    elif -len(text) - 5 < exponent <= -len(text):
        text = "0." + text.rjust(-exponent, "0")
    else:
        point = "." if len(text) > 1 else ""
        text = f"{text[0]}{point}{text[1:]}e{exponent + len(text) - 1}"
    return "-" + text if sign else text


def write_value(value: Value, unit: str) -> str:
    """A value with its unit as the language writes it: `4.7 kohm`, `120 V @ -30 deg`."""
    if isinstance(value, Symbol):
        return "?"
    if isinstance(value, Formula):
        return value.text
    if isinstance(value, Ratio):
        return f"{write_number(value.first)}:{write_number(value.second)}"
    if isinstance(value, Phasor):
        measure = "deg" if value.degrees else "rad"
        return f"{write_value(value.magnitude, unit)} @ {write_number(value.angle)} {measure}"
    if isinstance(value, Rectangular):
        im = write_number(value.im)
        text = f"{write_number(value.re)}{'' if im.startswith('-') else '+'}{im}j"
        return f"{text} {unit}".rstrip()
    if isinstance(value, Fraction) or not unit or value == 0:
        return f"{write_number(value)} {unit}".rstrip()
    power = min(12, max(-15, 3 * ((value.adjusted()) // 3)))
    return f"{write_number(value.scaleb(-power, _WIDE))} {_PREFIX_OF[power]}{unit}"


def engineering_power(magnitude: float) -> int:
    """The multiple of three that brings a magnitude into 1 … 1000 (within the prefixes)."""
    if magnitude == 0 or not math.isfinite(magnitude):
        return 0
    return min(12, max(-15, 3 * math.floor(round(math.log10(magnitude), 12) / 3)))


def prefix_of(power: int) -> str:
    """The SI prefix of a power of ten that is a multiple of three."""
    return _PREFIX_OF[power]


def say(value: complex, unit: str, digits: int = 5) -> str:
    """A quantity in a sentence: `-12.300 A`, or `8.5670 kA at -87.14 deg` where it is complex."""
    value = complex(value)
    size = float(f"{abs(value):.{digits - 1}e}")  # rounded first: not 1000.00 mV
    power = engineering_power(size) if unit else 0
    scaled = size / 10.0**power
    whole = math.floor(math.log10(scaled)) + 1 if scaled else 1
    number = (
        f"{scaled:.{max(0, digits - max(whole, 1))}f}"
        if 1e-4 <= scaled < 1e7 or not size
        else (f"{scaled:.{digits - 1}e}")
    )
    prefix, sign = prefix_of(power).replace("u", "µ"), unit.replace("ohm", "Ω")
    text = f"{number} {prefix}{sign}".rstrip()
    if value.imag == 0:
        return f"-{text}" if value.real < 0 else text
    return f"{text} at {math.degrees(cmath.phase(value)):.2f} deg"
