"""The preferred numbers of IEC 60063, and the two of them on either side of a value.

Source: IEC 60063:2015, Preferred number series for resistors and capacitors: E24 and below are
10^(i/24) to two digits but for eight historical values, E48 to E192 are 10^(i/N) to three digits
but for 920 in E192 alone (the formula gives 919). The tolerances that go with the series are
those of the same standard (from memory).
"""

from __future__ import annotations

import math
from decimal import Decimal
from functools import cache
from typing import Literal, get_args

Series = Literal["E3", "E6", "E12", "E24", "E48", "E96", "E192"]
SERIES: tuple[Series, ...] = get_args(Series)

TOLERANCES: dict[Series, float] = {
    "E3": 0.4, "E6": 0.2, "E12": 0.1, "E24": 0.05, "E48": 0.02, "E96": 0.01, "E192": 0.005,
}  # fmt: skip
"""The tolerance that is usual for parts of each series."""

_E24_EXCEPTIONS = {26: 27, 29: 30, 32: 33, 35: 36, 38: 39, 42: 43, 46: 47, 83: 82}
_E192_EXCEPTIONS = {919: 920}
_SAME = 1e-9


@cache
def preferred_numbers(series: Series) -> tuple[int, ...]:
    """The numbers of a series over one decade: 10 to 99 up to E24, 100 to 999 above."""
    count = int(series[1:])
    if count <= 24:
        plain = (round(10 * 10 ** (i / 24)) for i in range(0, 24, 24 // count))
        return tuple(_E24_EXCEPTIONS.get(number, number) for number in plain)
    plain = (round(100 * 10 ** (i / count)) for i in range(count))
    exceptions = _E192_EXCEPTIONS if series == "E192" else {}
    return tuple(exceptions.get(number, number) for number in plain)


def neighbours(value: float, series: Series) -> tuple[float, ...]:
    """The preferred values next below and above a positive value; the value alone if it is one."""
    numbers = preferred_numbers(series)
    decade = math.floor(math.log10(value)) - (1 if numbers[0] == 10 else 2)
    around = [
        float(Decimal(number).scaleb(decade + step)) for step in (-1, 0, 1) for number in numbers
    ]
    same = [near for near in around if abs(near - value) <= _SAME * value]
    if same:
        return (same[0],)
    return max(n for n in around if n < value), min(n for n in around if n > value)
