"""Every error code of three-phase files: what brings it about, and the whole of what is said."""

from pathlib import Path

import pytest
from diagnostics.codes import codes_in
from diagnostics.systems import CASES, SMALLER_LIMITS, message, names

import equiv.threephase.language

PACKAGE = Path(equiv.threephase.language.__file__).parent


@pytest.mark.parametrize("code", names())
def test_message(code: str, monkeypatch: pytest.MonkeyPatch) -> None:
    if code in SMALLER_LIMITS:
        limit, value = SMALLER_LIMITS[code]
        monkeypatch.setattr(f"equiv.threephase.language.{limit}", value)
    said = message(code)
    assert f"error[{code}]: " in said
    assert said == (CASES / f"{code}.txt").read_text(encoding="utf-8")


def test_every_code_has_a_case() -> None:
    assert _codes() <= set(names())


def test_every_case_has_its_message() -> None:
    assert {path.stem for path in CASES.glob("*.txt")} == set(names())


def _codes() -> set[str]:
    """The codes that are written where three-phase files are read."""
    beside = [PACKAGE.parent / f"{name}.py" for name in ("loops", "ratios", "loading")]
    return codes_in((*PACKAGE.glob("*.py"), *(PACKAGE.parent / "kinds").glob("*.py"), *beside))
