"""Published values, from `published.toml`: each case names its source."""

import tomllib
from pathlib import Path
from typing import Any

import pytest

import equiv

CASES = tomllib.loads(Path(__file__).with_name("published.toml").read_text(encoding="utf-8"))[
    "case"
]


def half_last_digit(printed: str) -> float:
    """Half of the last digit of a number as it was printed."""
    mantissa, _, exponent = printed.partition("e")
    decimals = len(mantissa.partition(".")[2])
    return 0.5 * 10.0 ** (int(exponent or 0) - decimals) * (1 + 1e-9)


def found(network: equiv.Network, expect: dict[str, Any]) -> complex:
    what, target = expect["what"], expect["target"]
    if what in ("total", "magnitude", "term", "power"):
        result = equiv.superpose(network, target)
        assert result.exit_status == 0, result.checks
        at = result.quantities[0].frequencies[0]
        if what == "term":
            return next(t.number for t in at.terms if t.source == expect["source"])
        return {"total": at.total, "magnitude": abs(at.total), "power": at.total.real}[what]
    result = equiv.port(network, target)
    assert all(check.passed for check in result.checks), result.checks
    equivalent = result.first
    if what == "impedance":
        return complex(equivalent.impedance[0, 0])
    vector = equivalent.open_voltage if what == "voltage" else equivalent.short_current
    return complex(vector[0])


@pytest.mark.parametrize("case", CASES, ids=[case["id"] for case in CASES])
def test_published_value(case: dict[str, Any]) -> None:
    network = equiv.parse(case["network"])
    for expect in case["expect"]:
        value = found(network, expect)
        printed = expect["value"] if isinstance(expect["value"], list) else [expect["value"]]
        parts = [value.real, value.imag] if len(printed) == 2 else [complex(value).real]
        for part, text in zip(parts, printed, strict=True):
            limit = max(half_last_digit(text), expect.get("rtol", 0) * abs(float(text)))
            assert part == pytest.approx(float(text), abs=limit), (case["source"], expect)
