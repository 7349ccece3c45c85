"""The library behind the commands, replaced by something that answers at once."""

import pytest
from unit.cli.made import NETWORK, Library

import equiv


@pytest.fixture
def library(monkeypatch: pytest.MonkeyPatch) -> Library:
    made = Library()
    for name in ("load", "parse"):
        monkeypatch.setitem(vars(equiv), name, made.function(name, NETWORK))
    for name in (
        "check", "fault", "solve", "superpose", "isolate", "port", "kinds", "sample",
    ):  # fmt: skip
        monkeypatch.setitem(vars(equiv), name, made.function(name))
    return made
