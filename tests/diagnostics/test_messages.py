"""Every error code of the language: what brings it about, and the whole of what is said."""

from pathlib import Path

import pytest
from diagnostics.cases import CASES, SMALLER_LIMITS, message, names
from diagnostics.codes import codes_in

import equiv.language


@pytest.mark.parametrize("code", names())
def test_message(code: str, monkeypatch: pytest.MonkeyPatch) -> None:
    if code in SMALLER_LIMITS:
        limit, value = SMALLER_LIMITS[code]
        monkeypatch.setattr(f"equiv.language.{limit}", value)
    said = message(code)
    assert f"error[{code}]: " in said
    assert said == (CASES / f"{code}.txt").read_text(encoding="utf-8")


def test_every_code_has_a_case() -> None:
    assert _codes() == set(names())


def test_every_case_has_its_message() -> None:
    assert {path.stem for path in CASES.glob("*.txt")} == set(names())


def _codes() -> set[str]:
    """The codes that are written anywhere in the package."""
    return codes_in(Path(equiv.language.__file__).parent.glob("*.py"))
