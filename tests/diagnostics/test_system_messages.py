"""Every error code of three-phase files: what brings it about, and the whole of what is said."""

import ast
from pathlib import Path

import pytest
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
    found = set()
    beside = [PACKAGE.parent / f"{name}.py" for name in ("loops", "ratios", "loading")]
    for path in (*PACKAGE.glob("*.py"), *(PACKAGE.parent / "kinds").glob("*.py"), *beside):
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.Call) and getattr(node.func, "id", "") in (
                "Mistake",
                "Diagnostic",
                "Problem",
            ):
                first = node.args[0]
                if isinstance(first, ast.Constant):
                    found.add(str(first.value))
    return found
