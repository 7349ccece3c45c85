"""Writes every case's message anew. Read the difference before believing it."""

from diagnostics.cases import CASES, SMALLER_LIMITS, message, names
from pytest import MonkeyPatch

if __name__ == "__main__":
    for name in names():
        with MonkeyPatch.context() as patch:
            if name in SMALLER_LIMITS:
                limit, value = SMALLER_LIMITS[name]
                patch.setattr(f"equiv.language.{limit}", value)
            (CASES / f"{name}.txt").write_text(message(name), encoding="utf-8")
