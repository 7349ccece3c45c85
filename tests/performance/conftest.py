"""Collects the measured figures, and writes docs/performance.md when all were measured."""

import os
import platform
from collections.abc import Callable, Iterator
from importlib.metadata import version
from pathlib import Path

import pytest

ROWS: list[tuple[str, str, str, str]] = []
ALL = 26
PAGE = Path(__file__).resolve().parents[2] / "docs" / "performance.md"


@pytest.fixture
def report() -> Callable[[str, str, str, str], None]:
    """Adds a row: what was measured, the target, the figure, and what it is made of."""
    return lambda *row: ROWS.append(row)


@pytest.fixture(scope="session", autouse=True)
def page() -> Iterator[None]:
    """Writes the page at the end of a full run."""
    yield
    if len(ROWS) < ALL:
        return
    lines = [
        "# Performance", "",
        "Ratios of times taken in one run, by `python -m pytest -m performance tests/performance`,",
        "which writes this page. Each time is the shortest of several.", "",
        f"Measured with Python {platform.python_version()}, numpy {version('numpy')}, "
        f"scipy {version('scipy')}, on {os.cpu_count()} cores ({platform.machine()}).", "",
        "| what | target | measured | made of |", "| --- | --- | --- | --- |",
        *(f"| {' | '.join(row)} |" for row in ROWS), "",
    ]  # fmt: skip
    PAGE.write_text("\n".join(lines), encoding="utf-8")
