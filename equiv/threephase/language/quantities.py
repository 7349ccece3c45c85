"""Values with the units of power systems, read from a statement's words."""

from __future__ import annotations

import re
from decimal import Decimal
from fractions import Fraction
from functools import lru_cache
from typing import NamedTuple

from equiv.errors import nearest
from equiv.language.amounts import Amount, Later, Written, read_amount, read_angle
from equiv.language.dimensions import DIMENSIONS, POWERS, dimension_of
from equiv.language.mistakes import Mistake
from equiv.language.numerals import NUMBER, UNITS, bounded
from equiv.language.scope import Scope
from equiv.language.words import Words
from equiv.threephase.entered import Entered
from equiv.units import (
    PREFIXES,
    UNIT_NAMES,
    Formula,
    Phasor,
    Ratio,
    Rectangular,
    Symbol,
    Value,
    scale,
)

POWER_UNITS: dict[str, tuple[str, int]] = {
    **{f"{prefix}{unit}": (unit, power) for unit in ("VA", "var") for prefix, power in PREFIXES.items()},
    **{f"{prefix}{spelling}": (unit, power)
       for unit, spellings in {"ohm/km": ("ohm/km", "Ω/km"), "S/km": ("S/km",)}.items()
       for spelling in spellings for prefix, power in PREFIXES.items()},
    "m": ("m", 0), "km": ("m", 3), "pu": ("pu", 0), "%": ("%", -2),
}  # fmt: skip
"""The unit and power of ten of every way to write the units that networks do not have."""

MOST_EXPONENT = 30
"""Values lie between 1e-30 and 1e30 in SI units, or are zero: their squares can be calculated with."""

_AT_FREQUENCY = {
    "F": "write ωC in uS/km: 1 uF/km is 314 uS/km at 50 Hz, 377 uS/km at 60 Hz",
    "H": "write ωL in ohm/km: 1 mH/km is 0.314 ohm/km at 50 Hz, 0.377 ohm/km at 60 Hz",
}
"""What stands for capacitance and inductance, which are given as they are at the frequency."""

_ONTO = re.compile(
    r"(?<=[0-9.j)])(?:[fpnuµμmkMGT]?(?:VA|var|(?:ohm|Ω|S)/km)|km|pu|(?<=\))%|(?<=j)%)$"
)
_METRES = re.compile(r"(?<=[0-9.)])m$")
_SIMPLE = re.compile(r"([+-]?[0-9]{1,15}(?:\.[0-9]{1,15})?)(%?)")
ALL_UNITS = frozenset((*UNITS, *POWER_UNITS))
"""Every way to write a unit."""
NAMES = {
    **UNIT_NAMES, "VA": "volt-amperes", "var": "vars", "ohm/km": "ohm/km", "S/km": "S/km", "m": "km",
    "pu": "per unit", "%": "per cent", "": "a bare number",
}  # fmt: skip
EXAMPLES = {
    "VA": "5 MVA", "W": "800 kW", "var": "2 Mvar", "V": "11 kV", "A": "1.2 kA", "ohm": "9 ohm",
    "ohm/km": "0.12+0.1j ohm/km", "S/km": "80 uS/km", "S": "40 uS", "m": "0.8 km", "%": "8%",
    "pu": "1.02 pu", "": "12",
}  # fmt: skip


class Wanted(NamedTuple):
    """What a value must be: its units, whether it may be complex, and its bounds."""

    name: str
    units: tuple[str, ...]
    complex: bool = False
    bounds: str = "positive"


class LaterEntered(NamedTuple):
    """A value that is known when the parameters are."""

    later: Later
    unit: str | None
    power: int
    wanted: Wanted
    place: tuple[int, int]
    text: str

    def evaluate(self, scope: Scope) -> Entered:
        """The value, fitted to its place."""
        amount = self.later.evaluate(scope)
        if self.unit is not None:
            amount = _with_unit(amount, self.unit, self.power, self.text, self.place)
        return _fitted(amount, self.wanted, self.place, self.text)


def read_power_amount(words: Words) -> Written:
    """A parameter's value: the units of networks, and those of powers."""
    start = words.taken
    _split(words, ("VA", "var"))
    written = read_amount(words)
    unit = words.peek()
    if unit not in POWER_UNITS or not isinstance(written, Amount) or written.unit is not None:
        return written
    words.take("a unit")
    name, power = POWER_UNITS[unit]
    place = words.stretch(start)
    if name not in (*DIMENSIONS, *POWERS, "%", "pu"):
        raise Mistake(
            "wrong-unit",
            f"a parameter cannot be in {unit}",
            place,
            hint=f"give the number alone, and write the unit where it is used: (NAME) {unit}",
        )
    amount = _with_unit(written, name, power, words.written(place), place)
    return amount._replace(unit="" if name in ("%", "pu") else name)


