"""The preferred numbers of IEC 60063.

Sources: IEC 60063; the E24 list with its exceptions 27 30 33 36 39 43 47 82 and the E48 and E96
tables read at qsl.net/g4usp, 9.20 against 9.19 on a discussion page (printed values were read).
"""

import math

import pytest

from equiv.analyses.preferred import SERIES, TOLERANCES, neighbours, preferred_numbers

E24 = [10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30,
       33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91]  # fmt: skip
E48 = [100, 105, 110, 115, 121, 127, 133, 140, 147, 154, 162, 169, 178, 187, 196, 205,
       215, 226, 237, 249, 261, 274, 287, 301, 316, 332, 348, 365, 383, 402, 422, 442,
       464, 487, 511, 536, 562, 590, 619, 649, 681, 715, 750, 787, 825, 866, 909, 953]  # fmt: skip


def test_e24_and_the_series_within_it() -> None:
    assert list(preferred_numbers("E24")) == E24
    assert list(preferred_numbers("E12")) == [10, 12, 15, 18, 22, 27, 33, 39, 47, 56, 68, 82]
    assert list(preferred_numbers("E6")) == [10, 15, 22, 33, 47, 68]
    assert list(preferred_numbers("E3")) == [10, 22, 47]


def test_the_eight_exceptions_of_e24() -> None:
    formula = [round(10 * 10 ** (i / 24)) for i in range(24)]
    differ = [(a, b) for a, b in zip(preferred_numbers("E24"), formula, strict=True) if a != b]
    assert differ == [
        (27, 26),
        (30, 29),
        (33, 32),
        (36, 35),
        (39, 38),
        (43, 42),
        (47, 46),
        (82, 83),
    ]


def test_e48_e96_and_e192() -> None:
    e96, e192 = preferred_numbers("E96"), preferred_numbers("E192")
    assert list(preferred_numbers("E48")) == E48
    assert len(e96) == 96 and e96[5] == 113 and 920 not in e96
    assert len(e192) == 192 and e192[185] == 920 and 919 not in e192
    assert round(100 * 10 ** (185 / 192)) == 919
    assert [number for number in e192 if number in e96] == list(e96)
    assert e192[-8:] == (909, 920, 931, 942, 953, 965, 976, 988)


@pytest.mark.parametrize("series", SERIES)
def test_neighbours_lie_next_to_the_value(series) -> None:
    numbers = preferred_numbers(series)
    assert len(numbers) == int(series[1:])
    assert 0 < TOLERANCES[series] < 1
    for value in (9.99e-13, 1.0e-12 * (1 + 1e-6), 3.14e-9, 0.0999, 9.96, 997.0, 1.001e6):
        low, high = neighbours(value, series)
        assert low < value < high
        decade = 10.0 ** math.floor(math.log10(low) + 1e-9) / (10 if numbers[0] == 10 else 100)
        assert round(low / decade, 9) in numbers
        ratio = 10 ** (1 / len(numbers))
        assert high / low < ratio * 1.2


def test_a_preferred_value_has_only_itself() -> None:
    assert neighbours(4.7e-9, "E12") == (4.7e-9,)
    assert neighbours(4.7e-9, "E96") == (4.64e-9, 4.75e-9)
    assert neighbours(9.2, "E192") == (9.2,)
    assert neighbours(9.3, "E24") == (9.1, 10.0)
