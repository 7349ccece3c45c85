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


def require_symbolic(**options: bool) -> None:
    """Complain of options that only formulas have, where none are asked for."""
    for name, given in options.items():
        if given:
            option = f"--{name.replace('_', '-')}"
            raise UsageError(
                Diagnostic(
                    "only-with-formulas",
                    f"{option} is about formulas, and none are asked for",
                    hint=f"give --symbolic too, or leave {option} out",
                )
            )
