"""Kinds of result that are not given together."""

from __future__ import annotations

from equiv.errors import Diagnostic, UsageError


def require_plain(**options: bool) -> None:
    """Complain of options that formulas do not have."""
    for name, given in options.items():
        if given:
            raise UsageError(
                Diagnostic(
                    "not-with-formulas",
                    f"--{name} and --symbolic ask for two kinds of result",
                    hint="give one of them",
                )
            )