def read_entered(words: Words, wanted: Wanted) -> Entered | LaterEntered:
    """The value that stands next, in one of the units that are wanted there."""
    text, unit_text = words.peek(), words.peek(1)
    if unit_text not in ALL_UNITS:
        unit_text = ""
    simple = _simple(text, unit_text, wanted)
    if simple is not None and words.peek(2 if unit_text else 1) not in ("@", "∠"):
        words.taken += 2 if unit_text else 1
        return simple
    return _with_care(words, wanted)


@lru_cache(maxsize=4096)
def _simple(text: str, unit_text: str, wanted: Wanted) -> Entered | None:
    """A plain real number with its unit; None where there is more to it, or something is wrong.

    There are very many of them, and the same ones again and again.
    """
    match = _SIMPLE.fullmatch(text)
    if match is None or (match[2] and unit_text):
        return None
    number = Decimal(match[1])
    amount = Amount(scale(number, -2), "") if match[2] else Amount(number)
    try:
        if unit_text in POWER_UNITS:
            amount = _with_unit(amount, *POWER_UNITS[unit_text], text, (0, 0))
        elif unit_text:
            unit, power = UNITS[unit_text]
            amount = Amount(scale(number, power), unit)
        return _fitted(amount, wanted, (0, 0), text)
    except Mistake:
        return None


def _with_care(words: Words, wanted: Wanted) -> Entered | LaterEntered:
    """A value of any form."""
    start = words.taken
    _split(words, wanted.units)
    written = read_amount(words, f"{wanted.name}, as in {EXAMPLES[wanted.units[0]]}")
    unit, power = None, 0
    if (text := words.peek()) in POWER_UNITS:
        words.take("a unit")
        unit, power = POWER_UNITS[text]
    place = words.stretch(start)
    if words.peek() in ("@", "∠"):
        if unit is not None:
            written = _scaled(written, unit, power, words.written(place), place)
            unit = None
        written = read_angle(words, written, place)
        place = words.stretch(start)
    text = words.written(place)
    _require_no_other_unit(words, written, unit, wanted)
    if isinstance(written, Later):
        return LaterEntered(written, unit, power, wanted, place, text)
    if unit is not None:
        written = _with_unit(written, unit, power, text, place)
    return _fitted(written, wanted, place, text)


def _require_no_other_unit(
    words: Words, written: Written, unit: str | None, wanted: Wanted
) -> None:
    """What stands behind a number without a unit must not be a misspelt unit."""
    bare = isinstance(written, Amount) and written.unit is None and unit is None
    if bare and "" not in wanted.units and words.peek():
        word = words.next
        if word.text[0] in "+-":
            hint = "a complex number is written without blanks: 0.12+0.1j"
            message = f"did not expect {word.text} behind {wanted.name}"
            raise Mistake("extra-word", message, word.place, hint=hint)
        _require_unit(word.text, word.place)


def _require_unit(text: str, place: tuple[int, int]) -> None:
    """A word that is nearly a unit must be one."""
    if text in ALL_UNITS:
        return
    if text.endswith(("F/km", "H/km")):
        raise Mistake("unknown-unit", f"{text} is not a unit", place, hint=_AT_FREQUENCY[text[-4]])
    same = [unit for unit in (*UNITS, *POWER_UNITS) if unit.casefold() == text.casefold()]
    usual = next((unit for unit in same if unit[0] in "kM"), same[0]) if same else None
    near = f"did you mean {usual}?" if usual else nearest(text, ALL_UNITS)
    if near:
        raise Mistake("unknown-unit", f"{text} is not a unit", place, hint=near)


def _split(words: Words, units: tuple[str, ...]) -> None:
    """Take a unit of power systems off the number that it is written onto."""
    text = words.peek()
    number = NUMBER.match(text)
    if number and (onto := text[number.end() :]).removesuffix("/km").isalpha() and len(onto) > 1:
        _require_unit(onto, (words.next.at + number.end(), len(onto)))
    match = _ONTO.search(text) or (_METRES.search(text) if "m" in units else None)
    if match:
        words.split(match.start())


