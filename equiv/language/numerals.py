"""A number and the unit written onto it: `4.7`, `4.7kohm`, `4k7`, `100n`, `5%`."""

from __future__ import annotations

import re
from decimal import Context, Decimal
from typing import NamedTuple

from equiv.language.limits import MOST_DIGITS, MOST_EXPONENT
from equiv.language.mistakes import Mistake
from equiv.units import PREFIXES, SPELLINGS, Number, scale

EXACT = Context(prec=10_000, Emax=999_999, Emin=-999_999)
"""Decimal arithmetic that rounds no number within the limits."""

NUMBER = re.compile(r"[+-]?(?:[0-9]+(?:\.[0-9]*)?|\.[0-9]+)(?:[eE][+-]?[0-9]+)?")
UNITS: dict[str, tuple[str, int]] = {
    prefix + spelling: (unit, power)
    for unit, spellings in SPELLINGS.items()
    for spelling in spellings
    for prefix, power in PREFIXES.items()
}
"""The SI unit and power of ten of every way to write a unit."""

_LETTER_CODE = re.compile(r"([+-]?[0-9]*)([RfpnuµμmkMGT])([0-9]*)(\D.*)?")
_RESISTANCE_CODE = re.compile(r"R[0-9]+")
_LONGEST_EXPONENT = 5


class Numeral(NamedTuple):
    """A number in SI units; the unit is None where none is written."""

    number: Number
    unit: str | None = None
    open: str = "nothing"
    """What unit may follow as a further word: `any`, a `plain` one without prefix, or `nothing`."""

    def takes(self, word: str) -> bool:
        """Whether the next word is this number's unit."""
        if self.open == "nothing" or word not in UNITS:
            return False
        unit, power = UNITS[word]
        return self.open == "any" or (power == 0 and self.unit in (None, unit))


def bounded(number: Number, place: tuple[int, int], most: int = MOST_EXPONENT) -> Number:
    """The number, which must be zero or of a size that can be calculated with."""
    if isinstance(number, Decimal):
        size = number.adjusted() if number else 0
    else:
        size = len(str(abs(number.numerator))) - len(str(number.denominator))
    if not -most <= size <= most:
        raise Mistake("number-out-of-range", f"the number is outside 1e-{most} to 1e{most}", place)
    return number


def decimal(text: str, place: tuple[int, int]) -> Decimal:
    """A number's text as the exact number."""
    mantissa, _, exponent = text.replace("E", "e").partition("e")
    if len(mantissa) > MOST_DIGITS:
        raise Mistake("too-many-digits", f"a number has at most {MOST_DIGITS} digits", place)
    if len(exponent.lstrip("+-0")) > _LONGEST_EXPONENT:
        raise Mistake("number-out-of-range", f"the exponent {exponent} is out of range", place)
    return Decimal(text)


def numeral(text: str, at: int) -> Numeral | None:
    """A number with what is written onto it; None if the text is nothing of the kind."""
    match = NUMBER.match(text)
    if match is None:
        return _letter_code(text, at) if _RESISTANCE_CODE.fullmatch(text) else None
    digits, onto = match.group(), text[match.end() :]
    if not onto:
        return Numeral(decimal(digits, (at, len(text))), None, "any")
    if onto in UNITS:
        unit, power = UNITS[onto]
        return Numeral(scale(decimal(digits, (at, len(text))), power), unit)
    if onto in PREFIXES:
        return Numeral(scale(decimal(digits, (at, len(text))), PREFIXES[onto]), None, "plain")
    if onto == "%":
        return Numeral(scale(decimal(digits, (at, len(text))), -2), "")
    return _letter_code(text, at)


def _letter_code(text: str, at: int) -> Numeral | None:
    """The code of IEC 60062, where a letter stands for the decimal point."""
    match = _LETTER_CODE.fullmatch(text)
    if match is None:
        return None
    whole, letter, part, onto = match.groups()
    if not (whole.strip("+-") or (letter == "R" and part)):
        return None
    number: Number = decimal(f"{whole}.{part}" if part else whole, (at, len(text)))
    number = scale(number, PREFIXES.get(letter, 0))
    unit = "ohm" if letter == "R" else None
    if onto:
        written, power = UNITS.get(onto, ("", 1))
        if power or (unit and unit != written):
            return None
        unit = written
    return Numeral(number, unit, "nothing" if onto else "plain")
