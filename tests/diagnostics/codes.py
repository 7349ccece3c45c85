"""The error codes that are written in some modules."""

from __future__ import annotations

import ast
from collections.abc import Iterable
from pathlib import Path

_ERRORS = ("Mistake", "Diagnostic", "Problem")


def codes_in(modules: Iterable[Path]) -> set[str]:
    """The first arguments of errors, where they are written out."""
    found = set()
    for path in modules:
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.Call) and getattr(node.func, "id", "") in _ERRORS:
                first = node.args[0]
                if isinstance(first, ast.Constant):
                    found.add(str(first.value))
    return found