def _scaled(written: Written, unit: str, power: int, text: str, place: tuple[int, int]) -> Written:
    if isinstance(written, Later):
        return Later(lambda scope: _with_unit(written.evaluate(scope), unit, power, text, place))
    return _with_unit(written, unit, power, text, place)


def _with_unit(amount: Amount, unit: str, power: int, text: str, place: tuple[int, int]) -> Amount:
    """An amount with the unit that stands behind it."""
    value, found = amount
    if found:
        known = unit in DIMENSIONS or unit in POWERS
        if power or not known or dimension_of(found) != dimension_of(unit):
            raise Mistake("wrong-unit", f"{text} has two units", place)
        return Amount(Formula(text, value.value) if isinstance(value, Formula) else value, unit)
    scaled: Value
    if isinstance(value, Formula):
        scaled = Formula(text, bounded(scale(value.value, power), place))
    elif isinstance(value, Rectangular):
        re, im = (bounded(scale(part, power), place) for part in value)
        scaled = Rectangular(re, im)
    elif isinstance(value, Ratio | Phasor | Symbol):
        raise Mistake("wrong-value", f"found {text}, expected a number with a unit", place)
    else:
        scaled = bounded(scale(value, power), place)
    return Amount(scaled, unit)


def _fitted(amount: Amount, wanted: Wanted, place: tuple[int, int], text: str) -> Entered:
    """The value of an amount, which must be what is wanted."""
    value, found = amount
    if isinstance(value, Ratio | Symbol):
        raise Mistake("wrong-value", f"found {text}, expected {_units_words(wanted)}", place)
    unit = "" if found is None else found or "%"
    if unit == "W" and text.endswith(")") and {"W", "VA"} <= set(wanted.units):
        raise Mistake(
            "which-power",
            f"{text} may be in W or in VA",
            place,
            hint="write the unit behind the parenthesis: (…) W, or (…) VA",
        )
    if unit == "W" and "W" not in wanted.units and isinstance(value, Formula):
        unit = next((u for u in ("VA", "var") if u in wanted.units), unit)
    if unit == "%" and "%" not in wanted.units and "" in wanted.units:
        unit = ""
    if unit == "" and "" not in wanted.units:
        raise Mistake(
            "missing-unit",
            f"{text} has no unit; expected {_units_words(wanted)}",
            place,
            hint=f"as in: {EXAMPLES[wanted.units[0]]}",
        )
    if unit not in wanted.units:
        said = "" if text.endswith(unit) else f" in {NAMES.get(unit, unit)}"
        hint = _AT_FREQUENCY.get(unit) if any(u.endswith("/km") for u in wanted.units) else None
        message = f"found {text}{said}, expected {_units_words(wanted)}"
        raise Mistake("wrong-unit", message, place, hint=hint)
    _require_bounds(value, wanted, place, text)
    return Entered(value, unit)


def _units_words(wanted: Wanted) -> str:
    *rest, last = (NAMES.get(unit, unit) for unit in wanted.units)
    return f"{', '.join(rest)} or {last}" if rest else last


def _require_bounds(value: Value, wanted: Wanted, place: tuple[int, int], text: str) -> None:
    """The value must lie where such values can."""
    if isinstance(value, Rectangular | Phasor):
        if not wanted.complex:
            raise Mistake(
                "needs-real", f"found {text}, which is complex; expected a real number", place
            )
        for part in value[:2] if isinstance(value, Rectangular) else value[:1]:
            bounded(part, place, MOST_EXPONENT)
        size = value.re if isinstance(value, Rectangular) else value.magnitude
        if size < 0 or (isinstance(value, Rectangular) and not any(value)):
            message = f"found {text}; a resistance is not negative, and an impedance not zero"
            raise Mistake("out-of-range", message, place)
        return
    assert not isinstance(value, Ratio | Symbol)
    number = value.value if isinstance(value, Formula) else value
    assert isinstance(number, Decimal | Fraction)
    bounded(number, place, MOST_EXPONENT)
    allowed = {
        "positive": number > 0, "not negative": number >= 0, "up to one": 0 < number <= 1,
        "any": True,
    }[wanted.bounds]  # fmt: skip
    if not allowed:
        words = {"up to one": "over zero and at most one (100 %)"}.get(wanted.bounds, wanted.bounds)
        raise Mistake("out-of-range", f"found {text}; {wanted.name} is {words}", place)
